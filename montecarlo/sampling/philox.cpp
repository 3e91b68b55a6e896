// SPDX-License-Identifier: MIT
#include "montecarlo/sampling/philox.hpp"

#include <Random123/philox.h>

namespace headband::montecarlo {

namespace {

// Multipliers and key increments of Philox4x32 (Salmon et al. 2011, table 2 and text).
constexpr std::uint32_t multiplier_0 = 0xD2511F53U, multiplier_1 = 0xCD9E8D57U;
constexpr std::uint32_t increment_0 = 0x9E3779B9U, increment_1 = 0xBB67AE85U;

#if defined(__AVX2__)
/// Four counters in one register per word: 32 bits in each 64-bit lane; what stands above them is ignored.
struct FourCounters {
  __m256i word0, word1, word2, word3;
};

HEADBAND_INLINE __m256i high_half(__m256i x) { return _mm256_srli_epi64(x, 32); }
HEADBAND_INLINE __m256i in_every_lane(std::uint64_t x) { return _mm256_set1_epi64x(static_cast<long long>(x)); }
HEADBAND_INLINE __m256i round_key(const PhiloxKey& key, std::size_t round, std::size_t which) {
  return _mm256_load_si256(reinterpret_cast<const __m256i*>(&key.in_lanes[round][which]));
}

HEADBAND_INLINE void one_round(const PhiloxKey& key, std::size_t round, FourCounters& c) {
  const __m256i p0 = _mm256_mul_epu32(c.word0, in_every_lane(multiplier_0));
  const __m256i p1 = _mm256_mul_epu32(c.word2, in_every_lane(multiplier_1));
  c.word0 = _mm256_xor_si256(high_half(p1), _mm256_xor_si256(c.word1, round_key(key, round, 0)));
  c.word2 = _mm256_xor_si256(high_half(p0), _mm256_xor_si256(c.word3, round_key(key, round, 1)));
  c.word1 = p1;
  c.word3 = p0;
}

/// Scores from the first two words: top 52 bits of out1 2^32 + out0, laid into the mantissa of 1. The difference is
/// exact: (top + 1/2) / 2^52.
HEADBAND_INLINE base::Quad four_scores(const FourCounters& c) {
  const __m256i bits = _mm256_blend_epi32(c.word0, _mm256_slli_epi64(c.word1, 32), 0xAA);
  const __m256i mantissa = _mm256_or_si256(_mm256_srli_epi64(bits, 12), in_every_lane(0x3ff0000000000000U));
  return _mm256_sub_pd(_mm256_castsi256_pd(mantissa), _mm256_set1_pd(1.0 - 0x1p-53));
}

/// Low words of four draws.
HEADBAND_INLINE __m256i four_draws(std::uint64_t first, std::uint64_t stride) {
  const auto draw = [first, stride](std::uint64_t lane) { return static_cast<long long>(first + lane * stride); };
  return _mm256_set_epi64x(draw(3), draw(2), draw(1), draw(0));
}

/// What the first two rounds make of the words that all draws have in common: name, and upper word of the draw.
struct CommonRounds {
  __m256i word2_of_first, word0_of_second, word2_of_second, word3_of_second;

  CommonRounds(const PhiloxKey& key, std::uint64_t draw_high, std::uint64_t name) {
    const std::uint64_t low = 0xffffffffU;
    const std::uint64_t by_name = (name & low) * multiplier_1;
    const std::uint64_t word0 = (by_name >> 32) ^ draw_high ^ key.round[0][0];
    const std::uint64_t by_draw = word0 * multiplier_0;
    word2_of_first = in_every_lane((name >> 32) ^ key.round[0][1]);
    word0_of_second = in_every_lane((by_name & low) ^ key.round[1][0]);
    word2_of_second = in_every_lane((by_draw >> 32) ^ key.round[1][1]);
    word3_of_second = in_every_lane(by_draw & low);
  }

  /// The counters of four draws after two rounds, 32 bits of each 64 as everywhere.
  [[nodiscard]] HEADBAND_INLINE FourCounters after(__m256i draws) const {
    const __m256i p0 = _mm256_mul_epu32(draws, in_every_lane(multiplier_0));
    const __m256i p1 = _mm256_mul_epu32(_mm256_xor_si256(high_half(p0), word2_of_first), in_every_lane(multiplier_1));
    return {
        _mm256_xor_si256(high_half(p1), word0_of_second), p1, _mm256_xor_si256(p0, word2_of_second), word3_of_second};
  }
};

/// Rounds from `round` to the last of some chains side by side, which hides the multiplier's latency.
template <std::size_t chains>
HEADBAND_INLINE void last_rounds(const PhiloxKey& key, std::size_t round, std::array<FourCounters, chains>& c) {
#pragma GCC unroll 10
  for (; round < key.round.size(); ++round) {
#pragma GCC unroll 4
    for (std::size_t i = 0; i < chains; ++i) one_round(key, round, c[i]);
  }
}

/// Scores of blocks whose draws have their upper word in common, so many at a time: two chains a block. A function of
/// its own: g++ 12 keeps fewer words in registers where it stands in the other.
template <std::size_t blocks>
[[gnu::noinline]] void score_blocks(const PhiloxKey& key,
                                    std::uint64_t first,
                                    std::uint64_t name,
                                    std::uint64_t stride,
                                    std::span<base::Lanes<8>> scores) {
  const CommonRounds common(key, first >> 32, name);
  const __m256i next = in_every_lane(4 * stride);
  __m256i draws = four_draws(first, stride);
  for (std::size_t k = 0; k < scores.size(); k += blocks) {
    std::array<FourCounters, 2 * blocks> c;
#pragma GCC unroll 4
    for (std::size_t i = 0; i < 2 * blocks; ++i) {
      c[i] = common.after(draws);
      draws = _mm256_add_epi64(draws, next);
    }
    last_rounds(key, 2, c);
#pragma GCC unroll 2
    for (std::size_t i = 0; i < blocks; ++i) {
      scores[k + i].part[0] = four_scores(c[2 * i]);
      scores[k + i].part[1] = four_scores(c[2 * i + 1]);
    }
  }
}
#endif

}  // namespace

PhiloxWords philox(const PhiloxWords& counter, const std::array<std::uint32_t, 2>& key) {
  const r123::Philox4x32 bijection;
  const r123::Philox4x32::ctr_type c = {{counter[0], counter[1], counter[2], counter[3]}};
  const r123::Philox4x32::key_type k = {{key[0], key[1]}};
  const auto out = bijection(c, k);
  return {out[0], out[1], out[2], out[3]};
}

std::uint64_t philox_bits(std::uint64_t seed, std::uint64_t draw, std::uint64_t name) {
  const auto low = [](std::uint64_t x) { return static_cast<std::uint32_t>(x); };
  const auto high = [](std::uint64_t x) { return static_cast<std::uint32_t>(x >> 32); };
  const PhiloxWords out = philox({low(draw), high(draw), low(name), high(name)}, {low(seed), high(seed)});
  return static_cast<std::uint64_t>(out[1]) << 32 | out[0];
}

PhiloxKey::PhiloxKey(std::uint64_t seed) {
  auto k0 = static_cast<std::uint32_t>(seed), k1 = static_cast<std::uint32_t>(seed >> 32);
  for (std::size_t i = 0; i < round.size(); ++i) {
    round[i] = {k0, k1};
    k0 += increment_0;
    k1 += increment_1;
  }
  // a loop of its own: in the one above g++ 12 writes the first key in place of the second in the last two rounds
  for (std::size_t i = 0; i < round.size(); ++i)
    for (std::size_t which = 0; which < 2; ++which) in_lanes[i][which].fill(round[i][which]);
}

void philox_scores(const PhiloxKey& key,
                   std::uint64_t first,
                   std::uint64_t name,
                   std::span<base::Lanes<8>> scores,
                   std::uint64_t stride) {
#if defined(__AVX2__)
  const std::uint64_t last = first + (8 * scores.size() - 1) * stride;
  const std::uint64_t step = 8 * stride;
  if (first >> 32 == last >> 32) {
    const std::size_t even = scores.size() / 2 * 2;
    score_blocks<2>(key, first, name, stride, scores.first(even));
    if (even < scores.size()) score_blocks<1>(key, first + 8 * even * stride, name, stride, scores.subspan(even));
    return;
  }
  const __m256i name_low = in_every_lane(name & 0xffffffffU), name_high = in_every_lane(name >> 32);
  for (auto& block : scores) {
    const __m256i draws_a = four_draws(first, stride), draws_b = four_draws(first + 4 * stride, stride);
    std::array<FourCounters, 2> c{FourCounters{draws_a, high_half(draws_a), name_low, name_high},
                                  FourCounters{draws_b, high_half(draws_b), name_low, name_high}};
    last_rounds(key, 0, c);
    block.part[0] = four_scores(c[0]);
    block.part[1] = four_scores(c[1]);
    first += step;
  }
#else
  const std::uint64_t seed = key.round[0][1] << 32 | key.round[0][0];
  for (auto& block : scores) {
    for (int lane = 0; lane < 8; ++lane, first += stride)
      block.set(lane, score_of_bits(philox_bits(seed, first, name)));
  }
#endif
}

}  // namespace headband::montecarlo
