// SPDX-License-Identifier: MIT

#include "core/steady/newton.hpp"

#include "core/steady/evaluate.hpp"
#include "core/steady/steady.hpp"
#include "tests/support/case_builder.hpp"

#include <gtest/gtest.h>

#include <cmath>
#include <fstream>
#include <map>
#include <sstream>

namespace headband {
namespace {

using network::FrictionLaw;
using steady::SteadyStatus;
using test::CaseBuilder;
using test::Dimension;
using test::exact;

/// A case solved once, with its numbers by name.
struct Solved {
  network::Case c;
  network::Plan plan;
  network::Values<1> values;
  steady::SteadyState<1> state;
  bool is_explicit = false;

  explicit Solved(CaseBuilder build)
      : c(build.finish()), plan(network::make_plan(c)), values(network::realise(c, plan)) {
    steady::SteadySolver solver(c, plan);
    is_explicit = solver.is_explicit();
    solver.solve(values, state);
  }
  [[nodiscard]] double head(const std::string& place) const {
    return state.place_head[static_cast<std::size_t>(plan.place_named(place))][0];
  }
  [[nodiscard]] double flow(const std::string& pipe) const {
    return state.pipe_flow[static_cast<std::size_t>(plan.pipe_named(pipe))][0];
  }
  [[nodiscard]] double loss(const std::string& pipe) const {
    return state.head_loss[static_cast<std::size_t>(plan.pipe_named(pipe))][0];
  }
  [[nodiscard]] double device(const std::string& name) const {
    return state.device_flow[static_cast<std::size_t>(plan.device_named(name))][0];
  }
  [[nodiscard]] SteadyStatus status() const { return state.status[0]; }
  /// Largest |sum of flows into a place| of the places without a basin.
  [[nodiscard]] double worst_imbalance() const {
    std::vector<double> sum(plan.places.size(), 0.0);
    for (std::size_t i = 0; i < plan.pipes.size(); ++i) {
      sum[plan.pipes[i].from.at()] -= state.pipe_flow[i][0];
      sum[plan.pipes[i].to.at()] += state.pipe_flow[i][0];
    }
    for (std::size_t d = 0; d < plan.devices.size(); ++d) {
      sum[plan.devices[d].from.at()] -= state.device_flow[d][0];
      if (plan.devices[d].to.exists()) sum[plan.devices[d].to.at()] += state.device_flow[d][0];
    }
    double worst = 0.0;
    for (std::size_t i = 0; i < sum.size(); ++i)
      if (plan.places[i].basin < 0) worst = std::max(worst, std::abs(sum[i]));
    return worst;
  }
};

/// Rows of a reference CSV by their first column.
std::map<std::string, std::vector<std::string>> read_rows(const std::string& name) {
  std::ifstream file(std::string(HEADBAND_REFERENCE_DATA) + "/transient/" + name);
  EXPECT_TRUE(file.good()) << name;
  std::map<std::string, std::vector<std::string>> rows;
  std::string line;
  std::getline(file, line);
  while (std::getline(file, line)) {
    std::istringstream cells(line);
    std::vector<std::string> row;
    for (std::string cell; std::getline(cells, cell, ',');) row.push_back(cell);
    if (!row.empty()) rows[row[0]] = {row.begin() + 1, row.end()};
  }
  return rows;
}

struct PipeRow {
  const char *name, *from, *to;
  double length, bore, roughness;
};

CaseBuilder network_of(const std::vector<PipeRow>& pipes,
                       double level,
                       const std::vector<std::pair<const char*, double>>& demands,
                       double density,
                       double viscosity) {
  CaseBuilder build(density, viscosity);
  build.basin("R", level);
  for (const auto& row : pipes)
    build.pipe(row.name, row.from, row.to, row.length, row.bore).roughness = exact(row.roughness, Dimension::length);
  for (const auto& [at, flow] : demands) build.draw_off(std::string("out ") + at, at, flow);
  // reference: 64/Re below Re = 2000, Colebrook-White above; no pipe lies between 2000 and 4000
  network::Transition rule;
  rule.kind = network::Transition::Kind::sudden;
  rule.from = rule.to = 2000.0;
  build.c.friction.transition.options[0].choice = rule;
  return build;
}

void compare_with_reference(const Solved& solved, const std::string& id) {
  EXPECT_EQ(solved.status(), SteadyStatus::converged);
  for (const auto& [name, row] : read_rows(id + "_pipes.csv")) {
    const double flow = std::stod(row[2]);
    EXPECT_NEAR(solved.flow(name), flow, std::max(1e-6 * std::abs(flow), 1e-9)) << name;
    EXPECT_NEAR(solved.loss(name), std::stod(row[6]), 1e-5) << name;
  }
  for (const auto& [name, row] : read_rows(id + "_nodes.csv"))
    EXPECT_NEAR(solved.head(name), std::stod(row[0]), 1e-5) << name;
  EXPECT_LT(solved.worst_imbalance(), 1e-12);
  EXPECT_LT(solved.state.residual[0], 1e-9);
}

// Reference T10a, T10d: flows 1e-6 relative (1e-9 m3/s), heads 1e-5 m.
TEST(Newton, TwoLoopWaterNetworkMeetsTheReference) {
  const Solved solved(network_of({{"P1", "R", "A", 400, 0.4, 0.00026},
                                  {"P2", "A", "B", 300, 0.25, 0.00026},
                                  {"P3", "A", "C", 350, 0.3, 0.00026},
                                  {"P4", "B", "D", 350, 0.2, 0.00026},
                                  {"P5", "C", "D", 300, 0.2, 0.00026},
                                  {"P6", "C", "E", 400, 0.2, 0.0001},
                                  {"P7", "D", "F", 420, 0.15, 0.0001},
                                  {"P8", "E", "F", 300, 0.15, 0.0001}},
                                 80.0,
                                 {{"B", 0.03}, {"C", 0.02}, {"D", 0.025}, {"E", 0.018}, {"F", 0.022}},
                                 998.2,
                                 1.004e-6));
  EXPECT_FALSE(solved.is_explicit);
  compare_with_reference(solved, "T10a");
  EXPECT_LE(solved.state.iterations, 12);
  // both loops close to well under a millimetre
  EXPECT_NEAR(solved.loss("P2") + solved.loss("P4") - solved.loss("P3") - solved.loss("P5"), 0.0, 1e-9);
  EXPECT_NEAR(solved.loss("P5") + solved.loss("P7") - solved.loss("P6") - solved.loss("P8"), 0.0, 1e-9);
}

TEST(Newton, TwoLoopOilNetworkMeetsTheReference) {
  const Solved solved(network_of({{"P1", "R", "A", 5000, 0.5, 4.5e-5},
                                  {"P2", "A", "B", 3000, 0.35, 4.5e-5},
                                  {"P3", "A", "C", 3500, 0.4, 4.5e-5},
                                  {"P4", "B", "D", 3200, 0.3, 4.5e-5},
                                  {"P5", "C", "D", 2800, 0.3, 4.5e-5},
                                  {"P6", "C", "B", 1500, 0.25, 4.5e-5}},
                                 150.0,
                                 {{"B", 0.09}, {"C", 0.065}, {"D", 0.095}},
                                 860.0,
                                 8e-6));
  compare_with_reference(solved, "T10d");
}

TEST(Newton, FireRingHasTheNumbersOfTheBrief) {  // S8: A 96.5, B = D 92.6, C 88.6 psi; 750 gpm each way
  constexpr double foot = 0.3048, gpm = 231.0 * 0.0254 * 0.0254 * 0.0254 / 60.0, psi = 6894.757293168361;
  CaseBuilder build(999.0, 1.12e-6);
  build.basin("R", 231.0 * foot);
  build.place("R", 0.0);
  const auto add = [&](const char* name, const char* from, const char* to, double length, double bore) {
    auto& pipe = build.pipe(name, from, to, length * foot, bore * 0.0254);
    pipe.roughness = exact(0.0008 * foot, Dimension::length);
    pipe.wave_speed = exact(4000.0 * foot, Dimension::velocity);
  };
  add("R-A", "R", "A", 1500, 12);
  add("A-B", "A", "B", 800, 8);
  add("B-C", "B", "C", 800, 8);
  add("A-D", "A", "D", 800, 8);
  add("D-C", "D", "C", 800, 8);
  add("D-E", "D", "E", 450, 6);
  build.draw_off("hydrant", "C", 1500.0 * gpm);
  const Solved ring(build);
  ASSERT_EQ(ring.status(), SteadyStatus::converged);
  const double weight = 999.0 * 9.80665;
  EXPECT_NEAR(weight * ring.head("A") / psi, 96.5, 0.3);
  EXPECT_NEAR(weight * ring.head("B") / psi, 92.6, 0.3);
  EXPECT_NEAR(weight * ring.head("D") / psi, 92.6, 0.3);
  EXPECT_NEAR(weight * ring.head("C") / psi, 88.6, 0.3);
  EXPECT_NEAR(ring.flow("B-C") / gpm, 750.0, 1e-6);
  EXPECT_NEAR(ring.flow("D-E"), 0.0, 1e-15);
  EXPECT_NEAR(ring.head("E"), ring.head("D"), 1e-9);
}

TEST(Newton, ExplicitAndNewtonAgree) {
  CaseBuilder tree;
  tree.basin("tank", 50.0);
  tree.pipe("trunk", "tank", "fork", 3000.0, 0.3);
  tree.pipe("left", "fork", "a", 2000.0, 0.2);
  tree.pipe("right", "fork", "b", 1500.0, 0.2);
  tree.draw_off("out a", "a", 0.02);
  tree.draw_off("out b", "b", 0.03);
  tree.c.pipes[2].hazen_williams = exact(120.0);
  tree.c.pipes[2].roughness = {};
  CaseBuilder looped = tree;
  looped.basin("tiny", 0.0);  // one more basin behind a valve that is shut in effect: Newton has to do the same work
  looped.pipe("stub", "b", "c", 1.0, 0.2);
  looped.valve_by_area("valve", "c", "tiny", 1e-13);
  const Solved by_continuity(tree), by_newton(looped);
  ASSERT_TRUE(by_continuity.is_explicit);
  ASSERT_FALSE(by_newton.is_explicit);
  EXPECT_NEAR(by_newton.flow("trunk") / by_continuity.flow("trunk"), 1.0, 1e-9);
  for (const char* place : {"fork", "a", "b"})
    EXPECT_NEAR(by_newton.head(place) / by_continuity.head(place), 1.0, 1e-9) << place;
}

TEST(Newton, FlowSizedValvePassesThatFlowAsAnOrdinaryValve) {
  CaseBuilder sized;
  sized.basin("upper", 60.0);
  sized.basin("lower", 20.0);
  sized.pipe("one", "upper", "mid", 900.0, 0.3);
  sized.pipe("two", "upper", "mid", 1200.0, 0.25);
  auto& valve = sized.valve_by_flow("valve", "mid", "lower", 0.15);
  valve.law.kind = network::ValveLawKind::equal_percentage;
  valve.law.parameter = 40.0;
  valve.opening = exact(0.7, Dimension::share);
  const Solved first(sized);
  ASSERT_EQ(first.status(), SteadyStatus::converged);
  EXPECT_NEAR(first.flow("one") + first.flow("two"), 0.15, 1e-15);
  const double coefficient = first.state.valve_coefficient[0][0];

  CaseBuilder ordinary = sized;
  ordinary.c.valves[0].flow = {};
  ordinary.c.valves[0].area = exact(coefficient / std::sqrt(2.0 * 9.80665), Dimension::area);
  ordinary.c.valves[0].discharge_coefficient = exact(1.0);
  const Solved second(ordinary);
  ASSERT_EQ(second.status(), SteadyStatus::converged);
  EXPECT_NEAR(second.device("valve"), 0.15, 1e-10);
  EXPECT_NEAR(second.head("mid"), first.head("mid"), 1e-8);
}

TEST(Newton, PumpDutyPointMeetsTheHandSolution) {
  // Square law H = 76 - b Q^2 through (0.175, 60); quadratic system 30 + r Q^2: Q^2 = 46 / (b + r)
  CaseBuilder build;
  build.basin("sump", 0.0);
  build.basin("tank", 30.0);
  auto& main = build.pipe("main", "header", "tank", 2000.0, 0.4);
  main.roughness = {};
  main.friction_factor = exact(0.02);
  build.pump("pump", "sump", "header", {{0.0, 76.0}, {0.175, 60.0}});
  for (const int count : {1, 2}) {
    build.c.pumps[0].count = count;
    const Solved solved(build);
    ASSERT_EQ(solved.status(), SteadyStatus::converged);
    const double area = 0.25 * 3.14159265358979 * 0.16;
    const double r = 0.02 * 2000.0 / 0.4 / (2.0 * 9.80665 * area * area);
    const double b = 16.0 / (0.175 * 0.175) / (count * count);
    const double by_hand = std::sqrt(46.0 / (b + r));
    EXPECT_NEAR(solved.device("pump") / by_hand, 1.0, 1e-9);
    EXPECT_EQ(solved.state.pump_speed[0][0], 1.0);
  }
}

TEST(Newton, PumpsInSeriesAddTheirHeads) {
  const std::vector<std::pair<double, double>> curve{{0.0, 40.0}, {0.1, 34.0}, {0.2, 20.0}, {0.25, 8.0}};
  CaseBuilder two;
  two.basin("sump", 0.0);
  two.basin("tank", 30.0);
  two.pump("first", "sump", "between", curve);
  two.pump("second", "between", "header", curve);
  two.pipe("main", "header", "tank", 3000.0, 0.4);
  const Solved series(two);
  ASSERT_EQ(series.status(), SteadyStatus::converged);
  EXPECT_NEAR(series.head("between"), 0.5 * series.head("header"), 1e-9);
  EXPECT_NEAR(series.device("first"), series.device("second"), 1e-14);
  EXPECT_GT(series.head("header"), 30.0);
}

TEST(Newton, PumpThatCannotLiftShutsItsCheckValve) {
  CaseBuilder build;
  build.basin("sump", 0.0);
  build.basin("tank", 30.0);
  build.pump("weak", "sump", "header", {{0.0, 25.0}, {0.1, 20.0}});
  build.pump("strong", "sump", "header", {{0.0, 60.0}, {0.1, 50.0}});
  build.pipe("main", "header", "tank", 1000.0, 0.3);
  const Solved solved(build);
  ASSERT_EQ(solved.status(), SteadyStatus::converged);
  EXPECT_EQ(solved.device("weak"), 0.0);
  EXPECT_GT(solved.device("strong"), 0.05);

  build.c.pumps[1].curve.rows[0].second.value = 28.0;  // now neither lifts: all at rest
  build.c.pumps[1].curve.rows[1].second.value = 27.0;
  const Solved still(build);
  ASSERT_EQ(still.status(), SteadyStatus::converged);
  EXPECT_EQ(still.device("strong"), 0.0);
  EXPECT_NEAR(still.flow("main"), 0.0, 1e-12);
  EXPECT_NEAR(still.head("header"), 30.0, 1e-9);
}

TEST(Newton, CheckValvesShutAgainstReverseFlow) {
  for (const double level : {10.0, 40.0, 70.0}) {  // of the tank behind the check valve
    CaseBuilder build;
    build.basin("upper", 50.0);
    build.basin("behind", level);
    build.pipe("one", "upper", "a", 500.0, 0.3);
    build.check_valve("check", "a", "b").kv = exact(3000.0 / 3600.0, Dimension::kv);
    build.pipe("two", "b", "behind", 500.0, 0.3);
    build.draw_off("out", "a", 0.02);
    const Solved solved(build);
    ASSERT_EQ(solved.status(), SteadyStatus::converged) << level;
    if (level < 49.0) {
      EXPECT_GT(solved.device("check"), 0.0) << level;
    } else {
      EXPECT_EQ(solved.device("check"), 0.0) << level;
      EXPECT_NEAR(solved.head("b"), level, 1e-9);
      EXPECT_NEAR(solved.flow("one"), 0.02, 1e-14);
    }
    EXPECT_LT(solved.worst_imbalance(), 1e-12);
  }
}

TEST(Newton, CheckValveWithoutLossCostsNoHead) {
  CaseBuilder build;
  build.basin("upper", 50.0);
  build.basin("lower", 20.0);
  build.pipe("one", "upper", "a", 500.0, 0.3);
  build.check_valve("check", "a", "b");
  build.pipe("two", "b", "lower", 500.0, 0.3);
  const Solved solved(build);
  ASSERT_EQ(solved.status(), SteadyStatus::converged);
  EXPECT_NEAR(solved.head("a"), solved.head("b"), 1e-8);
  EXPECT_NEAR(solved.loss("one") + solved.loss("two"), 30.0, 1e-8);
}

TEST(Newton, ValveToTheAirNeverFlowsInward) {
  CaseBuilder build;
  build.basin("tank", 50.0);
  auto& main = build.pipe("main", "tank", "crest", 500.0, 0.3);
  CaseBuilder::profile_point(main, 0.0, 40.0);
  CaseBuilder::profile_point(main, 500.0, 60.0);
  build.valve_by_area("vent", "crest", "air", 0.01);
  const Solved shut(build);
  ASSERT_EQ(shut.status(), SteadyStatus::converged);
  EXPECT_EQ(shut.device("vent"), 0.0);
  EXPECT_NEAR(shut.head("crest"), 50.0, 1e-9);

  build.c.basins[0].level.value = 80.0;
  const Solved open(build);
  ASSERT_EQ(open.status(), SteadyStatus::converged);
  EXPECT_NEAR(open.device("vent"), 0.01 * std::sqrt(2.0 * 9.80665 * (open.head("crest") - 60.0)), 1e-10);
}

TEST(Newton, SwitchKeepsTheFlowOnTheJumpWhereTwoBasinsForceIt) {
  CaseBuilder build(900.0, 1e-4);
  build.basin("upper", 20.0);
  build.basin("lower", 0.0);
  build.pipe("line", "upper", "lower", 100.0, 0.1);
  network::Transition rule;
  rule.kind = network::Transition::Kind::sudden;
  rule.from = rule.to = 2300.0;
  build.c.friction.transition.options[0].choice = rule;
  const double flow_at_jump = 2300.0 * 1e-4 * 0.25 * 3.14159265358979324 * 0.1;
  const double laminar =
      64.0 / 2300.0 * 1000.0 * std::pow(flow_at_jump / (0.25 * 3.14159265358979324 * 0.01), 2) / (2.0 * 9.80665);
  build.c.basins[0].level.value = 1.1 * laminar;  // over the laminar loss, under the turbulent one
  const Solved jumping(build);
  EXPECT_EQ(jumping.status(), SteadyStatus::on_jump);
  EXPECT_NEAR(jumping.flow("line") / flow_at_jump, 1.0, 1e-12);
  EXPECT_NEAR(jumping.loss("line"), 1.1 * laminar, 1e-12);

  build.c.basins[0].level.value = 0.9 * laminar;
  const Solved below(build);
  EXPECT_EQ(below.status(), SteadyStatus::converged);
  EXPECT_NEAR(below.flow("line") / flow_at_jump, 0.9, 1e-9);

  build.c.basins[0].level.value = 4.0 * laminar;
  const Solved above(build);
  EXPECT_EQ(above.status(), SteadyStatus::converged);
  EXPECT_GT(above.flow("line"), flow_at_jump);
}

TEST(Newton, QuadraticLoopAtRestComesToRest) {
  CaseBuilder build;
  build.basin("tank", 50.0);
  build.c.friction.fixed_factor = exact(0.02);
  build.pipe("one", "tank", "a", 300.0, 0.3);
  build.pipe("two", "a", "b", 300.0, 0.3);
  build.pipe("three", "b", "tank", 300.0, 0.3);
  const Solved still(build);
  ASSERT_EQ(still.status(), SteadyStatus::converged);
  for (const char* pipe : {"one", "two", "three"}) EXPECT_NEAR(still.flow(pipe), 0.0, 1e-9);
  EXPECT_NEAR(still.head("a"), 50.0, 1e-9);
}

TEST(Newton, PartCutOffByAShutValveKeepsItsOwnHead) {
  CaseBuilder build;
  build.basin("tank", 50.0);
  build.pipe("one", "tank", "a", 300.0, 0.3);
  build.pipe("loop", "tank", "a", 300.0, 0.3);
  build.draw_off("out", "a", 0.05);
  auto& valve = build.valve_by_area("valve", "a", "b", 0.01);
  valve.opening = exact(0.0, Dimension::share);
  build.pipe("beyond", "b", "c", 100.0, 0.2);
  build.place("c", 0.0).head = exact(37.0, Dimension::length);
  const Solved solved(build);
  ASSERT_EQ(solved.status(), SteadyStatus::converged);
  EXPECT_NEAR(solved.head("b"), 37.0, 1e-12);
  EXPECT_EQ(solved.device("valve"), 0.0);
}

TEST(Newton, DemandBehindAShutCheckValveIsToldAsNotConverged) {
  CaseBuilder build;
  build.basin("tank", 50.0);
  build.pipe("one", "tank", "a", 300.0, 0.3);
  build.pipe("two", "tank", "a", 300.0, 0.3);
  build.check_valve("check", "b", "a");  // lets flow towards the tank only
  build.pipe("beyond", "b", "c", 100.0, 0.2);
  build.draw_off("out", "c", 0.05);
  const Solved solved(build);
  EXPECT_EQ(solved.status(), SteadyStatus::not_converged);
}

TEST(Newton, LanesAndSinglesGiveTheSameBits) {
  CaseBuilder build = network_of({{"P1", "R", "A", 400, 0.4, 0.00026},
                                  {"P2", "A", "B", 300, 0.25, 0.00026},
                                  {"P3", "A", "C", 350, 0.3, 0.00026},
                                  {"P4", "B", "C", 350, 0.2, 0.00026}},
                                 80.0,
                                 {{"B", 0.03}, {"C", 0.02}},
                                 998.2,
                                 1.004e-6);
  build.c.pipes[0].roughness = test::lognormal(2.6e-4, 3.0, Dimension::length);
  build.c.basins[0].level = test::even(80.0, 70.0, 90.0, Dimension::length);
  build.c.friction.scatter = test::normal(1.0, 0.1, Dimension::factor);
  const auto c = build.finish();
  const auto plan = network::make_plan(c);
  network::Scores<8> scores(c.unknowns.size());
  for (std::size_t u = 0; u < scores.size(); ++u)
    for (int lane = 0; lane < 8; ++lane) scores[u].set(lane, (0.5 + lane + 8.0 * static_cast<double>(u)) / 25.0);
  network::Values<8> eight;
  network::realise(c, plan, scores, eight);
  steady::SteadySolver solver(c, plan);
  steady::SteadyState<8> state8;
  solver.solve(eight, state8);
  for (int lane = 7; lane >= 0; --lane) {  // backwards: the order of draws must not matter
    network::Scores<1> one(scores.size());
    for (std::size_t u = 0; u < scores.size(); ++u) one[u] = scores[u][lane];
    network::Values<1> single;
    network::realise(c, plan, one, single);
    steady::SteadyState<1> state1;
    solver.solve(single, state1);
    EXPECT_EQ(state1.status[0], SteadyStatus::converged);
    for (std::size_t i = 0; i < plan.pipes.size(); ++i) EXPECT_EQ(state1.pipe_flow[i][0], state8.pipe_flow[i][lane]);
    for (std::size_t i = 0; i < plan.places.size(); ++i) EXPECT_EQ(state1.place_head[i][0], state8.place_head[i][lane]);
  }
}

}  // namespace
}  // namespace headband
