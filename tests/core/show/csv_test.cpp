// SPDX-License-Identifier: MIT
#include "core/show/show.hpp"

#include "tests/support/sample_study.hpp"

#include <gtest/gtest.h>

#include <cstdlib>
#include <string>
#include <vector>

namespace headband::show {
namespace {

/// A strict reader of RFC 4180: rows of cells; fails the test on anything else.
std::vector<std::vector<std::string>> rows_of(const std::string& text) {
  std::vector<std::vector<std::string>> rows(1);
  std::string cell;
  bool quoted = false;
  for (std::size_t i = 0; i < text.size(); ++i) {
    const char c = text[i];
    if (quoted) {
      if (c != '"') {
        cell += c;
      } else if (i + 1 < text.size() && text[i + 1] == '"') {
        cell += '"';
        ++i;
      } else {
        quoted = false;
      }
    } else if (c == '"') {
      EXPECT_TRUE(cell.empty());
      quoted = true;
    } else if (c == ',') {
      rows.back().push_back(std::exchange(cell, {}));
    } else if (c == '\r') {
      EXPECT_EQ(text.at(i + 1), '\n');
      ++i;
      rows.back().push_back(std::exchange(cell, {}));
      rows.emplace_back();
    } else {
      EXPECT_NE(c, '\n');
      cell += c;
    }
  }
  EXPECT_TRUE(rows.back().empty()) << "the last line ends like the others";
  rows.pop_back();
  return rows;
}

TEST(Csv, TablesFollowWhatTheStudyHolds) {
  std::vector<std::string> names;
  for (const auto& [name, text] : csv(support::sample_study())) names.push_back(name);
  EXPECT_EQ(names,
            (std::vector<std::string>{"bands.csv",
                                      "cavities.csv",
                                      "draws.csv",
                                      "envelope.csv",
                                      "events.csv",
                                      "histories.csv",
                                      "history-bands.csv",
                                      "limits.csv",
                                      "pipes.csv",
                                      "places.csv"}));
  EXPECT_EQ(csv(support::sample_flow()).size(), 2U);
  EXPECT_TRUE(csv(answers::Study{}).empty());
}

TEST(Csv, EveryRowOfATableIsAsLongAsItsHeader) {
  for (const auto& [name, text] : csv(support::sample_study())) {
    const auto rows = rows_of(text);
    ASSERT_GT(rows.size(), 1U) << name;
    for (const auto& row : rows) EXPECT_EQ(row.size(), rows[0].size()) << name;
  }
}

TEST(Csv, HistoriesHoldEveryStepWithAllDigits) {
  const auto study = support::sample_study();
  const auto& t = *study.transient;
  const auto rows = rows_of(csv(study).at("histories.csv"));
  ASSERT_EQ(rows.size(), t.time.size() + 1);
  EXPECT_EQ(rows[0][0], "time [s]");
  EXPECT_EQ(rows[0][1], "valve chamber head [m]");
  EXPECT_EQ(rows[0][2], "valve chamber pressure gauge [Pa]");
  EXPECT_EQ(rows[0][11], "end valve flow [m3/s]");
  for (const std::size_t row : {std::size_t{0}, std::size_t{57}, t.time.size() - 1}) {
    EXPECT_EQ(std::strtod(rows[row + 1][0].c_str(), nullptr), t.time[row]);
    EXPECT_EQ(std::strtod(rows[row + 1][4].c_str(), nullptr), t.probe_head[3 * row + 1]);
    EXPECT_EQ(rows[row + 1][9], "") << "a missing flow is an empty cell";
  }
}

TEST(Csv, BandsOverTimeAndTheWholeLineStatement) {
  const auto study = support::sample_study();
  const auto& b = *study.bands;
  const auto rows = rows_of(csv(study).at("history-bands.csv"));
  const std::size_t times = b.history_time.size();
  ASSERT_EQ(rows.size(), 3 * times + 1);
  EXPECT_EQ(
      rows[0],
      (std::vector<std::string>{
          "place", "time [s]", "head, quantile 0.025 [m]", "head, quantile 0.5 [m]", "head, quantile 0.975 [m]"}));
  const auto& row = rows[1 + times + 5];  // second place, sixth time
  EXPECT_EQ(row[0], b.history_probe_name[1]);
  EXPECT_EQ(std::strtod(row[1].c_str(), nullptr), b.history_time[5]);
  EXPECT_EQ(std::strtod(row[4].c_str(), nullptr), b.history_head[(2 * times + 5) * 3 + 1]);
  const auto limits = rows_of(csv(study).at("limits.csv"));
  ASSERT_EQ(limits.size(), study.limits.size() + 2);
  EXPECT_EQ(limits.back()[0], "any rated pipe");
  EXPECT_EQ(limits.back()[3], "") << "each pipe has its own bound";
  EXPECT_EQ(limits.back()[12], "") << "a statement has no verdict";
}

TEST(Csv, TextIsQuotedAndHarmlessToSpreadsheets) {
  auto study = support::sample_study();
  study.events = {{1.0, "=1+1", "starts", "says \"go\", then\nstops"}, {2.0, "-valve", "@x", "+y"}};
  const auto rows = rows_of(csv(study).at("events.csv"));
  EXPECT_EQ(rows[1][1], "'=1+1");
  EXPECT_EQ(rows[1][3], "says \"go\", then\nstops");
  EXPECT_EQ(rows[2], (std::vector<std::string>{"2", "'-valve", "'@x", "'+y"}));
}

TEST(Csv, NegativeNumbersStayNumbers) {
  const auto rows = rows_of(csv(support::sample_study()).at("bands.csv"));
  EXPECT_LT(std::strtod(rows[1][4].c_str(), nullptr), -4e5);
}

}  // namespace
}  // namespace headband::show
