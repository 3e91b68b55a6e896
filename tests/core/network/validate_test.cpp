// SPDX-License-Identifier: MIT

#include "core/network/case.hpp"
#include "tests/support/case_builder.hpp"

#include <gtest/gtest.h>

#include <functional>

namespace headband {
namespace {

using network::AnswerKind;
using test::CaseBuilder;
using test::Dimension;
using test::exact;

/// Tank, two pipes, a pump between tanks and an end valve: nothing wrong with it.
CaseBuilder sound() {
  CaseBuilder build;
  build.basin("tank", 50.0);
  build.basin("sump", 0.0);
  build.place("chamber", 10.0);
  build.pipe("main", "tank", "mid", 500.0, 0.3);
  build.pipe("tail", "mid", "chamber", 200.0, 0.3);
  build.valve_by_flow("end valve", "chamber", "air", 0.05);
  build.pipe("rising", "header", "tank", 100.0, 0.3);
  build.pump("pump A", "sump", "header", {{0.0, 70.0}, {0.1, 60.0}});
  build.move_valve("end valve", 0.0, 0.0, 10.0);
  build.answer(AnswerKind::flow, "flow main", {CaseBuilder::along_pipe("main")});
  return build;
}

std::string text_of(const base::Problems& problems) {
  std::string text;
  for (const auto& p : problems)
    text += p.path + ": " + p.what + " | " + p.value + " | " + p.bound + " | " + p.hint + "\n";
  return text;
}

TEST(Validate, SoundCaseHasNoProblem) {
  const auto c = sound().finish();
  EXPECT_EQ(text_of(network::validate(c)), "");
}

struct Mistake {
  const char* name;
  std::function<void(CaseBuilder&)> make;
  const char* path;   ///< of one of the problems
  const char* words;  ///< in the same problem
};

class ValidateMistakes : public testing::TestWithParam<Mistake> {};

TEST_P(ValidateMistakes, IsFoundWithPathAndWords) {
  CaseBuilder build = sound();
  GetParam().make(build);
  const auto problems = network::validate(build.finish());
  bool found = false;
  for (const auto& p : problems)
    found = found ||
            (p.path == GetParam().path && (p.what + p.value + p.bound).find(GetParam().words) != std::string::npos);
  EXPECT_TRUE(found) << text_of(problems);
}

INSTANTIATE_TEST_SUITE_P(
    All,
    ValidateMistakes,
    testing::Values(
        Mistake{"repeated name", [](auto& b) { b.c.pipes[1].name = "main"; }, "pipe/main/name", "two elements"},
        Mistake{"reserved name", [](auto& b) { b.c.basins[1].name = "air"; }, "basin/air/name", "reserved"},
        Mistake{"comma in name", [](auto& b) { b.c.pipes[1].name = "a,b"; }, "pipe/a,b/name", "character"},
        Mistake{"pipe as place", [](auto& b) { b.c.pumps[0].to = "main"; }, "pump/pump A/to", "one name"},
        Mistake{"pipe to air", [](auto& b) { b.c.pipes[1].to = "air"; }, "pipe/tail/to", "only a valve"},
        Mistake{"loop on itself", [](auto& b) { b.c.pipes[1].to = "mid"; }, "pipe/tail/to", "begins and ends"},
        Mistake{"misspelt place", [](auto& b) { b.c.valves[0].from = "chambr"; }, "valve/end valve/from", "'chamber'"},
        Mistake{"unused place entry", [](auto& b) { b.place("mide", 5.0); }, "place/mide/name", "'mid'"},
        Mistake{"missing end", [](auto& b) { b.c.pipes[1].to = ""; }, "pipe/tail/to", "missing"},
        Mistake{"cut off", [](auto& b) { b.pipe("island", "x", "y", 10.0, 0.1); }, "place/x/head", "cut off"},
        Mistake{"cut off by shut valve",
                [](auto& b) {
                  b.valve_by_area("stop", "mid", "p", 0.01).opening = exact(0.0, Dimension::share);
                  b.pipe("beyond", "p", "q", 10.0, 0.1);
                },
                "place/p/head",
                "'q'"},
        Mistake{"elevation twice",
                [](auto& b) {
                  CaseBuilder::profile_point(b.c.pipes[1], 0.0, 12.0);
                  CaseBuilder::profile_point(b.c.pipes[1], 200.0, 10.02);
                },
                "pipe/tail/profile 2",
                "'chamber'"},
        Mistake{"no length", [](auto& b) { b.c.pipes[0].length = {}; }, "pipe/main/length", "no length"},
        Mistake{"no bore", [](auto& b) { b.c.pipes[0].bore = {}; }, "pipe/main/bore", "no bore"},
        Mistake{"wall eats bore",
                [](auto& b) {
                  b.c.pipes[0].bore = {};
                  b.c.pipes[0].outside = exact(0.3, Dimension::length);
                  b.c.pipes[0].wall = exact(0.2, Dimension::length);
                },
                "pipe/main/wall",
                "leave no bore"},
        Mistake{"thick wall",
                [](auto& b) { b.c.pipes[0].wall = exact(0.2, Dimension::length); },
                "pipe/main/wall",
                "thicker"},
        Mistake{"outside as bore",
                [](auto& b) { b.c.pipes[0].outside = exact(0.3, Dimension::length); },
                "pipe/main/outside",
                "not over"},
        Mistake{"rough",
                [](auto& b) { b.c.pipes[0].roughness = exact(0.1, Dimension::length); },
                "pipe/main/roughness",
                "fifth"},
        Mistake{"no roughness", [](auto& b) { b.c.pipes[0].roughness = {}; }, "pipe/main/roughness", "missing"},
        Mistake{"two friction numbers",
                [](auto& b) { b.c.pipes[0].manning = exact(0.012); },
                "pipe/main/roughness",
                "more than one"},
        Mistake{"law without its number",
                [](auto& b) { b.c.friction.law.options[0].choice = network::FrictionLaw::hazen_williams; },
                "pipe/main/hazen_williams",
                "Hazen-Williams"},
        Mistake{"fitting outside",
                [](auto& b) { CaseBuilder::fitting(b.c.pipes[0], "bend", 0.3).at = exact(501.0, Dimension::length); },
                "pipe/main/fitting bend at",
                "outside"},
        Mistake{"fitting without loss",
                [](auto& b) { CaseBuilder::fitting(b.c.pipes[0], "bend", 0.3).k = {}; },
                "pipe/main/fitting bend",
                "needs k"},
        Mistake{"profile start",
                [](auto& b) {
                  CaseBuilder::profile_point(b.c.pipes[0], 10.0, 1.0);
                  CaseBuilder::profile_point(b.c.pipes[0], 500.0, 1.0);
                },
                "pipe/main/profile 1 chainage",
                "begin at chainage 0"},
        Mistake{"profile end",
                [](auto& b) {
                  CaseBuilder::profile_point(b.c.pipes[0], 0.0, 1.0);
                  CaseBuilder::profile_point(b.c.pipes[0], 900.0, 1.0);
                },
                "pipe/main/profile 2 chainage",
                "does not end"},
        Mistake{"valve without size", [](auto& b) { b.c.valves[0].flow = {}; }, "valve/end valve/kv", "no size"},
        Mistake{"flow and kv",
                [](auto& b) { b.c.valves[0].kv = exact(1.0, Dimension::kv); },
                "valve/end valve",
                "flow sizes"},
        Mistake{"flow through a shut valve",
                [](auto& b) { b.c.valves[0].opening = exact(0.0, Dimension::share); },
                "valve/end valve/opening",
                "shut"},
        Mistake{"no flow",
                [](auto& b) { b.c.valves[0].flow = exact(0.0, Dimension::flow); },
                "valve/end valve/flow",
                "no flow"},
        Mistake{"area alone",
                [](auto& b) {
                  b.c.valves[0].flow = {};
                  b.c.valves[0].area = exact(0.01, Dimension::area);
                },
                "valve/end valve/discharge_coefficient",
                "coefficient"},
        Mistake{"law table",
                [](auto& b) {
                  b.c.valves[0].law.kind = network::ValveLawKind::table;
                  b.c.valves[0].law.points = {{1.0, 1.0}, {0.0, 0.0}};
                },
                "valve/end valve/law",
                "rising travel"},
        Mistake{"short curve", [](auto& b) { b.c.pumps[0].curve.rows.pop_back(); }, "pump/pump A/curve", "two points"},
        Mistake{"curve order",
                [](auto& b) { b.c.pumps[0].curve.rows[1].first.value = 0.0; },
                "pump/pump A/curve 2 flow",
                "rise"},
        Mistake{"event subject", [](auto& b) { b.c.events[0].subject = "end vale"; }, "event/end vale", "'end valve'"},
        Mistake{"event end", [](auto& b) { b.c.events[0].to = {}; }, "event/end valve/to", "no end"},
        Mistake{"event duration",
                [](auto& b) { b.c.events[0].over = exact(0.0, Dimension::time); },
                "event/end valve/over",
                "over zero"},
        Mistake{"unknown spot",
                [](auto& b) { b.c.show.places.push_back(CaseBuilder::at_place("chmber")); },
                "show/places",
                "'chamber'"},
        Mistake{"chainage",
                [](auto& b) { b.c.show.places.push_back(CaseBuilder::on_pipe("main", 501.0)); },
                "show/places",
                "outside the pipe"},
        Mistake{"one-ended drop",
                [](auto& b) { b.answer(AnswerKind::pressure_drop, "d", {CaseBuilder::at_place("tank")}); },
                "band/answers",
                "two places"},
        Mistake{"limit without bound",
                [](auto& b) {
                  auto& limit = b.c.limits.emplace_back();
                  limit.name = "rating";
                },
                "limit/rating",
                "no bound"},
        Mistake{"own liquid", [](auto& b) { b.c.liquid.density = {}; }, "liquid/density", "missing"},
        Mistake{"hot water",
                [](auto& b) {
                  b.c.liquid.name = "water";
                  b.c.liquid.density = {};
                  b.c.liquid.temperature.value = 400.0;
                },
                "liquid/temperature",
                "range"},
        Mistake{"correlation",
                [](auto& b) { b.c.together.push_back({"main wal", "tail wall", 0.5, {}}); },
                "together/main wal, tail wall",
                "no uncertain value"}),
    [](const auto& one) {
      std::string name;
      for (const char* ch = one.param.name; *ch != '\0'; ++ch) name += *ch == ' ' || *ch == '-' ? '_' : *ch;
      return name;
    });

TEST(ValidateFor, SurgeNeedsDurationAndWaveSpeeds) {
  const auto c = sound().finish();
  EXPECT_EQ(text_of(network::validate_for(c, "flow")), "");
  const auto text = text_of(network::validate_for(c, "surge"));
  EXPECT_NE(text.find("surge/duration"), std::string::npos);
  EXPECT_NE(text.find("pipe/main/wave_speed"), std::string::npos);
}

TEST(ValidateFor, TrippedPumpNeedsItsRotor) {
  CaseBuilder build = sound();
  build.trip_pump("pump A", 1.0);
  const auto text = text_of(network::validate_for(build.finish(), "surge"));
  EXPECT_NE(text.find("pump/pump A/inertia"), std::string::npos);
}

TEST(ValidateFor, APumpAtRestNeedsItsRatedPoint) {
  CaseBuilder build = sound();
  auto& event = build.trip_pump("pump A", 1.0);
  const auto refused = [&] {
    return text_of(network::validate_for(build.finish(), "surge")).find("pump/pump A/rated") != std::string::npos;
  };
  EXPECT_FALSE(refused());  // runs at the start: its first operating point is the rated one
  event.kind = network::EventKind::start_pump;
  event.instant = true;
  EXPECT_TRUE(refused());
  build.c.pumps[0].rated_flow = exact(0.1, Dimension::flow);
  build.c.pumps[0].rated_head = exact(40.0, Dimension::length);
  EXPECT_FALSE(refused());
}

}  // namespace
}  // namespace headband
