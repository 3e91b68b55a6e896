// SPDX-License-Identifier: MIT
#include "transient/march/grid_bound.hpp"

#include <gtest/gtest.h>

#include <cmath>

namespace headband::transient {
namespace {

// A value that falls to 100 with the step to the power p: what the grids 1, 1/2, 1/4 say.
double on_grid(double order, double refinement) { return 100.0 + 8.0 * std::pow(refinement, -order); }

TEST(GridBound, two_grids_cover_first_and_second_order) {
  for (const double order : {1.0, 1.5, 2.0}) {
    const auto b = bound_from_two(on_grid(order, 1), on_grid(order, 2));
    EXPECT_TRUE(b.converging);
    EXPECT_GE(b.bound, 8.0) << order;
    EXPECT_LE(b.bound, 24.0) << order;
  }
}

TEST(GridBound, three_grids_cover_the_error_and_hug_it_closer) {
  for (const double order : {0.6, 1.0, 2.0, 2.5}) {
    const auto b = bound_from_three({on_grid(order, 1), on_grid(order, 2), on_grid(order, 4), 1000.0});
    EXPECT_TRUE(b.converging);
    EXPECT_GE(b.bound, 8.0) << order;
    EXPECT_LE(b.bound, 8.0 * 1.3) << order;
  }
}

TEST(GridBound, growing_differences_are_not_converging_unless_they_are_small) {
  EXPECT_FALSE(bound_from_three({100.0, 101.0, 103.0, 50.0}).converging);
  EXPECT_TRUE(std::isnan(bound_from_three({100.0, 101.0, 103.0, 50.0}).bound));
  const auto small = bound_from_three({100.0, 101.0, 103.0, 1e4});
  EXPECT_TRUE(small.converging);
  EXPECT_DOUBLE_EQ(small.bound, 3.0 + 3.0 * 2.0);
}

TEST(GridBound, differences_of_opposite_sign_take_three_times_the_last) {
  EXPECT_DOUBLE_EQ(bound_from_three({100.0, 102.0, 101.5, 10.0}).bound, 1.5 + 3.0 * 0.5);
}

TEST(GridBound, once_a_cavity_closed_no_order_over_one_is_believed) {
  EXPECT_DOUBLE_EQ(bound_from_three({100.0, 64.0, 60.0, 1e3, true}).bound, 40.0 + 1.25 * 4.0);
  EXPECT_LT(bound_from_three({100.0, 64.0, 60.0, 1e3}).bound, 40.0 + 1.1);
  // an order under one is kept
  EXPECT_DOUBLE_EQ(bound_from_three({0.0, 3.0, 5.0, 1e3, true}).bound, 5.0 + 1.25 * 2.0 / 0.5);
}

TEST(GridBound, differences_of_different_peaks_have_no_order) {
  EXPECT_DOUBLE_EQ(bound_from_three({100.0, 108.0, 109.0, 1e3, false, true}).bound, 9.0 + 3.0 * 8.0);
  EXPECT_DOUBLE_EQ(bound_from_three({100.0, 108.0, 107.0, 1e3, false, true}).bound, 7.0 + 3.0 * 8.0);
  EXPECT_DOUBLE_EQ(bound_from_three({100.0, 108.0, 108.0, 1e3, false, true}).bound, 8.0 + 3.0 * 8.0);
  EXPECT_FALSE(bound_from_three({100.0, 101.0, 109.0, 50.0, false, true}).converging);
  EXPECT_EQ(bound_from_three({100.0, 100.0, 100.0, 50.0, false, true}).bound, 0.0);
}

TEST(GridBound, what_the_rows_leave_out_says_nothing_of_an_order) {
  // differences of 1 and 2 under a swing of 100: not converging, unless a row beside a cusp may miss as much
  EXPECT_FALSE(bound_from_three({100.0, 101.0, 103.0, 100.0, false, false, 1.9}).converging);
  const auto beside_a_cusp = bound_from_three({100.0, 101.0, 103.0, 100.0, false, false, 2.1});
  EXPECT_TRUE(beside_a_cusp.converging);
  EXPECT_DOUBLE_EQ(beside_a_cusp.bound, 3.0 + 3.0 * 2.0);
  EXPECT_FALSE(
      bound_from_three({100.0, 101.0, 103.0, 100.0, true, false, 2.1}).converging);  // with cavities it may be more
}

TEST(GridBound, rounding_is_no_difference) {
  EXPECT_EQ(bound_from_three({100.0, 100.0 + 1e-8, 100.0 - 1e-8, 10.0}).bound, 0.0);
  EXPECT_EQ(bound_from_two(100.0, 100.0 + 1e-8).bound, 0.0);
}

}  // namespace
}  // namespace headband::transient
