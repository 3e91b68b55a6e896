// SPDX-License-Identifier: MIT
#include "montecarlo/bands/counts.hpp"

#include "tests/core/base/csv.hpp"

#include <gtest/gtest.h>

#include <string>

namespace headband::montecarlo {
namespace {

TEST(Counts, ClopperPearsonMatchesReference) {
  int checked = 0;
  for (const auto& row : test::reference_rows("uq_binomial_clopper_pearson.csv")) {
    const long long k = std::stoll(row[0]), n = std::stoll(row[1]);
    const double confidence = std::stod(row[2]);
    const Interval i = clopper_pearson(k, n, confidence);
    EXPECT_NEAR(i.lower, std::stod(row[3]), 1e-10);
    EXPECT_NEAR(i.upper, std::stod(row[4]), 1e-10);
    // one-sided at c is the end of the two-sided interval at 2c - 1
    EXPECT_NEAR(probability_at_most(k, n, 0.5 * (1.0 + confidence)), i.upper, 1e-14);
    EXPECT_NEAR(probability_at_least(k, n, 0.5 * (1.0 + confidence)), i.lower, 1e-14);
    ++checked;
  }
  EXPECT_EQ(checked, 9);
}

TEST(Counts, QuantileRanksMatchReference) {
  int checked = 0;
  for (const auto& row : test::reference_rows("uq_quantile_confidence_ranks.csv")) {
    const Ranks r = quantile_ranks(std::stoll(row[0]), std::stod(row[1]), std::stod(row[2]));
    EXPECT_EQ(r.lower, std::stoll(row[3]));
    EXPECT_EQ(r.upper, std::stoll(row[4]));
    ++checked;
  }
  EXPECT_EQ(checked, 5);
}

TEST(Counts, TooFewDrawsHaveNoRank) {
  const Ranks low = quantile_ranks(20, 0.025, 0.95), high = quantile_ranks(20, 0.975, 0.95);
  EXPECT_EQ(low.lower, 0);
  EXPECT_EQ(high.upper, 21);
}

TEST(Counts, SampleSizesMatchReference) {
  int checked = 0;
  for (const auto& row : test::reference_rows("uq_order_statistic_sample_sizes.csv")) {
    const double coverage = std::stod(row[1]), confidence = std::stod(row[2]);
    const int rank = std::stoi(row[3]);
    long long n = 0;
    if (row[0].starts_with("one-sided")) n = draws_for_upper_limit(coverage, confidence, rank);
    if (row[0].starts_with("two-sided content")) n = draws_for_two_sided_content(coverage, confidence, rank);
    if (row[0].starts_with("two-sided, both")) n = draws_for_both_tails(coverage, confidence);
    EXPECT_EQ(n, std::stoll(row[4])) << row[0];
    ++checked;
  }
  EXPECT_EQ(checked, 27);
}

}  // namespace
}  // namespace headband::montecarlo
