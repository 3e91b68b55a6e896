#pragma once
// SPDX-License-Identifier: MIT
//
// Elevation of a pipe along its chainage: survey points joined by straight lines.

#include "core/base/lanes.hpp"

#include <algorithm>
#include <span>

namespace headband::pipe {

using base::Lanes;

/// Elevation [m] at `at` [m]: straight line between the profile points; the end values beyond the ends. Two points of
/// one chainage are a step: the later one counts from there on. Same bits for every W.
/// @param chainage never falling, same length as `elevation`, at least one point
template <int W>
[[nodiscard]] Lanes<W> elevation_at(std::span<const Lanes<W>> chainage,
                                    std::span<const Lanes<W>> elevation,
                                    const Lanes<W>& at) {
  Lanes<W> z = elevation[0];
  for (std::size_t i = 1; i < chainage.size(); ++i) {
    const Lanes<W> run = chainage[i] - chainage[i - 1];
    const Lanes<W> safe = select(run > Lanes<W>(0.0), run, Lanes<W>(1.0));
    const Lanes<W> share = min(max((at - chainage[i - 1]) / safe, Lanes<W>(0.0)), Lanes<W>(1.0));
    const Lanes<W> line = elevation[i - 1] + share * (elevation[i] - elevation[i - 1]);
    z = select(at >= chainage[i], elevation[i], select(at > chainage[i - 1], line, z));
  }
  return z;
}

/// A spot of a profile.
template <int W>
struct HighPoint {
  Lanes<W> chainage, elevation;  ///< [m]
};

/// Highest point of the profile in [from, to] (both inside the pipe): ends of the window and every survey point in it.
/// On a tie the first one. @param from <= to [m]
template <int W>
[[nodiscard]] HighPoint<W> highest_point(std::span<const Lanes<W>> chainage,
                                         std::span<const Lanes<W>> elevation,
                                         const Lanes<W>& from,
                                         const Lanes<W>& to) {
  HighPoint<W> top{from, elevation_at<W>(chainage, elevation, from)};
  for (std::size_t i = 0; i < chainage.size(); ++i) {
    const auto better = (chainage[i] >= from) & (chainage[i] <= to) & (elevation[i] > top.elevation);
    top.chainage = select(better, chainage[i], top.chainage);
    top.elevation = select(better, elevation[i], top.elevation);
  }
  const Lanes<W> end = elevation_at<W>(chainage, elevation, to);
  const auto better = end > top.elevation;
  top.chainage = select(better, to, top.chainage);
  top.elevation = select(better, end, top.elevation);
  return top;
}

}  // namespace headband::pipe
