#pragma once
// SPDX-License-Identifier: MIT

#include "core/answers/study.hpp"
#include "core/network/values.hpp"
#include "core/steady/evaluate.hpp"
#include "core/steady/steady.hpp"

#include <string>
#include <vector>

namespace headband::program {

/// The central run's steady flow: the written values, one draw.
struct Central {
  network::Plan plan;
  network::Values<1> values;
  steady::SteadyState<1> state;
  bool is_explicit = false;
  bool solved = false;  ///< usable: converged, finite and, where vapour counts, nowhere below its limit
  std::string failure;  ///< why not, in words
  std::string warning;  ///< below the vapour limit with cavities off; solution on a jump
};

[[nodiscard]] Central central_run(const network::Case& c);

/// What the user should know about the laws the central run leans on: friction laws outside the range they were made
/// for, and how far a viscosity law through two points misses the others.
[[nodiscard]] std::vector<std::string> remarks(const network::Case& c, const Central& central);

/// Fills liquid, pipes, places, devices and the steady status of `study`.
void add_steady(answers::Study& study, const network::Case& c, const Central& central);

}  // namespace headband::program
