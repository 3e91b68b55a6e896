// SPDX-License-Identifier: MIT

#include "core/steady/evaluate.hpp"
#include "core/steady/steady.hpp"
#include "tests/support/case_builder.hpp"

#include <gtest/gtest.h>

#include <algorithm>
#include <array>
#include <cmath>
#include <numbers>
#include <set>

namespace headband {
namespace {

using network::AnswerKind;
using test::CaseBuilder;
using test::Dimension;

/// S1 of the practitioner's brief: level main from a tank to a valve that passes 100 L/s to the air.
CaseBuilder gravity_main() {
  CaseBuilder build(999.1, 1.139e-6);
  build.basin("tank", 100.0);
  auto& main = build.pipe("main", "tank", "valve chamber", 1800.0, 0.492);
  CaseBuilder::profile_point(main, 0.0, 40.0);
  CaseBuilder::profile_point(main, 1800.0, 40.0);
  main.bore = {};
  main.outside = test::exact(0.508, Dimension::length);
  main.wall = test::exact(0.008, Dimension::length);
  main.modulus = test::exact(207e9, Dimension::modulus);
  main.poisson = test::exact(0.3);
  build.valve_by_flow("end valve", "valve chamber", "air", 0.1);
  return build;
}

TEST(ExplicitFlow, GravityMainHasTheNumbersOfTheBrief) {
  const auto c = gravity_main().finish();
  const auto plan = network::make_plan(c);
  const auto values = network::realise(c, plan);
  steady::SteadySolver solver(c, plan);
  ASSERT_TRUE(solver.is_explicit());
  steady::SteadyState<1> state;
  solver.solve(values, state);
  EXPECT_EQ(state.status[0], steady::SteadyStatus::converged);
  const double velocity = state.pipe_flow[0][0] / values.pipes[0].area[0];
  EXPECT_NEAR(velocity, 0.526, 0.0005);
  EXPECT_NEAR(state.head_loss[0][0], 0.87, 0.005);
  EXPECT_NEAR(state.wave_speed[0][0], 1158.0, 1.0);
  const int end = plan.place_named("valve chamber");
  EXPECT_NEAR(state.place_head[static_cast<std::size_t>(end)][0], 100.0 - state.head_loss[0][0], 1e-12);
  // the coefficient passes exactly the flow it was sized by
  const double head = state.place_head[static_cast<std::size_t>(end)][0] - 40.0;
  EXPECT_NEAR(state.valve_coefficient[0][0] * std::sqrt(head), 0.1, 1e-15);
}

TEST(ExplicitFlow, TreeAddsUpDrawOffs) {
  CaseBuilder build;
  build.basin("tank", 50.0);
  build.pipe("trunk", "tank", "fork", 300.0, 0.3);
  build.pipe("left", "fork", "a", 200.0, 0.2);
  build.pipe("right", "b", "fork", 200.0, 0.2);  // drawn against its flow
  build.draw_off("out a", "a", 0.02);
  build.draw_off("out b", "b", 0.03);
  build.draw_off("in fork", "fork", -0.01);
  const auto c = build.finish();
  const auto plan = network::make_plan(c);
  const auto values = network::realise(c, plan);
  steady::SteadySolver solver(c, plan);
  ASSERT_TRUE(solver.is_explicit());
  steady::SteadyState<1> state;
  solver.solve(values, state);
  EXPECT_NEAR(state.pipe_flow[0][0], 0.04, 1e-17);
  EXPECT_NEAR(state.pipe_flow[1][0], 0.02, 1e-17);
  EXPECT_NEAR(state.pipe_flow[2][0], -0.03, 1e-17);
  EXPECT_LT(state.head_loss[2][0], 0.0);
  const auto head = [&](const char* name) {
    return state.place_head[static_cast<std::size_t>(plan.place_named(name))][0];
  };
  EXPECT_NEAR(head("fork") - head("b"), -state.head_loss[2][0], 1e-12);
  EXPECT_NEAR(head("fork") - head("a"), state.head_loss[1][0], 1e-12);
}

TEST(ExplicitFlow, LoopsSecondBasinsAndOpenValvesAreNotExplicit) {
  CaseBuilder loop;
  loop.basin("tank", 50.0);
  loop.pipe("one", "tank", "a", 300.0, 0.3);
  loop.pipe("two", "tank", "a", 300.0, 0.3);
  loop.draw_off("out", "a", 0.02);
  auto c = loop.finish();
  auto plan = network::make_plan(c);
  EXPECT_FALSE(steady::SteadySolver(c, plan).is_explicit());

  CaseBuilder two;
  two.basin("upper", 50.0);
  two.basin("lower", 40.0);
  two.pipe("one", "upper", "lower", 300.0, 0.3);
  c = two.finish();
  plan = network::make_plan(c);
  EXPECT_FALSE(steady::SteadySolver(c, plan).is_explicit());

  CaseBuilder valve;
  valve.basin("tank", 50.0);
  valve.pipe("one", "tank", "a", 300.0, 0.3);
  valve.valve_by_area("end", "a", "air", 0.01);
  c = valve.finish();
  plan = network::make_plan(c);
  EXPECT_FALSE(steady::SteadySolver(c, plan).is_explicit());
}

TEST(ExplicitFlow, FlowValveWithoutHeadIsAStatus) {
  CaseBuilder build;
  build.basin("tank", 50.0);
  auto& main = build.pipe("main", "tank", "end", 300.0, 0.3);
  CaseBuilder::profile_point(main, 0.0, 45.0);
  CaseBuilder::profile_point(main, 300.0, 60.0);
  build.valve_by_flow("valve", "end", "air", 0.02);
  const auto c = build.finish();
  const auto plan = network::make_plan(c);
  steady::SteadySolver solver(c, plan);
  steady::SteadyState<1> state;
  solver.solve(network::realise(c, plan), state);
  EXPECT_EQ(state.status[0], steady::SteadyStatus::valve_without_head);
  EXPECT_FALSE(steady::is_usable(state.status[0]));
}

TEST(ExplicitFlow, LanesAndSinglesGiveTheSameBits) {
  CaseBuilder build = gravity_main();
  build.c.pipes[0].roughness = test::lognormal(1e-4, 3.0, Dimension::length);
  build.c.pipes[0].wall = test::even(0.008, 0.0072, 0.0084, Dimension::length);
  build.c.valves[0].flow = test::normal(0.1, 0.002, Dimension::flow);
  build.c.friction.scatter = test::normal(1.0, 0.1, Dimension::factor);
  CaseBuilder::fitting(build.c.pipes[0], "bend", 0.3, 4.0).k = test::normal(0.3, 0.09);
  const auto c = build.finish();
  ASSERT_EQ(c.unknowns.size(), 5u);
  const auto plan = network::make_plan(c);
  network::Scores<8> scores(c.unknowns.size());
  for (std::size_t u = 0; u < scores.size(); ++u)
    for (int lane = 0; lane < 8; ++lane) scores[u].set(lane, (0.5 + lane + 8.0 * static_cast<double>(u)) / 41.0);

  const network::Realiser realiser(c, plan);
  auto eight = realiser.prepare<8>();
  realiser.draw(scores, eight);
  steady::SteadySolver solver(c, plan);
  steady::SteadyState<8> state8;
  solver.solve(eight, state8);
  for (int lane = 0; lane < 8; ++lane) {
    network::Scores<1> one(scores.size());
    for (std::size_t u = 0; u < scores.size(); ++u) one[u] = scores[u][lane];
    network::Values<1> single;
    network::realise(c, plan, one, single);
    steady::SteadyState<1> state1;
    solver.solve(single, state1);
    EXPECT_EQ(single.pipes[0].bore[0], eight.pipes[0].bore[lane]);
    EXPECT_EQ(state1.head_loss[0][0], state8.head_loss[0][lane]);
    EXPECT_EQ(state1.place_head[1][0], state8.place_head[1][lane]);
    EXPECT_EQ(state1.wave_speed[0][0], state8.wave_speed[0][lane]);
    EXPECT_EQ(state1.valve_coefficient[0][0], state8.valve_coefficient[0][lane]);
  }
}

/// Two blocks of draws solved at once must give the bits of one after the other, in everything a state holds.
void expect_two_blocks_as_one_by_one(const network::Case& c) {
  const auto plan = network::make_plan(c);
  const network::Realiser realiser(c, plan);
  steady::SteadySolver two(c, plan), one(c, plan);
  std::array<network::Values<8>, 2> values{realiser.prepare<8>(), realiser.prepare<8>()};
  std::array<steady::SteadyState<8>, 2> states;
  std::set<steady::SteadyStatus> met;
  for (int round = 0; round < 20; ++round) {
    for (std::size_t k = 0; k < 2; ++k) {
      network::Scores<8> scores(c.unknowns.size());
      for (std::size_t u = 0; u < scores.size(); ++u)
        for (int lane = 0; lane < 8; ++lane) {
          const double x = 0.618 * (lane + 8.0 * static_cast<double>(k) + 16.0 * round) + 0.37 * static_cast<double>(u);
          scores[u].set(lane, std::clamp(x - std::floor(x), 1e-9, 1.0 - 1e-9));
        }
      realiser.draw(scores, values[k]);
    }
    two.solve(values, states);
    for (std::size_t k = 0; k < 2; ++k) {
      steady::SteadyState<8> alone;
      one.solve(values[k], alone);
      EXPECT_EQ(alone.status, states[k].status);
      met.insert(alone.status.begin(), alone.status.end());
      using State = steady::SteadyState<8>;
      for (const auto column : {&State::pipe_flow,
                                &State::place_head,
                                &State::device_flow,
                                &State::valve_coefficient,
                                &State::friction_factor,
                                &State::reynolds,
                                &State::head_loss,
                                &State::wave_speed,
                                &State::pump_speed}) {
        const auto &a = alone.*column, &b = states[k].*column;
        ASSERT_EQ(a.size(), b.size());
        for (std::size_t i = 0; i < a.size(); ++i)
          for (int lane = 0; lane < 8; ++lane) EXPECT_TRUE(a[i][lane] == b[i][lane] || std::isnan(a[i][lane]));
      }
    }
  }
  EXPECT_TRUE(met.contains(steady::SteadyStatus::converged));
}

TEST(ExplicitFlow, TwoBlocksGiveTheBitsOfOneByOne) {
  CaseBuilder build = gravity_main();
  build.c.pipes[0].wall = test::even(0.008, 0.0072, 0.0084, Dimension::length);
  build.c.valves[0].flow = test::normal(0.1, 0.02, Dimension::flow);
  build.c.friction.scatter = test::normal(1.0, 0.1, Dimension::factor);
  CaseBuilder::fitting(build.c.pipes[0], "bend", 0.3, 4.0).k = test::normal(0.3, 0.09);
  expect_two_blocks_as_one_by_one(build.finish());

  CaseBuilder tree;  // slow pipes in and out of the transition, other laws, a check valve that some draws push back
  tree.basin("tank", 50.0);
  tree.pipe("trunk", "tank", "fork", 300.0, 0.3).roughness = test::lognormal(1e-4, 3.0, Dimension::length);
  tree.pipe("left", "fork", "a", 200.0, 0.1);
  auto& right = tree.pipe("right", "b", "fork", 200.0, 0.2);
  right.manning = test::exact(0.012);
  right.roughness = {};
  tree.check_valve("check", "fork", "c").k = test::exact(2.0);
  tree.draw_off("out a", "a", 0.0).flow = test::normal(0.0005, 0.001, Dimension::flow);
  tree.draw_off("out b", "b", 0.03).flow = test::normal(0.03, 0.01, Dimension::flow);
  tree.draw_off("out c", "c", 0.01).flow = test::normal(0.01, 0.02, Dimension::flow);
  expect_two_blocks_as_one_by_one(tree.finish());

  CaseBuilder loop;  // no tree: by Newton's method
  loop.basin("tank", 50.0).level = test::normal(50.0, 5.0, Dimension::length);
  loop.basin("low", 20.0);
  loop.pipe("a", "tank", "middle", 300.0, 0.3);
  loop.pipe("b", "middle", "low", 300.0, 0.3);
  loop.draw_off("out", "middle", 0.02);
  expect_two_blocks_as_one_by_one(loop.finish());
}

/// S2 of the practitioner's brief: 641 psi, of which 597 are friction and 44 the rise.
TEST(ExplicitFlow, OilLineHasTheNumbersOfTheBrief) {
  constexpr double psi = 6894.757293168361, foot = 0.3048;  // by definition of pound, inch, foot
  constexpr double barrel = 42.0 * 231.0 * 0.0254 * 0.0254 * 0.0254;
  CaseBuilder build(0.845 * 999.0, 3.6e-6);
  build.place("start", 0.0).head = test::exact(700.0, Dimension::length);
  auto& line = build.pipe("line", "start", "end", 28.5 * 5280.0 * foot, 12.0 * 0.0254);
  line.roughness = test::exact(0.0018 * 0.0254, Dimension::length);
  CaseBuilder::profile_point(line, 0.0, 0.0);
  CaseBuilder::profile_point(line, 28.5 * 5280.0 * foot, 120.0 * foot);
  build.draw_off("delivery", "end", 3200.0 * barrel / 3600.0);
  build.answer(AnswerKind::pressure_drop, "drop", {CaseBuilder::at_place("start"), CaseBuilder::at_place("end")});
  build.answer(AnswerKind::pressure_drop, "pipe drop", {CaseBuilder::along_pipe("line")});
  const auto c = build.finish();
  const auto plan = network::make_plan(c);
  const auto values = network::realise(c, plan);
  steady::SteadySolver solver(c, plan);
  steady::SteadyState<1> state;
  solver.solve(values, state);
  EXPECT_NEAR(state.pipe_flow[0][0] / values.pipes[0].area[0] / foot, 6.35, 0.005);
  EXPECT_NEAR(state.reynolds[0][0], 164000.0, 500.0);
  EXPECT_NEAR(state.friction_factor[0][0], 0.01728, 0.00001);
  const double weight = values.liquid.density[0] * values.gravity[0];
  EXPECT_NEAR(weight * state.head_loss[0][0] / psi, 597.0, 1.0);
  EXPECT_NEAR(weight * 120.0 * foot / psi, 44.0, 0.5);
  EXPECT_NEAR(steady::answer(plan, values, state, plan.answers[0])[0] / psi, 641.0, 1.0);
  EXPECT_NEAR(steady::answer(plan, values, state, plan.answers[1])[0],
              steady::answer(plan, values, state, plan.answers[0])[0],
              1e-6);
}

}  // namespace
}  // namespace headband
