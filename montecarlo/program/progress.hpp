#pragma once
// SPDX-License-Identifier: MIT

#include "montecarlo/program/options.hpp"

#include <chrono>
#include <string>

namespace headband::program {

/// One line on a terminal that tells how far the draws are and how long they still take. Silent elsewhere.
class Progress {
 public:
  explicit Progress(const Options& options);
  ~Progress();
  Progress(const Progress&) = delete;
  Progress& operator=(const Progress&) = delete;

  /// Redraws at most ten times a second.
  void show(long long done, long long all);
  /// Takes the line away.
  void clear();

 private:
  using Clock = std::chrono::steady_clock;
  bool on_ = false, unicode_ = false, drawn_ = false;
  Clock::time_point start_, last_;
};

/// The line itself, for tests: bar of 24 cells, share, time left.
[[nodiscard]] std::string progress_line(long long done, long long all, double seconds, bool unicode);

}  // namespace headband::program
