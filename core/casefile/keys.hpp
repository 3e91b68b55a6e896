#pragma once
// SPDX-License-Identifier: MIT
//
// The reader's own table: every key of a case file that carries a number with a unit, a share or a factor.

#include "core/base/dimension.hpp"

#include <limits>
#include <span>
#include <string_view>

namespace headband::casefile {

/// How a value is written.
enum class Form {
  value,             ///< a number with its unit
  scatter,           ///< a factor: "± 10 %", "x/ 1.1", "none", 1.0345
  kv,                ///< metric flow coefficient [m3/h]
  cv,                ///< US flow coefficient [gpm]
  viscosity,         ///< kinematic or dynamic: the unit tells
  rate_or_relative,  ///< ageing growth: a rate, "2 of before" or "none"
};

/// Whether a draw may change the value.
enum class SpreadUse { sampled, refused };

/// One key: what it is, what it may be, whether it may be uncertain.
struct KeyRule {
  std::string_view section;  ///< `pipe`
  std::string_view key;      ///< `wall`, `lining thickness`
  base::Dimension dimension = base::Dimension::number;
  SpreadUse spread = SpreadUse::sampled;
  double low = -std::numeric_limits<double>::infinity();  ///< physical limit [SI]
  double high = std::numeric_limits<double>::infinity();  ///< physical limit [SI]
  bool low_open = false;                                  ///< the lower limit itself is not allowed
  Form form = Form::value;
  std::string_view example{};  ///< right form for messages; empty: that of the dimension
  std::string_view instead{};  ///< what to write in place of a spread, where it is refused
};

/// All keys.
[[nodiscard]] std::span<const KeyRule> key_rules();

/// The rule of one key; the table holds every key the reader asks for. @throws std::logic_error else (our bug)
[[nodiscard]] const KeyRule& key_rule(std::string_view section, std::string_view key);

}  // namespace headband::casefile
