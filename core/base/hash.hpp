#pragma once
// SPDX-License-Identifier: MIT

#include <array>
#include <cstdint>
#include <string>
#include <string_view>

namespace headband::base {

/// SHA-256 of some bytes (FIPS 180-4).
using Digest = std::array<std::uint8_t, 32>;
[[nodiscard]] Digest sha256(std::string_view bytes);

/// The same as 64 lower-case hexadecimal digits.
[[nodiscard]] std::string sha256_hex(std::string_view bytes);

/// First 64 bits of the SHA-256 of `bytes`, most significant byte first: the number that stands for a name.
[[nodiscard]] std::uint64_t name_number(std::string_view bytes);

}  // namespace headband::base
