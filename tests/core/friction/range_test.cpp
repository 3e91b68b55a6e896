// SPDX-License-Identifier: MIT
#include "core/friction/range.hpp"

#include <gtest/gtest.h>

namespace {

using namespace headband;
using friction::FlowState;
using friction::FrictionLaw;

const FlowState water_main{
    .reynolds = 5e5, .relative_roughness = 2e-4, .bore = 0.4, .velocity = 1.4, .kinematic_viscosity = 1.1e-6};

TEST(range_remarks, a_water_main_is_inside_every_range) {
  for (int law = 0; law <= static_cast<int>(FrictionLaw::none); ++law)
    EXPECT_TRUE(friction::range_remarks(static_cast<FrictionLaw>(law), water_main).empty()) << law;
}

TEST(range_remarks, hazen_williams_is_warned_for_oil_small_pipes_slow_and_fast_flow) {
  FlowState s = water_main;
  s.kinematic_viscosity = 30e-6;
  s.reynolds = 2e4;
  s.velocity = 4.0;
  s.bore = 0.025;
  const auto remarks = friction::range_remarks(FrictionLaw::hazen_williams, s);
  ASSERT_EQ(remarks.size(), 4U);
  EXPECT_NE(remarks[0].find("30 mm2/s"), std::string::npos);
  EXPECT_NE(remarks[1].find("Reynolds"), std::string::npos);
  s.velocity = 0.0;
  EXPECT_TRUE(friction::range_remarks(FrictionLaw::hazen_williams, s).empty()) << "nothing flows";
}

TEST(range_remarks, swamee_jain_has_the_range_of_its_paper) {
  FlowState s = water_main;
  s.relative_roughness = 0.03;
  EXPECT_EQ(friction::range_remarks(FrictionLaw::swamee_jain, s).size(), 1U);
  s.reynolds = 3e8;
  EXPECT_EQ(friction::range_remarks(FrictionLaw::swamee_jain, s).size(), 2U);
  EXPECT_TRUE(friction::range_remarks(FrictionLaw::colebrook_white, s).empty());
}

TEST(range_remarks, names_are_those_of_a_case_file) {
  EXPECT_STREQ(friction::name_of(FrictionLaw::colebrook_white), "colebrook-white");
  EXPECT_STREQ(friction::name_of(FrictionLaw::hazen_williams), "hazen-williams");
  EXPECT_STREQ(friction::name_of(FrictionLaw::none), "none");
}

}  // namespace
