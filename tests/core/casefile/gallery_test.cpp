// SPDX-License-Identifier: MIT
//
// The error gallery: broken case files and the messages they must give, word for word.
// New texts: HEADBAND_WRITE_GALLERY=1 test_core --gtest_filter=Gallery.* writes them; read them before committing.

#include "core/casefile/read.hpp"

#include <gtest/gtest.h>

#include <cstdlib>
#include <filesystem>
#include <fstream>
#include <regex>
#include <set>
#include <sstream>
#include <string>
#include <vector>

namespace headband::casefile {
namespace {

namespace fs = std::filesystem;

std::string contents(const fs::path& path) {
  std::ifstream in(path, std::ios::binary);
  EXPECT_TRUE(in.good()) << path;
  std::ostringstream bytes;
  bytes << in.rdbuf();
  return bytes.str();
}

fs::path folder() { return fs::path(HEADBAND_CASEFILE_TESTS) / "gallery"; }

std::vector<fs::path> broken_cases() {
  std::set<fs::path> files;
  for (const auto& entry : fs::directory_iterator(folder()))
    if (entry.path().extension() == ".toml") files.insert(entry.path());
  return {files.begin(), files.end()};
}

std::vector<std::string> lines_of(const std::string& text) {
  std::vector<std::string> lines;
  std::istringstream in(text);
  for (std::string line; std::getline(in, line);) lines.push_back(line);
  return lines;
}

TEST(Gallery, HoldsAtLeastEightyBrokenCases) { EXPECT_GE(broken_cases().size(), 80U); }

TEST(Gallery, EachMessageSaysWhatWhereAndWhatToDo) {
  for (const fs::path& file : broken_cases()) {
    const std::string name = file.filename().string();
    const std::string text = contents(file);
    const Reading reading = read_text(name, text, folder().string());
    ASSERT_FALSE(reading.problems.empty()) << name << " is read without a problem";
    const auto lines = lines_of(text);
    for (const base::Problem& p : reading.problems) {
      EXPECT_GT(p.what.size(), 8U) << name;
      EXPECT_FALSE(p.what.ends_with('.')) << name;
      EXPECT_TRUE(!p.bound.empty() || p.hint.find('=') != std::string::npos) << name << ": no bound and no right form";
      EXPECT_FALSE(p.hint.empty()) << name << ": no hint";
      ASSERT_GE(p.place.line, 1) << name;
      ASSERT_LE(static_cast<std::size_t>(p.place.line), lines.size()) << name;
      EXPECT_GE(p.place.column, 1) << name;
    }
    const std::string told = problems_text(name, text, {reading.problems.front()});
    const std::regex pattern(
        "^" + name +
        R"(:\d+:\d+: [^\n]+\n(  value: [^\n]+\n)?(  needs: [^\n]+\n)? *\d+ \| [^\n]*\n +\| [ \t]*\^\n  hint: [^\n]+\n$)");
    EXPECT_TRUE(std::regex_match(told, pattern)) << told;
  }
}

TEST(Gallery, TextsAreAsAgreed) {
  const bool write = std::getenv("HEADBAND_WRITE_GALLERY") != nullptr;
  for (const fs::path& file : broken_cases()) {
    const std::string name = file.filename().string();
    const std::string text = contents(file);
    const Reading reading = read_text(name, text, folder().string());
    const std::string told = problems_text(name, text, reading.problems);
    fs::path golden = file;
    golden.replace_extension(".txt");
    if (write) std::ofstream(golden, std::ios::binary) << told;
    EXPECT_EQ(told, contents(golden)) << name;
  }
}

// One mistake, one message: no follow-up complaints. The names say how many there are where it is more than one.
TEST(Gallery, OneMistakeGivesOneMessage) {
  for (const fs::path& file : broken_cases()) {
    const std::string name = file.stem().string();
    const std::size_t expected = name == "three_mistakes" ? 3 : name == "viscosity_points_dynamic" ? 2 : 1;
    EXPECT_EQ(read_text(name, contents(file), folder().string()).problems.size(), expected) << name;
  }
}

TEST(Gallery, CaretsStandUnderTheMistake) {
  const std::string text = contents(folder() / "tab_and_umlaut.toml");
  const std::string told = problems_text("t", text, read_text("t", text, "").problems);
  const auto lines = lines_of(told);
  const auto shown = std::find_if(
      lines.begin(), lines.end(), [](const std::string& l) { return l.find("roughness =") != std::string::npos; });
  ASSERT_NE(shown, lines.end());
  // Count code points up to the caret: it points at the unit that is not understood.
  const std::string& caret = *(shown + 1);
  const std::size_t column = caret.find('^') - caret.find('|');
  std::size_t points = 0, at = shown->find('|');
  while (at < shown->size() && points < column) {
    ++at;
    while (at < shown->size() && (static_cast<unsigned char>((*shown)[at]) & 0xC0U) == 0x80U) ++at;
    ++points;
  }
  EXPECT_TRUE(shown->substr(at).starts_with("m m\"")) << shown->substr(at);
}

}  // namespace
}  // namespace headband::casefile
