#pragma once
// SPDX-License-Identifier: MIT

#include <cstdint>
#include <vector>

namespace headband::montecarlo {

/// Which of `draws` equal strata each draw of a Latin hypercube takes for one name (McKay, Beckman, Conover 1979,
/// Technometrics 21, 239): a shuffle (Fisher & Yates) by Philox bits keyed by (seed, draws, name).
/// @param draws 1 … 2^30 - 1
[[nodiscard]] std::vector<std::uint32_t> latin_strata(std::uint64_t seed, std::uint64_t name, std::uint32_t draws);

/// Score of a draw in its stratum: (stratum + within) / draws, kept under 1.
[[nodiscard]] double latin_score(std::uint32_t stratum, double within, std::uint32_t draws);

}  // namespace headband::montecarlo
