// SPDX-License-Identifier: MIT
#include "montecarlo/bands/counts.hpp"

#include <algorithm>
#include <boost/math/distributions/binomial.hpp>
#include <boost/math/special_functions/beta.hpp>
#include <cmath>

namespace headband::montecarlo {

namespace {

/// P(Bin(n, p) <= k).
double binomial_at_most(long long k, long long n, double p) {
  if (k < 0) return 0.0;
  if (k >= n) return 1.0;
  return boost::math::ibetac(static_cast<double>(k + 1), static_cast<double>(n - k), p);
}

/// Least k in [0, n] for which the rising `holds` is true; n + 1 where none is.
template <class Holds>
long long least_where(long long low, long long high, const Holds& holds) {
  while (low < high) {
    const long long middle = low + (high - low) / 2;
    if (holds(middle)) {
      high = middle;
    } else {
      low = middle + 1;
    }
  }
  return low;
}

/// Least n from `first` on for which the rising `holds` is true.
template <class Holds>
long long least_number(long long first, const Holds& holds) {
  long long high = std::max(1LL, first);
  while (!holds(high)) high *= 2;
  return least_where(first, high, holds);
}

}  // namespace

double probability_at_most(long long successes, long long trials, double confidence) {
  if (successes >= trials) return 1.0;
  return boost::math::ibeta_inv(
      static_cast<double>(successes + 1), static_cast<double>(trials - successes), confidence);
}

double probability_at_least(long long successes, long long trials, double confidence) {
  if (successes <= 0) return 0.0;
  return boost::math::ibeta_inv(
      static_cast<double>(successes), static_cast<double>(trials - successes + 1), 1.0 - confidence);
}

Interval clopper_pearson(long long successes, long long trials, double confidence) {
  const double each = 0.5 * (1.0 + confidence);
  return {probability_at_least(successes, trials, each), probability_at_most(successes, trials, each)};
}

Ranks quantile_ranks(long long draws, double probability, double confidence) {
  const double tail = 0.5 * (1.0 - confidence);
  // P(Bin <= l - 1) rises with l: the last l that keeps it under the tail is one before the first that does not
  const long long over =
      least_where(0, draws + 1, [&](long long l) { return binomial_at_most(l - 1, draws, probability) > tail; });
  const long long upper = least_where(1, draws + 1, [&](long long u) {
    return u > draws || binomial_at_most(u - 1, draws, probability) >= 1.0 - tail;
  });
  // with n draws there is no (n + 1)-th: P(Bin <= n) = 1 is reached by no draw
  return {over - 1, upper};
}

long long draws_for_upper_limit(double coverage, double confidence, int rank) {
  return least_number(rank, [&](long long n) { return binomial_at_most(n - rank, n, coverage) >= confidence; });
}

long long draws_for_two_sided_content(double coverage, double confidence, int rank) {
  return least_number(2 * rank, [&](long long n) { return binomial_at_most(n - 2 * rank, n, coverage) >= confidence; });
}

long long draws_for_both_tails(double coverage, double confidence) {
  const double tail = 0.5 * (1.0 - coverage);
  return least_number(2, [&](long long n) {
    const auto draws = static_cast<double>(n);
    // neither end misses its tail: inclusion and exclusion of the two misses
    return 1.0 - 2.0 * std::pow(1.0 - tail, draws) + std::pow(coverage, draws) >= confidence;
  });
}

}  // namespace headband::montecarlo
