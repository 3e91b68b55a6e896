// SPDX-License-Identifier: MIT
//
// replay: one draw of a band as a plain case. `surge` on it gives the bits the draw had in the batch.
#include "core/answers/study.hpp"
#include "core/base/error.hpp"
#include "core/casefile/read.hpp"
#include "core/resultfile/result_file.hpp"
#include "montecarlo/program/arguments.hpp"
#include "montecarlo/program/failure.hpp"
#include "montecarlo/program/guard.hpp"
#include "montecarlo/program/output.hpp"
#include "montecarlo/program/verbs.hpp"
#include "montecarlo/propagate/band.hpp"
#include "montecarlo/propagate/draw_step.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>
#include <cstdlib>
#include <filesystem>
#include <fstream>
#include <vector>

namespace headband::program {
namespace {

/// The answer ranked by, and whether its large values are the bad ones.
struct Ranking {
  std::size_t answer = 0;
  bool high_is_bad = true;
};

using answers::Verdict;

Ranking ranking_of(const answers::Study& study) {
  const auto badness = [](const answers::LimitAnswer& limit) {
    return limit.verdict == Verdict::not_ok ? 0 : limit.verdict == Verdict::cannot_tell ? 1 : 2;
  };
  std::vector<const answers::LimitAnswer*> limits;
  for (const auto& limit : study.limits) limits.push_back(&limit);
  std::ranges::stable_sort(limits, {}, [&](const auto* limit) { return badness(*limit); });
  const auto& asked = study.bands->answers;
  for (const auto* limit : limits) {
    for (std::size_t i = 0; i < asked.size(); ++i) {
      if (asked[i].kind != limit->kind || asked[i].where != limit->where) continue;
      // margin = ±(limit - value): its sign tells on which side the limit stands
      const bool over = std::isfinite(limit->value) ? (limit->margin > 0.0) == (limit->value < limit->limit)
                                                    : asked[i].kind != "lowest_pressure";
      return {i, over};
    }
  }
  return {0, asked.empty() || asked.front().kind != "lowest_pressure"};
}

long long worst_draw(const answers::Study& study, long long rank) {
  const auto& bands = *study.bands;
  const std::size_t columns = bands.answers.size();
  if (columns == 0) throw UsageError("the file holds no answers to rank draws by");
  const Ranking by = ranking_of(study);
  std::vector<std::pair<double, long long>> draws;
  const std::size_t stored = std::min(bands.run_status.size(), bands.output_value.size() / columns);
  for (std::size_t run = 0; run < stored; ++run) {
    const double value = bands.output_value[run * columns + by.answer];
    if (bands.run_status[run] != 0 || !std::isfinite(value)) continue;
    draws.emplace_back(by.high_is_bad ? -value : value, static_cast<long long>(run) * bands.stride);
  }
  if (rank > static_cast<long long>(draws.size())) {
    throw UsageError(fmt::format("there are {} finished draws in the file, not {}", draws.size(), rank));
  }
  const auto at = draws.begin() + (rank - 1);
  std::ranges::nth_element(draws, at);
  return at->second;
}

/// The tables of a case beside it again, in a folder that goes with the object.
class SideFiles {
 public:
  explicit SideFiles(const answers::Provenance& provenance) {
    std::string pattern = (std::filesystem::temp_directory_path() / "headband-XXXXXX").string();
    if (::mkdtemp(pattern.data()) == nullptr)
      throw base::IoError(base::IoFailure::cannot_create, "cannot create a folder for the tables of the case");
    folder_ = pattern;
    for (const auto& file : provenance.side_files) {
      std::ofstream(std::filesystem::path(folder_) / file_name(file[0]), std::ios::binary) << file[2];
    }
  }
  ~SideFiles() {
    std::error_code ignored;
    std::filesystem::remove_all(folder_, ignored);
  }
  SideFiles(const SideFiles&) = delete;
  SideFiles& operator=(const SideFiles&) = delete;
  [[nodiscard]] const std::string& folder() const { return folder_; }

 private:
  std::string folder_;
};

/// The draw meant: a number from 0, or the N-th worst.
long long draw_meant(const Options& options, const answers::Study& study) {
  const auto& bands = *study.bands;
  const auto most = static_cast<unsigned long long>(std::max(bands.draws, 1LL));
  if (options.words[1] != "worst") {
    if (options.words.size() > 2) throw UsageError("replay takes N, or worst N");
    return static_cast<long long>(whole_number("replay", options.words[1], 0, most - 1));
  }
  const std::string rank = options.words.size() > 2 ? options.words[2] : "1";
  if (rank == "corner") throw UsageError("replay worst corner is not computed yet by this version");
  return worst_draw(study, static_cast<long long>(whole_number("replay worst", rank, 1, most)));
}

ExitCode replay(const Options& options) {
  const std::string& result = options.words.front();
  const answers::Study study = resultfile::read(result);
  if (!study.bands) throw UsageError(fmt::format("{} holds no draws: it is a result of {}", result, study.verb));
  const long long draw = draw_meant(options, study);
  const SideFiles side(study.provenance);
  auto reading = casefile::read_text(study.provenance.case_file, study.provenance.case_text, side.folder());
  if (!reading.problems.empty())
    throw base::IoError(base::IoFailure::damaged, fmt::format("{}: the case it holds cannot be read", result));
  const auto scores = montecarlo::scores_of_draw(reading.value, study.bands->seed, study.bands->draws, draw);
  if (study.bands->surged)
    if (const auto step = montecarlo::step_of_its_own(reading.value, scores)) {
      reading.value.surge.time_step = {};
      reading.value.surge.time_step.value = *step;
      reading.value.surge.time_step.dimension = base::Dimension::time;
    }
  const std::string note = fmt::format("draw {} of {} ({}, seed {}) of {}",
                                       draw,
                                       study.bands->draws,
                                       study.bands->design,
                                       study.bands->seed,
                                       study.provenance.case_file);
  const std::string text = casefile::write_case(reading.value, scores, note);
  if (options.out.empty()) {
    print(text);
  } else {
    write_text(options.out, text, {.force = options.force, .own_name = false, .mark = {}});
    remark(options, fmt::format("case: {} ({})\n", options.out, note));
  }
  return ExitCode::done;
}

}  // namespace

ExitCode verb_replay(const Options& options) {
  return guarded(options.words.front(), [&] { return told(options, [&] { return replay(options); }); });
}

}  // namespace headband::program
