#pragma once
// SPDX-License-Identifier: MIT
//
// A reader over one table of a case file. It remembers every key that was asked for; `finish` reports the others with
// the nearest word.

#include "core/base/problem.hpp"
#include "core/casefile/keys.hpp"
#include "core/network/case.hpp"

#include <toml++/toml.h>

#include <map>
#include <set>
#include <string>
#include <string_view>
#include <utility>
#include <vector>

namespace headband::casefile {

using base::Quantity;
using base::SourcePlace;

/// What all sections of one file share.
struct Context {
  std::string file_name, folder;
  std::vector<std::string_view> lines;  ///< of the text, without line ends
  base::Problems problems;
  std::map<std::string, SourcePlace> places;  ///< path of a value → where it stands
  std::map<std::string, int> names;           ///< names of unknowns given so far
  std::vector<std::string> guesses, warnings;
  bool names_doubtful = false;  ///< an element is missing or misnamed: what refers to it would be told again

  void report(
      SourcePlace place, std::string path, std::string what, std::string value, std::string bound, std::string hint);
  /// `name`, or `name 2`, `name 3` when it is taken.
  [[nodiscard]] std::string unique_name(const std::string& name);
};

[[nodiscard]] SourcePlace place_of(const toml::node& node);
[[nodiscard]] SourcePlace place_of(const toml::key& key);

/// The value as it stands in the file, for messages.
[[nodiscard]] std::string written(const toml::node& node);

class Section {
 public:
  /// @param section word of the rules (`pipe`) @param element its name, empty where it has none
  /// @param path of its values, `pipe/main`
  /// @param rule_prefix of the keys in the table of rules (`fitting `)
  /// @param name_prefix of the keys in names and paths (`fitting bend 90 `)
  Section(Context& context,
          const toml::table& table,
          std::string section,
          std::string element,
          std::string path,
          std::string rule_prefix = {},
          std::string name_prefix = {});

  [[nodiscard]] bool has(std::string_view key);
  /// The node of a key, null when it is not there. The key counts as asked for.
  [[nodiscard]] const toml::node* ask(std::string_view key);
  [[nodiscard]] SourcePlace place() const { return place_; }
  [[nodiscard]] SourcePlace place(std::string_view key) const;
  [[nodiscard]] const std::string& path() const { return path_; }
  [[nodiscard]] std::string path(std::string_view key) const { return path_ + "/" + name_prefix_ + std::string(key); }
  [[nodiscard]] const std::string& rule_section() const { return section_; }
  [[nodiscard]] const std::string& element() const { return element_; }
  [[nodiscard]] Context& context() { return context_; }

  /// A quantity by the rule of `section key`; not given where the key is left out or wrong.
  [[nodiscard]] Quantity quantity(std::string_view key);
  /// The same under another rule (`event to` depends on the subject).
  [[nodiscard]] Quantity quantity(std::string_view key, std::string_view rule_key);
  /// Left out: the default, as if the user had written it; `guess`: nobody stated it.
  [[nodiscard]] Quantity quantity_or(std::string_view key, std::string_view default_text, bool guess = false);
  [[nodiscard]] double plain(std::string_view key, double when_left_out);

  [[nodiscard]] std::string text(std::string_view key);
  /// A text that must be there.
  [[nodiscard]] std::string needed_text(std::string_view key, std::string_view hint);
  [[nodiscard]] bool flag(std::string_view key, bool when_left_out);
  [[nodiscard]] long long whole(std::string_view key, long long when_left_out, long long low, long long high);
  /// One of several words.
  template <class E, std::size_t N>
  [[nodiscard]] E word(std::string_view key, const std::pair<std::string_view, E> (&words)[N], E when_left_out) {
    const toml::node* node = ask(key);
    if (node == nullptr) return when_left_out;
    const auto given = node->value_exact<std::string>();
    std::vector<std::string> known;
    for (const auto& [name, meaning] : words) {
      if (given && *given == name) return meaning;
      known.emplace_back(name);
    }
    report_word(key, *node, known);
    return when_left_out;
  }

  /// Reports a problem at the value of `key` (at the section's head when the key is not there).
  void report(std::string_view key, std::string what, std::string bound, std::string hint);
  void report_word(std::string_view key, const toml::node& node, const std::vector<std::string>& known);
  /// Reports every key nobody asked for.
  void finish();

 private:
  Context& context_;
  const toml::table& table_;
  std::string section_, element_, path_, rule_prefix_, name_prefix_;
  [[nodiscard]] std::string name_of(std::string_view key) const;
  SourcePlace place_;
  std::set<std::string, std::less<>> asked_;
};

/// A node read under a rule; problems are reported, `name` and `path` go into the quantity.
[[nodiscard]] Quantity read_quantity(
    Context& context, const toml::node& node, const KeyRule& rule, const std::string& name, const std::string& path);

}  // namespace headband::casefile
