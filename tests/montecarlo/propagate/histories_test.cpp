// SPDX-License-Identifier: MIT
#include "montecarlo/propagate/histories.hpp"

#include <gtest/gtest.h>

#include <algorithm>
#include <cmath>

namespace headband::montecarlo {
namespace {

std::vector<double> rows_to(double last, double step) {
  std::vector<double> rows;
  for (int i = 0; step * i < last + 0.5 * step; ++i) rows.push_back(step * i);
  return rows;
}

TEST(HistoryTimes, AreRowsOfTheCentralRun) {
  std::string warning;
  const auto short_run = rows_to(4.0, 0.05);
  EXPECT_EQ(history_times(short_run, 4.0, 3, 1000, warning), short_run);  // no more than there are
  EXPECT_TRUE(warning.empty());
  const auto rows = rows_to(60.0, 0.037);
  const auto times = history_times(rows, 60.0, 3, 1000, warning);
  EXPECT_TRUE(warning.empty());
  EXPECT_LE(times.size(), most_history_times);
  EXPECT_GT(times.size(), most_history_times / 2);
  EXPECT_EQ(times.front(), 0.0);
  EXPECT_LE(times.back(), 60.0);
  EXPECT_GT(times.back(), 60.0 - 0.037);
  EXPECT_TRUE(std::ranges::is_sorted(times));
  for (const double t : times) EXPECT_TRUE(std::ranges::binary_search(rows, t)) << t;
  for (std::size_t i = 2; i + 1 < times.size(); ++i) EXPECT_NEAR(times[i] - times[i - 1], times[1], 1e-9);
}

TEST(HistoryTimes, AreEvenWithoutARun) {
  std::string warning;
  const auto times = history_times({}, 6.0, 1, 256, warning);
  ASSERT_EQ(times.size(), most_history_times);
  EXPECT_EQ(times.front(), 0.0);
  EXPECT_EQ(times.back(), 6.0);
  EXPECT_NEAR(times[120], 3.0, 1e-12);
}

TEST(HistoryTimes, GiveWayWhereMemoryEnds) {
  std::string warning;
  const auto rows = rows_to(60.0, 0.037);
  const auto fewer = history_times(rows, 60.0, 60, 4096, warning);
  EXPECT_LT(fewer.size(), 140U);
  EXPECT_GE(fewer.size(), least_history_times / 2);
  EXPECT_LE(fewer.size() * 60 * 4096, most_history_numbers);
  EXPECT_FALSE(warning.empty());
  EXPECT_EQ(history_times(rows, 60.0, 60, 64, warning).size(), history_times(rows, 60.0, 1, 64, warning).size());
  EXPECT_TRUE(history_times(rows, 60.0, 20000, 4096, warning).empty());
  EXPECT_NE(warning.find("20000 places"), std::string::npos) << warning;
  EXPECT_TRUE(history_times(rows, 60.0, 0, 4096, warning).empty());
  EXPECT_TRUE(warning.empty());
}

TEST(Histories, QuantilesAreThoseOfTheFinishedDraws) {
  DrawTable table(0, 0, 0, 2);  // one probe at two times, or two at one
  table.resize(201);
  for (std::size_t draw = 0; draw < 201; ++draw) {
    table.status[draw] = draw == 200 ? std::int8_t{2} : std::int8_t{0};
    table.history[table.history_place(0, draw)] = static_cast<double>(draw);
    table.history[table.history_place(1, draw)] = -2.0 * static_cast<double>(draw);
  }
  answers::Bands bands;
  bands.coverage = 0.9;
  form_histories(table, bands);
  EXPECT_EQ(bands.history_draws, 201);
  ASSERT_EQ(bands.history_head.size(), 6U);
  EXPECT_NEAR(bands.history_head[0], 0.05 * 200.0, 0.6);
  EXPECT_NEAR(bands.history_head[2], 99.5, 1e-12);
  EXPECT_NEAR(bands.history_head[3], -199.0, 1e-12);
  EXPECT_NEAR(bands.history_head[4], 0.95 * 200.0, 1.1);
}

TEST(Histories, BlocksAreStoredByDrawAndFailedOnesMarked) {
  DrawTable table(0, 0, 0, 3);
  table.resize(13);
  BlockAnswers block;
  block.status.fill(0);
  block.cavity.fill(false);
  for (int cell = 0; cell < 3; ++cell) {
    block.history.emplace_back(0.0);
    for (int lane = 0; lane < 8; ++lane) block.history.back().set(lane, 100.0 * cell + lane);
  }
  table.store(0, 8, block);
  block.status[2] = 3;
  table.store(8, 5, block);
  for (std::size_t draw = 0; draw < 13; ++draw) {
    for (std::size_t cell = 0; cell < 3; ++cell) {
      const double x = table.history[table.history_place(cell, draw)];
      if (draw == 10)
        EXPECT_TRUE(std::isnan(x));
      else
        EXPECT_EQ(x, 100.0 * static_cast<double>(cell) + static_cast<double>(draw % 8));
    }
  }
}

TEST(Histories, OnlyTheFirstDrawsAreKeptWhereMemoryEnds) {
  DrawTable table(0, 0, 0, most_history_numbers / 100);
  EXPECT_EQ(table.histories_kept(50), 50U);
  EXPECT_EQ(table.histories_kept(100000), 96U);  // whole blocks of eight
  EXPECT_EQ(DrawTable(0, 0, 0, 10).histories_kept(100000), most_history_draws);
  EXPECT_EQ(DrawTable(1, 1, 1).histories_kept(50), 0U);
}

}  // namespace
}  // namespace headband::montecarlo
