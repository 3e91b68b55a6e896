// SPDX-License-Identifier: MIT
#include "montecarlo/bands/ranked.hpp"

#include <gtest/gtest.h>

#include <algorithm>
#include <cmath>
#include <functional>
#include <random>
#include <utility>
#include <vector>

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

/// One place, a few and many: asked together, alone, or again, they are the same.
TEST(Ranked, FewPlacesAndManyAreThoseOfASort) {
  std::mt19937_64 bits(4);
  std::normal_distribution<double> normal;
  for (const std::size_t n : {5000U, 300001U}) {
    std::vector<double> x(n);
    for (auto& v : x) v = normal(bits);
    std::vector<double> sorted = x;
    std::sort(sorted.begin(), sorted.end());
    for (const std::size_t asked : {1U, 9U, 31U, 32U, 33U, 200U}) {
      const Ranked ranked(x);
      std::vector<double> places;
      for (std::size_t k = 0; k < asked; ++k) places.push_back(static_cast<double>((n - 1) * k / asked));
      ranked.announce(places);
      ranked.announce(places);
      for (const double place : places) {
        const auto rank = static_cast<std::size_t>(place);
        ASSERT_EQ(ranked.at(rank), sorted[rank]) << n << " " << asked;
        ASSERT_EQ(ranked.at(rank + 1), sorted[rank + 1]) << n << " " << asked;
      }
      ASSERT_EQ(ranked.at(n - 1), sorted[n - 1]);  // not announced
    }
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

/// Numbers held elsewhere are ranked where they stand: every rank of a sort, ties and all, whatever else is asked.
TEST(Ranked, NumbersHeldElsewhereStayWhereTheyAre) {
  std::mt19937_64 bits(2);
  std::normal_distribution<double> normal;
  const auto even = [&] { return std::uniform_real_distribution<double>(0.0, 1.0)(bits); };
  using Make = std::function<double(std::size_t)>;
  const std::vector<std::pair<const char*, Make>> kinds = {
      {"normal", [&](std::size_t) { return normal(bits); }},
      {"heavy tail", [&](std::size_t) { return std::pow(even() + 1e-9, -3.0); }},
      {"few values", [&](std::size_t) { return std::floor(5.0 * even()); }},
      {"one value and a few", [&](std::size_t i) { return i % 1000 == 7 ? normal(bits) : 1.0; }},
      {"rising", [](std::size_t i) { return static_cast<double>(i); }},
      {"two far groups", [&](std::size_t i) { return normal(bits) + (i % 2 == 0 ? 1e12 : -1e12); }},
      {"tiny", [&](std::size_t) { return 1e-310 * even(); }},
      {"all but over the range", [&](std::size_t i) { return i == 0   ? -1.7e308
                                                             : i == 1 ? 1.7e308
                                                                      : normal(bits); }},
  };
  for (const auto& [name, make] : kinds) {
    for (const std::size_t n : {1U, 2U, 255U, 2048U, 2049U, 30011U}) {
      std::vector<double> x(n);
      for (std::size_t i = 0; i < n; ++i) x[i] = make(i);
      const std::vector<double> before = x;
      auto sorted = x;
      std::sort(sorted.begin(), sorted.end());
      const Ranked ranked = Ranked::of(x);
      const Ranked told = Ranked::of(x, {sorted.front(), sorted.back()});
      told.announce(std::vector{-1.0, 0.5 * static_cast<double>(n), static_cast<double>(n), std::nan("")});
      for (std::size_t k = 0; k < n; k += 1 + n / 97) {
        ASSERT_EQ(ranked.at(k), sorted[k]) << name << " " << n;
        ASSERT_EQ(told.at(n - 1 - k), sorted[n - 1 - k]) << name << " " << n;
      }
      EXPECT_EQ(x, before);
      std::size_t counted = 0;
      for (const std::size_t many : ranked.bins().count) counted += many;
      EXPECT_TRUE(counted == n || ranked.bins().count.empty());
    }
  }
}

TEST(Ranked, CanBeMoved) {
  std::vector<Ranked> many;
  for (int i = 0; i < 5; ++i) many.emplace_back(std::vector<double>(3000, i));  // the vector grows and moves them
  for (int i = 0; i < 5; ++i) EXPECT_EQ(many[static_cast<std::size_t>(i)].at(1234), i);
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
