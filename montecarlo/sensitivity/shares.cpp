// SPDX-License-Identifier: MIT
#include "montecarlo/sensitivity/shares.hpp"

#include <algorithm>
#include <cmath>
#include <limits>

namespace headband::montecarlo {

double variance_of(std::span<const double> values) {
  double sum = 0.0, n = 0.0;
  for (const double v : values) {
    if (std::isnan(v)) continue;
    sum += v;
    n += 1.0;
  }
  if (n < 2.0) return std::numeric_limits<double>::quiet_NaN();
  const double mean = sum / n;
  double squares = 0.0;
  for (const double v : values) squares += std::isnan(v) ? 0.0 : (v - mean) * (v - mean);
  return squares / (n - 1.0);
}

double first_share(std::span<const double> one, std::span<const double> other) {
  double sum_a = 0.0, sum_b = 0.0, n = 0.0;
  const auto usable = [&](std::size_t i) { return !std::isnan(one[i]) && !std::isnan(other[i]); };
  for (std::size_t i = 0; i < one.size(); ++i) {
    if (!usable(i)) continue;
    sum_a += one[i];
    sum_b += other[i];
    n += 1.0;
  }
  const double mean_a = sum_a / n, mean_b = sum_b / n;
  double aa = 0.0, bb = 0.0, ab = 0.0;
  for (std::size_t i = 0; i < one.size(); ++i) {
    if (!usable(i)) continue;
    aa += (one[i] - mean_a) * (one[i] - mean_a);
    bb += (other[i] - mean_b) * (other[i] - mean_b);
    ab += (one[i] - mean_a) * (other[i] - mean_b);
  }
  if (!(aa > 0.0) || !(bb > 0.0)) return 0.0;
  return std::clamp(ab / std::sqrt(aa * bb), 0.0, 1.0);
}

double total_share(std::span<const double> one, std::span<const double> other) {
  double squares = 0.0, n = 0.0;
  for (std::size_t i = 0; i < one.size(); ++i) {
    if (std::isnan(one[i]) || std::isnan(other[i])) continue;
    squares += (one[i] - other[i]) * (one[i] - other[i]);
    n += 1.0;
  }
  const double variance = variance_of(one);
  if (!(variance > 0.0) || n == 0.0) return 0.0;
  return std::clamp(0.5 * squares / n / variance, 0.0, 1.0);
}

}  // namespace headband::montecarlo
