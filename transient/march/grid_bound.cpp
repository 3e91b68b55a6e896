// SPDX-License-Identifier: MIT
#include "transient/march/grid_bound.hpp"

#include <algorithm>
#include <cmath>

namespace headband::transient {
namespace {

constexpr double negligible = 1e-9;  // of the value
constexpr double most_order = 2.5;
constexpr double least_order = 0.5;

double difference(double from, double to) {
  const double d = to - from;
  return std::fabs(d) < negligible * std::fabs(from) ? 0.0 : d;
}

}  // namespace

GridBound bound_from_two(double asked, double fine) { return {3.0 * std::fabs(difference(asked, fine)), true}; }

GridBound bound_from_three(double asked, double fine, double finest, double swing) {
  const double first = difference(asked, fine), last = difference(fine, finest);
  const double whole = std::fabs(difference(asked, finest));
  if (last == 0.0) return {whole, true};
  if (first * last < 0.0) return {whole + 3.0 * std::fabs(last), true};
  const double order = std::min(most_order, std::log2(std::fabs(first / last)));
  if (!(order >= least_order)) {
    const double larger = std::max(std::fabs(first), std::fabs(last));
    if (larger <= small_share * swing) return {whole + 3.0 * larger, true};
    return {std::numeric_limits<double>::quiet_NaN(), false};
  }
  return {whole + 1.25 * std::fabs(last) / (std::exp2(order) - 1.0), true};
}

}  // namespace headband::transient
