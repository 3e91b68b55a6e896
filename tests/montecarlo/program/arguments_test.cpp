// SPDX-License-Identifier: MIT
#include "montecarlo/program/arguments.hpp"

#include "montecarlo/program/parse.hpp"

#include <gtest/gtest.h>

#include <sstream>

namespace headband::program {
namespace {

TEST(WholeNumber, TakesPlainDigitsInRangeAlone) {
  EXPECT_EQ(whole_number("--n", "0", 0, 9), 0U);
  EXPECT_EQ(whole_number("--n", "18446744073709551615", 0, 18446744073709551615ULL), 18446744073709551615ULL);
  for (const char* text :
       {"", " 1", "1 ", "+1", "-1", "01", "1.0", "1e3", "0x1", "18446744073709551616", "nan", "１"}) {
    EXPECT_THROW(static_cast<void>(whole_number("--n", text, 0, 18446744073709551615ULL)), UsageError) << text;
  }
  EXPECT_THROW(static_cast<void>(whole_number("--n", "10", 0, 9)), UsageError);
}

TEST(WholeNumber, SaysWhatItSawAndTheRange) {
  try {
    static_cast<void>(whole_number("--threads", "-3", 1, 1024));
    FAIL();
  } catch (const UsageError& error) {
    const std::string text = error.what();
    for (const char* part : {"--threads", "-3", "1", "1024"}) EXPECT_NE(text.find(part), std::string::npos) << part;
  }
}

TEST(Help, IsAtMostEightyColumnsForEveryVerb) {
  std::vector<std::string> texts{help()};
  for (const auto& verb : verbs()) texts.push_back(help(verb));
  for (const auto& text : texts) {
    std::istringstream lines(text);
    for (std::string line; std::getline(lines, line);) EXPECT_LE(line.size(), 80U) << line;
  }
}

TEST(Words, EveryOptionOfAVerbIsAKnownOne) {
  for (const auto& verb : verbs()) {
    std::istringstream words{std::string(verb.options)};
    for (std::string word; words >> word;) {
      bool known = false;
      for (const auto& option : all_options()) known = known || option.name == word;
      EXPECT_TRUE(known) << verb.name << " " << word;
    }
    EXPECT_LE(verb.fewest, verb.most);
  }
}

TEST(Parse, OptionsStandAnywhereAfterTheVerb) {
  for (const std::vector<std::string>& arguments :
       {std::vector<std::string>{"band", "--surge", "--threads", "2", "a.toml"},
        std::vector<std::string>{"band", "a.toml", "--threads=2", "--surge"}}) {
    const Options options = parse(arguments);
    EXPECT_EQ(options.words, std::vector<std::string>{"a.toml"});
    EXPECT_TRUE(options.surge);
    EXPECT_EQ(options.threads, 2);
    EXPECT_FALSE(options.seed.has_value());
  }
}

TEST(Parse, DashIsAWordAndTheCommandKeepsNoFolders) {
  const Options options = parse({"flow", "-", "--out=/some/where/a b.h5"});
  EXPECT_EQ(options.words, std::vector<std::string>{"-"});
  EXPECT_EQ(options.out, "/some/where/a b.h5");
  EXPECT_EQ(options.command, "headband flow - --out=\"a b.h5\"");
}

TEST(Parse, AnotherVerbsOptionAndMisspeltOnesAreTold) {
  const auto message = [](const std::vector<std::string>& arguments) -> std::string {
    try {
      static_cast<void>(parse(arguments));
    } catch (const UsageError& error) {
      return error.what();
    }
    return "";
  };
  EXPECT_NE(message({"flow", "a", "--seed", "1"}).find("no option --seed"), std::string::npos);
  EXPECT_NE(message({"flow", "a", "--quite"}).find("--quiet"), std::string::npos);
  EXPECT_NE(message({"srge", "a"}).find("surge"), std::string::npos);
  EXPECT_NE(message({"fastest", "a"}).find("not computed yet"), std::string::npos);
  EXPECT_NE(message({"flow"}).find("CASE"), std::string::npos);
}

}  // namespace
}  // namespace headband::program
