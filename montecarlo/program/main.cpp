// SPDX-License-Identifier: MIT
#include "montecarlo/program/arguments.hpp"
#include "montecarlo/program/output.hpp"
#include "montecarlo/program/parse.hpp"
#include "montecarlo/program/signals.hpp"
#include "montecarlo/program/verbs.hpp"

#include "core/base/error.hpp"
#include "core/base/version.hpp"

#include <fmt/format.h>

#include <string>
#include <vector>

namespace {

using namespace headband::program;  // main is the one place that sees only this room

int headband_main(const std::vector<std::string>& arguments) {
  const std::string first = arguments.empty() ? "" : arguments.front();
  if (first == "--version") {
    print(fmt::format("headband {}\n", headband::base::version()));
    return 0;
  }
  if (first == "--help" || first == "-h" || (first == "help" && arguments.size() == 1)) {
    print(help());
    return 0;
  }
  const Options options = parse(arguments);
  if (options.help) {
    print(help(*verb_named(options.verb)));
    return 0;
  }
  return static_cast<int>(run(options));
}

}  // namespace

int main(int count, char** words) {
  prepare_process();
  try {
    return headband_main(std::vector<std::string>(words + (count > 0 ? 1 : 0), words + count));
  } catch (const UsageError& error) {
    say(fmt::format("headband: {}\n", error.what()));
    return static_cast<int>(ExitCode::wrong_usage);
  } catch (const headband::base::IoError& error) {
    say(fmt::format("headband: {}\n", error.what()));
    return static_cast<int>(ExitCode::cannot_write);
  } catch (...) {
    say("headband: internal error at the start\n");
    return static_cast<int>(ExitCode::internal_error);
  }
}
