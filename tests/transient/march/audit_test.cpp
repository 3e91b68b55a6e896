// SPDX-License-Identifier: MIT
#include "transient/march/audit.hpp"

#include "tests/transient/march/run_case.hpp"
#include "transient/march/grid_request.hpp"

#include <gtest/gtest.h>

#include <numbers>

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

}  // namespace
}  // namespace headband::test
