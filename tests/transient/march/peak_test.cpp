// SPDX-License-Identifier: MIT
#include "transient/march/peak.hpp"

#include <gtest/gtest.h>

#include <cmath>

namespace headband::transient {
namespace {

/// Extremes of a history sampled at step 1 from 0 to 20.
template <class F>
Extremes sampled(const F& history) {
  Extremes e;
  e.begin(history(0.0));
  for (int k = 1; k <= 20; ++k) e.take(history(k), k, k);
  return e;
}

TEST(Peak, a_bend_between_two_rows_is_found_where_the_lines_meet) {
  for (const double bend : {7.1, 7.5, 7.9}) {
    const auto roof = [&](double t) { return t < bend ? 3.0 * t : 3.0 * bend - 5.0 * (t - bend); };
    const Extremes e = sampled(roof);
    EXPECT_NEAR(e.high.value + e.high.missed(1.0), 3.0 * bend, 1e-12) << bend;
    const Extremes valley = sampled([&](double t) { return -roof(t); });
    EXPECT_NEAR(valley.low.value - valley.low.missed(-1.0), -3.0 * bend, 1e-12) << bend;
  }
}

TEST(Peak, a_bend_on_a_row_and_a_plateau_hide_nothing) {
  EXPECT_NEAR(
      sampled([](double t) { return t < 7.0 ? 3.0 * t : 21.0 - 5.0 * (t - 7.0); }).high.missed(1.0), 0.0, 1e-12);
  EXPECT_EQ(sampled([](double t) { return t < 7.5 ? 0.0 : 10.0; }).high.missed(1.0), 0.0);
  EXPECT_NEAR(sampled([](double t) { return std::fmin(3.0 * t, 22.0); }).high.missed(1.0), 0.0, 1e-12);
}

TEST(Peak, behind_a_front_or_a_cusp_the_straight_side_may_reach_back_a_whole_row) {
  // the history of a square-root closing law: a cusp, then straight down (and its mirror in time)
  for (const double end : {7.05, 7.3, 7.6, 7.95}) {
    const auto cusp = [&](double t) { return t < end ? -50.0 * std::sqrt(end - t) : -0.8 * (t - end); };
    const Extremes e = sampled(cusp);
    EXPECT_GE(e.high.value + e.high.missed(1.0), 0.0) << end;
    EXPECT_LE(e.high.missed(1.0), 0.8 + 1e-12) << end;
    const Extremes mirrored = sampled([&](double t) { return -cusp(14.5 - t); });
    EXPECT_LE(mirrored.low.value - mirrored.low.missed(-1.0), 0.0) << end;
    EXPECT_LE(mirrored.low.missed(-1.0), 0.8 + 1e-12) << end;
    const auto front = [&](double t) { return t < end ? -90.0 : -0.8 * (t - end); };
    EXPECT_GE(sampled(front).high.value + sampled(front).high.missed(1.0), 0.0) << end;
  }
}

TEST(Peak, a_smooth_top_hides_a_second_order_amount) {
  const auto top = [](double scale) {
    return sampled([scale](double t) { return -std::pow(scale * (t - 10.3), 2); }).high.missed(1.0);
  };
  EXPECT_NEAR(top(1.0) / top(0.5), 4.0, 1e-9);
}

TEST(Peak, times_and_changes_beside_the_extreme_are_kept) {
  const Extremes e = sampled([](double t) { return t == 5.0 ? 4.0 : t == 6.0 ? 1.0 : 0.0; });
  EXPECT_EQ(e.high.time, 5.0);
  EXPECT_EQ(e.high.beside, 4.0);
  EXPECT_EQ(e.low.value, 0.0);
}

TEST(Peak, rounding_moves_the_value_but_not_its_time) {
  const Extremes e = sampled([](double t) { return 80.0 + 1e-12 * t; });
  EXPECT_EQ(e.high.value, 80.0 + 1e-12 * 20.0);  // a draw marched in the batch, which keeps no times, has the same
  EXPECT_EQ(e.high.time, 0.0);
  EXPECT_EQ(e.low.time, 0.0);
  const Extremes creeping = sampled([](double t) { return 80.0 + 3e-8 * t; });  // slow, but no rounding
  EXPECT_GE(creeping.high.time, 17.0);
}

}  // namespace
}  // namespace headband::transient
