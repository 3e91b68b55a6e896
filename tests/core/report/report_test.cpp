// SPDX-License-Identifier: MIT
#include "core/report/report.hpp"

#include "core/base/hash.hpp"
#include "core/report/assets.hpp"
#include "core/report/measure.hpp"
#include "tests/support/sample_study.hpp"

#include <gtest/gtest.h>

#include <regex>

namespace headband::report {
namespace {

std::size_t count(const std::string& text, const std::string& what) {
  std::size_t n = 0;
  for (std::size_t at = text.find(what); at != std::string::npos; at = text.find(what, at + what.size())) ++n;
  return n;
}

TEST(Page, stands_alone) {
  const std::string text = page(support::sample_study());
  EXPECT_EQ(text.rfind("<!DOCTYPE html>", 0), 0u);
  EXPECT_NE(text.find("Content-Security-Policy\" content=\"default-src 'none'"), std::string::npos);
  EXPECT_EQ(text.find("unsafe"), std::string::npos);
  // The only addresses are names of the drawing language, which nobody fetches, and the plot library's own in its
  // licence line.
  EXPECT_EQ(count(text, "http"),
            count(text, "http://www.w3.org/2000/svg") + count(text, "http-equiv") +
                count(std::string(plot_script.text), "http"));
  EXPECT_EQ(count(std::string(plot_script.text), "http"), 1u);
  EXPECT_EQ(count(text, " src="), 0u);
  EXPECT_EQ(count(text, "<link"), 0u);
  EXPECT_EQ(text, page(support::sample_study()));
}

TEST(Page, blocks_stand_in_order) {
  const std::string text = page(support::sample_study());
  std::size_t last = 0;
  for (const char* id : {"extremes",
                         "limits",
                         "profile",
                         "history",
                         "series",
                         "bands",
                         "events",
                         "cavities",
                         "devices",
                         "checks",
                         "steady",
                         "inputs",
                         "open",
                         "cautions",
                         "identity",
                         "case"}) {
    const std::size_t at = text.find(std::string("<section class=\"part\" id=\"") + id + "\"");
    ASSERT_NE(at, std::string::npos) << id;
    EXPECT_GT(at, last) << id;
    last = at;
  }
}

TEST(Page, never_a_maximum_without_the_minimum_nor_a_chance_without_its_bound) {
  const std::string text = page(support::sample_study());
  EXPECT_NE(text.find("<th scope=\"row\">Highest</th>"), std::string::npos);
  EXPECT_NE(text.find("<th scope=\"row\">Lowest</th>"), std::string::npos);
  EXPECT_NE(text.find("26\u00a0%<br><small>at least 22\u00a0%, at most 30\u00a0%</small>"), std::string::npos);
  EXPECT_NE(text.find("0\u00a0% … 4\u00a0%<br><small>at least 0\u00a0%, at most 7\u00a0%</small>"), std::string::npos);
  EXPECT_NE(text.find("order of size only"), std::string::npos);
  EXPECT_NE(text.find("calculation aid"), std::string::npos);
  EXPECT_NE(text.find(">2 guesses<"), std::string::npos);
}

TEST(Page, an_extreme_stands_beside_its_hand_check) {
  const auto study = support::sample_study();
  const auto& t = *study.transient;
  const double swing = study.highest->head - t.steady_head.back();
  const double ratio = swing / study.pipes[1].joukowsky_head;
  EXPECT_NE(page(study).find(figures(ratio, 2) + " times"), std::string::npos) << ratio;
  auto without = study;
  without.pipes[1].joukowsky_head = without.pipes[0].joukowsky_head = answers::missing;
  EXPECT_EQ(page(without).find(" times<br>"), std::string::npos);
}

TEST(Page, holds_identity_and_the_case_verbatim) {
  const auto study = support::sample_study();
  const std::string text = page(study);
  for (const std::string& word : {study.provenance.case_sha256,
                                  study.provenance.commit,
                                  std::string("hollowmere.toml"),
                                  std::string("<dt>Seed</dt><dd>20</dd>"),
                                  std::string("<th scope=\"row\">Checker</th><td></td>"),
                                  std::string("# ü, ± and &quot;quotes&quot;")})
    EXPECT_NE(text.find(word), std::string::npos) << word;
}

TEST(Page, opens_in_the_asked_units) {
  auto study = support::sample_flow();
  EXPECT_NE(page(study).find("id=\"units-si\" checked"), std::string::npos);
  EXPECT_NE(page(study, "us").find("id=\"units-us\" checked"), std::string::npos);
  study.units_shown = "us";
  EXPECT_NE(page(study).find("id=\"units-us\" checked"), std::string::npos);
}

TEST(Page, what_was_not_calculated_is_not_there) {
  const std::string text = page(support::sample_flow());
  for (const char* id : {"extremes", "limits", "history", "bands", "events", "cavities"})
    EXPECT_EQ(text.find(std::string("id=\"") + id + "\""), std::string::npos) << id;
  EXPECT_NE(text.find("id=\"profile\""), std::string::npos);
  EXPECT_EQ(page(answers::Study{}).find("nan"), std::string::npos);
}

TEST(Page, ids_are_unique) {
  const std::string text = page(support::sample_study());
  std::map<std::string, int> seen;
  const std::regex id(" id=\"([^\"]+)\"");
  for (auto it = std::sregex_iterator(text.begin(), text.end(), id); it != std::sregex_iterator(); ++it)
    ++seen[(*it)[1]];
  EXPECT_GT(seen.size(), 40u);
  for (const auto& [name, times] : seen) EXPECT_EQ(times, 1) << name;
}

TEST(Assets, sums_are_those_of_the_text) {
  for (const Asset* asset : {&plot_script, &plot_style, &page_script, &page_style}) {
    // Base64 back to hexadecimal, to compare with the house's own SHA-256.
    const std::string alphabet = "ABCDEFGHIJKLMNOPQRSTUVWXYZabcdefghijklmnopqrstuvwxyz0123456789+/";
    std::string hex;
    unsigned bits = 0, held = 0;
    for (const char c : asset->sum.substr(7)) {
      if (c == '=') break;
      bits = bits << 6U | static_cast<unsigned>(alphabet.find(c));
      held += 6;
      for (; held >= 4; held -= 4) hex += "0123456789abcdef"[bits >> (held - 4) & 15U];
    }
    hex.resize(64);
    EXPECT_EQ(asset->sum.substr(0, 7), "sha256-");
    EXPECT_EQ(hex, base::sha256_hex(asset->text));
    EXPECT_EQ(asset->text.find("</script"), std::string_view::npos);
    EXPECT_EQ(asset->text.find("</style"), std::string_view::npos);
  }
}

TEST(Pictures, have_fixed_names_and_stand_alone) {
  const auto study = support::sample_study();
  const auto files = pictures(study);
  for (const char* name : {"profile-upper-main.svg",
                           "profile-lower-main.svg",
                           "history-pressure.svg",
                           "history-flow.svg",
                           "device-opening.svg",
                           "density-drop.svg",
                           "density-peak.svg",
                           "budget-peak.svg",
                           "sensitivity-peak.svg"})
    EXPECT_TRUE(files.contains(name)) << name;
  for (const auto& [name, text] : files) {
    EXPECT_EQ(text.rfind("<svg xmlns=\"http://www.w3.org/2000/svg\"", 0), 0u) << name;
    EXPECT_EQ(text.find("nan"), std::string::npos) << name;
    EXPECT_EQ(text.find("var("), std::string::npos) << name;
  }
  EXPECT_NE(pictures(study, "us").at("history-pressure.svg").find("pressure, psi g"), std::string::npos);
}

}  // namespace
}  // namespace headband::report
