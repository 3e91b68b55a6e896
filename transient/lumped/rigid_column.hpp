#pragma once
// SPDX-License-Identifier: MIT
//
// Liquid as a rigid column and a pump as a rotating mass: pre-sizing, and a check of the march that shares nothing with
// it. Sources: textbook rigid-column equations (Wylie & Streeter 1993, chapter 2 and 7).

#include "transient/lumped/ode.hpp"

#include <vector>

namespace headband::transient {

/// A line that moves as one piece.
struct RigidColumn {
  double length = 0.0;       ///< [m], > 0
  double area = 0.0;         ///< [m2], > 0
  double resistance = 0.0;   ///< head loss = resistance Q|Q| [s2/m5], >= 0
  double gravity = 9.80665;  ///< [m/s2]
};

/// Flow of a column that starts from rest under a held head difference.
/// dQ/dt = (g A / L) (H - r Q|Q|); closed form Q = Qf tanh(t/t0), t0 = L Qf / (g A H).
/// @param head_difference [m]  @param times [s], ascending from 0
/// @return run whose state is {flow [m3/s]}
[[nodiscard]] OdeRun establish_flow(const RigidColumn& column,
                                    double head_difference,
                                    const std::vector<double>& times);

/// A pump by affinity laws: head = speed^2 h(flow / speed), torque likewise, with parabolas in the flow at rated speed.
struct RigidPump {
  double head[3] = {0.0, 0.0, 0.0};    ///< head = c0 s^2 + c1 s Q + c2 Q^2, s share of rated speed [m, …]
  double torque[3] = {0.0, 0.0, 0.0};  ///< torque = c0 s^2 + c1 s Q + c2 Q^2 [N m, …]
  double inertia = 0.0;                ///< m r2 of all that turns [kg m2], > 0
  double rated_speed = 0.0;            ///< [rad/s], > 0
};

/// Run-down of a pump after power failure until the flow is zero (an ideal check valve shuts there).
/// (L/(g A)) dQ/dt = H(s, Q) - lift - r Q|Q|;  I dω/dt = -T(s, Q).
/// @param lift static head [m]  @param flow first flow [m3/s]  @param times [s], ascending from 0
/// @return run whose state is {flow [m3/s], speed share [-]}; status `event` at zero flow
[[nodiscard]] OdeRun trip_pump(
    const RigidColumn& column, const RigidPump& pump, double lift, double flow, const std::vector<double>& times);

/// Swing of a surge tank after its outflow is stopped: (L/(g A)) dQ/dt = -z - r Q|Q|, A_t dz/dt = Q.
/// @param tank_area [m2]  @param level first level above the basin [m]  @param flow first flow [m3/s]
/// @return run whose state is {flow [m3/s], level above the basin [m]}
[[nodiscard]] OdeRun swing_tank(
    const RigidColumn& column, double tank_area, double level, double flow, const std::vector<double>& times);

}  // namespace headband::transient
