// SPDX-License-Identifier: MIT
#include "core/casefile/spread_words.hpp"
#include "core/base/units.hpp"

#include <fmt/format.h>

#include <cmath>
#include <variant>

namespace headband::casefile {
namespace {

using base::Dimension;
using base::Quantity;

/// Standard normal quantile of 97.5 %.
constexpr double z_of_95_percent = 1.959963984540054;

}  // namespace

std::string words_of_spread(const Quantity& q, base::UnitFamily family) {
  const auto number = [&](double x) { return base::shown(x, q.dimension, family, q.gauge); };
  const auto difference = [&](double x) {
    if (q.dimension == Dimension::temperature)
      return family == base::UnitFamily::si ? base::significant(x, 3) + " K" : base::significant(1.8 * x, 3) + " degF";
    if (q.dimension == Dimension::pressure) return base::shown(x, Dimension::pressure_difference, family, false, 3);
    return base::shown(x, q.dimension, family, false, 3);
  };
  std::string text;
  struct Words {
    const Quantity& q;
    const decltype(number)& value;
    const decltype(difference)& width;
    std::string operator()(const base::Exact&) const { return ""; }
    std::string operator()(const base::Normal& n) const {
      return "95 % within ± " + width(z_of_95_percent * n.standard_deviation);
    }
    std::string operator()(const base::LogNormal& n) const {
      const double f = std::exp(z_of_95_percent * n.log_standard_deviation);
      return fmt::format(
          "95 % between {} and {} (x/ {})", value(q.value / f), value(q.value * f), base::significant(f, 3));
    }
    std::string operator()(const base::Even& e) const {
      return fmt::format("even between {} and {}", value(e.low), value(e.high));
    }
    std::string operator()(const base::Triangle& t) const {
      return fmt::format("triangle between {} and {}", value(t.low), value(t.high));
    }
    std::string operator()(const base::NotRandom& r) const {
      return fmt::format("anywhere from {} to {}, not random", value(r.low), value(r.high));
    }
  };
  text = std::visit(Words{q, number, difference}, q.spread);
  if (!q.same_as.empty()) text = "the same value as " + q.same_as;
  return text;
}

}  // namespace headband::casefile
