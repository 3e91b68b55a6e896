// SPDX-License-Identifier: MIT
#include "core/resultfile/schema.hpp"

#include "tests/support/sample_study.hpp"

#include <gtest/gtest.h>

namespace headband::resultfile {
namespace {

TEST(Schema, ProfilePointsGoBackToTheirPipes) {
  const auto study = support::sample_study();
  auto points = profile_points(study.pipes);
  EXPECT_EQ(points.pipe, (std::vector<std::int32_t>{0, 0, 0, 0, 0, 1, 1, 1, 1, 1}));
  std::vector<answers::PipeAnswer> pipes(2);
  ASSERT_TRUE(set_profile_points(points, pipes));
  EXPECT_EQ(pipes[1].chainage, study.pipes[1].chainage);
  EXPECT_EQ(pipes[0].steady_head, study.pipes[0].steady_head);
  points.pipe[3] = 2;
  EXPECT_FALSE(set_profile_points(points, pipes));
  points.pipe[3] = -1;
  EXPECT_FALSE(set_profile_points(points, pipes));
}

TEST(Schema, HeadsNeverComputedStayAway) {
  auto study = support::sample_study();
  study.pipes[0].steady_head.clear();
  std::vector<answers::PipeAnswer> pipes(2);
  ASSERT_TRUE(set_profile_points(profile_points(study.pipes), pipes));
  EXPECT_TRUE(pipes[0].steady_head.empty());
  EXPECT_FALSE(pipes[1].steady_head.empty());
}

TEST(Schema, QuantilesOfUnlikeAnswersShareOneTable) {
  std::vector<answers::BandAnswer> rows(2);
  rows[0].quantiles = {{0.05, 1.0, 0.9, 1.1}, {0.5, 2.0, 1.9, 2.1}};
  rows[1].quantiles = {{0.5, 7.0, 6.9, 7.1}, {0.95, answers::missing, answers::missing, answers::missing}};
  const auto table = quantile_table(rows);
  EXPECT_EQ(table.probability, (std::vector<double>{0.05, 0.5, 0.95}));
  EXPECT_EQ(table.given, (std::vector<std::int8_t>{1, 1, 0, 0, 1, 1}));
  std::vector<answers::BandAnswer> back(2);
  set_quantiles(table, back);
  ASSERT_EQ(back[0].quantiles.size(), 2U);
  ASSERT_EQ(back[1].quantiles.size(), 2U);
  EXPECT_EQ(back[0].quantiles[1].upper, 2.1);
  EXPECT_EQ(back[1].quantiles[1].probability, 0.95);
}

TEST(Schema, NumbersOfDevicesAndSharesKeepTheirOrder) {
  const auto study = support::sample_study();
  std::vector<answers::DeviceAnswer> devices(3);
  ASSERT_TRUE(set_device_numbers(device_numbers(study.devices), devices));
  EXPECT_EQ(devices[1].numbers[2], study.devices[1].numbers[2]);
  EXPECT_TRUE(devices[2].numbers.empty());
  std::vector<answers::BandAnswer> answers(3);
  ASSERT_TRUE(set_sensitivity(sensitivity_table(study.bands->answers), answers));
  EXPECT_EQ(answers[1].sensitivity[0].input, "main wave_speed_scatter");
}

}  // namespace
}  // namespace headband::resultfile
