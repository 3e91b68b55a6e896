#pragma once
// SPDX-License-Identifier: MIT
//
// Shares of an answer's variance, from draws in which one input was exchanged for that of an independent set.

#include <span>

namespace headband::montecarlo {

/// Variance of the finished numbers (n - 1 below); not a number with fewer than two.
[[nodiscard]] double variance_of(std::span<const double> values);

/// First-order share Var(E[y | x]) / Var(y): correlation of two runs that have only x in common (Martinez 2011; Baudin
/// et al. 2017, Handbook of Uncertainty Quantification, 33.4). Pairs with a number missing are left out; in [0, 1].
[[nodiscard]] double first_share(std::span<const double> one, std::span<const double> with_only_x_in_common);

/// Total share E[Var(y | all but x)] / Var(y): half the mean square difference of two runs that differ in x alone
/// (Jansen 1999, Comput. Phys. Commun. 117, 35), over the variance of `one`.
[[nodiscard]] double total_share(std::span<const double> one, std::span<const double> with_only_x_changed);

}  // namespace headband::montecarlo
