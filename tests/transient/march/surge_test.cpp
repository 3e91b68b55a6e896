// SPDX-License-Identifier: MIT
//
// One run against closed forms and outside values (T01 family, S1): identities first.
#include "transient/march/surge.hpp"

#include "tests/core/base/csv.hpp"
#include "tests/transient/march/run_case.hpp"
#include "transient/march/grid_bound.hpp"

#include <gtest/gtest.h>

#include <algorithm>
#include <cmath>
#include <numbers>

namespace headband::test {
namespace {

constexpr double g = 9.80665;

double area(double bore) { return 0.25 * std::numbers::pi * bore * bore; }

TEST(Surge, NoEventMovesNothing) {
  for (const double factor : {0.0, 0.02, -1.0}) {
    ValveLine line({.factor = factor});
    line.b.surge(100.0);
    const Marched m(line.b);
    ASSERT_TRUE(m.run.completed);
    for (std::size_t row = 0; row < m.rows(); ++row) ASSERT_NEAR(m.head(row, "end"), m.head(0, "end"), 1e-6) << row;
    for (std::size_t s = 0; s < m.run.transient.head_max.size(); ++s)
      EXPECT_NEAR(m.run.transient.head_max[s], m.run.transient.head_min[s], 1e-6);
  }
}

TEST(Surge, InstantStopIsTheSquareWave) {  // T01a
  ValveLine line({.length = 600.0, .wave_speed = 1200.0, .bore = 0.5, .level = 80.0, .flow = 1.5 * area(0.5)});
  line.b.move_valve("valve", 0.0, 0.0, 0.0);
  line.b.surge(6.0).cavities = network::Cavities::off;
  line.b.c.show.places = {CaseBuilder::at_place("end"),
                          CaseBuilder::on_pipe("line", 450.0),
                          CaseBuilder::on_pipe("line", 300.0),
                          CaseBuilder::on_pipe("line", 150.0)};
  const Marched m(line.b);
  const double rise = 1200.0 * 1.5 / g, tolerance = 1e-6 * rise, dt = m.run.grid.time_step;
  EXPECT_NEAR(m.place("end").max_head, 80.0 + rise, tolerance);
  EXPECT_NEAR(m.place("end").min_head, 80.0 - rise, tolerance);
  EXPECT_EQ(m.place("end").time_of_max, 0.0);
  EXPECT_NEAR(m.head(0, "end"), 80.0, tolerance);  // the row of the instant is the state before
  EXPECT_NEAR(m.head(1, "end"), 80.0 + rise, tolerance);
  EXPECT_LE(m.run.audit.volume_residual_relative, 1e-12);
  EXPECT_EQ(m.run.highest.grid_bound, 0.0);
  int compared = 0;
  for (const Row& r : reference_rows("transient/T01a_steps.csv")) {
    const double x = std::stod(r[0]), from = std::stod(r[1]), to = std::stod(r[2]);
    std::string probe = "end";
    for (const auto& name : m.run.transient.probe_name)
      if (name.rfind("line @ ", 0) == 0 && std::fabs(std::stod(name.substr(7)) - x) < 1e-9) probe = name;
    if (x < 600.0 && probe == "end") continue;
    for (std::size_t row = 0; row < m.rows(); ++row)
      if (m.time(row) > from + 1.01 * dt && m.time(row) < to - 1.01 * dt) {
        ASSERT_NEAR(m.head(row, probe), std::stod(r[3]), tolerance) << probe << " " << m.time(row);
        ++compared;
      }
  }
  EXPECT_GT(compared, 500);
}

struct Gate {
  const char* name;
  double length, bore, level, speed_at_full, start, end, over;
  int reaches;
};

class GateMovement : public ::testing::TestWithParam<Gate> {};

TEST_P(GateMovement, FollowsTheChainEquations) {
  const Gate p = GetParam();
  ValveLine line({.length = p.length,
                  .wave_speed = 1200.0,
                  .bore = p.bore,
                  .level = p.level,
                  .flow = p.start * p.speed_at_full * area(p.bore)});
  line.valve->opening = exact(p.start, Dimension::share);
  line.b.move_valve("valve", 0.0, p.end, p.over);
  line.b.surge(10.0, p.reaches).cavities = network::Cavities::off;
  const Marched m(line.b);
  int compared = 0;
  for (const Row& r : reference_rows(std::string("transient/") + p.name + "_series.csv")) {
    const double t = std::stod(r[0]);
    const std::size_t row = m.row_at(t);
    if (row >= m.rows() || std::fabs(m.time(row) - t) > 1e-9) continue;
    ASSERT_NEAR(m.head(row, "end"), std::stod(r[1]), 1e-6 * p.level) << t;
    ++compared;
  }
  EXPECT_GT(compared, 150);
  EXPECT_LE(m.run.audit.volume_residual_relative, 1e-12);
}
INSTANTIATE_TEST_SUITE_P(Reference,
                         GateMovement,
                         ::testing::Values(Gate{"T01d", 600.0, 0.5, 100.0, 0.8, 1.0, 0.0, 6.0, 50},
                                           Gate{"T01g", 900.0, 0.35, 75.0, 2.0, 0.2, 1.0, 4.5, 75}),
                         [](const auto& gate) { return gate.param.name; });

TEST(Surge, ClosingTimesOfT01i) {
  int compared = 0;
  for (const Row& r : reference_rows("transient/T01i_table.csv")) {
    const double over = std::stod(r[0]);
    if (!(over > 0.0)) continue;
    ValveLine line({.length = 600.0, .wave_speed = 1200.0, .bore = 0.5, .level = 120.0, .flow = area(0.5)});
    line.b.move_valve("valve", 0.0, 0.0, over);
    line.b.surge(over + 3.0, 100).cavities = network::Cavities::off;
    const Marched m(line.b);
    EXPECT_NEAR(m.place("end").max_head, std::stod(r[2]), 5e-4 * std::stod(r[2])) << over;
    ++compared;
  }
  EXPECT_GT(compared, 5);
}

// S1 of the practitioner's brief: invented gravity main, hand numbers 122.0 m = 11.95 bar at 3.11 s.
ValveLine hollowmere(double over) {
  ValveLine line(
      {.length = 1800.0, .bore = 0.492, .level = 100.0, .flow = 0.1, .factor = -1.0, .kinematic_viscosity = 1.139e-6});
  line.b.c.liquid.density = exact(999.1, Dimension::density);
  line.pipe->profile[0].second = exact(40.0, Dimension::length);
  line.pipe->profile[1].second = exact(40.0, Dimension::length);
  line.pipe->wave_speed = {};
  line.pipe->wall = exact(0.008, Dimension::length);
  line.pipe->modulus = exact(207e9, Dimension::modulus);
  line.pipe->poisson = exact(0.3);
  line.b.c.surge.friction_in_time = network::FrictionInTime::fixed;
  line.b.move_valve("valve", 0.0, 0.0, over);
  line.b.surge(30.0).friction_in_time = network::FrictionInTime::fixed;
  return line;
}

TEST(Surge, HollowmereGravityMain) {
  ValveLine line = hollowmere(1.0);
  const Marched m(line.b);
  EXPECT_NEAR(m.place("end").max_pressure / 1e5, 11.95, 0.02);
  EXPECT_NEAR(m.place("end").time_of_max, 3.11, 0.02);
  EXPECT_NEAR(m.place("end").min_head - 40.0, -1.3, 0.1);
  EXPECT_TRUE(m.run.transient.cavities.empty());
  for (const auto& [over, bar] : {std::pair{3.0, 11.93}, std::pair{6.0, 8.4}, std::pair{12.0, 6.95}}) {
    ValveLine other = hollowmere(over);
    const Marched n(other.b);
    EXPECT_NEAR(n.place("end").max_pressure / 1e5, bar, bar == 8.4 ? 0.05 : 0.02) << over;
  }
}

/// Top velocity in a dead leg of a line whose column parts, on a grid `finer` times the one of 10 reaches, and its
/// bound.
struct TopVelocity {
  double value, bound;
};
TopVelocity top_velocity(double closing, int finer) {
  ValveLine line({.length = 600.0, .wave_speed = 1200.0, .bore = 0.4, .level = 15.0, .flow = 0.2});
  line.b.move_valve("valve", 0.0, 0.0, closing);
  auto& leg = line.b.pipe("leg", "end", "cap", 300.0, 0.2);
  leg.wave_speed = exact(1200.0, Dimension::velocity);
  CaseBuilder::profile_point(leg, 0.0, 0.0);
  CaseBuilder::profile_point(leg, 300.0, 1.0);
  line.b.answer(network::AnswerKind::velocity, "leg", {CaseBuilder::along_pipe("leg")});
  auto& surge = line.b.surge(12.0, 10);
  surge.time_step = exact(0.05 / finer, Dimension::time);
  surge.grid_check = finer == 1;
  const Marched m(line.b);
  EXPECT_EQ(m.run.grid.reaches[0], 10 * finer);
  return {m.run.answer_value[0], m.run.answer_grid_bound[0]};
}

TEST(Surge, AVelocityThatDoesNotConvergeHasNoBound) {
  int without = 0, with = 0;
  for (double closing = 0.2; closing < 2.1; closing += 0.1) {
    const TopVelocity asked = top_velocity(closing, 1);
    const double fine = top_velocity(closing, 2).value, finest = top_velocity(closing, 4).value;
    const double first = fine - asked.value, last = finest - fine;
    const double larger = std::max(std::fabs(first), std::fabs(last)), swing = asked.value;  // from rest
    const bool converges = first * last <= 0.0 || first / last >= std::sqrt(2.0);
    if (larger < 2.0 * transient::small_share * swing) continue;
    EXPECT_EQ(std::isnan(asked.bound), !converges) << closing << ": " << first << " " << last;
    ++(converges ? with : without);
  }
  EXPECT_GE(without, 1);
  EXPECT_GE(with, 1);
}

TEST(Surge, EstablishmentOfFlow) {  // T09c: valve with one velocity head opened at once
  ValveLine line({.length = 100.0, .wave_speed = 1200.0, .bore = 0.05, .level = 10.0, .flow = 0.0, .factor = 0.004});
  line.b.c.site.gravity = exact(9.81, Dimension::acceleration);
  line.valve->k = exact(1.0);
  line.valve->bore = exact(0.05, Dimension::length);
  line.valve->opening = exact(0.0, Dimension::share);
  line.b.move_valve("valve", 0.0, 1.0, 0.0);
  auto& surge = line.b.surge(30.0);
  surge.cavities = network::Cavities::off;
  surge.friction_in_time = network::FrictionInTime::fixed;
  const Marched m(line.b);
  const double final_speed = 4.669047, tolerance = 0.024498671998718916;  // the reference's own
  int compared = 0;
  for (const Row& r : reference_rows("transient/T09c_series.csv")) {
    const double t = std::stod(r[0]);
    const std::size_t row = m.row_at(t);
    if (row >= m.rows()) continue;
    ASSERT_NEAR(m.flow(row, "end") / area(0.05), std::stod(r[1]), tolerance * final_speed) << t;
    ++compared;
  }
  EXPECT_GT(compared, 100);
}

TEST(Surge, SecondOrderWhenTheStepIsHalved) {
  // a smooth movement: a swing of the valve; friction in every mode
  for (const auto mode :
       {network::FrictionInTime::reynolds, network::FrictionInTime::fixed, network::FrictionInTime::linear}) {
    std::vector<double> history[3];  // at the rows of the coarsest grid
    for (int k = 0; k < 3; ++k) {
      ValveLine line(
          {.length = 1000.0, .wave_speed = 1000.0, .bore = 0.2, .level = 60.0, .flow = 0.06, .factor = -1.0});
      auto& e = line.b.move_valve("valve", 0.0, 1.0, 1.0);
      e.kind = network::EventKind::swing_valve;
      e.instant = false;
      line.valve->opening = exact(0.5, Dimension::share);
      e.swing = exact(0.3, Dimension::share);
      e.period = exact(3.0, Dimension::time);
      auto& surge = line.b.surge(7.0, 20 << k);
      surge.cavities = network::Cavities::off;
      surge.friction_in_time = mode;
      surge.grid_check = false;
      const Marched m(line.b);
      for (std::size_t row = 0; row < m.rows(); row += std::size_t{1} << k) history[k].push_back(m.head(row, "end"));
    }
    double first = 0.0, second = 0.0;
    for (std::size_t row = 0; row < history[0].size(); ++row) {
      first += std::pow(history[1][row] - history[0][row], 2);
      second += std::pow(history[2][row] - history[1][row], 2);
    }
    const double order = 0.5 * std::log2(first / second);
    EXPECT_GT(order, 1.8) << static_cast<int>(mode);
    EXPECT_LT(order, 2.3) << static_cast<int>(mode);
  }
}

}  // namespace
}  // namespace headband::test
