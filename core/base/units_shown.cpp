// SPDX-License-Identifier: MIT
//
// What people are shown: the unit for a value of a size, and its digits.

#include "core/base/units.hpp"

#include <cmath>
#include <cstdio>
#include <limits>

namespace headband::base {
namespace {

constexpr double foot = 0.3048;                           // [m], exact
constexpr double us_gallon = 3.785411784e-3;              // [m3], 231 in3
constexpr double psi = 0.45359237 * 9.80665 / 6.4516e-4;  // [Pa], lbf/in2

DisplayUnit of(std::string_view name) {
  const Unit unit = find_unit(name).value().unit;  // a name of our own: the table holds it
  return {std::string(name), unit.times, unit.by, unit.offset};
}

// Without trailing zeros and without a minus before nothing.
std::string trimmed(std::string text) {
  if (text.find('.') != std::string::npos) {
    while (text.back() == '0') text.pop_back();
    if (text.back() == '.') text.pop_back();
  }
  if (text == "-0") text.assign(1, '0');
  return text;
}

}  // namespace

DisplayUnit display_unit(Dimension dimension, UnitFamily family) {
  return display_unit(dimension, family, std::numeric_limits<double>::quiet_NaN());
}

DisplayUnit display_unit(Dimension dimension, UnitFamily family, double magnitude) {
  const bool si = family == UnitFamily::si;
  const double size = std::abs(magnitude);  // every comparison with NaN is false: the usual unit comes last
  switch (dimension) {
    case Dimension::number:
    case Dimension::factor:
    case Dimension::year:
      return {};
    case Dimension::share:
      return of("%");
    case Dimension::length:
      if (size == 0.0) return of(si ? "m" : "ft");
      if (si) return of(size < 1.0 ? "mm" : size >= 2.0e4 ? "km" : "m");
      return of(size < 3.0 * foot ? "in" : size >= 10.0 * 1609.344 ? "mile" : "ft");
    case Dimension::area:
      if (si) return of(size < 0.01 ? "cm2" : "m2");
      return of(size < foot * foot ? "in2" : "ft2");
    case Dimension::volume:
      if (si) return of(size < 0.1 ? "L" : "m3");
      return {"US gal", us_gallon, 1.0, 0.0};
    case Dimension::time:
      return of("s");
    case Dimension::velocity:
      return of(si ? "m/s" : "ft/s");
    case Dimension::flow:
      return of(!si ? "gpm" : size >= 1.0 ? "m3/s" : "L/s");
    case Dimension::pressure:
    case Dimension::pressure_difference:
      return of(si ? "bar" : "psi");
    case Dimension::modulus:
      if (si) return of(size < 1e9 ? "MPa" : "GPa");
      return of("ksi");
    case Dimension::compliance:
      return of(si ? "1/GPa" : "1/psi");
    case Dimension::temperature:
      return of(si ? "degC" : "degF");
    case Dimension::density:
      return of(si ? "kg/m3" : "lb/ft3");
    case Dimension::kinematic_viscosity:
      return of("cSt");
    case Dimension::dynamic_viscosity:
      return of(si ? "mPa s" : "cP");
    case Dimension::acceleration:
      return of(si ? "m/s2" : "ft/s2");
    case Dimension::rotational_speed:
      return of("rpm");
    case Dimension::inertia:
      return of(si ? "kg m2" : "lb ft2");
    case Dimension::kv:
      // Cv counts gpm at 1 psi, Kv m3/h at 1 bar: a Cv of 1 lets through gpm sqrt(bar/psi) at 1 bar.
      if (!si) return {"gpm (Cv)", us_gallon / 60.0 * std::sqrt(1e5 / psi), 1.0, 0.0};
      return {"m3/h (Kv)", 1.0, 3600.0, 0.0};
    case Dimension::growth_rate:
      return of(si ? "mm/year" : "in/year");
    case Dimension::energy_price:
      return of("/kWh");
    case Dimension::price_per_length:
      return of(si ? "/m" : "/ft");
    case Dimension::hours_per_year:
      return of("h/year");
  }
  return {};
}

double to_display(const DisplayUnit& unit, double value) { return value * unit.by / unit.times - unit.offset; }

std::string significant(double number, int digits) {
  if (std::isnan(number)) return "-";
  if (std::isinf(number)) return number > 0 ? "infinite" : "-infinite";
  if (number == 0.0) return "0";
  char text[64];
  const double size = std::abs(number);
  if (size < 1e-4 || size >= 1e15) {
    std::snprintf(text, sizeof text, "%.*e", digits - 1, number);
    return text;
  }
  const int decimals = digits - 1 - static_cast<int>(std::floor(std::log10(size)));
  std::snprintf(text, sizeof text, "%.*f", decimals > 0 ? decimals : 0, number);
  return trimmed(text);
}

std::string shown(double value, Dimension dimension, UnitFamily family, bool gauge, int digits) {
  if (std::isnan(value)) return "-";
  const DisplayUnit unit = display_unit(dimension, family, value);
  std::string text;
  if (dimension == Dimension::temperature) {  // digits counted from the scale's zero say nothing: two decimals
    char number[64];
    std::snprintf(number, sizeof number, "%.2f", to_display(unit, value));
    text = trimmed(number);
  } else {
    text = significant(to_display(unit, value), digits);
  }
  if (!unit.name.empty()) text.append(" ").append(unit.name);
  if (dimension == Dimension::pressure) text.append(gauge ? " g" : " abs");
  return text;
}

}  // namespace headband::base
