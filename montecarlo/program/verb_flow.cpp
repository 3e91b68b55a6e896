// SPDX-License-Identifier: MIT
#include "montecarlo/program/assemble.hpp"
#include "montecarlo/program/judge.hpp"
#include "montecarlo/program/study_case.hpp"
#include "montecarlo/program/verbs.hpp"

namespace headband::program {

ExitCode verb_flow(const Options& options) {
  return with_case(options, "flow", [&](network::Case& c) {
    const Outputs outputs = prepare_outputs(options, "flow");
    answers::Study study = begin_study(c, options, "flow");
    const Central central = central_run(c);
    add_steady(study, c, central);
    study.limits_shown = true;
    study.limits = central.solved ? judge_steady(c, central) : judge_nothing(central.plan, central.failure);
    conclude(study, c, central.plan);
    return finish(options, outputs, study);
  });
}

}  // namespace headband::program
