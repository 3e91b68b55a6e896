// SPDX-License-Identifier: MIT
#include "core/liquid/words.hpp"

#include <gtest/gtest.h>

#include <cmath>
#include <set>

namespace {

using namespace headband;

TEST(liquid_sheet, every_known_name_gives_seven_rows_with_source_and_spread) {
  for (const auto name : liquid::known_names()) {
    const auto s = liquid::sheet(name, 293.15, 0.1e6);
    ASSERT_TRUE(s) << name;
    ASSERT_EQ(s->rows.size(), 7U) << name;
    std::set<std::string_view> keys;
    for (const auto& r : s->rows) {
      EXPECT_TRUE(std::isnan(r.value) || r.value > 0.0) << name << ' ' << r.words;
      EXPECT_FALSE(r.source.empty()) << name << ' ' << r.words;
      EXPECT_GT(r.spread_95, 0.0);
      EXPECT_TRUE(r.spread.starts_with("± "));
      keys.insert(r.key);
    }
    EXPECT_EQ(keys.size(), 7U);
  }
}

TEST(liquid_sheet, water_rows_are_the_properties_of_water) {
  const auto s = liquid::sheet("Water", 293.15, 0.1e6);
  ASSERT_TRUE(s);
  const auto w = liquid::water(293.15, 0.1e6);
  EXPECT_EQ(s->rows[0].value, w.density);
  EXPECT_EQ(s->rows[1].value, w.dynamic_viscosity / w.density);
  EXPECT_EQ(s->rows[5].value, w.speed_of_sound);
  EXPECT_EQ(s->rows[6].value, w.vapour_pressure);
  EXPECT_TRUE(s->remarks.empty());
  EXPECT_NE(s->rows[0].source.find("SR6-08"), std::string::npos);
  EXPECT_NE(liquid::sheet("water", 293.15, 5e6)->rows[0].source.find("IAPWS-95"), std::string::npos);
}

TEST(liquid_sheet, remarks_name_what_is_out_of_range) {
  EXPECT_EQ(liquid::sheet("water", 400.0, 1e6)->remarks.size(), 1U);
  EXPECT_EQ(liquid::sheet("water", 293.15, 60e6)->remarks.size(), 1U);
  EXPECT_NE(liquid::sheet("water", 372.0, 0.06e6)->remarks.at(0).find("vapour pressure"), std::string::npos);
  EXPECT_EQ(liquid::sheet("seawater", 330.0, 0.1e6)->remarks.size(), 1U);
  EXPECT_FALSE(liquid::sheet("treacle", 293.15, 0.1e6));
}

// Guidance only, but plausible: oils lighter than water, modulus from sound speed, viscosity exact at its two points.
TEST(liquid_sheet, trade_liquids_are_plausible) {
  for (const auto& c : liquid::common_liquids()) {
    EXPECT_GT(c.viscosity_20, c.viscosity_50) << c.name;
    const auto s = liquid::sheet(c.name, 293.15, 0.1e6);
    ASSERT_TRUE(s);
    EXPECT_NEAR(s->properties.dynamic_viscosity / s->properties.density / c.viscosity_20, 1.0, 1e-12) << c.name;
    EXPECT_GT(s->properties.speed_of_sound, 1000.0) << c.name;
    EXPECT_LT(s->properties.speed_of_sound, 1700.0) << c.name;
    EXPECT_FALSE(s->remarks.empty()) << "said to be guidance";
  }
}

}  // namespace
