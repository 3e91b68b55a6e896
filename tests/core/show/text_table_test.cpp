// SPDX-License-Identifier: MIT
#include "core/show/text_table.hpp"

#include <gtest/gtest.h>

#include <sstream>

namespace headband::show {
namespace {

TEST(TextTable, CountsAndCutsCharactersNotBytes) {
  EXPECT_EQ(width_of("Süd"), 3U);
  EXPECT_EQ(shortened("Südschacht", 4), "Süd…");
  EXPECT_EQ(shortened("Süd", 3), "Süd");
}

TEST(TextTable, BreaksAtBlanksAndIndents) {
  EXPECT_EQ(wrapped("one two three four", 9, "  "), "one two\n  three\n  four");
  EXPECT_EQ(wrapped("  spaced \n out ", 20, ""), "spaced out");
  EXPECT_EQ(width_of(wrapped(std::string(300, 'x'), 40, "  ")), 38U);
}

TEST(TextTable, PlainTextHasNoByteOver127) { EXPECT_EQ(ascii("± 3 m³ ü …"), "+/- 3 m3 ? ~"); }

TEST(TextTable, AlignsNamesLeftAndNumbersRight) {
  TextTable table({"pipe", "flow"});
  table.add({"Süd", "100"});
  table.add({"a longer name", "1"});
  EXPECT_EQ(table.text(2), "  pipe           flow\n  Süd             100\n  a longer name     1\n");
}

TEST(TextTable, NeverWiderThanTheTerminal) {
  TextTable table({"a", "b", "c"});
  table.left(2);
  table.add({std::string(90, 'x'), "12345", std::string(90, 'y')});
  std::istringstream lines(table.text(2));
  for (std::string line; std::getline(lines, line);) {
    EXPECT_LE(width_of(line), terminal_width);
    EXPECT_TRUE(line.find('b') != std::string::npos || line.find("12345") != std::string::npos);
  }
}

}  // namespace
}  // namespace headband::show
