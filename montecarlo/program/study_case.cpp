// SPDX-License-Identifier: MIT
#include "montecarlo/program/study_case.hpp"

#include "core/base/error.hpp"
#include "core/casefile/read.hpp"
#include "core/report/report.hpp"
#include "core/resultfile/result_file.hpp"
#include "core/show/show.hpp"
#include "montecarlo/program/guard.hpp"
#include "montecarlo/program/output.hpp"
#include "montecarlo/program/signals.hpp"

#include <fmt/format.h>

namespace headband::program {

ExitCode tell_problems(const Options& options,
                       const std::string& file_name,
                       const std::string& text,
                       const base::Problems& problems) {
  say(casefile::problems_text(file_name, text, problems));
  if (options.json) print(show::problems_json(problems));
  return ExitCode::wrong_case;
}

ExitCode with_case(const Options& options,
                   const std::string& verb,
                   const std::function<ExitCode(network::Case&)>& work) {
  limit_memory();
  auto reading = casefile::read_file(options.words.front());
  auto& c = reading.value;
  if (reading.problems.empty() && !verb.empty()) {
    reading.problems = casefile::refused_by_verb(c, verb);
    const auto missing = network::validate_for(c, verb);
    reading.problems.insert(reading.problems.end(), missing.begin(), missing.end());
  }
  if (!reading.problems.empty()) return tell_problems(options, c.file_name, c.text, reading.problems);
  if (options.units == "us") c.show.units = network::UnitFamily::us;
  if (options.units == "si") c.show.units = network::UnitFamily::si;
  try {
    return work(c);
  } catch (const base::InputError& error) {
    return tell_problems(options, c.file_name, c.text, error.problems());
  }
}

Outputs prepare_outputs(const Options& options, const std::string& verb) {
  Outputs outputs;
  outputs.own_name = options.out.empty();
  outputs.result = outputs.own_name ? fmt::format("{}-{}.h5", stem(options.words.front()), verb) : options.out;
  outputs.page = options.report;
  check_can_create(outputs.result, {.force = options.force, .own_name = outputs.own_name, .mark = result_mark});
  if (!outputs.page.empty()) check_can_create(outputs.page, {.force = options.force, .own_name = false, .mark = {}});
  return outputs;
}

void print_study(const Options& options, const answers::Study& study) {
  if (options.json) {
    print(show::json(study));
  } else {
    print(
        show::summary(study, {.colour = colour_wanted(options), .unicode = unicode_wanted(), .units = options.units}));
  }
}

ExitCode finish(const Options& options, const Outputs& outputs, answers::Study& study) {
  {
    const HoldSignals hold;
    resultfile::write(study, outputs.result, {.replace = options.force, .own_name = outputs.own_name});
  }
  if (!outputs.page.empty()) {
    write_text(outputs.page, report::page(study), {.force = options.force, .own_name = false, .mark = {}});
  }
  print_study(options, study);
  remark(options, fmt::format("result: {}\n", outputs.result));
  if (!outputs.page.empty()) remark(options, fmt::format("report: {}\n", outputs.page));
  if (study.state == answers::RunState::incomplete) return ExitCode::not_finished;
  if (options.gate && study.verdict == answers::Verdict::not_ok) return ExitCode::limit_not_kept;
  if (options.gate && study.verdict == answers::Verdict::cannot_tell) return ExitCode::cannot_tell;
  return ExitCode::done;
}

}  // namespace headband::program
