// SPDX-License-Identifier: MIT
#include "montecarlo/sampling/sobol.hpp"

#include "tests/core/base/csv.hpp"

#include <gtest/gtest.h>

#include <cmath>
#include <set>
#include <string>

namespace headband::montecarlo {
namespace {

TEST(Sobol, MatchesReferenceSequence) {
  const SobolDirections directions = sobol_directions(10);
  int checked = 0;
  for (const auto& row : test::reference_rows("uq_sobol_sequence.csv")) {
    const auto index = static_cast<std::uint64_t>(std::stoull(row[0]));
    for (std::size_t d = 0; d < 10; ++d) {
      EXPECT_EQ(static_cast<double>(sobol_point(directions[d], index)) * 0x1p-52, std::stod(row[d + 1]));
      ++checked;
    }
  }
  EXPECT_EQ(checked, 640);
}

TEST(Sobol, TakesEveryDimensionAndNoMore) {
  EXPECT_EQ(sobol_directions(most_sobol_dimensions).size(), most_sobol_dimensions);
  EXPECT_THROW(static_cast<void>(sobol_directions(most_sobol_dimensions + 1)), std::range_error);
}

/// A scramble keeps the net: each replicate fills every one of 2^m strata once, for each m.
TEST(Sobol, EveryReplicateFillsItsStrata) {
  const SobolDirections directions = sobol_directions(3);
  for (std::size_t d = 0; d < 3; ++d) {
    const ScrambledSobol scrambled(directions[d], 42, 1000 + d);
    for (std::uint64_t replicate = 0; replicate < 16; ++replicate) {
      for (int m = 1; m <= 8; ++m) {
        std::set<std::uint64_t> strata;
        for (std::uint64_t i = 0; i < (1U << m); ++i) strata.insert(scrambled.point(16 * i + replicate) >> (52 - m));
        EXPECT_EQ(strata.size(), std::size_t{1} << m);
      }
    }
  }
}

/// Two dimensions stay a (0, m, 2) net under independent scrambles: all boxes of 2^-m area hold one point.
TEST(Sobol, TwoDimensionsStayANet) {
  const SobolDirections directions = sobol_directions(2);
  const ScrambledSobol x(directions[0], 3, 11), y(directions[1], 3, 12);
  for (int split = 0; split <= 6; ++split) {
    std::set<std::uint64_t> boxes;
    for (std::uint64_t i = 0; i < 64; ++i) {
      const std::uint64_t a = split == 0 ? 0 : x.point(16 * i + 5) >> (52 - split);
      const std::uint64_t b = split == 6 ? 0 : y.point(16 * i + 5) >> (52 - (6 - split));
      boxes.insert(a << 8 | b);
    }
    EXPECT_EQ(boxes.size(), 64U) << split;
  }
}

TEST(Sobol, ReplicatesSeedsAndNamesDiffer) {
  const SobolDirections directions = sobol_directions(1);
  const ScrambledSobol one(directions[0], 1, 7), other_seed(directions[0], 2, 7), other_name(directions[0], 1, 8);
  std::set<std::uint64_t> first;
  for (std::uint64_t draw = 0; draw < 16; ++draw) {
    first.insert(one.point(draw));
    first.insert(other_seed.point(draw));
    first.insert(other_name.point(draw));
  }
  EXPECT_EQ(first.size(), 48U);
}

TEST(Sobol, BlocksAreTheBitsOfPoints) {
  const SobolDirections directions = sobol_directions(4);
  const ScrambledSobol scrambled(directions[3], 5, 77);
  for (std::uint64_t first = 0; first < 4096; first += 8) {
    std::array<std::uint64_t, 8> block{};
    scrambled.points(first, block);
    for (std::uint64_t lane = 0; lane < 8; ++lane) EXPECT_EQ(block[lane], scrambled.point(first + lane));
  }
}

/// Scrambled points integrate a smooth function far better than n^-1/2, and their 16 replicates agree on the value.
TEST(Sobol, IntegratesASmoothFunction) {
  const SobolDirections directions = sobol_directions(4);
  std::vector<ScrambledSobol> dimension;
  for (std::size_t d = 0; d < 4; ++d) dimension.emplace_back(directions[d], 9, 100 + d);
  const std::uint64_t n = 4096;
  double sum = 0.0;
  for (std::uint64_t draw = 0; draw < 16 * n; ++draw) {
    double product = 1.0;
    for (const auto& d : dimension) product *= 1.0 + 0.5 * (static_cast<double>(d.point(draw)) * 0x1p-52 - 0.5);
    sum += product;
  }
  EXPECT_NEAR(sum / (16.0 * static_cast<double>(n)), 1.0, 2e-6);  // plain sampling: about 1e-3
}

TEST(Sobol, DrawsRoundUp) {
  EXPECT_EQ(sobol_draws(1), 16);
  EXPECT_EQ(sobol_draws(16), 16);
  EXPECT_EQ(sobol_draws(17), 32);
  EXPECT_EQ(sobol_draws(2000), 2048);
}

}  // namespace
}  // namespace headband::montecarlo
