// SPDX-License-Identifier: MIT
#include "core/report/markup.hpp"

#include <gtest/gtest.h>

#include <limits>
#include <set>

namespace headband::report {
namespace {

TEST(Markup, nothing_a_user_writes_becomes_markup) {
  EXPECT_EQ(escaped("</script><b a='x' c=\"y\">&amp;"),
            "&lt;/script&gt;&lt;b a=&#39;x&#39; c=&quot;y&quot;&gt;&amp;amp;");
  EXPECT_EQ(escaped(std::string_view("a\0b\x1b", 4)), "a\u25a1b\u25a1");
  EXPECT_EQ(escaped("Süd ±\n\t"), "Süd ±\n\t");
}

TEST(Markup, different_names_have_different_slugs) {
  std::set<std::string> slugs;
  const std::vector<std::string> names{
      "a b", "a-b", "a_b", "A b", "a/b", "a  b", "a--b", "a- b", "ü", "u", "", "_", "__", "a_2fb"};
  for (const auto& name : names) slugs.insert(slug(name));
  EXPECT_EQ(slugs.size(), names.size());
  for (const auto& one : slugs)
    EXPECT_EQ(one.find_first_not_of("ABCDEFGHIJKLMNOPQRSTUVWXYZabcdefghijklmnopqrstuvwxyz0123456789-_"),
              std::string::npos)
        << one;
}

TEST(Markup, both_families_stand_side_by_side) {
  EXPECT_EQ(both(12e5, Shown::pressure),
            "<span class=\"si\">12.00\u00a0bar\u00a0g</span><span class=\"us\">174.0\u00a0psi\u00a0g</span>");
  EXPECT_EQ(both(1.5, Shown::time), "1.500\u00a0s");
  EXPECT_EQ(both(std::numeric_limits<double>::quiet_NaN(), Shown::pressure), "–");
}

TEST(Markup, a_value_is_rounded_by_its_bound) {
  const std::string text = both_with_bound(11.4961e5, 4200.0, Shown::pressure, Shown::pressure_difference);
  EXPECT_NE(text.find("11.496 ± 0.042\u00a0bar\u00a0g"), std::string::npos) << text;
  EXPECT_NE(text.find("166.74 ± 0.61\u00a0psi\u00a0g"), std::string::npos) << text;
  const std::string tiny = both_with_bound(11.4961e5, 1.0, Shown::pressure, Shown::pressure_difference);
  EXPECT_NE(tiny.find("11.50 ± under 0.01\u00a0bar\u00a0g"), std::string::npos) << tiny;
  const std::string none =
      both_with_bound(11.4961e5, std::numeric_limits<double>::quiet_NaN(), Shown::pressure, Shown::pressure_difference);
  EXPECT_EQ(none.find("±"), std::string::npos);
}

TEST(Markup, a_table_has_caption_and_headings) {
  Table table{"Places <all>", {{"Place"}, {"head", true}}, {{"tank", "12.0"}}};
  const std::string text = html(table);
  EXPECT_NE(text.find("<caption>Places &lt;all&gt;</caption>"), std::string::npos);
  EXPECT_NE(text.find("<th scope=\"col\" class=\"number\">head</th>"), std::string::npos);
  EXPECT_NE(text.find("<th scope=\"row\">tank</th><td class=\"number\">12.0</td>"), std::string::npos);
  table.rows.clear();
  EXPECT_EQ(html(table), "");
}

}  // namespace
}  // namespace headband::report
