// SPDX-License-Identifier: MIT
#include "core/base/elementary.hpp"

#include <gtest/gtest.h>

#include <bit>
#include <cmath>
#include <limits>
#include <random>

namespace headband::base {
namespace {

constexpr double ulp = std::numeric_limits<double>::epsilon();

/// Positive numbers spread evenly over the exponents of 1e-300 … 1e300, near 1 as well.
double positive(std::mt19937_64& bits, int i) {
  std::uniform_real_distribution<double> wide(-690.0, 690.0), near(-0.4, 0.4);
  return i % 3 == 0 ? 1.0 + near(bits) * std::pow(10.0, -static_cast<double>(i % 16)) : std::exp(wide(bits));
}

/// |a - b| in units of the last place of b, where b is the better (long double) value.
double ulps(double a, long double b) {
  const auto scale = std::fabs(b) * static_cast<long double>(ulp);
  return scale == 0.0L ? (a == 0.0 ? 0.0 : 1e300)
                       : static_cast<double>(std::fabs(static_cast<long double>(a) - b) / scale);
}

bool same_bits(double a, double b) { return std::bit_cast<std::uint64_t>(a) == std::bit_cast<std::uint64_t>(b); }

TEST(Elementary, LogMatchesLongDouble) {
  std::mt19937_64 bits(1);
  double worst = 0.0, worst10 = 0.0;
  for (int i = 0; i < 300000; ++i) {
    const double x = positive(bits, i);
    worst = std::max(worst, ulps(log(Lanes<1>(x)).number, std::log(static_cast<long double>(x))));
    worst10 = std::max(worst10, ulps(log10(Lanes<1>(x)).number, std::log10(static_cast<long double>(x))));
  }
  EXPECT_LT(worst, 1.5);
  EXPECT_LT(worst10, 3.0);
}

TEST(Elementary, ExpMatchesLongDouble) {
  std::mt19937_64 bits(2);
  std::uniform_real_distribution<double> wide(-708.0, 709.0), narrow(-1.0, 1.0);
  double worst = 0.0;
  for (int i = 0; i < 300000; ++i) {
    const double x = i % 2 == 0 ? wide(bits) : narrow(bits) * std::pow(10.0, -static_cast<double>(i % 15));
    worst = std::max(worst, ulps(exp(Lanes<1>(x)).number, std::exp(static_cast<long double>(x))));
  }
  EXPECT_LT(worst, 1.5);
}

TEST(Elementary, PowMatchesLongDouble) {
  std::mt19937_64 bits(3);
  std::uniform_real_distribution<double> power(-12.0, 12.0), small(-1.0, 1.0);
  double worst = 0.0, worst_usual = 0.0;
  for (int i = 0; i < 300000; ++i) {
    const double x = positive(bits, i);
    const double reach = std::fabs(std::log(x));
    const double y = i % 2 == 0 ? power(bits) : small(bits) * 690.0 / std::max(reach, 1e-3);
    if (std::fabs(y) * reach > 690.0) continue;
    const double off =
        ulps(pow(Lanes<1>(x), y).number, std::pow(static_cast<long double>(x), static_cast<long double>(y)));
    worst = std::max(worst, off);
    if (std::fabs(y) * reach < 20.0) worst_usual = std::max(worst_usual, off);
  }
  EXPECT_LT(worst, 6.0);
  EXPECT_LT(worst_usual, 1.5);
}

TEST(Elementary, EightLanesGiveTheBitsOfOne) {
  std::mt19937_64 bits(4);
  std::uniform_real_distribution<double> wide(-720.0, 720.0), power(-3.0, 3.0);
  for (int i = 0; i < 20000; ++i) {
    Lanes<8> x, e, y;
    for (int lane = 0; lane < 8; ++lane) {
      x.set(lane, positive(bits, i + lane));
      e.set(lane, wide(bits));
      y.set(lane, power(bits));
    }
    const Lanes<8> l = log(x), ee = exp(e), p = pow(x, y), t = log10(x);
    for (int lane = 0; lane < 8; ++lane) {
      ASSERT_TRUE(same_bits(l[lane], log(Lanes<1>(x[lane])).number));
      ASSERT_TRUE(same_bits(t[lane], log10(Lanes<1>(x[lane])).number));
      ASSERT_TRUE(same_bits(ee[lane], exp(Lanes<1>(e[lane])).number));
      ASSERT_TRUE(same_bits(p[lane], pow(Lanes<1>(x[lane]), Lanes<1>(y[lane])).number));
    }
  }
}

TEST(Elementary, EdgesAreThoseOfTheStandard) {
  const double infinite = std::numeric_limits<double>::infinity();
  EXPECT_EQ(log(Lanes<1>(0.0)).number, -infinite);
  EXPECT_EQ(log(Lanes<1>(infinite)).number, infinite);
  EXPECT_EQ(log(Lanes<1>(1.0)).number, 0.0);
  EXPECT_TRUE(std::isnan(log(Lanes<1>(-1.0)).number));
  EXPECT_TRUE(std::isnan(log(Lanes<1>(std::nan(""))).number));
  const double subnormal = 5e-320;
  EXPECT_LT(ulps(log(Lanes<1>(subnormal)).number, std::log(static_cast<long double>(subnormal))), 1.5);
  EXPECT_EQ(exp(Lanes<1>(0.0)).number, 1.0);
  EXPECT_EQ(exp(Lanes<1>(infinite)).number, infinite);
  EXPECT_EQ(exp(Lanes<1>(-infinite)).number, 0.0);
  EXPECT_EQ(exp(Lanes<1>(-750.0)).number, 0.0);
  EXPECT_EQ(exp(Lanes<1>(750.0)).number, infinite);
  EXPECT_TRUE(std::isnan(exp(Lanes<1>(std::nan(""))).number));
  EXPECT_EQ(pow(Lanes<1>(0.0), 0.54).number, 0.0);
  EXPECT_EQ(pow(Lanes<1>(0.0), 0.0).number, 1.0);
  EXPECT_EQ(pow(Lanes<1>(0.0), -1.0).number, infinite);
  EXPECT_EQ(pow(Lanes<1>(2.0), 10.0).number, 1024.0);
  EXPECT_EQ(pow(Lanes<1>(1.0), 123.0).number, 1.0);
}

TEST(Elementary, LogOfRatioAndInverseByOneQuotient) {
  std::mt19937_64 bits(11);
  std::uniform_real_distribution<double> u(0.0, 1.0);
  for (int k = 0; k < 20000; ++k) {
    Lanes<16> a, b, c;
    for (int i = 0; i < 16; ++i) {
      b.set(i, std::exp(60.0 * u(bits) - 30.0));
      // ratios from 1 on, many close to it
      a.set(i, b[i] * (k % 2 == 0 ? 1.0 + 1e-3 * u(bits) : std::exp(40.0 * u(bits))));
      c.set(i, std::exp(20.0 * u(bits) - 10.0));
    }
    const auto sixteen = log_of_ratio<16>(a, b, c);
    const auto eight = log_of_ratio<8>(last_eight(a), last_eight(b), last_eight(c));
    for (int i = 0; i < 16; ++i) {
      const auto one = log_of_ratio<1>(Lanes<1>(a[i]), Lanes<1>(b[i]), Lanes<1>(c[i]));
      ASSERT_EQ(sixteen.log[i], one.log.number);
      ASSERT_EQ(sixteen.inverse[i], one.inverse.number);
      if (i >= 8) {
        ASSERT_EQ(eight.log[i - 8], one.log.number);
        ASSERT_EQ(eight.inverse[i - 8], one.inverse.number);
      }
      const long double exact = std::log(static_cast<long double>(a[i]) / static_cast<long double>(b[i]));
      const auto error = static_cast<double>(std::abs(static_cast<long double>(one.log.number) - exact));
      ASSERT_LT(error, 4e-16 * (1.0 + std::abs(one.log.number))) << a[i] << ' ' << b[i];
      ASSERT_LT(ulps(one.inverse.number, 1.0L / static_cast<long double>(c[i])), 2.0);
    }
  }
}

}  // namespace
}  // namespace headband::base
