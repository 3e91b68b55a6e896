// SPDX-License-Identifier: MIT
#include "core/base/units.hpp"

#include <array>
#include <cmath>
#include <cstdio>
#include <limits>

namespace headband::base {
namespace {

// Exact definitions: international yard and pound 1959 (in, ft, lb), standard gravity 9.80665 m/s2 (CGPM 1901),
// US liquid gallon 231 in3, barrel 42 gallons, imperial gallon 4.546 09 L (UK Weights and Measures Act 1985).
constexpr double inch = 0.0254;
constexpr double foot = 0.3048;
constexpr double pound = 0.45359237;
constexpr double standard_gravity = 9.80665;
constexpr double us_gallon = 3.785411784e-3;
constexpr double imperial_gallon = 4.54609e-3;
constexpr double barrel = 0.158987294928;
constexpr double cubic_foot = 0.028316846592;
constexpr double square_foot = 0.09290304;
constexpr double square_inch = 6.4516e-4;
constexpr double psi = pound * standard_gravity / square_inch;
constexpr double metre_of_water = 9806.65;  // conventional: 1000 kg/m3, standard gravity
constexpr double foot_of_water = foot * metre_of_water;
constexpr double julian_year = 31557600.0;        // 365.25 days
constexpr double turn = 6.283185307179586476925;  // rad

using enum UnitKind;

constexpr std::array units{
    Unit{"%", share, 1, 100, 0, "1/100"},
    Unit{"percent", share, 1, 100, 0, "1/100"},
    Unit{"ppm", share, 1, 1e6, 0, "1e-6"},
    // lengths
    Unit{"m", length, 1, 1, 0, "SI"},
    Unit{"mm", length, 1, 1000, 0, "SI"},
    Unit{"cm", length, 1, 100, 0, "SI"},
    Unit{"um", length, 1, 1e6, 0, "SI"},
    Unit{"km", length, 1000, 1, 0, "SI"},
    Unit{"in", length, inch, 1, 0, "0.0254 m"},
    Unit{"inch", length, inch, 1, 0, "0.0254 m"},
    Unit{"ft", length, foot, 1, 0, "0.3048 m"},
    Unit{"yd", length, 0.9144, 1, 0, "0.9144 m"},
    Unit{"mile", length, 1609.344, 1, 0, "5280 ft"},
    Unit{"miles", length, 1609.344, 1, 0, "5280 ft"},
    // areas
    Unit{"m2", area, 1, 1, 0, "SI"},
    Unit{"cm2", area, 1, 1e4, 0, "SI"},
    Unit{"mm2", area, 1, 1e6, 0, "SI"},
    Unit{"in2", area, square_inch, 1, 0, "0.0254^2 m2"},
    Unit{"ft2", area, square_foot, 1, 0, "0.3048^2 m2"},
    // volumes
    Unit{"m3", volume, 1, 1, 0, "SI"},
    Unit{"L", volume, 1, 1000, 0, "1 dm3"},
    Unit{"l", volume, 1, 1000, 0, "1 dm3"},
    Unit{"litre", volume, 1, 1000, 0, "1 dm3"},
    Unit{"cm3", volume, 1, 1e6, 0, "SI"},
    Unit{"ft3", volume, cubic_foot, 1, 0, "0.3048^3 m3"},
    Unit{"in3", volume, inch* inch* inch, 1, 0, "0.0254^3 m3"},
    Unit{"US gal", volume, us_gallon, 1, 0, "231 in3"},
    Unit{"imp gal", volume, imperial_gallon, 1, 0, "4.54609 L"},
    Unit{"bbl", volume, barrel, 1, 0, "42 US gal"},
    // times
    Unit{"s", time, 1, 1, 0, "SI"},
    Unit{"sec", time, 1, 1, 0, "SI"},
    Unit{"ms", time, 1, 1000, 0, "SI"},
    Unit{"min", time, 60, 1, 0, "60 s"},
    Unit{"minutes", time, 60, 1, 0, "60 s"},
    Unit{"minute", time, 60, 1, 0, "60 s"},
    Unit{"h", time, 3600, 1, 0, "3600 s"},
    Unit{"hour", time, 3600, 1, 0, "3600 s"},
    Unit{"hours", time, 3600, 1, 0, "3600 s"},
    Unit{"d", time, 86400, 1, 0, "86400 s"},
    Unit{"day", time, 86400, 1, 0, "86400 s"},
    Unit{"days", time, 86400, 1, 0, "86400 s"},
    Unit{"year", time, julian_year, 1, 0, "365.25 d"},
    Unit{"years", time, julian_year, 1, 0, "365.25 d"},
    // velocities
    Unit{"m/s", velocity, 1, 1, 0, "SI"},
    Unit{"mm/s", velocity, 1, 1000, 0, "SI"},
    Unit{"km/s", velocity, 1000, 1, 0, "SI"},
    Unit{"km/h", velocity, 1000, 3600, 0, "1000 m/3600 s"},
    Unit{"ft/s", velocity, foot, 1, 0, "0.3048 m/s"},
    Unit{"ft/min", velocity, foot, 60, 0, "0.3048 m/60 s"},
    // flows
    Unit{"m3/s", flow, 1, 1, 0, "SI"},
    Unit{"m3/h", flow, 1, 3600, 0, "1 m3/3600 s"},
    Unit{"m3/d", flow, 1, 86400, 0, "1 m3/86400 s"},
    Unit{"m3/day", flow, 1, 86400, 0, "1 m3/86400 s"},
    Unit{"m3/min", flow, 1, 60, 0, "1 m3/60 s"},
    Unit{"L/s", flow, 1, 1000, 0, "1 dm3/s"},
    Unit{"l/s", flow, 1, 1000, 0, "1 dm3/s"},
    Unit{"L/min", flow, 1, 60000, 0, "1 dm3/60 s"},
    Unit{"l/min", flow, 1, 60000, 0, "1 dm3/60 s"},
    Unit{"L/h", flow, 1, 3.6e6, 0, "1 dm3/3600 s"},
    Unit{"l/h", flow, 1, 3.6e6, 0, "1 dm3/3600 s"},
    Unit{"ML/d", flow, 1000, 86400, 0, "1000 m3/86400 s"},
    Unit{"gpm", flow, us_gallon, 60, 0, "231 in3/min"},
    Unit{"US gpm", flow, us_gallon, 60, 0, "231 in3/min"},
    Unit{"US gal/min", flow, us_gallon, 60, 0, "231 in3/min"},
    Unit{"imp gpm", flow, imperial_gallon, 60, 0, "4.54609 L/min"},
    Unit{"imp gal/min", flow, imperial_gallon, 60, 0, "4.54609 L/min"},
    Unit{"MGD", flow, us_gallon * 1e6, 86400, 0, "1e6 US gal/d"},
    Unit{"imp MGD", flow, imperial_gallon * 1e6, 86400, 0, "1e6 imp gal/d"},
    Unit{"bbl/h", flow, barrel, 3600, 0, "42 US gal/h"},
    Unit{"bbl/d", flow, barrel, 86400, 0, "42 US gal/d"},
    Unit{"bbl/day", flow, barrel, 86400, 0, "42 US gal/d"},
    Unit{"bph", flow, barrel, 3600, 0, "42 US gal/h"},
    Unit{"cfs", flow, cubic_foot, 1, 0, "1 ft3/s"},
    Unit{"ft3/s", flow, cubic_foot, 1, 0, "1 ft3/s"},
    Unit{"ft3/min", flow, cubic_foot, 60, 0, "1 ft3/60 s"},
    Unit{"cfm", flow, cubic_foot, 60, 0, "1 ft3/60 s"},
    // pressures and moduli
    Unit{"Pa", pressure, 1, 1, 0, "SI"},
    Unit{"kPa", pressure, 1e3, 1, 0, "SI"},
    Unit{"MPa", pressure, 1e6, 1, 0, "SI"},
    Unit{"GPa", pressure, 1e9, 1, 0, "SI"},
    Unit{"bar", pressure, 1e5, 1, 0, "1e5 Pa"},
    Unit{"mbar", pressure, 100, 1, 0, "100 Pa"},
    Unit{"psi", pressure, psi, 1, 0, "1 lbf/in2"},
    Unit{"ksi", pressure, 1e3 * psi, 1, 0, "1000 lbf/in2"},
    Unit{"Mpsi", pressure, 1e6 * psi, 1, 0, "1e6 lbf/in2"},
    Unit{"atm", pressure, 101325, 1, 0, "101 325 Pa"},
    Unit{"mH2O", pressure, metre_of_water, 1, 0, "9806.65 Pa"},
    Unit{"ftH2O", pressure, foot_of_water, 1, 0, "0.3048 mH2O"},
    Unit{"kgf/cm2", pressure, 98066.5, 1, 0, "98 066.5 Pa"},
    Unit{"N/mm2", pressure, 1e6, 1, 0, "SI"},
    Unit{"1/Pa", compliance, 1, 1, 0, "SI"},
    Unit{"/Pa", compliance, 1, 1, 0, "SI"},
    Unit{"Pa-1", compliance, 1, 1, 0, "SI"},
    Unit{"1/MPa", compliance, 1, 1e6, 0, "SI"},
    Unit{"1/GPa", compliance, 1, 1e9, 0, "SI"},
    Unit{"1/psi", compliance, 1, psi, 0, "1 in2/lbf"},
    // temperatures
    Unit{"K", temperature, 1, 1, 0, "SI"},
    Unit{"degC", temperature, 1, 1, 273.15, "K - 273.15"},
    Unit{"degF", temperature, 5, 9, 459.67, "1.8 K - 459.67"},
    // densities
    Unit{"kg/m3", density, 1, 1, 0, "SI"},
    Unit{"g/cm3", density, 1000, 1, 0, "SI"},
    Unit{"kg/L", density, 1000, 1, 0, "SI"},
    Unit{"lb/ft3", density, pound / cubic_foot, 1, 0, "0.45359237 kg/ft3"},
    // viscosities
    Unit{"m2/s", kinematic_viscosity, 1, 1, 0, "SI"},
    Unit{"mm2/s", kinematic_viscosity, 1, 1e6, 0, "SI"},
    Unit{"cSt", kinematic_viscosity, 1, 1e6, 0, "1 mm2/s"},
    Unit{"St", kinematic_viscosity, 1, 1e4, 0, "1 cm2/s"},
    Unit{"ft2/s", kinematic_viscosity, square_foot, 1, 0, "0.3048^2 m2/s"},
    Unit{"Pa s", dynamic_viscosity, 1, 1, 0, "SI"},
    Unit{"mPa s", dynamic_viscosity, 1, 1000, 0, "SI"},
    Unit{"cP", dynamic_viscosity, 1, 1000, 0, "1 mPa s"},
    Unit{"P", dynamic_viscosity, 1, 10, 0, "0.1 Pa s"},
    Unit{"kg/(m s)", dynamic_viscosity, 1, 1, 0, "SI"},
    // accelerations, speeds, inertia
    Unit{"m/s2", acceleration, 1, 1, 0, "SI"},
    Unit{"ft/s2", acceleration, foot, 1, 0, "0.3048 m/s2"},
    Unit{"rad/s", rotational_speed, 1, 1, 0, "SI"},
    Unit{"rpm", rotational_speed, turn, 60, 0, "2 pi/60 rad/s"},
    Unit{"1/min", rotational_speed, turn, 60, 0, "2 pi/60 rad/s"},
    Unit{"Hz", rotational_speed, turn, 1, 0, "2 pi rad/s"},
    Unit{"kg m2", inertia, 1, 1, 0, "SI"},
    Unit{"t m2", inertia, 1000, 1, 0, "SI"},
    Unit{"lb ft2", inertia, pound* square_foot, 1, 0, "0.45359237 kg ft2"},
    Unit{"lbm ft2", inertia, pound* square_foot, 1, 0, "0.45359237 kg ft2"},
    // ageing
    Unit{"mm/year", growth_rate, 1, 1000 * julian_year, 0, "mm in 365.25 d"},
    Unit{"mm/yr", growth_rate, 1, 1000 * julian_year, 0, "mm in 365.25 d"},
    Unit{"mm/a", growth_rate, 1, 1000 * julian_year, 0, "mm in 365.25 d"},
    Unit{"um/year", growth_rate, 1, 1e6 * julian_year, 0, "um in 365.25 d"},
    Unit{"m/year", growth_rate, 1, julian_year, 0, "m in 365.25 d"},
    Unit{"in/year", growth_rate, inch, julian_year, 0, "in in 365.25 d"},
    Unit{"in/yr", growth_rate, inch, julian_year, 0, "in in 365.25 d"},
    Unit{"ft/year", growth_rate, foot, julian_year, 0, "ft in 365.25 d"},
    Unit{"/kWh", energy_price, 1, 3.6e6, 0, "per 3.6e6 J"},
    Unit{"/MWh", energy_price, 1, 3.6e9, 0, "per 3.6e9 J"},
    Unit{"/MJ", energy_price, 1, 1e6, 0, "per 1e6 J"},
    Unit{"/J", energy_price, 1, 1, 0, "SI"},
    Unit{"/m", price_per_length, 1, 1, 0, "SI"},
    Unit{"/km", price_per_length, 1, 1000, 0, "SI"},
    Unit{"/ft", price_per_length, 1, foot, 0, "per 0.3048 m"},
    Unit{"/mile", price_per_length, 1, 1609.344, 0, "per 5280 ft"},
    Unit{"h/year", hours_per_year, 3600, julian_year, 0, "3600 s in 365.25 d"},
    Unit{"h/yr", hours_per_year, 3600, julian_year, 0, "3600 s in 365.25 d"},
    Unit{"h/a", hours_per_year, 3600, julian_year, 0, "3600 s in 365.25 d"},
    Unit{"h/d", hours_per_year, 3600, 86400, 0, "3600 s in 86400 s"},
};

std::string replaced(std::string_view text, std::string_view from, std::string_view to) {
  std::string result;
  while (!text.empty()) {
    const std::size_t at = text.find(from);
    result += text.substr(0, at);
    if (at == std::string_view::npos) break;
    result += to;
    text.remove_prefix(at + from.size());
  }
  return result;
}

bool ends_with_word(std::string& text, std::string_view word) {
  if (text.size() <= word.size() || !text.ends_with(word)) return false;
  text.resize(text.size() - word.size());
  while (!text.empty() && text.back() == ' ') text.pop_back();
  return true;
}

// One spelling for the many ways to write powers, products and spaces.
std::string normal_spelling(std::string_view given) {
  std::string text(given);
  for (const auto& [from, to] : {std::pair{"\u00b2", "2"},
                                 {"\u00b3", "3"},
                                 {"^", ""},
                                 {"\u00b7", " "},
                                 {"*", " "},
                                 {"\u00a0", " "},
                                 {"\u00b0", "deg"},
                                 {"\u00b5", "u"},
                                 {"\u03bc", "u"},
                                 {"\u2212", "-"}})
    text = replaced(text, from, to);
  while (text.find("  ") != std::string::npos) text = replaced(text, "  ", " ");
  for (const auto& [from, to] : {std::pair{" /", "/"},
                                 {"/ ", "/"},
                                 {"deg C", "degC"},
                                 {"deg F", "degF"},
                                 {"Pa.s", "Pa s"},
                                 {"kg.m2", "kg m2"},
                                 {"U.S.", "US"},
                                 {"imperial ", "imp "},
                                 {"UK ", "imp "}})
    text = replaced(text, from, to);
  while (text.starts_with(' ')) text.erase(0, 1);
  while (text.ends_with(' ')) text.pop_back();
  return text;
}

const Unit* named(std::string_view name) {
  for (const Unit& unit : units)
    if (unit.name == name) return &unit;
  return nullptr;
}

const Unit* pressure_named(std::string_view name) {
  const Unit* unit = named(name);
  return unit != nullptr && unit->kind == pressure ? unit : nullptr;
}

}  // namespace

std::span<const Unit> unit_table() { return units; }

std::optional<FoundUnit> find_unit(std::string_view text) {
  std::string name = normal_spelling(text);
  if (const Unit* unit = named(name)) return FoundUnit{*unit, PressureReference::unnamed};
  for (const auto& [word, reference] : {std::pair{" gauge", PressureReference::gauge},
                                        {" absolute", PressureReference::absolute},
                                        {" abs", PressureReference::absolute},
                                        {" g", PressureReference::gauge},
                                        {" a", PressureReference::absolute}}) {
    std::string rest = name;
    if (!ends_with_word(rest, word)) continue;
    if (const Unit* unit = pressure_named(rest)) return FoundUnit{*unit, reference};
  }
  for (const auto& [word, reference] : {std::pair{"g", PressureReference::gauge}, {"a", PressureReference::absolute}}) {
    std::string rest = name;
    if (!ends_with_word(rest, word)) continue;
    if (rest == "bar" || rest == "psi" || rest == "kPa" || rest == "mbar")
      return FoundUnit{*pressure_named(rest), reference};
  }
  return std::nullopt;
}

std::optional<UnitKind> kind_of(Dimension dimension) {
  switch (dimension) {
    case Dimension::number:
      return std::nullopt;
    case Dimension::share:
      return share;
    case Dimension::factor:
      return std::nullopt;
    case Dimension::length:
      return length;
    case Dimension::area:
      return area;
    case Dimension::volume:
      return volume;
    case Dimension::time:
      return time;
    case Dimension::velocity:
      return velocity;
    case Dimension::flow:
      return flow;
    case Dimension::pressure:
      return pressure;
    case Dimension::pressure_difference:
      return pressure;
    case Dimension::modulus:
      return pressure;
    case Dimension::compliance:
      return compliance;
    case Dimension::temperature:
      return temperature;
    case Dimension::density:
      return density;
    case Dimension::kinematic_viscosity:
      return kinematic_viscosity;
    case Dimension::dynamic_viscosity:
      return dynamic_viscosity;
    case Dimension::acceleration:
      return acceleration;
    case Dimension::rotational_speed:
      return rotational_speed;
    case Dimension::inertia:
      return inertia;
    case Dimension::kv:
      return flow;
    case Dimension::growth_rate:
      return growth_rate;
    case Dimension::energy_price:
      return energy_price;
    case Dimension::price_per_length:
      return price_per_length;
    case Dimension::hours_per_year:
      return hours_per_year;
    case Dimension::year:
      return std::nullopt;
  }
  return std::nullopt;
}

std::string_view words_of(UnitKind kind) {
  switch (kind) {
    case share:
      return "a share";
    case length:
      return "a length";
    case area:
      return "an area";
    case volume:
      return "a volume";
    case time:
      return "a time";
    case velocity:
      return "a velocity";
    case flow:
      return "a flow";
    case pressure:
      return "a pressure";
    case compliance:
      return "a compliance";
    case temperature:
      return "a temperature";
    case density:
      return "a density";
    case kinematic_viscosity:
      return "a kinematic viscosity";
    case dynamic_viscosity:
      return "a dynamic viscosity";
    case acceleration:
      return "an acceleration";
    case rotational_speed:
      return "a rotational speed";
    case inertia:
      return "a moment of inertia";
    case growth_rate:
      return "a growth rate";
    case energy_price:
      return "a price of energy";
    case price_per_length:
      return "a price per length";
    case hours_per_year:
      return "running hours per year";
  }
  return "";
}

std::string_view example_of(Dimension dimension) {
  switch (dimension) {
    case Dimension::number:
      return "0.3";
    case Dimension::share:
      return "30 %";
    case Dimension::factor:
      return "± 10 %";
    case Dimension::length:
      return "300 mm";
    case Dimension::area:
      return "4 m2";
    case Dimension::volume:
      return "7 m3";
    case Dimension::time:
      return "10 s";
    case Dimension::velocity:
      return "1150 m/s";
    case Dimension::flow:
      return "100 L/s";
    case Dimension::pressure:
      return "12 bar g";
    case Dimension::pressure_difference:
      return "4.5 bar";
    case Dimension::modulus:
      return "207 GPa";
    case Dimension::compliance:
      return "1.2e-10 1/Pa";
    case Dimension::temperature:
      return "15 degC";
    case Dimension::density:
      return "845 kg/m3";
    case Dimension::kinematic_viscosity:
      return "3.6 cSt";
    case Dimension::dynamic_viscosity:
      return "3.1 cP";
    case Dimension::acceleration:
      return "9.80665 m/s2";
    case Dimension::rotational_speed:
      return "1480 rpm";
    case Dimension::inertia:
      return "4.5 kg m2";
    case Dimension::kv:
      return "12000 m3/h";
    case Dimension::growth_rate:
      return "0.10 mm/year";
    case Dimension::energy_price:
      return "0.14 /kWh";
    case Dimension::price_per_length:
      return "260 /m";
    case Dimension::hours_per_year:
      return "8000 h/year";
    case Dimension::year:
      return "2030";
  }
  return "";
}

double to_si(const Unit& unit, double number, bool difference) {
  const double counted = difference ? number : number + unit.offset;
  return unit.by == 1.0 ? counted * unit.times : counted * unit.times / unit.by;
}

std::string_view si_name(Dimension dimension) {
  switch (dimension) {
    case Dimension::number:
    case Dimension::share:
    case Dimension::factor:
    case Dimension::year:
    case Dimension::hours_per_year:
      return "1";
    case Dimension::length:
      return "m";
    case Dimension::area:
      return "m2";
    case Dimension::volume:
      return "m3";
    case Dimension::time:
      return "s";
    case Dimension::velocity:
    case Dimension::growth_rate:
      return "m s-1";
    case Dimension::flow:
    case Dimension::kv:
      return "m3 s-1";
    case Dimension::pressure:
    case Dimension::pressure_difference:
    case Dimension::modulus:
      return "Pa";
    case Dimension::compliance:
      return "Pa-1";
    case Dimension::temperature:
      return "K";
    case Dimension::density:
      return "kg m-3";
    case Dimension::kinematic_viscosity:
      return "m2 s-1";
    case Dimension::dynamic_viscosity:
      return "Pa s";
    case Dimension::acceleration:
      return "m s-2";
    case Dimension::rotational_speed:
      return "rad s-1";
    case Dimension::inertia:
      return "kg m2";
    case Dimension::energy_price:
      return "J-1";
    case Dimension::price_per_length:
      return "m-1";
  }
  return "1";
}

}  // namespace headband::base
