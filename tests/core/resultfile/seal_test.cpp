// SPDX-License-Identifier: MIT
#include "core/resultfile/seal.hpp"

#include "tests/support/scratch_folder.hpp"

#include <gtest/gtest.h>

#include <fstream>
#include <span>
#include <string>

namespace headband::resultfile {
namespace {

/// Seal found on a file of these bytes.
Seal seal_of(const std::string& bytes) {
  const support::ScratchFolder folder;
  std::ofstream(folder / "file", std::ios::binary) << bytes;
  return check_seal(folder / "file");
}

std::string sealed(const std::string& bytes) { return bytes + seal_line(std::as_bytes(std::span(bytes))); }

TEST(Seal, HoldsOverTheBytesBeforeIt) {
  EXPECT_EQ(seal_of(sealed("some bytes")), Seal::holds);
  EXPECT_EQ(seal_of(sealed("")), Seal::holds);
  // The digest of no bytes is published: FIPS 180-4, example values of NIST.
  EXPECT_EQ(sealed(""), "\nheadband seal sha256 e3b0c44298fc1c149afbf4c8996fb92427ae41e4649b934ca495991b7852b855\n");
}

TEST(Seal, BreaksWithAnyByteBeforeItOrInIt) {
  const std::string whole = sealed("some bytes");
  for (std::size_t i = 0; i < whole.size(); ++i) {
    std::string spoiled = whole;
    spoiled[i] = static_cast<char>(spoiled[i] ^ 1);
    EXPECT_NE(seal_of(spoiled), Seal::holds) << i;
    if (i < 10) {
      EXPECT_EQ(seal_of(spoiled), Seal::broken) << i;
    }
  }
}

TEST(Seal, IsNotThereOnOtherFiles) {
  EXPECT_EQ(seal_of("other"), Seal::none);
  EXPECT_EQ(seal_of(std::string(500, 'x')), Seal::none);
  EXPECT_EQ(seal_of(sealed("some bytes") + "x"), Seal::none);
  EXPECT_EQ(check_seal("/no/such/file"), Seal::none);
}

}  // namespace
}  // namespace headband::resultfile
