#pragma once
// SPDX-License-Identifier: MIT

#include "core/casefile/read.hpp"
#include "core/steady/steady.hpp"

#include <optional>
#include <stdexcept>
#include <string>

namespace headband::test {

/// A case file read and its steady flow found.
struct Solved {
  network::Case c;
  network::Plan plan;
  network::Values<1> values;
  steady::SteadyState<1> state;
  bool is_explicit = false;
};

/// @throws std::runtime_error with the first problem of the case
inline Solved solved(const std::string& text) {
  casefile::Reading reading = casefile::read_text("generated.toml", text, "");
  if (!reading.problems.empty())
    throw std::runtime_error(reading.problems.front().path + ": " + reading.problems.front().what + "\n" + text);
  Solved s;
  s.c = std::move(reading.value);
  s.plan = network::make_plan(s.c);
  s.values = network::realise(s.c, s.plan);
  steady::SteadySolver solver(s.c, s.plan);
  solver.solve(s.values, s.state);
  s.is_explicit = solver.is_explicit();
  return s;
}

}  // namespace headband::test
