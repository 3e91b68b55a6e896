// SPDX-License-Identifier: MIT
#include "transient/march/audit.hpp"

#include "tests/transient/march/run_case.hpp"
#include "transient/march/grid_request.hpp"
#include "transient/march/record.hpp"

#include <gtest/gtest.h>

#include <algorithm>
#include <cmath>
#include <numbers>
#include <vector>

namespace headband::test {
namespace {

/// Keeps the sums of a march; at one row a volume is put into the first pipe by hand.
struct Meddler {
  transient::AuditSums sums;
  long long at = -1;   ///< row, -1: never
  double added = 0.0;  ///< [m3]

  void begin(transient::March<1>& march) { sums.begin(march); }
  bool step(transient::March<1>& march, long long row) {
    sums.step(march);
    if (row == at) {  // (g A / a^2) dH per reach, at the sections between both ends
      const auto& p = march.numbers().pipes[0];
      const double each = added / (p.most_reaches - 1) * p.impedance.number / march.numbers().time_step.number;
      for (int k = 1; k < p.most_reaches; ++k)
        march.state().head[p.first_row + static_cast<std::size_t>(k)] += base::Lanes<1>(each);
    }
    return true;
  }
  void before_jump(transient::March<1>& march, long long) { sums.before_jump(march); }
  void after_jump(transient::March<1>& march, long long) { sums.after_jump(march); }
};

answers::Audit audited(double factor, long long at, double added) {
  ValveLine line({.length = 1000.0, .wave_speed = 1000.0, .bore = 0.4, .level = 60.0, .flow = 0.1, .factor = factor});
  line.b.move_valve("valve", 0.0, 0.3, 4.0);
  line.b.surge(10.0, 20).cavities = network::Cavities::off;
  line.b.c.surge.friction_in_time = network::FrictionInTime::fixed;
  const network::Case c = line.b.finish();
  const network::Plan plan = network::make_plan(c);
  const auto values = network::realise(c, plan);
  steady::SteadySolver solver(c, plan);
  steady::SteadyState<1> steady;
  solver.solve<1>(values, steady);
  transient::Grid grid;
  transient::choose_grid(transient::grid_request(c, plan, values, steady, 0), grid);
  transient::March<1> march(c, plan, transient::make_layout(c, plan, std::vector<bool>(1, false)));
  march.prepare(values, steady, {&grid}, false);
  Meddler meddler;
  meddler.at = at;
  meddler.added = added;
  march.run(meddler);
  return meddler.sums.result(march);
}

TEST(Audit, SeesAThousandthOfAPipePutInByHand) {
  const double pipe = 1000.0 * 0.25 * std::numbers::pi * 0.4 * 0.4;
  for (const double factor : {0.0, 0.02}) {
    const auto clean = audited(factor, -1, 0.0);
    ASSERT_GT(clean.volume_passed, 0.0);
    EXPECT_LT(clean.volume_residual_relative, factor == 0.0 ? 1e-12 : 1e-3);
    for (const double added : {1e-3 * pipe, -1e-3 * pipe}) {
      const auto meddled = audited(factor, 57, added);
      EXPECT_NEAR(meddled.volume_residual, added, (factor == 0.0 ? 1e-9 : 0.02) * pipe * 1e-3) << factor;
      EXPECT_GT(meddled.volume_residual_relative, 100.0 * clean.volume_residual_relative) << factor;
    }
  }
}

/// A record of a march in which a place is not solved from one row on.
struct Spoiled {
  transient::Record record;
  long long from;

  void begin(transient::March<1>& march) { record.begin(march); }
  bool step(transient::March<1>& march, long long row) {
    if (row == from) march.set_status(0, transient::MarchStatus::boundary_not_converged);
    return record.step(march, row);
  }
  void before_jump(transient::March<1>& march, long long row) { record.before_jump(march, row); }
  void after_jump(transient::March<1>& march, long long row) { record.after_jump(march, row); }
};

TEST(Record, TheLastGoodTimeIsBeforeAPlaceThatWasNotSolved) {
  ValveLine line({.length = 1000.0, .wave_speed = 1000.0});
  line.b.move_valve("valve", 0.0, 0.3, 4.0);
  line.b.surge(10.0, 20).cavities = network::Cavities::off;
  const Marched m(line.b);
  transient::Grid grid;
  transient::choose_grid(transient::grid_request(m.c, m.plan, m.values, m.steady, 0), grid);
  transient::March<1> march(m.c, m.plan, transient::make_layout(m.c, m.plan, std::vector<bool>(1, false)));
  march.prepare(m.values, m.steady, {&grid}, false);
  Spoiled spoiled{transient::Record(m.values, true), 57};
  march.run(spoiled);
  transient::SurgeRun run;
  spoiled.record.finish(march, run);
  EXPECT_FALSE(run.completed);
  EXPECT_EQ(run.transient.status, "boundary not converged");
  EXPECT_EQ(run.transient.last_good_time, m.time(56));
  EXPECT_EQ(run.transient.time.size(), m.rows());  // the rows after it are kept, to be looked at
}

/// A frictionless line with a draw-off half way and a valve at its end.
CaseBuilder line_with_draw_off(const std::string& draw_off_at) {
  CaseBuilder b;
  b.c.friction.law.options = {{network::FrictionLaw::none, 1.0}};
  b.basin("tank", 60.0);
  b.pipe("upper", "tank", "mid", 600.0, 0.4).wave_speed = exact(1200.0, Dimension::velocity);
  b.pipe("lower", "mid", "end", 600.0, 0.4).wave_speed = exact(1200.0, Dimension::velocity);
  b.draw_off("take", draw_off_at, 0.02);
  b.valve_by_flow("valve", "end", "air", 0.05);
  b.surge(6.0, 10).cavities = network::Cavities::off;
  b.c.surge.grid_check = false;
  return b;
}

TEST(Audit, AnInstantMovesNothingButItsSubject) {
  CaseBuilder b = line_with_draw_off("mid");
  b.move_draw_off("take", 0.0, 0.05, 3.0);
  b.move_valve("valve", 1.0, 0.0, 0.0);
  const Marched m(b);
  ASSERT_TRUE(m.run.completed);
  EXPECT_LT(m.run.audit.volume_residual_relative, 1e-12);
}

TEST(Audit, WhatABasinGivesAwayItselfDoesNotPassTheLine) {
  CaseBuilder b = line_with_draw_off("tank");
  b.move_valve("valve", 1.0, 0.0, 2.0);
  const Marched m(b);
  ASSERT_TRUE(m.run.completed);
  EXPECT_LT(m.run.audit.volume_residual_relative, 1e-12);
}

/// A line whose low pressure travels through a sloping or level pipe, with a dead leg or without, after a quick
/// closing.
struct CavityLine {
  double rise = 0.0;      ///< of the main's far end over its near one [m]
  double level = 20.0;    ///< [m]
  double flow = 0.15;     ///< [m3/s]
  bool dead_leg = false;  ///< a capped pipe beside the end valve
  double factor = 0.0;    ///< 0 = no friction
  double closing = 0.5;   ///< [s]; 0 = at once
};

Marched with_cavities(const CavityLine& line, int reaches) {
  CaseBuilder b;
  b.basin("tank", line.level);
  const auto add = [&](const char* name, const char* from, const char* to, double length, double low, double high) {
    auto& p = b.pipe(name, from, to, length, 0.4);
    p.wave_speed = exact(1000.0, Dimension::velocity);
    CaseBuilder::profile_point(p, 0.0, low);
    CaseBuilder::profile_point(p, length, high);
    if (line.factor > 0.0) {
      p.roughness = {};
      p.friction_factor = exact(line.factor);
    }
  };
  if (line.factor == 0.0) b.c.friction.law.options = {{network::FrictionLaw::none, 1.0}};
  add("main", "tank", "end", 1000.0, 0.0, line.rise);
  if (line.dead_leg) add("leg", "end", "cap", 350.0, line.rise, line.rise - 2.0);
  b.valve_by_flow("valve", "end", "air", line.flow);
  b.move_valve("valve", 0.0, 0.0, line.closing);
  b.surge(30.0, reaches);
  b.c.surge.grid_check = false;
  return Marched(b);
}

int closed_cavities(const Marched& m) {
  int closed = 0;
  for (const auto& c : m.run.transient.cavities) closed += std::isnan(c.closes) ? 0 : 1;
  return closed;
}

TEST(Audit, CavitiesThatCloseAllAlongTheLineLoseAndMakeNoVolume) {
  const std::vector<CavityLine> lines = {{},
                                         {.rise = 15.0, .level = 30.0, .flow = 0.06},
                                         {.dead_leg = true},
                                         {.rise = -8.0, .level = 12.0, .dead_leg = true, .closing = 3.0},
                                         {.closing = 0.0}};
  for (std::size_t k = 0; k < lines.size(); ++k)
    for (const int reaches : {10, 40, 80}) {
      const Marched m = with_cavities(lines[k], reaches);
      ASSERT_TRUE(m.run.completed) << k;
      EXPECT_GE(closed_cavities(m), 10) << k << " " << reaches;
      EXPECT_LT(m.run.audit.volume_residual_relative, 1e-12) << k << " " << reaches;
      EXPECT_EQ(m.run.audit.cavity_reset_volume, 0.0);
    }
}

TEST(Audit, CavitiesOnBothSidesOfAValveLoseNoVolume) {
  for (const double drop : {0.0, 1.0, 3.0})  // of the ground behind the valve
    for (const int reaches : {10, 40}) {
      CaseBuilder b;
      b.c.friction.law.options = {{network::FrictionLaw::none, 1.0}};
      b.basin("upper tank", 30.0);
      b.basin("lower tank", 10.0);
      const auto add = [&](const char* name, const char* from, const char* to, double low, double high) {
        auto& p = b.pipe(name, from, to, 500.0, 0.4);
        p.wave_speed = exact(1000.0, Dimension::velocity);
        CaseBuilder::profile_point(p, 0.0, low);
        CaseBuilder::profile_point(p, 500.0, high);
      };
      add("first", "upper tank", "a", 0.0, 8.0);
      add("second", "b", "c", 8.0 - drop, 8.0 - drop);
      add("third", "d", "lower tank", 8.0 - drop, 0.0);
      b.valve_by_area("upstream", "a", "b", 0.02);
      b.valve_by_area("middle", "c", "d", 0.05);
      b.move_valve("upstream", 0.5, 0.0, 0.3);
      b.move_valve("upstream", 6.0, 0.6, 0.5);
      b.surge(20.0, reaches);
      b.c.surge.grid_check = false;
      const Marched m(b);
      ASSERT_TRUE(m.run.completed) << m.run.transient.status << " " << drop << " " << reaches;
      int at_the_valve = 0;  // cavities on either side of the open one
      for (const auto& cavity : m.run.transient.cavities)
        at_the_valve +=
            (cavity.pipe == "second" && cavity.chainage == 500.0) || (cavity.pipe == "third" && cavity.chainage == 0.0)
                ? 1
                : 0;
      EXPECT_GE(at_the_valve, 2);
      EXPECT_LT(m.run.audit.volume_residual_relative, 1e-12) << drop << " " << reaches;
    }
}

TEST(Audit, WithFrictionAndCavitiesTheShareIsThatOfTheFriction) {
  for (CavityLine line : {CavityLine{}, {.rise = 15.0, .level = 30.0, .flow = 0.06}, {.dead_leg = true}})
    for (const int reaches : {20, 40, 80}) {
      line.factor = 0.02;
      const Marched m = with_cavities(line, reaches);
      EXPECT_GE(closed_cavities(m), 10) << reaches;
      EXPECT_LT(m.run.audit.volume_residual_relative, 1e-3) << line.rise << " " << reaches;
    }
}

TEST(Cavity, TheRowThatClosesStandsBetweenTheVapourLimitAndTheFreeHead) {
  // one cavity, at the shut valve of a frictionless line: what is left of it is used up by the step that closes it
  const Marched m = with_cavities({.level = 20.0, .flow = 0.06, .closing = 0.0}, 50);
  ASSERT_FALSE(m.run.transient.cavities.empty());
  const double limit = (1705.0 - 101325.0) / (1000.0 * 9.80665);
  const double rise = 1000.0 / 9.80665 * 0.06 / (0.25 * std::numbers::pi * 0.16);
  double lowest = 1e9, highest = -1e9;
  for (std::size_t row = 0; row < m.rows(); ++row) {
    lowest = std::min(lowest, m.head(row, "end"));
    highest = std::max(highest, m.head(row, "end"));
  }
  EXPECT_GE(lowest, limit - 1e-9);
  // never over the first rise, twice the fall to the vapour limit and what the column brought back: 2 a v / g above it
  EXPECT_LE(highest, limit + 2.0 * rise + 2.0 * (20.0 - limit) + 1e-9);
}

}  // namespace
}  // namespace headband::test
