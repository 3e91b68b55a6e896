// SPDX-License-Identifier: MIT
#include "core/friction/explicit_laws.hpp"

#include "core/friction/factor.hpp"
#include "tests/core/base/csv.hpp"

#include <gtest/gtest.h>

#include <cmath>
#include <string>

namespace {

using namespace headband;
using friction::FrictionLaw;
using friction::Transition;

double relative(double a, double b) { return std::abs(a / b - 1.0); }

/// Darcy factor of a law, the default transition.
double factor(FrictionLaw law, double e, double re, Transition transition = {}) {
  friction::FactorRule<1> rule;
  rule.law[0] = law;
  rule.transition[0] = transition;
  rule.relative_roughness = e;
  return friction::darcy_factor<1>(rule, re).factor.number;
}

// Serghides accelerates the iteration of Colebrook-White: where that has converged nothing must blow up.
TEST(serghides, is_smooth_through_the_fully_rough_range) {
  for (const double e : {1e-4, 1e-3, 1e-2, 5e-2})
    for (double re = 1e5; re < 1e16; re *= 1.3) {
      const double f = factor(FrictionLaw::serghides, e, re);
      EXPECT_LT(relative(f, friction::colebrook_factor(e, re)), 5e-5) << e << ' ' << re;
      EXPECT_LE(factor(FrictionLaw::serghides, e, 1.3 * re), f * (1.0 + 1e-13)) << e << ' ' << re;
    }
}

TEST(explicit_laws, lie_within_their_stated_distance_of_colebrook_white) {
  const struct {
    FrictionLaw law;
    double share;
  } laws[] = {{FrictionLaw::haaland, 0.02},
              {FrictionLaw::swamee_jain, 0.035},
              {FrictionLaw::serghides, 5e-5},
              {FrictionLaw::zigrang_sylvester, 0.0015},
              {FrictionLaw::churchill, 0.035}};
  for (const auto& [law, share] : laws)
    for (double re = 5e3; re < 1e8; re *= 1.9)
      for (const double e : {1e-6, 1e-5, 1e-4, 1e-3, 1e-2})
        EXPECT_LT(relative(factor(law, e, re), friction::colebrook_factor(e, re)), share)
            << static_cast<int>(law) << ' ' << re;
}

TEST(explicit_laws, join_of_churchill_is_the_papers_formula) {
  // written out with the library's power, for all flows
  for (double re = 1.0; re < 1e8; re *= 1.7)
    for (const double e : {0.0, 1e-4, 1e-2}) {
      const double a = std::pow(2.457 * std::log(1.0 / (std::pow(7.0 / re, 0.9) + 0.27 * e)), 16);
      const double b = std::pow(37530.0 / re, 16);
      const double paper = 8.0 * std::pow(std::pow(8.0 / re, 12) + std::pow(a + b, -1.5), 1.0 / 12.0);
      EXPECT_LT(relative(factor(FrictionLaw::churchill, e, re, {Transition::Kind::churchill, 0, 0}), paper), 1e-13)
          << re;
    }
}

TEST(explicit_laws_reference, grid) {
  const auto check = [](double ours, const std::string& printed, const std::string& where) {
    EXPECT_LT(relative(ours, std::stod(printed)), 1e-12) << where;
  };
  for (const auto& r : test::reference_rows("friction_explicit_grid.csv")) {
    const double re = std::stod(r[0]), e = std::stod(r[1]);
    const std::string where = r[0] + " " + r[1];
    check(factor(FrictionLaw::colebrook_white, e, re), r[2], "colebrook " + where);
    check(factor(FrictionLaw::haaland, e, re), r[3], "haaland " + where);
    check(factor(FrictionLaw::swamee_jain, e, re), r[4], "swamee-jain " + where);
    check(factor(FrictionLaw::serghides, e, re), r[5], "serghides " + where);
    check(factor(FrictionLaw::zigrang_sylvester, e, re), r[7], "zigrang-sylvester, three logarithms " + where);
    check(factor(FrictionLaw::churchill, e, re), r[8], "churchill " + where);
  }
}

TEST(explicit_laws_reference, laminar) {
  const Transition churchill{Transition::Kind::churchill, 0.0, 0.0};
  for (const auto& r : test::reference_rows("friction_laminar.csv")) {
    const double re = std::stod(r[0]);
    EXPECT_LT(relative(factor(FrictionLaw::colebrook_white, 0.0, re), std::stod(r[1])), 1e-13) << re;
    EXPECT_LT(relative(factor(FrictionLaw::churchill, 0.0, re, churchill), std::stod(r[2])), 1e-13) << re;
    EXPECT_LT(relative(factor(FrictionLaw::churchill, 0.01, re, churchill), std::stod(r[3])), 1e-13) << re;
  }
}

TEST(explicit_laws_reference, smooth) {
  for (const auto& r : test::reference_rows("friction_smooth_laws.csv")) {
    const double re = std::stod(r[0]);
    const double prandtl = factor(FrictionLaw::smooth, 0.0, re);
    EXPECT_LT(relative(prandtl, std::stod(r[1])), 1e-12) << re;
    EXPECT_LT(relative(factor(FrictionLaw::colebrook_white, 0.0, re), std::stod(r[2])), 1e-12) << re;
    // the smooth law knows no roughness
    EXPECT_EQ(factor(FrictionLaw::smooth, 0.01, re), prandtl);
    if (!r[5].empty()) {
      EXPECT_NEAR(prandtl, std::stod(r[5]), 0.00005) << re;
    }
  }
}

TEST(explicit_laws_reference, measured_smooth_pipes) {
  int turbulent = 0, within_5 = 0;
  double sum = 0.0;
  for (const auto& r : test::reference_rows("friction_smooth_measured.csv")) {
    const double re = std::stod(r[0]), measured = std::stod(r[1]);
    const double deviation = measured / factor(FrictionLaw::smooth, 0.0, re) - 1.0;
    if (r[4] == "laminar") {
      EXPECT_LT(std::abs(deviation), 0.10) << re;
    }
    if (r[4] != "turbulent") continue;
    EXPECT_LT(std::abs(deviation), 0.10) << re << ' ' << r[5];
    ++turbulent;
    if (std::abs(deviation) < 0.05) ++within_5;
    sum += deviation;
  }
  ASSERT_GT(turbulent, 50);
  EXPECT_GE(within_5, 0.9 * turbulent);
  EXPECT_LT(std::abs(sum / turbulent), 0.03);
}

TEST(explicit_laws_reference, worked_examples) {
  for (const auto& r : test::reference_rows("pressure_drop_worked_examples.csv")) {
    const double nu = std::stod(r[3]), d = std::stod(r[4]), length = std::stod(r[5]), v = std::stod(r[6]),
                 k = std::stod(r[7]);
    const double f = factor(FrictionLaw::colebrook_white, k / d, v * d / nu);
    const double head = f * length / d * v * v / (2.0 * 9.80665), pressure = std::stod(r[2]) * 9.80665 * head;
    const double share = r[0].starts_with("Munson") ? 0.05 : 0.02;
    // the inputs are printed to eight digits
    EXPECT_LT(relative(f, std::stod(r[13])), 5e-8) << r[0];
    EXPECT_LT(relative(head, std::stod(r[14])), 5e-8) << r[0];
    if (!r[9].empty()) {
      EXPECT_LT(relative(f, std::stod(r[9])), share) << r[0];
    }
    if (!r[10].empty()) {
      EXPECT_LT(relative(head, std::stod(r[10])), share) << r[0];
    }
    if (!r[11].empty()) {
      EXPECT_LT(relative(pressure, std::stod(r[11])), share) << r[0];
    }
  }
}

}  // namespace
