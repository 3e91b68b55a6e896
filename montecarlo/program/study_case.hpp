#pragma once
// SPDX-License-Identifier: MIT
//
// What the verbs that study a case share: reading it, the outputs, the end.

#include "core/answers/study.hpp"
#include "core/network/case.hpp"
#include "montecarlo/program/options.hpp"

#include <functional>
#include <string>

namespace headband::program {

/// Tells what is wrong with a case: words on standard error, with --json the problems object on standard output.
/// @return wrong_case
ExitCode tell_problems(const Options& options,
                       const std::string& file_name,
                       const std::string& text,
                       const base::Problems& problems);

/// Reads the case named by the first word and hands it to `work`. Problems of the case, and those `work` throws, are
/// told with their place in the file; nothing is written then.
/// @param verb as `casefile::refused_by_verb` knows it; empty: nothing is refused
[[nodiscard]] ExitCode with_case(const Options& options,
                                 const std::string& verb,
                                 const std::function<ExitCode(network::Case&)>& work);

/// Files a verb writes, looked at before anything is computed.
struct Outputs {
  std::string result;    ///< path of the result file
  bool own_name = true;  ///< the name is headband's
  std::string page;      ///< empty: none
};

/// @param verb "flow", "surge", "band". @throws base::IoError (cannot_create)
[[nodiscard]] Outputs prepare_outputs(const Options& options, const std::string& verb);

/// Writes result and page, prints summary or JSON, says where things are.
/// @return done, not_finished, or with --gate the verdict's
[[nodiscard]] ExitCode finish(const Options& options, const Outputs& outputs, answers::Study& study);

/// Prints the study as asked: JSON or summary.
void print_study(const Options& options, const answers::Study& study);

}  // namespace headband::program
