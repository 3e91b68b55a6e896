// SPDX-License-Identifier: MIT
#include "core/liquid/gas.hpp"

#include <gtest/gtest.h>

namespace {

using namespace headband;
using base::Lanes;

double fraction(double at_reference, double pressure) { return liquid::gas_fraction<1>(at_reference, pressure).number; }

TEST(gas, fraction_is_the_stated_one_at_the_stated_pressure) {
  for (const double a : {0.0, 1e-5, 1e-3, 0.1, 0.5}) EXPECT_NEAR(fraction(a, 101325.0), a, 1e-16);
}

// a/(1-a) p is the gas volume at its pressure per liquid volume: constant when the gas is compressed isothermally
TEST(gas, mass_is_kept_under_compression) {
  for (const double a0 : {1e-5, 1e-3, 0.1})
    for (const double p : {2e3, 2e5, 1e6, 4e7}) {
      const double a = fraction(a0, p);
      EXPECT_NEAR(a / (1.0 - a) * p / (a0 / (1.0 - a0) * 101325.0), 1.0, 1e-12);
    }
  EXPECT_LT(fraction(1e-3, 1e12), 1e-9);
}

TEST(gas, mixture_lies_between_liquid_and_gas) {
  const auto none = liquid::mix<1>(998.0, 2.18e9, 0.0, 1e5, 293.15);
  EXPECT_EQ(none.density.number, 998.0);
  EXPECT_DOUBLE_EQ(none.compressibility.number, 1.0 / 2.18e9);
  const auto all = liquid::mix<1>(998.0, 2.18e9, 1.0, 1e5, 293.15);
  EXPECT_NEAR(all.density.number, 1e5 / (287.058 * 293.15), 1e-12);
  EXPECT_DOUBLE_EQ(all.compressibility.number, 1e-5);
}

}  // namespace
