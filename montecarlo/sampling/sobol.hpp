#pragma once
// SPDX-License-Identifier: MIT
//
// Sobol' points with the direction numbers of Joe & Kuo 2008 (SIAM J. Sci. Comput. 30, 2635; as Boost.Random holds
// them), point 0 included, and 16 independent scrambles of them: Matousek's linear scramble (1998, J. Complexity 14,
// 527) with a digital shift, keyed by (seed, replicate, name).

#include <array>
#include <cstdint>
#include <vector>

namespace headband::montecarlo {

inline constexpr int sobol_replicates = 16;
inline constexpr int sobol_bits = 52;        ///< digits of a point
inline constexpr int sobol_index_bits = 44;  ///< points 0 … 2^44 - 1
inline constexpr std::size_t most_sobol_dimensions = 3667;

/// Direction numbers of each dimension as 52-bit fractions: `[dimension][bit of the Gray code]`.
using SobolDirections = std::vector<std::array<std::uint64_t, sobol_index_bits>>;

/// @throws std::range_error with more than 3667 dimensions
[[nodiscard]] SobolDirections sobol_directions(std::size_t dimensions);

/// The unscrambled point in Gray-code order as a 52-bit fraction.
[[nodiscard]] std::uint64_t sobol_point(const std::array<std::uint64_t, sobol_index_bits>& direction,
                                        std::uint64_t index);

/// One name's 16 scrambled sequences.
struct ScrambledSobol {
  ScrambledSobol(const std::array<std::uint64_t, sobol_index_bits>& direction, std::uint64_t seed, std::uint64_t name);

  /// Point `draw div 16` of replicate `draw mod 16`, as a 52-bit fraction.
  [[nodiscard]] std::uint64_t point(std::uint64_t draw) const;

  /// The points of the draws `first` … `first + 7`, `first` a multiple of 8.
  void points(std::uint64_t first, std::array<std::uint64_t, 8>& out) const;

 private:
  std::array<std::array<std::uint64_t, sobol_replicates>, sobol_index_bits> direction_{};
  std::array<std::uint64_t, sobol_replicates> shift_{};
};

/// The least 16·2^m that is not under `draws`.
[[nodiscard]] long long sobol_draws(long long draws);

}  // namespace headband::montecarlo
