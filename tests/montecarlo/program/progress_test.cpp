// SPDX-License-Identifier: MIT
#include "montecarlo/program/progress.hpp"

#include <gtest/gtest.h>

namespace headband::program {
namespace {

TEST(Progress, ShareAndTimeLeft) {
  EXPECT_EQ(progress_line(0, 100, 1.0, false), std::string(24, '-') + " 0 of 100 draws, time left unknown");
  EXPECT_EQ(progress_line(50, 100, 10.0, false),
            std::string(12, '#') + std::string(12, '-') + " 50 of 100 draws, 10 s left");
  EXPECT_EQ(progress_line(25, 100, 60.0, false).substr(25), "25 of 100 draws, 3 min 00 s left");
  EXPECT_EQ(progress_line(1, 100, 60.0, false).substr(25), "1 of 100 draws, 1 h 39 min left");
  EXPECT_EQ(progress_line(100, 100, 9.0, false), std::string(24, '#') + " 100 of 100 draws, 0 s left");
}

TEST(Progress, StrangeCountsDoNotBreakTheBar) {
  EXPECT_EQ(progress_line(5, 0, 1.0, false).substr(0, 24), std::string(24, '-'));
  EXPECT_EQ(progress_line(200, 100, 1.0, false).substr(0, 24), std::string(24, '#'));
}

}  // namespace
}  // namespace headband::program
