#pragma once
// SPDX-License-Identifier: MIT

#include <atomic>

#include <csignal>

namespace headband::program {

/// Sets the program's signals: SIGPIPE and SIGXFSZ become errors of the write; SIGINT and SIGTERM end the program
/// with 130 or 143, or, between `stop_gently(true)` and `stop_gently(false)`, only raise `stop_asked()`. A second
/// signal ends it at once in any case. Also gives descriptors 0 to 2 something to stand on where they are closed.
void prepare_process();

/// Long sampling asks for this: a first signal is only noted.
void stop_gently(bool gently);

/// Raised by a noted signal.
[[nodiscard]] const std::atomic<bool>& stop_asked();

/// The signal noted, 0 = none.
[[nodiscard]] int signal_noted();

/// While one lives, SIGINT and SIGTERM wait: a file is being put in place.
class HoldSignals {
 public:
  HoldSignals();
  ~HoldSignals();
  HoldSignals(const HoldSignals&) = delete;
  HoldSignals& operator=(const HoldSignals&) = delete;

 private:
  sigset_t before_{};
};

}  // namespace headband::program
