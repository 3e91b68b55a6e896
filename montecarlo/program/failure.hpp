#pragma once
// SPDX-License-Identifier: MIT

#include "montecarlo/program/options.hpp"

#include <functional>

namespace headband::program {

/// Does `work`; whatever it throws becomes words on standard error and the exit code that belongs to it.
[[nodiscard]] ExitCode told(const Options& options, const std::function<ExitCode()>& work) noexcept;

}  // namespace headband::program
