// SPDX-License-Identifier: MIT
#include "core/liquid/water.hpp"

#include <gtest/gtest.h>

#include <cmath>

namespace {

using namespace headband;

TEST(viscosity_law, passes_through_both_points) {
  for (const double nu1 : {0.8e-6, 3e-6, 180e-6, 5e-3})
    for (const double share : {0.2, 0.5, 0.9}) {
      const auto law = liquid::viscosity_law(298.15, nu1, 323.15, share * nu1 < 0.4e-6 ? 0.4e-6 : share * nu1);
      EXPECT_NEAR(liquid::viscosity_at(law, 298.15) / nu1, 1.0, 1e-12);
      EXPECT_NEAR(liquid::misfit(law, 298.15, nu1), 0.0, 1e-12);
    }
  const auto law = liquid::viscosity_law(298.15, 180e-6, 323.15, 50e-6);
  EXPECT_NEAR(liquid::viscosity_at(law, 298.15) / 180e-6, 1.0, 1e-13);
  EXPECT_NEAR(liquid::viscosity_at(law, 323.15) / 50e-6, 1.0, 1e-13);
}

TEST(viscosity_law, does_not_depend_on_the_order_of_its_points_and_falls_with_temperature) {
  const auto one = liquid::viscosity_law(298.15, 180e-6, 323.15, 50e-6);
  const auto two = liquid::viscosity_law(323.15, 50e-6, 298.15, 180e-6);
  double last = 1.0;
  for (double t = 280.0; t < 360.0; t += 5.0) {
    EXPECT_NEAR(liquid::viscosity_at(one, t) / liquid::viscosity_at(two, t), 1.0, 1e-12);
    EXPECT_LT(liquid::viscosity_at(one, t), last);
    last = liquid::viscosity_at(one, t);
  }
}

TEST(viscosity_law, a_third_point_shows_its_misfit) {
  const auto law = liquid::viscosity_law(298.15, 180e-6, 323.15, 50e-6);
  const double between = liquid::viscosity_at(law, 310.0);
  EXPECT_NEAR(liquid::misfit(law, 310.0, between), 0.0, 1e-14);
  EXPECT_NEAR(liquid::misfit(law, 310.0, between / 1.05), 0.05, 1e-12);
  EXPECT_NEAR(liquid::misfit(law, 310.0, between / 0.9), -0.1, 1e-12);
}

}  // namespace
