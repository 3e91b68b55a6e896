// SPDX-License-Identifier: MIT
//
// Networks, cavities and instants against exact wave tracing (T04, T08, T09d).
#include "tests/core/base/csv.hpp"
#include "tests/transient/march/run_case.hpp"

#include <gtest/gtest.h>

#include <map>
#include <numbers>

namespace headband::test {
namespace {

constexpr double g = 9.80665;

network::Pipe& level_pipe(
    CaseBuilder& b, const char* name, const char* from, const char* to, double length, double wave_speed, double area) {
  auto& p = b.pipe(name, from, to, length, std::sqrt(4.0 * area / std::numbers::pi));
  CaseBuilder::profile_point(p, 0.0, 0.0);
  CaseBuilder::profile_point(p, length, 0.0);
  p.wave_speed = exact(wave_speed, Dimension::velocity);
  return p;
}

// T04a (`tee` false) and T04c: the off-take at V stops, at once (over = 0) or along a straight line.
CaseBuilder stopping_network(bool tee, double over) {
  CaseBuilder b;
  b.c.friction.law.options = {{network::FrictionLaw::none, 1.0}};
  b.basin("R", tee ? 60.0 : 100.0);
  if (tee) {
    level_pipe(b, "P1", "R", "J", 800.0, 1000.0, 0.2);
    level_pipe(b, "P2", "J", "V", 600.0, 1200.0, 0.2);
    level_pipe(b, "P3", "J", "D", 300.0, 1000.0, 0.05);
  } else {
    level_pipe(b, "P1", "R", "J", 600.0, 1200.0, 0.25);
    level_pipe(b, "P2", "J", "V", 500.0, 1000.0, 0.1);
    b.c.show.places = {CaseBuilder::at_place("V"), CaseBuilder::at_place("J"), CaseBuilder::on_pipe("P1", 300.0)};
  }
  b.draw_off("take", "V", 0.1);
  b.move_draw_off("take", 0.0, 0.0, over);
  auto& surge = b.surge(12.0, 40);
  surge.time_step = exact(0.025, Dimension::time);
  surge.cavities = network::Cavities::off;
  return b;
}

std::string probe_of(const std::string& reference) { return reference == "M1" ? "P1 @ 300.000000 m" : reference; }

class Tracing : public ::testing::TestWithParam<bool> {};

TEST_P(Tracing, InstantStopMeetsEveryStep) {
  const bool tee = GetParam();
  CaseBuilder b = stopping_network(tee, 0.0);
  const Marched m(b);
  struct Step {
    double time, head;
  };
  std::map<std::string, std::vector<Step>> steps;
  double largest = 0.0;
  for (const Row& r : reference_rows(tee ? "transient/T04c_steps.csv" : "transient/T04a_steps.csv")) {
    auto& list = steps[r[0]];
    const double before = list.empty() ? (tee ? 60.0 : 100.0) : list.back().head;
    list.push_back({std::stod(r[1]), std::stod(r[2])});
    largest = std::max(largest, std::fabs(list.back().head - before));
  }
  const double dt = m.run.grid.time_step;
  int compared = 0;
  for (const auto& [probe, list] : steps) {
    for (std::size_t k = 0; k < list.size(); ++k) {
      const double to = k + 1 < list.size() ? list[k + 1].time : list[k].time;
      for (std::size_t row = 0; row < m.rows(); ++row)
        if (m.time(row) > list[k].time + 1.01 * dt && m.time(row) < to - 1.01 * dt) {
          ASSERT_NEAR(m.head(row, probe_of(probe)), list[k].head, 1e-6 * largest) << probe << " " << m.time(row);
          ++compared;
        }
    }
  }
  EXPECT_GT(compared, 300);
  EXPECT_LE(m.run.audit.volume_residual_relative, 1e-12);
}

TEST_P(Tracing, LinearStopMeetsEveryRow) {
  const bool tee = GetParam();
  CaseBuilder b = stopping_network(tee, tee ? 1.0 : 1.5);
  const Marched m(b);
  int compared = 0;
  for (const Row& r :
       reference_rows(tee ? "transient/T04c_linear_stoppage.csv" : "transient/T04a_linear_stoppage.csv")) {
    const double t = std::stod(r[0]);
    const std::size_t row = m.row_at(t);
    if (row >= m.rows() || std::fabs(m.time(row) - t) > 1e-9) continue;
    const double tolerance = tee ? 1.03e-4 : 1.23e-4;  // 1e-6 of the largest jump of the instant stop
    ASSERT_NEAR(m.head(row, "V"), std::stod(r[1]), tolerance) << t;
    ASSERT_NEAR(m.head(row, "J"), std::stod(r[2]), tolerance) << t;
    ASSERT_NEAR(m.head(row, tee ? "D" : probe_of("M1")), std::stod(r[3]), tolerance) << t;
    ++compared;
  }
  EXPECT_GT(compared, 200);
}
INSTANTIATE_TEST_SUITE_P(Reference, Tracing, ::testing::Bool(), [](const auto& kind) {
  return kind.param ? "T04c" : "T04a";
});

TEST(Network, OpeningAnOrificeAtOnce) {  // T09d: constant over each 2L/a
  ValveLine line({.length = 800.0, .wave_speed = 1000.0, .bore = 0.4, .level = 40.0, .flow = 0.0});
  line.valve->area = exact(0.0089729351, Dimension::area);
  line.valve->discharge_coefficient = exact(1.0);
  line.valve->opening = exact(0.0, Dimension::share);
  line.b.move_valve("valve", 0.0, 1.0, 0.0);
  line.b.surge(32.0, 40).cavities = network::Cavities::off;
  const Marched m(line.b);
  int compared = 0;
  for (const Row& r : reference_rows("transient/T09d_steps.csv")) {
    const double middle = 0.5 * (std::stod(r[1]) + std::stod(r[2]));
    if (middle > 32.0) continue;
    // the area is printed with 8 digits
    EXPECT_NEAR(m.head(m.row_at(middle), "end"), std::stod(r[3]), 1e-6 * std::stod(r[3])) << middle;
    EXPECT_NEAR(
        m.flow(m.row_at(middle), "end") / (0.25 * std::numbers::pi * 0.16), std::stod(r[4]), 1e-6 * std::stod(r[4]));
    ++compared;
  }
  EXPECT_GT(compared, 15);
}

struct Column {
  const char* name;
  double length, wave_speed, bore, speed, level, vapour, until, collapse, opens, volume, peak, peak_volume_rel;
};

class Parting : public ::testing::TestWithParam<Column> {};

TEST_P(Parting, CavityAtAClosedValve) {
  const Column p = GetParam();
  const double area = 0.25 * std::numbers::pi * p.bore * p.bore;
  ValveLine line(
      {.length = p.length, .wave_speed = p.wave_speed, .bore = p.bore, .level = p.level, .flow = p.speed * area});
  line.b.c.liquid.vapour_pressure = exact(101325.0 + p.vapour * 1000.0 * g, Dimension::pressure);
  line.b.move_valve("valve", 0.0, 0.0, 0.0);
  line.b.surge(p.until, 128);
  const Marched m(line.b);
  ASSERT_TRUE(m.run.completed);
  const double dt = m.run.grid.time_step, rise = p.wave_speed * p.speed / g;
  double head = 0.0, from = -1.0;
  std::vector<std::pair<double, double>> steps;
  for (const Row& r : reference_rows(std::string("transient/") + p.name + "_valve_steps.csv"))
    steps.emplace_back(std::stod(r[0]), std::stod(r[1]));
  int compared = 0;
  for (std::size_t row = 0; row < m.rows(); ++row) {
    const double t = m.time(row);
    bool close = false;
    for (const auto& [at, value] : steps) {
      if (std::fabs(at - t) < 2.5 * dt) close = true;
      if (at <= t) {
        head = value;
        from = at;
      }
    }
    if (close || from < 0.0 || t > p.until) continue;
    ASSERT_NEAR(m.head(row, "end"), head, 1e-3 * rise) << t;
    ++compared;
  }
  EXPECT_GT(compared, 100);
  const answers::CavityAnswer* cavity = nullptr;
  for (const auto& c : m.run.transient.cavities)
    if (c.chainage == p.length && (cavity == nullptr || c.max_volume > cavity->max_volume)) cavity = &c;
  ASSERT_NE(cavity, nullptr);
  EXPECT_NEAR(cavity->opens, p.opens, 2.0 * dt + 1e-9);
  EXPECT_NEAR(cavity->closes, p.collapse, 2.0 * dt + 1e-9);
  EXPECT_NEAR(cavity->max_volume, p.volume, 0.01 * p.volume);
  EXPECT_NEAR(m.place("end").max_head, p.peak, 1e-3 * rise);
  EXPECT_EQ(m.run.grid.grids, 3);
  EXPECT_GT(m.run.audit.cavity_allowance, 0.0);
  EXPECT_LE(std::fabs(m.run.audit.volume_residual), m.run.audit.cavity_allowance + 1e-12 * m.run.audit.volume_passed);
  EXPECT_LE(m.run.audit.volume_residual_relative, 5e-3);
}
INSTANTIATE_TEST_SUITE_P(
    Reference,
    Parting,
    ::testing::Values(
        Column{"T08a", 1000.0, 1000.0, 0.4, 0.6, 30.0, -10.0, 7.3603007, 4.7203007, 2.0, 0.052209249, 128.81703, 0.01},
        Column{
            "T08d", 60.0, 1250.0, 0.08, 0.9, 18.0, -9.8, 0.62904, 0.48997137, 0.096, 0.00044761231, 181.28193, 0.01}),
    [](const auto& column) { return column.param.name; });

}  // namespace
}  // namespace headband::test
