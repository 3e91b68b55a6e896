// SPDX-License-Identifier: MIT
//
// Nothing written with a spread is silently ignored. The cases are generated from the reader's own table of keys: each
// key gets a spread where it stands, and then either the answers of the band spread, or the spread is refused in words.

#include "core/casefile/keys.hpp"
#include "core/casefile/read.hpp"
#include "core/steady/evaluate.hpp"
#include "montecarlo/program/arguments.hpp"
#include "montecarlo/propagate/band.hpp"
#include "tests/support/spread_cases.hpp"
#include "transient/march/surge.hpp"

#include <gtest/gtest.h>

#include <algorithm>
#include <cmath>
#include <cstdlib>
#include <sstream>
#include <string>
#include <utility>
#include <vector>

namespace headband::montecarlo {
namespace {

using casefile::KeyRule;
using casefile::SpreadUse;
using test::SpreadCase;

/// One place in a case where a number may carry a spread.
struct Marker {
  std::size_t begin = 0, end = 0;  ///< in the text
  std::string key, value, spread;
};

std::vector<Marker> markers_of(std::string_view text) {
  std::vector<Marker> markers;
  for (std::size_t at = text.find("<<"); at != std::string_view::npos; at = text.find("<<", at + 1)) {
    Marker m;
    m.begin = at;
    m.end = text.find(">>", at) + 2;
    const std::string inside(text.substr(at + 2, m.end - at - 4));
    const std::size_t first = inside.find('|'), second = inside.find('|', first + 1);
    m.key = inside.substr(0, first);
    m.value = inside.substr(first + 1, second == std::string::npos ? second : second - first - 1);
    if (second != std::string::npos) m.spread = inside.substr(second + 1);
    markers.push_back(std::move(m));
  }
  return markers;
}

enum class Doubt { none, chance, range };

std::string number_text(double x) {
  std::ostringstream out;
  out.precision(10);
  out << x;
  return out.str();
}

/// The value of a marker as the case shall hold it.
std::string written(const Marker& m, Doubt doubt) {
  if (doubt == Doubt::none) return m.value;
  if (m.value == "none") return doubt == Doubt::chance ? "± 5 %" : "-5 % .. 5 %, not random";
  char* unit = nullptr;
  const double value = std::strtod(m.value.c_str(), &unit);
  const bool bare_words = unit == m.value.c_str();  // a number inside a sentence
  if (doubt == Doubt::chance || bare_words) return m.value + " " + (m.spread.empty() ? "± 5 %" : m.spread);
  const bool factor = m.spread.starts_with("x/");
  const std::size_t number = m.spread.find(' ');
  const double half =
      m.spread.empty() || factor ? 0.05 * std::abs(value) : std::strtod(m.spread.c_str() + number, nullptr);
  return number_text(value - half) + unit + " .. " + number_text(value + half) + unit + ", not random";
}

/// The text with every value exact but the one marked.
std::string text_with(const SpreadCase& each, const std::vector<Marker>& markers, std::size_t doubtful, Doubt doubt) {
  std::string out;
  std::size_t at = 0;
  for (std::size_t i = 0; i < markers.size(); ++i) {
    out += each.text.substr(at, markers[i].begin - at);
    out.append("\"").append(written(markers[i], i == doubtful ? doubt : Doubt::none)).append("\"");
    at = markers[i].end;
  }
  return out + std::string(each.text.substr(at));
}

base::Problems problems_of(const network::Case& c, const std::string& verb) {
  base::Problems problems = casefile::refused_by_verb(c, verb);
  const base::Problems missing = network::validate_for(c, verb);
  problems.insert(problems.end(), missing.begin(), missing.end());
  return problems;
}

std::string words_of(const base::Problems& problems) {
  std::string words;
  for (const auto& p : problems) words += p.path + ": " + p.what + " (" + p.value + ") " + p.hint + "\n";
  return words;
}

/// Whether anything the band says spreads.
bool spreads(const BandOutcome& outcome) {
  const auto apart = [](double a, double b) { return std::abs(a - b) > 1e-9 * std::max(std::abs(a), std::abs(b)); };
  for (const auto& answer : outcome.bands.answers) {
    if (answer.standard_deviation > 1e-9 * std::abs(answer.mean)) return true;
    if (answer.range && apart((*answer.range)[0], (*answer.range)[1])) return true;
  }
  for (const auto& limit : outcome.limits) {
    if (limit.probability > 0.0 && limit.probability < 1.0) return true;
    if (limit.probability_range && apart((*limit.probability_range)[0], (*limit.probability_range)[1])) return true;
  }
  return false;
}

BandOutcome band_of(const network::Case& c, bool surge) {
  const network::Plan plan = network::make_plan(c);
  BandOptions options;
  options.surge = surge;
  return run_band(c, plan, {}, options);
}

/// Says what is wrong with how the marked spread is treated; empty: it counts, or it is refused in words.
std::string complaint(const SpreadCase& each, const std::vector<Marker>& markers, std::size_t marked, Doubt doubt) {
  const std::string text = text_with(each, markers, marked, doubt);
  const auto reading = casefile::read_text("spread.toml", text, "");
  const KeyRule* rule = nullptr;
  for (const KeyRule& r : casefile::key_rules())
    if (std::string(r.section) + " " + std::string(r.key) == markers[marked].key) rule = &r;
  if (rule == nullptr) return "the reader's table has no such key";
  if (!reading.problems.empty()) {
    const std::string words = words_of(reading.problems);
    if (rule->spread != SpreadUse::refused) return "not refused by the table, but by the reader: " + words;
    return words.find("spread") != std::string::npos ? "" : "refused without a word about spreads: " + words;
  }
  if (rule->spread == SpreadUse::refused) return "to be refused, but read";
  const std::string verb(each.verb);
  if (const auto* known = program::verb_named(verb.substr(0, verb.find(' '))); known == nullptr || !known->ready)
    return known == nullptr ? "no such verb" : "";  // the verb as a whole is "not computed yet by this version"
  const base::Problems refused = problems_of(reading.value, verb);
  if (!refused.empty()) {
    const std::string words = words_of(refused);
    return words.find("not computed yet by this version") != std::string::npos ? "" : words;
  }
  if (reading.value.unknowns.size() != 1) return "unknowns: " + std::to_string(reading.value.unknowns.size());
  const BandOutcome outcome = band_of(reading.value, verb == "band --surge");
  if (outcome.bands.failed > 0) return std::to_string(outcome.bands.failed) + " draws failed";
  return spreads(outcome) ? "" : "silently ignored";
}

TEST(SpreadOfEachKey, TheCasesAreSoundAndExactWithoutASpread) {
  for (const SpreadCase& each : test::spread_cases()) {
    const auto markers = markers_of(each.text);
    const auto reading = casefile::read_text("spread.toml", text_with(each, markers, 0, Doubt::none), "");
    ASSERT_TRUE(reading.problems.empty()) << words_of(reading.problems) << each.text;
    if (!each.verb.starts_with("band") || !problems_of(reading.value, std::string(each.verb)).empty()) continue;
    EXPECT_TRUE(reading.value.unknowns.empty()) << reading.value.unknowns.front().name << each.text;
    EXPECT_FALSE(spreads(band_of(reading.value, each.verb == "band --surge"))) << each.text;
  }
}

TEST(SpreadOfEachKey, CountsOrIsRefusedInWords) {
  for (const Doubt doubt : {Doubt::chance, Doubt::range})
    for (const SpreadCase& each : test::spread_cases()) {
      const auto markers = markers_of(each.text);
      for (std::size_t i = 0; i < markers.size(); ++i) {
        const std::string words = complaint(each, markers, i, doubt);
        EXPECT_TRUE(words.empty()) << each.verb << ": " << markers[i].key << " = \"" << written(markers[i], doubt)
                                   << "\": " << words;
      }
    }
}

/// Answers of the central run of a case, as the verbs `flow` and `surge` find them.
std::vector<double> answers_of_run(const network::Case& c, bool surge) {
  const network::Plan plan = network::make_plan(c);
  const network::Values<1> values = network::realise(c, plan);
  steady::SteadySolver solver(c, plan);
  steady::SteadyState<1> state;
  solver.solve(values, state);
  if (surge) return transient::run_surge(c, plan, values, state).answer_value;
  std::vector<double> answers;
  for (const auto& answer : plan.answers) answers.push_back(steady::answer<1>(plan, values, state, answer).number);
  return answers;
}

// A draw written back as a plain case, read again and run alone gives the bits it had among its seven neighbours.
TEST(SpreadOfEachKey, ADrawWrittenAsACaseGivesTheBitsOfTheBatch) {
  int tried = 0;
  for (const Doubt doubt : {Doubt::chance, Doubt::range})
    for (const SpreadCase& each : test::spread_cases()) {
      const auto markers = markers_of(each.text);
      const bool surge = each.verb == "band --surge";
      for (std::size_t i = 0; i < markers.size(); ++i) {
        const auto reading = casefile::read_text("spread.toml", text_with(each, markers, i, doubt), "");
        const network::Case& c = reading.value;
        if (!each.verb.starts_with("band") || !reading.problems.empty()) continue;
        if (!problems_of(c, std::string(each.verb)).empty()) continue;
        const BandOutcome outcome = band_of(c, surge);
        const long long draw = 5;
        const auto scores = scores_of_draw(c, c.band.seed, outcome.bands.draws, draw);
        const std::string plain = casefile::write_case(c, scores, "draw");
        auto again = casefile::read_text("draw.toml", plain, "");
        ASSERT_TRUE(again.problems.empty()) << markers[i].key << ": " << words_of(again.problems) << plain;
        EXPECT_TRUE(again.value.unknowns.empty()) << markers[i].key << plain;
        again.value.band = c.band;
        const auto answers = answers_of_run(again.value, surge);
        ASSERT_EQ(answers.size(), outcome.bands.answers.size());
        for (std::size_t a = 0; a < answers.size(); ++a) {
          const double batch = outcome.bands.output_value[static_cast<std::size_t>(draw) * answers.size() + a];
          EXPECT_EQ(answers[a], batch) << markers[i].key << " = \"" << written(markers[i], doubt) << "\"\n" << plain;
        }
        ++tried;
      }
    }
  EXPECT_GT(tried, 150);
}

// "as NAME" is looked up wherever it can be written, and refused where a value is chosen and not drawn.
TEST(SpreadOfEachKey, SharingAValueThatIsNotThereIsToldForEveryKey) {
  for (const SpreadCase& each : test::spread_cases()) {
    if (!each.verb.starts_with("band")) continue;
    auto markers = markers_of(each.text);
    for (Marker& m : markers) {
      if (m.key.starts_with("event when") || m.key.starts_with("spot ")) continue;  // numbers inside a sentence
      const std::string value = std::exchange(m.value, "as the other one");
      const auto reading = casefile::read_text("shared.toml", text_with(each, markers, 0, Doubt::none), "");
      const std::string words = words_of(reading.problems);
      EXPECT_TRUE(words.find("no value is called 'the other one'") != std::string::npos ||
                  words.find("a spread is not taken here") != std::string::npos)
          << m.key << ": " << words;
      m.value = value;
    }
  }
}

// The one place where a spread can be lost in rounding says so.
TEST(SpreadOfEachKey, AFixedTimeStepWarnsThatItRoundsAnUncertainWaveSpeed) {
  for (const SpreadCase& each : test::spread_cases()) {
    const std::size_t reaches = each.text.find("\nreaches = 8\n");
    if (each.text.find("wave_speed_scatter") == std::string_view::npos || reaches == std::string_view::npos) continue;
    const auto markers = markers_of(each.text);
    for (std::size_t i = 0; i < markers.size(); ++i) {
      const bool speed = markers[i].key == "pipe modulus";
      if (!speed && markers[i].key != "event over") continue;
      std::string text = text_with(each, markers, i, Doubt::chance);
      text.replace(text.find("\nreaches = 8\n"), 13, "\ntime_step = \"0.1 s\"\n");
      const auto reading = casefile::read_text("spread.toml", text, "");
      ASSERT_TRUE(reading.problems.empty()) << words_of(reading.problems);
      const auto warnings = band_of(reading.value, true).warnings;
      const bool told = std::ranges::any_of(
          warnings, [](const std::string& w) { return w.starts_with("time_step is given: the wave speed of main"); });
      EXPECT_EQ(told, speed) << markers[i].key;
    }
  }
}

TEST(SpreadOfEachKey, EveryKeyOfTheTableIsTried) {
  std::vector<std::string> tried;
  for (const SpreadCase& each : test::spread_cases())
    for (const Marker& m : markers_of(each.text)) tried.push_back(m.key);
  for (const KeyRule& rule : casefile::key_rules()) {
    const std::string key = std::string(rule.section) + " " + std::string(rule.key);
    EXPECT_NE(std::ranges::find(tried, key), tried.end()) << key;
  }
}

}  // namespace
}  // namespace headband::montecarlo
