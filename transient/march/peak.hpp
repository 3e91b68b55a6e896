#pragma once
// SPDX-License-Identifier: MIT

#include <cmath>

namespace headband::transient {

/// Largest or smallest value of one history, when it came, and how much the history changes beside it.
struct Peak {
  double value = 0.0;
  double time = 0.0;        ///< [s]
  long long step = 0;       ///< row; an instant's state counts to its own row
  double beside = 0.0;      ///< largest change between the row of the extreme and the rows beside it

  void begin(double first) { *this = Peak{first, 0.0, 0, 0.0}; }

  /// The next row. @param sign +1 for the largest, -1 for the smallest @param before the value of the row before
  void take(double sign, double now, double before, double at, long long row) {
    if (row == step + 1) beside = std::fmax(beside, std::fabs(now - value));
    if (sign * (now - value) > 0.0) *this = Peak{now, at, row, std::fabs(now - before)};
  }
  /// The state at 0+ of an instant at a row: its own jump is no change between rows.
  void take_instant(double sign, double now, double at, long long row) {
    if (sign * (now - value) > 0.0) *this = Peak{now, at, row, 0.0};
  }
};

/// Both ends of one history.
struct Extremes {
  Peak high, low;
  double first = 0.0;  ///< of the first steady state
  double last = 0.0;   ///< value of the row before

  void begin(double value) {
    high.begin(value);
    low.begin(value);
    first = last = value;
  }
  void take(double now, double at, long long row) {
    high.take(1.0, now, last, at, row);
    low.take(-1.0, now, last, at, row);
    last = now;
  }
  void take_instant(double now, double at, long long row) {
    high.take_instant(1.0, now, at, row);
    low.take_instant(-1.0, now, at, row);
    last = now;
  }
};

}  // namespace headband::transient
