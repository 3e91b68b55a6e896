// SPDX-License-Identifier: MIT
#include "core/show/amounts.hpp"

#include "core/base/units.hpp"

#include <algorithm>
#include <cmath>
#include <string_view>

namespace headband::show {

using base::Dimension;

base::Dimension dimension_of_kind(const std::string& kind) {
  if (kind == "highest_pressure" || kind == "lowest_pressure" || kind == "pressure") return Dimension::pressure;
  if (kind == "pressure_drop") return Dimension::pressure_difference;
  if (kind == "flow") return Dimension::flow;
  if (kind == "velocity") return Dimension::velocity;
  if (kind == "head") return Dimension::length;
  return Dimension::number;
}

std::string words_of_kind(const std::string& kind) {
  std::string words = kind;
  std::replace(words.begin(), words.end(), '_', ' ');
  return words;
}

KeyWords words_of_key(const std::string& key) {
  struct Ending {
    std::string_view text;
    Dimension dimension;
  };
  // Longest first: "_m3_per_s" ends in "_s" too.
  static constexpr Ending endings[] = {{"_rad_per_s", Dimension::rotational_speed},
                                       {"_m3_per_s", Dimension::flow},
                                       {"_m_per_s", Dimension::velocity},
                                       {"_m3", Dimension::volume},
                                       {"_Pa", Dimension::pressure},
                                       {"_m", Dimension::length},
                                       {"_s", Dimension::time}};
  for (const auto& ending : endings) {
    if (key.size() > ending.text.size() && key.ends_with(ending.text)) {
      return {words_of_kind(key.substr(0, key.size() - ending.text.size())), ending.dimension};
    }
  }
  return {words_of_kind(key), key == "opening" ? Dimension::share : Dimension::number};
}

std::string percent(double share) {
  if (std::isnan(share)) return "-";
  return base::significant(100.0 * share, std::abs(share) < 0.1 ? 2 : 3).append(" %");
}

Amounts::Amounts(const answers::Study& study, const std::string& units)
    : family_((units.empty() ? study.units_shown : units) == "us" ? base::UnitFamily::us : base::UnitFamily::si) {}

std::string Amounts::number(double value, Dimension dimension, int digits) const {
  if (std::isnan(value)) return "-";
  // what rounding leaves of a flow where nothing flows
  const bool still = dimension == Dimension::flow || dimension == Dimension::velocity;
  if (still && std::abs(value) < 1e-12) value = 0.0;
  return base::significant(base::to_display(base::display_unit(dimension, family_), value), digits);
}

std::string Amounts::unit(Dimension dimension) const {
  std::string name = base::display_unit(dimension, family_).name;
  return dimension == Dimension::pressure ? name.append(" g") : name;
}

std::string Amounts::of(double value, Dimension dimension, int digits) const {
  if (std::isnan(value)) return "-";
  const std::string name = unit(dimension);
  std::string text = number(value, dimension, digits);
  return name.empty() ? text : text.append(" ").append(name);
}

std::string Amounts::width(double value, Dimension dimension, int digits) const {
  return of(value, dimension == Dimension::pressure ? Dimension::pressure_difference : dimension, digits);
}

}  // namespace headband::show
