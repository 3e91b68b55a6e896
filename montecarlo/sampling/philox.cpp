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

HEADBAND_INLINE void one_round(__m256i k0, __m256i k1, FourCounters& c) {
  const __m256i m0 = _mm256_set1_epi64x(static_cast<long long>(multiplier_0));
  const __m256i m1 = _mm256_set1_epi64x(static_cast<long long>(multiplier_1));
  const __m256i p0 = _mm256_mul_epu32(c.word0, m0);
  const __m256i p1 = _mm256_mul_epu32(c.word2, m1);
  c.word0 = _mm256_xor_si256(_mm256_srli_epi64(p1, 32), _mm256_xor_si256(c.word1, k0));
  c.word2 = _mm256_xor_si256(_mm256_srli_epi64(p0, 32), _mm256_xor_si256(c.word3, k1));
  c.word1 = p1;
  c.word3 = p0;
}

/// Scores from the first two words: top 52 bits of out1 2^32 + out0, laid into the mantissa of 2^52.
HEADBAND_INLINE base::Quad four_scores(const FourCounters& c) {
  const __m256i bits = _mm256_blend_epi32(c.word0, _mm256_slli_epi64(c.word1, 32), 0xAA);
  const __m256i mantissa = _mm256_or_si256(_mm256_srli_epi64(bits, 12), _mm256_set1_epi64x(0x4330000000000000LL));
  const __m256d number = _mm256_sub_pd(_mm256_castsi256_pd(mantissa), _mm256_set1_pd(0x1p52));
  return _mm256_mul_pd(_mm256_add_pd(number, _mm256_set1_pd(0.5)), _mm256_set1_pd(0x1p-52));
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
  for (auto& k : round) {
    k = {k0, k1};
    k0 += increment_0;
    k1 += increment_1;
  }
}

void philox_scores(
    const PhiloxKey& key, std::uint64_t first, std::uint64_t name, base::Lanes<8>& scores, std::uint64_t stride) {
#if defined(__AVX2__)
  const auto draw = [first, stride](std::uint64_t lane) { return static_cast<long long>(first + lane * stride); };
  const __m256i name_low = _mm256_set1_epi64x(static_cast<long long>(name & 0xffffffffU));
  const __m256i name_high = _mm256_set1_epi64x(static_cast<long long>(name >> 32));
  const __m256i draws_a = _mm256_set_epi64x(draw(3), draw(2), draw(1), draw(0));
  const __m256i draws_b = _mm256_set_epi64x(draw(7), draw(6), draw(5), draw(4));
  FourCounters a{draws_a, _mm256_srli_epi64(draws_a, 32), name_low, name_high};
  FourCounters b{draws_b, _mm256_srli_epi64(draws_b, 32), name_low, name_high};
  for (const auto& k : key.round) {  // two chains side by side hide the multiplier's latency
    const __m256i k0 = _mm256_set1_epi64x(static_cast<long long>(k[0]));
    const __m256i k1 = _mm256_set1_epi64x(static_cast<long long>(k[1]));
    one_round(k0, k1, a);
    one_round(k0, k1, b);
  }
  scores.part[0] = four_scores(a);
  scores.part[1] = four_scores(b);
#else
  const std::uint64_t seed = key.round[0][1] << 32 | key.round[0][0];
  for (int lane = 0; lane < 8; ++lane) {
    scores.set(lane, score_of_bits(philox_bits(seed, first + static_cast<std::uint64_t>(lane) * stride, name)));
  }
#endif
}

}  // namespace headband::montecarlo
