// SPDX-License-Identifier: MIT
//
// Movements as a run shows them (convention (o) of the manual): opening of each row against the words of the case, flow
// of each row against the valve's law.
#include "tests/transient/march/run_case.hpp"

#include <gtest/gtest.h>

#include <algorithm>
#include <numbers>

namespace headband::test {
namespace {

/// Opening and flow of the end valve of a run, row by row.
struct Strokes {
  ValveLine line{{.length = 500.0, .wave_speed = 1000.0, .bore = 0.4, .level = 60.0, .flow = 0.1, .factor = 0.02}};

  Marched run(double duration) {
    line.b.surge(duration, 10).cavities = network::Cavities::off;  // step 0.05 s
    line.b.c.surge.grid_check = false;
    return Marched(line.b);
  }
};

TEST(Stroke, BeginsAndEndsBetweenRows) {
  Strokes s;
  s.line.b.move_valve("valve", 0.33, 0.2, 1.11);
  const Marched m = s.run(3.0);
  for (std::size_t row = 0; row < m.rows(); ++row) {
    const double share = std::clamp((m.time(row) - 0.33) / 1.11, 0.0, 1.0);
    EXPECT_NEAR(m.series(row, "valve opening"), 1.0 - 0.8 * share, 1e-14) << m.time(row);
  }
}

TEST(Stroke, FlowOfEachRowIsTheLawOfItsOpening) {
  const std::vector<std::pair<network::ValveLaw, double (*)(double)>> laws = {
      {{network::ValveLawKind::linear, 1.0, {}}, [](double x) { return x; }},
      {{network::ValveLawKind::power, 1.5, {}}, [](double x) { return std::pow(x, 1.5); }},
      {{network::ValveLawKind::quick_opening, 1.0, {}}, [](double x) { return std::sqrt(x); }},
      {{network::ValveLawKind::equal_percentage, 30.0, {}},
       [](double x) { return x > 0.0 ? std::pow(30.0, x - 1.0) : 0.0; }},
      {{network::ValveLawKind::table, 1.0, {{0.0, 0.0}, {0.5, 0.2}, {1.0, 1.0}}},
       [](double x) { return x < 0.5 ? 0.4 * x : 0.2 + 1.6 * (x - 0.5); }}};
  for (const auto& [law, share] : laws) {
    Strokes s;
    s.line.valve->law = law;
    s.line.b.move_valve("valve", 0.2, 0.0, 2.0);
    const Marched m = s.run(4.0);
    const double full = 0.1 / std::sqrt(m.head(0, "end"));
    for (std::size_t row = 0; row < m.rows(); ++row) {
      const double head = m.head(row, "end");
      const double expected = head > 0.0 ? full * share(m.series(row, "valve opening")) * std::sqrt(head) : 0.0;
      EXPECT_NEAR(m.series(row, "valve flow"), expected, 1e-12) << m.time(row);
    }
    EXPECT_EQ(m.series(m.rows() - 1, "valve flow"), 0.0);
  }
}

TEST(Stroke, ATableInSharesIsScaledByTheTimeOfTheStroke) {
  for (const double over : {1.0, 2.5}) {
    Strokes s;
    auto& e = s.line.b.move_valve("valve", 0.12, 0.0, over);
    e.travel_in_shares = true;
    for (const auto& [share, opening] : {std::pair{0.0, 1.0}, {0.3, 0.25}, {1.0, 0.0}})
      e.travel.rows.emplace_back(exact(share, Dimension::share), exact(opening, Dimension::share));
    const Marched m = s.run(4.0);
    for (std::size_t row = 0; row < m.rows(); ++row) {
      const double x = std::clamp((m.time(row) - 0.12) / over, 0.0, 1.0);
      const double expected = x < 0.3 ? 1.0 - 2.5 * x : 0.25 * (1.0 - x) / 0.7;
      EXPECT_NEAR(m.series(row, "valve opening"), expected, 1e-13) << over << " " << m.time(row);
    }
  }
}

TEST(Stroke, ANewOneTakesOverFromThePositionHeld) {
  Strokes s;
  s.line.b.move_valve("valve", 0.0, 0.0, 4.0);
  s.line.b.move_valve("valve", 1.01, 1.0, 0.5);  // at 0.7475 by then
  const Marched m = s.run(6.0);
  for (std::size_t row = 0; row < m.rows(); ++row) {
    const double t = m.time(row), held = 1.0 - 1.01 / 4.0;
    const double expected = t < 1.01 ? 1.0 - t / 4.0 : std::min(1.0, held + (1.0 - held) * (t - 1.01) / 0.5);
    EXPECT_NEAR(m.series(row, "valve opening"), expected, 1e-13) << t;
  }
}

TEST(Stroke, ASwingIsCutAndTakenOverWhereItIsCut) {
  Strokes s;
  s.line.valve->opening = exact(0.8, Dimension::share);
  auto& swing = s.line.b.move_valve("valve", 0.1, 0.0, 0.0);
  swing.kind = network::EventKind::swing_valve;
  swing.instant = false;
  swing.swing = exact(0.3, Dimension::share);
  swing.period = exact(2.0, Dimension::time);
  s.line.b.move_valve("valve", 2.6, 0.0, 1.0);  // at the second crest: 1.1, cut at 1
  const Marched m = s.run(4.0);
  for (std::size_t row = 0; row < m.rows(); ++row) {
    const double t = m.time(row), sine = 0.8 + (t < 0.1 ? 0.0 : 0.3 * std::sin(std::numbers::pi * (t - 0.1)));
    const double expected = t < 2.6 - 1e-9 ? std::min(1.0, sine) : std::max(0.0, 3.6 - t);
    EXPECT_NEAR(m.series(row, "valve opening"), expected, 1e-12) << t;
  }
}

TEST(Stroke, AtOnceActsAtTheNextRowOfTheGridAndTheDifferenceIsTold) {
  for (const double asked : {0.5, 0.52}) {
    Strokes s;
    s.line.b.move_valve("valve", asked, 0.0, 0.0);
    const Marched m = s.run(2.0);
    const double acts = asked > 0.5 ? 0.55 : 0.5;
    const std::size_t row = m.row_at(acts);
    EXPECT_EQ(m.series(row, "valve opening"), 1.0);  // the row at te is the state before
    EXPECT_EQ(m.series(row + 1, "valve opening"), 0.0);
    EXPECT_EQ(m.series(row + 1, "valve flow"), 0.0);
    EXPECT_NEAR(m.head(row, "end"), m.head(0, "end"), 1e-9);
    const double rise = 1000.0 / 9.80665 * 0.1 / (0.25 * std::numbers::pi * 0.16);
    EXPECT_NEAR(m.head(row + 1, "end"), m.head(0, "end") + rise, 0.02 * rise);
    // the state at 0+ stands in the envelopes, with time te: the first instant of the whole rise
    EXPECT_GE(m.place("end").max_head, m.head(0, "end") + rise - 1e-9);
    const auto told = std::count_if(m.run.warnings.begin(), m.run.warnings.end(), [](const std::string& w) {
      return w.find("next row of the grid, 0.03 s later") != std::string::npos;
    });
    EXPECT_EQ(told, asked > 0.5 ? 1 : 0);
  }
}

TEST(Stroke, OfADrawOffAndABasinFollowTheSameRule) {
  CaseBuilder b;
  b.basin("tank", 60.0);
  auto& p = b.pipe("main", "tank", "town", 500.0, 0.4);
  p.wave_speed = exact(1000.0, Dimension::velocity);
  CaseBuilder::profile_point(p, 0.0, 0.0);
  CaseBuilder::profile_point(p, 500.0, 0.0);
  b.draw_off("users", "town", 0.08);
  b.move_draw_off("users", 0.23, 0.02, 1.5);
  b.move_basin("tank", 0.4, 50.0, 2.0);
  b.surge(4.0, 10).cavities = network::Cavities::off;
  b.c.surge.grid_check = false;
  const Marched m(b);
  for (std::size_t row = 0; row < m.rows(); ++row) {
    const double t = m.time(row);
    EXPECT_NEAR(m.series(row, "users flow"), 0.08 - 0.06 * std::clamp((t - 0.23) / 1.5, 0.0, 1.0), 1e-15) << t;
    EXPECT_NEAR(m.head(row, "tank"), 60.0 - 10.0 * std::clamp((t - 0.4) / 2.0, 0.0, 1.0), 1e-12) << t;
  }
}

}  // namespace
}  // namespace headband::test
