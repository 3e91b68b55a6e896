// SPDX-License-Identifier: MIT
#include "montecarlo/program/arguments.hpp"

#include "core/network/nearest_word.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <array>
#include <charconv>

namespace headband::program {
namespace {

#define HEADBAND_RUN_OPTIONS "--out --report --threads --units --quiet --json --no-color -f --gate"

// clang-format off: a table, read row by row
constexpr std::array verb_table{
    VerbWords{"new", "KIND [FILE]", 0, 2, "write a starter case; alone: list the kinds", "-f --quiet", "headband new valve"},
    VerbWords{"check", "CASE", 1, 1, "read a case and echo every value as understood",
              "--units --quiet --json --no-color", "headband check valve.toml"},
    VerbWords{"flow", "CASE", 1, 1, "steady flow, heads and pressure drops", HEADBAND_RUN_OPTIONS,
              "headband flow valve.toml"},
    VerbWords{"surge", "CASE", 1, 1, "one run through the events of the case", HEADBAND_RUN_OPTIONS,
              "headband surge valve.toml --report valve.html"},
    VerbWords{"band", "CASE", 1, 1, "sampled answers with bands and verdicts",
              "--surge --seed --resume " HEADBAND_RUN_OPTIONS, "headband band --surge valve.toml --threads 2"},
    VerbWords{"report", "RESULT", 1, 1, "the page, or tables and pictures, of a result file",
              "--report --svg --csv --json --units --quiet --no-color -f", "headband report valve-band.h5"},
    VerbWords{"liquid", "NAME", 1, 1, "properties of a liquid the program knows",
              "--temperature --pressure --units --quiet --json --no-color",
              "headband liquid water --temperature \"15 degC\""},
    VerbWords{"at", "RESULT PLACE", 2, 2, "everything for a place, a pipe or \"PIPE @ 900 m\"",
              "--units --quiet --json --no-color", "headband at valve-surge.h5 \"main @ 900 m\""},
    VerbWords{"compare", "A.h5 B.h5", 2, 2, "what changed, draw by draw where it can be told",
              "--units --quiet --json --no-color", "headband compare before-band.h5 after-band.h5"},
    VerbWords{"replay", "RESULT N", 2, 3, "draw N, or \"worst N\", of a band as a plain case",
              "--out --quiet -f", "headband replay valve-band.h5 worst 1 | headband surge -"},
    VerbWords{"fastest", "CASE", 1, 1, "shortest closing time at a confidence", "", "", false},
    VerbWords{"age", "CASE", 1, 1, "growth of roughness over the years", "", "", false},
    VerbWords{"match", "CASE", 1, 1, "unknowns from a field log", "", "", false},
    VerbWords{"doubt", "CASE", 1, 1, "what to measure to settle a verdict", "", "", false},
};
// clang-format on

constexpr std::array option_table{
    OptionWords{"--out", "FILE", "the file to write (default CASE-VERB.h5 here)"},
    OptionWords{"--report", "FILE.html", "write the report page as well, under this name"},
    OptionWords{"--svg", "FOLDER", "write the pictures instead of the page"},
    OptionWords{"--csv", "FOLDER", "write the tables instead of the page"},
    OptionWords{"--surge", "", "march every draw, not the steady answers alone"},
    OptionWords{"--seed", "N", "seed of the draws (default: the case's)"},
    OptionWords{"--resume", "", "take up an interrupted band: the same bits as without"},
    OptionWords{"--threads", "N", "threads (default: all; no answer depends on it)"},
    OptionWords{"--temperature", "T", "temperature with unit (default 20 degC)"},
    OptionWords{"--pressure", "P", "absolute pressure with unit (default 1 bar)"},
    OptionWords{"--units", "si|us", "units people are shown; files stay SI"},
    OptionWords{"--gate", "", "exit 1: a limit is not kept, 2: cannot tell"},
    OptionWords{"--json", "", "print one JSON object, SI, in place of the summary"},
    OptionWords{"--quiet", "", "no progress and no remarks"},
    OptionWords{"--no-color", "", "plain text; also by NO_COLOR or TERM=dumb"},
    OptionWords{"-f", "", "replace a file of a name you gave"},
    OptionWords{"--help", "", "this text; also after a verb"},
};

/// The cautions of --help, lines of at most 80 columns.
constexpr std::string_view caution_text =
    "A calculation aid: the code in force and a licensed engineer decide. Ratings are\n"
    "the user's. Not modelled: slam of check valves, structures that move with the\n"
    "liquid, column filling, human error.\n";

std::string option_line(const OptionWords& option) {
  std::string left = std::string(option.name);
  if (!option.value.empty()) left.append(" ").append(option.value);
  return fmt::format("  {:<20} {}\n", left, option.what);
}

}  // namespace

std::span<const VerbWords> verbs() { return verb_table; }
std::span<const OptionWords> all_options() { return option_table; }

const VerbWords* verb_named(std::string_view name) {
  for (const auto& verb : verb_table) {
    if (verb.name == name) return &verb;
  }
  return nullptr;
}

bool takes(const VerbWords& verb, std::string_view option) {
  if (option == "--help") return true;
  std::string_view rest = verb.options;
  while (!rest.empty()) {
    const auto end = std::min(rest.find(' '), rest.size());
    if (rest.substr(0, end) == option) return true;
    rest.remove_prefix(std::min(end + 1, rest.size()));
  }
  return false;
}

unsigned long long whole_number(std::string_view option,
                                const std::string& text,
                                unsigned long long low,
                                unsigned long long high) {
  const bool digits = !text.empty() && std::ranges::all_of(text, [](char c) { return c >= '0' && c <= '9'; });
  const bool plain = digits && (text.size() == 1 || text.front() != '0');
  unsigned long long number = 0;
  const auto [end, error] = std::from_chars(text.data(), text.data() + text.size(), number);
  if (!plain || error != std::errc() || end != text.data() + text.size() || number < low || number > high) {
    throw UsageError(
        fmt::format("{} takes a whole number from {} to {} in plain digits, not '{}'", option, low, high, text));
  }
  return number;
}

std::string did_you_mean(const std::string& word, const std::vector<std::string>& known) {
  const std::string near = network::nearest_word(word, known);
  return near.empty() ? "" : fmt::format("; did you mean {}?", near);
}

std::string help() {
  std::string text =
      "headband: surge and pressure drop of liquid pipelines, with error bars\n\n"
      "  headband new valve                     a starter case to edit: valve.toml\n"
      "  headband check valve.toml              every value as understood\n"
      "  headband flow valve.toml               steady flow and pressure drop\n"
      "  headband surge valve.toml              what the event does, one run\n"
      "  headband band --surge valve.toml       how far that answer can be trusted\n"
      "  headband report valve-band.h5          the page for the file\n\n";
  text += caution_text;
  text += "\nVerbs:\n";
  for (const auto& verb : verb_table) {
    if (verb.ready) text += fmt::format("  {:<20} {}\n", fmt::format("{} {}", verb.name, verb.words), verb.what);
  }
  text += "\nKnown words this version does not compute yet (exit 64):\n  ";
  bool first = true;
  for (const auto& verb : verb_table) {
    if (verb.ready) continue;
    text += fmt::format("{}{}", first ? "" : ", ", verb.name);
    first = false;
  }
  text += "\n\nOptions (headband VERB --help shows those of a verb):\n";
  for (const auto& option : option_table) text += option_line(option);
  text +=
      "\nA case named - is read from standard input. Results go to standard output,\n"
      "everything else to standard error.\n\n"
      "Exit codes: 0 done; with --gate 1 a limit is not kept, 2 cannot tell;\n"
      "3 the calculation did not finish; 64 wrong usage; 65 wrong case, damaged file,\n"
      "or more memory or time than allowed; 66 input missing; 70 internal error;\n"
      "73 cannot create a file; 74 cannot write; 130 or 143 stopped by the user.\n";
  return text;
}

std::string help(const VerbWords& verb) {
  if (!verb.ready)
    return fmt::format("headband {} {}: {}\nNot computed yet by this version.\n", verb.name, verb.words, verb.what);
  std::string text = fmt::format("headband {} {}: {}\n\n  {}\n\n", verb.name, verb.words, verb.what, verb.example);
  text += caution_text;
  text += "\nOptions:\n";
  for (const auto& option : option_table) {
    if (takes(verb, option.name)) text += option_line(option);
  }
  return text;
}

}  // namespace headband::program
