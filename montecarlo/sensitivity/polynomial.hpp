#pragma once
// SPDX-License-Identifier: MIT
//
// Shares of an answer's variance from the draws at hand, without another run: a polynomial in independent scores is
// fitted by least squares, and the squares of its coefficients are the shares (Sudret 2008, Reliab. Eng. Syst. Saf. 93,
// 964). Good for smooth answers; how much of the variance it explains is told, by leaving each draw out in turn.

#include <vector>

namespace headband::montecarlo {

/// One independent input of a fit.
struct FitInput {
  std::vector<double> score;        ///< even in (0, 1), one per draw
  bool normal = false;              ///< Hermite polynomials of the normal score; else Legendre of the score itself
  std::vector<double> option_ends;  ///< a choice: ends of its options on the score, the last one 1; else empty
};

/// Shares of one answer.
struct FittedShares {
  std::vector<double> first, total;  ///< per input, of the whole variance
  double explained = 0.0;            ///< share of the variance the fit predicts in draws it has not seen; may be < 0
  int terms = 0;
};

/// @param answer one per draw; not a number: left out
[[nodiscard]] FittedShares fit_shares(const std::vector<FitInput>& inputs, const std::vector<double>& answer);

}  // namespace headband::montecarlo
