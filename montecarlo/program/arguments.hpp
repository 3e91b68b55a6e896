#pragma once
// SPDX-License-Identifier: MIT

#include "montecarlo/program/options.hpp"

#include <optional>
#include <span>
#include <stdexcept>
#include <string>
#include <string_view>
#include <vector>

namespace headband::program {

/// The call is wrong (exit code 64).
class UsageError final : public std::runtime_error {
 public:
  using std::runtime_error::runtime_error;
};

/// An option as registered and as shown in --help.
struct OptionWords {
  std::string_view name;   ///< "--threads"
  std::string_view value;  ///< "N"; empty = a flag
  std::string_view what;   ///< one line
};

/// A verb of the program.
struct VerbWords {
  std::string_view name;
  std::string_view words;    ///< "CASE"
  int fewest = 0, most = 0;  ///< how many words it takes
  std::string_view what;     ///< one line
  std::string_view options;  ///< names, separated by spaces
  std::string_view example;
  bool ready = true;  ///< false: a known word this version does not compute yet
};

[[nodiscard]] std::span<const VerbWords> verbs();
[[nodiscard]] std::span<const OptionWords> all_options();
[[nodiscard]] const VerbWords* verb_named(std::string_view name);
[[nodiscard]] bool takes(const VerbWords& verb, std::string_view option);

/// Whole number in digits alone: no sign, no leading zeros, no exponent, within [low, high].
/// @throws UsageError that names the option, the text seen and the range
[[nodiscard]] unsigned long long whole_number(std::string_view option,
                                              const std::string& text,
                                              unsigned long long low,
                                              unsigned long long high);

/// "; did you mean WORD?" with the nearest known word, or nothing where none is near.
[[nodiscard]] std::string did_you_mean(const std::string& word, const std::vector<std::string>& known);

/// Help of the whole program and of one verb, at most 80 columns wide.
[[nodiscard]] std::string help();
[[nodiscard]] std::string help(const VerbWords& verb);

}  // namespace headband::program
