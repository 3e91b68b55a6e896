// SPDX-License-Identifier: MIT
#include "montecarlo/propagate/band.hpp"

#include "core/base/error.hpp"
#include "core/casefile/read.hpp"
#include "core/resultfile/result_file.hpp"
#include "core/steady/evaluate.hpp"
#include "montecarlo/bands/counts.hpp"

#include <gtest/gtest.h>

#include <algorithm>
#include <atomic>
#include <chrono>
#include <cmath>
#include <string>
#include <thread>

namespace headband::montecarlo {
namespace {

/// A main whose flow is known; invented. Words replace the lines marked so.
std::string words(const std::string& band, const std::string& more = "") {
  return R"(
[liquid]
name = "test oil"
density = "850 kg/m3"
viscosity = "10 cSt ± 20 %"
[[basin]]
name = "source"
level = "400 m"
[[place]]
name = "end"
elevation = "0 m"
[[pipe]]
name = "main"
from = "source"
to = "end"
length = "10000 m"
bore = "500 mm ± 1 %"
roughness = "0.05 mm x/ 1.2"
[[draw_off]]
name = "use"
at = "end"
flow = "250 L/s"
[friction]
scatter = "± 10 %"
[surge]
duration = "1 s"
cavities = "off"
[band]
answers = [{ pressure_drop = ["end", "source"], name = "rise" }, { head = "end", name = "head at the end" }]
)" + band +
         "\n" + more;
}

struct Ready {
  network::Case c;
  network::Plan plan;
  CentralRun central;
};

Ready ready(const std::string& text) {
  auto reading = casefile::read_text("case.toml", text, ".");
  for (const auto& p : reading.problems) ADD_FAILURE() << p.path << ": " << p.what << " " << p.hint;
  Ready r{.c = std::move(reading.value), .plan = {}, .central = {}};
  r.plan = network::make_plan(r.c);
  const auto values = network::realise(r.c, r.plan);
  steady::SteadySolver solver(r.c, r.plan);
  steady::SteadyState<1> state;
  solver.solve<1>(values, state);
  for (const auto& a : r.plan.answers)
    r.central.answer_value.push_back(steady::answer<1>(r.plan, values, state, a).number);
  for (const auto& l : r.plan.limits)
    r.central.limit_value.push_back(steady::answer<1>(r.plan, values, state, l.subject).number);
  r.central.answer_grid_bound.assign(r.plan.answers.size(), 0.0);
  r.central.limit_grid_bound.assign(r.plan.limits.size(), 0.0);
  return r;
}

BandOutcome band(const Ready& r, BandOptions options = {}) { return run_band(r.c, r.plan, r.central, options); }

bool says(const std::vector<std::string>& list, const std::string& part) {
  return std::ranges::any_of(list, [&](const std::string& s) { return s.find(part) != std::string::npos; });
}

const char* const head_limit = "[[limit]]\nname = \"head\"\nhead = \"end\"\nnot_under = \"365 m\"\n";

TEST(Band, AnswersHoldTogether) {
  const Ready r = ready(words("draws = 4096\nseed = 5", std::string(head_limit) + "at_most = \"30 %\"\n"));
  const BandOutcome out = band(r);
  ASSERT_EQ(out.bands.answers.size(), 2U);
  EXPECT_EQ(out.bands.draws, 4096);
  EXPECT_EQ(out.bands.failed, 0);
  EXPECT_TRUE(out.warnings.empty());
  const auto& rise = out.bands.answers[0];
  EXPECT_EQ(rise.kind, "pressure_drop");
  EXPECT_EQ(rise.unit, "Pa");
  ASSERT_EQ(rise.quantiles.size(), 5U);
  for (const auto& q : rise.quantiles) {
    EXPECT_LE(q.lower, q.value);
    EXPECT_GE(q.upper, q.value);
  }
  EXPECT_EQ(rise.modes, 1);
  // input and output rows agree with the draw alone: head at the end by the same physics
  ASSERT_EQ(out.bands.input_name,
            (std::vector<std::string>{"liquid viscosity", "main bore", "main roughness", "friction scatter"}));
  ASSERT_EQ(out.bands.output_value.size(), 2U * 4096U);
  ASSERT_EQ(out.bands.input_value.size(), 4U * 4096U);
  for (const long long draw : {0LL, 17LL, 4095LL}) {
    const auto scores = scores_of_draw(r.c, 5, 4096, draw);
    network::Scores<1> lanes;
    for (const double s : scores) lanes.emplace_back(s);
    network::Values<1> values;
    network::realise<1>(r.c, r.plan, lanes, values);
    steady::SteadySolver solver(r.c, r.plan);
    steady::SteadyState<1> state;
    solver.solve<1>(values, state);
    const auto i = static_cast<std::size_t>(draw);
    EXPECT_EQ(out.bands.output_value[2 * i + 1], steady::answer<1>(r.plan, values, state, r.plan.answers[1]).number);
    EXPECT_EQ(out.bands.input_value[4 * i + 1], values.pipes[0].bore.number);
    EXPECT_EQ(out.bands.input_value[4 * i + 3], values.pipes[0].friction_scatter.number);
  }
  // the limit's numbers are the counts of those rows
  long long broken = 0;
  for (std::size_t i = 0; i < 4096; ++i) broken += out.bands.output_value[2 * i + 1] < 365.0 ? 1 : 0;
  ASSERT_EQ(out.limits.size(), 1U);
  EXPECT_DOUBLE_EQ(out.limits[0].probability, static_cast<double>(broken) / 4096.0);
  EXPECT_DOUBLE_EQ(out.limits[0].probability_upper, probability_at_most(broken, 4096, 0.95));
  EXPECT_DOUBLE_EQ(out.limits[0].probability_lower, probability_at_least(broken, 4096, 0.95));
}

TEST(Band, BudgetAndSharesAddUp) {
  const Ready r = ready(words("draws = 4096\nseed = 5"));
  const auto out = band(r);
  const auto& a = out.bands.answers[0];
  // nearly a product of independent factors: the groups' variances add up, and so do the first-order shares
  EXPECT_NEAR(std::hypot(a.budget_inputs, a.budget_friction_law) / a.standard_deviation, 1.0, 0.02);
  double first = 0.0;
  for (const auto& s : a.sensitivity) first += s.first;
  EXPECT_NEAR(first, 1.0, 0.003);
  EXPECT_EQ(a.budget_draws, 4096);
  EXPECT_EQ(a.budget_grid, 0.0);
  EXPECT_GT(a.budget_sampling, 0.0);
  const auto scatter = std::ranges::find(a.sensitivity, "friction scatter", &answers::SensitivityAnswer::input);
  EXPECT_NEAR(scatter->first, std::pow(a.budget_friction_law / a.standard_deviation, 2.0), 0.02);
}

TEST(Band, BitsDoNotDependOnThreads) {
  for (const auto* design : {"plain", "latin hypercube", "sobol"}) {
    const Ready r = ready(words("draws = 512\nseed = 5\ndesign = \"" + std::string(design) + "\""));
    const auto one = band(r, {.threads = 1});
    for (const int threads : {2, 3}) {
      const auto more = band(r, {.threads = threads});
      EXPECT_EQ(one.bands.output_value, more.bands.output_value);
      EXPECT_EQ(one.bands.input_value, more.bands.input_value);
      EXPECT_EQ(one.bands.answers[0].standard_deviation, more.bands.answers[0].standard_deviation);
      EXPECT_EQ(one.bands.answers[0].quantiles[0].lower, more.bands.answers[0].quantiles[0].lower);
      EXPECT_EQ(one.bands.answers[0].sensitivity[2].total, more.bands.answers[0].sensitivity[2].total);
    }
  }
}

TEST(Band, StoppedRunIsTakenUpToTheSameBits) {
  const Ready r = ready(words("draws = 65536\nseed = 9", head_limit));
  const auto whole = band(r);
  std::atomic<bool> stop{true};
  const auto none = band(r, {.stop = &stop});
  EXPECT_TRUE(none.stopped);
  EXPECT_EQ(none.bands.draws, 0);
  // a stop that comes in the middle, wherever it falls
  BandOptions stopping{.threads = 2, .stop = &stop};
  stop = false;
  stopping.checkpoint = {};
  std::jthread later([&] {
    std::this_thread::sleep_for(std::chrono::milliseconds(3));
    stop = true;
  });
  auto half = band(r, stopping);
  later.join();
  BandOptions resuming{.threads = 2};
  if (half.stopped) {
    EXPECT_EQ(half.bands.stride, 1);
    EXPECT_EQ(half.bands.run_status.size(), static_cast<std::size_t>(half.bands.draws));
    resuming.resumed = half.bands;
  } else {  // the machine was faster than the stop: take up a part of the whole all the same
    resuming.resumed = whole.bands;
  }
  // cut to an odd number of draws, as if the file held them
  auto& part = *resuming.resumed;
  const std::size_t kept = std::min<std::size_t>(part.run_status.size(), 10011);
  part.run_status.resize(kept);
  part.output_value.resize(2 * kept);
  part.limit_value.resize(kept);
  const auto resumed = band(r, resuming);
  EXPECT_FALSE(resumed.stopped);
  EXPECT_EQ(resumed.bands.output_value, whole.bands.output_value);
  EXPECT_EQ(resumed.bands.answers[1].quantiles[4].value, whole.bands.answers[1].quantiles[4].value);
  EXPECT_EQ(resumed.limits[0].probability, whole.limits[0].probability);
}

TEST(Band, DrawsAreRoundedUpAloud) {
  const auto out = band(ready(words("draws = 2000")));
  EXPECT_EQ(out.bands.draws, 2048);
  EXPECT_EQ(out.bands.draws_asked, 2000);
  EXPECT_TRUE(says(out.warnings, "2000 rounded up to 2048"));
  EXPECT_EQ(band(ready(words("draws = 100\ndesign = \"plain\""))).bands.draws, 100);
}

TEST(Band, UntilStopsWhereTheBandIsKnown) {
  const Ready r = ready(words("until = \"2 % of the band\"\nseed = 3"));
  const auto out = band(r);
  EXPECT_GE(out.bands.draws, 256);
  EXPECT_LT(out.bands.draws, 1 << 20);
  for (const auto& a : out.bands.answers) {
    const double width = a.quantiles.back().value - a.quantiles.front().value;
    EXPECT_LE(0.5 * (a.quantiles.back().upper - a.quantiles.back().lower), 0.02 * width);
    EXPECT_LE(0.5 * (a.quantiles.front().upper - a.quantiles.front().lower), 0.02 * width);
  }
  // the draws are those of a band that asked for as many
  const auto fixed = band(ready(words("draws = " + std::to_string(out.bands.draws) + "\nseed = 3")));
  EXPECT_EQ(fixed.bands.output_value, out.bands.output_value);
}

TEST(Band, LatinHypercubeTakesNoUntil) {
  auto r = ready(words("draws = 100"));
  r.c.band.design = network::Design::latin_hypercube;
  r.c.band.until_share = 0.01;
  EXPECT_THROW(static_cast<void>(band(r)), base::InputError);
}

TEST(Band, RangesGiveLeastAndMost) {
  auto text = words("draws = 1024\nseed = 5", std::string(head_limit) + "at_most = \"30 %\"\n");
  const std::string level = "level = \"400 m\"";
  text.replace(text.find(level), level.size(), "level = \"398 m .. 404 m, not random\"");
  const Ready r = ready(text);
  const auto out = band(r);
  const auto& head = out.bands.answers[1];
  ASSERT_TRUE(head.range.has_value());
  const double median = std::ranges::find(head.quantiles, 0.5, &answers::QuantileAnswer::probability)->value;
  EXPECT_NEAR((*head.range)[0], median - 3.0, 1e-9);  // the middle is 401 m
  EXPECT_NEAR((*head.range)[1], median + 3.0, 1e-9);
  const auto& limit = out.limits[0];
  ASSERT_TRUE(limit.probability_range.has_value());
  EXPECT_LT((*limit.probability_range)[0], limit.probability);
  EXPECT_GT((*limit.probability_range)[1], limit.probability);
  EXPECT_EQ(limit.worst_corner, "source level = 398 m");
  EXPECT_EQ(limit.verdict, answers::Verdict::cannot_tell);  // kept at 404 m, broken at 398 m
  EXPECT_NE(limit.reason.find("source level"), std::string::npos) << limit.reason;
}

TEST(Band, SurgeLimitsCannotBeToldFromTheSteadyState) {
  const std::string event = "[[event]]\nat = \"0 s\"\ndraw_off = \"use\"\nto = \"0 L/s\"\nover = \"10 s\"\n";
  auto limit = [](const std::string& bound) {
    return "[[limit]]\nname = \"peak\"\nhighest_pressure = \"" + bound + "\"\nwhere = \"end\"\nat_most = \"5 %\"\n";
  };
  const auto kept = band(ready(words("draws = 256", event + limit("60 bar g"))));
  EXPECT_EQ(kept.limits[0].verdict, answers::Verdict::cannot_tell);
  EXPECT_EQ(kept.limits[0].reason, "needs surge");
  const auto broken = band(ready(words("draws = 256", event + limit("10 bar g"))));
  EXPECT_EQ(broken.limits[0].verdict, answers::Verdict::not_ok);
  const auto no_event = band(ready(words("draws = 256", limit("60 bar g"))));
  EXPECT_EQ(no_event.limits[0].verdict, answers::Verdict::ok);
}

TEST(Band, GridBoundOfTheCentralRunMovesTheCounts) {
  Ready r = ready(words("draws = 1024\nseed = 5", std::string(head_limit) + "at_most = \"30 %\"\n"));
  const auto exact = band(r);
  r.central.limit_grid_bound = {0.5};
  const auto bounded = band(r);
  EXPECT_EQ(bounded.limits[0].probability, exact.limits[0].probability);
  EXPECT_GT(bounded.limits[0].probability_upper, exact.limits[0].probability_upper);
  EXPECT_LT(bounded.limits[0].probability_lower, exact.limits[0].probability_lower);
  r.central.limit_grid_bound = {answers::missing};
  EXPECT_EQ(band(r).limits[0].verdict, answers::Verdict::cannot_tell);
  // where the central run knows the side of keeping, the lower bound counts by it and the upper one stays open
  r.central.limit_bound_to_kept = {0.5};
  const auto one_side = band(r);
  EXPECT_EQ(one_side.limits[0].probability_lower, bounded.limits[0].probability_lower);
  EXPECT_EQ(one_side.limits[0].probability_upper, 1.0);
}

TEST(Band, ImpossibleCorrelationsAreRefused) {
  const std::string together =
      "[together]\n\"main bore, main roughness\" = 0.9\n\"main roughness, friction scatter\" = 0.9\n\"main bore, "
      "friction scatter\" = -0.9\n";
  const Ready r = ready(words("draws = 64", together));
  EXPECT_THROW(static_cast<void>(band(r)), base::InputError);
}

/// A short main whose end valve closes; invented.
std::string surge_words(const std::string& band, const std::string& more = "") {
  return R"(
[liquid]
name = "test water"
density = "1000 kg/m3"
viscosity = "1 cSt"
bulk_modulus = "2.1 GPa"
vapour_pressure = "2 kPa abs"
[[basin]]
name = "tank"
level = "60 m ± 0.5 m"
[[pipe]]
name = "main"
from = "tank"
to = "end"
profile = [["0 m", "0 m"], ["600 m", "0 m"]]
bore = "300 mm"
wave_speed = "1100 m/s ± 5 %"
roughness = "0.1 mm x/ 1.5"
[[valve]]
name = "gate"
from = "end"
to = "air"
flow = "40 L/s ± 3 %"
[[event]]
at = "0 s"
valve = "gate"
to = "0 %"
over = "4 s ± 10 %"
[friction]
scatter = "± 10 %"
[surge]
duration = "6 s"
reaches = 16
[band]
seed = 3
answers = [{ highest_pressure = "end", name = "peak" }, { flow = "main", name = "flow" }]
)" + band +
         "\n" + more;
}

TEST(Band, EachCheckpointIsAFileThatCanBeTakenUp) {
  for (const bool surge : {false, true}) {
    const Ready r = ready(surge ? surge_words("draws = 4096") : words("draws = 1048576\nseed = 9", head_limit));
    const std::string file = testing::TempDir() + "checkpoint.partial.h5";
    long long kept = 0, files = 0;
    BandOptions options{.surge = surge};
    options.checkpoint_seconds = 0.0;
    options.checkpoint = [&](const answers::Bands& bands) {
      if (bands.draws == 0) return;
      answers::Study so_far;
      so_far.state = answers::RunState::partial;
      so_far.pipes.emplace_back().name = "main";
      so_far.bands = bands;
      resultfile::write(so_far, file, {.replace = true});
      kept = bands.draws;
      ++files;
    };
    const auto whole = band(r, options);
    ASSERT_GE(files, 1);
    EXPECT_GT(kept, 0);
    BandOptions resuming{.surge = surge, .threads = 2};
    resuming.resumed = resultfile::read(file).bands;
    ASSERT_TRUE(resuming.resumed.has_value());
    EXPECT_EQ(resuming.resumed->draws, kept);
    const auto resumed = band(r, resuming);
    EXPECT_TRUE(resumed.warnings == whole.warnings);
    EXPECT_EQ(resumed.bands.output_value, whole.bands.output_value);
  }
}

TEST(Band, MarchedDrawsAreTheSameForAnyThreadsAndResume) {
  const Ready r = ready(
      surge_words("draws = 256", "[[limit]]\nname = \"peak\"\nhighest_pressure = \"9 bar g\"\nwhere = \"end\"\n"));
  const auto one = band(r, {.surge = true, .threads = 1});
  EXPECT_EQ(one.bands.failed, 0);
  EXPECT_TRUE(one.bands.surged);
  const auto three = band(r, {.surge = true, .threads = 3});
  EXPECT_EQ(one.bands.output_value, three.bands.output_value);
  EXPECT_EQ(one.bands.profile_head_max, three.bands.profile_head_max);
  ASSERT_FALSE(one.bands.history_head.empty());
  EXPECT_EQ(one.bands.history_head, three.bands.history_head);
  EXPECT_EQ(one.bands.answers[0].sensitivity[0].total, three.bands.answers[0].sensitivity[0].total);
  // stopped after a while, taken up
  std::atomic<bool> stop{false};
  BandOptions stopping{.surge = true, .stop = &stop};
  stopping.progress = [&](long long done, long long) { stop = stop || done > 0; };
  std::jthread later([&] {
    std::this_thread::sleep_for(std::chrono::milliseconds(4));
    stop = true;
  });
  const auto half = band(r, stopping);
  later.join();
  const std::size_t stations = one.bands.profile_share.size();
  if (half.stopped) {
    EXPECT_EQ(half.bands.run_head_max.size(), stations * half.bands.run_status.size());
    EXPECT_EQ(half.bands.run_history_head.size(),
              half.bands.run_status.size() * half.bands.history_time.size() * half.bands.history_probe_name.size());
    BandOptions resuming{.surge = true, .threads = 2};
    resuming.resumed = half.bands;
    const auto resumed = band(r, resuming);
    EXPECT_EQ(resumed.bands.output_value, one.bands.output_value);
    EXPECT_EQ(resumed.bands.profile_head_max, one.bands.profile_head_max);
    EXPECT_EQ(resumed.bands.history_head, one.bands.history_head);
    // a file without the histories of its draws does not fit: anew, and said so
    resuming.resumed->run_history_head.clear();
    const auto anew = band(r, resuming);
    EXPECT_EQ(anew.bands.history_head, one.bands.history_head);
    EXPECT_EQ(says(anew.warnings, "started anew"), half.bands.run_status.size() > 0);
    EXPECT_EQ(resumed.limits[0].probability_upper, one.limits[0].probability_upper);
  }
  EXPECT_TRUE(one.bands.run_head_max.empty());  // a finished band does not keep each draw's envelope
  EXPECT_TRUE(one.bands.run_history_head.empty());
}

TEST(Band, ProfileOfMarchedDrawsIsOrdered) {
  const Ready r = ready(surge_words("draws = 256"));
  const auto out = band(r, {.surge = true});
  const auto& b = out.bands;
  const std::size_t n = b.profile_share.size();
  ASSERT_GT(n, 8U);
  ASSERT_EQ(b.profile_head_max.size(), 3 * n);
  for (std::size_t s = 0; s < n; ++s) {
    EXPECT_LE(b.profile_head_max[s], b.profile_head_max[n + s]);
    EXPECT_LE(b.profile_head_max[n + s], b.profile_head_max[2 * n + s]);
    EXPECT_LE(b.profile_head_min[s], b.profile_head_min[n + s]);
    EXPECT_LE(b.profile_head_min[n + s], b.profile_head_max[n + s]);
  }
  // the valve's end of the profile and the answer there are the same draws: head = pressure / (density gravity)
  const double median = std::ranges::find(b.answers[0].quantiles, 0.5, &answers::QuantileAnswer::probability)->value;
  EXPECT_NEAR(b.profile_head_max[2 * n - 1], median / (1000.0 * 9.80665), 1e-6);
}

TEST(Band, HistoriesOfMarchedDrawsLieWithinTheirEnvelopes) {
  Ready r = ready(surge_words("draws = 256"));
  const auto b = band(r, {.surge = true}).bands;
  const std::size_t times = b.history_time.size(), probes = b.history_probe_name.size(), cells = times * probes;
  ASSERT_EQ(probes, 2U);
  ASSERT_EQ(b.history_head.size(), 3 * cells);
  EXPECT_EQ(b.history_probability, b.profile_probability);
  EXPECT_EQ(b.history_time.front(), 0.0);
  EXPECT_EQ(b.history_time.back(), 6.0);
  const std::size_t n = b.profile_share.size();
  const auto end =
      static_cast<std::size_t>(std::ranges::find(b.history_probe_name, "end") - b.history_probe_name.begin());
  ASSERT_LT(end, probes);
  double highest = -1e9;
  for (std::size_t i = 0; i < cells; ++i) {
    EXPECT_LE(b.history_head[i], b.history_head[cells + i]);
    EXPECT_LE(b.history_head[cells + i], b.history_head[2 * cells + i]);
    if (i % probes != end) continue;
    highest = std::max(highest, b.history_head[2 * cells + i]);
    EXPECT_LE(b.history_head[2 * cells + i], b.profile_head_max[3 * n - 1] + 1e-9);
    EXPECT_GE(b.history_head[i], b.profile_head_min[n - 1] - 1e-9);
  }
  EXPECT_GT(highest, b.profile_head_max[n - 1]);  // the peak of a history is the envelope's, nearly
  // on rows of the central run where there are some
  r.central.time.clear();
  for (int row = 0; row <= 600; ++row) r.central.time.push_back(0.01 * row);
  const auto on_rows = band(r, {.surge = true}).bands;
  EXPECT_EQ(on_rows.history_time.size(), 201U);
  EXPECT_EQ(on_rows.history_time[7], r.central.time[21]);
  EXPECT_EQ(on_rows.profile_head_max, b.profile_head_max);
  EXPECT_EQ(on_rows.history_head[on_rows.history_head.size() - 1], b.history_head[b.history_head.size() - 1]);
  EXPECT_TRUE(band(ready(words("draws = 64"))).bands.history_time.empty());  // no march, no histories
}

TEST(Band, WholeLineStatementCountsDrawsThatBreakAnyRating) {
  std::string text = surge_words("draws = 512");
  const std::string one = "roughness = \"0.1 mm x/ 1.5\"\n";
  text.replace(text.find(one), one.size(), one + "rating = \"7.2 bar g\"\n");
  text += R"(
[[pipe]]
name = "branch"
from = "end"
to = "stub"
length = "300 m"
bore = "200 mm"
wave_speed = "1100 m/s"
roughness = "0.1 mm"
rating = "7.35 bar g ± 5 %"
)";
  const Ready r = ready(text);
  ASSERT_EQ(r.plan.limits.size(), 2U);
  const auto out = band(r, {.surge = true});
  ASSERT_EQ(out.limits.size(), 2U);
  ASSERT_EQ(out.bands.whole_line.size(), 1U);
  const auto& any = out.bands.whole_line[0];
  EXPECT_EQ(any.name, "any rated pipe");
  EXPECT_EQ(any.verdict, answers::Verdict::none);
  const double first = out.limits[0].probability, second = out.limits[1].probability;
  EXPECT_GT(first, 0.0);
  EXPECT_GT(second, 0.0);
  // counted from the draws stored, not from the two probabilities
  double broken = 0.0, draws = 0.0;
  for (std::size_t run = 0; run < out.bands.run_status.size(); ++run) {
    if (out.bands.run_status[run] != 0) continue;
    draws += 1.0;
    broken += out.bands.limit_value[2 * run] > r.plan.limits[0].bound ||
                      out.bands.limit_value[2 * run + 1] > r.plan.limits[1].bound
                  ? 1.0
                  : 0.0;
  }
  EXPECT_EQ(any.probability, broken / draws);
  EXPECT_GT(any.probability, std::max(first, second));
  EXPECT_LE(any.probability, first + second);
  EXPECT_GE(any.probability_upper, std::max(out.limits[0].probability_upper, out.limits[1].probability_upper));
  EXPECT_LT(any.probability_lower, any.probability);
  EXPECT_TRUE(band(ready(words("draws = 64"))).bands.whole_line.empty());  // nothing rated
}

/// Fitted shares of a march against exchanged inputs of the same steady answer: `flow` of the valve is the flow.
TEST(Band, FittedSharesFindTheOnlyInput) {
  const Ready r = ready(surge_words("draws = 512"));
  const auto out = band(r, {.surge = true});
  for (const auto& s : out.bands.answers[1].sensitivity) {
    EXPECT_NEAR(s.first, s.input == "gate flow" ? 1.0 : 0.0, 1e-6) << s.input;
    EXPECT_NEAR(s.total, s.input == "gate flow" ? 1.0 : 0.0, 1e-6) << s.input;
  }
}

TEST(Band, FittedSharesOfCorrelatedInputs) {
  // peak head rises with the flow alone to first order here; the level is made its companion
  const Ready r = ready(surge_words("draws = 2048", "[together]\n\"tank level, gate flow\" = 0.8\n"));
  const auto out = band(r, {.surge = true});
  const auto& shares = out.bands.answers[1].sensitivity;  // flow = gate flow
  const auto of = [&](const std::string& name) {
    return *std::ranges::find(shares, name, &answers::SensitivityAnswer::input);
  };
  const double rho = 2.0 * std::sin(M_PI * 0.8 / 6.0);
  EXPECT_NEAR(of("gate flow").first, 1.0, 0.01);
  EXPECT_NEAR(of("gate flow").total, 1.0 - rho * rho, 0.03);  // the level tells the rest
  EXPECT_NEAR(of("tank level").first, rho * rho, 0.03);
  EXPECT_NEAR(of("tank level").total, 0.0, 0.01);
}

TEST(Band, MoreThanAHundredThousandRunsAreThinned) {
  const auto out = band(ready(words("draws = 250000\ndesign = \"plain\"")));
  EXPECT_EQ(out.bands.draws, 250000);
  EXPECT_EQ(out.bands.stride, 3);
  EXPECT_EQ(out.bands.run_status.size(), 83334U);
  EXPECT_EQ(out.bands.output_value.size(), 2U * 83334U);
}

}  // namespace
}  // namespace headband::montecarlo
