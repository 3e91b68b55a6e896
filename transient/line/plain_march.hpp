#pragma once
// SPDX-License-Identifier: MIT
//
// The oracle of the march: one run, plain loops, two arrays a pipe, nothing shared with the kernels but the method.
// Basins, junctions, dead ends, fixed draw-offs and one valve a place (to the air or to another place).

#include <functional>
#include <limits>
#include <vector>

namespace headband::transient {

/// A pipe of the oracle.
struct PlainPipe {
  int from = 0, to = 0;  ///< places
  int reaches = 1;
  double impedance = 0.0;   ///< marched wave speed / (g area) [s/m2]
  double resistance = 0.0;  ///< quadratic loss of one reach [s2/m5]
  double linear = 0.0;      ///< linear loss of one reach [s/m2]
  double first_flow = 0.0;  ///< [m3/s]
};

/// A place of the oracle.
struct PlainPlace {
  double first_head = 0.0;                                 ///< [m]
  double held = std::numeric_limits<double>::quiet_NaN();  ///< basins: head held [m]
  double draw = 0.0;                                       ///< fixed flow out [m3/s]
};

/// A valve of the oracle.
struct PlainValve {
  int from = 0, to = -1;                      ///< places; -1 = the air at `air_head`
  double air_head = 0.0;                      ///< [m]
  std::function<double(double)> coefficient;  ///< of time: Q = coefficient sqrt(dH) [m^2.5/s]
};

struct PlainNetwork {
  std::vector<PlainPipe> pipes;
  std::vector<PlainPlace> places;
  std::vector<PlainValve> valves;  ///< at most one touches a place
  double time_step = 0.0;          ///< [s]
  int steps = 0;
};

/// Heads and flows of all sections after the last step, pipe by pipe, and the largest head of each section.
struct PlainResult {
  std::vector<std::vector<double>> head, flow, head_max, head_min;
};

[[nodiscard]] PlainResult plain_march(const PlainNetwork& network);

}  // namespace headband::transient
