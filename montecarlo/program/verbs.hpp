#pragma once
// SPDX-License-Identifier: MIT

#include "montecarlo/program/options.hpp"

namespace headband::program {

// One function a verb, each in a file of its name. They throw UsageError, base::InputError and base::IoError; `run`
// turns what they throw into words and exit codes.
[[nodiscard]] ExitCode verb_new(const Options& options);
[[nodiscard]] ExitCode verb_check(const Options& options);
[[nodiscard]] ExitCode verb_flow(const Options& options);
[[nodiscard]] ExitCode verb_surge(const Options& options);
[[nodiscard]] ExitCode verb_band(const Options& options);
[[nodiscard]] ExitCode verb_report(const Options& options);
[[nodiscard]] ExitCode verb_replay(const Options& options);
[[nodiscard]] ExitCode verb_at(const Options& options);
[[nodiscard]] ExitCode verb_compare(const Options& options);
[[nodiscard]] ExitCode verb_liquid(const Options& options);

/// Runs the verb of `options`; whatever is thrown becomes a message and its exit code.
[[nodiscard]] ExitCode run(const Options& options) noexcept;

}  // namespace headband::program
