// SPDX-License-Identifier: MIT
#include "transient/lumped/rigid_column.hpp"

#include <gtest/gtest.h>

#include <cmath>
#include <numbers>

namespace headband::transient {
namespace {

double circle(double bore) { return std::numbers::pi * bore * bore / 4.0; }

// T09a of tests/reference/data/transient: 900 m of 0.5 m, f 0.02, K 3 + 1, 18 m; closed form.
TEST(RigidColumn, flow_starts_as_the_tanh_law) {
  RigidColumn column{.length = 900.0, .area = circle(0.5)};
  column.resistance = (0.02 * 900.0 / 0.5 + 4.0) / (2.0 * column.gravity * column.area * column.area);
  const double final_flow = std::sqrt(18.0 / column.resistance);
  const double t0 = column.length * final_flow / (column.gravity * column.area * 18.0);
  EXPECT_NEAR(final_flow, 0.5833262, 1e-4 * 0.5833262);
  const auto run = establish_flow(column, 18.0, {0.0, 8.3204225, 22.299929, 40.089241});
  ASSERT_EQ(run.status, OdeStatus::reached_end);
  const double shares[] = {0.0, 0.5, 0.9, 0.99};
  for (std::size_t i = 0; i < 4; ++i) {
    EXPECT_NEAR(run.state[i][0], final_flow * std::tanh(run.time[i] / t0), 1e-6 * final_flow);
    EXPECT_NEAR(run.state[i][0] / final_flow, shares[i], 1e-6);
  }
}

// T07a: rated 0.28 m3/s at 45 m, polynomials of the reference; flow stops at 2.7150919 s with speed share 0.62909126.
TEST(RigidColumn, pump_runs_down_to_zero_flow) {
  RigidColumn column{.length = 180.0, .area = circle(0.5)};
  column.resistance = 0.018 * 180.0 / 0.5 / (2.0 * column.gravity * column.area * column.area);
  EXPECT_NEAR(column.resistance, 8.569679, 1e-6 * 8.57);
  const double flow = 0.28;
  const double head = 45.0;
  const double torque = 1465.39;
  RigidPump pump{.head = {1.28 * head, 0.06 * head / flow, -0.34 * head / (flow * flow)},
                 .torque = {0.45 * torque, 0.65 * torque / flow, -0.10 * torque / (flow * flow)},
                 .inertia = 60.0,
                 .rated_speed = 980.0 * std::numbers::pi / 30.0};
  const auto run = trip_pump(column, pump, 38.0, 1.1955152218590028 * flow, {0.0, 1.0, 2.0, 3.0});
  ASSERT_EQ(run.status, OdeStatus::event);
  EXPECT_NEAR(run.end_time, 2.7150919, 1e-5 * 2.7);
  EXPECT_NEAR(run.end_state[1], 0.62909126, 1e-5);
  EXPECT_EQ(run.time.size(), 3U);
}

TEST(RigidColumn, frictionless_tank_swings_with_the_closed_amplitude_and_period) {
  const RigidColumn column{.length = 2000.0, .area = circle(3.0)};
  const double tank = 60.0;
  const double flow = 2.2 * column.area;
  const double period = 2.0 * std::numbers::pi * std::sqrt(column.length * tank / (column.gravity * column.area));
  const double amplitude = 2.2 * std::sqrt(column.length * column.area / (column.gravity * tank));
  EXPECT_NEAR(period, 261.4231, 1e-4);
  const auto run = swing_tank(column, tank, 0.0, flow, {0.0, 0.25 * period, 0.5 * period, 0.75 * period, period});
  ASSERT_EQ(run.status, OdeStatus::reached_end);
  EXPECT_NEAR(run.state[1][1], amplitude, 1e-6 * amplitude);
  EXPECT_NEAR(run.state[2][1], 0.0, 1e-6 * amplitude);
  EXPECT_NEAR(run.state[3][1], -amplitude, 1e-6 * amplitude);
  EXPECT_NEAR(run.state[4][0], flow, 1e-6 * flow);
}

}  // namespace
}  // namespace headband::transient
