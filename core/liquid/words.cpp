// SPDX-License-Identifier: MIT
#include "core/liquid/words.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <array>
#include <cctype>
#include <cmath>
#include <limits>

namespace headband::liquid {

namespace {

constexpr double unknown = std::numeric_limits<double>::quiet_NaN();

// Common practice, from memory: round numbers of data sheets and pipeline handbooks; the viscosity at two temperatures
// lies on the double-log law. The spreads say how far liquids of one name differ.
constexpr std::array<CommonLiquid, 9> common{{
    {"petrol", "motor petrol, summer grade", 745.0, 1.1e-3, 0.60e-6, 0.46e-6, 1.05e9, 35e3, 0.03, 0.15, 0.10},
    {"kerosene", "kerosene, jet fuel", 805.0, 0.9e-3, 1.9e-6, 1.25e-6, 1.30e9, 0.7e3, 0.03, 0.25, 0.08},
    {"diesel", "automotive diesel, gas oil", 840.0, 0.83e-3, 4.5e-6, 2.4e-6, 1.42e9, 0.1e3, 0.02, 0.30, 0.08},
    {"light crude",
     "crude oil of about 38 degrees API",
     835.0,
     0.85e-3,
     7.0e-6,
     3.6e-6,
     1.35e9,
     45e3,
     0.03,
     0.50,
     0.12},
    {"medium crude", "crude oil of about 28 degrees API", 887.0, 0.75e-3, 35e-6, 12e-6, 1.50e9, 30e3, 0.03, 0.60, 0.12},
    {"heavy fuel oil",
     "residual fuel oil, 180 cSt at 50 degC",
     970.0,
     0.68e-3,
     1500e-6,
     180e-6,
     1.75e9,
     unknown,
     0.02,
     0.40,
     0.12},
    {"glycol 30 %",
     "ethylene glycol in water, 30 % by volume",
     1046.0,
     0.35e-3,
     2.15e-6,
     1.15e-6,
     2.45e9,
     2.1e3,
     0.01,
     0.10,
     0.08},
    {"glycol 50 %",
     "ethylene glycol in water, 50 % by volume",
     1075.0,
     0.48e-3,
     3.9e-6,
     1.85e-6,
     2.60e9,
     1.7e3,
     0.01,
     0.12,
     0.08},
    {"methanol", "pure methanol", 796.0, 1.18e-3, 0.745e-6, 0.51e-6, 0.97e9, 13.0e3, 0.005, 0.05, 0.05},
}};

std::string lower(std::string_view text) {
  std::string s(text);
  std::transform(s.begin(), s.end(), s.begin(), [](unsigned char c) { return static_cast<char>(std::tolower(c)); });
  return s;
}

/// The seven rows of a state; sources and spreads in the order of Property.
std::vector<LiquidRow> rows_of(const Properties& p,
                               const std::array<std::string, 7>& sources,
                               const std::array<double, 7>& spreads) {
  struct Fixed {
    Property property;
    std::string_view words, key, unit;
    double value;
  };
  const std::array<Fixed, 7> fixed{{
      {Property::density, "density", "density_kg_per_m3", "kg/m3", p.density},
      {Property::kinematic_viscosity,
       "kinematic viscosity",
       "kinematic_viscosity_m2_per_s",
       "m2/s",
       p.dynamic_viscosity / p.density},
      {Property::dynamic_viscosity, "dynamic viscosity", "dynamic_viscosity_Pa_s", "Pa s", p.dynamic_viscosity},
      {Property::bulk_modulus_isentropic,
       "isentropic bulk modulus",
       "bulk_modulus_isentropic_Pa",
       "Pa",
       p.bulk_modulus_isentropic},
      {Property::bulk_modulus_isothermal,
       "isothermal bulk modulus",
       "bulk_modulus_isothermal_Pa",
       "Pa",
       p.bulk_modulus_isothermal},
      {Property::sound_speed, "speed of sound", "sound_speed_m_per_s", "m/s", p.speed_of_sound},
      {Property::vapour_pressure, "vapour pressure", "vapour_pressure_Pa", "Pa abs", p.vapour_pressure},
  }};
  std::vector<LiquidRow> rows;
  for (std::size_t i = 0; i < fixed.size(); ++i) {
    const Fixed& f = fixed[i];
    rows.push_back({f.property,
                    f.words,
                    f.key,
                    f.unit,
                    f.value,
                    spreads[i],
                    fmt::format("± {:g} %", 100.0 * spreads[i]),
                    sources[i]});
  }
  return rows;
}

void remark_range(LiquidSheet& s, double coldest, double hottest) {
  if (!(s.temperature >= coldest && s.temperature <= hottest))
    s.remarks.push_back(fmt::format("{:.2f} degC is outside {:g} .. {:g} degC where the formulas hold",
                                    s.temperature - 273.15,
                                    coldest - 273.15,
                                    hottest - 273.15));
}

void remark_boiling(LiquidSheet& s) {
  if (s.pressure < s.properties.vapour_pressure)
    s.remarks.push_back(fmt::format("{:.5g} bar abs is below the vapour pressure {:.5g} bar abs: the liquid would boil",
                                    s.pressure / 1e5,
                                    s.properties.vapour_pressure / 1e5));
}

LiquidSheet water_sheet(double temperature, double pressure) {
  LiquidSheet s{"water", temperature, pressure, water(temperature, pressure), {}, {}};
  const bool one_bar = pressure <= 0.15e6;
  const std::string state = one_bar ? "IAPWS SR6-08(2011), liquid water at 0.1 MPa" : "IAPWS R6-95(2018), IAPWS-95";
  const std::string viscosity = one_bar ? "IAPWS SR6-08(2011)" : "IAPWS R12-08, at the density above";
  const WaterSpread w;
  s.rows =
      rows_of(s.properties,
              {state, viscosity, viscosity, state, state, state, "IAPWS R7-97(2012) IF97, region 4"},
              {w.density, w.viscosity, w.viscosity, w.bulk_modulus, w.bulk_modulus, w.sound_speed, w.vapour_pressure});
  remark_range(s, water_coldest, water_hottest);
  if (!(pressure >= water_lowest_pressure && pressure <= water_highest_pressure))
    s.remarks.push_back(fmt::format("{:.5g} bar abs is outside {:g} .. {:g} bar abs where the formulas hold",
                                    pressure / 1e5,
                                    water_lowest_pressure / 1e5,
                                    water_highest_pressure / 1e5));
  remark_boiling(s);
  return s;
}

LiquidSheet sea_water_sheet(double temperature, double pressure) {
  LiquidSheet s{"seawater", temperature, pressure, sea_water(temperature), {}, {}};
  const std::string viscosity = "Sharqawy, Lienhard & Zubair 2010, on IAPWS SR6-08(2011)";
  s.rows = rows_of(s.properties,
                   {"EOS-80, Millero & Poisson 1981, salinity 35",
                    viscosity,
                    viscosity,
                    "density times sound speed squared",
                    "EOS-80, Millero et al. 1980, salinity 35",
                    "Chen & Millero 1977, salinity 35",
                    "IAPWS R7-97(2012) and Raoult's law"},
                   {0.003, 0.03, 0.015, 0.015, 0.015, 0.0075, 0.02});
  remark_range(s, sea_water_coldest, sea_water_hottest);
  if (!(pressure <= 0.15e6))
    s.remarks.emplace_back("values at atmospheric pressure: the pressure is not followed for sea water");
  remark_boiling(s);
  return s;
}

LiquidSheet common_sheet(const CommonLiquid& c, double temperature, double pressure) {
  LiquidSheet s{std::string(c.name), temperature, pressure, {}, {}, {}};
  Properties& p = s.properties;
  p.density = c.density_15 * (1.0 - c.expansion * (temperature - 288.15));
  const ViscosityLaw law = viscosity_law(293.15, c.viscosity_20, 323.15, c.viscosity_50);
  p.dynamic_viscosity = p.density * viscosity_at(law, temperature);
  p.bulk_modulus_isentropic = c.bulk_modulus;
  p.bulk_modulus_isothermal = unknown;
  p.speed_of_sound = std::sqrt(c.bulk_modulus / p.density);
  // a round number of practice holds at its own temperature only
  p.vapour_pressure = std::abs(temperature - 293.15) <= 5.0 ? c.vapour_pressure_20 : unknown;
  const std::string practice = "common practice";
  s.rows = rows_of(p,
                   {practice,
                    practice + ", double-log law (ASTM D341 form)",
                    practice,
                    practice,
                    "not given",
                    "from modulus and density",
                    practice + " at 20 degC"},
                   {c.density_spread,
                    c.viscosity_spread,
                    c.viscosity_spread,
                    c.bulk_spread,
                    c.bulk_spread,
                    0.5 * (c.bulk_spread + c.density_spread),
                    0.5});
  s.remarks.push_back(
      fmt::format("{}: round numbers for guidance, not a delivery's; state your own in the case file", c.what));
  remark_range(s, 273.15, 333.15);
  return s;
}

}  // namespace

std::span<const CommonLiquid> common_liquids() { return common; }

std::vector<std::string_view> known_names() {
  std::vector<std::string_view> names{"water", "seawater"};
  for (const CommonLiquid& c : common) names.push_back(c.name);
  return names;
}

std::optional<LiquidSheet> sheet(std::string_view name, double temperature, double pressure) {
  const std::string wanted = lower(name);
  if (wanted == "water") return water_sheet(temperature, pressure);
  if (wanted == "seawater" || wanted == "sea water") return sea_water_sheet(temperature, pressure);
  for (const CommonLiquid& c : common)
    if (wanted == c.name) return common_sheet(c, temperature, pressure);
  return std::nullopt;
}

}  // namespace headband::liquid
