// SPDX-License-Identifier: MIT
#include "montecarlo/program/failure.hpp"

#include "core/base/error.hpp"
#include "montecarlo/program/arguments.hpp"
#include "montecarlo/program/output.hpp"
#include "montecarlo/program/study_case.hpp"
#include "montecarlo/program/verbs.hpp"

#include <fmt/format.h>

#include <new>
#include <stdexcept>
#include <string_view>
#include <utility>

namespace headband::program {
namespace {

ExitCode code_of(base::IoFailure failure) {
  switch (failure) {
    case base::IoFailure::missing:
      return ExitCode::input_missing;
    case base::IoFailure::cannot_create:
      return ExitCode::cannot_create;
    case base::IoFailure::cannot_write:
      return ExitCode::cannot_write;
    case base::IoFailure::damaged:
      return ExitCode::wrong_case;
  }
  return ExitCode::internal_error;
}

ExitCode translated(const Options& options, const std::function<ExitCode()>& work) {
  try {
    return work();
  } catch (const UsageError& error) {
    say(fmt::format("headband: {}\n", error.what()));
    return ExitCode::wrong_usage;
  } catch (const base::InputError& error) {
    return tell_problems(options, options.words.empty() ? "" : file_name(options.words.front()), "", error.problems());
  } catch (const base::IoError& error) {
    say(fmt::format("headband: {}\n", error.what()));
    return code_of(error.failure());
  } catch (const std::bad_alloc&) {
    say("headband: this needs more memory than allowed; ask for fewer reaches, places or draws\n");
    return ExitCode::wrong_case;
  } catch (const std::length_error&) {
    say("headband: this needs more memory than allowed; ask for fewer reaches, places or draws\n");
    return ExitCode::wrong_case;
  } catch (const std::exception& error) {
    say(fmt::format(
        "headband: internal error: {}\nThis is a fault of the program; please tell its authors, with the case.\n",
        error.what()));
    return ExitCode::internal_error;
  }
}

}  // namespace

ExitCode told(const Options& options, const std::function<ExitCode()>& work) noexcept {
  try {
    return translated(options, work);
  } catch (...) {  // telling failed as well: out of memory, or standard output full
    say("headband: stopped, and the reason could not be told\n");
    return ExitCode::internal_error;
  }
}

ExitCode run(const Options& options) noexcept {
  using Verb = ExitCode (*)(const Options&);
  static constexpr std::pair<std::string_view, Verb> table[] = {{"new", verb_new},
                                                                {"check", verb_check},
                                                                {"flow", verb_flow},
                                                                {"surge", verb_surge},
                                                                {"band", verb_band},
                                                                {"report", verb_report},
                                                                {"liquid", verb_liquid},
                                                                {"at", verb_at},
                                                                {"compare", verb_compare},
                                                                {"replay", verb_replay}};
  for (const auto& [name, verb] : table) {
    if (name == options.verb) return told(options, [&, go = verb] { return go(options); });
  }
  return ExitCode::internal_error;  // the table of words has a ready verb that stands not here
}

}  // namespace headband::program
