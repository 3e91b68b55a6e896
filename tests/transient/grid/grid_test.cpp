// SPDX-License-Identifier: MIT
//
// The grid rule of docs/methods.md against numbers done by hand, and against a plain search beside it.
#include "transient/grid/grid.hpp"

#include "tests/support/dice.hpp"

#include <gtest/gtest.h>

#include <algorithm>
#include <cmath>

namespace headband::transient {
namespace {

constexpr double speed = 1000.0;

/// Pipes by their travel times [s], all of wave speed 1000 m/s.
GridRequest of_times(const std::vector<double>& times, int reaches) {
  GridRequest r;
  r.reaches = reaches;
  for (const double t : times) {
    GridPipe& p = r.pipes.emplace_back();
    p.length = t * speed;
    p.wave_speed = speed;
  }
  return r;
}

Grid chosen(const GridRequest& r) {
  Grid g;
  choose_grid(r, g);
  return g;
}

TEST(Grid, OnePipeGetsTheReachesAskedFor) {
  const Grid g = chosen(of_times({0.8}, 40));
  EXPECT_EQ(g.status, GridStatus::good);
  EXPECT_DOUBLE_EQ(g.time_step, 0.02);
  EXPECT_EQ(g.reaches, std::vector<int>{40});
  EXPECT_EQ(g.worst_change, 0.0);
  EXPECT_DOUBLE_EQ(g.marched_speed[0], speed);
}

TEST(Grid, SearchKeepsTheSmallestWorstChange) {
  // 0.55 s / 11 = 0.05 s divides 1 s; 10 and 12 reaches change it by 1.0 and 0.8 %
  const Grid g = chosen(of_times({1.0, 0.55}, 10));
  EXPECT_DOUBLE_EQ(g.time_step, 0.05);
  EXPECT_EQ(g.reaches, (std::vector<int>{20, 11}));
  EXPECT_LT(g.worst_change, 1e-12);
}

TEST(Grid, SearchEndsAtAQuarterMore) {
  // 0.52 s / 13 = 0.04 s divides 1 s, but 13 is past 1.25 x 10: 12 is the best there
  const Grid shy = chosen(of_times({1.0, 0.52}, 10));
  EXPECT_DOUBLE_EQ(shy.time_step, 0.52 / 12);
  EXPECT_EQ(shy.reaches, (std::vector<int>{23, 12}));
  EXPECT_NEAR(shy.worst_change, 1.0 / (23 * 0.52 / 12) - 1.0, 1e-12);
  EXPECT_EQ(shy.worst_pipe, 0);
  const Grid reached = chosen(of_times({1.0, 0.52}, 11));  // 1.25 x 11 = 13.75
  EXPECT_EQ(reached.reaches, (std::vector<int>{25, 13}));
}

TEST(Grid, OnATieTheLargerStepIsKept) {
  EXPECT_DOUBLE_EQ(chosen(of_times({1.0, 0.5}, 20)).time_step, 0.025);
  // changes of rounding size, within 1e-12 of each other, are a tie too
  EXPECT_NEAR(chosen(of_times({1.0, 0.5 * (1.0 + 4e-13)}, 20)).time_step, 0.025, 1e-13);
  EXPECT_NEAR(chosen(of_times({1.0, 0.5 * (1.0 - 4e-13)}, 20)).time_step, 0.025, 1e-13);
}

TEST(Grid, AGivenStepIsNotSearched) {
  GridRequest r = of_times({1.0, 0.55}, 10);
  r.time_step = 0.0517;  // 0.05 beside it would change nothing
  const Grid g = chosen(r);
  EXPECT_EQ(g.status, GridStatus::good);
  EXPECT_EQ(g.time_step, 0.0517);
  EXPECT_EQ(g.reaches, (std::vector<int>{19, 11}));
  EXPECT_NEAR(g.worst_change, 1.0 - 0.55 / (11 * 0.0517), 1e-12);
  EXPECT_EQ(g.worst_pipe, 1);
}

TEST(Grid, LongIsAFiftiethOfTheLongest) {
  const Grid g = chosen(of_times({1.0, 0.02, 0.0199}, 4));
  EXPECT_EQ(g.long_pipe, (std::vector<bool>{true, true, false}));
  EXPECT_DOUBLE_EQ(g.time_step, 0.005);  // of the shortest long pipe
  EXPECT_EQ(g.reaches, (std::vector<int>{200, 4, 4}));
  // what changes on a short pipe counts nowhere
  EXPECT_LT(g.worst_change, 1e-12);
}

TEST(Grid, ShortPipesUnderHalfAStepOrChangedTooMuchAreRigid) {
  const std::vector<double> times = {1.0, 0.0199, 0.0185, 0.0104, 0.0107, 0.0051, 0.0049};
  const Grid g = chosen(of_times(times, 100));  // step 0.01 s: the short ones hold 1.99, 1.85, 1.04 ... steps
  EXPECT_EQ(g.status, GridStatus::good);
  EXPECT_DOUBLE_EQ(g.time_step, 0.01);
  // 0.5 %, 7.5 % off: rigid, 4 %, 7 % off: rigid, 49 % off: rigid, under half a step: rigid
  EXPECT_EQ(g.reaches, (std::vector<int>{100, 2, 0, 1, 0, 0, 0}));
  EXPECT_NEAR(g.marched_speed[1], 995.0, 1e-9);
  EXPECT_NEAR(g.marched_speed[3], 1040.0, 1e-9);
  for (const std::size_t i : {2U, 4U, 5U, 6U}) EXPECT_EQ(g.marched_speed[i], speed) << times[i];
  GridRequest lenient = of_times(times, 100);
  lenient.pipes[2].allowed_change = 0.08;
  EXPECT_EQ(chosen(lenient).reaches[2], 2);
}

TEST(Grid, FivePercentOnALongPipeIsRefusedUnlessAllowed) {
  GridRequest r = of_times({0.5, 0.54}, 10);
  r.time_step = 0.1;
  const Grid refused = chosen(r);
  EXPECT_EQ(refused.status, GridStatus::change_refused);
  EXPECT_EQ(refused.worst_pipe, 1);
  EXPECT_NEAR(refused.worst_change, 0.08, 1e-12);
  EXPECT_DOUBLE_EQ(refused.allowed, 0.05);
  EXPECT_NE(refusal(refused, "second").find("'second' by 8.0 %, more than 5.0 %"), std::string::npos);
  r.pipes[1].allowed_change = 0.09;
  EXPECT_EQ(chosen(r).status, GridStatus::good);
  r.pipes[1].allowed_change = 0.08;  // just what it is: a tie is kept
  EXPECT_EQ(chosen(r).status, GridStatus::good);
  r.pipes[1].allowed_change = 0.07;
  EXPECT_EQ(chosen(r).status, GridStatus::change_refused);
  GridRequest within = of_times({0.5, 0.5249}, 10);
  within.time_step = 0.1;
  EXPECT_EQ(chosen(within).status, GridStatus::good);
}

TEST(Grid, TheWaveSpeedFurthestOverItsBoundIsNamed) {
  GridRequest r = of_times({0.5, 0.53, 0.545, 0.55}, 10);
  r.time_step = 0.1;
  r.pipes[3].allowed_change = 0.2;
  const Grid g = chosen(r);
  EXPECT_EQ(g.status, GridStatus::change_refused);
  EXPECT_EQ(g.worst_pipe, 2);
}

TEST(Grid, UncertainTravelTimesAreChangedByOnePercentAtMost) {
  GridRequest r = of_times({0.5, 0.515}, 10);
  r.time_step = 0.1;
  EXPECT_DOUBLE_EQ(chosen(r).time_step, 0.1);  // 3 % of a certain one
  r.pipes[1].uncertain = true;
  const Grid g = chosen(r);  // 5.15, 10.3, 20.6, 41.2 steps: 3, 3, 1.9, 0.5 %
  EXPECT_EQ(g.status, GridStatus::good);
  EXPECT_DOUBLE_EQ(g.time_step, 0.0125);
  EXPECT_EQ(g.reaches, (std::vector<int>{40, 41}));
  EXPECT_NEAR(g.worst_change, 41.2 / 41 - 1.0, 1e-12);
  r.pipes[1].allowed_change = 0.03;
  EXPECT_DOUBLE_EQ(chosen(r).time_step, 0.1);  // its user allows it
  r.pipes[1].allowed_change = 0.02;
  EXPECT_DOUBLE_EQ(chosen(r).time_step, 0.025);
  r.pipes[1].uncertain = false;
  EXPECT_EQ(chosen(r).status, GridStatus::change_refused);  // a certain one is refused at once
}

TEST(Grid, EightTimesIsTheMostAndThenThePipeIsNamed) {
  GridRequest r = of_times({0.5, 0.53}, 10);
  r.time_step = 0.5;  // 1.06 steps; 8.48 at an eighth: 6 % off
  r.pipes[1].uncertain = true;
  const Grid g = chosen(r);
  EXPECT_EQ(g.status, GridStatus::uncertain_refused);
  EXPECT_EQ(g.worst_pipe, 1);
  EXPECT_DOUBLE_EQ(g.time_step, 0.5);  // told for the grid that was asked
  const std::string words = refusal(g, "second");
  EXPECT_NE(words.find("'second'"), std::string::npos);
  EXPECT_NE(words.find("8 times"), std::string::npos);
  EXPECT_NE(words.find("1.0 %"), std::string::npos);
  r.pipes[1].length = 0.5065 * speed;  // 8.104 at an eighth: 1.3 %; 0.9 % further on needs 16 times
  EXPECT_EQ(chosen(r).status, GridStatus::uncertain_refused);
  r.pipes[1].length = 0.5045 * speed;  // 0.9 % at once
  EXPECT_DOUBLE_EQ(chosen(r).time_step, 0.5);
}

TEST(Grid, DoublingSearchesBetweenTheDoubledReachesAndAQuarterMore) {
  GridRequest r = of_times({1.0, 0.9}, 1);  // only n = 1: 1.0/0.9 is 11 % off 1
  r.pipes[0].uncertain = r.pipes[1].uncertain = true;
  const Grid g = chosen(r);  // n = 2 (2.2), 4..5 (4.4, 5.6), 8..10: 9 of 0.1 s divides both
  EXPECT_EQ(g.status, GridStatus::good);
  EXPECT_EQ(g.reaches, (std::vector<int>{10, 9}));
}

TEST(Grid, AGridPairDoublesTheVerySameCounts) {
  const Grid g = chosen(of_times({1.0, 0.52, 0.004}, 10));
  const Grid fine = refined(g, 2), finest = refined(g, 4);
  ASSERT_EQ(g.reaches, (std::vector<int>{23, 12, 0}));
  EXPECT_EQ(fine.reaches, (std::vector<int>{46, 24, 0}));  // a search of its own would take 25 and 13 doubled
  EXPECT_EQ(finest.reaches, (std::vector<int>{92, 48, 0}));
  EXPECT_EQ(fine.time_step, 0.5 * g.time_step);
  EXPECT_EQ(finest.time_step, 0.25 * g.time_step);
  EXPECT_EQ(fine.marched_speed, g.marched_speed);
  EXPECT_EQ(fine.worst_change, g.worst_change);
}

TEST(Grid, APipeBesideAQuickMovementMustCarryWaves) {
  GridRequest r = of_times({1.0, 0.0098}, 20);
  EXPECT_EQ(chosen(r).reaches, (std::vector<int>{20, 0}));
  r.pipes[1].fastest_movement = 0.1;  // two steps of 0.05 s
  EXPECT_EQ(chosen(r).reaches, (std::vector<int>{20, 0}));
  r.pipes[1].fastest_movement = 0.09;
  const Grid g = chosen(r);  // 20 .. 25 and 40 .. 50 reaches keep it rigid, so do 80 .. 96: 0.941 of a step
  EXPECT_EQ(g.status, GridStatus::good);
  EXPECT_EQ(g.reaches, (std::vector<int>{97, 1}));
  // a finer step at which the movement takes two steps or more is not enough
  EXPECT_LT(g.time_step, 0.5 * r.pipes[1].fastest_movement);
}

TEST(Grid, TheAskedReachesAreSearchedFirstForAPipeThatMustCarryWaves) {
  GridRequest r = of_times({3.0, 0.045}, 60);  // 60 reaches: 0.9 of a step; 65: 0.975
  EXPECT_EQ(chosen(r).reaches, (std::vector<int>{60, 0}));
  r.pipes[1].fastest_movement = 0.0;
  EXPECT_EQ(chosen(r).reaches, (std::vector<int>{64, 1}));  // 0.96 is the first within 5 %
}

TEST(Grid, TooShortForAnyGridBesideAQuickMovementIsRefused) {
  GridRequest r = of_times({1.0, 0.0005}, 20);  // needs 2 000 reaches, eight times are 200
  for (const double movement : {0.0, 0.01}) {
    r.pipes[1].fastest_movement = movement;
    const Grid g = chosen(r);
    EXPECT_EQ(g.status, GridStatus::rigid_refused);
    EXPECT_EQ(g.worst_pipe, 1);
    EXPECT_DOUBLE_EQ(g.time_step, 0.05);
    EXPECT_NE(refusal(g, "stub").find("'stub' is too short for a wave"), std::string::npos);
  }
  r.pipes[1].fastest_movement = 6.0;
  EXPECT_EQ(chosen(r).status, GridStatus::good);
  r.pipes[0].fastest_movement = 0.0;  // at an end of the long pipe alone nothing is asked of the short one
  EXPECT_EQ(chosen(r).status, GridStatus::good);
}

TEST(Grid, WithoutAWaveSpeedThereIsNoGrid) {
  for (const double bad : {0.0, std::nan(""), std::numeric_limits<double>::infinity()}) {
    GridRequest r = of_times({1.0, 0.5}, 10);
    r.pipes[1].wave_speed = bad;
    const Grid g = chosen(r);
    EXPECT_EQ(g.status, GridStatus::not_finite);
    EXPECT_EQ(g.worst_pipe, 1);
    EXPECT_EQ(refusal(g, "x"), "pipe 'x' has no wave speed");
  }
}

// The rule once more as a plain search: every n, every pipe.
Grid plain_search(const GridRequest& r, int factor) {
  const auto travel = [&](std::size_t i) { return r.pipes[i].length / r.pipes[i].wave_speed; };
  double longest = 0.0, shortest = 1e300;
  for (std::size_t i = 0; i < r.pipes.size(); ++i) longest = std::max(longest, travel(i));
  for (std::size_t i = 0; i < r.pipes.size(); ++i)
    if (travel(i) >= longest / 50.0) shortest = std::min(shortest, travel(i));
  Grid best;
  best.worst_change = 1e300;
  const int first = r.reaches * factor;
  for (int n = first; 4 * n <= 5 * first; ++n) {
    Grid g;
    g.time_step = shortest / n;
    for (std::size_t i = 0; i < r.pipes.size(); ++i) {
      const double steps = travel(i) / g.time_step, count = std::max(1.0, std::round(steps));
      const double change = std::fabs(steps / count - 1.0);
      const bool is_long = travel(i) >= longest / 50.0;
      if (is_long) g.worst_change = std::max(g.worst_change, change);
      g.reaches.push_back(!is_long && (steps < 0.5 || change > 0.05) ? 0 : static_cast<int>(count));
    }
    if (g.worst_change < best.worst_change - 1e-12) best = g;
  }
  return best;
}

TEST(Grid, AnyNetworkGetsWhatAPlainSearchGives) {
  test::Dice dice(20261201);
  int refused = 0, finer = 0, rigid = 0;
  for (int k = 0; k < 6000; ++k) {
    GridRequest r;
    r.reaches = 1 + dice.upto(60);
    const bool uncertain = dice.chance(0.4);
    const int pipes = 1 + dice.upto(7);
    for (int i = 0; i < pipes; ++i) {
      GridPipe& p = r.pipes.emplace_back();
      p.length = dice.about(1.0, 5000.0);
      p.wave_speed = dice.between(200.0, 1400.0);
      p.uncertain = uncertain;
    }
    const double bound = uncertain ? 0.01 : 0.05;
    const Grid g = chosen(r), asked = plain_search(r, 1);
    Grid expected = asked;
    int factor = 1;
    while (uncertain && expected.worst_change > bound && factor < 8) expected = plain_search(r, factor *= 2);
    if (expected.worst_change > bound) {
      ++refused;
      EXPECT_EQ(g.status, uncertain ? GridStatus::uncertain_refused : GridStatus::change_refused) << k;
      EXPECT_NEAR(g.time_step, asked.time_step, 1e-12 * asked.time_step) << k;
      continue;
    }
    ASSERT_EQ(g.status, GridStatus::good) << k;
    EXPECT_NEAR(g.time_step, expected.time_step, 1e-12 * g.time_step) << k;
    EXPECT_EQ(g.reaches, expected.reaches) << k;
    EXPECT_NEAR(g.worst_change, expected.worst_change, 1e-12) << k;
    finer += factor > 1 ? 1 : 0;
    rigid += std::count(g.reaches.begin(), g.reaches.end(), 0) > 0 ? 1 : 0;
  }
  // the draw of cases reaches every branch
  EXPECT_GT(refused, 50);
  EXPECT_GT(finer, 50);
  EXPECT_GT(rigid, 200);
}

}  // namespace
}  // namespace headband::transient
