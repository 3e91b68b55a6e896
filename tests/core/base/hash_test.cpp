// SPDX-License-Identifier: MIT
#include "core/base/hash.hpp"

#include <gtest/gtest.h>

#include <string>

namespace headband::base {
namespace {

// Examples of FIPS 180-2, appendix B, and the well-known digest of no bytes.
TEST(Hash, MatchesPublishedExamples) {
  EXPECT_EQ(sha256_hex(""), "e3b0c44298fc1c149afbf4c8996fb92427ae41e4649b934ca495991b7852b855");
  EXPECT_EQ(sha256_hex("abc"), "ba7816bf8f01cfea414140de5dae2223b00361a396177a9cb410ff61f20015ad");
  EXPECT_EQ(sha256_hex("abcdbcdecdefdefgefghfghighijhijkijkljklmklmnlmnomnopnopq"),
            "248d6a61d20638b8e5c026930c3e6039a33ce45964ff2167f6ecedd419db06c1");
  EXPECT_EQ(sha256_hex(std::string(1000000, 'a')), "cdc76e5c9914fb9281a1c7e284d73e67f1809a48a497200e046d39ccc7112cd0");
}

TEST(Hash, NameNumberIsTheFirstEightBytes) { EXPECT_EQ(name_number("abc"), 0xba7816bf8f01cfeaULL); }

TEST(Hash, EveryLengthAroundABlockDiffers) {
  std::string before = sha256_hex(std::string(50, 'x'));
  for (std::size_t n = 51; n < 140; ++n) {
    const std::string now = sha256_hex(std::string(n, 'x'));
    EXPECT_NE(now, before);
    before = now;
  }
}

}  // namespace
}  // namespace headband::base
