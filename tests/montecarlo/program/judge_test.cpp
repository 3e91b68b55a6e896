// SPDX-License-Identifier: MIT
#include "montecarlo/program/judge.hpp"

#include <gtest/gtest.h>

#include <limits>

namespace headband::program {
namespace {

using answers::Verdict;

network::Plan plan_with_limits() {
  network::Plan plan;
  plan.limits.resize(2);
  plan.limits[0].name = "peak";
  plan.limits[0].subject.kind = network::AnswerKind::highest_pressure;
  plan.limits[0].subject.where.name = "chamber";
  plan.limits[0].bound = 12e5;
  plan.limits[1].name = "vacuum";
  plan.limits[1].subject.kind = network::AnswerKind::lowest_pressure;
  plan.limits[1].bound = -0.5e5;
  plan.limits[1].not_over = false;
  return plan;
}

TEST(JudgeRun, ValueMarginAndVerdictStandOnTheRightSide) {
  const auto limits = judge_run(plan_with_limits(), {11.9e5, -0.6e5}, {0.05e5, 0.05e5}, {0.05e5, 0.05e5});
  ASSERT_EQ(limits.size(), 2U);
  EXPECT_EQ(limits[0].verdict, Verdict::ok);
  EXPECT_NEAR(limits[0].margin, 0.1e5, 1e-6);
  EXPECT_EQ(limits[0].where, "chamber");
  EXPECT_EQ(limits[0].kind, "highest_pressure");
  EXPECT_EQ(limits[0].unit, "Pa");
  EXPECT_TRUE(limits[0].reason.empty());
  EXPECT_EQ(limits[1].verdict, Verdict::not_ok);
  EXPECT_NEAR(limits[1].margin, -0.1e5, 1e-6);
  EXPECT_EQ(worst(limits), Verdict::not_ok);
}

TEST(JudgeRun, InsideTheGridBoundOrWithoutOneNobodyCanTell) {
  const double nan = std::numeric_limits<double>::quiet_NaN();
  const auto limits = judge_run(plan_with_limits(), {11.9e5, -0.4e5}, {0.2e5, nan}, {0.2e5, nan});
  EXPECT_EQ(limits[0].verdict, Verdict::cannot_tell);
  EXPECT_NE(limits[0].reason.find("grid bound"), std::string::npos);
  EXPECT_EQ(limits[1].verdict, Verdict::cannot_tell);
  EXPECT_NE(limits[1].reason.find("not converging"), std::string::npos);
}

TEST(JudgeRun, WhatWasBrokenBeforeVapourStaysBrokenWhateverTheGridSaysLater) {
  const double nan = std::numeric_limits<double>::quiet_NaN();
  // 18.7 bar on a grid that does not converge, but 17.7 bar stood there before vapour formed
  const auto broken = judge_run(plan_with_limits(), {18.7e5, -0.4e5}, {nan, nan}, {1.1e5, nan});
  EXPECT_EQ(broken[0].verdict, Verdict::not_ok);
  EXPECT_EQ(broken[0].reason, "not kept already before vapour formed");
  // not broken before vapour: nobody can tell, and never OK by that room
  const auto open = judge_run(plan_with_limits(), {12.5e5, -0.4e5}, {nan, nan}, {1.1e5, 0.01e5});
  EXPECT_EQ(open[0].verdict, Verdict::cannot_tell);
  EXPECT_EQ(open[1].verdict, Verdict::cannot_tell);
  EXPECT_NE(open[1].reason.find("not converging"), std::string::npos);
}

TEST(JudgeNothing, EveryLimitCannotTellAndSaysWhy) {
  for (const auto& limit : judge_nothing(plan_with_limits(), "no steady state")) {
    EXPECT_EQ(limit.verdict, Verdict::cannot_tell);
    EXPECT_EQ(limit.reason, "no steady state");
    EXPECT_TRUE(limit.value != limit.value);
  }
  EXPECT_EQ(worst({}), Verdict::none);
}

}  // namespace
}  // namespace headband::program
