// SPDX-License-Identifier: MIT
#include "core/show/words.hpp"

#include "tests/support/sample_study.hpp"

#include <gtest/gtest.h>

#include <algorithm>
#include <cmath>

namespace headband::show {
namespace {

bool has(const std::string& text, const std::string& part) { return text.find(part) != std::string::npos; }

TEST(Words, TheWorstLimitDecides) {
  auto study = support::sample_study();
  EXPECT_EQ(deciding_limit(study)->name, "surge rating");
  study.limits[0].verdict = answers::Verdict::ok;
  EXPECT_EQ(deciding_limit(study)->name, "no vacuum");  // CANNOT TELL is worse than OK
  study.limits[1].verdict = answers::Verdict::ok;
  EXPECT_EQ(deciding_limit(study)->name, "surge rating");  // the likeliest of those that are OK
  for (auto& limit : study.limits) {                       // a tie: the closest in the single run
    limit.probability_upper = 0.0;
    limit.probability_upper_range.reset();
    limit.verdict = answers::Verdict::ok;
  }
  study.limits[0].margin = 0.5 * study.limits[0].limit;
  study.limits[1].margin = 0.08 * std::abs(study.limits[1].value);
  EXPECT_EQ(deciding_limit(study)->name, "no vacuum");
  study.limits[0].margin = 0.05 * study.limits[0].limit;
  EXPECT_EQ(deciding_limit(study)->name, "surge rating");
  study.limits.clear();
  EXPECT_EQ(deciding_limit(study), nullptr);
}

TEST(Words, ASentenceForALimitHasVerdictBoundAndProbability) {
  const std::string text = decision(support::sample_study());
  EXPECT_TRUE(has(text,
                  "NOT OK: limit surge rating (highest pressure 12 bar g) is not kept in 26 % of the draws "
                  "(95 % sure: 22 % to 30 %), 5 % allowed"))
      << text;
  EXPECT_TRUE(has(text, "Other limits: 1 CANNOT TELL, 1 OK."));
}

TEST(Words, OneRunSaysHowMuchIsToSpareOrBeyond) {
  auto study = support::sample_surge();
  EXPECT_TRUE(has(decision(study), "0.05 bar to spare"));
  study.limits[0].margin = -0.2e5;
  study.limits[0].verdict = answers::Verdict::not_ok;
  EXPECT_TRUE(has(decision(study), "0.2 bar beyond"));
}

TEST(Words, ARangeThatIsNotChanceIsSaid) {
  auto study = support::sample_study();
  const std::string chance = chance_words(study.limits[1]);
  EXPECT_EQ(chance, "0 % to 4 % of the draws (95 % sure: at most 7 %) by a range that is not chance");
  EXPECT_EQ(chance_words(support::sample_surge().limits[0]), "");
}

TEST(Words, ExtremesComeInPairsAndWithTheVapourRemark) {
  auto study = support::sample_surge();
  const std::string text = decision(study);
  EXPECT_TRUE(has(text, "Highest pressure 11.5 bar g"));
  EXPECT_TRUE(has(text, "; lowest "));
  EXPECT_TRUE(has(text, "order of size only after 4.6 s"));
  study.lowest.reset();
  EXPECT_FALSE(has(decision(study), "Highest"));
}

TEST(Words, ARunThatDidNotFinishSaysSoAndUntilWhen) {
  auto study = support::sample_surge();
  study.state = answers::RunState::incomplete;
  study.transient->last_good_time = 3.25;
  EXPECT_TRUE(has(decision(study), "did not finish. It holds good up to 3.25 s."));
  study.state = answers::RunState::partial;
  EXPECT_TRUE(has(decision(study), "Stopped by the user"));
}

TEST(Words, CautionsFollowTheNumbersAndAreNotRepeated) {
  auto study = support::sample_study();
  study.cautions = cautions(study);
  const auto again = cautions(study);
  EXPECT_EQ(again, study.cautions);
  const auto any = [&](const std::vector<std::string>& list, const std::string& part) {
    return std::any_of(list.begin(), list.end(), [&](const auto& text) { return has(text, part); });
  };
  EXPECT_TRUE(any(again, "calculation aid"));
  EXPECT_TRUE(any(again, "order of size"));
  EXPECT_TRUE(any(again, "2 of 512 draws failed"));
  const auto steady = cautions(support::sample_flow());
  EXPECT_TRUE(any(steady, "calculation aid"));
  EXPECT_FALSE(any(steady, "order of size"));
  auto broken = support::sample_surge();
  EXPECT_EQ(any(cautions(broken), "stood open when the run ended"),
            std::ranges::any_of(broken.transient->cavities, [](const auto& c) { return std::isnan(c.closes); }));
  for (auto& cavity : broken.transient->cavities) cavity.closes = 9.0;
  EXPECT_FALSE(any(cautions(broken), "stood open when the run ended"));
  broken.transient->cavities.front().closes = answers::missing;
  EXPECT_TRUE(any(cautions(broken), "stood open when the run ended"));
  broken.audit->volume_residual_relative = -0.02;
  EXPECT_TRUE(any(cautions(broken), "not accounted for"));
}

}  // namespace
}  // namespace headband::show
