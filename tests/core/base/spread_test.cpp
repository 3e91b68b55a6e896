// SPDX-License-Identifier: MIT
#include "core/base/spread.hpp"

#include "tests/core/base/csv.hpp"

#include <gtest/gtest.h>
#include <boost/math/distributions/normal.hpp>

#include <bit>
#include <cmath>
#include <limits>
#include <random>
#include <string>
#include <vector>

namespace headband::base {
namespace {

double at(const Spread& spread, const Cut& cut, double central, double score) {
  return quantile<1>(spread, cut, central, Lanes<1>(score)).number;
}

struct Sample {
  std::string name;
  Spread spread;
  Cut cut;
  double central;
};

std::vector<Sample> samples() {
  const double cv_log = std::sqrt(std::log1p(0.01));
  return {
      {"normal,mean=1 sd=0.05", Normal{0.05}, {}, 1.0},
      {"lognormal,median=1 sigma_ln=0.25", LogNormal{0.25}, {}, 1.0},
      {"lognormal,mean=0.046 cv=0.10", LogNormal{cv_log}, {}, 0.046 / std::sqrt(1.01)},
      {"uniform,low=0.9 high=1.1", Even{0.9, 1.1}, {}, 1.0},
      {"triangular,low=0.9 mode=1 high=1.1", Triangle{0.9, 1.1}, {}, 1.0},
      {"truncated normal,mean=1 sd=0.1 low=0.8 high=1.2 (mean and sd of the parent)", Normal{0.1}, {0.8, 1.2}, 1.0},
  };
}

TEST(Spread, MatchesReferenceQuantiles) {
  int checked = 0;
  for (const auto& row : test::reference_rows("uq_distribution_quantiles.csv")) {
    for (const Sample& s : samples()) {
      if (row[0] + "," + row[1] != s.name) continue;
      const double expected = std::stod(row[4]);
      double seen = 0.0;
      if (row[2] == "mean") seen = mean(s.spread, s.cut, s.central);
      if (row[2] == "standard deviation") seen = standard_deviation(s.spread, s.cut, s.central);
      if (row[2] == "quantile") seen = at(s.spread, s.cut, s.central, std::stod(row[3]));
      EXPECT_NEAR(seen, expected, 1e-10 * std::fabs(expected)) << s.name << " " << row[2] << " " << row[3];
      ++checked;
    }
  }
  EXPECT_EQ(checked, 66);
}

TEST(Spread, NormalQuantileMatchesInverseErrorFunction) {
  const boost::math::normal standard;
  double worst = 0.0;
  for (double p = 1e-16; p < 0.5; p *= 1.01) {
    const double expected = boost::math::quantile(standard, p);
    worst = std::max(worst, std::fabs(normal_quantile(Lanes<1>(p)).number / expected - 1.0));
    if (p > 1e-10) {
      const double upper = boost::math::quantile(boost::math::complement(standard, 1.0 - (1.0 - p)));
      EXPECT_NEAR(normal_quantile(Lanes<1>(1.0 - p)).number, upper, 1e-13 * std::fabs(upper) + 1e-16);
    }
  }
  EXPECT_LT(worst, 1e-14);
  EXPECT_EQ(normal_quantile(Lanes<1>(0.5)).number, 0.0);
}

TEST(Spread, NormalProbabilityUndoesQuantile) {
  for (double p = 1e-15; p < 0.999; p = p * 1.3 + 1e-16) {
    EXPECT_NEAR(normal_probability(normal_quantile(Lanes<1>(p)).number) / p, 1.0, 1e-13) << p;
  }
}

TEST(Spread, CutNormalMatchesBoostOnBothSides) {
  const boost::math::normal parent(10.0, 2.0);
  for (const Cut cut :
       {Cut{7.0, 12.0}, Cut{13.0, 20.0}, Cut{-5.0, 3.0}, Cut{11.0, std::numeric_limits<double>::infinity()}}) {
    const double low_below = boost::math::cdf(parent, cut.low);
    const double low_above = boost::math::cdf(boost::math::complement(parent, cut.low));
    const bool endless = std::isinf(cut.high);
    const double high_above = endless ? 0.0 : boost::math::cdf(boost::math::complement(parent, cut.high));
    const double high_below = endless ? 1.0 : boost::math::cdf(parent, cut.high);
    for (double s = 0.001; s < 1.0; s += 0.0173) {
      const double expected = cut.low > 10.0 ? boost::math::quantile(boost::math::complement(
                                                   parent, high_above + (1.0 - s) * (low_above - high_above)))
                                             : boost::math::quantile(parent, low_below + s * (high_below - low_below));
      EXPECT_NEAR(at(Normal{2.0}, cut, 10.0, s), expected, 1e-12 * std::fabs(expected));
    }
  }
}

/// Mean and deviation must be those of the quantile function itself (midpoint sums over the scores, folded tails).
TEST(Spread, MomentsAreThoseOfTheQuantile) {
  const double infinite = std::numeric_limits<double>::infinity();
  std::vector<Sample> all = samples();
  all.push_back({"low side", Normal{1.0}, {0.5, infinite}, 1.0});
  all.push_back({"far tail", Normal{1.0}, {4.0, infinite}, 0.0});
  all.push_back({"narrow", Normal{1.0}, {-0.001, 0.001}, 0.0});
  all.push_back({"lognormal cut", LogNormal{0.5}, {0.8, 2.0}, 1.0});
  all.push_back({"lognormal narrow", LogNormal{0.5}, {3.0, 3.1}, 1.0});
  all.push_back({"even cut", Even{0.0, 4.0}, {1.0, infinite}, 2.0});
  all.push_back({"triangle cut", Triangle{0.0, 4.0}, {0.5, 3.0}, 1.0});
  all.push_back({"triangle one-sided", Triangle{1.0, 4.0}, {}, 1.0});
  all.push_back({"not random", NotRandom{1.0, 1.4}, {}, 1.2});
  for (const Sample& s : all) {
    const int n = 200000;
    double sum = 0.0, squares = 0.0;
    const double origin = at(s.spread, s.cut, s.central, 0.5);
    for (int i = 0; i < n; ++i) {
      const double x = at(s.spread, s.cut, s.central, (i + 0.5) / n) - origin;
      sum += x;
      squares += x * x;
    }
    const double m = sum / n, sd = std::sqrt(squares / n - m * m);
    EXPECT_NEAR(mean(s.spread, s.cut, s.central), origin + m, 1e-4 * sd) << s.name;
    EXPECT_NEAR(standard_deviation(s.spread, s.cut, s.central), sd, 2e-4 * sd) << s.name;
  }
}

TEST(Spread, QuantilesRiseAndStayInsideTheCut) {
  const double infinite = std::numeric_limits<double>::infinity();
  const std::vector<Sample> all = {{"n", Normal{1.0}, {0.2, infinite}, 1.0},
                                   {"l", LogNormal{0.7}, {0.01, 0.3}, 0.05},
                                   {"t", Triangle{1.0, 3.0}, {1.5, 2.9}, 2.0},
                                   {"e", Even{1.0, 3.0}, {1.5, 2.9}, 2.0}};
  for (const Sample& s : all) {
    double before = -infinite;
    for (const double score :
         {1e-16, 1e-9, 0.001, 0.1, 0.4999, 0.5, 0.5001, 0.9, 0.99999, 1.0 - 1e-12, 1.0 - 1.2e-16}) {
      const double x = at(s.spread, s.cut, s.central, score);
      EXPECT_GE(x, s.cut.low) << s.name;
      EXPECT_LE(x, s.cut.high) << s.name;
      EXPECT_GE(x, before) << s.name;
      before = x;
    }
  }
}

TEST(Spread, EightLanesGiveTheBitsOfOne) {
  std::mt19937_64 bits(5);
  std::uniform_real_distribution<double> even(0.0, 1.0);
  std::vector<Sample> all = samples();
  all.push_back({"lognormal cut", LogNormal{0.5}, {0.8, 2.0}, 1.0});
  all.push_back({"triangle cut", Triangle{0.0, 4.0}, {0.5, 3.0}, 1.0});
  for (const Sample& s : all) {
    for (int i = 0; i < 2000; ++i) {
      Lanes<8> score;
      for (int lane = 0; lane < 8; ++lane)
        score.set(lane, lane == 0 ? std::pow(even(bits), 30.0) + 1e-300 : even(bits));
      const Lanes<8> x = quantile<8>(s.spread, s.cut, s.central, score);
      for (int lane = 0; lane < 8; ++lane) {
        ASSERT_EQ(std::bit_cast<std::uint64_t>(x[lane]),
                  std::bit_cast<std::uint64_t>(at(s.spread, s.cut, s.central, score[lane])));
      }
    }
  }
}

/// The tails of many spreads are evaluated together: nothing of that may show, wherever the scores fall.
TEST(Spread, ManyAtOnceGiveTheBitsOfOneByOne) {
  std::mt19937_64 bits(6);
  std::uniform_real_distribution<double> even(0.0, 1.0);
  std::vector<Sample> all = samples();
  all.push_back({"exact", Exact{}, {}, 2.5});
  all.push_back({"lognormal cut", LogNormal{0.5}, {0.8, 2.0}, 1.0});
  all.push_back({"negative lognormal cut", LogNormal{0.5}, {-2.0, -0.1}, -1.0});
  all.push_back({"far tail", Normal{1.0}, {4.0, std::numeric_limits<double>::infinity()}, 0.0});
  all.push_back({"cut that takes nothing", Normal{0.01}, {0.0, 9.0}, 1.0});
  all.push_back({"triangle cut", Triangle{0.0, 4.0}, {0.5, 3.0}, 1.0});
  all.push_back({"not random", NotRandom{1.0, 1.4}, {}, 1.2});
  while (all.size() < 71) all.push_back(all[all.size() % 13]);  // more than are taken at a time
  for (const std::size_t many : {std::size_t{1}, std::size_t{4}, std::size_t{32}, std::size_t{33}, all.size()}) {
    std::vector<ReadySpread> ready;
    for (std::size_t i = 0; i < many; ++i) ready.push_back(ready_spread(all[i].spread, all[i].cut, all[i].central));
    for (int round = 0; round < 60; ++round) {
      std::vector<Lanes<8>> scores(many), values(many);
      for (auto& score : scores) {
        for (int lane = 0; lane < 8; ++lane) {
          const double u = even(bits);
          // rounds of middles alone, tails alone, far tails, and scores as they come
          const double tail = std::pow(u, 20.0) + 0x1p-53;
          const double there[] = {0.1 + 0.8 * u, 0.074 * u + 1e-9, 1.0 - 0.074 * u - 1e-9, tail, 1.0 - tail, u};
          score.set(lane, there[round % 6]);
        }
      }
      quantiles(ready, std::span<const Lanes<8>>(scores), values);
      std::vector<std::vector<Lanes<8>>> blocks{scores, scores, scores}, block_values(3, std::vector<Lanes<8>>(many));
      for (std::size_t i = 0; i < many; ++i) {  // other scores in the middle one
        for (int lane = 0; lane < 8; ++lane) blocks[1][i].set(lane, scores[i][7 - lane]);
      }
      quantiles(ready, std::span<const std::vector<Lanes<8>>>(blocks), block_values);
      for (std::size_t i = 0; i < many; ++i) {
        for (int lane = 0; lane < 8; ++lane) {
          ASSERT_EQ(std::bit_cast<std::uint64_t>(values[i][lane]),
                    std::bit_cast<std::uint64_t>(at(all[i].spread, all[i].cut, all[i].central, scores[i][lane])))
              << all[i].name << " at " << scores[i][lane];
          ASSERT_EQ(block_values[0][i][lane], values[i][lane]);
          ASSERT_EQ(block_values[1][i][lane], values[i][7 - lane]);
          ASSERT_EQ(block_values[2][i][lane], values[i][lane]);
        }
      }
    }
  }
}

TEST(Spread, ProbabilityUndoesQuantile) {
  std::vector<Sample> all = samples();
  all.push_back({"lognormal cut", LogNormal{0.5}, {0.8, 2.0}, 1.0});
  all.push_back({"negative lognormal", LogNormal{0.5}, {}, -1.0});
  all.push_back({"normal cut above", Normal{1.0}, {0.5, 9.0}, 0.0});
  all.push_back({"triangle cut", Triangle{0.0, 4.0}, {0.5, 3.0}, 1.0});
  all.push_back({"not random", NotRandom{1.0, 1.4}, {}, 1.2});
  for (const Sample& s : all) {
    for (const double score : {0.001, 0.03, 0.25, 0.5, 0.75, 0.97, 0.999}) {
      const double x = at(s.spread, s.cut, s.central, score);
      const double back = probability(s.spread, s.cut, s.central, x);
      EXPECT_NEAR(back, score, 1e-12) << s.name;
    }
  }
}

TEST(Spread, ExactIsTheValue) {
  EXPECT_EQ(at(Exact{}, {}, 3.25, 0.9), 3.25);
  EXPECT_EQ(standard_deviation(Exact{}, {}, 3.25), 0.0);
}

}  // namespace
}  // namespace headband::base
