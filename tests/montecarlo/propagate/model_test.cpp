// SPDX-License-Identifier: MIT
#include "montecarlo/propagate/model.hpp"

#include "montecarlo/sampling/sampler.hpp"
#include "tests/support/case_builder.hpp"

#include <gtest/gtest.h>

#include <cmath>
#include <span>

namespace headband::montecarlo {
namespace {

using test::CaseBuilder;
using test::Dimension;

/// A line over a crest; some draws boil there. Its rating is uncertain too.
network::Case crest() {
  CaseBuilder build;
  build.basin("tank", 50.0);
  auto& line = build.pipe("line", "tank", "end", 1000.0, 0.3);
  CaseBuilder::profile_point(line, 0.0, 40.0);
  CaseBuilder::profile_point(line, 600.0, 55.5);
  CaseBuilder::profile_point(line, 1000.0, 10.0);
  line.rating = test::normal(5e5, 2e4, Dimension::pressure);
  build.draw_off("out", "end", 0.1).flow = test::normal(0.1, 0.03, Dimension::flow);
  build.c.friction.scatter = test::normal(1.0, 0.1, Dimension::factor);
  build.answer(
      network::AnswerKind::pressure_drop, "drop", {CaseBuilder::at_place("tank"), CaseBuilder::at_place("end")});
  return build.finish();
}

/// What is told of coming blocks must not show in the answers: odd and even numbers of them, or none told.
TEST(Model, AnswersDoNotHangOnWhatIsExpected) {
  const auto c = crest();
  const auto plan = network::make_plan(c);
  ASSERT_FALSE(plan.limits.empty());
  const Sampler sampler(c, network::Design::plain, 7, 1024);
  const BlockModel told = make_model(c, plan, false), untold = make_model(c, plan, false);
  int boiling = 0;
  long long first = 0;
  for (const std::size_t many : {1U, 2U, 7U, 16U, 3U}) {
    std::vector<network::Scores<8>> blocks(many);
    sampler.blocks(first, blocks);
    told.expect(blocks);
    for (std::size_t k = 0; k < many; ++k) {
      BlockAnswers a, b, other;
      told(blocks[k], a);
      untold(blocks[k], b);
      if (k == 3) told(network::Scores<8>(blocks[0]), other);  // a block nobody spoke of, in between
      EXPECT_EQ(a.status, b.status);
      EXPECT_EQ(a.cavity, b.cavity);
      ASSERT_EQ(a.answer.size(), 1U);
      ASSERT_EQ(a.limit.size(), plan.limits.size());
      for (int lane = 0; lane < 8; ++lane) {
        EXPECT_EQ(a.answer[0][lane], b.answer[0][lane]) << k;
        for (std::size_t i = 0; i < a.limit.size(); ++i) EXPECT_EQ(a.limit[i][lane], b.limit[i][lane]) << k;
        boiling += a.status[static_cast<std::size_t>(lane)] == 1 ? 1 : 0;
      }
    }
    first += 8 * static_cast<long long>(many);
  }
  EXPECT_GT(boiling, 10);
  EXPECT_LT(boiling, 200);
}

}  // namespace
}  // namespace headband::montecarlo
