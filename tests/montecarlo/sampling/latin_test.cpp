// SPDX-License-Identifier: MIT
#include "montecarlo/sampling/latin.hpp"

#include <gtest/gtest.h>

#include <algorithm>
#include <map>

namespace headband::montecarlo {
namespace {

TEST(Latin, EveryStratumOnce) {
  for (const std::uint32_t n : {1U, 2U, 7U, 1000U, 4097U}) {
    auto strata = latin_strata(3, 17, n);
    std::sort(strata.begin(), strata.end());
    for (std::uint32_t i = 0; i < n; ++i) ASSERT_EQ(strata[i], i);
  }
}

TEST(Latin, DependsOnSeedNameAndNumber) {
  const auto one = latin_strata(3, 17, 64);
  EXPECT_EQ(one, latin_strata(3, 17, 64));
  EXPECT_NE(one, latin_strata(4, 17, 64));
  EXPECT_NE(one, latin_strata(3, 18, 64));
  auto more = latin_strata(3, 17, 65);
  more.resize(64);
  EXPECT_NE(one, more);
}

/// All 6 orders of 3 come up evenly: chi-square with 5 degrees of freedom, 20.5 is passed by 99.9 %.
TEST(Latin, OrdersAreEven) {
  std::map<std::vector<std::uint32_t>, int> seen;
  const int n = 6000;
  for (int seed = 0; seed < n; ++seed) ++seen[latin_strata(static_cast<std::uint64_t>(seed), 5, 3)];
  ASSERT_EQ(seen.size(), 6U);
  double chi_square = 0.0;
  for (const auto& [order, count] : seen) chi_square += (count - n / 6.0) * (count - n / 6.0) / (n / 6.0);
  EXPECT_LT(chi_square, 20.5);
}

TEST(Latin, ScoreStaysUnderOne) {
  EXPECT_LT(latin_score(999999, 1.0 - 0x1p-53, 1000000), 1.0);
  EXPECT_DOUBLE_EQ(latin_score(3, 0.5, 10), 0.35);
}

}  // namespace
}  // namespace headband::montecarlo
