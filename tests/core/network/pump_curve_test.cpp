// SPDX-License-Identifier: MIT

#include "core/network/pump_curve.hpp"

#include <gtest/gtest.h>

#include <vector>

namespace headband {
namespace {

using base::Lanes;
using network::PumpCurve;

PumpCurve<1> curve_of(const std::vector<double>& flow, const std::vector<double>& head) {
  std::vector<Lanes<1>> q(flow.begin(), flow.end()), h(head.begin(), head.end());
  PumpCurve<1> curve;
  curve.fit(q, h);
  return curve;
}

void slopes_agree_with_differences(const PumpCurve<1>& curve, double from, double to) {
  for (double q = from; q < to; q += (to - from) / 37.0) {
    const double h = 1e-6;
    const double by_difference = (curve.at(q + h).value[0] - curve.at(q - h).value[0]) / (2.0 * h);
    EXPECT_NEAR(curve.at(q).slope[0], by_difference, 1e-5 * (1.0 + std::abs(by_difference))) << q;
  }
}

TEST(PumpCurve, TwoPointsAreASquareLaw) {
  const auto curve = curve_of({0.0, 0.175}, {76.0, 60.0});
  const double b = 16.0 / (0.175 * 0.175);
  for (const double q : {0.0, 0.1, 0.175, 0.3}) EXPECT_NEAR(curve.at(q).value[0], 76.0 - b * q * q, 1e-12);
  EXPECT_NEAR(curve.at(-0.1).value[0], 76.0, 1e-12);  // end slope of the law at zero flow: level
  slopes_agree_with_differences(curve, 0.01, 0.3);
}

TEST(PumpCurve, ThreePointsAreAParabola) {
  const auto parabola = [](double q) { return 50.0 - 20.0 * q - 300.0 * q * q; };
  const auto curve = curve_of({0.0, 0.1, 0.2}, {parabola(0.0), parabola(0.1), parabola(0.2)});
  for (const double q : {0.0, 0.03, 0.1, 0.15, 0.2, 0.4}) EXPECT_NEAR(curve.at(q).value[0], parabola(q), 1e-12);
  EXPECT_NEAR(curve.at(-0.1).value[0], 52.0, 1e-12);
  EXPECT_NEAR(curve.at(-0.1).slope[0], -20.0, 1e-12);
}

TEST(PumpCurve, MorePointsAreAMonotoneCubicThroughAllOfThem) {
  const std::vector<double> flow{0.0, 0.05, 0.1, 0.2, 0.25}, head{40.0, 39.5, 36.0, 20.0, 8.0};
  const auto curve = curve_of(flow, head);
  for (std::size_t i = 0; i < flow.size(); ++i) EXPECT_NEAR(curve.at(flow[i]).value[0], head[i], 1e-12);
  double last = 41.0;
  for (double q = 0.0; q < 0.25; q += 0.001) {
    EXPECT_LT(curve.at(q).value[0], last) << q;
    last = curve.at(q).value[0];
  }
  slopes_agree_with_differences(curve, 0.001, 0.249);
}

TEST(PumpCurve, BeyondTheLastPointRunsTheParabolaThroughTheLastThree) {
  const auto parabola = [](double q) { return 50.0 - 20.0 * q - 300.0 * q * q; };
  const auto curve = curve_of({0.0, 0.1, 0.2, 0.3}, {55.0, parabola(0.1), parabola(0.2), parabola(0.3)});
  for (const double q : {0.3, 0.35, 0.5}) {
    EXPECT_NEAR(curve.at(q).value[0], parabola(q), 1e-11);
    EXPECT_NEAR(curve.at(q + 1e-12).slope[0], -20.0 - 600.0 * q, 1e-8);
  }
}

TEST(PumpCurve, LevelStretchesStayLevel) {
  const auto curve = curve_of({0.0, 0.1, 0.2, 0.3}, {40.0, 40.0, 30.0, 10.0});
  EXPECT_NEAR(curve.at(0.05).value[0], 40.0, 1e-12);
}

TEST(PumpCurve, LanesEqualSingles) {
  std::vector<Lanes<8>> flow, head;
  for (const double q : {0.0, 0.1, 0.2, 0.3}) {
    flow.emplace_back(q);
    Lanes<8> h;
    for (int lane = 0; lane < 8; ++lane) h.set(lane, (50.0 + lane) * (1.0 - 5.0 * q * q));
    head.push_back(h);
  }
  PumpCurve<8> eight;
  eight.fit(flow, head);
  PumpCurve<1> copied;
  for (int lane = 0; lane < 8; ++lane) {
    const auto one = curve_of({0.0, 0.1, 0.2, 0.3}, {head[0][lane], head[1][lane], head[2][lane], head[3][lane]});
    eight.copy_lane(lane, copied);
    for (const double q : {-0.1, 0.05, 0.15, 0.3, 0.4}) {
      EXPECT_EQ(eight.at(Lanes<8>(q)).value[lane], one.at(q).value[0]);
      EXPECT_EQ(copied.at(q).slope[0], one.at(q).slope[0]);
    }
  }
}

}  // namespace
}  // namespace headband
