// SPDX-License-Identifier: MIT
#include "core/network/plan.hpp"
#include "core/casefile/read.hpp"

#include <gtest/gtest.h>

#include <string>

namespace headband::network {
namespace {

/// A line with a rating; invented.
Plan plan_with(const std::string& more) {
  const auto reading = casefile::read_text("case.toml",
                                           R"(
[liquid]
name = "test oil"
density = "850 kg/m3"
viscosity = "10 cSt"
[[basin]]
name = "source"
level = "40 m"
[[pipe]]
name = "main"
from = "source"
to = "end"
length = "1000 m"
bore = "300 mm"
roughness = "0.1 mm"
rating = "16 bar g"
[[draw_off]]
name = "use"
at = "end"
flow = "50 L/s"
)" + more,
                                           ".");
  EXPECT_TRUE(reading.problems.empty());
  return make_plan(reading.value);
}

const char* const limits = R"(
[[limit]]
name = "surge limit"
highest_pressure = "12 bar g"
where = "end"
[[limit]]
name = "enough"
head = "end"
not_under = "20 m"
)";

TEST(Plan, APumpStandsStillWhereItsFirstEventInTimeIsAStart) {
  for (const bool start_written_first : {false, true}) {
    for (const bool starts_first : {false, true}) {
      Case c;
      Pump pump;
      pump.name = "pump";
      for (const bool start : {start_written_first, !start_written_first}) {
        Event e;
        e.subject = "pump";
        e.kind = start ? EventKind::start_pump : EventKind::trip_pump;
        e.at.value = start == starts_first ? 1.0 : 5.0;
        c.events.push_back(e);
      }
      EXPECT_EQ(starts_at_rest(c, pump), starts_first) << start_written_first;
    }
  }
}

TEST(Plan, WithoutAnswersWhatIsJudgedIsAnswered) {
  const Plan plan = plan_with(limits);
  ASSERT_EQ(plan.limits.size(), 3U);
  ASSERT_EQ(plan.answers.size(), 2U);
  EXPECT_EQ(plan.answers[0].name, "surge limit");
  EXPECT_EQ(plan.answers[0].kind, AnswerKind::highest_pressure);
  EXPECT_EQ(plan.answers[1].name, "enough");
  EXPECT_EQ(plan.answers[1].where.place.index, plan.place_named("end"));
}

TEST(Plan, WithoutLimitsTheRatingsAre) {
  const Plan plan = plan_with("");
  ASSERT_EQ(plan.answers.size(), 1U);
  EXPECT_EQ(plan.answers[0].name, "main rating");
}

TEST(Plan, AskedAnswersStandAlone) {
  const Plan plan = plan_with(std::string(limits) + "[band]\nanswers = [{ flow = \"main\" }]\n");
  ASSERT_EQ(plan.answers.size(), 1U);
  EXPECT_EQ(plan.answers[0].name, "flow main");
}

}  // namespace
}  // namespace headband::network
