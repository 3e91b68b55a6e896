// SPDX-License-Identifier: MIT
//
// How a valve, a draw-off or a basin moves: convention (o) of the manual at times of its own.
#include "transient/device/movement.hpp"

#include "tests/support/dice.hpp"

#include <gtest/gtest.h>

#include <algorithm>
#include <cmath>
#include <numbers>

namespace headband::transient {
namespace {

constexpr double step = 0.1;

std::vector<Segment> held(double position) { return {Segment{-1.0, position}}; }

Stroke straight(double at, double to, double over) {
  Stroke s;
  s.at = at;
  s.to = to;
  s.over = over;
  return s;
}

/// Positions at rows k step of a march, k = 0 .. rows.
std::vector<double> marched(const std::vector<Segment>& chain, int rows, double low = 0.0, double high = 1.0) {
  Movement<1> m(low, high);
  m.chain(0) = chain;
  m.rewind();
  std::vector<double> positions;
  for (int k = 0; k <= rows; ++k) positions.push_back(m.move_to(Lanes<1>(step * k)).number);
  return positions;
}

TEST(Movement, WithoutAStrokeNothingMoves) {
  for (const double x : marched(held(0.7), 20)) EXPECT_EQ(x, 0.7);
}

TEST(Movement, AStrokeIsStraightOverItsOwnTimeAndThenHeld) {
  auto chain = held(0.8);
  add_stroke(chain, straight(0.35, 0.2, 1.5), step);  // begins and ends between rows
  const auto x = marched(chain, 40);
  for (int k = 0; k <= 40; ++k) {
    const double t = step * k, share = std::clamp((t - 0.35) / 1.5, 0.0, 1.0);
    EXPECT_NEAR(x[static_cast<std::size_t>(k)], 0.8 - 0.6 * share, 1e-14) << t;
  }
  EXPECT_EQ(x.back(), 0.2);  // just what was asked for, not what the slope adds up to
}

TEST(Movement, AnInstantStrokeActsAfterItsRow) {
  auto chain = held(1.0);
  add_stroke(chain, straight(0.3, 0.0, 0.0), step);
  const auto x = marched(chain, 6);
  EXPECT_EQ(x[3], 1.0);  // the row at te is the state before
  EXPECT_EQ(x[4], 0.0);
  EXPECT_EQ(position_at(chain, 0.3 + 0.5 * step), 0.0);  // 0+
}

TEST(Movement, ANewStrokeTakesOverFromThePositionHeld) {
  auto chain = held(1.0);
  add_stroke(chain, straight(0.0, 0.0, 4.0), step);
  add_stroke(chain, straight(1.0, 1.0, 0.5), step);  // at 0.75 by then; its 0.5 s are for this movement alone
  const auto x = marched(chain, 60);
  EXPECT_NEAR(x[5], 0.875, 1e-14);
  EXPECT_NEAR(x[10], 0.75, 1e-14);
  EXPECT_NEAR(x[12], 0.75 + 0.25 * 0.4, 1e-14);
  for (int k = 15; k <= 60; ++k)
    EXPECT_NEAR(x[static_cast<std::size_t>(k)], 1.0, 1e-14) << k;  // the first is forgotten
}

TEST(Movement, AStrokeAfterTheEndOfAnotherStartsFromItsTarget) {
  auto chain = held(1.0);
  add_stroke(chain, straight(0.0, 0.4, 1.0), step);
  add_stroke(chain, straight(2.0, 0.0, 1.0), step);
  const auto x = marched(chain, 40);
  EXPECT_NEAR(x[15], 0.4, 1e-15);
  EXPECT_NEAR(x[25], 0.2, 1e-14);
  EXPECT_EQ(x[35], 0.0);
}

TEST(Movement, ATravelTableIsFollowedByStraightLinesFromItsOwnTime) {
  Stroke s = straight(0.5, 0.0, 3.0);
  s.travel_time = {0.0, 1.0, 3.0};
  s.travel_position = {1.0, 0.3, 0.0};
  auto chain = held(1.0);
  add_stroke(chain, s, step);
  const auto x = marched(chain, 50);
  for (int k = 0; k <= 50; ++k) {
    const double t = step * k - 0.5;
    const double expected = t <= 0.0 ? 1.0 : t <= 1.0 ? 1.0 - 0.7 * t : t <= 3.0 ? 0.3 - 0.15 * (t - 1.0) : 0.0;
    EXPECT_NEAR(x[static_cast<std::size_t>(k)], expected, 1e-14) << t;
  }
}

TEST(Movement, ATravelTableThatStartsLateIsReachedFromThePositionHeld) {
  Stroke s = straight(0.0, 0.0, 0.0);
  s.travel_time = {1.0, 2.0};
  s.travel_position = {0.5, 0.1};
  auto chain = held(0.9);
  add_stroke(chain, s, step);
  EXPECT_NEAR(position_at(chain, 0.5), 0.7, 1e-15);
  EXPECT_NEAR(position_at(chain, 1.5), 0.3, 1e-15);
  EXPECT_NEAR(position_at(chain, 9.0), 0.1, 1e-15);
}

TEST(Movement, ASwingIsASineAboutThePositionHeldCutAtBothEnds) {
  Stroke s = straight(0.4, 0.0, 0.0);
  s.swing = 0.3;
  s.period = 2.7;
  for (const double about : {0.5, 0.85, 0.1}) {
    auto chain = held(about);
    add_stroke(chain, s, step);
    const auto x = marched(chain, 80);
    bool cut = false;
    for (int k = 0; k <= 80; ++k) {
      const double t = step * k - 0.4;
      const double sine = about + (t < 0.0 ? 0.0 : 0.3 * std::sin(2.0 * std::numbers::pi * t / 2.7));
      EXPECT_NEAR(x[static_cast<std::size_t>(k)], std::clamp(sine, 0.0, 1.0), 1e-13) << about << " " << t;
      cut = cut || sine < 0.0 || sine > 1.0;
    }
    EXPECT_EQ(cut, about != 0.5);
  }
}

TEST(Movement, AStrokeTakesOverFromASwingWhereItIsCut) {
  Stroke s = straight(0.0, 0.0, 0.0);
  s.swing = 0.4;
  s.period = 4.0;
  auto chain = held(0.8);
  add_stroke(chain, s, step, 0.0, 1.0);
  add_stroke(chain, straight(1.0, 0.0, 2.0), step, 0.0, 1.0);  // at the crest: 1.2, held at 1
  const auto x = marched(chain, 40);
  for (int k = 10; k <= 30; ++k) EXPECT_NEAR(x[static_cast<std::size_t>(k)], 1.0 - 0.05 * (k - 10), 1e-13) << k;
  EXPECT_EQ(x.back(), 0.0);
}

TEST(Movement, AStrokeBesideAnInstantTakesOverWhereThatOneEnded) {
  for (const double at : {0.3, 0.32, 0.35}) {  // the instant's own time, and just before and at its place between rows
    auto chain = held(1.0);
    add_stroke(chain, straight(0.3, 0.5, 0.0), step);
    add_stroke(chain, straight(at, 0.0, 1.0), step);
    const auto x = marched(chain, 20);
    EXPECT_EQ(x[3], 1.0) << at;  // the row at te is the state before
    for (int k = 4; k <= 20; ++k)
      EXPECT_NEAR(x[static_cast<std::size_t>(k)], std::max(0.0, 0.5 * (1.0 - (step * k - at))), 1e-13)
          << at << " " << k;
  }
}

TEST(Movement, AnInstantBesideAStrokeEndsIt) {
  auto chain = held(1.0);
  add_stroke(chain, straight(0.3, 0.0, 1.0), step);
  add_stroke(chain, straight(0.3, 0.5, 0.0), step);
  const auto x = marched(chain, 20);
  EXPECT_EQ(x[3], 1.0);
  for (std::size_t k = 4; k <= 20; ++k) EXPECT_EQ(x[k], 0.5) << k;
}

TEST(Movement, EightDrawsMoveAsEachAlone) {
  test::Dice dice(5);
  for (int k = 0; k < 200; ++k) {
    Movement<8> many(0.0, 1.0);
    std::vector<std::vector<Segment>> chains;
    for (int lane = 0; lane < 8; ++lane) {
      auto chain = held(dice.unit());
      double at = 0.0;
      for (int n = dice.upto(3); n > 0; --n) {
        at += dice.between(0.0, 1.5);
        Stroke s = straight(at, dice.unit(), dice.chance(0.3) ? 0.0 : dice.between(0.05, 2.0));
        if (dice.chance(0.2)) {
          s.swing = dice.between(0.1, 0.6);
          s.period = dice.between(0.5, 3.0);
        }
        add_stroke(chain, s, step, 0.0, 1.0);
      }
      chains.push_back(chain);
      many.chain(lane) = chain;
    }
    many.rewind();
    std::vector<std::vector<double>> alone;
    for (const auto& chain : chains) alone.push_back(marched(chain, 60));
    for (std::size_t row = 0; row <= 60; ++row) {
      const Lanes<8> x = many.move_to(Lanes<8>(step * static_cast<double>(row)));
      for (int lane = 0; lane < 8; ++lane) ASSERT_EQ(x[lane], alone[static_cast<std::size_t>(lane)][row]) << row;
    }
  }
}

}  // namespace
}  // namespace headband::transient
