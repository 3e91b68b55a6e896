// SPDX-License-Identifier: MIT
#include "montecarlo/program/central.hpp"

#include "core/casefile/read.hpp"

#include <gtest/gtest.h>

#include <algorithm>

namespace headband::program {
namespace {

std::vector<std::string> remarks_of(const std::string& liquid, const std::string& loss) {
  const std::string text = liquid + R"(
[[basin]]
name = "tank"
level = "60 m"
[[pipe]]
name = "main"
from = "tank"
to = "end"
length = "900 m"
bore = "300 mm"
)" + loss + R"(
[[draw_off]]
name = "off-take"
at = "end"
flow = "60 L/s"
[friction]
scatter = "none"
)";
  const auto reading = casefile::read_text("case.toml", text, ".");
  EXPECT_TRUE(reading.problems.empty()) << casefile::problems_text("case.toml", text, reading.problems);
  return remarks(reading.value, central_run(reading.value));
}

bool one_says(const std::vector<std::string>& remarks, const std::string& words) {
  return std::ranges::any_of(remarks, [&](const std::string& r) { return r.find(words) != std::string::npos; });
}

const std::string water = "[liquid]\nname = \"water\"\ntemperature = \"20 degC\"\n";
const std::string oil =
    "[liquid]\nname = \"oil\"\ndensity = \"900 kg/m3\"\nviscosity = \"60 cSt\"\nbulk_modulus = \"1.5 GPa\"\n";

TEST(Remarks, HazenWilliamsForWaterInItsRangeSaysNothing) {
  EXPECT_TRUE(remarks_of(water, "hazen_williams = 130").empty());
  EXPECT_TRUE(remarks_of(water, "roughness = \"0.1 mm\"").empty());
}

TEST(Remarks, HazenWilliamsForOilIsToldWithThePipe) {
  const auto told = remarks_of(oil, "hazen_williams = 130");
  EXPECT_TRUE(one_says(told, "pipe 'main'"));
  EXPECT_TRUE(one_says(told, "hazen-williams"));
}

TEST(Remarks, ThirdViscosityPointShowsItsMisfit) {
  const std::string law =
      "[liquid]\nname = \"oil\"\ntemperature = \"40 degC\"\ndensity = \"900 kg/m3\"\nbulk_modulus = \"1.5 GPa\"\n"
      "viscosity_points = [[\"25 degC\", \"180 cSt\"], [\"50 degC\", \"50 cSt\"], [\"40 degC\", \"90 cSt\"]]\n";
  const auto told = remarks_of(law, "roughness = \"0.1 mm\"");
  ASSERT_TRUE(one_says(told, "viscosity law through the first two points"));
  EXPECT_TRUE(one_says(told, "40 degC, 90 cSt"));
}

}  // namespace
}  // namespace headband::program
