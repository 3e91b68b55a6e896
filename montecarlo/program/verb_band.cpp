// SPDX-License-Identifier: MIT
#include "core/base/error.hpp"
#include "core/resultfile/result_file.hpp"
#include "montecarlo/program/assemble.hpp"
#include "montecarlo/program/failure.hpp"
#include "montecarlo/program/guard.hpp"
#include "montecarlo/program/judge.hpp"
#include "montecarlo/program/output.hpp"
#include "montecarlo/program/progress.hpp"
#include "montecarlo/program/signals.hpp"
#include "montecarlo/program/study_case.hpp"
#include "montecarlo/program/verbs.hpp"

#include <fmt/format.h>

#include <unistd.h>
#include <optional>
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

/// The draws of an interrupted band: read in a child first, for the file may be damaged; then it must be of this case.
/// @return the code to end with, or nothing where `draws` can be taken up
/// @throws base::InputError, base::IoError
std::optional<ExitCode> take_up(const Options& options,
                                const std::string& partial,
                                const answers::Study& study,
                                std::optional<answers::Bands>& draws) {
  if (::access(partial.c_str(), F_OK) != 0) {
    throw base::IoError(base::IoFailure::missing, fmt::format("nothing to resume: no {}", partial));
  }
  const ExitCode readable = guarded(partial, [&] {
    return told(options, [&] {
      static_cast<void>(resultfile::read(partial));
      return ExitCode::done;
    });
  });
  if (readable != ExitCode::done) return readable;
  answers::Study before = resultfile::read(partial);
  const auto& was = before.provenance;
  const auto& is = study.provenance;
  const bool same = was.case_sha256 == is.case_sha256 && was.side_files == is.side_files && was.seed == is.seed &&
                    was.version == is.version;
  if (!same || !before.bands || before.bands->surged != options.surge) {
    throw base::InputError({{{},
                             "",
                             fmt::format("{} was begun with another case, seed, version or --surge", partial),
                             "",
                             "",
                             "start anew without --resume, or give back the case it was begun with"}});
  }
  draws = std::move(before.bands);
  return std::nullopt;
}

/// Central run and its steady numbers; marched as well with --surge. The study's state tells whether it finished.
montecarlo::CentralRun run_central(const network::Case& c, const Central& central, bool surge, answers::Study& study) {
  add_steady(study, c, central);
  if (!central.solved) return {};
  if (!surge) return steady_central(central);
  transient::SurgeRun run = transient::run_surge(c, central.plan, central.values, central.state);
  montecarlo::CentralRun numbers{run.answer_value,
                                 run.limit_value,
                                 run.answer_grid_bound,
                                 run.limit_grid_bound,
                                 run.limit_bound_to_kept,
                                 run.cavity,
                                 run.transient.time};
  add_run(study, std::move(run));
  return numbers;
}

/// Draws, with progress on the terminal, a checkpoint each minute and a gentle stop.
montecarlo::BandOutcome sample(const network::Case& c,
                               const network::Plan& plan,
                               const montecarlo::CentralRun& numbers,
                               const Options& options,
                               montecarlo::BandOptions band,
                               const std::function<void(const answers::Bands&)>& keep) {
  Progress progress(options);
  band.progress = [&](long long done, long long all) { progress.show(done, all); };
  band.checkpoint = keep;
  band.stop = &stop_asked();
  stop_gently(true);
  montecarlo::BandOutcome outcome = montecarlo::run_band(c, plan, numbers, band);
  stop_gently(false);
  return outcome;
}

}  // namespace

ExitCode verb_band(const Options& options) {
  return with_case(options, options.surge ? "band --surge" : "band", [&](network::Case& c) {
    const Outputs outputs = prepare_outputs(options, "band");
    const std::string partial = partial_name(outputs.result);
    answers::Study study = begin_study(c, options, "band");
    montecarlo::BandOptions band;
    band.surge = options.surge;
    band.threads = threads_for(options);
    band.seed = options.seed;
    if (options.resume) {
      if (const auto code = take_up(options, partial, study, band.resumed)) return *code;
    }
    study.limits_shown = true;
    const Central central = central_run(c);
    const montecarlo::CentralRun numbers = run_central(c, central, options.surge, study);
    if (study.state != answers::RunState::complete) {  // nothing to lean the bands on
      study.limits = judge_nothing(central.plan, "the central run did not finish");
      conclude(study, c, central.plan);
      return finish(options, outputs, study);
    }
    bool kept = options.resume;
    const auto keep = [&](const answers::Bands& bands) {
      answers::Study so_far = study;
      so_far.bands = bands;
      so_far.state = answers::RunState::partial;
      end_provenance(so_far.provenance);
      const HoldSignals hold;
      resultfile::write(so_far, partial, {.replace = options.force, .own_name = true});
      kept = true;
    };
    montecarlo::BandOutcome outcome = sample(c, central.plan, numbers, options, std::move(band), keep);
    if (outcome.stopped) {
      keep(outcome.bands);
      say(fmt::format("stopped; {} draws are kept in {}: go on with --resume\n", outcome.bands.draws, partial));
      return signal_noted() == SIGTERM ? ExitCode::terminated : ExitCode::interrupted;
    }
    for (const auto& answer : outcome.left_out) remark(options, fmt::format("left out: {}\n", answer));
    add_band(study, c, std::move(outcome));
    conclude(study, c, central.plan);
    const ExitCode code = finish(options, outputs, study);
    if (kept) ::unlink(partial.c_str());
    return code;
  });
}

}  // namespace headband::program
