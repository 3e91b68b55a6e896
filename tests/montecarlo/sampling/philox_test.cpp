// SPDX-License-Identifier: MIT
#include "montecarlo/sampling/philox.hpp"

#include "tests/core/base/csv.hpp"

#include <gtest/gtest.h>

#include <array>
#include <cmath>
#include <cstdint>
#include <span>
#include <string>

namespace headband::montecarlo {
namespace {

std::uint32_t word(const std::string& hex) { return static_cast<std::uint32_t>(std::stoul(hex, nullptr, 16)); }

TEST(Philox, MatchesKnownAnswers) {
  int checked = 0;
  for (const auto& row : test::reference_rows("uq_philox4x32_vectors.csv")) {
    ASSERT_EQ(row[0], "10");
    const PhiloxWords out =
        philox({word(row[1]), word(row[2]), word(row[3]), word(row[4])}, {word(row[5]), word(row[6])});
    for (std::size_t i = 0; i < 4; ++i) EXPECT_EQ(out[i], word(row[7 + i])) << row[11];
    // the same answer through (seed, draw, name)
    const auto join = [&](std::size_t low) {
      return static_cast<std::uint64_t>(word(row[low + 1])) << 32 | word(row[low]);
    };
    EXPECT_EQ(philox_bits(join(5), join(1), join(3)), join(7));
    ++checked;
  }
  EXPECT_EQ(checked, 13);
}

/// Blocks of eight, many in one go: within one upper word of the draw's number, across two, and over the end.
TEST(Philox, BlocksAreTheBitsOfSingleDraws) {
  std::array<base::Lanes<8>, 5> blocks;
  for (const std::uint64_t seed : {0ULL, 20ULL, 0xfedcba9876543210ULL}) {
    const PhiloxKey key(seed);
    for (const std::uint64_t first :
         {0ULL, 8ULL, 0xfffffff8ULL, 0xfffffffcULL, 0x123456789abcdef0ULL, 0xfffffffffffffff0ULL}) {
      for (const std::uint64_t name : {0ULL, 1ULL, 0xba7816bf8f01cfeaULL}) {
        for (const std::uint64_t stride : {1ULL, 10ULL, 0x30000001ULL}) {  // the last carries into the upper word
          for (const std::size_t many : {1U, 5U}) {
            philox_scores(key, first, name, std::span(blocks).first(many), stride);
            for (std::size_t i = 0; i < 8 * many; ++i) {
              EXPECT_EQ(blocks[i / 8][static_cast<int>(i % 8)],
                        score_of_bits(philox_bits(seed, first + stride * i, name)))
                  << first << " " << stride << " " << i;
            }
          }
        }
      }
    }
  }
}

TEST(Philox, ScoresStayInside) {
  EXPECT_EQ(score_of_bits(0), 0x1p-53);
  EXPECT_EQ(score_of_bits(~std::uint64_t{0}), 1.0 - 0x1p-53);
  double sum = 0.0, squares = 0.0;
  const int n = 100000;
  for (int i = 0; i < n; ++i) {
    const double u = score_of_bits(philox_bits(7, static_cast<std::uint64_t>(i), 99));
    sum += u;
    squares += u * u;
  }
  // false-alarm rate under 1e-4: four standard errors
  EXPECT_NEAR(sum / n, 0.5, 4.0 / std::sqrt(12.0 * n));
  EXPECT_NEAR(squares / n, 1.0 / 3.0, 4.0 * std::sqrt(4.0 / 45.0 / n));
}

}  // namespace
}  // namespace headband::montecarlo
