// SPDX-License-Identifier: MIT
#include "transient/device/four_quadrants.hpp"

#include <algorithm>
#include <cmath>
#include <numbers>

namespace headband::transient {

QuadrantPoint read_quadrants(const FourQuadrants& table, const std::vector<double>& curve, double flow, double speed) {
  const double size = flow * flow + speed * speed;
  if (!(size > 0.0)) return {};
  const double x = std::numbers::pi + std::atan2(flow, speed);
  const auto& a = table.angle;
  const auto above = std::upper_bound(a.begin() + 1, a.end() - 1, x);
  const auto k = static_cast<std::size_t>(above - a.begin());
  const double slope = (curve[k] - curve[k - 1]) / (a[k] - a[k - 1]);
  const double w = curve[k - 1] + slope * (x - a[k - 1]);
  // dx/dv = alpha / (alpha^2 + v^2), dx/dalpha = -v / (alpha^2 + v^2)
  return {w * size, slope * speed + 2.0 * flow * w, -slope * flow + 2.0 * speed * w};
}

}  // namespace headband::transient
