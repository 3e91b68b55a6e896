// SPDX-License-Identifier: MIT
#include "core/liquid/water.hpp"

#include <gtest/gtest.h>

#include <cmath>

namespace {

using namespace headband;

TEST(sea_water, density_matches_the_printed_checks_of_eos_80) {
  // UNESCO technical paper in marine science 44 (1983), S = 35, 0 dbar: printed values from memory
  EXPECT_NEAR(liquid::sea_water(278.15).density, 1027.67547, 5e-6);
  EXPECT_NEAR(liquid::sea_water(298.15).density, 1023.34306, 5e-6);
}

TEST(sea_water, viscosity_and_vapour_pressure_are_near_published_tables) {
  // ITTC 2011 table of sea water at 35 g/kg and 15 degC: 1.1892e-6 m2/s (from memory)
  const auto p = liquid::sea_water(288.15);
  EXPECT_NEAR(p.dynamic_viscosity / p.density, 1.1892e-6, 0.005e-6);
  // Raoult: about 2 % under pure water
  EXPECT_NEAR(p.vapour_pressure / liquid::vapour_pressure(288.15), 0.98, 0.002);
}

// K_s/K_T = 1 + T alpha^2 K_T/(rho cp), cp of sea water 3990 J/(kg K) within 1 % (from memory): two independent fits
// agree
TEST(sea_water, sound_speed_and_isothermal_modulus_agree_through_thermodynamics) {
  for (double t = 276.15; t <= 311.0; t += 5.0) {
    const auto p = liquid::sea_water(t);
    const double h = 0.05;
    const double alpha = -(liquid::sea_water(t + h).density - liquid::sea_water(t - h).density) / (2.0 * h) / p.density;
    const double ratio = 1.0 + t * alpha * alpha * p.bulk_modulus_isothermal / (p.density * 3990.0);
    EXPECT_NEAR(p.bulk_modulus_isentropic / p.bulk_modulus_isothermal, ratio, 0.001) << t;
  }
}

TEST(sea_water, is_heavier_stiffer_and_more_viscous_than_fresh_water) {
  for (double t = 273.15; t <= 313.15; t += 5.0) {
    const auto sea = liquid::sea_water(t), fresh = liquid::water(t, 0.1e6);
    EXPECT_GT(sea.density, fresh.density + 25.0);
    EXPECT_GT(sea.bulk_modulus_isentropic, fresh.bulk_modulus_isentropic);
    EXPECT_GT(sea.dynamic_viscosity, fresh.dynamic_viscosity);
    EXPECT_LT(sea.vapour_pressure, fresh.vapour_pressure);
  }
}

}  // namespace
