// SPDX-License-Identifier: MIT
#include "montecarlo/program/judge.hpp"

#include <gtest/gtest.h>

#include <limits>

namespace headband::program {
namespace {

using answers::Verdict;

TEST(Judge, AValueOnTheLimitIsKept) {
  EXPECT_EQ(judge(12.0, 0.0, 12.0, true), Verdict::ok);
  EXPECT_EQ(judge(12.0, 0.0, 12.0, false), Verdict::ok);
  EXPECT_EQ(judge(12.0 + 1e-9, 0.0, 12.0, true), Verdict::not_ok);
  EXPECT_EQ(judge(12.0 - 1e-9, 0.0, 12.0, false), Verdict::not_ok);
}

TEST(Judge, InsideTheGridBoundNobodyCanTell) {
  EXPECT_EQ(judge(11.95, 0.1, 12.0, true), Verdict::cannot_tell);
  EXPECT_EQ(judge(12.05, 0.1, 12.0, true), Verdict::cannot_tell);
  EXPECT_EQ(judge(11.85, 0.1, 12.0, true), Verdict::ok);
  EXPECT_EQ(judge(12.15, 0.1, 12.0, true), Verdict::not_ok);
  EXPECT_EQ(judge(12.05, 0.1, 12.0, false), Verdict::cannot_tell);
  EXPECT_EQ(judge(11.85, 0.1, 12.0, false), Verdict::not_ok);
}

TEST(Judge, MirroredQuestionsHaveMirroredAnswers) {
  for (const double value : {-3.0, -1.0, 0.0, 0.5, 2.0}) {
    for (const double bound : {0.0, 0.7}) {
      for (const double limit : {-1.0, 0.0, 0.4}) {
        EXPECT_EQ(judge(value, bound, limit, true), judge(-value, bound, -limit, false));
      }
    }
  }
}

TEST(Judge, UnknownValueOrGridIsCannotTell) {
  const double nan = std::numeric_limits<double>::quiet_NaN();
  EXPECT_EQ(judge(nan, 0.0, 1.0, true), Verdict::cannot_tell);
  EXPECT_EQ(judge(0.0, nan, 1.0, true), Verdict::cannot_tell);
}

TEST(Judge, TheCaseIsAsGoodAsItsWorstLimit) {
  answers::LimitAnswer ok, not_ok, unknown;
  ok.verdict = Verdict::ok;
  not_ok.verdict = Verdict::not_ok;
  unknown.verdict = Verdict::cannot_tell;
  EXPECT_EQ(worst({}), Verdict::none);
  EXPECT_EQ(worst({ok}), Verdict::ok);
  EXPECT_EQ(worst({ok, unknown}), Verdict::cannot_tell);
  EXPECT_EQ(worst({unknown, ok}), Verdict::cannot_tell);
  EXPECT_EQ(worst({unknown, not_ok, ok}), Verdict::not_ok);
}

}  // namespace
}  // namespace headband::program
