// SPDX-License-Identifier: MIT
#include "core/show/show.hpp"

#include "tests/support/sample_study.hpp"

#include <gtest/gtest.h>
#include <nlohmann/json.hpp>

#include <charconv>
#include <cmath>
#include <limits>
#include <string>
#include <vector>

namespace headband::show {
namespace {

using Json = nlohmann::ordered_json;

std::vector<std::string> keys(const Json& object) {
  std::vector<std::string> names;
  for (const auto& [key, value] : object.items()) names.push_back(key);
  return names;
}

using Names = std::vector<std::string>;

TEST(Json, BlocksStandInTheAgreedOrder) {
  auto study = support::sample_study();
  study.values_shown = true;
  const Json all = Json::parse(json(study));
  EXPECT_EQ(keys(all),
            (Names{"headband",
                   "verb",
                   "case",
                   "verdict",
                   "warnings",
                   "guesses",
                   "liquid",
                   "values",
                   "pipes",
                   "places",
                   "devices",
                   "extremes",
                   "cavities",
                   "events",
                   "audit",
                   "grid",
                   "limits",
                   "answers"}));
}

TEST(Json, ABlockTheVerbDoesNotComputeIsLeftOut) {
  EXPECT_EQ(
      keys(Json::parse(json(support::sample_flow()))),
      (Names{"headband", "verb", "case", "verdict", "warnings", "guesses", "liquid", "pipes", "places", "devices"}));
  EXPECT_EQ(keys(Json::parse(json(answers::Study{}))),
            (Names{"headband", "verb", "case", "verdict", "warnings", "guesses"}));
}

TEST(Json, EachBlockHasTheAgreedKeys) {
  auto study = support::sample_study();
  study.values_shown = true;
  const Json all = Json::parse(json(study));
  EXPECT_EQ(keys(all["liquid"]),
            (Names{"density_kg_per_m3",
                   "kinematic_viscosity_m2_per_s",
                   "dynamic_viscosity_Pa_s",
                   "bulk_modulus_isentropic_Pa",
                   "bulk_modulus_isothermal_Pa",
                   "sound_speed_m_per_s",
                   "vapour_pressure_Pa"}));
  EXPECT_EQ(keys(all["values"][0]),
            (Names{"path", "name", "written", "value", "unit", "spread", "source", "grade", "guess"}));
  EXPECT_EQ(keys(all["pipes"]["upper main"]),
            (Names{"bore_m",
                   "roughness_m",
                   "restraint_factor",
                   "flow_m3_per_s",
                   "velocity_m_per_s",
                   "reynolds",
                   "friction_factor",
                   "head_loss_m",
                   "pressure_drop_Pa",
                   "wave_speed_m_per_s"}));
  EXPECT_EQ(keys(all["places"]["Süd-Schacht"]),
            (Names{"elevation_m",
                   "head_m",
                   "pressure_Pa",
                   "max_head_m",
                   "max_pressure_Pa",
                   "time_of_max_s",
                   "min_head_m",
                   "min_pressure_Pa",
                   "time_of_min_s"}));
  EXPECT_EQ(keys(all["extremes"]),
            (Names{"max_pressure_Pa",
                   "max_head_m",
                   "max_pipe",
                   "max_chainage_m",
                   "max_time_s",
                   "max_grid_bound_Pa",
                   "min_pressure_Pa",
                   "min_head_m",
                   "min_pipe",
                   "min_chainage_m",
                   "min_time_s",
                   "min_grid_bound_Pa"}));
  EXPECT_EQ(keys(all["cavities"][0]), (Names{"pipe", "chainage_m", "opens_s", "closes_s", "max_volume_m3"}));
  EXPECT_EQ(keys(all["events"][0]), (Names{"time_s", "subject", "kind", "what"}));
  EXPECT_EQ(keys(all["audit"]), (Names{"volume_residual_m3", "volume_residual_relative"}));
  EXPECT_EQ(keys(all["grid"]), (Names{"time_step_s", "worst_wave_speed_change", "worst_pipe", "rigid_pipes"}));
  EXPECT_EQ(keys(all["limits"][0]),
            (Names{"name",
                   "kind",
                   "unit",
                   "limit",
                   "value",
                   "margin",
                   "probability",
                   "probability_lower",
                   "probability_upper",
                   "worst_corner",
                   "verdict"}));
  const Json& peak = all["answers"]["peak"];
  for (const char* key : {"unit", "central", "mean", "sd", "quantiles", "modes", "draws", "failed", "budget"}) {
    EXPECT_TRUE(peak.contains(key)) << key;
  }
  EXPECT_EQ(keys(peak["quantiles"]), (Names{"0.025", "0.05", "0.5", "0.95", "0.975"}));
  EXPECT_EQ(keys(peak["budget"]), (Names{"inputs", "friction law", "grid", "sampling"}));
  EXPECT_EQ(keys(peak["sensitivity"]), (Names{"main wave_speed_scatter", "main wall"}));
}

TEST(Json, PlacesCarryExtremesOnlyAfterARun) {
  const Json flow = Json::parse(json(support::sample_flow()));
  EXPECT_EQ(keys(flow["places"]["upper tank"]), (Names{"elevation_m", "head_m", "pressure_Pa"}));
}

TEST(Json, MissingNumbersAreNullAndNothingElse) {
  auto study = support::sample_study();
  study.pipes[0].flow = std::numeric_limits<double>::infinity();
  const Json all = Json::parse(json(study));
  EXPECT_TRUE(all["extremes"]["min_grid_bound_Pa"].is_null());
  EXPECT_TRUE(all["cavities"][1]["closes_s"].is_null());
  EXPECT_TRUE(all["pipes"]["upper main"]["flow_m3_per_s"].is_null());
  EXPECT_TRUE(Json::parse(json(answers::Study{}))["verdict"].is_null());
}

TEST(Json, ProbabilityIsARangeWhereChanceIsNotAll) {
  const Json all = Json::parse(json(support::sample_study()));
  EXPECT_EQ(all["limits"][1]["probability"], Json::parse("[0, 0.04]"));
  EXPECT_EQ(all["limits"][1]["worst_corner"], "gas high");
  EXPECT_EQ(all["limits"][0]["probability"], 0.26);
  EXPECT_EQ(all["limits"][0]["verdict"], "NOT OK");
}

TEST(Json, CaseIsTheFileNameWithoutFolder) {
  auto study = support::sample_flow();
  study.provenance.case_file = "/somewhere/else/line.toml";
  EXPECT_EQ(Json::parse(json(study))["case"], "line.toml");
}

TEST(Json, NumbersReadBackToTheSameBits) {
  const auto study = support::sample_study();
  const Json all = Json::parse(json(study));
  const auto& answer = study.bands->answers[1];
  EXPECT_EQ(all["answers"]["peak"]["mean"].get<double>(), answer.mean);
  EXPECT_EQ(all["places"]["valve chamber"]["pressure_Pa"].get<double>(), study.places[2].pressure);
}

TEST(Json, CavitiesTooSmallToTellAreLeftOutAndTheLargestKept) {
  auto study = support::sample_study();
  EXPECT_EQ(Json::parse(json(study))["cavities"].size(), 2U);  // the third is under 1e-6 of its section
  auto& cavities = study.transient->cavities;
  cavities.clear();
  for (int i = 0; i < 300; ++i) {
    cavities.push_back({"upper main", 1.0 * i, 0.0, 1.0, 1e-3 * ((i * 7) % 300 + 1)});
  }
  const Json told = Json::parse(json(study))["cavities"];
  ASSERT_EQ(told.size(), 200U);
  double before = -1.0;
  for (const auto& cavity : told) {
    EXPECT_GT(cavity["max_volume_m3"].get<double>(), 1e-3 * 100.0);  // the smallest 100 are gone
    EXPECT_GT(cavity["chainage_m"].get<double>(), before);           // the order of the file is kept
    before = cavity["chainage_m"].get<double>();
  }
}

TEST(Json, NamesThatRepeatLoseNothing) {
  auto study = support::sample_study();
  study.bands->answers[1].name = study.bands->answers[0].name;
  EXPECT_EQ(keys(Json::parse(json(study))["answers"]), (Names{"drop", "drop 2", "flow lower main"}));
}

TEST(Json, AnyTextIsEscaped) {
  auto study = support::sample_flow();
  study.warnings = {"quote \" slash \\ line\nend\x01 </script>", std::string("not utf-8 \xff!")};
  const Json all = Json::parse(json(study));
  EXPECT_EQ(all["warnings"][0], study.warnings[0]);
  EXPECT_EQ(all["warnings"][1], "not utf-8 \uFFFD!");
}

TEST(Json, ProblemsOfACaseHavePlacesOrNull) {
  const base::Problems problems = {{{12, 8}, "pipe/main/wall", "a bare number", "8", "\"8 mm\"", "give a unit"},
                                   {{0, 0}, "", "no basin", "", "", ""}};
  const Json all = Json::parse(problems_json(problems));
  EXPECT_EQ(keys(all), (Names{"headband", "problems"}));
  EXPECT_EQ(keys(all["problems"][0]), (Names{"line", "column", "path", "what", "value", "bound", "hint"}));
  EXPECT_EQ(all["problems"][0]["line"], 12);
  EXPECT_EQ(all["problems"][0]["hint"], "give a unit");
  EXPECT_TRUE(all["problems"][1]["line"].is_null());
}

}  // namespace
}  // namespace headband::show
