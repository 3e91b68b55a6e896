// SPDX-License-Identifier: MIT
#include "core/report/figures.hpp"

#include "core/report/bars.hpp"
#include "tests/support/sample_study.hpp"

#include <gtest/gtest.h>

#include <algorithm>
#include <cmath>

namespace headband::report {
namespace {

const Curve* curve_named(const Plot& plot, const std::string& name) {
  for (const Curve& curve : plot.curves)
    if (curve.name == name) return &curve;
  return nullptr;
}

double value_at(const Plot& plot, const std::string& name, double x) {
  const Curve* curve = curve_named(plot, name);
  if (curve == nullptr) return answers::missing;
  for (std::size_t i = 0; i < plot.abscissa.size(); ++i)
    if (std::abs(plot.abscissa[i] - x) < 1e-6) return curve->y[i];
  return answers::missing;
}

TEST(Profiles, one_plot_a_pipe_with_the_numbers_of_the_study) {
  const auto study = support::sample_study();
  const auto plots = profiles(study);
  ASSERT_EQ(plots.size(), study.pipes.size());
  const Plot& lower = plots[1];
  EXPECT_EQ(lower.title, "Heads along lower main");
  EXPECT_TRUE(std::is_sorted(lower.abscissa.begin(), lower.abscissa.end()));
  const auto& t = *study.transient;
  for (std::size_t i = 0; i < t.station_pipe.size(); ++i) {
    if (t.station_pipe[i] != 1) continue;
    EXPECT_EQ(value_at(lower, "highest", t.chainage[i]), t.head_max[i]);
    EXPECT_EQ(value_at(lower, "lowest", t.chainage[i]), t.head_min[i]);
    EXPECT_EQ(value_at(lower, "vapour line", t.chainage[i]), t.vapour_head[i]);
  }
  for (std::size_t i = 0; i < study.pipes[1].chainage.size(); ++i)
    EXPECT_EQ(value_at(lower, "ground", study.pipes[1].chainage[i]), study.pipes[1].elevation[i]);
}

TEST(Profiles, a_rating_is_a_line_its_pressure_above_the_ground) {
  const auto study = support::sample_study();
  const auto plots = profiles(study);
  const auto& pipe = study.pipes[0];
  for (std::size_t i = 0; i < pipe.chainage.size(); ++i)
    EXPECT_NEAR(value_at(plots[0], "rating", pipe.chainage[i]),
                pipe.elevation[i] + pipe.rating / (study.density * study.gravity),
                1e-9);
  EXPECT_EQ(curve_named(plots[1], "rating"), nullptr);  // lower main is unrated
}

TEST(Profiles, bands_of_the_envelope_are_filled_between_their_ends) {
  const auto study = support::sample_study();
  const Plot plot = profiles(study)[1];
  ASSERT_EQ(plot.fills.size(), 2u);
  for (const Fill& fill : plot.fills)
    for (std::size_t i = 0; i < plot.abscissa.size(); ++i)
      if (std::isfinite(plot.curves[fill.lower].y[i])) {
        EXPECT_LE(plot.curves[fill.lower].y[i], plot.curves[fill.upper].y[i]);
      }
  EXPECT_TRUE(profiles(support::sample_surge())[1].fills.empty());
}

TEST(Profiles, a_limit_stands_where_it_holds) {
  auto study = support::sample_study();
  study.limits[0].where = "upper main";
  study.limits[1].where = "valve chamber";
  const auto plots = profiles(study);
  EXPECT_NE(curve_named(plots[0], "surge rating"), nullptr);
  EXPECT_EQ(curve_named(plots[1], "surge rating"), nullptr);
  EXPECT_EQ(curve_named(plots[1], "no vacuum"), nullptr);
  const auto marked = std::find_if(
      plots[1].points.begin(), plots[1].points.end(), [](const Point& p) { return p.name == "no vacuum"; });
  ASSERT_NE(marked, plots[1].points.end());
  EXPECT_EQ(marked->x, 900.0);
}

TEST(Profiles, many_pipes_keep_those_with_the_extremes) {
  auto study = support::sample_surge();
  const auto pattern = study.pipes[0];
  for (int i = 0; i < 100; ++i) {
    study.pipes.push_back(pattern);
    study.pipes.back().name = "branch " + std::to_string(i);
  }
  study.highest->pipe = "branch 77";
  const auto plots = profiles(study, 10);
  EXPECT_EQ(plots.size(), 10u);
  EXPECT_TRUE(
      std::any_of(plots.begin(), plots.end(), [](const Plot& p) { return p.title == "Heads along branch 77"; }));
}

TEST(Profiles, without_a_run_ground_and_steady_line_remain) {
  const auto plots = profiles(support::sample_flow());
  ASSERT_EQ(plots.size(), 2u);
  EXPECT_NE(curve_named(plots[0], "ground"), nullptr);
  EXPECT_NE(curve_named(plots[0], "steady"), nullptr);
  EXPECT_EQ(curve_named(plots[0], "highest"), nullptr);
}

TEST(Histories, hold_every_step_and_leave_out_what_is_missing) {
  const auto study = support::sample_study();
  const auto plots = histories(study);
  ASSERT_EQ(plots.size(), 3u);
  const auto& t = *study.transient;
  EXPECT_EQ(plots[0].abscissa, t.time);
  for (std::size_t row = 0; row < t.time.size(); ++row)
    EXPECT_EQ(plots[0].curves[1].y[row], t.probe_pressure[row * 3 + 1]);
  EXPECT_EQ(plots[2].curves.size(), 2u);  // the third probe has no flow of its own
}

TEST(Histories, heads_carry_the_bands_of_their_draws_behind_them) {
  const auto study = support::sample_study();
  const auto& b = *study.bands;
  const auto plots = histories(study);
  const Plot& heads = plots[1];
  ASSERT_EQ(heads.y.shown, Shown::head);
  ASSERT_EQ(heads.curves.size(), 9u);
  ASSERT_EQ(heads.fills.size(), 3u);
  EXPECT_NE(heads.message.find("Shaded: 2.5\u00a0% to 97.5\u00a0% of the draws, at each of "), std::string::npos)
      << heads.message;
  for (std::size_t k = 0; k < 3; ++k) {
    const Fill& fill = heads.fills[k];
    const Curve& low = heads.curves[fill.lower];
    const Curve& high = heads.curves[fill.upper];
    const Curve& line = heads.curves[6 + k];
    EXPECT_EQ(line.name, b.history_probe_name[k]);
    EXPECT_EQ(low.name, line.name + ", 2.5\u00a0%");
    EXPECT_EQ(fill.ink, line.ink);
    std::size_t there = 0;
    for (std::size_t row = 0; row < heads.abscissa.size(); ++row) {
      if (row % 4 != 0) {
        EXPECT_TRUE(std::isnan(low.y[row]));
        continue;
      }
      EXPECT_EQ(low.y[row], b.history_head[(row / 4) * 3 + k]);
      EXPECT_EQ(high.y[row], b.history_head[(2 * b.history_time.size() + row / 4) * 3 + k]);
      EXPECT_LT(low.y[row], line.y[row]);
      EXPECT_GT(high.y[row], line.y[row]);
      ++there;
    }
    EXPECT_EQ(there, b.history_time.size());
  }
  EXPECT_TRUE(plots[0].fills.empty());  // pressures and flows of the one run alone
  EXPECT_TRUE(histories(support::sample_surge())[1].fills.empty());
}

TEST(Histories, shaded_plots_hold_few_curves) {
  auto study = support::sample_study();
  auto& t = *study.transient;
  const std::size_t rows = t.time.size();
  t.probe_name.clear();
  for (int i = 0; i < 7; ++i) t.probe_name.push_back("probe " + std::to_string(i));
  t.probe_head.assign(rows * 7, 1.0);
  t.probe_pressure.clear();
  t.probe_flow.clear();
  auto& b = *study.bands;
  b.history_probe_name = t.probe_name;
  b.history_head.assign(3 * b.history_time.size() * 7, 1.0);
  const auto plots = histories(study);
  ASSERT_EQ(plots.size(), 3u);
  EXPECT_EQ(plots[0].curves.size(), 9u);
  EXPECT_EQ(plots[2].curves.size(), 3u);
}

TEST(Histories, no_two_curves_of_a_plot_look_alike) {
  auto study = support::sample_surge();
  auto& t = *study.transient;
  const std::size_t rows = t.time.size();
  t.probe_name.clear();
  for (int i = 0; i < 14; ++i) t.probe_name.push_back("probe " + std::to_string(i));
  t.probe_head.assign(rows * 14, 1.0);
  t.probe_pressure.assign(rows * 14, 1.0);
  t.probe_flow.assign(rows * 14, answers::missing);
  const auto plots = histories(study);
  std::size_t curves = 0;
  for (const Plot& plot : plots) {
    for (std::size_t i = 0; i < plot.curves.size(); ++i)
      for (std::size_t j = 0; j < i; ++j)
        EXPECT_NE(std::pair(plot.curves[i].ink, plot.curves[i].dash),
                  std::pair(plot.curves[j].ink, plot.curves[j].dash));
    curves += plot.curves.size();
    EXPECT_LE(plot.curves.size(), 6u);
  }
  EXPECT_EQ(curves, 28u);
  for (std::size_t i = 0; i < plots.size(); ++i)
    for (std::size_t j = 0; j < i; ++j) EXPECT_NE(plots[i].id, plots[j].id);
}

TEST(DeviceSeries, one_plot_a_quantity) {
  const auto plots = device_series(support::sample_study());
  ASSERT_EQ(plots.size(), 3u);
  EXPECT_EQ(plots[0].y.shown, Shown::share);
  EXPECT_EQ(plots[1].y.shown, Shown::flow);
  EXPECT_EQ(plots[2].title, "Devices: gas volume");
  EXPECT_EQ(plots[2].curves[0].name, "vessel");
}

TEST(Density, shares_add_up_and_every_draw_is_in_its_step) {
  const auto study = support::sample_study();
  const auto& b = *study.bands;
  for (std::size_t a = 0; a < b.answers.size(); ++a) {
    const Plot plot = density(study, a);
    ASSERT_GE(plot.abscissa.size(), 9u);
    double sum = 0.0;
    const auto& shares = plot.curves[0].y;
    for (std::size_t i = 0; i + 1 < shares.size(); ++i) sum += shares[i];
    EXPECT_NEAR(sum, 1.0, 1e-12);
    int inside = 0;
    const double low = plot.abscissa[2], high = plot.abscissa[3];
    for (std::size_t cell = a; cell < b.output_value.size(); cell += b.answers.size())
      if (b.output_value[cell] >= low && b.output_value[cell] < high) ++inside;
    EXPECT_NEAR(shares[2] * 510.0, inside, 1.0 + 1e-9);
  }
}

TEST(Density, the_part_that_fails_is_marked_on_the_right_side) {
  const auto study = support::sample_study();
  const Plot peak = density(study, 1);
  ASSERT_EQ(peak.stretches.size(), 1u);
  EXPECT_EQ(peak.stretches[0].from, 12e5);
  EXPECT_EQ(peak.stretches[0].to, peak.x.high);
  EXPECT_TRUE(fails_over(study.limits[0]));
  EXPECT_FALSE(fails_over(study.limits[1]));
  EXPECT_FALSE(fails_over(study.limits[2]));  // 0.1 m3/s with a positive margin over 0.09: not under
}

TEST(Density, a_few_draws_make_no_picture_and_equal_draws_no_trouble) {
  auto study = support::sample_study();
  for (double& value : study.bands->output_value) value = 3.0;
  const Plot flat = density(study, 0);
  EXPECT_TRUE(std::all_of(flat.abscissa.begin(), flat.abscissa.end(), [](double v) { return std::isfinite(v); }));
  EXPECT_EQ(svg(flat, Family::si).find("nan"), std::string::npos);
  for (std::size_t i = 0; i < study.bands->output_value.size(); ++i)  // a pressure held at the vapour limit
    study.bands->output_value[i] = -99320.0 + (i % 2 == 0 ? 0.0 : 1e-11);
  const Plot nearly = density(study, 0);
  EXPECT_GE(nearly.x.high - nearly.x.low, 9e-3);
  EXPECT_EQ(nearly.abscissa.back(), nearly.x.high);
  study.bands->output_value.resize(3 * 19);
  EXPECT_TRUE(density(study, 0).abscissa.empty());
  EXPECT_TRUE(density(study, 99).abscissa.empty());
}

TEST(Scatters, pair_each_draw_with_its_unknown_most_telling_first) {
  const auto study = support::sample_study();
  const auto& b = *study.bands;
  const auto plots = scatters(study, 1);
  ASSERT_EQ(plots.size(), 2u);
  EXPECT_EQ(plots[0].title, "peak against main wave_speed_scatter");
  EXPECT_EQ(plots[1].x.shown, Shown::diameter);  // a wall in metres is shown in mm
  EXPECT_EQ(plots[0].abscissa.size(), 510u);
  EXPECT_TRUE(std::is_sorted(plots[0].abscissa.begin(), plots[0].abscissa.end()));
  for (std::size_t i = 0; i < plots[0].abscissa.size(); i += 50) {
    bool found = false;
    for (std::size_t run = 0; run < 512; ++run)
      found = found || (b.input_value[run * 4 + 2] == plots[0].abscissa[i] &&
                        b.output_value[run * 3 + 1] == plots[0].curves[0].y[i]);
    EXPECT_TRUE(found) << i;
  }
  EXPECT_EQ(scatters(study, 1, 1).size(), 1u);
  EXPECT_TRUE(scatters(study, 2).empty());  // no sensitivity was computed
}

TEST(LimitOf, goes_by_name_then_by_kind_and_place) {
  auto study = support::sample_study();
  EXPECT_EQ(limit_of(study, study.bands->answers[2]), &study.limits[2]);
  EXPECT_EQ(limit_of(study, study.bands->answers[1]), &study.limits[0]);
  study.limits[0].where = "another chamber";
  EXPECT_EQ(limit_of(study, study.bands->answers[1]), nullptr);
  study.bands->answers[1].where = "another chamber";
  EXPECT_EQ(limit_of(study, study.bands->answers[1]), &study.limits[0]);
  EXPECT_EQ(limit_of(study, study.bands->answers[0]), nullptr);
}

}  // namespace
}  // namespace headband::report
