// SPDX-License-Identifier: MIT
#include "core/liquid/water.hpp"

#include "tests/core/base/csv.hpp"

#include <gtest/gtest.h>

#include <cmath>
#include <string>

namespace {

using namespace headband;
using test::reference_rows;

double relative(double a, double b) { return std::abs(a / b - 1.0); }

/// Half a unit of the last digit of a printed decimal number.
double half_unit(const std::string& printed) {
  const auto point = printed.find('.');
  return 0.5 * std::pow(10.0, point == std::string::npos ? 0.0 : -static_cast<double>(printed.size() - point - 1));
}

// Identities and limits first.

TEST(water, modulus_is_density_times_sound_speed_squared) {
  for (double t = 273.15; t <= 373.15; t += 2.5)
    for (const double p : {0.1e6, 0.14e6, 0.2e6, 5e6, 40e6}) {
      const auto w = liquid::water(t, p);
      EXPECT_LT(relative(w.bulk_modulus_isentropic, w.density * w.speed_of_sound * w.speed_of_sound), 1e-15);
      EXPECT_GE(w.bulk_modulus_isentropic, w.bulk_modulus_isothermal) << "cp >= cv at " << t << " K";
    }
}

// K_isentropic / K_isothermal = cp/cv and cp - cv = T v alpha^2 K_T: the moduli agree with heat capacity and expansion.
TEST(water, moduli_agree_with_heat_capacity_and_expansion) {
  for (double t = 275.0; t <= 373.0; t += 7.0) {
    const auto w = liquid::water_at_one_bar(t);
    const double k_t = -w.specific_volume / w.volume_by_pressure;
    const double alpha = w.volume_by_temperature / w.specific_volume;
    const double cv = w.heat_capacity - t * w.specific_volume * alpha * alpha * k_t;
    const auto p = liquid::water(t, 0.1e6);
    EXPECT_LT(relative(p.bulk_modulus_isentropic, k_t * w.heat_capacity / cv), 1e-12);
  }
}

TEST(water, derivatives_agree_with_difference_quotients) {
  for (double t = 280.0; t <= 370.0; t += 15.0) {
    const double h = 0.01;
    const auto w = liquid::water_at_one_bar(t);
    const double slope =
        (liquid::water_at_one_bar(t + h).specific_volume - liquid::water_at_one_bar(t - h).specific_volume) / (2.0 * h);
    EXPECT_NEAR(w.volume_by_temperature, slope, 1e-7 * 1e-3 + 1e-7 * std::abs(slope));
    for (const double p : {1e6, 20e6}) {
      const double dp = 1e3;
      const auto u = liquid::water_under_pressure(t, p);
      const double by_pressure = (liquid::water_under_pressure(t, p + dp).specific_volume -
                                  liquid::water_under_pressure(t, p - dp).specific_volume) /
                                 (2.0 * dp);
      EXPECT_LT(relative(u.isothermal_compressibility, -by_pressure / u.specific_volume), 1e-6);
    }
  }
}

TEST(water, the_two_formulations_join_within_their_difference) {
  for (double t = 273.15; t <= 373.15; t += 5.0) {
    const auto below = liquid::water(t, 0.15e6), above = liquid::water(t, 0.15e6 * (1.0 + 1e-12));
    EXPECT_LT(relative(below.density, above.density), 1e-6);
    EXPECT_LT(relative(below.speed_of_sound, above.speed_of_sound), 1e-4);
    EXPECT_LT(relative(below.bulk_modulus_isothermal, above.bulk_modulus_isothermal), 3e-4);
    EXPECT_LT(relative(below.dynamic_viscosity, above.dynamic_viscosity), 1e-3);
  }
}

TEST(water, density_rises_with_pressure_and_viscosity_falls_with_temperature) {
  for (double t = 273.15; t <= 368.0; t += 5.0) {
    double last = 0.0;
    for (const double p : {0.05e6, 0.1e6, 0.15e6, 1e6, 10e6, 40e6}) {
      const double rho = liquid::water(t, p).density;
      EXPECT_GT(rho, last);
      last = rho;
    }
    for (const double p : {0.1e6, 10e6})
      EXPECT_GT(liquid::water(t, p).dynamic_viscosity, liquid::water(t + 5.0, p).dynamic_viscosity);
    EXPECT_LT(liquid::vapour_pressure(t), liquid::vapour_pressure(t + 5.0));
  }
}

// IAPWS check tables (see tests/reference/data/README.md).
TEST(water_reference, published_checks) {
  int checked = 0;
  for (const auto& r : reference_rows("water_iapws_published_checks.csv")) {
    const std::string source = r[0], table = r[1], what = r[2];
    const double t = r[4].empty() ? 0.0 : std::stod(r[4]);
    const double p = r[5].empty() ? 0.0 : 1e6 * std::stod(r[5]);
    const double published = std::stod(r[7]);
    double ours = 0.0;
    if (source == "IAPWS SR6-08(2011)") {
      const auto w = liquid::water_at_one_bar(t);
      if (what == "density") ours = 1.0 / w.specific_volume;
      if (what == "speed of sound") ours = w.speed_of_sound;
      if (what == "dynamic viscosity") ours = 1e6 * w.dynamic_viscosity;
      if (what.starts_with("(dv/dp)")) ours = 1e13 * w.volume_by_pressure;
      if (what == "isobaric heat capacity") ours = 1e-3 * w.heat_capacity;
    } else if (source.starts_with("IAPWS R7-97") && table.starts_with("Table 5")) {
      const auto w = liquid::water_under_pressure(t, p);
      if (what == "specific volume") ours = w.specific_volume;
      if (what == "speed of sound") ours = w.speed_of_sound;
      if (what == "isobaric heat capacity") ours = 1e-3 * w.heat_capacity;
      if (what == "isothermal compressibility") ours = 1e6 * w.isothermal_compressibility;
    } else if (source.starts_with("IAPWS R7-97") && what == "saturation pressure") {
      ours = 1e-6 * liquid::vapour_pressure(t);
    } else if (source.starts_with("IAPWS R7-97") && what == "saturation temperature") {
      // the inverse: our pressure at the printed temperature is the pressure asked for; d ln p/d ln T is about 13 there
      EXPECT_LT(relative(liquid::vapour_pressure(published), p), 13.5 * half_unit(r[7]) / published);
      ++checked;
      continue;
    } else if (source.starts_with("IAPWS-95")) {
      const auto w = liquid::water_by_density(t, std::stod(r[6]));
      if (what == "pressure") ours = 1e-6 * w.pressure;
      if (what == "speed of sound") ours = w.speed_of_sound;
      if (what == "isochoric heat capacity") ours = 1e-3 * w.isochoric_heat_capacity;
    } else if (source == "IAPWS R12-08") {
      ours = 1e6 * liquid::viscosity_of_water(t, std::stod(r[6]));
    } else {
      continue;  // SR1-86: not used here
    }
    ASSERT_NE(ours, 0.0) << source << ' ' << table << ' ' << what;
    EXPECT_LE(std::abs(ours - published), half_unit(r[7])) << source << ' ' << what << ' ' << t;
    ++checked;
  }
  EXPECT_EQ(checked, 26);
}

TEST(water_reference, grid_at_one_bar) {
  for (const auto& r : reference_rows("water_0p1MPa_grid.csv")) {
    const double t = std::stod(r[1]);
    const auto w = liquid::water(t, std::stod(r[2]));
    EXPECT_LT(relative(w.density, std::stod(r[3])), 1e-10) << t;
    EXPECT_LT(relative(w.dynamic_viscosity, std::stod(r[4])), 1e-10) << t;
    EXPECT_LT(relative(w.dynamic_viscosity / w.density, std::stod(r[5])), 1e-10) << t;
    EXPECT_LT(relative(w.speed_of_sound, std::stod(r[6])), 1e-10) << t;
    EXPECT_LT(relative(w.bulk_modulus_isothermal, std::stod(r[7])), 1e-10) << t;
    EXPECT_LT(relative(w.bulk_modulus_isentropic, std::stod(r[8])), 1e-10) << t;
    EXPECT_LT(relative(w.vapour_pressure, std::stod(r[9])), 1e-10) << t;
    // SR1-86, another good formulation of the vapour pressure
    if (!r[10].empty()) {
      EXPECT_LT(relative(w.vapour_pressure, std::stod(r[10])), 2e-4) << t;
    }
  }
}

TEST(water_reference, grid_at_elevated_pressure) {
  int rows = 0;
  for (const auto& r : reference_rows("water_elevated_pressure_grid.csv")) {
    const double t = std::stod(r[1]), p = std::stod(r[2]);
    const auto w = liquid::water(t, p);
    EXPECT_LT(relative(w.density, std::stod(r[3])), 1e-9) << t << ' ' << p;
    EXPECT_LT(relative(w.dynamic_viscosity, std::stod(r[4])), 1e-9) << t << ' ' << p;
    EXPECT_LT(relative(w.dynamic_viscosity / w.density, std::stod(r[5])), 1e-9) << t << ' ' << p;
    EXPECT_LT(relative(w.speed_of_sound, std::stod(r[6])), 1e-9) << t << ' ' << p;
    EXPECT_LT(relative(w.bulk_modulus_isothermal, std::stod(r[7])), 1e-9) << t << ' ' << p;
    EXPECT_LT(relative(w.bulk_modulus_isentropic, std::stod(r[8])), 1e-9) << t << ' ' << p;
    const auto quick = liquid::water_under_pressure(t, p);
    EXPECT_LT(relative(1.0 / quick.specific_volume, std::stod(r[9])), 1e-9) << t << ' ' << p;
    EXPECT_LT(relative(quick.speed_of_sound, std::stod(r[10])), 1e-9) << t << ' ' << p;
    EXPECT_LT(relative(1.0 / quick.isothermal_compressibility, std::stod(r[11])), 1e-9) << t << ' ' << p;
    const double isentropic = quick.speed_of_sound * quick.speed_of_sound / quick.specific_volume;
    EXPECT_LT(relative(isentropic, std::stod(r[12])), 1e-9) << t << ' ' << p;
    ++rows;
  }
  EXPECT_GT(rows, 50);
}

TEST(water_reference, printed_tables) {
  int checked = 0;
  for (const auto& r : reference_rows("water_printed_tables.csv")) {
    const double t = 273.15 + std::stod(r[2]), p = std::stod(r[3]), published = std::stod(r[4]);
    if (p > liquid::water_highest_pressure || t > liquid::water_hottest) continue;
    const auto w = liquid::water(t, p);
    if (r[0] == "density") {
      EXPECT_LT(relative(w.density, published), 5e-5) << r[7] << ' ' << t;
    } else if (r[0] == "speed of sound") {
      EXPECT_LT(relative(w.speed_of_sound, published), 0.002) << r[7] << ' ' << t << ' ' << p;
    } else if (r[0] == "dynamic viscosity") {
      ASSERT_EQ(r[1], "uPa s");
      EXPECT_LT(relative(w.dynamic_viscosity, 1e-6 * published), 0.003) << r[7] << ' ' << t;
    } else {
      continue;
    }
    ++checked;
  }
  EXPECT_GT(checked, 40);
}

}  // namespace
