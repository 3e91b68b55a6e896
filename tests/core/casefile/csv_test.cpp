// SPDX-License-Identifier: MIT
#include "core/casefile/csv.hpp"

#include <gtest/gtest.h>

namespace headband::casefile {
namespace {

void expect_two_by_two(const std::string& text) {
  const CsvReading r = read_csv(text);
  ASSERT_TRUE(r.problems.empty()) << text << r.problems.front().what;
  ASSERT_EQ(r.table.columns.size(), 2U) << text;
  EXPECT_EQ(r.table.columns[0].name, "time");
  EXPECT_EQ(r.table.columns[0].unit, "h");
  EXPECT_EQ(r.table.columns[1].unit, "m");
  EXPECT_EQ(r.table.columns[1].numbers, (std::vector<double>{1.5, -2.25}));
}

TEST(CsvTable, SeparatorsMarksAndLineEnds) {
  expect_two_by_two("time [h],level [m]\n0,1.5\n6,-2.25\n");
  expect_two_by_two("time [h];level [m]\n0;1.5\n6;-2.25");
  expect_two_by_two("time [h]\tlevel [m]\n0\t1.5\n6\t-2.25\n");
  expect_two_by_two("\xEF\xBB\xBF# gauge 4\r\ntime [h],level [m]\r\n0,1.5\r\n\r\n6,-2.25\r\n");
  expect_two_by_two("time,level\nh,m\n0,1.5\n6,-2.25\n");
  expect_two_by_two("time,level\n[h],[m]\n0,1.5\n6,-2.25\n");
  expect_two_by_two("\"time (h)\",\"level (m)\"\n0,1.5\n6,-2.25\n");
}

TEST(CsvTable, DecimalCommaIsDeclared) {
  expect_two_by_two("# decimal comma\ntime [h];level [m]\n0;1,5\n6;-2,25\n");
  const CsvReading r = read_csv("time [h];level [m]\n0;1,5\n");
  ASSERT_EQ(r.problems.size(), 1U);
  EXPECT_NE(r.problems[0].hint.find("decimal comma"), std::string::npos);
}

TEST(CsvTable, ProblemsNameRowAndColumn) {
  const CsvReading r = read_csv("time [h],level [m]\n0,1\n1,high\n2\n3,nan\n4,inf\n");
  ASSERT_EQ(r.problems.size(), 4U);
  EXPECT_EQ(r.problems[0].line, 3);
  EXPECT_EQ(r.problems[0].column, "level");
  EXPECT_EQ(r.problems[0].value, "high");
  EXPECT_EQ(r.problems[1].line, 4);
  EXPECT_EQ(r.problems[2].line, 5);
  EXPECT_EQ(read_csv("").problems.size(), 1U);
  EXPECT_EQ(read_csv("1,2\n3,4\n").problems.size(), 1U);
  EXPECT_EQ(read_csv("a,b\n").problems.size(), 1U);
}

}  // namespace
}  // namespace headband::casefile
