// SPDX-License-Identifier: MIT
#include "montecarlo/program/assemble.hpp"
#include "montecarlo/program/study_case.hpp"
#include "montecarlo/program/verbs.hpp"

namespace headband::program {

ExitCode verb_check(const Options& options) {
  return with_case(options, "", [&](network::Case& c) {
    answers::Study study = begin_study(c, options, "check");
    study.values_shown = true;
    conclude(study, c, network::make_plan(c));
    print_study(options, study);
    return ExitCode::done;
  });
}

}  // namespace headband::program
