// SPDX-License-Identifier: MIT
#include "core/base/version.hpp"

#include <gtest/gtest.h>

#include <regex>

namespace headband::base {
namespace {

TEST(Version, SaysEverythingWithoutPaths) {
  EXPECT_TRUE(std::regex_match(version(), std::regex(R"(\d+\.\d+\.\d+)")));
  EXPECT_TRUE(std::regex_match(commit(), std::regex(R"(unknown|[0-9a-f]{7,40}(\+changes)?)"))) << commit();
  EXPECT_NE(flags().find("-ffp-contract=off"), std::string::npos);
  EXPECT_FALSE(build_kind().empty());
  for (const auto& text : {version(), commit(), build_kind(), compiler(), flags(), libraries()}) {
    EXPECT_EQ(text.find('/'), std::string::npos) << text;
    EXPECT_FALSE(text.empty());
  }
}

}  // namespace
}  // namespace headband::base
