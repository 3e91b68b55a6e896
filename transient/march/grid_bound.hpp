#pragma once
// SPDX-License-Identifier: MIT

#include <limits>

namespace headband::transient {

/// How far an extreme of the asked grid can be from that of an endless fine one.
struct GridBound {
  double bound = 0.0;  ///< >= 0, in the value's unit; NaN when not converging
  bool converging = true;
};

/// Two grids: 3 |fine - asked|.
[[nodiscard]] GridBound bound_from_two(double asked, double fine);

/// Differences up to this share of the run's whole swing say nothing of an order: where a movement does not end on a
/// row they come and go with the place of the rows.
inline constexpr double small_share = 1e-3;

/// Three grids: |asked - finest| + 1.25 |last difference| / (2^p - 1), p the observed order, at most 2.5; differences
/// of opposite sign: 3 |last difference| in its place; p < 0.5: not converging, but where both differences are small
/// (see small_share) |asked - finest| + 3 times the larger one. Differences under 1e-9 of the value are 0.
/// @param swing highest minus lowest value of the run, in the value's unit, >= 0
[[nodiscard]] GridBound bound_from_three(double asked, double fine, double finest, double swing);

}  // namespace headband::transient
