// SPDX-License-Identifier: MIT
#include "transient/lumped/ode.hpp"

#include <gtest/gtest.h>

#include <cmath>

namespace headband::transient {
namespace {

TEST(Ode, decays_as_the_exponential) {
  const auto run =
      integrate([](const OdeState& y, OdeState& r, double) { r[0] = -2.0 * y[0]; }, {3.0}, {0.0, 0.5, 1.0, 4.0});
  ASSERT_EQ(run.status, OdeStatus::reached_end);
  ASSERT_EQ(run.time.size(), 4U);
  for (std::size_t i = 0; i < run.time.size(); ++i)
    EXPECT_NEAR(run.state[i][0], 3.0 * std::exp(-2.0 * run.time[i]), 1e-9);
}

TEST(Ode, finds_the_first_zero_of_the_event) {
  const auto fall = [](const OdeState& y, OdeState& r, double) {
    r[0] = y[1];
    r[1] = -9.80665;
  };
  const auto run = integrate(fall, {10.0, 0.0}, {0.0, 5.0}, [](const OdeState& y, double) { return y[0]; });
  ASSERT_EQ(run.status, OdeStatus::event);
  EXPECT_NEAR(run.end_time, std::sqrt(20.0 / 9.80665), 1e-10);
  EXPECT_EQ(run.time.size(), 1U);  // 5 s was not reached
}

TEST(Ode, rates_that_are_not_finite_are_a_status) {
  const auto run =
      integrate([](const OdeState&, OdeState& r, double t) { r[0] = t > 0.5 ? std::nan("") : 1.0; }, {0.0}, {0.0, 1.0});
  EXPECT_EQ(run.status, OdeStatus::not_finite);
}

TEST(Ode, a_blow_up_ends_within_the_bound_of_steps) {
  OdeOptions options;
  options.most_steps = 20000;
  const auto run =
      integrate([](const OdeState& y, OdeState& r, double) { r[0] = y[0] * y[0]; }, {1.0}, {0.0, 2.0}, {}, options);
  EXPECT_NE(run.status, OdeStatus::reached_end);
  EXPECT_LE(run.end_time, 1.0 + 1e-6);
}

}  // namespace
}  // namespace headband::transient
