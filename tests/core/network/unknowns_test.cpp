// SPDX-License-Identifier: MIT

#include "core/network/case.hpp"
#include "core/network/nearest_word.hpp"
#include "core/network/values.hpp"
#include "tests/support/case_builder.hpp"

#include <gtest/gtest.h>

namespace headband {
namespace {

using test::CaseBuilder;
using test::Dimension;

CaseBuilder two_pipes() {
  CaseBuilder build;
  build.basin("tank", 50.0);
  build.pipe("upper", "tank", "mid", 500.0, 0.3);
  build.pipe("lower", "mid", "end", 700.0, 0.3);
  build.draw_off("outlet", "end", 0.05);
  return build;
}

TEST(Unknowns, AreNumberedInFileOrder) {
  CaseBuilder build = two_pipes();
  build.c.pipes[0].roughness = test::lognormal(1e-4, 2.0, Dimension::length);
  build.c.pipes[1].roughness = test::lognormal(1e-4, 2.0, Dimension::length);
  build.c.pipes[0].roughness.place = {90, 3};
  build.c.pipes[1].roughness.place = {12, 3};
  const auto c = build.finish();
  ASSERT_EQ(c.unknowns.size(), 2u);
  EXPECT_EQ(c.unknowns[0].name, "lower roughness");
  EXPECT_EQ(c.unknowns[1].name, "upper roughness");
  EXPECT_EQ(c.pipes[1].roughness.unknown, 0);
  EXPECT_EQ(c.pipes[0].roughness.unknown, 1);
  EXPECT_EQ(c.pipes[0].length.unknown, -1);
}

TEST(Unknowns, ColumnsDecideWithinALine) {
  CaseBuilder build = two_pipes();
  build.c.pipes[0].length = test::normal(500.0, 5.0, Dimension::length);
  build.c.pipes[0].length.place = {7, 40};
  build.c.pipes[0].bore = test::normal(0.3, 0.003, Dimension::length);
  build.c.pipes[0].bore.place = {7, 9};
  const auto c = build.finish();
  EXPECT_EQ(c.pipes[0].bore.unknown, 0);
  EXPECT_EQ(c.pipes[0].length.unknown, 1);
}

TEST(Unknowns, AsChainsShareOneDrawAndTheWholeNumber) {
  CaseBuilder build = two_pipes();
  build.pipe("last", "end", "far", 10.0, 0.3).roughness = test::same_as("lower roughness", Dimension::length);
  build.c.pipes[0].roughness = test::lognormal(2e-4, 3.0, Dimension::length);
  build.c.pipes[1].roughness = test::same_as("upper roughness", Dimension::length);
  const auto c = build.finish();
  ASSERT_EQ(c.unknowns.size(), 1u);
  for (const auto& pipe : c.pipes) {
    EXPECT_EQ(pipe.roughness.unknown, 0);
    EXPECT_EQ(pipe.roughness.value, 2e-4);
    EXPECT_TRUE(std::holds_alternative<base::LogNormal>(pipe.roughness.spread));
  }
  EXPECT_EQ(c.pipes[2].roughness.name, "last roughness");
}

TEST(Unknowns, AsAnExactValueIsThatValueAndNoUnknown) {
  CaseBuilder build = two_pipes();
  build.c.pipes[1].roughness = test::same_as("upper roughness", Dimension::length);
  const auto c = build.finish();
  EXPECT_TRUE(c.unknowns.empty());
  EXPECT_EQ(c.pipes[1].roughness.value, 1e-4);
}

TEST(Unknowns, RingsAreRefused) {
  CaseBuilder build = two_pipes();
  build.c.pipes[0].roughness = test::same_as("lower roughness", Dimension::length);
  build.c.pipes[1].roughness = test::same_as("upper roughness", Dimension::length);
  try {
    (void)build.finish();
    FAIL() << "the ring went unnoticed";
  } catch (const base::InputError& error) {
    EXPECT_NE(error.problems().front().what.find("ring"), std::string::npos);
  }
}

TEST(Unknowns, UnknownTargetIsRefusedWithTheNearestName) {
  CaseBuilder build = two_pipes();
  build.c.pipes[1].roughness = test::same_as("uper roughness", Dimension::length);
  try {
    (void)build.finish();
    FAIL();
  } catch (const base::InputError& error) {
    EXPECT_NE(error.problems().front().bound.find("upper roughness"), std::string::npos);
  }
}

TEST(Unknowns, OtherKindOfValueIsRefused) {
  CaseBuilder build = two_pipes();
  build.c.pipes[1].roughness = test::same_as("liquid density", Dimension::length);
  EXPECT_THROW((void)build.finish(), base::InputError);
}

TEST(Unknowns, TwoOfOneNameAreRefused) {
  CaseBuilder build = two_pipes();
  CaseBuilder::fitting(build.c.pipes[0], "bend", 0.3).k = test::normal(0.3, 0.1);
  CaseBuilder::fitting(build.c.pipes[0], "bend", 0.5).k = test::normal(0.5, 0.1);
  EXPECT_THROW((void)build.finish(), base::InputError);
}

TEST(Unknowns, WeightedChoicesAreUnknownsToo) {
  CaseBuilder build = two_pipes();
  build.c.friction.law.options = {{network::FrictionLaw::colebrook_white, 0.5}, {network::FrictionLaw::haaland, 0.5}};
  const auto c = build.finish();
  ASSERT_EQ(c.unknowns.size(), 1u);
  EXPECT_EQ(c.unknowns[0].name, "friction law");
  EXPECT_EQ(c.friction.law.unknown, 0);
  EXPECT_EQ(c.friction.transition.unknown, -1);
}

TEST(Unknowns, NotRandomRangesAreMarked) {
  CaseBuilder build = two_pipes();
  build.c.liquid.free_gas = test::not_random(0.0, 1e-3, Dimension::share);
  const auto c = build.finish();
  ASSERT_EQ(c.unknowns.size(), 1u);
  EXPECT_FALSE(c.unknowns[0].random);
}

TEST(NearestWord, FindsATypoAndNothingFarAway) {
  EXPECT_EQ(network::nearest_word("vlave chamber", {"upper tank", "valve chamber"}), "valve chamber");
  EXPECT_EQ(network::nearest_word("xyz", {"upper tank", "valve chamber"}), "");
}

// "2 bar g" shared is 2 bar g, not 2 bar absolute.
TEST(Unknowns, ASharedPressureKeepsItsReference) {
  CaseBuilder build;
  build.basin("a", 10.0).surface_pressure = test::normal(2e5, 1e4, Dimension::pressure);
  build.c.basins[0].surface_pressure.gauge = true;
  build.basin("b", 10.0).surface_pressure = test::same_as("a surface_pressure", Dimension::pressure);
  build.pipe("main", "a", "b", 900.0, 0.3);
  const auto c = build.finish();
  EXPECT_TRUE(c.basins[1].surface_pressure.gauge);
  const auto plan = network::make_plan(c);
  const auto values = network::realise(c, plan);
  EXPECT_EQ(values.places[static_cast<std::size_t>(plan.place_named("a"))].held_head[0],
            values.places[static_cast<std::size_t>(plan.place_named("b"))].held_head[0]);
}

}  // namespace
}  // namespace headband
