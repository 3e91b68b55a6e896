#pragma once
// SPDX-License-Identifier: MIT

#include "montecarlo/program/options.hpp"

#include <functional>
#include <string>

namespace headband::program {

/// Does `work` in a forked child with limits on time and memory that grow with the size of `file`: a damaged file can
/// make the readers of its format crash or loop, and must not take the program with it. Call while single-threaded.
/// @return what `work` returned; a child that died or ran out is told to the user and is wrong_case (65)
[[nodiscard]] ExitCode guarded(const std::string& file, const std::function<ExitCode()>& work);

/// Bounds the memory of this process to what the machine has, so that too large a case is an error with words.
void limit_memory();

}  // namespace headband::program
