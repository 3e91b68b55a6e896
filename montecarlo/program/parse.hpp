#pragma once
// SPDX-License-Identifier: MIT

#include "montecarlo/program/options.hpp"

#include <string>
#include <vector>

namespace headband::program {

/// Understands a call: the verb first, then its words and options in any order.
/// @param arguments what stands after the program's name
/// @throws UsageError with the nearest known word where something is not understood
[[nodiscard]] Options parse(const std::vector<std::string>& arguments);

}  // namespace headband::program
