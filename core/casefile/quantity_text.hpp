#pragma once
// SPDX-License-Identifier: MIT
//
// The grammar of one value: "300 mm ± 1 %", "0.05 mm x/ 2", "10 s between 8 s and 13 s", "0 % .. 0.1 %, not random".

#include "core/base/quantity.hpp"
#include "core/casefile/keys.hpp"

#include <optional>
#include <string>
#include <string_view>

namespace headband::casefile {

/// What is wrong with a text; the column counts code points from 0 at its first character.
struct TextProblem {
  int column = 0;
  std::string what, bound, hint;
};

/// A value as understood, or what is wrong with it.
struct ParsedQuantity {
  base::Quantity quantity;  ///< value, spread, cut, dimension, gauge, same_as and written are set
  std::optional<TextProblem> problem;
};

/// Understands `text` as a value of `rule`. SI throughout; ± is the half-width of the 95 % interval unless a
/// coverage is stated: sd = half / 1.959963984540054.
[[nodiscard]] ParsedQuantity parse_quantity(std::string_view text, const KeyRule& rule);

/// A bare number of the case file as a value of `rule`; a problem where a unit belongs.
[[nodiscard]] ParsedQuantity parse_number(double number, const std::string& written, const KeyRule& rule);

/// What is wrong with a value [SI] that is outside the physical limits of `rule`; nothing when it is inside.
[[nodiscard]] std::optional<TextProblem> outside_limits(double value, const KeyRule& rule);

}  // namespace headband::casefile
