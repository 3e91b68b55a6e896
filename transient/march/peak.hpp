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
  double before_first = none, before_last = none, before = none;  ///< the three rows before
  double after = none, after_next = none, after_last = none;      ///< the three rows behind
  double timed = 0.0;                                             ///< the value that `time` belongs to

  void begin(double first) {
    *this = Peak{};
    value = timed = first;
  }

  /// The next row. @param sign +1 for the largest, -1 for the smallest
  /// @param last the value of the row before @param earlier, earliest of the two rows before that
  void take(double sign, double now, double last, double earlier, double earliest, double at, long long row) {
    if (row == step + 1) {
      beside = std::fmax(beside, std::fabs(now - value));
      after = now;
    } else if (row == step + 2) {
      after_next = now;
    } else if (row == step + 3) {
      after_last = now;
    }
    if (higher(sign, now))
      *this = Peak{now, at, row, std::fabs(now - last), earliest, earlier, last, none, none, none, now};
  }
  /// The state at 0+ of an instant at a row: its own jump is no change between rows.
  void take_instant(double sign, double now, double at, long long row) {
    if (higher(sign, now)) *this = Peak{now, at, row, 0.0, none, none, none, none, none, none, now};
  }

  /// How much higher (lower) the history may have stood between the rows. >= 0
  ///
  /// A side is regular when it changes alike over two rows. Where the bend lies towards the other side, that one is
  /// followed by its straight line if it is straight over the two rows beside: the lines meet, exact for a bend between
  /// straight parts and zero for one on a row. Where it is not (a front, a cusp as at the end of a stroke by the square
  /// root, a smooth top) the bend may lie anywhere up to the row beside: the regular side's change over one row.
  [[nodiscard]] double missed(double sign) const {
    double most = 0.0;
    const double rise = value - before, fall = after - value;
    if (alike(rise, before - before_last))
      most = std::fmax(most, sign * above(rise, after, after_next - after, after_last - after_next));
    if (alike(fall, after_next - after))
      most = std::fmax(most, sign * above(-fall, before, before_last - before, before_first - before_last));
    return most;
  }

 private:
  static constexpr double rounding = 1e-6;  // of a row: a bend this close to one is on it

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
  /// How far the regular side climbs on before it meets the other one. @param climb of the regular side over one row
  /// @param next value of the row beyond the bend @param change, change_beyond over the two rows after that
  [[nodiscard]] double above(double climb, double next, double change, double change_beyond) const {
    if (std::isnan(next)) return 0.0;  // the history begins or ends here
    const bool straight = std::fabs(change - change_beyond) <= 0.1 * std::fabs(change);
    const double meeting = (next - change - value) / (climb - change);
    if (!straight || meeting < -rounding || meeting > 1.0 + rounding) return climb;
    return climb * std::fmin(std::fmax(meeting, 0.0), 1.0);
  }
};

/// Both ends of one history.
struct Extremes {
  Peak high, low;
  double first = 0.0;                    ///< of the first steady state
  double last = 0.0;                     ///< value of the row before
  double earlier = 0.0, earliest = 0.0;  ///< of the two rows before that

  void begin(double value) {
    high.begin(value);
    low.begin(value);
    first = last = earlier = earliest = value;
  }
  void take(double now, double at, long long row) {
    high.take(1.0, now, last, earlier, earliest, at, row);
    low.take(-1.0, now, last, earlier, earliest, at, row);
    earliest = earlier;
    earlier = last;
    last = now;
  }
  void take_instant(double now, double at, long long row) {
    high.take_instant(1.0, now, at, row);
    low.take_instant(-1.0, now, at, row);
    earliest = earlier = last = now;
  }
};

}  // namespace headband::transient
