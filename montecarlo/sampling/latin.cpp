// SPDX-License-Identifier: MIT
#include "montecarlo/sampling/latin.hpp"

#include "montecarlo/sampling/philox.hpp"

#include <algorithm>
#include <numeric>
#include <utility>

namespace headband::montecarlo {

std::vector<std::uint32_t> latin_strata(std::uint64_t seed, std::uint64_t name, std::uint32_t draws) {
  std::vector<std::uint32_t> stratum(draws);
  std::iota(stratum.begin(), stratum.end(), 0U);
  const std::uint64_t key = shuffle_draws | static_cast<std::uint64_t>(draws) << 32;
  for (std::uint32_t i = draws; i > 1; --i) {
    // the upper half of 32 random bits times i: even to 2^-32 of a stratum
    const std::uint64_t random = philox_bits(seed, key + i, name) >> 32;
    std::swap(stratum[i - 1], stratum[static_cast<std::size_t>(random * i >> 32)]);
  }
  return stratum;
}

double latin_score(std::uint32_t stratum, double within, std::uint32_t draws) {
  return std::min((static_cast<double>(stratum) + within) / static_cast<double>(draws), 1.0 - 0x1p-53);
}

}  // namespace headband::montecarlo
