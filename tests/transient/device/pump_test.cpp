// SPDX-License-Identifier: MIT
//
// One pump in all its states: what the affinity laws, the given points and a four-quadrant table say of it.
#include "transient/device/pump.hpp"

#include "tests/core/base/csv.hpp"
#include "tests/support/dice.hpp"

#include <gtest/gtest.h>

#include <cmath>
#include <numbers>

namespace headband::transient {
namespace {

using Points = std::vector<base::Lanes<1>>;

// 60 m at rest, falling by the square of the flow: 60 - 300 Q^2.
double square_law(double flow) { return 60.0 - 300.0 * flow * flow; }

PumpModel by_points(const std::vector<double>& flows) {
  PumpModel pump;
  Points x, y;
  for (const double q : flows) {
    x.emplace_back(q);
    y.emplace_back(square_law(q));
  }
  pump.curve.fit(x, y);
  pump.shut_off_torque = 0.45;
  pump.rated_flow = 0.25;
  pump.rated_head = square_law(0.25);
  return pump;
}

PumpModel with_table() {
  PumpModel pump;
  pump.curve.fit({0.0, 0.2, 0.36}, {57.0, 45.0, 30.0});
  pump.shut_off_torque = 0.45;
  pump.rated_flow = 0.28;
  pump.rated_head = 40.0;
  pump.quadrants = &quadrants_ns25();
  return pump;
}

TEST(PumpModel, PassesThroughItsPointsAtRatedSpeed) {
  const std::vector<double> flow = {0.0, 0.08, 0.15, 0.21, 0.3}, head = {44.0, 45.0, 42.0, 37.0, 20.0};
  PumpModel pump;
  Points x(flow.begin(), flow.end()), y(head.begin(), head.end());
  pump.curve.fit(x, y);
  for (std::size_t i = 0; i < flow.size(); ++i) EXPECT_NEAR(pump.at(flow[i], 1.0).head, head[i], 1e-12 * 45.0);
}

TEST(PumpModel, ASquareLawStaysOneAtEverySpeed) {
  // affinity: H(Q, s) = s^2 60 - 300 Q^2 for a curve of this kind, whatever number of points it was given by
  for (const auto& flows : {std::vector{0.0, 0.3}, std::vector{0.0, 0.1, 0.3}}) {
    const PumpModel pump = by_points(flows);
    for (const double speed : {1.3, 1.0, 0.7, 0.2, 0.01})
      for (const double flow : {0.0, 0.003, 0.1, 0.25, 0.4}) {
        const PumpPoint p = pump.at(flow, speed);
        EXPECT_NEAR(p.head, speed * speed * 60.0 - 300.0 * flow * flow, 1e-11 * 60.0) << flow << " " << speed;
        EXPECT_NEAR(p.head_by_flow, -600.0 * flow, 1e-9) << flow << " " << speed;
        EXPECT_NEAR(p.head_by_speed, 120.0 * speed, 1e-9) << flow << " " << speed;
      }
    // at rest it is a resistance: the square of the flow alone, to the square of the least speed followed (1e-4)
    for (const double flow : {0.01, 0.1, 0.3}) {
      EXPECT_NEAR(pump.at(flow, 0.0).head, -300.0 * flow * flow, 1e-6 * 300.0 * flow * flow);
      EXPECT_NEAR(pump.at(flow, 0.0).head_by_flow, -600.0 * flow, 1e-6 * 600.0 * flow);
    }
    EXPECT_EQ(pump.at(0.0, 0.0).head, 0.0);
  }
}

TEST(PumpModel, AffinityLawsHoldForAnyCurve) {
  PumpModel pump = by_points({0.0, 0.3});
  pump.curve.fit({0.0, 0.08, 0.15, 0.21, 0.3}, {44.0, 45.0, 42.0, 37.0, 20.0});
  pump.has_torque_table = true;
  pump.torque_curve.fit({0.0, 0.1, 0.2, 0.3}, {0.45, 0.7, 0.95, 1.1});
  test::Dice dice(7);
  for (int k = 0; k < 500; ++k) {
    const double flow = dice.between(0.0, 0.4), speed = dice.between(0.02, 1.4);
    const PumpPoint scaled = pump.at(speed * flow, speed), rated = pump.at(flow, 1.0);
    EXPECT_NEAR(scaled.head, speed * speed * rated.head, 1e-12 * 60.0);
    EXPECT_NEAR(scaled.torque, speed * speed * rated.torque, 1e-12);
    // Euler on a function of second degree: 2 H = Q dH/dQ + s dH/ds
    EXPECT_NEAR(2.0 * scaled.head, speed * flow * scaled.head_by_flow + speed * scaled.head_by_speed, 1e-10);
  }
}

TEST(PumpModel, TorqueWithoutATableRisesStraightFromShutOffToRated) {
  const PumpModel pump = by_points({0.0, 0.3});
  EXPECT_NEAR(pump.at(0.25, 1.0).torque, 1.0, 1e-14);
  EXPECT_NEAR(pump.at(0.0, 1.0).torque, 0.45, 1e-14);
  EXPECT_NEAR(pump.at(0.125, 1.0).torque, 0.5 * (0.45 + 1.0), 1e-14);
  EXPECT_NEAR(pump.at(0.125, 0.5).torque, 0.25, 1e-14);  // the rated point at half speed
}

TEST(PumpModel, RunDownAtNoFlowMeetsItsEquation) {
  // I ds/dt = -T(s), T = 0.45 s^2 of the rated torque: s = 1 / (1 + 0.45 t), t in shares of I w / T_rated. The march's
  // implicit trapezoid s - s' + dt/2 (T + T') = 0 is solved here by the same slopes and must close in at second order.
  const PumpModel pump = by_points({0.0, 0.3});
  const auto after = [&](int steps) {
    const double dt = 3.0 / steps;
    double s = 1.0;
    for (int k = 0; k < steps; ++k) {
      const double before = s, torque = pump.at(0.0, s).torque;
      for (int i = 0; i < 50; ++i) {
        const PumpPoint p = pump.at(0.0, s);
        s -= (s - before + 0.5 * dt * (torque + p.torque)) / (1.0 + 0.5 * dt * p.torque_by_speed);
      }
    }
    return s;
  };
  const double exact = 1.0 / (1.0 + 0.45 * 3.0);
  const double coarse = after(50) - exact, fine = after(100) - exact;
  EXPECT_LT(std::fabs(fine), 1e-5);
  EXPECT_NEAR(coarse / fine, 4.0, 0.02);
}

TEST(FourQuadrants, TableGivesItsKnots) {
  const auto& table = quadrants_ns25();
  const auto rows = test::reference_rows("transient/T07c_suter_Ns25.csv");
  ASSERT_EQ(rows.size(), table.angle.size());
  for (std::size_t k = 0; k < rows.size(); ++k) {
    EXPECT_NEAR(table.angle[k], std::stod(rows[k][1]), 1e-11);
    EXPECT_EQ(table.head[k], std::stod(rows[k][2]));
    EXPECT_EQ(table.torque[k], std::stod(rows[k][3]));
    if (k == 0 || k + 1 == rows.size()) continue;
    const double v = -std::sin(table.angle[k]), alpha = -std::cos(table.angle[k]);  // atan2(v, alpha) = x - pi
    EXPECT_NEAR(read_quadrants(table, table.head, v, alpha).value, table.head[k], 1e-12);
  }
}

TEST(PumpModel, SlopesAreThoseOfTheValues) {
  const PumpModel pump = with_table();
  for (const auto& [q, a] : {std::pair{0.2, 0.8}, {-0.05, 0.7}, {-0.2, 0.1}, {0.1, -0.03}, {0.1, -0.4}, {-0.2, -0.6}}) {
    const double dq = 1e-7, da = 1e-7;
    const auto p = pump.at(q, a);
    EXPECT_NEAR(p.head_by_flow, (pump.at(q + dq, a).head - pump.at(q - dq, a).head) / (2 * dq), 1e-3) << q << " " << a;
    EXPECT_NEAR(p.head_by_speed, (pump.at(q, a + da).head - pump.at(q, a - da).head) / (2 * da), 1e-3) << q << " " << a;
    EXPECT_NEAR(p.torque_by_flow, (pump.at(q + dq, a).torque - pump.at(q - dq, a).torque) / (2 * dq), 1e-4);
    EXPECT_NEAR(p.torque_by_speed, (pump.at(q, a + da).torque - pump.at(q, a - da).torque) / (2 * da), 1e-4);
  }
  // joined without a jump where flow and speed turn
  for (const double a : {0.2, 0.6, 1.0}) {
    EXPECT_NEAR(pump.at(1e-12, a).head, pump.at(-1e-12, a).head, 1e-8);
    EXPECT_NEAR(pump.at(1e-12, a).torque, pump.at(-1e-12, a).torque, 1e-8);
  }
  for (const double q : {0.05, 0.2}) {
    EXPECT_NEAR(pump.at(q, 1e-12).head, pump.at(q, -1e-12).head, 1e-8);
    EXPECT_NEAR(pump.at(q, 1e-12).torque, pump.at(q, -1e-12).torque, 1e-8);
  }
}

TEST(PumpModel, IsContinuousAllAroundTheFourQuadrants) {
  const PumpModel pump = with_table();
  for (int k = 0; k < 3600; ++k) {
    const double angle = std::numbers::pi / 1800.0 * k;  // the axes, where curve and table meet, among them
    const auto at = [&](double x) { return pump.at(0.28 * std::cos(x), std::sin(x)); };
    const PumpPoint before = at(angle - 1e-9), after = at(angle + 1e-9);
    ASSERT_NEAR(before.head, after.head, 1e-5) << angle;
    ASSERT_NEAR(before.torque, after.torque, 1e-6) << angle;
  }
}

TEST(PumpModel, IsTheTableFarFromTheForwardQuadrantAndTheCurveInIt) {
  const PumpModel pump = with_table();
  PumpModel alone = pump;
  alone.quadrants = nullptr;
  PumpModel table_only = pump;
  table_only.has_curve = false;
  table_only.shut_off_torque = std::nan("");
  for (const auto& [v, s] : {std::pair{0.3, 1.0}, {1.2, 0.4}, {0.0, 0.9}, {0.8, 0.0}}) {
    EXPECT_EQ(pump.at(0.28 * v, s).head, alone.at(0.28 * v, s).head);
    EXPECT_EQ(pump.at(0.28 * v, s).torque, alone.at(0.28 * v, s).torque);
  }
  // an eighth of a turn past the axes nothing of the curve is left
  for (const auto& [v, s] : {std::pair{-1.0, 0.9}, {-0.5, -0.5}, {0.2, -0.5}, {-0.3, 0.0}}) {
    EXPECT_EQ(pump.at(0.28 * v, s).head, table_only.at(0.28 * v, s).head);
    EXPECT_EQ(pump.at(0.28 * v, s).torque, table_only.at(0.28 * v, s).torque);
  }
}

TEST(FourQuadrants, GrowWithTheSquareOfFlowAndSpeed) {
  const auto& t = quadrants_ns25();
  test::Dice dice(3);
  for (int k = 0; k < 500; ++k) {
    const double v = dice.between(-1.5, 1.5), s = dice.between(-1.5, 1.5), scale = dice.about(0.01, 10.0);
    const QuadrantPoint one = read_quadrants(t, t.head, v, s), other = read_quadrants(t, t.head, scale * v, scale * s);
    EXPECT_NEAR(other.value, scale * scale * one.value, 1e-12 * scale * scale * 10.0);
    EXPECT_NEAR(v * one.by_flow + s * one.by_speed, 2.0 * one.value, 1e-12 * 10.0);
  }
  const QuadrantPoint rest = read_quadrants(t, t.head, 0.0, 0.0);
  EXPECT_EQ(rest.value, 0.0);
  EXPECT_EQ(rest.by_flow, 0.0);
}

TEST(FourQuadrants, SpecificSpeed25PassesItsRatedPoint) {
  const auto& t = quadrants_ns25();  // v = speed = 1 is x = 5 pi / 4: head and torque are the rated ones
  EXPECT_NEAR(read_quadrants(t, t.head, 1.0, 1.0).value, 1.0, 1e-12);
  EXPECT_NEAR(read_quadrants(t, t.torque, 1.0, 1.0).value, 1.0, 1e-12);
}

}  // namespace
}  // namespace headband::transient
