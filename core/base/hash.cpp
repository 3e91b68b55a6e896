// SPDX-License-Identifier: MIT
#include "core/base/hash.hpp"

#include <bit>
#include <cstddef>

namespace headband::base {

namespace {

using Words = std::array<std::uint32_t, 8>;

constexpr bool is_prime(std::uint32_t n) {
  for (std::uint32_t d = 2; d * d <= n; ++d)
    if (n % d == 0) return false;
  return n >= 2;
}

__extension__ typedef unsigned __int128 Wide;

/// First 32 bits of the fraction of the square root (power 2) or cube root (power 3) of n < 2^9: FIPS 180-4,
/// 4.2.2 and 5.3.3. The root is built bit by bit in 32-bit fixed point, exactly.
constexpr std::uint32_t root_fraction(std::uint32_t n, int power) {
  std::uint64_t root = 0;
  for (int bit = 37; bit >= 0; --bit) {
    const std::uint64_t trial = root | (std::uint64_t{1} << bit);
    const Wide square = static_cast<Wide>(trial) * trial;
    // (trial / 2^32)^power <= n, written without loss
    const bool fits = power == 2 ? square <= static_cast<Wide>(n) << 64 : square * trial <= static_cast<Wide>(n) << 96;
    if (fits) root = trial;
  }
  return static_cast<std::uint32_t>(root);
}

template <std::size_t N>
constexpr std::array<std::uint32_t, N> root_fractions(int power) {
  std::array<std::uint32_t, N> r{};
  std::uint32_t n = 2;
  for (auto& word : r) {
    while (!is_prime(n)) ++n;
    word = root_fraction(n++, power);
  }
  return r;
}

constexpr Words first_state = root_fractions<8>(2);
constexpr std::array<std::uint32_t, 64> round_constant = root_fractions<64>(3);

void mix(Words& state, const std::uint8_t* block) {
  std::array<std::uint32_t, 64> w{};
  for (std::size_t i = 0; i < 16; ++i) {
    w[i] = static_cast<std::uint32_t>(block[4 * i]) << 24 | static_cast<std::uint32_t>(block[4 * i + 1]) << 16 |
           static_cast<std::uint32_t>(block[4 * i + 2]) << 8 | static_cast<std::uint32_t>(block[4 * i + 3]);
  }
  for (std::size_t i = 16; i < 64; ++i) {
    const std::uint32_t s0 = std::rotr(w[i - 15], 7) ^ std::rotr(w[i - 15], 18) ^ (w[i - 15] >> 3);
    const std::uint32_t s1 = std::rotr(w[i - 2], 17) ^ std::rotr(w[i - 2], 19) ^ (w[i - 2] >> 10);
    w[i] = w[i - 16] + s0 + w[i - 7] + s1;
  }
  auto [a, b, c, d, e, f, g, h] = state;
  for (std::size_t i = 0; i < 64; ++i) {
    const std::uint32_t s1 = std::rotr(e, 6) ^ std::rotr(e, 11) ^ std::rotr(e, 25);
    const std::uint32_t choice = (e & f) ^ (~e & g);
    const std::uint32_t t1 = h + s1 + choice + round_constant[i] + w[i];
    const std::uint32_t s0 = std::rotr(a, 2) ^ std::rotr(a, 13) ^ std::rotr(a, 22);
    const std::uint32_t majority = (a & b) ^ (a & c) ^ (b & c);
    h = g;
    g = f;
    f = e;
    e = d + t1;
    d = c;
    c = b;
    b = a;
    a = t1 + s0 + majority;
  }
  const Words change{a, b, c, d, e, f, g, h};
  for (std::size_t i = 0; i < state.size(); ++i) state[i] += change[i];
}

}  // namespace

Digest sha256(std::string_view bytes) {
  std::string padded(bytes);
  padded += static_cast<char>(0x80);
  while (padded.size() % 64 != 56) padded += '\0';
  const std::uint64_t bits = static_cast<std::uint64_t>(bytes.size()) * 8;
  for (int shift = 56; shift >= 0; shift -= 8) padded += static_cast<char>(static_cast<std::uint8_t>(bits >> shift));

  Words state = first_state;
  for (std::size_t at = 0; at < padded.size(); at += 64) {
    std::array<std::uint8_t, 64> block{};
    for (std::size_t i = 0; i < 64; ++i) block[i] = static_cast<std::uint8_t>(padded[at + i]);
    mix(state, block.data());
  }
  Digest digest{};
  for (std::size_t i = 0; i < digest.size(); ++i) {
    digest[i] = static_cast<std::uint8_t>(state[i / 4] >> (24 - 8 * (i % 4)));
  }
  return digest;
}

std::string sha256_hex(std::string_view bytes) {
  constexpr std::string_view digits = "0123456789abcdef";
  std::string text;
  for (const std::uint8_t byte : sha256(bytes)) {
    text += digits[byte >> 4];
    text += digits[byte & 15];
  }
  return text;
}

std::uint64_t name_number(std::string_view bytes) {
  const Digest digest = sha256(bytes);
  std::uint64_t number = 0;
  for (std::size_t i = 0; i < 8; ++i) number = number << 8 | digest[i];
  return number;
}

}  // namespace headband::base
