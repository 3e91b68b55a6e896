#pragma once
// SPDX-License-Identifier: MIT
//
// Complete characteristics of a pump in the form of Suter (1966) as used by Marchal, Flesch & Suter: with v = flow and
// alpha = speed as shares of the rated ones, x = pi + atan2(v, alpha), head/rated = WH(x) (alpha^2 + v^2),
// torque/rated = WB(x) (alpha^2 + v^2).

#include <vector>

namespace headband::transient {

/// A complete characteristic, read by straight lines in x.
struct FourQuadrants {
  std::vector<double> angle;   ///< x [rad], ascending, 0 .. 2 pi
  std::vector<double> head;    ///< WH [-]
  std::vector<double> torque;  ///< WB [-]
};

/// Value and slopes of one curve at (v, alpha).
struct QuadrantPoint {
  double value = 0.0, by_flow = 0.0, by_speed = 0.0;
};

/// WH or WB times (alpha^2 + v^2).
/// @param curve FourQuadrants::head or ::torque
[[nodiscard]] QuadrantPoint read_quadrants(const FourQuadrants& table,
                                           const std::vector<double>& curve,
                                           double flow,
                                           double speed);

/// The table of specific speed 25 (SI). Source: see four_quadrants_ns25.cpp.
[[nodiscard]] const FourQuadrants& quadrants_ns25();

}  // namespace headband::transient
