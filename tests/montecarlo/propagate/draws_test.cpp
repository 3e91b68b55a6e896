// SPDX-License-Identifier: MIT
#include "montecarlo/propagate/draws.hpp"

#include "montecarlo/sampling/sampler.hpp"

#include <gtest/gtest.h>

#include <algorithm>
#include <bit>
#include <chrono>
#include <cmath>
#include <limits>
#include <optional>
#include <span>
#include <stdexcept>
#include <thread>

namespace headband::montecarlo {
namespace {

network::Case two_unknowns() {
  network::Case c;
  for (const auto* name : {"a", "b"}) c.unknowns.push_back({.name = name, .path = {}, .place = {}, .random = true});
  return c;
}

/// y = a + 2 b; the limit is their product.
BlockModel sum_model() {
  return [](const network::Scores<8>& scores, BlockAnswers& out) {
    out.answer.resize(1);
    out.limit.resize(1);
    out.answer[0] = scores[0] + 2.0 * scores[1];
    out.limit[0] = scores[0] * scores[1];
    out.status.fill(0);
    out.cavity.fill(false);
  };
}

ScoreSource source_of(const Sampler& s) {
  return [&s](long long first, std::span<network::Scores<8>> blocks) { s.blocks(first, blocks); };
}

/// A model is told of the blocks before it is asked for them, in their order, and of every one.
TEST(Draws, ModelsKnowWhatComes) {
  const auto c = two_unknowns();
  const Sampler sampler(c, network::Design::plain, 3, 1003);
  const BlockModel sum = sum_model();
  std::span<const network::Scores<8>> coming;
  std::size_t next = 0, asked = 0, most = 0;
  std::vector<BlockModel> models{BlockModel(
      [&](const network::Scores<8>& scores, BlockAnswers& out) {
        ASSERT_LT(next, coming.size());
        EXPECT_EQ(&scores, &coming[next]);
        ++next;
        ++asked;
        sum(scores, out);
      },
      [&](std::span<const network::Scores<8>> blocks) {
        EXPECT_EQ(next, coming.size());
        coming = blocks;
        next = 0;
        most = std::max(most, blocks.size());
      })};
  DrawTable table(1, 1, 0);
  table.resize(1003);
  EXPECT_EQ(run_draws(0, 1003, source_of(sampler), models, table, {.blocks_at_once = 64}).done, 1003);
  EXPECT_EQ(asked, 126U);
  EXPECT_GT(most, 1U);
  for (long long draw = 0; draw < 1003; ++draw) {
    const auto one = sampler.draw(draw);
    EXPECT_EQ(table.answer[0][static_cast<std::size_t>(draw)], one[0].number + 2.0 * one[1].number);
  }
}

TEST(Draws, BitsDoNotDependOnThreadsOrBlocks) {
  const auto c = two_unknowns();
  for (const auto design : {network::Design::plain, network::Design::latin_hypercube, network::Design::sobol}) {
    const Sampler sampler(c, design, 3, 1003);
    std::optional<DrawTable> before;
    for (const int threads : {1, 2, 3}) {
      for (const int blocks : {1, 7}) {
        std::vector<BlockModel> models(static_cast<std::size_t>(threads), sum_model());
        DrawTable table(1, 1, 0);
        table.resize(1003);
        const auto summary = run_draws(0, 1003, source_of(sampler), models, table, {.blocks_at_once = blocks});
        EXPECT_EQ(summary.done, 1003);
        EXPECT_FALSE(summary.stopped);
        if (before) {
          EXPECT_EQ(table.answer, before->answer);
        }
        before.emplace(table);
      }
    }
    for (long long draw = 0; draw < 1003; draw += 31) {  // one draw alone
      const auto s = sampler.draw(draw);
      EXPECT_EQ(before->answer[0][static_cast<std::size_t>(draw)], s[0].number + 2.0 * s[1].number);
    }
  }
}

TEST(Draws, FailedDrawsAreKeptAsSuch) {
  const auto c = two_unknowns();
  const Sampler sampler(c, network::Design::plain, 3, 800);
  const BlockModel sum = sum_model();
  std::vector<BlockModel> models{[&](const network::Scores<8>& scores, BlockAnswers& out) {
    sum(scores, out);
    for (int lane = 0; lane < 8; ++lane) {
      if (scores[0][lane] < 0.1) out.status[static_cast<std::size_t>(lane)] = 1;
      if (scores[0][lane] > 0.9) out.answer[0].set(lane, std::nan(""));
      if (scores[1][lane] > 0.95) out.limit[0].set(lane, std::numeric_limits<double>::infinity());
    }
  }};
  DrawTable table(1, 1, 0);
  table.resize(800);
  static_cast<void>(run_draws(0, 800, source_of(sampler), models, table, {}));
  int failed = 0;
  for (long long draw = 0; draw < 800; ++draw) {
    const auto s = sampler.draw(draw);
    const auto i = static_cast<std::size_t>(draw);
    const int expected = s[0].number < 0.1 ? 1 : (s[0].number > 0.9 || s[1].number > 0.95 ? 2 : 0);
    EXPECT_EQ(table.status[i], expected);
    EXPECT_EQ(std::isnan(table.answer[0][i]), expected != 0);
    EXPECT_EQ(std::isnan(table.limit[0][i]), expected != 0);
    failed += expected != 0 ? 1 : 0;
  }
  EXPECT_GT(failed, 100);
}

TEST(Draws, ExceptionsEndInFailedDrawsAndAComplaint) {
  const auto c = two_unknowns();
  const Sampler sampler(c, network::Design::plain, 3, 160);
  const BlockModel sum = sum_model();
  const BlockModel breaking = [&](const network::Scores<8>& scores, BlockAnswers& out) {
    sum(scores, out);
    if (scores[0][0] > 0.5) throw std::runtime_error("broke off");
  };
  std::vector<BlockModel> models(2, breaking);
  DrawTable table(1, 1, 0);
  table.resize(160);
  const auto summary = run_draws(0, 160, source_of(sampler), models, table, {});
  EXPECT_EQ(summary.complaint, "broke off");
  EXPECT_EQ(summary.done, 160);
  for (long long first = 0; first < 160; first += 8) {
    const bool broke = sampler.draw(first)[0].number > 0.5;
    for (long long lane = 0; lane < 8; ++lane)
      EXPECT_EQ(table.status[static_cast<std::size_t>(first + lane)], broke ? 2 : 0);
  }
}

/// A source that breaks off spoils the block it breaks off in, not those drawn with it.
TEST(Draws, ASourceThatBreaksOffSpoilsItsBlockAlone) {
  const auto c = two_unknowns();
  const Sampler sampler(c, network::Design::plain, 3, 1024);
  std::vector<BlockModel> models{sum_model()};
  DrawTable table(1, 1, 0), whole(1, 1, 0);
  table.resize(1024);
  whole.resize(1024);
  const ScoreSource breaking = [&](long long first, std::span<network::Scores<8>> blocks) {
    sampler.blocks(first, blocks);
    const long long behind = first + 8 * static_cast<long long>(blocks.size());
    if (first <= 400 && 400 < behind) throw std::runtime_error("no score");
  };
  const auto summary = run_draws(0, 1024, breaking, models, table, {});
  EXPECT_EQ(summary.complaint, "no score");
  EXPECT_TRUE(run_draws(0, 1024, source_of(sampler), models, whole, {}).complaint.empty());
  for (std::size_t draw = 0; draw < 1024; ++draw) {
    const bool spoilt = draw / 8 == 50;
    EXPECT_EQ(table.status[draw], spoilt ? 2 : 0) << draw;
    if (spoilt) continue;
    EXPECT_EQ(table.answer[0][draw], whole.answer[0][draw]) << draw;
  }
}

TEST(Draws, StopKeepsWhatIsDoneWithoutHoles) {
  const auto c = two_unknowns();
  const Sampler sampler(c, network::Design::plain, 3, 100000);
  std::atomic<bool> stop{false};
  std::atomic<int> blocks{0};
  const BlockModel sum = sum_model();
  const BlockModel slow = [&](const network::Scores<8>& scores, BlockAnswers& out) {
    sum(scores, out);
    if (++blocks == 50) stop = true;
    std::this_thread::sleep_for(std::chrono::microseconds(50));
  };
  std::vector<BlockModel> models(3, slow);
  DrawTable table(1, 1, 0);
  table.resize(100000);
  const auto summary = run_draws(0, 100000, source_of(sampler), models, table, {.stop = &stop});
  EXPECT_TRUE(summary.stopped);
  EXPECT_GE(summary.done, 50 * 8 - 8 * 3);
  EXPECT_LT(summary.done, 100000);
  EXPECT_EQ(summary.done % 8, 0);
  for (long long draw = 0; draw < summary.done; ++draw) EXPECT_EQ(table.status[static_cast<std::size_t>(draw)], 0);
  EXPECT_EQ(table.status[static_cast<std::size_t>(summary.done)], 2);  // not computed yet
}

}  // namespace
}  // namespace headband::montecarlo
