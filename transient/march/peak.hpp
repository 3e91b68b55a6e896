#pragma once
// SPDX-License-Identifier: MIT

#include <cmath>
#include <limits>

namespace headband::transient {

/// Largest or smallest value of one history, when it came, and how the history runs beside it.
struct Peak {
  static constexpr double none = std::numeric_limits<double>::quiet_NaN();
  double value = 0.0;
  double time = 0.0;    ///< [s]
  long long step = 0;   ///< row; an instant's state counts to its own row
  double beside = 0.0;  ///< largest change between the row of the extreme and the rows beside it
  double before_last = none, before = none, after = none, after_next = none;  ///< the two rows on either side
  double timed = 0.0;                                                         ///< the value that `time` belongs to

  void begin(double first) {
    *this = Peak{};
    value = timed = first;
  }

  /// The next row. @param sign +1 for the largest, -1 for the smallest
  /// @param last the value of the row before @param earlier of the row before that
  void take(double sign, double now, double last, double earlier, double at, long long row) {
    if (row == step + 1) {
      beside = std::fmax(beside, std::fabs(now - value));
      after = now;
    } else if (row == step + 2) {
      after_next = now;
    }
    if (higher(sign, now)) *this = Peak{now, at, row, std::fabs(now - last), earlier, last, none, none, now};
  }
  /// The state at 0+ of an instant at a row: its own jump is no change between rows.
  void take_instant(double sign, double now, double at, long long row) {
    if (higher(sign, now)) *this = Peak{now, at, row, 0.0, none, none, none, none, now};
  }

  /// How much higher (lower) the history may have stood between the rows, where it bends there: the straight lines
  /// through the two rows before and the two rows behind meet above it. Exact for a bend between straight parts, of
  /// second order in the step for a smooth top, zero for a bend on a row and for fronts (a side counts as straight when
  /// it rises alike over two rows). >= 0
  [[nodiscard]] double missed(double sign) const {
    double most = 0.0;
    const double rise = value - before, rise_before = before - before_last;
    const double fall = after - value, fall_next = after_next - after;
    if (alike(rise, rise_before)) most = std::fmax(most, sign * (meeting(rise, value, after, fall_next) - value));
    if (alike(fall, fall_next)) most = std::fmax(most, sign * (meeting(rise_before, before, value, fall) - value));
    return most;
  }

 private:
  /// Whether `now` passes the extreme by more than rounding. What passes it by less is its value too, at its time: a
  /// line that stands still has its extremes at the start, not where the last bit falls.
  [[nodiscard]] bool higher(double sign, double now) {
    if (!(sign * (now - value) > 0.0)) return false;
    if (std::fabs(now - timed) > 1e-9 * (1.0 + std::fabs(timed))) return true;
    value = now;
    return false;
  }
  [[nodiscard]] static bool alike(double change, double beside_it) {
    return change * beside_it > 0.0 && std::fabs(beside_it) >= 0.5 * std::fabs(change);
  }
  /// Where the line of slope `rise` through (0, left) meets the line of slope `fall` through (1, right); NaN when not
  /// between 0 and 1.
  [[nodiscard]] static double meeting(double rise, double left, double right, double fall) {
    const double x = (right - fall - left) / (rise - fall);
    return x > 0.0 && x < 1.0 ? left + rise * x : none;
  }
};

/// Both ends of one history.
struct Extremes {
  Peak high, low;
  double first = 0.0;    ///< of the first steady state
  double last = 0.0;     ///< value of the row before
  double earlier = 0.0;  ///< of the row before that

  void begin(double value) {
    high.begin(value);
    low.begin(value);
    first = last = earlier = value;
  }
  void take(double now, double at, long long row) {
    high.take(1.0, now, last, earlier, at, row);
    low.take(-1.0, now, last, earlier, at, row);
    earlier = last;
    last = now;
  }
  void take_instant(double now, double at, long long row) {
    high.take_instant(1.0, now, at, row);
    low.take_instant(-1.0, now, at, row);
    earlier = last = now;
  }
};

}  // namespace headband::transient
