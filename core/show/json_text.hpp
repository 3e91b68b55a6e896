#pragma once
// SPDX-License-Identifier: MIT

#include <nlohmann/json_fwd.hpp>

#include <string>

namespace headband::show {

/// Shortest decimal digits that read back to the same double; "null" where `value` is not finite, "0" for minus zero.
[[nodiscard]] std::string shortest(double value);

/// The same digits without an exponent: "0.025", "0.00001"; a finite number only.
[[nodiscard]] std::string shortest_decimal(double value);

/// Text of a JSON value, two spaces a level, arrays of plain values on one line, a newline at the end.
///
/// Numbers carry their shortest round-trip digits, bytes that are not UTF-8 become U+FFFD.
[[nodiscard]] std::string json_text(const nlohmann::ordered_json& value);

}  // namespace headband::show
