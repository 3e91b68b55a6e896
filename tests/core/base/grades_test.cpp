// SPDX-License-Identifier: MIT
#include "core/base/grades.hpp"

#include <gtest/gtest.h>

namespace {

using namespace headband::base;

TEST(grades, a_worse_grade_never_has_the_smaller_spread) {
  for (int what = 0; what <= static_cast<int>(GradeSubject::pump_head); ++what) {
    double last = 0.0;
    for (const char* grade : {"A", "B", "C", "D"}) {
      const auto s = default_spread(static_cast<GradeSubject>(what), grade);
      ASSERT_TRUE(s) << what;
      EXPECT_GT(s->size, last);
      last = s->size;
    }
  }
}

TEST(grades, words_are_those_of_a_case_file) {
  EXPECT_EQ(default_spread("bore", "A")->written(), "± 0.3 %");
  EXPECT_EQ(default_spread("roughness", "C")->written(), "x/ 3");
  EXPECT_EQ(default_spread("level", "B")->written(), "± 0.2 m");
  EXPECT_EQ(default_spread("near_seat", "D")->written(), "x/ 2");
  EXPECT_EQ(default_spread("inertia_gd2", "D")->written(), "± 40 %");
  EXPECT_EQ(grade_meaning("A"), "measured here");
}

TEST(grades, unknown_keys_and_grades_give_nothing) {
  EXPECT_FALSE(default_spread("title", "A"));
  EXPECT_FALSE(default_spread("bore", "E"));
  EXPECT_FALSE(default_spread("bore", ""));
  EXPECT_FALSE(default_spread("bore", "AB"));
  EXPECT_TRUE(grade_meaning("x").empty());
}

}  // namespace
