// SPDX-License-Identifier: MIT
#include "core/casefile/read.hpp"

#include "core/base/error.hpp"

#include <gtest/gtest.h>

#include <algorithm>
#include <cmath>
#include <filesystem>
#include <fstream>
#include <set>
#include <sstream>
#include <variant>

namespace headband::casefile {
namespace {

using network::Case;

const std::string frame = R"([liquid]
name = "water"
temperature = "15 degC"
[[basin]]
name = "tank"
level = "60 m"
[[pipe]]
name = "main"
from = "tank"
to = "chamber"
profile = [["0 m", "20 m"], ["800 m", "10 m ± 1 m"]]
outside = "323.9 mm"
wall = "6.3 mm"
material = "steel"
roughness = { value = "0.1 mm x/ 2", not_below = "0.02 mm", not_above = "1 mm", source = "survey", grade = "B" }
)";
const std::string valve = R"([[valve]]
name = "end valve"
from = "chamber"
to = "air"
flow = "60 L/s"
)";

Case sound(const std::string& text) {
  const Reading r = read_text("case.toml", text, "");
  EXPECT_TRUE(r.problems.empty()) << problems_text("case.toml", text, r.problems);
  return r.value;
}

bool holds(const std::vector<std::string>& list, const std::string& part) {
  return std::any_of(list.begin(), list.end(), [&](const std::string& s) { return s.find(part) != std::string::npos; });
}

TEST(Read, ValuesNamesAndPaths) {
  const Case c = sound(frame + valve);
  ASSERT_EQ(c.pipes.size(), 1U);
  const auto& pipe = c.pipes[0];
  EXPECT_EQ(pipe.length.value, 800.0);  // from the profile
  EXPECT_EQ(pipe.profile[1].second.name, "main profile 2");
  EXPECT_EQ(pipe.roughness.name, "main roughness");
  EXPECT_EQ(pipe.roughness.path, "pipe/main/roughness");
  EXPECT_EQ(pipe.roughness.source, "survey");
  EXPECT_EQ(pipe.roughness.cut.low, 2e-5);
  EXPECT_EQ(pipe.roughness.cut.high, 1e-3);
  EXPECT_EQ(pipe.roughness.place.line, 15);
  EXPECT_EQ(c.valves[0].to, "air");
  EXPECT_EQ(c.valves[0].opening.value, 1.0);
  EXPECT_EQ(c.valves[0].near_seat.value, 1.0);
  EXPECT_EQ(c.site.gravity.value, 9.80665);
  EXPECT_EQ(c.site.atmosphere.value, 101325.0);
  EXPECT_EQ(c.text, frame + valve);
}

TEST(Read, DefaultsNobodyStatedAreCounted) {
  const Case c = sound(frame + valve + "[band]\nanswers = [{ flow = \"main\" }]\n");
  EXPECT_TRUE(holds(c.guesses, "joint anchored"));
  EXPECT_FALSE(holds(c.guesses, "elevation"));
  EXPECT_TRUE(c.friction.scatter.guess);  // counted by the verbs that draw
  EXPECT_FALSE(holds(c.guesses, "scatter"));
  EXPECT_FALSE(sound(frame + valve + "[friction]\nscatter = \"± 10 %\"\n[band]\nanswers = [{ flow = \"main\" }]\n")
                   .friction.scatter.guess);
  EXPECT_EQ(c.band.answers[0].name, "flow main");
  EXPECT_TRUE(c.band.answers[0].where[0].on_pipe);
}

TEST(Read, FlowCoefficientsOfBothFamiliesAgree) {
  // Cv = 1.156 Kv: a Cv of 1 is a Kv of 0.8650 m3/h (gpm, psi and bar by their definitions).
  const Case kv =
      sound(frame + "[[valve]]\nname = \"v\"\nfrom = \"chamber\"\nto = \"air\"\nkv = \"864.97772 m3/h ± 10 %\"\n");
  const Case cv =
      sound(frame + "[[valve]]\nname = \"v\"\nfrom = \"chamber\"\nto = \"air\"\ncv = \"1000 gpm ± 10 %\"\n");
  EXPECT_NEAR(cv.valves[0].kv.value, kv.valves[0].kv.value, 1e-6 * kv.valves[0].kv.value);
  EXPECT_NEAR(std::get<base::Normal>(cv.valves[0].kv.spread).standard_deviation,
              std::get<base::Normal>(kv.valves[0].kv.spread).standard_deviation,
              1e-8);
  EXPECT_EQ(cv.valves[0].kv.name, "v cv");
}

TEST(Read, InertiaByItsLabel) {
  const std::string pump =
      "[[pump]]\nname = \"p\"\nfrom = \"tank\"\nto = \"tank 2\"\ncurve = [[\"0 L/s\", \"40 m\"], [\"60 L/s\", \"30 "
      "m\"]]\n[[basin]]\nname = \"tank 2\"\nlevel = \"70 m\"\n";
  const auto with = [&](const std::string& inertia) {
    std::string text = frame + valve + pump;
    text.insert(text.find("curve"), inertia + "\n");
    return sound(text).pumps[0];
  };
  EXPECT_EQ(with("inertia_mr2 = \"60 kg m2\"").inertia.value, 60.0);
  EXPECT_EQ(with("inertia_gd2 = \"240 kg m2 ± 40 kg m2\"").inertia.value, 60.0);
  EXPECT_NEAR(std::get<base::Normal>(with("inertia_gd2 = \"240 kg m2 ± 40 kg m2\"").inertia.spread).standard_deviation,
              10.0 / 1.959963984540054,
              1e-14);
  EXPECT_NEAR(with("inertia_wr2 = \"100 lb ft2\"").inertia.value, 4.21401100938048, 1e-13);
}

TEST(Read, EventsAndTheirNames) {
  const std::string events = R"([[event]]
at = "0 s"
valve = "end valve"
to = "50 %"
over = "5 s ± 10 %"
[[event]]
at = "20 s"
valve = "end valve"
to = "0 %"
over = "5 s ± 10 %"
[[event]]
name = "ripple"
at = "40 s"
valve = "end valve"
swing = "5 %"
period = "6.22 s ± 1 %"
[[event]]
at = "60 s"
valve = "end valve"
travel = [["0 %", "100 %"], ["25 %", "20 %"], ["100 %", "0 %"]]
over = "instant"
)";
  const Reading wrong = read_text("c", frame + valve + events, "");
  ASSERT_EQ(wrong.problems.size(), 1U);  // a travel is not instant
  std::string text = frame + valve + events;
  text.replace(text.find("\"instant\""), 9, "\"30 s ± 5 %\"");
  const Case c = sound(text);
  ASSERT_EQ(c.events.size(), 4U);
  EXPECT_EQ(c.events[0].over.name, "end valve over");
  EXPECT_EQ(c.events[1].over.name, "end valve over 2");
  EXPECT_EQ(c.events[2].period.name, "ripple period");
  EXPECT_EQ(c.events[2].kind, network::EventKind::swing_valve);
  EXPECT_TRUE(c.events[3].travel_in_shares);
  EXPECT_EQ(c.events[3].travel.rows[1].first.value, 0.25);
}

TEST(Read, LimitsCarryTheirBounds) {
  const Case c = sound(frame + valve + R"([[limit]]
highest_pressure = "12 bar abs"
[[limit]]
name = "flow"
flow = "main"
not_under = "50 L/s"
at_most = "5 %"
[[limit]]
lowest_pressure = "-0.3 bar g"
where = "main @ 400 m"
)");
  EXPECT_EQ(c.limits[0].name, "highest_pressure everywhere");
  EXPECT_NEAR(c.limits[0].bound.value, 12e5 - 101325.0, 1e-9);
  EXPECT_TRUE(c.limits[0].bound.gauge);
  EXPECT_FALSE(c.limits[1].not_over);
  EXPECT_EQ(c.limits[1].at_most, 0.05);
  EXPECT_FALSE(c.limits[2].not_over);
  EXPECT_EQ(*c.limits[2].subject.where[0].chainage, 400.0);
  EXPECT_TRUE(c.limits[2].subject.where[0].on_pipe);
}

TEST(Read, WeightedChoicesKeepFileOrder) {
  const Case c = sound(frame + valve +
                       "[friction]\nlaws = { \"smooth\" = 0.2, \"haaland\" = 0.5, \"churchill\" = 0.3 }\ntransitions = "
                       "{ \"switch 2300\" = 1, \"blend 2000 4000\" = 2 }\n");
  ASSERT_EQ(c.friction.law.options.size(), 3U);
  EXPECT_EQ(c.friction.law.options[0].choice, network::FrictionLaw::smooth);
  EXPECT_EQ(c.friction.law.central(), network::FrictionLaw::haaland);
  EXPECT_EQ(c.friction.transition.central().from, 2000.0);
  EXPECT_GE(c.friction.law.unknown, 0);
}

TEST(Read, TablesFromFilesBesideTheCase) {
  const auto folder = std::filesystem::temp_directory_path() / "headband_read_test";
  std::filesystem::create_directories(folder);
  std::ofstream(folder / "profile.csv") << "\xEF\xBB\xBF# survey\nchainage [km];level [m]\n0;20\n0.4;35.5\n0.8;10\n";
  std::ofstream(folder / "tide.csv") << "level [ft],time [h]\n100,0\n110,6\n";  // swapped: the units tell
  std::string text = frame + valve;
  text.replace(
      text.find("[[\"0 m\""), std::string(R"([["0 m", "20 m"], ["800 m", "10 m ± 1 m"]])").size(), "\"profile.csv\"");
  text.replace(text.find("level = \"60 m\""), 14, "level_table = \"tide.csv\"");
  const Reading r = read_text("c", text, folder.string());
  ASSERT_TRUE(r.problems.empty()) << problems_text("c", text, r.problems);
  EXPECT_EQ(r.value.pipes[0].profile[1].second.value, 35.5);
  EXPECT_EQ(r.value.pipes[0].length.value, 800.0);
  EXPECT_EQ(r.value.pipes[0].profile_table.file, "profile.csv");
  EXPECT_NEAR(r.value.basins[0].level_table.rows[1].second.value, 33.528, 1e-12);
  EXPECT_EQ(r.value.basins[0].level_table.rows[1].first.value, 21600.0);
  std::filesystem::remove_all(folder);
}

TEST(Read, GradesGiveDefaultSpreads) {
  std::string text = frame + valve;
  text.replace(text.find("\"6.3 mm\""), 8, "{ value = \"6.3 mm\", grade = \"C\" }");
  const Case c = sound(text);
  EXPECT_NEAR(
      std::get<base::Normal>(c.pipes[0].wall.spread).standard_deviation, 0.12 * 0.0063 / 1.959963984540054, 1e-12);
  EXPECT_NE(c.pipes[0].wall.source.find("default for grade C"), std::string::npos);
  EXPECT_EQ(c.pipes[0].roughness.source, "survey");  // a spread of its own keeps it
}

TEST(Read, SectionsOfOtherVerbsAreReadAndKept) {
  const Case c = sound(frame + valve + R"([ageing]
from_year = 1978
to_year = 2055
now = 2026
pipes = ["main"]
growth = "0.10 mm/year x/ 3"
law = "straight"
energy = { price = "0.14 /kWh", hours = "8000 h/year", efficiency = "74 %", discount = "4 %" }
keep = { flow = "60 L/s", head_available = "36 m" }
[[ageing.option]]
name = "reline"
year = 2030
cost = "260 /m"
growth = "2 of before"
[[test]]
date = 1996
flow = "262 L/s ± 2 %"
head_loss = "18.9 m ± 4 %"
[fastest]
event = "closing"
between = ["10 s", "300 s"]
)");
  ASSERT_EQ(c.others.size(), 3U);
  EXPECT_TRUE(refused_by_verb(c, "flow").empty());
}

TEST(Read, StartersAreSound) {
  ASSERT_EQ(starter_kinds(), (std::vector<std::string>{"valve", "trip", "oil", "ageing", "ring"}));
  for (const std::string& kind : starter_kinds()) {
    const std::string text = starter(kind);
    EXPECT_NE(text.find("Invented scenario"), std::string::npos) << kind;
    const Case c = sound(text);
    for (const char* verb : {"flow", "surge", "band", "band --surge"}) {
      const bool marches = std::string(verb).find("surge") != std::string::npos;
      if (marches && !c.surge.given) continue;
      EXPECT_TRUE(refused_by_verb(c, verb).empty()) << kind << " " << verb;
    }
  }
  EXPECT_EQ(starter("nothing"), "");
}

TEST(Read, RefusedByVerbNamesWhatIsMissing) {
  const std::string vessel =
      "[[air_vessel]]\nname = \"vessel\"\nat = \"chamber\"\ngas_volume = \"2 m3\"\nexponent = 1.2\n[surge]\nduration = "
      "\"20 s\"\n";
  const Case c = sound(frame + valve + vessel);
  EXPECT_TRUE(refused_by_verb(c, "flow").empty());
  const base::Problems refused = refused_by_verb(c, "surge");
  ASSERT_EQ(refused.size(), 1U);
  EXPECT_NE(refused[0].what.find("not computed yet by this version"), std::string::npos);
  EXPECT_GT(refused[0].place.line, 0);
  EXPECT_EQ(refused_by_verb(sound(frame + valve), "surge").size(), 1U);  // no [surge]
}

TEST(Read, EchoShowsEveryValueInBothFamilies) {
  const Case c = sound(frame + valve);
  const auto values = echo(c);
  std::set<std::string> paths;
  for (const auto& v : values) {
    EXPECT_TRUE(paths.insert(v.path).second) << v.path;
    EXPECT_FALSE(v.shown_si.empty()) << v.path;
    EXPECT_FALSE(v.shown_us.empty()) << v.path;
  }
  const auto wall =
      std::find_if(values.begin(), values.end(), [](const auto& v) { return v.path == "pipe/main/wall"; });
  ASSERT_NE(wall, values.end());
  EXPECT_EQ(wall->written, "6.3 mm");
  EXPECT_EQ(wall->shown_si, "6.3 mm");
  EXPECT_EQ(wall->shown_us, "0.248 in");
  EXPECT_EQ(wall->unit, "m");
  EXPECT_TRUE(paths.contains("friction/law"));
}

TEST(Read, DrawsWrittenBackGiveTheSameBits) {
  const std::string text = frame + valve + R"([[event]]
name = "closing"
at = "0 s"
valve = "end valve"
to = "0 %"
over = "10 s between 8 s and 13 s"
[friction]
laws = { "haaland" = 0.5, "churchill" = 0.5 }
scatter = "± 10 %"
[surge]
duration = "20 s"
[band]
answers = [{ flow = "main" }]
[[limit]]
highest_pressure = "12 bar g"
)";
  const Case c = sound(text);
  ASSERT_GE(c.unknowns.size(), 4U);
  std::vector<double> scores;
  for (std::size_t i = 0; i < c.unknowns.size(); ++i)
    scores.push_back(std::fmod(0.137 + 0.618033988749895 * static_cast<double>(i), 1.0));
  const std::string written = write_case(c, scores, "draw 1");
  const Reading again = read_text("draw.toml", written, "");
  ASSERT_TRUE(again.problems.empty()) << problems_text("draw.toml", written, again.problems) << written;
  EXPECT_TRUE(again.value.unknowns.empty());
  const auto drawn = [&](const base::Quantity& q) {
    return base::value<1>(q, base::Lanes<1>(scores[static_cast<std::size_t>(q.unknown)]))[0];
  };
  EXPECT_EQ(again.value.pipes[0].roughness.value, drawn(c.pipes[0].roughness));
  EXPECT_EQ(again.value.pipes[0].profile[1].second.value, drawn(c.pipes[0].profile[1].second));
  EXPECT_EQ(again.value.events[0].over.value, drawn(c.events[0].over));
  EXPECT_EQ(again.value.friction.scatter.value, drawn(c.friction.scatter));
  EXPECT_EQ(again.value.friction.law.central(),
            c.friction.law.at(scores[static_cast<std::size_t>(c.friction.law.unknown)]));
  // Written again, the plain case is the same text but for the note.
  EXPECT_EQ(write_case(again.value, {}, ""), written);
}

TEST(Read, ADrawWithAShorterPipeKeepsWhatLiesAtItsEnd) {
  std::string text = frame + valve;
  const auto at = text.find("profile = ");
  text.replace(at,
               text.find('\n', at) - at,
               "length = \"800 m ± 10 %\"\nfittings = [{ name = \"bend\", k = 1, at = \"790 m\" }]");
  text += R"([show]
places = ["main @ 795 m", "main @ 100 m"]
[[limit]]
highest_pressure = "12 bar g"
where = "main @ 800 m"
)";
  const Case c = sound(text);
  const auto unknown = static_cast<std::size_t>(c.pipes[0].length.unknown);
  std::vector<double> scores(c.unknowns.size(), 0.5);
  scores[unknown] = 0.1;  // 747.7 m
  const std::string written = write_case(c, scores, "");
  const Reading again = read_text("draw.toml", written, "");
  ASSERT_TRUE(again.problems.empty()) << problems_text("draw.toml", written, again.problems) << written;
  const double length = again.value.pipes[0].length.value;
  EXPECT_NEAR(length, 747.7, 0.1);
  EXPECT_EQ(again.value.show.places[0].chainage, length);
  EXPECT_EQ(again.value.show.places[1].chainage, 100.0);
  EXPECT_EQ(again.value.limits[0].subject.where[0].chainage, length);
  EXPECT_EQ(again.value.pipes[0].fittings[0].at.value, length);
  scores[unknown] = 0.9;  // what lies inside stays as it was written
  const Reading longer = read_text("draw.toml", write_case(c, scores, ""), "");
  EXPECT_EQ(longer.value.show.places[0].written, "main @ 795 m");
  EXPECT_EQ(longer.value.pipes[0].fittings[0].at.value, 790.0);
}

TEST(Read, MissingFileIsAnIoError) {
  try {
    (void)read_file("/nowhere/case.toml");
    FAIL();
  } catch (const base::IoError& error) {
    EXPECT_EQ(error.failure(), base::IoFailure::missing);
  }
}

TEST(Read, OddTextsNeverThrow) {
  for (const std::string& text :
       {std::string(),
        std::string("\0\0", 2),
        std::string("\xff\xfe"),
        std::string("[liquid]\nname = 3"),
        std::string("pipe = 3\nvalve = [1, 2]\nevent = \"x\""),
        std::string("[[pipe]]\n[[pipe]]\n[[valve]]\n[[event]]\n[[limit]]\n[[basin]]\n[[pump]]\n[[relief]]"),
        std::string("[band]\nanswers = 3\n[together]\nx = []"),
        std::string("[show]\nplaces = [[1], {}, \"@\", \"a @\"]\n[friction]\nlaws = {}\ntransitions = 4")}) {
    const Reading r = read_text("odd.toml", text, "");
    EXPECT_FALSE(r.problems.empty());
    (void)problems_text("odd.toml", text, r.problems);
  }
}

}  // namespace
}  // namespace headband::casefile
