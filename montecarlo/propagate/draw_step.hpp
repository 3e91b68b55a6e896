#pragma once
// SPDX-License-Identifier: MIT

#include "core/network/values.hpp"

#include <optional>
#include <vector>

namespace headband::montecarlo {

/// Time step [s] one draw marches at, where a plain case of the same numbers would choose another: its grid was made
/// finer because its travel times are uncertain, which the plain case does not know. Nothing where both are alike, or
/// where the draw has no steady state or no grid.
/// @param scores one per unknown of the case
[[nodiscard]] std::optional<double> step_of_its_own(const network::Case& c, const std::vector<double>& scores);

}  // namespace headband::montecarlo
