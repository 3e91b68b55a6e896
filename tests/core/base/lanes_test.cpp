// SPDX-License-Identifier: MIT
#include "core/base/lanes.hpp"

#include <gtest/gtest.h>

#include <cmath>
#include <random>

namespace headband::base {
namespace {

// Products that cancel: once rounded or twice is then a difference in the leading digits.
TEST(Fused, IsRoundedOnceAndAlikeInEveryWidth) {
  std::mt19937_64 bits(1);
  std::uniform_real_distribution<double> number(0.5, 2.0);
  for (int n = 0; n < 1000; ++n) {
    Lanes<8> a(0.0), b(0.0), c(0.0);
    for (int lane = 0; lane < 8; ++lane) {
      const double x = number(bits), y = number(bits);
      a.set(lane, x);
      b.set(lane, y);
      c.set(lane, -x * y);
    }
    const Lanes<8> sum = fused(a, b, c), less = fused_less(-c, a, b);
    const Lanes<16> two = fused(side_by_side(a, b), side_by_side(b, a), side_by_side(c, c));
    for (int lane = 0; lane < 8; ++lane) {
      const double alone = fused(Lanes<1>(a[lane]), Lanes<1>(b[lane]), Lanes<1>(c[lane])).number;
      EXPECT_EQ(sum[lane], alone);
      EXPECT_EQ(two[lane], alone);
      EXPECT_EQ(two[lane + 8], alone);
      EXPECT_EQ(less[lane], -alone);
      EXPECT_EQ(fused_less(Lanes<1>(-c[lane]), Lanes<1>(a[lane]), Lanes<1>(b[lane])).number, -alone);
#if defined(__FMA__)
      EXPECT_EQ(alone, std::fma(a[lane], b[lane], c[lane]));
#endif
    }
  }
}

}  // namespace
}  // namespace headband::base
