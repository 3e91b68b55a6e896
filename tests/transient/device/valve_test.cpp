// SPDX-License-Identifier: MIT
#include "transient/device/valve.hpp"

#include "tests/support/dice.hpp"

#include <gtest/gtest.h>

#include <cmath>
#include <limits>

namespace headband::transient {
namespace {

double flow(double head, double impedance, double coefficient) {
  return valve_flow<1>(Lanes<1>(head), Lanes<1>(impedance), Lanes<1>(coefficient)).number;
}

// Q = c sqrt(H - B Q) for H > 0 in long arithmetic: c^2 (H - B Q) = Q^2.
double quadratic(double of_head, double of_impedance, double of_coefficient) {
  const auto head = static_cast<long double>(of_head), impedance = static_cast<long double>(of_impedance),
             coefficient = static_cast<long double>(of_coefficient);
  const long double half = 0.5L * impedance * coefficient * coefficient;
  return static_cast<double>(coefficient * coefficient * head /
                             (half + sqrtl(half * half + coefficient * coefficient * head)));
}

TEST(Valve, FlowSolvesItsQuadraticOverManyPowersOfTen) {
  test::Dice dice(11);
  for (int k = 0; k < 5000; ++k) {
    const double head = dice.about(1e-12, 1e4), impedance = dice.about(1e-2, 1e6), coefficient = dice.about(1e-9, 1e2);
    const double expected = quadratic(head, impedance, coefficient);
    EXPECT_NEAR(flow(head, impedance, coefficient), expected, 4.0 * std::numeric_limits<double>::epsilon() * expected);
  }
}

TEST(Valve, TurnsWithTheHead) {
  test::Dice dice(12);
  for (int k = 0; k < 200; ++k) {
    const double head = dice.about(1e-6, 1e3), impedance = dice.about(1e-1, 1e5), coefficient = dice.about(1e-6, 1e1);
    EXPECT_EQ(flow(-head, impedance, coefficient), -flow(head, impedance, coefficient));
  }
}

TEST(Valve, Limits) {
  EXPECT_EQ(flow(50.0, 200.0, 0.0), 0.0);  // shut: nothing at all
  EXPECT_EQ(flow(-50.0, 200.0, 0.0), 0.0);
  EXPECT_EQ(flow(0.0, 200.0, 0.1), 0.0);
  EXPECT_DOUBLE_EQ(flow(9.0, 0.0, 0.1), 0.3);              // between basins: c sqrt(H)
  EXPECT_NEAR(flow(50.0, 200.0, 1e6), 0.25, 0.25 * 1e-8);  // wide open: H = B Q
}

TEST(Valve, EightDrawsAtOnceGiveTheBitsOfEachAlone) {
  test::Dice dice(13);
  Lanes<8> head(0.0), impedance(0.0), coefficient(0.0);
  for (int lane = 0; lane < 8; ++lane) {
    head.set(lane, dice.between(-80.0, 80.0));
    impedance.set(lane, dice.about(1.0, 1e5));
    coefficient.set(lane, lane == 3 ? 0.0 : dice.about(1e-6, 1.0));
  }
  const Lanes<8> all = valve_flow<8>(head, impedance, coefficient);
  for (int lane = 0; lane < 8; ++lane) EXPECT_EQ(all[lane], flow(head[lane], impedance[lane], coefficient[lane]));
}

}  // namespace
}  // namespace headband::transient
