// SPDX-License-Identifier: MIT
#include "core/report/measure.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <array>
#include <cmath>
#include <numbers>
#include <utility>

namespace headband::report {
namespace {

// Exact definitions: inch, foot, pound, standard gravity, US gallon = 231 cubic inches.
constexpr double foot = 0.3048;
constexpr double inch = 0.0254;
constexpr double mile = 5280.0 * foot;
constexpr double pound = 0.45359237;
constexpr double pound_force = pound * 9.80665;
constexpr double psi = pound_force / (inch * inch);
constexpr double gallon = 231.0 * inch * inch * inch;

constexpr std::string_view narrow_space = "\u202f";

}  // namespace

Family family_of(std::string_view units) { return units == "us" ? Family::us : Family::si; }

Measure measure(Shown shown, Family family, double largest) {
  const bool us = family == Family::us;
  const double most = std::abs(largest);
  switch (shown) {
    case Shown::number: return {"", 1.0};
    case Shown::share: return {"%", 100.0};
    case Shown::pressure: return us ? Measure{"psig", 1.0 / psi} : Measure{"bar g", 1e-5};
    case Shown::absolute_pressure: return us ? Measure{"psia", 1.0 / psi} : Measure{"bar abs", 1e-5};
    case Shown::pressure_difference: return us ? Measure{"psi", 1.0 / psi} : Measure{"bar", 1e-5};
    case Shown::head:
    case Shown::elevation: return us ? Measure{"ft", 1.0 / foot} : Measure{"m", 1.0};
    case Shown::chainage:
      if (us) return most > 5.0 * mile ? Measure{"miles", 1.0 / mile} : Measure{"ft", 1.0 / foot};
      return most > 20e3 ? Measure{"km", 1e-3} : Measure{"m", 1.0};
    case Shown::diameter:
    case Shown::roughness: return us ? Measure{"in", 1.0 / inch} : Measure{"mm", 1e3};
    case Shown::flow:
      if (us) return {"gpm", 60.0 / gallon};
      return most > 2.0 ? Measure{"m³/s", 1.0} : Measure{"L/s", 1e3};
    case Shown::velocity: return us ? Measure{"ft/s", 1.0 / foot} : Measure{"m/s", 1.0};
    case Shown::time: return {"s", 1.0};
    case Shown::volume:
      if (us) return {"gal", 1.0 / gallon};
      return most < 0.1 ? Measure{"L", 1e3} : Measure{"m³", 1.0};
    case Shown::density: return us ? Measure{"lb/ft³", foot * foot * foot / pound} : Measure{"kg/m³", 1.0};
    case Shown::kinematic_viscosity: return {"cSt", 1e6};
    case Shown::dynamic_viscosity: return us ? Measure{"cP", 1e3} : Measure{"mPa s", 1e3};
    case Shown::modulus: return us ? Measure{"ksi", 1e-3 / psi} : Measure{"GPa", 1e-9};
    case Shown::temperature: return us ? Measure{"°F", 1.8, -459.67} : Measure{"°C", 1.0, -273.15};
    case Shown::speed: return {"rpm", 30.0 / std::numbers::pi};
    case Shown::torque: return us ? Measure{"lbf ft", 1.0 / (pound_force * foot)} : Measure{"N m", 1.0};
  }
  return {};
}

Shown shown_of_unit(std::string_view unit, std::string_view kind) {
  if (unit == "Pa") {
    const bool gauge = kind == "highest_pressure" || kind == "lowest_pressure" || kind == "rating" || kind == "pressure";
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

std::string with_unit(double si, Shown shown, Family family, int significant) {
  const Measure in = measure(shown, family, si);
  std::string text = figures(in(si), significant);
  if (!in.unit.empty() && !std::isnan(si)) text += "\u00a0" + in.unit;
  return text;
}

}  // namespace headband::report
