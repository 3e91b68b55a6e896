#pragma once
// SPDX-License-Identifier: MIT

#include "core/base/quantity.hpp"

#include <string>

namespace headband::casefile {

/// A spread in words of a unit family, "95 % within ± 3 mm"; empty for an exact value.
[[nodiscard]] std::string words_of_spread(const base::Quantity& quantity, base::UnitFamily family);

}  // namespace headband::casefile
