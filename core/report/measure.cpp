// SPDX-License-Identifier: MIT
#include "core/report/measure.hpp"

#include "core/base/units.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <array>
#include <cmath>
#include <numbers>
#include <utility>

namespace headband::report {
namespace {

/// A unit of the house's table under the name it is printed with.
Measure in(std::string_view name, std::string printed) {
  const base::Unit unit = base::find_unit(name).value().unit;
  return {std::move(printed), unit.by / unit.times, -unit.offset};
}

constexpr std::string_view narrow_space = "\u202f";

}  // namespace

Family family_of(std::string_view units) { return units == "us" ? Family::us : Family::si; }

Measure measure(Shown shown, Family family, double largest) {
  const bool us = family == Family::us;
  const double most = std::abs(largest);
  switch (shown) {
    case Shown::number:
      return {};
    case Shown::share:
      return {"%", 100.0, 0.0};
    case Shown::pressure:
      return us ? in("psi", "psi g") : in("bar", "bar g");
    case Shown::absolute_pressure:
      return us ? in("psi", "psi abs") : in("bar", "bar abs");
    case Shown::pressure_difference:
      return us ? in("psi", "psi") : in("bar", "bar");
    case Shown::head:
    case Shown::elevation:
      return us ? in("ft", "ft") : in("m", "m");
    case Shown::chainage:
      if (us) return most >= 16e3 ? in("mile", "miles") : in("ft", "ft");
      return most >= 20e3 ? in("km", "km") : in("m", "m");
    case Shown::diameter:
    case Shown::roughness:
      return us ? in("in", "in") : in("mm", "mm");
    case Shown::flow:
      if (us) return in("gpm", "gpm");
      return most >= 1.0 ? in("m3/s", "m³/s") : in("L/s", "L/s");
    case Shown::velocity:
      return us ? in("ft/s", "ft/s") : in("m/s", "m/s");
    case Shown::time:
      return in("s", "s");
    case Shown::volume:
      if (us) return in("US gal", "US gal");
      return most < 0.1 ? in("L", "L") : in("m3", "m³");
    case Shown::density:
      return us ? in("lb/ft3", "lb/ft³") : in("kg/m3", "kg/m³");
    case Shown::kinematic_viscosity:
      return in("cSt", "cSt");
    case Shown::dynamic_viscosity:
      return us ? in("cP", "cP") : in("mPa s", "mPa s");
    case Shown::modulus:
      return us ? in("ksi", "ksi") : in("GPa", "GPa");
    case Shown::temperature:
      return us ? in("degF", "°F") : in("degC", "°C");
    case Shown::speed:
      return in("rpm", "rpm");
    // 1 lbf ft = 1 lbf over 1 ft, both by definition; the case file knows no torque.
    case Shown::torque:
      return us ? Measure{"lbf ft", 1.0 / 1.3558179483314004, 0.0} : Measure{"N m", 1.0, 0.0};
  }
  return {};
}

Shown shown_of_unit(std::string_view unit, std::string_view kind) {
  if (unit == "Pa") {
    const bool gauge =
        kind == "highest_pressure" || kind == "lowest_pressure" || kind == "rating" || kind == "pressure";
    return gauge ? Shown::pressure : Shown::pressure_difference;
  }
  static constexpr std::array<std::pair<std::string_view, Shown>, 14> known{{
      {"m", Shown::head},
      {"m3/s", Shown::flow},
      {"m3 s-1", Shown::flow},
      {"m/s", Shown::velocity},
      {"m s-1", Shown::velocity},
      {"m3", Shown::volume},
      {"s", Shown::time},
      {"rad/s", Shown::speed},
      {"rad s-1", Shown::speed},
      {"N m", Shown::torque},
      {"kg/m3", Shown::density},
      {"kg m-3", Shown::density},
      {"m2/s", Shown::kinematic_viscosity},
      {"m2 s-1", Shown::kinematic_viscosity},
  }};
  for (const auto& [name, shown] : known)
    if (name == unit) return shown;
  if (unit == "1" && (kind == "opening" || kind == "share")) return Shown::share;
  return Shown::number;
}

KeyWords words_of_key(std::string_view key) {
  static constexpr std::array<std::pair<std::string_view, Shown>, 12> endings{{
      {"_m3_per_s", Shown::flow},
      {"_rad_per_s", Shown::speed},
      {"_m_per_s", Shown::velocity},
      {"_kg_per_m3", Shown::density},
      {"_N_m", Shown::torque},
      {"_m3", Shown::volume},
      {"_Pa", Shown::pressure},
      {"_K", Shown::temperature},
      {"_m", Shown::head},
      {"_s", Shown::time},
      {"opening", Shown::share},
      {"_share", Shown::share},
  }};
  KeyWords result;
  result.words = std::string(key);
  for (const auto& [ending, shown] : endings) {
    if (!key.ends_with(ending)) continue;
    result.shown = shown;
    if (ending.starts_with('_')) result.words.resize(key.size() - ending.size());
    break;
  }
  std::replace(result.words.begin(), result.words.end(), '_', ' ');
  return result;
}

std::string decimals(double value, int places) {
  if (std::isnan(value)) return "–";
  if (std::isinf(value)) return value > 0 ? "∞" : "−∞";
  std::string text = fmt::format("{:.{}f}", std::abs(value), std::max(0, places));
  const bool zero = text.find_first_not_of("0.") == std::string::npos;
  const std::size_t whole = std::min(text.find('.'), text.size());
  if (whole > 4)
    for (std::size_t at = whole; at > 3;) text.insert(at -= 3, narrow_space);
  return (value < 0 && !zero ? "−" : "") + text;
}

std::string figures(double value, int significant) {
  if (!std::isfinite(value)) return decimals(value, 0);
  if (value == 0.0) return "0";
  const std::string scientific = fmt::format("{:.{}e}", std::abs(value), significant - 1);
  const int power = std::stoi(scientific.substr(scientific.find('e') + 1));
  if (power >= -4 && power <= 7) return decimals(value, significant - 1 - power);
  static constexpr std::array<std::string_view, 10> raised{"⁰", "¹", "²", "³", "⁴", "⁵", "⁶", "⁷", "⁸", "⁹"};
  std::string text = (value < 0 ? "−" : "") + scientific.substr(0, scientific.find('e')) + " × 10";
  if (power < 0) text += "⁻";
  for (const char digit : std::to_string(std::abs(power))) text += raised[static_cast<std::size_t>(digit - '0')];
  return text;
}

int places_for(double spread) {
  if (!std::isfinite(spread) || spread == 0.0) return 3;
  const std::string scientific = fmt::format("{:.1e}", std::abs(spread));
  return std::clamp(1 - std::stoi(scientific.substr(scientific.find('e') + 1)), 0, 9);
}

std::string percent(double share) {
  if (std::isnan(share)) return "–";
  std::string text = figures(100.0 * share, 3);
  if (text.find('.') != std::string::npos && text.find("×") == std::string::npos) {
    text.erase(text.find_last_not_of('0') + 1);
    if (text.back() == '.') text.pop_back();
  }
  return text + "\u00a0%";
}

std::string behind_number(const std::string& unit) {
  std::string text = unit.empty() ? "" : "\u00a0";
  for (const char c : unit) {
    if (c == ' ')
      text += "\u00a0";
    else
      text += c;
  }
  return text;
}

std::string with_unit(double si, Shown shown, Family family, int significant) {
  const Measure in = measure(shown, family, si);
  const std::string text = figures(in(si), significant);
  return std::isnan(si) ? text : text + behind_number(in.unit);
}

}  // namespace headband::report
