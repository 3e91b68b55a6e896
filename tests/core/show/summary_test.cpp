// SPDX-License-Identifier: MIT
#include "core/show/show.hpp"
#include "core/show/text_table.hpp"

#include "tests/support/sample_study.hpp"

#include <gtest/gtest.h>

#include <algorithm>
#include <sstream>
#include <string>

namespace headband::show {
namespace {

bool has(const std::string& text, const std::string& part) { return text.find(part) != std::string::npos; }

std::string without_colour(std::string text) {
  for (auto start = text.find('\x1b'); start != std::string::npos; start = text.find('\x1b')) {
    text.erase(start, text.find('m', start) - start + 1);
  }
  return text;
}

TEST(Summary, TheDecisionStandsFirst) {
  const std::string text = summary(support::sample_study(), {});
  const auto second_line = text.substr(text.find('\n') + 1);
  EXPECT_EQ(second_line.rfind("NOT OK: limit surge rating", 0), 0U) << second_line.substr(0, 80);
}

TEST(Summary, AStoredDecisionIsShownInItsOwnUnitsOnly) {
  auto study = support::sample_study();
  study.decision = "NOT OK: as stored.";
  EXPECT_TRUE(has(summary(study, {}), "NOT OK: as stored."));
  TerminalOptions us;
  us.units = "us";
  EXPECT_FALSE(has(summary(study, us), "as stored"));
}

TEST(Summary, NeverAMaximumWithoutTheMinimum) {
  const std::string text = summary(support::sample_surge(), {});
  ASSERT_TRUE(has(text, "highest"));
  EXPECT_TRUE(has(text, "lowest"));
  auto study = support::sample_surge();
  study.lowest.reset();
  EXPECT_FALSE(has(summary(study, {}), "Extremes of the run"));
  EXPECT_FALSE(has(summary(study, {}), "Highest pressure 1"));
}

TEST(Summary, APressureAfterVapourIsAnOrderOfSize) {
  auto study = support::sample_surge();
  EXPECT_TRUE(has(summary(study, {}), "order of size only after 4.6 s"));
  study.transient->cavities.clear();
  EXPECT_FALSE(has(summary(study, {}), "order of size only"));
}

TEST(Summary, AProbabilityComesWithItsBound) {
  const std::string text = summary(support::sample_study(), {});
  EXPECT_TRUE(has(text, "26 % (22 % .. 30 %)"));
  EXPECT_TRUE(has(text, "0 % .. 4 % (<= 7 %)"));
}

TEST(Summary, GuessesAreCountedAndCautionsGiven) {
  const std::string text = summary(support::sample_study(), {});
  EXPECT_TRUE(has(text, "Guesses: 2 values nobody stated"));
  EXPECT_TRUE(has(text, "calculation aid"));
  EXPECT_TRUE(has(text, "2 of 512 draws failed"));
}

TEST(Summary, SpeaksEitherUnitFamily) {
  TerminalOptions us;
  us.units = "us";
  const std::string in_us = summary(support::sample_study(), us);
  EXPECT_TRUE(has(in_us, "174 psi g"));
  EXPECT_TRUE(has(in_us, "2953 ft"));
  EXPECT_FALSE(has(in_us, " bar g"));
  auto study = support::sample_study();
  study.units_shown = "us";
  EXPECT_EQ(summary(study, {}), in_us);
}

TEST(Summary, ColourAddsNothingButColour) {
  TerminalOptions colour;
  colour.colour = true;
  const std::string text = summary(support::sample_study(), colour);
  EXPECT_TRUE(has(text, "\x1b["));
  EXPECT_EQ(without_colour(text), summary(support::sample_study(), {}));
}

TEST(Summary, PlainTerminalsGetPlainBytes) {
  TerminalOptions plain;
  plain.unicode = false;
  const std::string text = summary(support::sample_study(), plain);
  EXPECT_TRUE(std::all_of(text.begin(), text.end(), [](char c) { return static_cast<unsigned char>(c) < 128; }));
  EXPECT_TRUE(has(text, "+/- 10 %"));
}

TEST(Summary, NoLineIsWiderThanTheTerminal) {
  auto study = support::sample_study();
  study.values_shown = true;
  study.pipes[0].name = std::string(120, 'p');
  study.limits[0].name = std::string(120, 'l');
  study.bands->answers[0].name = std::string(120, 'b');
  study.title = std::string(200, 't');
  study.guesses.push_back(std::string(250, 'g'));
  study.events[0].what = std::string(250, 'e');
  for (const bool unicode : {true, false}) {
    TerminalOptions options;
    options.unicode = unicode;
    std::istringstream lines(summary(study, options));
    for (std::string line; std::getline(lines, line);) EXPECT_LE(width_of(line), terminal_width) << line;
  }
}

TEST(Summary, ALargeNetworkIsCutWithACount) {
  auto study = support::sample_flow();
  while (study.pipes.size() < 500) study.pipes.push_back(study.pipes.front());
  const std::string text = summary(study, {});
  EXPECT_LT(std::count(text.begin(), text.end(), '\n'), 80);
  EXPECT_TRUE(has(text, "and 480 more"));
}

TEST(Summary, AnEmptyStudyIsStillReadable) {
  const std::string text = summary(answers::Study{}, {});
  EXPECT_TRUE(has(text, "calculation aid"));
  EXPECT_FALSE(has(text, "nan"));
}

}  // namespace
}  // namespace headband::show
