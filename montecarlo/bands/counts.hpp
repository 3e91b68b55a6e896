#pragma once
// SPDX-License-Identifier: MIT
//
// What a count of failures says about a probability, and how many draws a statement needs: exact binomial statements.

namespace headband::montecarlo {

struct Interval {
  double lower, upper;
};

/// Two-sided interval of a probability from `successes` in `trials` (Clopper & Pearson 1934, Biometrika 26, 404).
/// @param trials >= 1; @param confidence in (0, 1)
[[nodiscard]] Interval clopper_pearson(long long successes, long long trials, double confidence);

/// One-sided bounds, each at `confidence`: the ends of the two-sided interval at 2 confidence - 1.
[[nodiscard]] double probability_at_most(long long successes, long long trials, double confidence);
[[nodiscard]] double probability_at_least(long long successes, long long trials, double confidence);

/// Ranks (1 … n) of the order statistics that bracket a quantile with `confidence`; 0 or n + 1: no such draw.
struct Ranks {
  long long lower, upper;
};
/// lower = largest l with P(Bin(n, p) <= l - 1) <= a/2, upper = smallest u with P(Bin(n, p) <= u - 1) >= 1 - a/2,
/// a = 1 - confidence (Conover, Practical Nonparametric Statistics, 3.2).
[[nodiscard]] Ranks quantile_ranks(long long draws, double probability, double confidence);

/// Least number of draws whose `rank`-th largest is an upper limit for `coverage` (Wilks 1941, Ann. Math. Stat. 12,
/// 91).
[[nodiscard]] long long draws_for_upper_limit(double coverage, double confidence, int rank);
/// … whose `rank`-th smallest and largest hold `coverage` between them.
[[nodiscard]] long long draws_for_two_sided_content(double coverage, double confidence, int rank);
/// … whose smallest and largest leave at most (1 - coverage)/2 outside on each side.
[[nodiscard]] long long draws_for_both_tails(double coverage, double confidence);

}  // namespace headband::montecarlo
