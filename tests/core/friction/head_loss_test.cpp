// SPDX-License-Identifier: MIT
#include "core/friction/head_loss.hpp"

#include <gtest/gtest.h>

#include <cmath>
#include <numbers>

namespace {

using namespace headband;
using base::Lanes;

double relative(double a, double b) { return std::abs(a / b - 1.0); }

friction::HeadLoss<1> hazen_williams(double c, double length, double bore, double flow) {
  return friction::hazen_williams_loss<1>(friction::hazen_williams_resistance<1>(c, length, bore), flow);
}
friction::HeadLoss<1> manning(double n, double length, double bore, double flow) {
  return friction::manning_loss<1>(friction::manning_resistance<1>(n, length, bore), flow);
}

TEST(hazen_williams, is_its_formula) {
  for (const double c : {80.0, 130.0})
    for (const double d : {0.1, 0.6})
      for (const double q : {1e-3, 0.3}) {
        const double written = 10.67 * 500.0 * std::pow(q, 1.852) / (std::pow(c, 1.852) * std::pow(d, 4.8704));
        EXPECT_LT(relative(hazen_williams(c, 500.0, d, q).head.number, written), 1e-13);
      }
}

// The velocity form V = 0.849 C R^0.63 S^0.54 (SI) is the same law; its rounded exponents agree within 0.5 %.
TEST(hazen_williams, agrees_with_the_velocity_form) {
  for (const double d : {0.15, 0.3, 0.9}) {
    const double s = 0.004, c = 120.0;
    const double v = 0.849 * c * std::pow(d / 4.0, 0.63) * std::pow(s, 0.54);
    const double q = v * std::numbers::pi * d * d / 4.0;
    EXPECT_LT(relative(hazen_williams(c, 1000.0, d, q).head.number, 1000.0 * s), 0.005) << d;
  }
}

TEST(manning, is_its_formula_in_the_velocity_form) {
  for (const double d : {0.2, 1.4})
    for (const double q : {0.01, 1.1}) {
      const double n = 0.012, v = q / (std::numbers::pi * d * d / 4.0);
      const double slope = std::pow(v * n / std::pow(d / 4.0, 2.0 / 3.0), 2);
      EXPECT_LT(relative(manning(n, 800.0, d, q).head.number, 800.0 * slope), 1e-13);
    }
}

TEST(head_loss, is_odd_zero_at_rest_and_has_the_slope_of_its_difference_quotient) {
  for (const double q : {1e-5, 0.02, 0.7}) {
    const double h = 1e-6 * q;
    EXPECT_EQ(hazen_williams(110.0, 300.0, 0.25, -q).head.number, -hazen_williams(110.0, 300.0, 0.25, q).head.number);
    EXPECT_EQ(manning(0.013, 300.0, 0.25, -q).head.number, -manning(0.013, 300.0, 0.25, q).head.number);
    const double hw = (hazen_williams(110.0, 300.0, 0.25, q + h).head.number -
                       hazen_williams(110.0, 300.0, 0.25, q - h).head.number) /
                      (2.0 * h);
    EXPECT_LT(relative(hazen_williams(110.0, 300.0, 0.25, q).slope.number, hw), 1e-8);
    const double mn =
        (manning(0.013, 300.0, 0.25, q + h).head.number - manning(0.013, 300.0, 0.25, q - h).head.number) / (2.0 * h);
    EXPECT_LT(relative(manning(0.013, 300.0, 0.25, q).slope.number, mn), 1e-8);
  }
  for (const auto& at_rest : {hazen_williams(110.0, 300.0, 0.25, 0.0), manning(0.013, 300.0, 0.25, 0.0)}) {
    EXPECT_EQ(at_rest.head.number, 0.0);
    EXPECT_EQ(at_rest.slope.number, 0.0);
  }
}

TEST(head_loss, darcy_slope_agrees_with_the_difference_quotient_through_the_transition) {
  friction::FactorRule<1> rule;
  rule.relative_roughness = 2e-4;
  const auto prepared = friction::prepare<1>(rule);
  const double d = 0.2, area = std::numbers::pi * d * d / 4.0, nu = 1e-6;
  const auto loss = [&](double q) {
    const auto f = friction::darcy_factor<1>(prepared, Lanes<1>(std::abs(q) * d / (area * nu)));
    return friction::darcy_loss<1>(f, Lanes<1>(700.0), Lanes<1>(d), Lanes<1>(area), Lanes<1>(9.80665), Lanes<1>(q));
  };
  for (double re = 50.0; re < 1e7; re *= 1.31) {
    const double q = re * area * nu / d, h = 1e-5 * q;
    EXPECT_NEAR(loss(q).slope.number * 2.0 * h / (loss(q + h).head.number - loss(q - h).head.number), 1.0, 1e-6) << re;
    EXPECT_EQ(loss(-q).head.number, -loss(q).head.number);
  }
  // Hagen-Poiseuille: h = 128 nu L Q/(pi g d^4)
  const double q = 1e-5;
  EXPECT_LT(relative(loss(q).head.number, 128.0 * nu * 700.0 * q / (std::numbers::pi * 9.80665 * std::pow(d, 4))),
            1e-13);
}

TEST(head_loss, the_equivalent_factor_loses_the_same_head) {
  const double d = 0.3, area = std::numbers::pi * d * d / 4.0, q = 0.1, g = 9.80665, length = 450.0;
  const double h = hazen_williams(125.0, length, d, q).head.number;
  const double f =
      friction::equivalent_factor<1>(Lanes<1>(h / length), Lanes<1>(d), Lanes<1>(g), Lanes<1>(q / area)).number;
  EXPECT_LT(relative(friction::darcy_loss<1>({f, 0.0}, length, d, area, g, q).head.number, h), 1e-14);
  EXPECT_GT(f, 0.01);
  EXPECT_LT(f, 0.03);
}

TEST(head_loss, one_draw_and_eight_give_the_same_bits) {
  Lanes<8> c, d, q;
  for (int i = 0; i < 8; ++i) {
    c.set(i, 70.0 + 11.0 * i);
    d.set(i, 0.05 + 0.13 * i);
    q.set(i, i == 4 ? 0.0 : 0.03 * (i - 4));
  }
  const auto hw = friction::hazen_williams_loss<8>(friction::hazen_williams_resistance<8>(c, Lanes<8>(310.0), d), q);
  const auto mn = friction::manning_loss<8>(friction::manning_resistance<8>(c * 1e-4, Lanes<8>(310.0), d), q);
  for (int i = 0; i < 8; ++i) {
    EXPECT_EQ(hw.head[i], hazen_williams(c[i], 310.0, d[i], q[i]).head.number);
    EXPECT_EQ(hw.slope[i], hazen_williams(c[i], 310.0, d[i], q[i]).slope.number);
    EXPECT_EQ(mn.head[i], manning((c * 1e-4)[i], 310.0, d[i], q[i]).head.number);
  }
}

}  // namespace
