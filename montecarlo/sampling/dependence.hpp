#pragma once
// SPDX-License-Identifier: MIT
//
// `[together]`: rank correlations between unknowns as a Gaussian copula. The correlation of the normal scores is
// 2 sin(pi r / 6), r the rank correlation (Pearson 1907; Kruskal 1958, J. Amer. Stat. Assoc. 53, 814).

#include "core/network/case.hpp"

#include <vector>

namespace headband::montecarlo {

/// Correlation of normal scores whose rank correlation is `rank`; exact at -1, 0 and 1.
[[nodiscard]] double copula_correlation(double rank);
/// The other way: (6 / pi) asin(correlation / 2).
[[nodiscard]] double rank_correlation(double copula);

/// Symmetric matrix with ones on its diagonal, row-major.
struct CorrelationMatrix {
  std::size_t size = 0;
  std::vector<double> entry;
  [[nodiscard]] double& at(std::size_t i, std::size_t j) { return entry[i * size + j]; }
  [[nodiscard]] double at(std::size_t i, std::size_t j) const { return entry[i * size + j]; }
};

/// Least eigenvalue; a matrix is workable when it is not under -1e-10.
[[nodiscard]] double least_eigenvalue(const CorrelationMatrix& m);

/// The correlation matrix nearest to `m` (sum of squares), by alternating projections (Higham 2002, IMA J. Numer.
/// Anal. 22, 329).
[[nodiscard]] CorrelationMatrix nearest_workable(const CorrelationMatrix& m);

/// One unknown's normal score as a sum over independent ones.
struct DependentScore {
  int unknown = -1;                                   ///< index into Case::unknowns
  std::vector<std::pair<std::size_t, double>> terms;  ///< member, weight
  int same_as = -1;                                   ///< member whose score this one repeats (rank correlation 1)
  bool mirrored = false;                              ///< … or mirrors (rank correlation -1)
  [[nodiscard]] bool independent(std::size_t own) const { return terms.size() == 1 && terms[0].first == own; }
};

/// The correlated unknowns of a case, in file order.
struct Dependence {
  std::vector<DependentScore> members;
  CorrelationMatrix correlation;  ///< of the normal scores
};

/// What is wrong with `[together]`: names that are no unknowns, ranges, pairs said twice, and a matrix that no
/// distribution has; for this one the nearest workable numbers are offered.
[[nodiscard]] base::Problems check_together(const network::Case& c);

/// @param c a case that `check_together` finds nothing wrong with
[[nodiscard]] Dependence make_dependence(const network::Case& c);

}  // namespace headband::montecarlo
