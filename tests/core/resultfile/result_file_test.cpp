// SPDX-License-Identifier: MIT
#include "core/resultfile/result_file.hpp"

#include "core/base/error.hpp"
#include "core/show/show.hpp"
#include "tests/support/sample_study.hpp"
#include "tests/support/scratch_folder.hpp"

#include <gtest/gtest.h>

#include <cmath>
#include <fstream>
#include <functional>
#include <limits>
#include <string>
#include <vector>

namespace headband::resultfile {
namespace {

using answers::missing;
using answers::Study;
using base::IoError;
using base::IoFailure;
using support::bytes_of;
using support::ScratchFolder;

/// Writes, reads, and asks for the same JSON and, from what was read, the same file.
void expect_round_trip(const Study& study, const char* what) {
  const ScratchFolder folder;
  write(study, folder / "first.h5", {});
  const Study back = read(folder / "first.h5");
  EXPECT_EQ(show::json(back), show::json(study)) << what;
  write(back, folder / "second.h5", {});
  EXPECT_EQ(bytes_of(folder / "second.h5"), bytes_of(folder / "first.h5")) << what;
}

TEST(ResultFile, AStudyComesBackWhole) {
  expect_round_trip(support::sample_study(), "everything");
  expect_round_trip(support::sample_surge(), "one run");
  expect_round_trip(support::sample_flow(), "steady");
  expect_round_trip(Study{}, "nothing");
}

TEST(ResultFile, EachBlockMayBeThereOrNot) {
  const std::vector<std::function<void(Study&)>> removals = {
      [](Study& s) { s.liquid.reset(); },
      [](Study& s) { s.transient.reset(); },
      [](Study& s) { s.bands.reset(); },
      [](Study& s) { s.highest.reset(); },
      [](Study& s) { s.lowest.reset(); },
      [](Study& s) { s.audit.reset(); },
      [](Study& s) { s.grid.reset(); },
      [](Study& s) { s.events.clear(); },
      [](Study& s) { s.limits.clear(); },
      [](Study& s) { s.devices.clear(); },
      [](Study& s) { s.values.clear(); },
      [](Study& s) { s.provenance.side_files.clear(); },
      [](Study& s) {
        s.bands->answers.clear();
        s.bands->output_value.clear();
      },
      [](Study& s) {
        s.transient->probe_name.clear();
        s.transient->probe_head.clear();
        s.transient->probe_pressure.clear();
        s.transient->probe_flow.clear();
        s.transient->probe_elevation.clear();
      },
      [](Study& s) {
        s.transient->vapour_head.clear();
        s.transient->time_of_min.clear();
      },
      [](Study& s) {
        for (auto& p : s.pipes) p.steady_head.clear();
      },
      [](Study& s) {
        for (auto& p : s.pipes) {
          p.chainage.clear();
          p.elevation.clear();
          p.steady_head.clear();
        }
      },
      [](Study& s) {
        s.bands->input_value.clear();
        s.bands->limit_value.clear();
        s.bands->run_cavity.clear();
        s.bands->output_value.clear();
        s.bands->run_status.clear();
      },
      [](Study& s) {
        s.bands->profile_share.clear();
        s.bands->profile_station_pipe.clear();
        s.bands->profile_head_max.clear();
        s.bands->profile_head_min.clear();
        s.bands->profile_probability.clear();
      },
      [](Study& s) {
        s.bands->history_head.clear();
        s.bands->history_probability.clear();
      },
      [](Study& s) {
        s.bands->history_head.clear();
        s.bands->history_probability.clear();
        s.bands->history_time.clear();
        s.bands->history_probe_name.clear();
        s.bands->whole_line.clear();
      },
  };
  for (std::size_t i = 0; i < removals.size(); ++i) {
    Study study = support::sample_study();
    removals[i](study);
    expect_round_trip(study, ("removal " + std::to_string(i)).c_str());
  }
}

TEST(ResultFile, MissingNumbersComeBackMissing) {
  Study study = support::sample_study();
  for (auto* number : {&study.density,
                       &study.steady_residual,
                       &study.pipes[0].flow,
                       &study.places[1].max_head,
                       &study.devices[0].numbers[0].second,
                       &study.highest->pressure,
                       &study.events[0].time,
                       &study.audit->volume_residual_relative,
                       &study.grid->time_step,
                       &study.limits[0].value,
                       &study.bands->answers[0].mean,
                       &study.bands->answers[1].quantiles[2].lower,
                       &study.transient->probe_head[7],
                       &study.liquid->density}) {
    *number = missing;
  }
  study.limits[1].probability_range = {{missing, missing}};  // there, though nothing in it is known
  study.bands->answers[2].quantiles.erase(study.bands->answers[2].quantiles.begin());
  for (auto& q : study.bands->answers[0].quantiles) q.value = q.lower = q.upper = missing;
  expect_round_trip(study, "missing numbers");
}

TEST(ResultFile, NamesMayHoldAnyText) {
  Study study = support::sample_study();
  study.pipes[0].name = "Rohr ‚Süd‘ 管 \"1\" \\ /";
  study.places[0].name = "";
  study.devices[1].name = "emoji \U0001F6B0";
  study.warnings = {"", "line\nbreak", std::string(70000, 'w')};
  study.title = std::string(69999, 't') + "ü";
  study.provenance.case_text = std::string(300000, '#') + "\r\n";
  expect_round_trip(study, "texts");
}

TEST(ResultFile, AZeroByteInATextBecomesVisible) {
  const ScratchFolder folder;
  Study study;
  study.note = std::string("a\0b", 3);
  write(study, folder / "a.h5", {});
  EXPECT_EQ(read(folder / "a.h5").note, "a\u2400b");
}

TEST(ResultFile, LargeDataComeBackBitByBit) {
  Study study = support::sample_study();
  auto& b = *study.bands;
  constexpr std::size_t runs = 30000;
  b.run_status.assign(runs, 0);
  b.input_value.assign(runs * b.input_name.size(), 0.0);
  b.output_value.assign(runs * b.answers.size(), 0.0);
  b.limit_value.clear();  // not kept
  b.run_cavity.clear();
  for (std::size_t i = 0; i < b.input_value.size(); ++i) b.input_value[i] = std::sin(static_cast<double>(i));
  for (std::size_t i = 0; i < b.output_value.size(); ++i) b.output_value[i] = std::cos(static_cast<double>(i));
  b.stride = 7;
  const ScratchFolder folder;
  write(study, folder / "a.h5", {});
  const Study back = read(folder / "a.h5");
  EXPECT_EQ(back.bands->input_value, b.input_value);
  EXPECT_EQ(back.bands->output_value, b.output_value);
  EXPECT_EQ(back.bands->stride, 7);
}

TEST(ResultFile, TheStateOfTheRunIsKept) {
  const ScratchFolder folder;
  for (const auto state : {answers::RunState::complete, answers::RunState::incomplete, answers::RunState::partial}) {
    Study study = support::sample_surge();
    study.state = state;
    write(study, folder / "a.h5", {});
    EXPECT_EQ(read(folder / "a.h5").state, state);
  }
}

TEST(ResultFile, AStoppedBandKeepsWhatResumingNeeds) {
  Study study = support::sample_study();
  study.state = answers::RunState::partial;
  auto& b = *study.bands;
  const std::size_t stations = b.profile_share.size();
  for (std::size_t i = 0; i < b.run_status.size() * stations; ++i) {
    b.run_head_max.push_back(100.0 + static_cast<double>(i));
    b.run_head_min.push_back(-1.0 * static_cast<double>(i));
  }
  const std::size_t cells = b.history_time.size() * b.history_probe_name.size();
  ASSERT_GT(cells, 0U);
  for (std::size_t i = 0; i < 40 * cells; ++i) b.run_history_head.push_back(0.25 * static_cast<double>(i));
  expect_round_trip(study, "stopped band");
  const ScratchFolder folder;
  write(study, folder / "a.partial.h5", {});
  const Study back = read(folder / "a.partial.h5");
  EXPECT_EQ(back.bands->run_head_max, b.run_head_max);
  EXPECT_EQ(back.bands->run_head_min, b.run_head_min);
  EXPECT_EQ(back.bands->run_history_head, b.run_history_head);
  EXPECT_EQ(back.bands->history_head, b.history_head);
  EXPECT_EQ(back.bands->history_time, b.history_time);
  EXPECT_EQ(back.bands->history_draws, b.history_draws);
  EXPECT_EQ(back.bands->history_probability, b.history_probability);
  EXPECT_EQ(back.bands->history_probe_name, b.history_probe_name);
  ASSERT_EQ(back.bands->whole_line.size(), 1U);
  EXPECT_EQ(back.bands->whole_line[0].name, b.whole_line[0].name);
  EXPECT_EQ(back.bands->whole_line[0].probability_upper, b.whole_line[0].probability_upper);
  EXPECT_EQ(back.bands->whole_line[0].probability_range, b.whole_line[0].probability_range);
  EXPECT_EQ(back.bands->whole_line[0].verdict, answers::Verdict::none);
  EXPECT_TRUE(std::isnan(back.bands->whole_line[0].limit));
  EXPECT_EQ(back.bands->run_cavity, b.run_cavity);
  EXPECT_EQ(back.bands->limit_name, b.limit_name);
  EXPECT_EQ(back.bands->run_status, b.run_status);
}

TEST(ResultFile, EqualStudiesGiveEqualBytes) {
  const ScratchFolder folder;
  write(support::sample_study(), folder / "a.h5", {});
  write(support::sample_study(), folder / "b.h5", {});
  EXPECT_EQ(bytes_of(folder / "a.h5"), bytes_of(folder / "b.h5"));
}

TEST(ResultFile, InconsistentVectorsAreOurBugAndLeaveNothing) {
  const ScratchFolder folder;
  Study study = support::sample_study();
  study.transient->probe_head.pop_back();
  EXPECT_THROW(write(study, folder / "a.h5", {}), base::Error);
  EXPECT_TRUE(folder.empty());
}

IoFailure failure_of(const std::function<void()>& action) {
  try {
    action();
  } catch (const IoError& e) {
    return e.failure();
  }
  ADD_FAILURE() << "nothing was thrown";
  return IoFailure::missing;
}

TEST(ResultFile, ItsOwnFileIsReplacedAnotherIsNot) {
  const ScratchFolder folder;
  const std::string path = folder / "a.h5";
  write(support::sample_flow(), path, {});
  write(support::sample_surge(), path, {});  // own name, own mark
  EXPECT_EQ(read(path).verb, "surge");

  const WriteOptions by_user = {.replace = false, .own_name = false};
  EXPECT_EQ(failure_of([&] { write(support::sample_flow(), path, by_user); }), IoFailure::cannot_create);
  EXPECT_EQ(read(path).verb, "surge");
  write(support::sample_flow(), path, {.replace = true, .own_name = false});
  EXPECT_EQ(read(path).verb, "flow");
}

TEST(ResultFile, AFileWithoutItsMarkIsLeftAlone) {
  const ScratchFolder folder;
  const std::string path = folder / "notes.h5";
  std::ofstream(path) << "not ours: headband-results\n";
  const std::string before = bytes_of(path);
  EXPECT_EQ(failure_of([&] { write(support::sample_flow(), path, {}); }), IoFailure::cannot_create);
  EXPECT_EQ(bytes_of(path), before);
  write(support::sample_flow(), path, {.replace = true});
  EXPECT_EQ(read(path).verb, "flow");
}

TEST(ResultFile, NothingButAPlainFileIsReplaced) {
  const ScratchFolder folder;
  const WriteOptions force = {.replace = true, .own_name = false};
  EXPECT_EQ(failure_of([&] { write(support::sample_flow(), folder.path(), force); }), IoFailure::cannot_create);
  EXPECT_EQ(failure_of([&] { write(support::sample_flow(), "/dev/null", force); }), IoFailure::cannot_create);
}

TEST(ResultFile, AFolderThatIsNotThereIsSaid) {
  const ScratchFolder folder;
  EXPECT_EQ(failure_of([&] { write(support::sample_flow(), folder / "no/such/a.h5", {}); }), IoFailure::cannot_create);
}

TEST(ResultFile, ReadingTellsMissingFromDamaged) {
  const ScratchFolder folder;
  EXPECT_EQ(failure_of([&] { static_cast<void>(read(folder / "none.h5")); }), IoFailure::missing);
  EXPECT_EQ(failure_of([&] { static_cast<void>(read(folder.path())); }), IoFailure::damaged);
  std::ofstream(folder / "text.h5") << "plain text";
  EXPECT_EQ(failure_of([&] { static_cast<void>(read(folder / "text.h5")); }), IoFailure::damaged);
  std::ofstream(folder / "empty.h5").flush();
  EXPECT_EQ(failure_of([&] { static_cast<void>(read(folder / "empty.h5")); }), IoFailure::damaged);
}

}  // namespace
}  // namespace headband::resultfile
