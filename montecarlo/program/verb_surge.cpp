// SPDX-License-Identifier: MIT
#include "montecarlo/program/assemble.hpp"
#include "montecarlo/program/judge.hpp"
#include "montecarlo/program/study_case.hpp"
#include "montecarlo/program/verbs.hpp"

#include <utility>

namespace headband::program {

ExitCode verb_surge(const Options& options) {
  return with_case(options, "surge", [&](network::Case& c) {
    const Outputs outputs = prepare_outputs(options, "surge");
    answers::Study study = begin_study(c, options, "surge");
    const Central central = central_run(c);
    add_steady(study, c, central);
    study.limits_shown = true;
    if (central.solved) {
      transient::SurgeRun run = transient::run_surge(c, central.plan, central.values, central.state);
      study.limits = judge_run(central.plan, run.limit_value, run.limit_grid_bound, run.limit_bound_to_kept);
      add_run(study, std::move(run));
    } else {
      study.limits = judge_nothing(central.plan, central.failure);
    }
    conclude(study, c, central.plan);
    return finish(options, outputs, study);
  });
}

}  // namespace headband::program
