// SPDX-License-Identifier: MIT
#include "core/base/roots.hpp"

#include <gtest/gtest.h>

#include <cmath>
#include <limits>

namespace headband::base {
namespace {

TEST(Roots, BracketedRootIsExact) {
  const auto cubic = [](double x) { return x * x * x - 2.0; };
  const Root root = find_root(cubic, 0.0, 5.0);
  EXPECT_TRUE(root.found());
  EXPECT_NEAR(root.value, std::cbrt(2.0), 1e-14);
  EXPECT_LE(root.evaluations, 20);
  EXPECT_NEAR(find_root(cubic, 5.0, 0.0).value, std::cbrt(2.0), 1e-14);
}

TEST(Roots, SaysWhatWentWrong) {
  EXPECT_EQ(find_root([](double x) { return x * x + 1.0; }, -1.0, 1.0).status, RootStatus::not_bracketed);
  EXPECT_EQ(find_root([](double x) { return std::sqrt(x); }, -1.0, 1.0).status, RootStatus::not_finite);
  const auto hole = [](double x) { return std::fabs(x) < 0.9 ? std::numeric_limits<double>::quiet_NaN() : x; };
  EXPECT_EQ(find_root(hole, -1.0, 1.0).status, RootStatus::not_finite);
  const auto step = [](double x) { return x < 1.0 / 3.0 ? -1.0 : 1.0; };
  EXPECT_EQ(find_root(step, 0.0, 1.0, {.most_evaluations = 10}).status, RootStatus::too_many_evaluations);
  const Root end = find_root([](double x) { return x - 1.0; }, 0.0, 1.0);
  EXPECT_TRUE(end.found());
  EXPECT_EQ(end.value, 1.0);
  EXPECT_EQ(end.evaluations, 2);
}

TEST(Roots, NewtonStaysInsideItsBracket) {
  double least = 0.0, most = 0.0;
  // from 1.5 plain Newton on atan leaves for infinity
  const auto arc = [&](double x) {
    least = std::min(least, x);
    most = std::max(most, x);
    return ValueAndSlope{std::atan(x), 1.0 / (1.0 + x * x)};
  };
  const Root root = find_root_newton(arc, -3.0, 10.0, 9.0, {.absolute_tolerance = 1e-15});
  EXPECT_TRUE(root.found());
  EXPECT_NEAR(root.value, 0.0, 1e-14);
  EXPECT_GE(least, -3.0);
  EXPECT_LE(most, 10.0);
}

TEST(Roots, NewtonEndsOnHardFunctions) {
  for (int power = 1; power < 30; power += 2) {
    const auto flat = [power](double x) {
      return ValueAndSlope{std::pow(x - 0.3, power), power * std::pow(x - 0.3, power - 1)};
    };
    const Root root = find_root_newton(flat, -2.0, 5.0, 4.9, {.relative_tolerance = 1e-10, .most_evaluations = 400});
    EXPECT_TRUE(root.found()) << power;
    EXPECT_NEAR(root.value, 0.3, power == 1 ? 1e-9 : 1e-2) << power;
  }
  const auto constant_slope = [](double x) { return ValueAndSlope{x < 1.0 ? -1.0 : 1.0, 0.0}; };
  EXPECT_LE(find_root_newton(constant_slope, 0.0, 5.0, 2.0, {.most_evaluations = 30}).evaluations, 30);
}

TEST(Roots, BracketIsFoundWithinBounds) {
  double low = 1.0, high = 2.0;
  EXPECT_TRUE(bracket_root([](double x) { return x - 700.0; }, low, high, 0.0, 1e6));
  EXPECT_LE(low, 700.0);
  EXPECT_GE(high, 700.0);
  low = 1.0;
  high = 2.0;
  EXPECT_FALSE(bracket_root([](double x) { return x + 700.0; }, low, high, 0.0, 1e6));
  EXPECT_GE(low, 0.0);
}

}  // namespace
}  // namespace headband::base
