// SPDX-License-Identifier: MIT
#include "montecarlo/program/assemble.hpp"

#include "core/base/hash.hpp"
#include "core/base/version.hpp"
#include "core/casefile/read.hpp"
#include "core/show/words.hpp"
#include "montecarlo/program/judge.hpp"

#include <fmt/chrono.h>
#include <fmt/format.h>

#include <algorithm>
#include <chrono>
#include <cmath>
#include <utility>

namespace headband::program {
namespace {

/// ISO 8601 in UTC with milliseconds, so that the wall time can be told again.
std::string timestamp(std::chrono::system_clock::time_point when) {
  const auto seconds = std::chrono::floor<std::chrono::seconds>(when);
  const auto rest = std::chrono::duration_cast<std::chrono::milliseconds>(when - seconds).count();
  return fmt::format("{:%Y-%m-%dT%H:%M:%S}.{:03}Z", fmt::gmtime(std::chrono::system_clock::to_time_t(seconds)), rest);
}

void add_file(answers::Provenance& provenance, const network::Table& table) {
  if (table.file.empty()) return;
  for (const auto& known : provenance.side_files) {
    if (known[0] == table.file) return;
  }
  provenance.side_files.push_back({table.file, base::sha256_hex(table.text), table.text});
}

void add_once(std::vector<std::string>& list, const std::string& text) {
  if (std::ranges::find(list, text) == list.end()) list.push_back(text);
}

/// The cautions only the case tells of (common practice); those of the numbers are core/show's.
std::vector<std::string> cautions_of_case(const network::Case& c, const network::Plan& plan) {
  std::vector<std::string> list;
  if (c.liquid.free_gas.given() && (c.liquid.free_gas.value > 0.0 || !c.liquid.free_gas.exact())) {
    list.emplace_back("Free gas lowers the first peak but lengthens the swing; it is not a safety device.");
  }
  const bool checked = std::ranges::any_of(plan.devices, [&](const network::DevicePlan& d) {
    if (d.kind == network::DeviceKind::check_valve) return true;
    return d.kind == network::DeviceKind::pump &&
           c.pumps[static_cast<std::size_t>(d.index)].check_valve.kind == network::CheckValveKind::ideal;
  });
  if (checked) {
    list.emplace_back("Ideal closure of check valves is assumed unless their data are given; slam is not assessed.");
  }
  const auto plastic = [](const network::Pipe& pipe) {
    return (pipe.modulus.given() && pipe.modulus.value < 10e9) || !pipe.creep.empty();
  };
  if (std::ranges::any_of(c.pipes, plastic)) {
    list.emplace_back("Plastic walls: the modulus depends on temperature, age and time under load.");
  }
  return list;
}

}  // namespace

answers::Provenance begin_provenance(const network::Case& c, const Options& options, const std::string& verb) {
  answers::Provenance p;
  p.case_file = c.file_name;
  p.case_text = c.text;
  p.case_sha256 = base::sha256_hex(c.text);
  for (const auto& basin : c.basins) add_file(p, basin.level_table);
  for (const auto& pipe : c.pipes) add_file(p, pipe.profile_table);
  for (const auto& pump : c.pumps) {
    add_file(p, pump.curve);
    add_file(p, pump.torque);
    add_file(p, pump.suter);
  }
  for (const auto& event : c.events) add_file(p, event.travel);
  p.verb = verb;
  p.command = options.command;
  p.seed = options.seed.value_or(c.band.seed);
  p.version = base::version();
  p.commit = base::commit();
  p.build_kind = base::build_kind();
  p.compiler = base::compiler();
  p.flags = base::flags();
  p.libraries = base::libraries();
  p.started = timestamp(std::chrono::system_clock::now());
  p.wall_time = std::chrono::duration<double>(std::chrono::steady_clock::now().time_since_epoch()).count();
  p.threads = threads_for(options);
  return p;
}

void end_provenance(answers::Provenance& p) {
  // `wall_time` held the steady clock at the start.
  p.wall_time =
      std::chrono::duration<double>(std::chrono::steady_clock::now().time_since_epoch()).count() - p.wall_time;
  p.finished = timestamp(std::chrono::system_clock::now());
}

namespace {

// Counts only where draws are made: a single run has no scatter.
constexpr const char* guessed_scatter = "friction scatter ± 10 %, shared by all pipes, nobody stated it";

}  // namespace

answers::Study begin_study(const network::Case& c, const Options& options, const std::string& verb) {
  answers::Study study;
  study.verb = verb;
  study.provenance = begin_provenance(c, options, verb);
  study.title = c.about.title.empty() ? c.file_name : c.about.title;
  study.note = c.about.note;
  study.units_shown = !options.units.empty() ? options.units : c.show.units == network::UnitFamily::us ? "us" : "si";
  study.values = casefile::echo(c);
  study.guesses = c.guesses;
  study.warnings = c.warnings;
  if (verb == "check" && c.band.given && c.friction.scatter.guess) study.guesses.emplace_back(guessed_scatter);
  if (verb == "flow" || verb == "surge") {  // a band takes the whole range
    for (const auto& unknown : c.unknowns)
      if (!unknown.random)
        study.guesses.push_back(fmt::format("{}: the middle of a range that is not random", unknown.name));
  }
  return study;
}

void add_run(answers::Study& study, transient::SurgeRun run) {
  for (std::size_t i = 0; i < study.places.size() && i < run.places.size(); ++i) {
    auto& place = study.places[i];
    const auto& surged = run.places[i];
    place.surged = surged.surged;
    place.max_head = surged.max_head;
    place.max_pressure = surged.max_pressure;
    place.time_of_max = surged.time_of_max;
    place.min_head = surged.min_head;
    place.min_pressure = surged.min_pressure;
    place.time_of_min = surged.time_of_min;
  }
  for (std::size_t i = 0; i < study.devices.size() && i < run.devices.size(); ++i) {
    auto& numbers = study.devices[i].numbers;
    for (const auto& [key, value] : run.devices[i].numbers) {
      const auto known = std::ranges::find(numbers, key, &std::pair<std::string, double>::first);
      if (known == numbers.end()) numbers.emplace_back(key, value);
    }
  }
  study.highest = std::move(run.highest);
  study.lowest = std::move(run.lowest);
  study.events = std::move(run.events);
  study.audit = run.audit;
  study.grid = std::move(run.grid);
  for (const auto& warning : run.warnings) add_once(study.warnings, warning);
  if (!run.completed) {
    study.state = answers::RunState::incomplete;
    add_once(
        study.warnings,
        fmt::format(
            "the run did not finish: {}; last good time {} s", run.transient.status, run.transient.last_good_time));
  }
  study.transient = std::move(run.transient);
}

void add_band(answers::Study& study, const network::Case& c, montecarlo::BandOutcome outcome) {
  for (const auto& limit : c.limits) {
    if (limit.at_most < 0.0) add_once(study.guesses, fmt::format("limit {}: at_most 5 % (default)", limit.name));
  }
  for (const auto& pipe : c.pipes) {
    if (pipe.rating.given()) add_once(study.guesses, fmt::format("limit {} rating: at_most 5 % (default)", pipe.name));
  }
  if (c.friction.scatter.guess) add_once(study.guesses, guessed_scatter);
  for (const auto& warning : outcome.warnings) add_once(study.warnings, warning);
  study.limits = std::move(outcome.limits);
  study.bands = std::move(outcome.bands);
  if (outcome.all_failed) {
    study.state = answers::RunState::incomplete;
    add_once(study.warnings, "every draw failed");
  }
}

void conclude(answers::Study& study, const network::Case& c, const network::Plan& plan) {
  const bool surged = study.transient.has_value() || (study.bands && study.bands->surged);
  if (surged) study.cautions = cautions_of_case(c, plan);
  if (study.state == answers::RunState::incomplete && study.limits_shown) {
    for (auto& limit : study.limits) {
      limit.verdict = answers::Verdict::cannot_tell;
      if (limit.reason.empty()) limit.reason = "the run did not finish";
    }
    study.verdict = answers::Verdict::cannot_tell;
  } else {
    study.verdict = study.limits_shown ? worst(study.limits) : answers::Verdict::none;
  }
  study.cautions = show::cautions(study);
  study.decision = show::decision(study);
  end_provenance(study.provenance);
}

}  // namespace headband::program
