// SPDX-License-Identifier: MIT
#include "core/friction/colebrook.hpp"

#include "tests/core/base/csv.hpp"

#include <gtest/gtest.h>

#include <cmath>
#include <limits>
#include <random>
#include <string>
#include <vector>

namespace {

using namespace headband;
using base::Lanes;

double relative(double a, double b) { return std::abs(a / b - 1.0); }

/// The exact root in long double: Newton until nothing moves.
long double exact_factor(double relative_roughness, double reynolds, long double constant = 2.51L) {
  const long double a = static_cast<long double>(relative_roughness) / 3.7L,
                    b = constant / static_cast<long double>(reynolds);
  long double x = -2.0L * std::log10(a + 8.0L * b);
  if (x < 0.1L) x = 0.1L;
  for (int i = 0; i < 200; ++i) {
    const long double y = a + b * x;
    x -= (x + 2.0L * std::log10(y)) / (1.0L + 2.0L / std::log(10.0L) * b / y);
    if (x <= 0.0L) x = 1e-3L;
  }
  return 1.0L / (x * x);
}

struct Pipes {
  std::vector<double> roughness, reynolds;
};
/// A fixed set: Re and roughness log-uniform, every 16th pipe smooth.
Pipes pipes(std::size_t n, double lowest, double highest, double roughest) {
  std::mt19937_64 bits(20260101);
  std::uniform_real_distribution<double> u(0.0, 1.0);
  Pipes p;
  for (std::size_t i = 0; i < n; ++i) {
    p.reynolds.push_back(lowest * std::pow(highest / lowest, u(bits)));
    const double e = 1e-8 * std::pow(roughest / 1e-8, u(bits));
    p.roughness.push_back(i % 16 == 0 ? 0.0 : e);
  }
  return p;
}

TEST(colebrook, solves_its_equation_to_1e_12) {
  for (const auto& [lowest, highest] : {std::pair{4e3, 1e8}, std::pair{2e3, 1e12}, std::pair{100.0, 2e3}}) {
    const Pipes p = pipes(20000, lowest, highest, 0.3);
    double worst = 0.0;
    for (std::size_t i = 0; i < p.reynolds.size(); ++i) {
      const auto exact = static_cast<double>(exact_factor(p.roughness[i], p.reynolds[i]));
      worst = std::max(worst, relative(friction::colebrook_factor(p.roughness[i], p.reynolds[i]), exact));
    }
    EXPECT_LT(worst, 1e-12) << lowest;
    if (lowest >= 2e3) {
      EXPECT_LT(worst, 2e-14) << lowest;
    }
  }
}

TEST(colebrook, the_plain_solver_converges_in_few_steps_to_the_same_root) {
  const Pipes p = pipes(20000, 100.0, 1e10, 0.3);
  int most = 0;
  for (std::size_t i = 0; i < p.reynolds.size(); ++i) {
    const auto plain = friction::colebrook_plain(p.roughness[i], p.reynolds[i]);
    ASSERT_TRUE(plain.converged) << p.roughness[i] << ' ' << p.reynolds[i];
    most = std::max(most, plain.iterations);
    EXPECT_LT(relative(plain.factor, static_cast<double>(exact_factor(p.roughness[i], p.reynolds[i]))), 4e-15);
  }
  EXPECT_LE(most, 50);
}

TEST(colebrook, the_array_form_gives_the_bits_of_the_single_one) {
  for (const std::size_t n : {0U, 1U, 7U, 8U, 9U, 64U, 1001U}) {
    const Pipes p = pipes(n, 50.0, 1e9, 0.1);
    std::vector<double> f(n);
    friction::colebrook_factors(p.roughness, p.reynolds, f);
    for (std::size_t i = 0; i < n; ++i) EXPECT_EQ(f[i], friction::colebrook_factor(p.roughness[i], p.reynolds[i]));
  }
}

TEST(colebrook, falls_with_reynolds_and_rises_with_roughness) {
  for (double re = 2e3; re < 1e9; re *= 1.7)
    for (double e = 1e-7; e < 0.1; e *= 2.3) {
      const double f = friction::colebrook_factor(e, re);
      EXPECT_LT(friction::colebrook_factor(e, 1.01 * re), f * (1.0 + 1e-15));
      EXPECT_GT(friction::colebrook_factor(1.01 * e, re), f);
      EXPECT_GT(f, friction::colebrook_factor(0.0, re));
      // never under the fully rough limit
      const double rough = -2.0 * std::log10(e / 3.7);
      EXPECT_GT(f, (1.0 - 1e-14) / (rough * rough));
    }
}

TEST(colebrook, tends_to_the_fully_rough_law) {
  for (const double e : {1e-4, 1e-3, 0.05}) {
    const double rough = -2.0 * std::log10(e / 3.7);
    EXPECT_LT(relative(friction::colebrook_factor(e, 1e15), 1.0 / (rough * rough)), 1e-9);
  }
}

TEST(colebrook, slope_agrees_with_the_difference_quotient) {
  for (double re = 500.0; re < 1e9; re *= 2.9)
    for (const double e : {0.0, 1e-6, 1e-4, 1e-2}) {
      const Lanes<1> rough = e * friction::colebrook_rough * re;
      const double f = friction::colebrook_factor(e, re);
      const double slope = friction::colebrook_log_slope<1>(rough, Lanes<1>(1.0 / std::sqrt(f))).number;
      const double h = 1e-4;
      const double quotient =
          std::log(friction::colebrook_factor(e, re * std::exp(h)) / friction::colebrook_factor(e, re * std::exp(-h))) /
          (2.0 * h);
      EXPECT_NEAR(slope, quotient, 1e-8) << re << ' ' << e;
    }
}

TEST(colebrook, one_correction_follows_a_changing_flow) {
  double worst = 0.0;
  for (const double e : {0.0, 1e-5, 1e-3, 3e-2}) {
    Lanes<1> x = 0.0;  // nothing known at first
    double re = 4e5;
    for (int step = 0; step < 4000; ++step) {
      // a swing with reversals of the trend, through low flow, and one jump
      re = 4e5 * std::abs(std::cos(0.01 * step)) + 150.0;
      if (step == 2000) re = 1e8;
      x = friction::colebrook_correct<1>(
          e * friction::colebrook_rough * re, Lanes<1>(re), friction::colebrook_shift, x);
      const double f = 1.0 / (x.number * x.number);
      worst = std::max(worst, relative(f, friction::colebrook_factor(e, re)));
    }
  }
  EXPECT_LT(worst, 1e-12);
}

TEST(colebrook, any_older_root_is_safe) {
  for (const double older :
       {-1.0, 0.0, 1e-300, 1e300, std::numeric_limits<double>::quiet_NaN(), std::numeric_limits<double>::infinity()}) {
    const double re = 1e5, e = 1e-4;
    const double x = friction::colebrook_correct<1>(
                         e * friction::colebrook_rough * re, Lanes<1>(re), friction::colebrook_shift, Lanes<1>(older))
                         .number;
    EXPECT_LT(relative(1.0 / (x * x), friction::colebrook_factor(e, re)), 1e-12) << older;
  }
}

TEST(colebrook, a_correction_gives_the_same_bits_alone_and_among_eight) {
  Lanes<8> rough, reynolds, older;
  for (int i = 0; i < 8; ++i) {
    const double re = 3e3 * std::pow(7.0, i);
    rough.set(i, 1e-4 * friction::colebrook_rough * re);
    reynolds.set(i, re);
    // half of the lanes near their root, half far away
    older.set(i, i % 2 == 0 ? 1.001 / std::sqrt(friction::colebrook_factor(1e-4, re)) : 3.0);
  }
  const auto x = friction::colebrook_correct<8>(rough, reynolds, friction::colebrook_shift, older);
  for (int i = 0; i < 8; ++i)
    EXPECT_EQ(x[i],
              friction::colebrook_correct<1>(
                  Lanes<1>(rough[i]), Lanes<1>(reynolds[i]), friction::colebrook_shift, Lanes<1>(older[i]))
                  .number);
}

TEST(colebrook_reference, grid) {
  for (const auto& r : test::reference_rows("friction_colebrook_grid.csv")) {
    const double re = std::stod(r[0]), e = std::stod(r[1]), f = std::stod(r[2]);
    EXPECT_LT(relative(friction::colebrook_factor(e, re), f), 1e-12) << re << ' ' << e;
    EXPECT_LT(relative(friction::colebrook_plain(e, re).factor, f), 1e-12) << re << ' ' << e;
  }
}

TEST(colebrook_reference, fully_rough_limit) {
  // the limit of infinite Reynolds number, reached to rounding
  for (const auto& r : test::reference_rows("friction_fully_rough_law.csv"))
    EXPECT_LT(relative(friction::colebrook_factor(std::stod(r[1]), 1e25), std::stod(r[3])), 1e-11) << r[0];
}

}  // namespace
