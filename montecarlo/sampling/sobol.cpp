// SPDX-License-Identifier: MIT
#include "montecarlo/sampling/sobol.hpp"

#include "montecarlo/sampling/philox.hpp"

#include <bit>
#include <boost/random/sobol.hpp>
#include <stdexcept>

namespace headband::montecarlo {

namespace {

constexpr std::uint64_t gray_code(std::uint64_t index) { return index ^ (index >> 1); }

}  // namespace

SobolDirections sobol_directions(std::size_t dimensions) {
  if (dimensions > most_sobol_dimensions) throw std::range_error("Sobol' points have at most 3667 dimensions");
  SobolDirections direction(dimensions);
  if (dimensions == 0) return direction;
  boost::random::sobol_engine<std::uint64_t, 64> engine(dimensions);
  for (std::size_t bit = 0; bit < static_cast<std::size_t>(sobol_index_bits); ++bit) {
    // the Gray code of 2^bit holds the bits `bit` and `bit - 1`; seed(n) makes point n + 1 the next one
    engine.seed((std::uint64_t{1} << bit) - 1);
    for (std::size_t d = 0; d < dimensions; ++d) {
      const std::uint64_t point = engine() >> (64 - sobol_bits);
      direction[d][bit] = bit == 0 ? point : point ^ direction[d][bit - 1];
    }
  }
  return direction;
}

std::uint64_t sobol_point(const std::array<std::uint64_t, sobol_index_bits>& direction, std::uint64_t index) {
  std::uint64_t point = 0;
  for (std::uint64_t code = gray_code(index); code != 0; code &= code - 1) {
    point ^= direction[static_cast<std::size_t>(std::countr_zero(code))];
  }
  return point;
}

ScrambledSobol::ScrambledSobol(const std::array<std::uint64_t, sobol_index_bits>& direction,
                               std::uint64_t seed,
                               std::uint64_t name) {
  for (std::size_t replicate = 0; replicate < static_cast<std::size_t>(sobol_replicates); ++replicate) {
    const std::uint64_t key = scramble_draws + 64 * replicate;
    // row r of the lower triangular matrix: random digits before the diagonal, 1 on it, 0 behind it
    std::array<std::uint64_t, sobol_bits> row{};
    for (std::size_t r = 0; r < row.size(); ++r) {
      const std::uint64_t diagonal = std::uint64_t{1} << (static_cast<std::size_t>(sobol_bits) - 1 - r);
      const std::uint64_t before = ~(2 * diagonal - 1) & ((std::uint64_t{1} << sobol_bits) - 1);
      row[r] = (philox_bits(seed, key + r, name) & before) | diagonal;
    }
    for (std::size_t bit = 0; bit < direction_.size(); ++bit) {
      std::uint64_t scrambled = 0;
      for (const std::uint64_t digits : row) {
        scrambled = scrambled << 1 | static_cast<std::uint64_t>(std::popcount(digits & direction[bit]) & 1);
      }
      direction_[bit][replicate] = scrambled;
    }
    shift_[replicate] = philox_bits(seed, key + 63, name) >> (64 - sobol_bits);
  }
}

std::uint64_t ScrambledSobol::point(std::uint64_t draw) const {
  const auto replicate = static_cast<std::size_t>(draw % sobol_replicates);
  std::uint64_t point = shift_[replicate];
  for (std::uint64_t code = gray_code(draw / sobol_replicates); code != 0; code &= code - 1) {
    point ^= direction_[static_cast<std::size_t>(std::countr_zero(code))][replicate];
  }
  return point;
}

void ScrambledSobol::points(std::uint64_t first, std::array<std::uint64_t, 8>& out) const {
  const auto replicate = static_cast<std::size_t>(first % sobol_replicates);
  std::array<std::uint64_t, 8> point{};
  for (std::size_t lane = 0; lane < 8; ++lane) point[lane] = shift_[replicate + lane];
  for (std::uint64_t code = gray_code(first / sobol_replicates); code != 0; code &= code - 1) {
    const auto& direction = direction_[static_cast<std::size_t>(std::countr_zero(code))];
    for (std::size_t lane = 0; lane < 8; ++lane) point[lane] ^= direction[replicate + lane];
  }
  out = point;
}

long long sobol_draws(long long draws) {
  long long rounded = sobol_replicates;
  while (rounded < draws) rounded *= 2;
  return rounded;
}

}  // namespace headband::montecarlo
