// SPDX-License-Identifier: MIT
#include "transient/lumped/rigid_column.hpp"

#include <cmath>

namespace headband::transient {

namespace {

/// Flow's rate of change under a driving head [m3/s2].
double acceleration(const RigidColumn& column, double driving_head, double flow) {
  const double loss = column.resistance * flow * std::abs(flow);
  return column.gravity * column.area / column.length * (driving_head - loss);
}

}  // namespace

OdeRun establish_flow(const RigidColumn& column, double head_difference, const std::vector<double>& times) {
  const auto rates = [&](const OdeState& state, OdeState& change, double) {
    change[0] = acceleration(column, head_difference, state[0]);
  };
  return integrate(rates, {0.0}, times);
}

OdeRun trip_pump(
    const RigidColumn& column, const RigidPump& pump, double lift, double flow, const std::vector<double>& times) {
  const auto affinity = [](const double(&c)[3], double speed, double q) {
    return c[0] * speed * speed + c[1] * speed * q + c[2] * q * q;
  };
  const auto rates = [&](const OdeState& state, OdeState& change, double) {
    const double q = state[0];
    const double speed = state[1];
    change[0] = acceleration(column, affinity(pump.head, speed, q) - lift, q);
    change[1] = -affinity(pump.torque, speed, q) / (pump.inertia * pump.rated_speed);
  };
  const auto flow_stops = [](const OdeState& state, double) { return state[0]; };
  return integrate(rates, {flow, 1.0}, times, flow_stops);
}

OdeRun swing_tank(
    const RigidColumn& column, double tank_area, double level, double flow, const std::vector<double>& times) {
  const auto rates = [&](const OdeState& state, OdeState& change, double) {
    change[0] = acceleration(column, -state[1], state[0]);
    change[1] = state[0] / tank_area;
  };
  return integrate(rates, {flow, level}, times);
}

}  // namespace headband::transient
