// SPDX-License-Identifier: MIT
#include "core/liquid/draws.hpp"

#include "core/liquid/water.hpp"

#include <gtest/gtest.h>

namespace {

using namespace headband;
using base::Lanes;

Lanes<8> temperatures(double from, double to) {
  Lanes<8> t;
  for (int i = 0; i < 8; ++i) t.set(i, from + (to - from) * i / 7.0);
  return t;
}

TEST(liquid_draws, water_has_the_bits_of_the_single_state) {
  const auto t = temperatures(273.15, 373.15);
  const auto p = liquid::water_of<8>(t);
  for (int i = 0; i < 8; ++i) {
    const auto w = liquid::water(t[i], liquid::standard_pressure);
    EXPECT_EQ(p.density[i], w.density);
    EXPECT_EQ(p.dynamic_viscosity[i], w.dynamic_viscosity);
    EXPECT_EQ(p.bulk_modulus_isentropic[i], w.bulk_modulus_isentropic);
    EXPECT_EQ(p.bulk_modulus_isothermal[i], w.bulk_modulus_isothermal);
    EXPECT_EQ(p.vapour_pressure[i], w.vapour_pressure);
    EXPECT_EQ(liquid::water_of<1>(Lanes<1>(t[i])).density.number, p.density[i]);
  }
}

TEST(liquid_draws, sea_water_has_the_bits_of_the_single_state) {
  const auto t = temperatures(273.15, 313.15);
  const auto p = liquid::sea_water_of<8>(t);
  for (int i = 0; i < 8; ++i) {
    const auto w = liquid::sea_water(t[i]);
    EXPECT_EQ(p.density[i], w.density);
    EXPECT_EQ(p.dynamic_viscosity[i], w.dynamic_viscosity);
    EXPECT_EQ(p.bulk_modulus_isentropic[i], w.bulk_modulus_isentropic);
    EXPECT_EQ(p.bulk_modulus_isothermal[i], w.bulk_modulus_isothermal);
    EXPECT_EQ(p.vapour_pressure[i], w.vapour_pressure);
  }
}

TEST(liquid_draws, viscosity_law_is_the_plain_one) {
  const auto t = temperatures(280.0, 350.0);
  liquid::ViscosityPoints<8> points{Lanes<8>(298.15), Lanes<8>(0.0), Lanes<8>(323.15), Lanes<8>(0.0)};
  for (int i = 0; i < 8; ++i) {
    points.viscosity_1.set(i, 3e-6 * (1 + 20 * i));
    points.viscosity_2.set(i, 1.5e-6 * (1 + 6 * i));
  }
  const auto nu = liquid::viscosity_between<8>(points, t);
  for (int i = 0; i < 8; ++i) {
    const auto law = liquid::viscosity_law(298.15, points.viscosity_1[i], 323.15, points.viscosity_2[i]);
    EXPECT_NEAR(nu[i] / liquid::viscosity_at(law, t[i]), 1.0, 1e-12);
    const liquid::ViscosityPoints<1> one{298.15, points.viscosity_1[i], 323.15, points.viscosity_2[i]};
    EXPECT_EQ(nu[i], liquid::viscosity_between<1>(one, Lanes<1>(t[i])).number);
    EXPECT_NEAR(liquid::viscosity_between<1>(one, Lanes<1>(298.15)).number / points.viscosity_1[i], 1.0, 1e-13);
    EXPECT_NEAR(liquid::viscosity_between<1>(one, Lanes<1>(323.15)).number / points.viscosity_2[i], 1.0, 1e-13);
  }
}

}  // namespace
