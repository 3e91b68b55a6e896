// SPDX-License-Identifier: MIT
#include "core/show/amounts.hpp"

#include <gtest/gtest.h>

namespace headband::show {
namespace {

using base::Dimension;

TEST(Amounts, OneUnitForOneKind) {
  const Amounts si(answers::Study{}, "");
  EXPECT_EQ(si.of(11.95e5, Dimension::pressure), "11.95 bar g");
  EXPECT_EQ(si.width(0.042e5, Dimension::pressure), "0.042 bar");
  EXPECT_EQ(si.of(0.1, Dimension::flow), "100 L/s");
  EXPECT_EQ(si.of(0.25, Dimension::length), "0.25 m");
  EXPECT_EQ(si.of(answers::missing, Dimension::flow), "-");
  EXPECT_EQ(si.of(0.25, Dimension::number), "0.25");
}

TEST(Amounts, UnitsAreTheStudysOwnUnlessAsked) {
  answers::Study study;
  study.units_shown = "us";
  EXPECT_EQ(Amounts(study, "").of(6894.757293168361 * 100.0, Dimension::pressure), "100 psi g");
  EXPECT_EQ(Amounts(study, "si").of(1e5, Dimension::pressure), "1 bar g");
}

TEST(Amounts, KindsAndKeysAreWords) {
  EXPECT_EQ(words_of_kind("highest_pressure"), "highest pressure");
  EXPECT_EQ(dimension_of_kind("lowest_pressure"), Dimension::pressure);
  EXPECT_EQ(dimension_of_kind("pressure_drop"), Dimension::pressure_difference);
  EXPECT_EQ(words_of_key("max_gas_volume_m3").words, "max gas volume");
  EXPECT_EQ(words_of_key("max_gas_volume_m3").dimension, Dimension::volume);
  EXPECT_EQ(words_of_key("flow_m3_per_s").dimension, Dimension::flow);
  EXPECT_EQ(words_of_key("speed_rad_per_s").dimension, Dimension::rotational_speed);
  EXPECT_EQ(words_of_key("count").dimension, Dimension::number);
}

TEST(Amounts, SharesArePercent) {
  EXPECT_EQ(percent(0.26), "26 %");
  EXPECT_EQ(percent(0.0123), "1.2 %");
  EXPECT_EQ(percent(0.0), "0 %");
  EXPECT_EQ(percent(answers::missing), "-");
}

}  // namespace
}  // namespace headband::show
