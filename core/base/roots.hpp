#pragma once
// SPDX-License-Identifier: MIT
//
// Root finders that always end: each returns a value, a status and what it cost. Nothing here throws by itself.

#include <algorithm>
#include <boost/math/tools/toms748_solve.hpp>
#include <cmath>
#include <cstdint>
#include <limits>

namespace headband::base {

enum class RootStatus {
  found,
  not_bracketed,         ///< the ends of the interval have values of one sign
  too_many_evaluations,  ///< `value` is the best one so far
  not_finite,            ///< the function gave no finite number
};

struct RootOptions {
  double relative_tolerance = 1e-14;  ///< width of the final interval as a share of the root [-], >= 4e-16
  double absolute_tolerance = 0.0;    ///< width of the final interval [argument], >= 0
  int most_evaluations = 100;         ///< >= 3
};

struct Root {
  double value = std::numeric_limits<double>::quiet_NaN();     ///< argument where the function is least
  double residual = std::numeric_limits<double>::quiet_NaN();  ///< the function there
  RootStatus status = RootStatus::not_finite;
  int evaluations = 0;
  [[nodiscard]] bool found() const { return status == RootStatus::found; }
};

/// Value and slope of a function, for Newton steps.
struct ValueAndSlope {
  double value, slope;
};

/// Root of `function(double) -> double` between `low` and `high`, whose values there have opposite signs.
/// Alefeld, Potra, Shi 1995 (ACM TOMS 21, 327), as in Boost.Math.
template <class Function>
[[nodiscard]] Root find_root(const Function& function, double low, double high, const RootOptions& options = {}) {
  Root root;
  bool finite = true;
  const auto counted = [&](double x) {
    ++root.evaluations;
    const double y = function(x);
    if (!std::isfinite(y)) finite = false;
    if (!(std::fabs(y) >= std::fabs(root.residual))) {  // also the first one: comparison with NaN is false
      root.value = x;
      root.residual = y;
    }
    return y;
  };
  const double at_low = counted(low), at_high = counted(high);
  if (!finite) return root;
  if (at_low == 0.0 || at_high == 0.0) {
    root.status = RootStatus::found;
    return root;
  }
  if ((at_low < 0.0) == (at_high < 0.0)) {
    root.status = RootStatus::not_bracketed;
    return root;
  }
  const double relative = std::max(options.relative_tolerance, 2.0 * std::numeric_limits<double>::epsilon());
  const auto narrow = [&](double a, double b) {
    return !finite || std::fabs(b - a) <= options.absolute_tolerance + relative * std::min(std::fabs(a), std::fabs(b));
  };
  auto left = static_cast<std::uintmax_t>(std::max(1, options.most_evaluations - 2));
  const auto interval = boost::math::tools::toms748_solve(counted,
                                                          std::min(low, high),
                                                          std::max(low, high),
                                                          low < high ? at_low : at_high,
                                                          low < high ? at_high : at_low,
                                                          narrow,
                                                          left);
  if (!finite) {
    root.status = RootStatus::not_finite;
  } else {
    const bool done = root.residual == 0.0 || narrow(interval.first, interval.second);
    root.status = done ? RootStatus::found : RootStatus::too_many_evaluations;
  }
  return root;
}

/// Root of `function(double) -> ValueAndSlope` by Newton steps from `start`, kept inside a bracket: a step that leaves
/// it, or does not halve the last but one, is replaced by a bisection.
/// @param low,high values of opposite signs; `start` between them
template <class Function>
[[nodiscard]] Root find_root_newton(
    const Function& function, double low, double high, double start, const RootOptions& options = {}) {
  Root root;
  const auto look = [&](double x) {
    ++root.evaluations;
    const ValueAndSlope y = function(x);
    if (!(std::fabs(y.value) >= std::fabs(root.residual))) {
      root.value = x;
      root.residual = y.value;
    }
    return y;
  };
  const double at_low = look(low).value, at_high = look(high).value;
  if (!std::isfinite(at_low) || !std::isfinite(at_high)) return root;
  if (at_low == 0.0 || at_high == 0.0) {
    root.status = RootStatus::found;
    return root;
  }
  if ((at_low < 0.0) == (at_high < 0.0)) {
    root.status = RootStatus::not_bracketed;
    return root;
  }
  double negative = at_low < 0.0 ? low : high, positive = at_low < 0.0 ? high : low;
  double x = start, step = std::fabs(high - low), step_before = step;
  while (root.evaluations < options.most_evaluations) {
    const ValueAndSlope y = look(x);
    if (!std::isfinite(y.value)) {
      root.status = RootStatus::not_finite;
      return root;
    }
    if (y.value == 0.0) break;
    (y.value < 0.0 ? negative : positive) = x;
    double next = x - y.value / y.slope;
    const bool inside = next > std::min(negative, positive) && next < std::max(negative, positive);
    if (!inside || std::fabs(next - x) > 0.5 * step_before) next = 0.5 * (negative + positive);
    step_before = step;
    step = std::fabs(next - x);
    const double tolerance =
        options.absolute_tolerance +
        std::max(options.relative_tolerance, 2.0 * std::numeric_limits<double>::epsilon()) * std::fabs(x);
    if (step <= tolerance) {
      root.value = next;
      root.status = RootStatus::found;
      return root;
    }
    x = next;
  }
  root.status = root.residual == 0.0 ? RootStatus::found : RootStatus::too_many_evaluations;
  return root;
}

/// Widens [low, high] by doubling its width on the side that is nearer to zero until the ends have opposite signs.
/// @return true when they have; the interval never leaves [least, most]
template <class Function>
[[nodiscard]] bool bracket_root(
    const Function& function, double& low, double& high, double least, double most, int most_evaluations = 60) {
  double at_low = function(low), at_high = function(high);
  for (int used = 2; used < most_evaluations; ++used) {
    if (!std::isfinite(at_low) || !std::isfinite(at_high)) return false;
    if (at_low == 0.0 || at_high == 0.0 || (at_low < 0.0) != (at_high < 0.0)) return true;
    const double width = high - low;
    const bool low_side = high >= most || (low > least && std::fabs(at_low) < std::fabs(at_high));
    if (low_side && low <= least) return false;
    if (low_side) {
      low = std::max(least, low - width);
      at_low = function(low);
    } else {
      high = std::min(most, high + width);
      at_high = function(high);
    }
  }
  return std::isfinite(at_low) && std::isfinite(at_high) && (at_low < 0.0) != (at_high < 0.0);
}

}  // namespace headband::base
