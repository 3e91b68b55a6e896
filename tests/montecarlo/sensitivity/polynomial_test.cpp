// SPDX-License-Identifier: MIT
#include "montecarlo/sensitivity/polynomial.hpp"

#include "core/base/spread.hpp"
#include "montecarlo/sampling/philox.hpp"

#include <gtest/gtest.h>

#include <cmath>
#include <numbers>

namespace headband::montecarlo {
namespace {

double normal(double u) { return base::normal_quantile(base::Lanes<1>(u)).number; }

std::vector<FitInput> inputs_of(std::size_t count, std::size_t draws, bool normal_ones) {
  std::vector<FitInput> inputs(count);
  for (std::size_t u = 0; u < count; ++u) {
    inputs[u].normal = normal_ones;
    for (std::uint64_t i = 0; i < draws; ++i) inputs[u].score.push_back(score_of_bits(philox_bits(4, i, u)));
  }
  return inputs;
}

TEST(Polynomial, LinearAndProductInNormals) {
  const auto inputs = inputs_of(3, 2048, true);
  std::vector<double> linear, product;
  for (std::size_t i = 0; i < 2048; ++i) {
    const double a = normal(inputs[0].score[i]), b = normal(inputs[1].score[i]), c = normal(inputs[2].score[i]);
    linear.push_back(a + 2.0 * 0.5 * b + 3.0 * 0.2 * c);
    product.push_back((1.0 + 0.5 * a) * (1.0 + 0.5 * b) * (1.0 + 0.5 * c));
  }
  // variances 1, 1, 0.36 of 2.36, as in the reference file: a model met exactly has no noise of the draws in its shares
  const auto l = fit_shares(inputs, linear);
  EXPECT_NEAR(l.explained, 1.0, 1e-6);
  EXPECT_NEAR(l.first[0] / l.first[1], 1.0, 1e-6);
  EXPECT_NEAR(l.first[2] / l.first[1], 0.36, 1e-6);
  EXPECT_NEAR(l.first[0], 1.0 / 2.36, 1e-6);
  // product: V = 1.25^3 - 1; S = 0.25 / V; ST = 0.25 * 1.25^2 / V
  const auto p = fit_shares(inputs, product);
  EXPECT_NEAR(p.explained, 1.0, 1e-6);
  const double v = std::pow(1.25, 3.0) - 1.0;
  for (std::size_t u = 0; u < 3; ++u) {
    EXPECT_NEAR(p.first[u], 0.25 / v, 1e-6);
    EXPECT_NEAR(p.total[u], 0.25 * 1.5625 / v, 1e-6);
    EXPECT_NEAR(p.total[u] / p.first[u], 1.5625, 1e-6);
  }
}

TEST(Polynomial, IshigamiInEvenInputs) {
  const auto inputs = inputs_of(3, 4096, false);
  std::vector<double> y;
  for (std::size_t i = 0; i < 4096; ++i) {
    const auto x = [&](std::size_t u) { return std::numbers::pi * (2.0 * inputs[u].score[i] - 1.0); };
    y.push_back(std::sin(x(0)) + 7.0 * std::pow(std::sin(x(1)), 2.0) + 0.1 * std::pow(x(2), 4.0) * std::sin(x(0)));
  }
  const auto s = fit_shares(inputs, y);
  EXPECT_GT(s.explained, 0.95);
  EXPECT_NEAR(s.first[0], 0.3139, 0.01);  // reference values, at plain draws
  EXPECT_NEAR(s.first[1], 0.4424, 0.01);
  EXPECT_NEAR(s.first[2], 0.0, 0.01);
  EXPECT_NEAR(s.total[2], 0.2437, 0.01);
}

TEST(Polynomial, ChoicesAndManyInputs) {
  auto inputs = inputs_of(30, 2048, true);
  inputs[29].option_ends = {0.3, 0.8, 1.0};
  std::vector<double> y;
  for (std::size_t i = 0; i < 2048; ++i) {
    const double option = inputs[29].score[i] < 0.3 ? 0.0 : (inputs[29].score[i] < 0.8 ? 1.0 : 3.0);
    y.push_back(normal(inputs[3].score[i]) + option);
  }
  const auto s = fit_shares(inputs, y);
  // Var(option) = 0.5 + 0.2 * 9 - 1.1^2 = 1.09, of 2.09
  EXPECT_GT(s.explained, 0.99);
  EXPECT_NEAR(s.first[29], 1.09 / 2.09, 0.01);
  EXPECT_NEAR(s.first[3], 1.0 / 2.09, 0.01);
  EXPECT_NEAR(s.total[7], 0.0, 1e-3);
}

/// High degrees in few inputs are tried where what the other inputs do is small beside what a low degree leaves open:
/// sin(2 pi u) leaves 5e-8 of its variance open above degree 7 of the Legendre polynomials,
/// and seven inputs allow no more than degree 3 in all of them.
TEST(Polynomial, HighDegreesInTheStrongestInput) {
  const auto inputs = inputs_of(7, 4096, false);
  std::vector<double> y;
  for (std::size_t i = 0; i < 4096; ++i) {
    double sum = std::sin(2.0 * std::numbers::pi * inputs[2].score[i]);
    for (std::size_t u = 0; u < 7; ++u) sum += u == 2 ? 0.0 : 0.02 * std::sqrt(12.0) * (inputs[u].score[i] - 0.5);
    y.push_back(sum);
  }
  const double v = 0.5 + 6.0 * 0.02 * 0.02;
  const auto s = fit_shares(inputs, y);
  EXPECT_GT(s.explained, 1.0 - 1e-6);
  EXPECT_NEAR(s.first[2], 0.5 / v, 2e-5);
  EXPECT_NEAR(s.total[2], 0.5 / v, 2e-5);
  for (const std::size_t u : {0U, 1U, 3U, 4U, 5U, 6U}) EXPECT_NEAR(s.first[u], 0.0004 / v, 2e-5) << u;
}

/// A smooth function of four inputs, one of them weak: its interactions keep all four in the fit, which degree 4 ends.
/// Above it lie 0.14^5/5!/(e^0.14 - 1) = 3e-6 of the variance, and noise of that size leaves sqrt(3e-6/4096) in each
/// coefficient: 2 sqrt(S) times it in a share S, 4e-5 at most, one standard error.
TEST(Polynomial, AWeakInputKeepsItsInteractions) {
  const auto inputs = inputs_of(4, 4096, true);
  const double d[] = {0.3, 0.2, 0.1, 0.01};  // squares sum to 0.14
  std::vector<double> y;
  for (std::size_t i = 0; i < 4096; ++i) {
    double log = 0.0;
    for (std::size_t u = 0; u < 4; ++u) log += d[u] * normal(inputs[u].score[i]);
    y.push_back(std::exp(log));
  }
  // a product of lognormals: V = prod e^(d^2) - 1, first = (e^(d^2) - 1) / V, total = first times the others' e^(d^2)
  double all = 1.0;
  for (const double x : d) all *= std::exp(x * x);
  const auto s = fit_shares(inputs, y);
  EXPECT_GT(s.explained, 1.0 - 1e-5);
  for (std::size_t u = 0; u < 4; ++u) {
    const double own = std::expm1(d[u] * d[u]);
    EXPECT_NEAR(s.first[u], own / (all - 1.0), 1.6e-4) << u;
    EXPECT_NEAR(s.total[u], own * all / std::exp(d[u] * d[u]) / (all - 1.0), 1.6e-4) << u;
  }
}

TEST(Polynomial, SaysWhenItDoesNotFit) {
  const auto inputs = inputs_of(2, 1024, false);
  std::vector<double> noise;
  for (std::uint64_t i = 0; i < 1024; ++i) noise.push_back(score_of_bits(philox_bits(9, i, 1)));
  EXPECT_LT(fit_shares(inputs, noise).explained, 0.05);
  const auto constant = fit_shares(inputs, std::vector<double>(1024, 2.0));
  EXPECT_EQ(constant.first[0], 0.0);
  EXPECT_TRUE(std::isnan(fit_shares(inputs, std::vector<double>(1024, std::nan(""))).first[0]));
}

}  // namespace
}  // namespace headband::montecarlo
