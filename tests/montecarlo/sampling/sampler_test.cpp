// SPDX-License-Identifier: MIT
#include "montecarlo/sampling/sampler.hpp"

#include "core/base/error.hpp"
#include "core/base/hash.hpp"
#include "tests/core/base/csv.hpp"

#include <gtest/gtest.h>

#include <algorithm>
#include <cmath>
#include <numeric>

namespace headband::montecarlo {
namespace {

network::Case case_of(const std::vector<std::string>& names) {
  network::Case c;
  for (const auto& name : names) c.unknowns.push_back({.name = name, .path = {}, .place = {}, .random = true});
  return c;
}

constexpr network::Design designs[] = {
    network::Design::plain, network::Design::latin_hypercube, network::Design::sobol};

/// All scores, [unknown][draw].
std::vector<std::vector<double>> all_scores(const Sampler& s) {
  std::vector<std::vector<double>> all(s.unknowns(), std::vector<double>(static_cast<std::size_t>(s.draws())));
  network::Scores<8> block;
  for (long long first = 0; first < s.draws(); first += 8) {
    s.block(first, block);
    for (int lane = 0; lane < 8 && first + lane < s.draws(); ++lane)
      for (std::size_t u = 0; u < s.unknowns(); ++u) all[u][static_cast<std::size_t>(first + lane)] = block[u][lane];
  }
  return all;
}

double spearman(const std::vector<double>& a, const std::vector<double>& b) {
  const auto ranks = [](const std::vector<double>& x) {
    std::vector<std::size_t> order(x.size());
    std::iota(order.begin(), order.end(), 0U);
    std::sort(order.begin(), order.end(), [&](std::size_t i, std::size_t j) { return x[i] < x[j]; });
    std::vector<double> rank(x.size());
    for (std::size_t i = 0; i < order.size(); ++i) rank[order[i]] = static_cast<double>(i);
    return rank;
  };
  const auto ra = ranks(a), rb = ranks(b);
  const double n = static_cast<double>(a.size()), mean = (n - 1.0) / 2.0;
  double sum = 0.0;
  for (std::size_t i = 0; i < a.size(); ++i) sum += (ra[i] - mean) * (rb[i] - mean);
  return sum / (n * (n * n - 1.0) / 12.0);
}

TEST(Sampler, PlainDrawIsTheStatedKeying) {
  const auto c = case_of({"main wall", "end valve over"});
  const Sampler s(c, network::Design::plain, 20, 1000);
  for (const long long draw : {0LL, 5LL, 999LL}) {
    const auto scores = s.draw(draw);
    for (std::size_t u = 0; u < 2; ++u) {
      const auto bits = philox_bits(20, static_cast<std::uint64_t>(draw), base::name_number(c.unknowns[u].name));
      EXPECT_EQ(scores[u].number, (static_cast<double>(bits >> 12) + 0.5) / 4503599627370496.0);
    }
  }
}

TEST(Sampler, SobolDrawIsPointOfReplicate) {
  const auto c = case_of({"a", "b", "c"});
  const Sampler s(c, network::Design::sobol, 4, 64);
  const auto directions = sobol_directions(3);
  const ScrambledSobol third(directions[2], 4, base::name_number("c"));
  EXPECT_EQ(s.draw(37)[2].number, (static_cast<double>(third.point(37)) + 0.5) * 0x1p-52);
}

TEST(Sampler, OneDrawHasTheBitsOfItsBlock) {
  auto c = case_of({"a", "b", "c", "d", "range"});
  c.unknowns[4].random = false;
  c.together.push_back({.first = "a", .second = "c", .rank_correlation = 0.6, .place = {}});
  c.together.push_back({.first = "b", .second = "d", .rank_correlation = 1.0, .place = {}});
  for (const auto design : designs) {
    const Sampler s(c, design, 11, 100);
    const auto all = all_scores(s);
    for (long long draw = 0; draw < 100; ++draw) {
      const auto one = s.draw(draw);
      for (std::size_t u = 0; u < 5; ++u) ASSERT_EQ(one[u].number, all[u][static_cast<std::size_t>(draw)]);
      EXPECT_EQ(one[4].number, 0.5);
      EXPECT_EQ(one[1].number, one[3].number);
    }
    network::Scores<8> spaced;
    for (const long long stride : {1LL, 3LL, 13LL}) {
      for (long long first = 0; first < 100; first += 8 * stride) {
        s.spaced(first, stride, {&spaced, 1});
        for (int lane = 0; lane < 8 && first + lane * stride < 100; ++lane) {
          const auto draw = static_cast<std::size_t>(first + lane * stride);
          for (std::size_t u = 0; u < 5; ++u) ASSERT_EQ(spaced[u][lane], all[u][draw]) << stride;
        }
      }
    }
  }
}

/// Many blocks in one go, more than are worked on at a time and an odd number of them.
TEST(Sampler, BlocksAreTheBitsOfOneByOne) {
  auto c = case_of({"a", "b", "c", "range"});
  c.unknowns[3].random = false;
  c.together.push_back({.first = "a", .second = "c", .rank_correlation = 0.6, .place = {}});
  for (const auto design : designs) {
    const Sampler s(c, design, 11, 1000);
    const auto all = all_scores(s);
    for (const long long stride : {1LL, 3LL}) {
      std::vector<network::Scores<8>> blocks(37);
      s.spaced(16, stride, blocks);
      for (std::size_t i = 0; i < 8 * blocks.size(); ++i) {
        const std::size_t draw = 16 + i * static_cast<std::size_t>(stride);
        if (draw >= 1000) continue;
        for (std::size_t u = 0; u < 4; ++u)
          ASSERT_EQ(blocks[i / 8][u][static_cast<int>(i % 8)], all[u][draw]) << draw << " " << stride;
      }
    }
  }
}

TEST(Sampler, PlainAndSobolExtend) {
  const auto c = case_of({"a", "b"});
  for (const auto design : {network::Design::plain, network::Design::sobol}) {
    const Sampler small(c, design, 1, 64), large(c, design, 1, 4096);
    for (long long draw = 0; draw < 64; ++draw) {
      EXPECT_EQ(small.draw(draw)[1].number, large.draw(draw)[1].number);
    }
  }
}

TEST(Sampler, LatinHypercubeHasOneDrawAStratum) {
  const auto c = case_of({"a", "b"});
  const Sampler s(c, network::Design::latin_hypercube, 3, 250);
  for (auto scores : all_scores(s)) {
    std::sort(scores.begin(), scores.end());
    for (std::size_t i = 0; i < scores.size(); ++i) {
      EXPECT_GE(scores[i] * 250.0, static_cast<double>(i) - 1e-9);
      EXPECT_LE(scores[i] * 250.0, static_cast<double>(i) + 1.0 + 1e-9);
    }
  }
}

/// Rank correlations of a sample against the reference, in every design: 4 / sqrt N.
TEST(Sampler, RankCorrelationsAreThoseAsked) {
  const long long n = 16384;
  for (const auto& row : test::reference_rows("uq_gaussian_copula.csv")) {
    const double rank = std::stod(row[1]);
    auto c = case_of({"a", "b", "c"});
    c.together.push_back({.first = "c", .second = "a", .rank_correlation = rank, .place = {}});
    for (const auto design : designs) {
      const auto all = all_scores(Sampler(c, design, 5, n));
      EXPECT_NEAR(spearman(all[0], all[2]), rank, 4.0 / std::sqrt(static_cast<double>(n)));
      EXPECT_NEAR(spearman(all[0], all[1]), 0.0, 4.0 / std::sqrt(static_cast<double>(n)));
      // the margins stay even
      EXPECT_NEAR(std::accumulate(all[2].begin(), all[2].end(), 0.0) / static_cast<double>(n),
                  0.5,
                  4.0 / std::sqrt(12.0 * static_cast<double>(n)));
    }
  }
}

TEST(Sampler, TwinIsIndependent) {
  const auto c = case_of({"a", "b"});
  for (const auto design : designs) {
    const Sampler s(c, design, 5, 4096);
    const auto one = all_scores(s), other = all_scores(s.twin());
    for (std::size_t i = 0; i < 2; ++i)
      for (std::size_t j = 0; j < 2; ++j) EXPECT_NEAR(spearman(one[i], other[j]), 0.0, 4.0 / std::sqrt(4096.0));
  }
}

TEST(Sampler, RefusesMoreUnknownsThanDimensions) {
  network::Case c;
  for (int i = 0; i < 1834; ++i)
    c.unknowns.push_back({.name = std::to_string(i), .path = {}, .place = {}, .random = true});
  EXPECT_THROW(Sampler(c, network::Design::sobol, 1, 16), base::InputError);
  EXPECT_NO_THROW(Sampler(c, network::Design::plain, 1, 16));
}

}  // namespace
}  // namespace headband::montecarlo
