// SPDX-License-Identifier: MIT
#include "transient/march/grid_bound.hpp"

#include <algorithm>
#include <cmath>

namespace headband::transient {
namespace {

constexpr double negligible = 1e-9;  // of the value
constexpr double most_order = 2.5;
constexpr double most_order_with_cavities = 1.0;
constexpr double least_order = 0.5;

double difference(double from, double to) {
  const double d = to - from;
  return std::fabs(d) < negligible * std::fabs(from) ? 0.0 : d;
}

}  // namespace

GridBound bound_from_two(double asked, double fine) { return {3.0 * std::fabs(difference(asked, fine)), true}; }

GridBound bound_from_three(const ThreeGrids& g) {
  const double first = difference(g.asked, g.fine), last = difference(g.fine, g.finest);
  const double whole = std::fabs(difference(g.asked, g.finest));
  const double larger = std::max(std::fabs(first), std::fabs(last));
  const bool opposite = first * last < 0.0;
  if (last == 0.0 && !g.different_peaks) return {whole, true};
  const double most = g.cavity_closed ? most_order_with_cavities : most_order;
  const double order = std::min(most, std::log2(std::fabs(first / last)));
  const bool by_the_rows = !g.cavity_closed && larger <= g.between_rows;
  if (!opposite && !(order >= least_order) && larger > small_share * g.swing && !by_the_rows)
    return {std::numeric_limits<double>::quiet_NaN(), false};
  if (g.different_peaks) return {whole + 3.0 * larger, true};
  if (opposite) return {whole + 3.0 * std::fabs(last), true};
  if (!(order >= least_order)) return {whole + 3.0 * larger, true};
  return {whole + 1.25 * std::fabs(last) / (std::exp2(order) - 1.0), true};
}

}  // namespace headband::transient
