// SPDX-License-Identifier: MIT
#include "core/casefile/nearest.hpp"

#include <gtest/gtest.h>

namespace headband::casefile {
namespace {

TEST(Nearest, OneSlipIsFound) {
  EXPECT_EQ(nearest("roughnes", {"length", "roughness", "wall"}), "roughness");
  EXPECT_EQ(nearest("wlal", {"wall", "bore"}), "wall");  // neighbours swapped count once
  EXPECT_EQ(nearest("bor", {"wall", "bore"}), "bore");
}

TEST(Nearest, FarWordsAreNotGuessed) {
  EXPECT_EQ(nearest("colour", {"wall", "bore"}), "");
  EXPECT_EQ(nearest("ab", {"xy"}), "");
}

TEST(Nearest, FamousBlundersGetAQuestion) {
  EXPECT_NE(question_for_key("pump", "inertia").find("GD2 = 4 I"), std::string::npos);
  EXPECT_NE(question_for_key("pipe", "diameter").find("outside"), std::string::npos);
  EXPECT_EQ(question_for_key("pipe", "inertia"), "");
}

}  // namespace
}  // namespace headband::casefile
