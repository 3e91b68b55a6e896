// SPDX-License-Identifier: MIT
#include "core/casefile/quantity_text.hpp"

#include <gtest/gtest.h>

#include <cmath>
#include <cstdio>
#include <variant>

namespace headband::casefile {
namespace {

using base::Dimension;
using base::Quantity;

constexpr double z95 = 1.959963984540054;

Quantity read(std::string_view section, std::string_view key, std::string_view text) {
  const ParsedQuantity parsed = parse_quantity(text, key_rule(section, key));
  EXPECT_FALSE(parsed.problem.has_value()) << text << ": " << (parsed.problem ? parsed.problem->what : "");
  return parsed.quantity;
}

TextProblem refuse(std::string_view section, std::string_view key, std::string_view text) {
  const ParsedQuantity parsed = parse_quantity(text, key_rule(section, key));
  EXPECT_TRUE(parsed.problem.has_value()) << text;
  return parsed.problem.value_or(TextProblem{});
}

TEST(QuantityText, PlainValue) {
  const Quantity q = read("pipe", "length", "2400 m");
  EXPECT_EQ(q.value, 2400.0);
  EXPECT_TRUE(q.exact());
  EXPECT_EQ(q.written, "2400 m");
  EXPECT_EQ(q.dimension, Dimension::length);
}

TEST(QuantityText, PlusMinusIsTheHalfWidthOfTheCentral95Percent) {
  for (const char* text : {"300 mm +/- 1 %", "300 mm ± 3 mm", "300 mm ± 0.3 cm", "300 mm±1%", "300 mm +- 3 mm"}) {
    const Quantity q = read("pipe", "bore", text);
    ASSERT_TRUE(std::holds_alternative<base::Normal>(q.spread)) << text;
    EXPECT_NEAR(std::get<base::Normal>(q.spread).standard_deviation, 0.003 / z95, 1e-16) << text;
  }
}

TEST(QuantityText, CoverageIsStatedInBrackets) {
  const Quantity q = read("liquid", "temperature", "12 degC ± 3 K (68 %)");
  // Half-width of the central 68 % is 0.994457883209753 standard deviations (normal quantile of 0.84).
  EXPECT_NEAR(std::get<base::Normal>(q.spread).standard_deviation, 3.0 / 0.994457883209753, 1e-12);
  EXPECT_EQ(q.value, 285.15);
  EXPECT_EQ(std::get<base::Normal>(read("pipe", "length", "100 m ± 2 m (1 sigma)").spread).standard_deviation, 2.0);
  EXPECT_EQ(std::get<base::Normal>(read("pipe", "length", "100 m ± 2 m (95 %)").spread).standard_deviation, 2.0 / z95);
}

TEST(QuantityText, FactorIsLogNormal) {
  const Quantity q = read("pipe", "roughness", "0.05 mm x/ 2");
  EXPECT_NEAR(std::get<base::LogNormal>(q.spread).log_standard_deviation, std::log(2.0) / z95, 1e-16);
  EXPECT_EQ(std::get<base::LogNormal>(read("pipe", "roughness", "0.05 mm x/2").spread).log_standard_deviation,
            std::log(2.0) / z95);
}

TEST(QuantityText, BoundsEvenAndTriangle) {
  const Quantity even = read("event", "over", "10 s between 8 s and 13 s");
  EXPECT_EQ(std::get<base::Even>(even.spread).low, 8.0);
  EXPECT_EQ(std::get<base::Even>(even.spread).high, 13.0);
  EXPECT_EQ(even.value, 10.0);
  EXPECT_EQ(std::get<base::Even>(read("event", "over", "10 s between 8 and 13 s").spread).low, 8.0);
  const Quantity wall = read("pipe", "wall", "8 mm between -10 % and 5 %");
  EXPECT_NEAR(std::get<base::Even>(wall.spread).low, 0.0072, 1e-17);
  EXPECT_NEAR(std::get<base::Even>(wall.spread).high, 0.0084, 1e-17);
  const Quantity triangle = read("event", "over", "10 s likely, between 8 s and 13 s");
  EXPECT_EQ(std::get<base::Triangle>(triangle.spread).high, 13.0);
}

TEST(QuantityText, RangeFromLackOfKnowledge) {
  const Quantity gas = read("liquid", "free_gas", "0 % .. 0.1 %, not random");
  EXPECT_EQ(std::get<base::NotRandom>(gas.spread).high, 0.001);
  EXPECT_EQ(gas.value, 0.0005);  // a single run takes the middle
  EXPECT_EQ(std::get<base::NotRandom>(read("liquid", "free_gas", "0 .. 0.1 %, not random").spread).high, 0.001);
  const Quantity exponent = read("air_vessel", "exponent", "1.0 .. 1.4, not random");
  EXPECT_EQ(std::get<base::NotRandom>(exponent.spread).low, 1.0);
}

TEST(QuantityText, SharedValue) {
  const Quantity q = read("pipe", "wall", "as upper main wall");
  EXPECT_EQ(q.same_as, "upper main wall");
  EXPECT_FALSE(q.given());
  EXPECT_FALSE(q.exact());
}

TEST(QuantityText, ScatterIsAFactor) {
  const Quantity ten = read("friction", "scatter", "± 10 %");
  EXPECT_EQ(ten.value, 1.0);
  EXPECT_NEAR(std::get<base::Normal>(ten.spread).standard_deviation, 0.1 / z95, 1e-16);
  EXPECT_NEAR(std::get<base::LogNormal>(read("friction", "scatter", "x/ 1.1").spread).log_standard_deviation,
              std::log(1.1) / z95,
              1e-16);
  const Quantity limits = read("friction", "scatter", "between -10 % and 10 %");
  EXPECT_EQ(std::get<base::Even>(limits.spread).low, 0.9);
  EXPECT_EQ(std::get<base::Even>(limits.spread).high, 1.1);
  EXPECT_EQ(std::get<base::Even>(read("friction", "scatter", "between 0.9 and 1.1").spread).low, 0.9);
  EXPECT_TRUE(read("friction", "scatter", "none").exact());
  EXPECT_EQ(parse_number(1.0345, "1.0345", key_rule("valve", "near_seat")).quantity.value, 1.0345);
}

TEST(QuantityText, PressuresCarryTheirReference) {
  const Quantity gauge = read("relief", "set_pressure", "200 psi g ± 3 %");
  EXPECT_TRUE(gauge.gauge);
  EXPECT_NEAR(gauge.value, 200 * 6894.757293168361, 1e-6);
  EXPECT_FALSE(read("liquid", "vapour_pressure", "6 psi abs").gauge);
  EXPECT_EQ(read("test", "pressure", "6.41 bar g ± 0.04 bar").value, 641000.0);
  EXPECT_NE(refuse("pipe", "rating", "16 bar").hint.find("vacuum"), std::string::npos);
}

TEST(QuantityText, ViscosityByItsUnit) {
  EXPECT_EQ(read("liquid", "viscosity", "3.6 cSt").dimension, Dimension::kinematic_viscosity);
  EXPECT_EQ(read("liquid", "viscosity", "3.1 cP ± 10 %").dimension, Dimension::dynamic_viscosity);
}

TEST(QuantityText, TailsAreCutAtPhysicalLimits) {
  const Quantity near = read("pipe", "roughness", "0.1 mm ± 0.15 mm");
  EXPECT_EQ(near.cut.low, 0.0);
  EXPECT_FALSE(read("pipe", "wall", "8 mm ± 1 %").cut.active());  // 0 lies 196 standard deviations away
  EXPECT_EQ(read("valve", "opening", "98 % ± 5 %").cut.high, 1.0);
}

TEST(QuantityText, ColumnsCountCodePoints) {
  EXPECT_EQ(refuse("pipe", "wall", "8 mm ± 3 s").column, 7);
  EXPECT_EQ(refuse("pipe", "wall", "8 furlongs").column, 2);
  EXPECT_EQ(refuse("pipe", "wall", "8 mm ± 1 % (200 %)").column, 12);
}

TEST(QuantityText, SiSpellingsKeepTheirBits) {
  for (const double x : {0.1, 1.0 / 3.0, 123456.789e-7, 3.3333333333333335}) {
    char text[64];
    std::snprintf(text, sizeof text, "%.17g m", x);
    EXPECT_EQ(read("pipe", "length", text).value, x);
  }
  EXPECT_EQ(read("valve", "kv", "3.3333333333333335 m3/s").value, 3.3333333333333335);
}

TEST(QuantityText, NothingOddIsAccepted) {
  for (const char* text : {"",
                           " ",
                           "m",
                           "8",
                           "8 mm 9 mm",
                           "8 mm ±",
                           "8 mm ± %",
                           "8 mm x/",
                           "8 mm between",
                           "8 mm .. 9 mm",
                           "inf mm",
                           "nan mm",
                           "1e999 mm",
                           "0x10 mm",
                           "8,5 mm",
                           "8 mm ± -1 mm",
                           "8 mm (95 %)",
                           "as",
                           "8 mm ± 1 % (0 %)",
                           "8mm3",
                           "8 mm, not random",
                           "8 mm likely",
                           "8 mm likely, between 1 mm and",
                           "8 mm between 9 mm and 7 mm",
                           "-8 mm",
                           "8 mm ± 1 %%"})
    EXPECT_TRUE(parse_quantity(text, key_rule("pipe", "wall")).problem.has_value()) << text;
}

}  // namespace
}  // namespace headband::casefile
