// SPDX-License-Identifier: MIT
#include "core/base/error.hpp"
#include "core/resultfile/result_file.hpp"
#include "montecarlo/program/assemble.hpp"
#include "montecarlo/program/guard.hpp"
#include "montecarlo/program/judge.hpp"
#include "montecarlo/program/output.hpp"
#include "montecarlo/program/progress.hpp"
#include "montecarlo/program/signals.hpp"
#include "montecarlo/program/study_case.hpp"
#include "montecarlo/program/verbs.hpp"

#include <fmt/format.h>

#include <unistd.h>
#include <utility>

namespace headband::program {
namespace {

/// NAME.h5 → NAME.partial.h5
std::string partial_name(const std::string& result) {
  const bool ending = result.size() > 3 && result.ends_with(".h5");
  return (ending ? result.substr(0, result.size() - 3) : result) + ".partial.h5";
}

/// The steady numbers of the central run that the bands lean on.
montecarlo::CentralRun steady_central(const Central& central) {
  montecarlo::CentralRun numbers;
  for (const auto& answer : central.plan.answers) {
    numbers.answer_value.push_back(steady::answer<1>(central.plan, central.values, central.state, answer).number);
  }
  for (const auto& limit : central.plan.limits) {
    numbers.limit_value.push_back(steady::answer<1>(central.plan, central.values, central.state, limit.subject).number);
  }
  numbers.answer_grid_bound.assign(central.plan.answers.size(), 0.0);
  numbers.limit_grid_bound.assign(central.plan.limits.size(), 0.0);
  return numbers;
}

/// Looks at an interrupted band's file: read in a child first, for it may be damaged; then it must be of this case.
/// @throws base::InputError, base::IoError
ExitCode look_at_partial(const std::string& partial, const answers::Study& study) {
  if (::access(partial.c_str(), F_OK) != 0) {
    throw base::IoError(base::IoFailure::missing, fmt::format("nothing to resume: no {}", partial));
  }
  const ExitCode readable = guarded(partial, [&] {
    try {
      static_cast<void>(resultfile::read(partial));
      return ExitCode::done;
    } catch (const std::exception& error) {
      say(fmt::format("headband: {}\n", error.what()));
      return ExitCode::wrong_case;
    }
  });
  if (readable != ExitCode::done) return readable;
  const answers::Study before = resultfile::read(partial);
  if (before.provenance.case_sha256 != study.provenance.case_sha256 ||
      before.provenance.side_files != study.provenance.side_files || before.provenance.seed != study.provenance.seed ||
      before.provenance.version != study.provenance.version) {
    base::Problem problem;
    problem.what = fmt::format("{} was begun with another case, seed or version", partial);
    problem.hint = "start anew without --resume, or give back the case it was begun with";
    throw base::InputError({problem});
  }
  return ExitCode::done;
}

}  // namespace

ExitCode verb_band(const Options& options) {
  return with_case(options, options.surge ? "band --surge" : "band", [&](network::Case& c) {
    const Outputs outputs = prepare_outputs(options, "band");
    const std::string partial = partial_name(outputs.result);
    answers::Study study = begin_study(c, options, "band");
    montecarlo::BandOptions band{.surge = options.surge, .threads = threads_for(options), .seed = options.seed,
                                 .stop = &stop_asked(), .progress = {}, .resumed = {}, .checkpoint = {}};
    if (options.resume) {
      const ExitCode usable = look_at_partial(partial, study);
      if (usable != ExitCode::done) return usable;
      band.resumed = resultfile::read(partial).bands;
    }
    const Central central = central_run(c);
    add_steady(study, c, central);
    study.limits_shown = true;
    montecarlo::CentralRun numbers;
    if (central.solved) numbers = steady_central(central);
    if (central.solved && options.surge) {
      transient::SurgeRun run = transient::run_surge(c, central.plan, central.values, central.state);
      numbers = {run.answer_value, run.limit_value, run.answer_grid_bound, run.limit_grid_bound, run.cavity};
      add_run(study, std::move(run));
    }
    if (study.state != answers::RunState::complete) {  // nothing to lean the bands on
      study.limits = judge_nothing(central.plan, "the central run did not finish");
      conclude(study, c, central.plan);
      return finish(options, outputs, study);
    }
    Progress progress(options);
    band.progress = [&](long long done, long long all) { progress.show(done, all); };
    stop_gently(true);
    montecarlo::BandOutcome outcome = montecarlo::run_band(c, central.plan, numbers, band);
    stop_gently(false);
    progress.clear();
    const bool stopped = outcome.stopped;
    add_band(study, c, std::move(outcome));
    conclude(study, c, central.plan);
    if (stopped) {
      const HoldSignals hold;
      resultfile::write(study, partial, {.replace = options.force || options.resume, .own_name = true});
      say(fmt::format("stopped; {} draws kept in {}: go on with --resume\n", study.bands->draws, partial));
      return signal_noted() == SIGTERM ? ExitCode::terminated : ExitCode::interrupted;
    }
    const ExitCode code = finish(options, outputs, study);
    if (options.resume) ::unlink(partial.c_str());
    return code;
  });
}

}  // namespace headband::program
