// SPDX-License-Identifier: MIT
#include "montecarlo/program/failure.hpp"
#include "montecarlo/program/verbs.hpp"

#include <string_view>
#include <utility>

namespace headband::program {

ExitCode run(const Options& options) noexcept {
  using Verb = ExitCode (*)(const Options&);
  static constexpr std::pair<std::string_view, Verb> table[] = {
      {"new", verb_new},   {"check", verb_check},   {"flow", verb_flow},    {"surge", verb_surge},
      {"band", verb_band}, {"report", verb_report}, {"liquid", verb_liquid}};
  for (const auto& [name, verb] : table) {
    if (name == options.verb) return told(options, [&, go = verb] { return go(options); });
  }
  return ExitCode::internal_error;  // the table of words has a ready verb that stands not here
}

}  // namespace headband::program
