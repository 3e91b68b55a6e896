// SPDX-License-Identifier: MIT
#include "core/casefile/read.hpp"
#include "montecarlo/program/arguments.hpp"
#include "montecarlo/program/output.hpp"
#include "montecarlo/program/verbs.hpp"

#include <fmt/format.h>

namespace headband::program {

ExitCode verb_new(const Options& options) {
  const auto kinds = casefile::starter_kinds();
  if (options.words.empty()) {
    std::string text = "Starter cases (headband new KIND [FILE]):\n";
    for (const auto& kind : kinds) text += fmt::format("  {}\n", kind);
    print(text);
    return ExitCode::done;
  }
  const std::string& kind = options.words.front();
  const std::string starter = casefile::starter(kind);
  if (starter.empty()) {
    throw UsageError(
        fmt::format("no starter case '{}'; there are: {}{}", kind, fmt::join(kinds, ", "), did_you_mean(kind, kinds)));
  }
  const std::string path = options.words.size() > 1 ? options.words[1] : kind + ".toml";
  // A case is the user's work from the first edit on: never replaced without -f, whoever named it.
  write_text(path, starter, {.force = options.force, .own_name = false, .mark = {}});
  remark(options, fmt::format("case: {}\n", path));
  return ExitCode::done;
}

}  // namespace headband::program
