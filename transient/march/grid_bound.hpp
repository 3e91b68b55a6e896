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

/// What three grids say of one extreme.
struct ThreeGrids {
  double asked = 0.0, fine = 0.0, finest = 0.0;
  double swing = 0.0;            ///< highest minus lowest value of the run, in the value's unit, >= 0
  bool cavity_closed = false;    ///< the method is of first order there
  bool different_peaks = false;  ///< the grids find the extreme at times that cannot be the same peak
  double between_rows = 0.0;     ///< how much more it may be between the rows of the asked grid, see Peak::missed
};

/// Three grids: |asked - finest| + 1.25 |last difference| / (2^p - 1), p the observed order, at most 2.5, at most 1
/// once a cavity closed; differences of opposite sign: 3 |last difference| in its place, of different peaks: 3 times
/// the larger one; p < 0.5: not converging, but where both differences are small (see small_share), or no larger than
/// what the rows leave out without a cavity (the place of a row beside a cusp says nothing of an order), |asked -
/// finest| + 3 times the larger one. Differences under 1e-9 of the value are 0.
[[nodiscard]] GridBound bound_from_three(const ThreeGrids& grids);

}  // namespace headband::transient
