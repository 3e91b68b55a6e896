// SPDX-License-Identifier: MIT

#include "core/steady/evaluate.hpp"
#include "tests/support/case_builder.hpp"

#include <gtest/gtest.h>

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
  const auto check = steady::check_vapour(high.plan, high.values, high.state);
  ASSERT_EQ(check.pipe[0], 0);
  EXPECT_NEAR(check.chainage[0], 600.0, 1e-12);
  const double head = steady::head_at(high.plan, high.values, high.state, network::PipeId{0}, base::Lanes<1>(600.0))[0];
  EXPECT_NEAR(check.shortfall[0], 58.0 + (1705.0 - 101325.0) / (1000.0 * 9.80665) - head, 1e-10);
}

}  // namespace
}  // namespace headband
