// SPDX-License-Identifier: MIT
#include "core/casefile/keys.hpp"

#include "core/base/units.hpp"
#include "core/casefile/quantity_text.hpp"

#include <gtest/gtest.h>

#include <set>
#include <string>

namespace headband::casefile {
namespace {

std::string example(const KeyRule& rule) {
  return std::string(rule.example.empty() ? base::example_of(rule.dimension) : rule.example);
}

TEST(Keys, EachKeyOnceAndEachExampleIsUnderstood) {
  std::set<std::pair<std::string_view, std::string_view>> seen;
  for (const KeyRule& rule : key_rules()) {
    EXPECT_TRUE(seen.insert({rule.section, rule.key}).second) << rule.section << "/" << rule.key;
    EXPECT_LT(rule.low, rule.high);
    const ParsedQuantity parsed = parse_quantity(example(rule), rule);
    EXPECT_FALSE(parsed.problem.has_value()) << rule.section << "/" << rule.key << " " << example(rule) << ": "
                                             << (parsed.problem ? parsed.problem->what : "");
  }
}

// Every key either takes a spread, and then holds one, or refuses it in words that say what to write instead.
TEST(Keys, EveryKeyTakesASpreadOrRefusesItInWords) {
  for (const KeyRule& rule : key_rules()) {
    std::string text = example(rule);
    if (rule.form != Form::scatter && text.find("not random") == std::string::npos) {
      const double value = parse_quantity(text, rule).quantity.value;
      if (rule.dimension == base::Dimension::temperature)
        text += " ± 1 K";
      else if (rule.dimension == base::Dimension::share || value == 0.0)
        text += text.find(' ') == std::string::npos ? " ± 0.01" : " ± 1" + text.substr(text.find(' '));
      else
        text += " ± 5 %";
    }
    if (rule.dimension == base::Dimension::share && rule.example == "0.01 %") text = "0.01 % ± 0.001 %";
    const ParsedQuantity parsed = parse_quantity(text, rule);
    if (rule.spread == SpreadUse::sampled) {
      ASSERT_FALSE(parsed.problem.has_value())
          << rule.section << "/" << rule.key << " " << text << ": " << parsed.problem->what;
      EXPECT_FALSE(parsed.quantity.exact()) << rule.section << "/" << rule.key;
    } else {
      ASSERT_TRUE(parsed.problem.has_value()) << rule.section << "/" << rule.key << " " << text;
      EXPECT_EQ(parsed.problem->what, "a spread is not taken here") << rule.section << "/" << rule.key;
      EXPECT_GT(parsed.problem->hint.size(), 10U);
      EXPECT_FALSE(parsed.problem->bound.empty());
    }
  }
}

}  // namespace
}  // namespace headband::casefile
