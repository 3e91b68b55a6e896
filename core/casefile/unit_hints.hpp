#pragma once
// SPDX-License-Identifier: MIT
//
// The questions behind famous blunders of units, in words.

#include "core/base/units.hpp"
#include "core/casefile/keys.hpp"

#include <optional>
#include <string>
#include <string_view>

namespace headband::casefile {

struct UnitHint {
  std::string what, hint;
};

/// A unit name that is not in the table: the question to ask (US or imperial gallon?), or the nearest name.
[[nodiscard]] UnitHint hint_for_unit(std::string_view name, base::Dimension dimension);

/// A known unit of the wrong kind (minutes written as m, cP for cSt).
[[nodiscard]] UnitHint hint_for_kind(const base::Unit& unit, const KeyRule& rule);

/// A flow unit at kv or cv that belongs to the other one.
[[nodiscard]] std::optional<UnitHint> hint_for_coefficient(const base::Unit& unit, const KeyRule& rule);

/// What to write where the unit is missing.
[[nodiscard]] std::string missing_unit_hint(double number, const KeyRule& rule);

}  // namespace headband::casefile
