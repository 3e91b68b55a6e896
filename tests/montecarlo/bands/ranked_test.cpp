// SPDX-License-Identifier: MIT
#include "montecarlo/bands/ranked.hpp"

#include <gtest/gtest.h>

#include <algorithm>
#include <cmath>
#include <random>

namespace headband::montecarlo {
namespace {

TEST(Ranked, EveryRankIsThatOfASort) {
  std::mt19937_64 bits(1);
  std::normal_distribution<double> normal;
  for (const std::size_t n : {1U, 7U, 2047U, 2048U, 50000U}) {
    std::vector<double> x(n);
    for (auto& v : x) v = std::exp(3.0 * normal(bits));
    if (n > 5000) x[3] = 1e250;  // one far outlier leaves all others in one bucket
    const Ranked ranked(x);
    std::sort(x.begin(), x.end());
    for (std::size_t k = 0; k < n; k += 1 + n / 997) ASSERT_EQ(ranked.at(n - 1 - k), x[n - 1 - k]);
    EXPECT_EQ(ranked.at(0), x.front());
    EXPECT_EQ(ranked.at(n - 1), x.back());
  }
}

TEST(Ranked, TiesAndConstantsAreFine) {
  const Ranked same(std::vector<double>(5000, 2.5));
  EXPECT_EQ(same.quantile(0.3), 2.5);
  std::vector<double> two(6000, 1.0);
  for (std::size_t i = 0; i < two.size(); i += 3) two[i] = 2.0;
  const Ranked ranked(two);
  EXPECT_EQ(ranked.at(3999), 1.0);
  EXPECT_EQ(ranked.at(4000), 2.0);
}

TEST(Ranked, QuantilesAreStraightLines) {
  const Ranked r({4.0, 1.0, 2.0, 3.0});
  EXPECT_DOUBLE_EQ(r.quantile(0.5), 2.5);
  EXPECT_DOUBLE_EQ(r.quantile(0.0), 1.0);
  EXPECT_DOUBLE_EQ(r.quantile(1.0), 4.0);
  EXPECT_TRUE(std::isnan(Ranked({}).quantile(0.5)));
}

}  // namespace
}  // namespace headband::montecarlo
