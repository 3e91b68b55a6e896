#pragma once
// SPDX-License-Identifier: MIT

#include "montecarlo/program/options.hpp"

#include <algorithm>
#include <thread>

namespace headband::program {

/// Threads to use: as asked, else all the machine has.
[[nodiscard]] inline int threads_for(const Options& options) {
  return options.threads.value_or(std::max(1, static_cast<int>(std::thread::hardware_concurrency())));
}

}  // namespace headband::program
