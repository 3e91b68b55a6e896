// SPDX-License-Identifier: MIT
#include "core/show/reported.hpp"

#include "tests/support/sample_study.hpp"

#include <gtest/gtest.h>

namespace headband::show {
namespace {

TEST(Reported, VerdictsHaveTheirWords) {
  EXPECT_EQ(words_of(answers::Verdict::ok), "OK");
  EXPECT_EQ(words_of(answers::Verdict::not_ok), "NOT OK");
  EXPECT_EQ(words_of(answers::Verdict::cannot_tell), "CANNOT TELL");
  EXPECT_EQ(words_of(answers::Verdict::none), "");
}

TEST(Reported, AFileNameLosesItsFolder) {
  EXPECT_EQ(file_name_of("/a/b/c.toml"), "c.toml");
  EXPECT_EQ(file_name_of("c.toml"), "c.toml");
}

TEST(Reported, ACavityIsToldFromAMillionthOfItsReach) {
  auto study = support::sample_surge();
  // A reach of 900 m / 20 of bore 0.492 m holds 8.555 m3.
  study.transient->cavities = {{"upper main", 0.0, 0.0, 1.0, 8.5e-6}, {"upper main", 45.0, 0.0, 1.0, 8.6e-6}};
  const auto told = reported_cavities(study);
  ASSERT_EQ(told.size(), 1U);
  EXPECT_EQ(told[0].chainage, 45.0);
}

TEST(Reported, ACavityOfUnknownReachIsTold) {
  auto study = support::sample_surge();
  study.grid.reset();
  EXPECT_EQ(reported_cavities(study).size(), 3U);
  study.transient.reset();
  EXPECT_TRUE(reported_cavities(study).empty());
}

TEST(Reported, OfAPipesCavitiesTheFirstAndTheLastEventAreTold) {
  answers::Study study;
  study.events = {{0.0, "closing", "starts", "begins to move"},
                  {1.0, "main @ 40 m", "cavity_opens", "the liquid boils"},
                  {1.1, "main @ 80 m", "cavity_opens", "the liquid boils"},
                  {1.2, "spur @ 5 m", "cavity_opens", "the liquid boils"},
                  {2.0, "main @ 80 m", "cavity_closes", "the cavity closes; its largest volume was 0.1 m3"},
                  {2.1, "pump", "check_shut", "check valve shuts"},
                  {3.0, "main @ 40 m", "cavity_closes", "the cavity closes; its largest volume was 0.2 m3"}};
  const auto told = told_events(study);
  ASSERT_EQ(told.size(), 5U);
  const double times[] = {0.0, 1.0, 1.2, 2.1, 3.0};
  for (std::size_t i = 0; i < 5; ++i) EXPECT_EQ(told[i].time, times[i]);
}

TEST(Reported, UnknownsThatMoveMostComeFirst) {
  answers::BandAnswer answer;
  answer.sensitivity = {{"main wall", 0.1, 0.1},
                        {"end valve over", 0.5, 0.6},
                        {"b", answers::missing, answers::missing},
                        {"a", answers::missing, answers::missing},
                        {"friction scatter", 0.1, 0.1}};
  const auto ranked = ranked_unknowns(answer);
  ASSERT_EQ(ranked.size(), 5U);
  const char* order[] = {"end valve over", "friction scatter", "main wall", "a", "b"};
  for (std::size_t i = 0; i < 5; ++i) EXPECT_EQ(ranked[i].input, order[i]);
}

TEST(Reported, TheCavityOfAnEventAndTheFirstOfARunAreFound) {
  answers::Study study;
  study.transient.emplace();
  study.transient->cavities = {
      {"main", 80.0, 2.0, 5.0, 0.1}, {"main", 40.0, 2.0, 3.0, 0.2}, {"branch @ 2", 40.0, 1.5, answers::missing, 0.3}};
  const auto* cavity = cavity_of(study, {2.0, "main @ 40 m", "cavity_opens", "the liquid boils"});
  ASSERT_NE(cavity, nullptr);
  EXPECT_EQ(cavity->max_volume, 0.2);
  ASSERT_NE(cavity_of(study, {5.0, "main @ 80 m", "cavity_closes", ""}), nullptr);
  ASSERT_NE(cavity_of(study, {1.5, "branch @ 2 @ 40 m", "cavity_opens", ""}), nullptr);
  EXPECT_EQ(cavity_of(study, {2.0, "main", "starts", "begins to move"}), nullptr);
  ASSERT_NE(first_cavity(study), nullptr);
  EXPECT_EQ(first_cavity(study)->opens, 1.5);
  study.transient->cavities.clear();
  EXPECT_EQ(first_cavity(study), nullptr);
}

TEST(Reported, AnAnswerHeldAtOneValueStandsStill) {
  answers::BandAnswer answer;
  answer.mean = -95540.0;
  answer.standard_deviation = 3e-11;  // what summing leaves
  EXPECT_TRUE(stands_still(answer));
  answer.standard_deviation = 1.0;
  EXPECT_FALSE(stands_still(answer));
  answer.standard_deviation = answers::missing;
  EXPECT_FALSE(stands_still(answer));
}

}  // namespace
}  // namespace headband::show
