// SPDX-License-Identifier: MIT
#include "montecarlo/bands/verdict.hpp"

#include "montecarlo/bands/counts.hpp"

#include <gtest/gtest.h>

#include <cmath>

namespace headband::montecarlo {
namespace {

TEST(Verdict, OfARunHeedsTheGridBound) {
  const Bound over{12.0, true}, under{-2.0, false};
  EXPECT_EQ(verdict_of_run(over, 11.9, 0.05), Verdict::ok);
  EXPECT_EQ(verdict_of_run(over, 11.9, 0.2), Verdict::cannot_tell);
  EXPECT_EQ(verdict_of_run(over, 12.1, 0.2), Verdict::cannot_tell);
  EXPECT_EQ(verdict_of_run(over, 12.3, 0.2), Verdict::not_ok);
  EXPECT_EQ(verdict_of_run(over, 12.0, 0.0), Verdict::ok);
  EXPECT_EQ(verdict_of_run(under, -1.9, 0.05), Verdict::ok);
  EXPECT_EQ(verdict_of_run(under, -1.9, 0.2), Verdict::cannot_tell);
  EXPECT_EQ(verdict_of_run(under, -2.3, 0.2), Verdict::not_ok);
  EXPECT_EQ(verdict_of_run(over, answers::missing, 0.0), Verdict::cannot_tell);
  EXPECT_EQ(verdict_of_run(over, 1.0, answers::missing), Verdict::cannot_tell);
  EXPECT_EQ(verdict_of_run(over, 14.0, GridRoom(answers::missing, 1.0)), Verdict::not_ok);
  EXPECT_EQ(verdict_of_run(over, 12.5, GridRoom(answers::missing, 1.0)), Verdict::cannot_tell);
  EXPECT_EQ(verdict_of_run(over, 1.0, GridRoom(answers::missing, 1.0)), Verdict::cannot_tell);
  EXPECT_DOUBLE_EQ(margin(over, 11.5), 0.5);
  EXPECT_DOUBLE_EQ(margin(under, -2.5), -0.5);
}

TEST(Verdict, OfAProbability) {
  EXPECT_EQ(verdict_of_probability(0.0, 0.049, 0.05), Verdict::ok);
  EXPECT_EQ(verdict_of_probability(0.03, 0.06, 0.05), Verdict::cannot_tell);
  EXPECT_EQ(verdict_of_probability(0.051, 0.06, 0.05), Verdict::not_ok);
}

TEST(Verdict, WorstAndOuterPoints) {
  using enum answers::Verdict;
  const auto worst_of = [](std::vector<Verdict> v) { return worst(v); };
  const auto outer_of = [](std::vector<Verdict> v) { return over_outer_points(v); };
  EXPECT_EQ(worst_of({ok, cannot_tell, not_ok}), not_ok);
  EXPECT_EQ(worst_of({ok, cannot_tell}), cannot_tell);
  EXPECT_EQ(worst_of({ok, ok}), ok);
  EXPECT_EQ(worst_of({}), none);
  EXPECT_EQ(outer_of({ok, ok}), ok);
  EXPECT_EQ(outer_of({not_ok, not_ok}), not_ok);
  EXPECT_EQ(outer_of({ok, not_ok}), cannot_tell);
  EXPECT_EQ(outer_of({ok, cannot_tell}), cannot_tell);
}

TEST(Verdict, JudgeCountsFailedDrawsAndTheGrid) {
  // 100 draws 0 … 99 against 90 with a grid bound of 2, three of the low ones failed
  std::vector<double> values;
  std::vector<std::int8_t> status(100, 0);
  for (int i = 0; i < 100; ++i) values.push_back(i);
  for (const std::size_t i : {0U, 1U, 2U}) {
    values[i] = answers::missing;
    status[i] = 2;
  }
  const Judged j = judge({90.0, true}, values, status, 2.0, 0.05, 0.95);
  EXPECT_EQ(j.failed, 3);
  EXPECT_EQ(j.broken, 9);
  EXPECT_EQ(j.broken_towards, 11);
  EXPECT_EQ(j.broken_away, 7);
  EXPECT_DOUBLE_EQ(j.probability, 9.0 / 97.0);
  EXPECT_DOUBLE_EQ(j.upper, clopper_pearson(14, 100, 0.9).upper);
  EXPECT_DOUBLE_EQ(j.lower, clopper_pearson(7, 100, 0.9).lower);
  EXPECT_EQ(j.verdict, Verdict::cannot_tell);
  EXPECT_EQ(judge({90.0, true}, values, status, 2.0, 0.02, 0.95).verdict, Verdict::not_ok);
  EXPECT_EQ(judge({90.0, true}, values, status, 2.0, 0.30, 0.95).verdict, Verdict::ok);
}

/// More failed draws raise the upper bound as exactly that many broken ones would.
TEST(Verdict, FailedDrawsWidenOnlyUpwards) {
  std::vector<double> values(1000, 1.0);
  std::vector<std::int8_t> status(1000, 0);
  const Judged before = judge({2.0, true}, values, status, 0.0, 0.05, 0.95);
  for (std::size_t i = 0; i < 10; ++i) status[i] = 1;
  const Judged after = judge({2.0, true}, values, status, 0.0, 0.05, 0.95);
  EXPECT_EQ(after.lower, before.lower);
  EXPECT_DOUBLE_EQ(before.upper, probability_at_most(0, 1000, 0.95));
  EXPECT_DOUBLE_EQ(after.upper, probability_at_most(10, 1000, 0.95));
  EXPECT_EQ(after.probability, 0.0);
}

TEST(Verdict, UnknownGridBoundTellsNothing) {
  const std::vector<double> values(1000, 1.0);
  const std::vector<std::int8_t> status(1000, 0);
  const Judged j = judge({2.0, true}, values, status, answers::missing, 0.05, 0.95);
  EXPECT_EQ(j.upper, 1.0);
  EXPECT_EQ(j.lower, 0.0);
  EXPECT_EQ(j.verdict, Verdict::cannot_tell);
  const std::vector<std::int8_t> failed(1000, 1);
  const Judged none = judge({2.0, true}, values, failed, 0.0, 0.05, 0.95);
  EXPECT_TRUE(std::isnan(none.probability));
  EXPECT_EQ(none.upper, 1.0);
  EXPECT_EQ(none.verdict, Verdict::cannot_tell);
}

TEST(Verdict, AnyOfSeveralBoundsIsCountedByDraw) {
  // two bounds, one each way, with grid bounds of their own; draw 7 failed, draw 8 without a number
  const std::vector<double> high{1, 3, 1, 3, 1.9, 1, 1, 9, 1}, low{5, 5, 1, 1, 5, 2.05, 5, 0, answers::missing};
  const std::vector<std::int8_t> status{0, 0, 0, 0, 0, 0, 0, 1, 0};
  const std::vector<Part> parts{{{2.0, true}, high, 0.2}, {{2.0, false}, low, 0.1}};
  const Judged j = judge_any(parts, status, 0.9);
  EXPECT_EQ(j.draws, 9);
  EXPECT_EQ(j.failed, 2);
  EXPECT_EQ(j.broken, 3);
  EXPECT_EQ(j.broken_towards, 5);
  EXPECT_EQ(j.broken_away, 3);
  EXPECT_DOUBLE_EQ(j.probability, 3.0 / 7.0);
  EXPECT_DOUBLE_EQ(j.upper, probability_at_most(7, 9, 0.9));
  EXPECT_DOUBLE_EQ(j.lower, probability_at_least(3, 9, 0.9));
  EXPECT_EQ(j.verdict, Verdict::none);
  // one part alone says what `judge` says
  const Judged one = judge_any(std::span(parts).first(1), status, 0.9),
               same = judge(parts[0].bound, high, status, 0.2, 0.5, 0.9);
  EXPECT_EQ(one.broken, same.broken);
  EXPECT_EQ(one.lower, same.lower);
  EXPECT_EQ(one.upper, same.upper);
  // a part whose grid bound is not known can only widen
  const std::vector<Part> unknown{parts[0], {{2.0, false}, low, answers::missing}};
  EXPECT_EQ(judge_any(unknown, status, 0.9).upper, 1.0);
}

}  // namespace
}  // namespace headband::montecarlo
