#pragma once
// SPDX-License-Identifier: MIT
//
// How a valve, a draw-off or a basin moves: the chain of its events, one after another, per draw.

#include "core/base/lanes.hpp"

#include <limits>
#include <vector>

namespace headband::transient {

using base::Lanes;

/// From `start` on: position + slope (t - start) + swing sin(2 pi (t - start) / period).
struct Segment {
  double start = 0.0;     ///< acts for all t >= start [s]
  double position = 0.0;  ///< [the subject's unit]
  double slope = 0.0;     ///< [unit/s]
  double swing = 0.0;     ///< half-width of the sine [unit]; 0 = none
  double period = 1.0;    ///< [s]
  bool instant = false;   ///< where an instant stroke arrived; what follows takes over from it
};

/// One movement of one draw, as an event orders it.
struct Stroke {
  double at = 0.0;    ///< [s]; an instant one: already on the grid
  double to = 0.0;    ///< [unit]
  double over = 0.0;  ///< [s]; 0 = instant
  double swing = 0.0, period = 1.0;
  std::vector<double> travel_time, travel_position;  ///< seconds after `at`; empty = straight stroke
};

inline constexpr double unbounded = std::numeric_limits<double>::infinity();

/// Position of the chain at `time`: that of the last segment begun; a swing is cut at `low` and `high`.
[[nodiscard]] double position_at(const std::vector<Segment>& chain,
                                 double time,
                                 double low = -unbounded,
                                 double high = unbounded);

/// Adds a stroke that takes over from the position held at its time. `chain` holds at least one segment.
/// @param grid_step an instant stroke acts for t > at, so that the row stored at `at` is the state before: its segment
///        begins half a step later and position_at(at + step/2) is the state after. Any other stroke within that time
///        takes over from where the instant one arrived
/// @param low, high where a swing taken over is cut (shares: 0 and 1)
void add_stroke(std::vector<Segment>& chain,
                const Stroke& stroke,
                double grid_step,
                double low = -unbounded,
                double high = unbounded);

/// Position of W draws over time; times only grow.
template <int W>
class Movement {
 public:
  Movement() = default;
  /// @param low, high bounds of a swing (shares: 0 and 1)
  Movement(double low, double high) : low_(low), high_(high) {}

  /// The chain of a lane; fill before `rewind`.
  [[nodiscard]] std::vector<Segment>& chain(int lane) { return chains_[static_cast<std::size_t>(lane)]; }
  [[nodiscard]] const std::vector<Segment>& chain(int lane) const { return chains_[static_cast<std::size_t>(lane)]; }

  /// Adds a stroke to the chain of a lane.
  void add(int lane, const Stroke& stroke, double grid_step) {
    add_stroke(chain(lane), stroke, grid_step, low_, high_);
  }

  void rewind();

  /// Position at `time`; not earlier than the time of the call before.
  [[nodiscard]] const Lanes<W>& move_to(const Lanes<W>& time) {
    if (still_) return position_;
    if (any(time >= next_)) begin_segments(time);
    if (!still_) {
      position_ = from_ + slope_ * (time - start_);
      if (swings_) swing(time);
    }
    return position_;
  }
  [[nodiscard]] const Lanes<W>& position() const { return position_; }

 private:
  void begin_segments(const Lanes<W>& time);
  void swing(const Lanes<W>& time);

  base::PerLane<std::vector<Segment>, W> chains_;
  base::PerLane<std::size_t, W> at_{};
  Lanes<W> start_, from_, slope_, next_, position_;
  double low_ = -unbounded, high_ = unbounded;
  bool still_ = true;  ///< no lane will move any more
  bool swings_ = false;
};

}  // namespace headband::transient
