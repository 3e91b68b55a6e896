#pragma once
// SPDX-License-Identifier: MIT

#include "montecarlo/program/central.hpp"

#include <string>
#include <vector>

namespace headband::program {

/// What the user should know about the laws the central run leans on: friction laws outside the range they were made
/// for, and how far a viscosity law through two points misses the others.
[[nodiscard]] std::vector<std::string> remarks(const network::Case& c, const Central& central);

}  // namespace headband::program
