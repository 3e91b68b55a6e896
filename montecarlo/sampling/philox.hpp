#pragma once
// SPDX-License-Identifier: MIT
//
// Counter-based random numbers: Philox4x32-10 (Salmon, Moraes, Dror, Shaw 2011, SC '11). A number is a function of
// (seed, draw, name) and of nothing else, so draws need no order, no state and no thread of their own.

#include "core/base/lanes.hpp"

#include <array>
#include <cstdint>
#include <span>

namespace headband::montecarlo {

using PhiloxWords = std::array<std::uint32_t, 4>;

/// The ten-round bijection itself, key = {low, high}.
[[nodiscard]] PhiloxWords philox(const PhiloxWords& counter, const std::array<std::uint32_t, 2>& key);

/// 64 random bits: counter words = draw low, draw high, name low, name high; out1 2^32 + out0.
[[nodiscard]] std::uint64_t philox_bits(std::uint64_t seed, std::uint64_t draw, std::uint64_t name);

/// A score in (0, 1) from the top 52 of 64 bits: (top + 1/2) / 2^52.
[[nodiscard]] HEADBAND_INLINE double score_of_bits(std::uint64_t bits) {
  return (static_cast<double>(bits >> 12) + 0.5) * 0x1p-52;
}

/// Ten round keys of a seed, made once.
struct PhiloxKey {
  explicit PhiloxKey(std::uint64_t seed);
  std::array<std::array<std::uint64_t, 2>, 10> round{};  ///< 32 bits each
  /// The same, each as often as a register holds it.
  alignas(32) std::array<std::array<std::array<std::uint64_t, 4>, 2>, 10> in_lanes{};
};

/// Scores of the draws `first`, `first + stride`, … for one name, eight in each of `scores`, which are not none; the
/// same bits as `score_of_bits(philox_bits(…))` one by one.
void philox_scores(const PhiloxKey& key,
                   std::uint64_t first,
                   std::uint64_t name,
                   std::span<base::Lanes<8>> scores,
                   std::uint64_t stride = 1);

/// Draw words at and above these are never draws of a case: they key scrambles and shuffles.
inline constexpr std::uint64_t scramble_draws = std::uint64_t{1} << 63;
inline constexpr std::uint64_t shuffle_draws = std::uint64_t{1} << 62;

}  // namespace headband::montecarlo
