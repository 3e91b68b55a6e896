// SPDX-License-Identifier: MIT
#include "core/report/plot.hpp"

#include <algorithm>
#include <cmath>

namespace headband::report {

void set_ranges(Plot& plot) {
  if (std::isnan(plot.x.low) && !plot.abscissa.empty()) {
    plot.x.low = plot.abscissa.front();
    plot.x.high = plot.abscissa.back();
  }
  const double size_x = std::max(std::abs(plot.x.low), std::abs(plot.x.high));
  if (!(plot.x.high - plot.x.low > least_reach * size_x)) plot.x.high = plot.x.low + std::max(1.0, 1e-3 * size_x);
  if (std::isnan(plot.y.low)) {
    double low = std::numeric_limits<double>::infinity();
    double high = -low;
    bool from_zero = false;
    const auto take = [&](double y) {
      if (!std::isfinite(y)) return;
      low = std::min(low, y);
      high = std::max(high, y);
    };
    for (const Curve& curve : plot.curves) {
      for (const double y : curve.y) take(y);
      from_zero = from_zero || curve.shape == Shape::step;
    }
    for (const Level& level : plot.levels)
      if (!level.upright) take(level.value);
    for (const Point& point : plot.points) take(point.y);
    if (!(low <= high)) low = 0.0, high = 1.0;
    const double size = std::max(std::abs(low), std::abs(high));
    const double air = high - low > least_reach * size ? 0.06 * (high - low) : std::max(1e-3 * size, 1e-6);
    plot.y.low = from_zero ? 0.0 : low - air;
    plot.y.high = high + air;
  }
}

double largest(const PlotAxis& axis) { return std::max(std::abs(axis.low), std::abs(axis.high)); }

Ticks ticks(double low, double high, int about) {
  Ticks result;
  if (!std::isfinite(low) || !std::isfinite(high) || !(high > low)) return result;
  const double rough = (high - low) / std::max(1, about);
  const double power = std::floor(std::log10(rough));
  const double unit = std::pow(10.0, power);
  double step = 10.0 * unit;
  for (const double nice : {1.0, 2.0, 5.0}) {
    if (nice * unit >= rough * (1.0 - 1e-9)) {
      step = nice * unit;
      break;
    }
  }
  result.places = std::max(0, static_cast<int>(-std::floor(std::log10(step) + 1e-9)));
  const auto first = static_cast<long long>(std::ceil(low / step - 1e-9));
  const auto last = static_cast<long long>(std::floor(high / step + 1e-9));
  for (long long k = first; k <= last; ++k) result.at.push_back(static_cast<double>(k) * step);
  return result;
}

std::vector<std::size_t> thinned(
    const std::vector<double>& x, const std::vector<double>& y, double low, double high, int buckets) {
  std::vector<std::size_t> kept;
  const std::size_t n = std::min(x.size(), y.size());
  const double per_bucket = (high - low) / std::max(1, buckets);
  std::size_t first = 0, least = 0, most = 0, last = 0;
  long long open = 0;
  bool any = false;
  const auto close = [&] {
    if (!any) return;
    std::array<std::size_t, 4> rows{first, least, most, last};
    std::sort(rows.begin(), rows.end());
    for (std::size_t i = 0; i < rows.size(); ++i)
      if (i == 0 || rows[i] != rows[i - 1]) kept.push_back(rows[i]);
  };
  for (std::size_t i = 0; i < n; ++i) {
    if (!std::isfinite(y[i]) || !std::isfinite(x[i])) continue;
    const auto bucket = static_cast<long long>(std::floor((x[i] - low) / per_bucket));
    if (!any || bucket != open) {
      close();
      first = least = most = last = i;
      open = bucket;
      any = true;
      continue;
    }
    if (y[i] < y[least]) least = i;
    if (y[i] > y[most]) most = i;
    last = i;
  }
  close();
  return kept;
}

}  // namespace headband::report
