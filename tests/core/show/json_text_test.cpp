// SPDX-License-Identifier: MIT
#include "core/show/json_text.hpp"

#include <gtest/gtest.h>
#include <nlohmann/json.hpp>

#include <bit>
#include <charconv>
#include <cstdint>
#include <limits>

namespace headband::show {
namespace {

TEST(JsonText, NumbersHaveTheFewestDigitsThatReadBack) {
  EXPECT_EQ(shortest(0.1), "0.1");
  EXPECT_EQ(shortest(1157.9), "1157.9");
  EXPECT_EQ(shortest(-0.0), "0");
  EXPECT_EQ(shortest(5e-324), "5e-324");
  EXPECT_EQ(shortest(std::numeric_limits<double>::quiet_NaN()), "null");
  EXPECT_EQ(shortest(-std::numeric_limits<double>::infinity()), "null");
}

TEST(JsonText, EveryBitPatternReadsBack) {
  std::uint64_t bits = 1;
  for (int i = 0; i < 20000; ++i) {
    bits = bits * 6364136223846793005ULL + 1442695040888963407ULL;
    const auto value = std::bit_cast<double>(bits);
    const std::string text = shortest(value);
    if (text == "null") continue;
    double back = 0.0;
    std::from_chars(text.data(), text.data() + text.size(), back);
    ASSERT_EQ(back, value) << text;
    ASSERT_EQ(nlohmann::json::parse(text).get<double>(), value) << text;
  }
}

TEST(JsonText, KeysAreDecimalsWithoutExponent) {
  EXPECT_EQ(shortest_decimal(0.025), "0.025");
  EXPECT_EQ(shortest_decimal(0.5), "0.5");
  EXPECT_EQ(shortest_decimal(0.00001), "0.00001");
  EXPECT_EQ(shortest_decimal(1.0 - 0.025), "0.975");
}

TEST(JsonText, LaysOutObjectsAndPlainArrays) {
  const nlohmann::ordered_json value = {{"b", {1, 2.5, "x"}},
                                        {"a", nlohmann::ordered_json::object()},
                                        {"c", {{{"d", nullptr}}}},
                                        {"e", nlohmann::ordered_json::array()}};
  EXPECT_EQ(json_text(value),
            "{\n  \"b\": [1, 2.5, \"x\"],\n  \"a\": {},\n  \"c\": [\n    {\n      \"d\": null\n    }\n"
            "  ],\n  \"e\": []\n}\n");
}

}  // namespace
}  // namespace headband::show
