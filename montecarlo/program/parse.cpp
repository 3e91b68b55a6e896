// SPDX-License-Identifier: MIT
#include "montecarlo/program/parse.hpp"

#include "montecarlo/program/arguments.hpp"
#include "montecarlo/program/output.hpp"

#include <fmt/format.h>
#include <CLI/CLI.hpp>

#include <algorithm>
#include <limits>
#include <map>

namespace headband::program {
namespace {

const VerbWords& find_verb(const std::vector<std::string>& arguments) {
  std::vector<std::string> names;
  for (const auto& verb : verbs()) names.emplace_back(verb.name);
  if (arguments.empty()) throw UsageError("no verb given; headband --help shows them");
  const std::string& word = arguments.front();
  if (const auto* verb = verb_named(word)) return *verb;
  if (word.starts_with('-')) {
    throw UsageError(fmt::format("the verb comes first, then {}; headband --help shows the verbs", word));
  }
  const std::string hint = did_you_mean(word, names);
  throw UsageError(fmt::format("unknown verb '{}'{}", word, hint.empty() ? "; headband --help shows them all" : hint));
}

/// Texts of the options as CLI11 collects them; every number stays text until our own reader has seen it.
struct Collected {
  std::map<std::string, std::string, std::less<>> texts;
  std::map<std::string, bool, std::less<>> flags;
  std::vector<std::string> words;
};

void collect(const VerbWords& verb, std::vector<std::string> rest, Collected& into) {
  CLI::App app;
  app.set_help_flag();
  app.allow_extras();
  app.add_option("words", into.words);
  for (const auto& option : all_options()) {
    if (!takes(verb, option.name)) continue;
    const std::string name(option.name);
    if (option.value.empty()) {
      app.add_flag(name == "--help" ? "-h,--help" : name, into.flags[name]);
    } else {
      app.add_option(name, into.texts[name])->expected(1);
    }
  }
  std::ranges::reverse(rest);  // CLI11 takes its vector from the back
  try {
    app.parse(rest);
  } catch (const CLI::ParseError& error) {
    throw UsageError(fmt::format("{} ({}); headband {} --help shows the options", error.what(), verb.name, verb.name));
  }
  for (const auto& [name, text] : into.texts) {
    if (text.empty() && app.get_option(name)->count() > 0)
      throw UsageError(fmt::format("{} is given without a value", name));
  }
  for (const auto& extra : app.remaining()) {
    if (!extra.starts_with('-') || extra == "-") continue;
    const std::string name = extra.substr(0, extra.find('='));
    std::vector<std::string> known;
    for (const auto& option : all_options()) {
      if (takes(verb, option.name)) known.emplace_back(option.name);
      if (option.name == name) throw UsageError(fmt::format("{} has no option {}", verb.name, name));
    }
    throw UsageError(fmt::format("unknown option {}{}", name, did_you_mean(name, known)));
  }
}

/// The call as kept in the file: folders of this machine are left out.
std::string without_folders(const std::vector<std::string>& arguments) {
  std::string text = "headband";
  for (const auto& argument : arguments) {
    const auto equals = argument.starts_with("--") ? argument.find('=') : std::string::npos;
    const std::string head = equals == std::string::npos ? "" : argument.substr(0, equals + 1);
    const std::string tail = equals == std::string::npos ? argument : argument.substr(equals + 1);
    const std::string plain = tail.find('/') == std::string::npos ? tail : file_name(tail);
    const bool quotes = plain.find(' ') != std::string::npos || plain.empty();
    text += quotes ? fmt::format(" {}\"{}\"", head, plain) : fmt::format(" {}{}", head, plain);
  }
  return text;
}

}  // namespace

Options parse(const std::vector<std::string>& arguments) {
  const VerbWords& verb = find_verb(arguments);
  const std::vector<std::string> rest(arguments.begin() + 1, arguments.end());
  const bool help = std::ranges::any_of(rest, [](const auto& a) { return a == "--help" || a == "-h"; });
  Options options;
  options.verb = verb.name;
  options.help = help;
  if (help) return options;
  if (!verb.ready) {
    throw UsageError(fmt::format(
        "{} ({}) is not computed yet by this version; headband --help lists what is", verb.name, verb.what));
  }
  Collected collected;
  collect(verb, rest, collected);
  options.command = without_folders(arguments);
  options.words = collected.words;
  const int words = static_cast<int>(options.words.size());
  if (words < verb.fewest)
    throw UsageError(fmt::format("{} needs {}; headband {} --help shows more", verb.name, verb.words, verb.name));
  if (words > verb.most) {
    throw UsageError(fmt::format("{} takes {}; '{}' is one word too many",
                                 verb.name,
                                 verb.words,
                                 options.words[static_cast<std::size_t>(verb.most)]));
  }
  if (std::ranges::any_of(options.words, [](const auto& w) { return w.empty(); })) throw UsageError("a word is empty");
  const auto text = [&](const char* name) { return collected.texts[name]; };
  options.out = text("--out");
  options.report = text("--report");
  options.svg_folder = text("--svg");
  options.csv_folder = text("--csv");
  options.units = text("--units");
  options.temperature = text("--temperature");
  options.pressure = text("--pressure");
  if (!options.units.empty() && options.units != "si" && options.units != "us") {
    throw UsageError(fmt::format("--units takes si or us, not '{}'", options.units));
  }
  if (!text("--threads").empty())
    options.threads = static_cast<int>(whole_number("--threads", text("--threads"), 1, 1024));
  if (!text("--seed").empty()) {
    options.seed = whole_number("--seed", text("--seed"), 0, std::numeric_limits<unsigned long long>::max());
  }
  options.surge = collected.flags["--surge"];
  options.quiet = collected.flags["--quiet"];
  options.json = collected.flags["--json"];
  options.no_colour = collected.flags["--no-color"];
  options.force = collected.flags["-f"];
  options.gate = collected.flags["--gate"];
  options.resume = collected.flags["--resume"];
  return options;
}

}  // namespace headband::program
