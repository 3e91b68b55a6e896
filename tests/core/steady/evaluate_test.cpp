// SPDX-License-Identifier: MIT

#include "core/steady/evaluate.hpp"
#include "tests/support/case_builder.hpp"

#include <gtest/gtest.h>

#include <algorithm>
#include <vector>

namespace headband {
namespace {

using network::AnswerKind;
using test::CaseBuilder;
using test::Dimension;

/// A line over a hill with a placed and a spread fitting.
struct Hill {
  network::Case c;
  network::Plan plan;
  network::Values<1> values;
  steady::SteadyState<1> state;

  explicit Hill(double crest) {
    CaseBuilder build;
    build.basin("tank", 50.0);
    auto& line = build.pipe("line", "tank", "end", 1000.0, 0.3);
    CaseBuilder::profile_point(line, 0.0, 40.0);
    CaseBuilder::profile_point(line, 600.0, crest);
    CaseBuilder::profile_point(line, 1000.0, 10.0);
    CaseBuilder::fitting(line, "screen", 20.0).at = test::exact(500.0, Dimension::length);
    CaseBuilder::fitting(line, "bend", 0.3, 5.0);
    build.draw_off("out", "end", 0.1);
    const auto everywhere = std::vector<network::Spot>{};
    build.answer(AnswerKind::highest_pressure, "highest", everywhere);
    build.answer(AnswerKind::lowest_pressure, "lowest", {CaseBuilder::along_pipe("line")});
    build.answer(AnswerKind::lowest_pressure, "at 600", {CaseBuilder::on_pipe("line", 600.0)});
    build.answer(AnswerKind::velocity, "velocity", everywhere);
    build.answer(AnswerKind::flow, "flow", {CaseBuilder::along_pipe("line")});
    build.answer(AnswerKind::head, "head", {CaseBuilder::at_place("end")});
    c = build.finish();
    plan = network::make_plan(c);
    values = network::realise(c, plan);
    steady::SteadySolver solver(c, plan);
    solver.solve(values, state);
  }
  [[nodiscard]] double answer(std::size_t i) const { return steady::answer(plan, values, state, plan.answers[i])[0]; }
};

TEST(Evaluate, HeadFallsInStraightLinesWithAStepAtThePlacedFitting) {
  const Hill hill(45.0);
  const auto head = [&](double x) {
    return steady::head_at(hill.plan, hill.values, hill.state, network::PipeId{0}, base::Lanes<1>(x))[0];
  };
  EXPECT_NEAR(head(0.0), 50.0, 1e-12);
  EXPECT_NEAR(head(1000.0), hill.state.place_head[1][0], 1e-11);
  const double velocity = 0.1 / hill.values.pipes[0].area[0];
  const double step = 20.0 * velocity * velocity / (2.0 * 9.80665);
  EXPECT_NEAR(head(499.0) - head(501.0), step + 2.0 * (hill.state.head_loss[0][0] - step) / 1000.0, 1e-10);
}

TEST(Evaluate, AnswersAgreeWithTheirDefinition) {
  const Hill hill(45.0);
  const double weight = 1000.0 * 9.80665;
  const double end_head = hill.state.place_head[1][0];
  EXPECT_NEAR(hill.answer(0), weight * (end_head - 10.0), 1e-6);
  EXPECT_NEAR(hill.answer(1), hill.answer(2), 1e-9);
  EXPECT_LT(hill.answer(1), hill.answer(0));
  EXPECT_NEAR(hill.answer(3), 0.1 / hill.values.pipes[0].area[0], 1e-15);
  EXPECT_NEAR(hill.answer(4), 0.1, 1e-17);
  EXPECT_NEAR(hill.answer(5), end_head, 1e-12);
}

TEST(Evaluate, VapourLimitNamesPipeChainageAndShortfall) {
  const Hill low(45.0), high(58.0);
  EXPECT_EQ(steady::check_vapour(low.plan, low.values, low.state).pipe[0], -1);
  EXPECT_FALSE(steady::clears_vapour(high.plan, high.values, high.state));
  const auto check = steady::check_vapour(high.plan, high.values, high.state);
  ASSERT_EQ(check.pipe[0], 0);
  EXPECT_NEAR(check.chainage[0], 600.0, 1e-12);
  const double head = steady::head_at(high.plan, high.values, high.state, network::PipeId{0}, base::Lanes<1>(600.0))[0];
  EXPECT_NEAR(check.shortfall[0], 58.0 + (1705.0 - 101325.0) / (1000.0 * 9.80665) - head, 1e-10);
}

/// The crest rises through the vapour limit: what is said must be the deepest of a look at every point, also where the
/// line clears the crest by a hair.
TEST(Evaluate, VapourShortfallIsThatOfEveryPoint) {
  for (const bool fitting : {false, true}) {
    CaseBuilder build;
    build.basin("tank", 50.0);
    auto& line = build.pipe("line", "tank", "end", 1000.0, 0.3);
    CaseBuilder::profile_point(line, 0.0, 40.0);
    CaseBuilder::profile_point(line, 600.0, 45.0);
    CaseBuilder::profile_point(line, 1000.0, 10.0);
    if (fitting) CaseBuilder::fitting(line, "screen", 20.0).at = test::exact(500.0, Dimension::length);
    build.draw_off("out", "end", 0.1);
    const auto c = build.finish();
    const auto plan = network::make_plan(c);
    auto values = network::Realiser(c, plan).prepare<8>();
    steady::SteadySolver solver(c, plan);
    steady::SteadyState<8> state;
    solver.solve(values, state);
    EXPECT_EQ(steady::clears_vapour(plan, values, state), !fitting);  // the quick look knows no steps
    int above = 0, below = 0;
    for (int step = -60; step <= 60; ++step) {
      for (int lane = 0; lane < 8; ++lane) {
        // in metres, then in micrometres about the height where the head at the crest meets the limit
        const double off = step % 2 == 0 ? 0.1 * step + 0.01 * lane : 1e-6 * step + 1e-7 * lane;
        values.pipes[0].elevation[1].set(lane, 40.0);
        solver.solve(values, state);
        const auto head = steady::head_at(plan, values, state, network::PipeId{0}, base::Lanes<8>(600.0));
        const double limit = (values.liquid.vapour_pressure[lane] - values.atmosphere[lane]) / (1000.0 * 9.80665);
        values.pipes[0].elevation[1].set(lane, head[lane] - limit + off);
      }
      solver.solve(values, state);
      const auto check = steady::check_vapour(plan, values, state);
      const bool clears = steady::clears_vapour(plan, values, state);
      const auto& pipe = values.pipes[0];
      for (int lane = 0; lane < 8; ++lane) {
        double deepest = 0.0;
        for (std::size_t i = 0; i < pipe.chainage.size(); ++i) {
          const auto head = steady::head_at(plan, values, state, network::PipeId{0}, pipe.chainage[i]);
          const double limit = (values.liquid.vapour_pressure[lane] - values.atmosphere[lane]) /
                               (values.liquid.density[lane] * values.gravity[lane]);
          deepest = std::max(deepest, pipe.elevation[i][lane] + limit - head[lane]);
        }
        EXPECT_EQ(check.shortfall[lane], deepest);
        EXPECT_EQ(check.pipe[static_cast<std::size_t>(lane)], deepest > 0.0 ? 0 : -1);
        EXPECT_FALSE(clears && deepest > 0.0);
        (deepest > 0.0 ? below : above) += 1;
      }
    }
    EXPECT_GT(above, 300);
    EXPECT_GT(below, 300);
  }
}

}  // namespace
}  // namespace headband
