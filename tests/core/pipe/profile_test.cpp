// SPDX-License-Identifier: MIT
#include "core/pipe/profile.hpp"

#include <gtest/gtest.h>

#include <array>
#include <cmath>

namespace {

using namespace headband;
using base::Lanes;

template <int W>
struct Survey {
  std::array<Lanes<W>, 5> chainage{0.0, 400.0, 900.0, 900.0, 1800.0};
  std::array<Lanes<W>, 5> elevation{90.0, 60.0, 72.0, 70.0, 40.0};
  [[nodiscard]] double at(double x) const { return pipe::elevation_at<W>(chainage, elevation, Lanes<W>(x))[0]; }
};

TEST(profile, straight_lines_pass_through_every_point) {
  const Survey<1> s;
  EXPECT_EQ(s.at(0.0), 90.0);
  EXPECT_EQ(s.at(400.0), 60.0);
  EXPECT_EQ(s.at(200.0), 75.0);
  EXPECT_EQ(s.at(1800.0), 40.0);
  EXPECT_DOUBLE_EQ(s.at(1350.0), 55.0);
}

TEST(profile, a_step_counts_from_its_chainage_on_and_the_ends_hold_beyond) {
  const Survey<1> s;
  EXPECT_EQ(s.at(900.0), 70.0);
  EXPECT_NEAR(s.at(900.0 - 1e-9), 72.0, 1e-6);
  EXPECT_EQ(s.at(-5.0), 90.0);
  EXPECT_EQ(s.at(5000.0), 40.0);
}

TEST(profile, the_highest_point_of_a_window_is_a_survey_point_or_an_end) {
  const Survey<1> s;
  const auto top = [&](double from, double to) {
    return pipe::highest_point<1>(s.chainage, s.elevation, Lanes<1>(from), Lanes<1>(to));
  };
  EXPECT_EQ(top(0.0, 1800.0).elevation.number, 90.0);
  // a crest between two sections is found, both sides of the step
  EXPECT_EQ(top(500.0, 1500.0).elevation.number, 72.0);
  EXPECT_EQ(top(500.0, 1500.0).chainage.number, 900.0);
  EXPECT_EQ(top(1000.0, 1500.0).chainage.number, 1000.0);
  EXPECT_EQ(top(450.0, 700.0).chainage.number, 700.0);
  EXPECT_EQ(top(300.0, 300.0).elevation.number, s.at(300.0));
}

// No sampled spot of a window lies above its highest point.
TEST(profile, nothing_in_the_window_is_higher) {
  const Survey<1> s;
  for (double from = 0.0; from < 1800.0; from += 130.0)
    for (double to = from; to <= 1800.0; to += 170.0) {
      const double top = pipe::highest_point<1>(s.chainage, s.elevation, Lanes<1>(from), Lanes<1>(to)).elevation.number;
      for (int i = 0; i <= 50; ++i) EXPECT_LE(s.at(from + (to - from) * i / 50.0), top + 1e-12);
    }
}

TEST(profile, one_draw_and_eight_give_the_same_bits) {
  const Survey<1> one;
  Survey<8> eight;
  Lanes<8> x;
  for (int i = 0; i < 8; ++i) x.set(i, 1799.0 / 7.0 * i);
  const auto z = pipe::elevation_at<8>(eight.chainage, eight.elevation, x);
  const auto top = pipe::highest_point<8>(eight.chainage, eight.elevation, x, x + 333.3);
  for (int i = 0; i < 8; ++i) {
    EXPECT_EQ(z[i], one.at(x[i]));
    const auto t = pipe::highest_point<1>(one.chainage, one.elevation, Lanes<1>(x[i]), Lanes<1>((x + 333.3)[i]));
    EXPECT_EQ(top.elevation[i], t.elevation.number);
    EXPECT_EQ(top.chainage[i], t.chainage.number);
  }
}

}  // namespace
