#pragma once
// SPDX-License-Identifier: MIT
//
// One pump of one draw in all its states: head and torque by flow and speed.

#include "core/network/pump_curve.hpp"
#include "transient/device/four_quadrants.hpp"

namespace headband::transient {

/// Head and torque of one pump at a flow and a speed, with their slopes.
struct PumpPoint {
  double head = 0.0, head_by_flow = 0.0, head_by_speed = 0.0;        ///< [m], [s/m2], [m per share of rated speed]
  double torque = 0.0, torque_by_flow = 0.0, torque_by_speed = 0.0;  ///< share of rated torque
};

/// Head by the affinity laws on the curve where flow and speed are forward, by the four-quadrant table elsewhere (where
/// one is used), joined without a jump; torque by its own table or the straight law, and the four-quadrant table
/// elsewhere. Speeds are shares of the rated one.
struct PumpModel {
  bool has_curve = true;
  network::PumpCurve<1> curve;  ///< head against flow at rated speed
  bool has_torque_table = false;
  network::PumpCurve<1> torque_curve;        ///< share of rated torque against flow at rated speed
  double shut_off_torque = 0.0;              ///< share of rated torque at no flow, where no table is given
  double rated_flow = 1.0;                   ///< [m3/s]
  double rated_head = 1.0;                   ///< [m]
  double rated_speed = 1.0;                  ///< [rad/s]
  double rated_torque = 0.0;                 ///< rho g Q H / (efficiency speed) [N m]
  double inertia = 0.0;                      ///< m r2 [kg m2]
  const FourQuadrants* quadrants = nullptr;  ///< null: none used

  [[nodiscard]] PumpPoint at(double flow, double speed) const;
};

}  // namespace headband::transient
