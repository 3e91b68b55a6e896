#pragma once
// SPDX-License-Identifier: MIT
//
// Points of the line that are not rows of the grid: profile points, probes, points of answers.

#include "transient/march/march.hpp"

namespace headband::transient {

/// A chainage of a pipe between two rows of a lane: value = row + share (next row - row).
struct Spot {
  int pipe = 0;
  std::size_t row = 0;     ///< into the state
  double share = 0.0;      ///< 0 .. 1
  double chainage = 0.0;   ///< [m]
  double elevation = 0.0;  ///< [m]
};

/// The spot of a chainage on the lane's grid; on a rigid pipe row and next row are its two ends.
template <int W>
[[nodiscard]] Spot make_spot(
    const March<W>& march, const network::Values<W>& values, int pipe, double chainage, int lane);

/// Elevation of a pipe at a chainage [m].
template <int W>
[[nodiscard]] double elevation_of(const network::PipeValues<W>& pipe, double chainage, int lane);

/// Head at a spot now [m].
template <int W>
[[nodiscard]] double head_at(const March<W>& march, const Spot& spot, int lane);

/// Flow at a spot now [m3/s]; at a cavity the `from` side.
template <int W>
[[nodiscard]] double flow_at(const March<W>& march, const Spot& spot, int lane);

}  // namespace headband::transient
