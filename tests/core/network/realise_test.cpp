// SPDX-License-Identifier: MIT

#include "core/network/values.hpp"
#include "tests/support/case_builder.hpp"

#include <gtest/gtest.h>

#include <cmath>
#include <numbers>

namespace headband {
namespace {

using base::Lanes;
using test::CaseBuilder;
using test::Dimension;
using test::exact;

CaseBuilder main_with_valve() {
  CaseBuilder build;
  build.basin("tank", 50.0);
  build.pipe("main", "tank", "end", 500.0, 0.3);
  build.valve_by_flow("valve", "end", "air", 0.05);
  return build;
}

network::Values<1> central(const network::Case& c) { return network::realise(c, network::make_plan(c)); }

TEST(Realise, OneDrawnWallFeedsBoreWaveSpeedAndStress) {
  CaseBuilder build = main_with_valve();
  auto& pipe = build.c.pipes[0];
  pipe.bore = {};
  pipe.outside = exact(0.508, Dimension::length);
  pipe.wall = test::even(0.008, 0.0072, 0.0084, Dimension::length);
  pipe.lining_thickness = exact(0.006, Dimension::length);
  pipe.modulus = exact(207e9, Dimension::modulus);
  pipe.poisson = exact(0.3);
  const auto c = build.finish();
  const auto plan = network::make_plan(c);
  network::Values<1> thin, thick;
  network::realise<1>(c, plan, {Lanes<1>(0.01)}, thin);
  network::realise<1>(c, plan, {Lanes<1>(0.99)}, thick);
  for (const auto* v : {&thin, &thick}) {
    const auto& p = v->pipes[0];
    EXPECT_NEAR(p.metal_inner_diameter[0], 0.508 - 2.0 * p.wall[0], 1e-15);
    EXPECT_NEAR(p.bore[0], p.metal_inner_diameter[0] - 0.012, 1e-15);
    EXPECT_NEAR(p.area[0], 0.25 * std::numbers::pi * p.bore[0] * p.bore[0], 1e-15);
    EXPECT_NEAR(p.wall_compliance[0], p.restraint_factor[0] * p.metal_inner_diameter[0] / (207e9 * p.wall[0]), 1e-22);
  }
  EXPECT_NEAR(thin.pipes[0].wall[0], 0.0072 + 0.01 * 0.0012, 1e-15);
  EXPECT_GT(thin.pipes[0].bore[0], thick.pipes[0].bore[0]);
  EXPECT_LT(thin.pipes[0].wave_speed_without_gas[0], thick.pipes[0].wave_speed_without_gas[0]);
}

TEST(Realise, LiningOfKnownModulusStiffensTheWall) {
  CaseBuilder build = main_with_valve();
  auto& pipe = build.c.pipes[0];
  pipe.wall = exact(0.006, Dimension::length);
  pipe.modulus = exact(170e9, Dimension::modulus);
  pipe.poisson = exact(0.28);
  pipe.lining_thickness = exact(0.01, Dimension::length);
  const auto bare = central(build.finish());
  EXPECT_NEAR(bare.pipes[0].metal_inner_diameter[0], 0.32, 1e-15);
  build.c.pipes[0].lining_modulus = exact(25e9, Dimension::modulus);
  const auto lined = central(build.finish());
  EXPECT_NEAR(
      bare.pipes[0].wall_compliance[0] / lined.pipes[0].wall_compliance[0], 1.0 + 25e9 * 0.01 / (170e9 * 0.006), 1e-12);
  EXPECT_GT(lined.pipes[0].wave_speed_without_gas[0], bare.pipes[0].wave_speed_without_gas[0]);
}

TEST(Realise, GivenFactorsAndSpeedsAreTakenAsTheyAre) {
  CaseBuilder build = main_with_valve();
  auto& pipe = build.c.pipes[0];
  pipe.wall = exact(0.006, Dimension::length);
  pipe.modulus = exact(170e9, Dimension::modulus);
  pipe.restraint_factor = exact(1.006);
  EXPECT_EQ(central(build.finish()).pipes[0].restraint_factor[0], 1.006);
  build.c.pipes[0].wave_speed = exact(1150.0, Dimension::velocity);
  build.c.pipes[0].wave_speed_scatter = exact(1.02, Dimension::factor);
  const auto given = central(build.finish());
  EXPECT_NEAR(given.pipes[0].wave_speed_without_gas[0], 1173.0, 1e-9);
  EXPECT_EQ(given.pipes[0].wall_compliance[0], 0.0);
  EXPECT_TRUE(std::isnan(given.pipes[0].restraint_factor[0]));
}

TEST(Realise, WaterComesFromItsTemperatureAndGivenNumbersTakeOver) {
  CaseBuilder build = main_with_valve();
  build.c.liquid = {};
  build.c.liquid.name = "water";
  build.c.liquid.temperature = exact(293.15, Dimension::temperature);
  const auto water = central(build.finish());
  EXPECT_NEAR(water.liquid.density[0], 998.2, 0.1);
  EXPECT_NEAR(water.liquid.kinematic_viscosity[0], 1.003e-6, 0.002e-6);
  EXPECT_NEAR(water.liquid.vapour_pressure[0], 2339.0, 5.0);
  build.c.liquid.density = exact(1010.0, Dimension::density);
  const auto heavy = central(build.finish());
  EXPECT_EQ(heavy.liquid.density[0], 1010.0);
  EXPECT_EQ(heavy.liquid.bulk_modulus[0], water.liquid.bulk_modulus[0]);
  build.c.liquid.viscosity = exact(2.02e-3, Dimension::dynamic_viscosity);
  EXPECT_NEAR(central(build.finish()).liquid.kinematic_viscosity[0], 2e-6, 1e-20);
}

TEST(Realise, ViscosityLawMeetsItsPointsAndCarriesTheScatter) {
  CaseBuilder build = main_with_valve();
  auto& liquid = build.c.liquid;
  liquid.viscosity = {};
  liquid.viscosity_points = {{exact(298.15, Dimension::temperature), exact(180e-6, Dimension::kinematic_viscosity)},
                             {exact(323.15, Dimension::temperature), exact(50e-6, Dimension::kinematic_viscosity)}};
  liquid.viscosity_scatter = exact(1.1, Dimension::factor);
  for (const auto& [temperature, viscosity] : {std::pair{298.15, 180e-6}, std::pair{323.15, 50e-6}}) {
    build.c.liquid.temperature = exact(temperature, Dimension::temperature);
    EXPECT_NEAR(central(build.finish()).liquid.kinematic_viscosity[0] / (1.1 * viscosity), 1.0, 1e-12);
  }
}

TEST(Realise, ValveSizesAgreeWithTheirDefinitions) {
  CaseBuilder build = main_with_valve();
  auto& valve = build.c.valves[0];
  valve.flow = {};
  valve.kv = exact(1200.0 / 3600.0, Dimension::kv);
  // Q[m3/h] = Kv sqrt(dp[bar] 999/rho); at 10 m of this liquid
  double pressure_in_bar = 1000.0 * 9.80665 * 10.0 / 1e5;
  EXPECT_NEAR(central(build.finish()).valves[0].coefficient[0] * std::sqrt(10.0) * 3600.0,
              1200.0 * std::sqrt(pressure_in_bar * 999.0 / 1000.0),
              1e-9);
  build.c.valves[0].kv = {};
  build.c.valves[0].k = exact(5.0);
  const double area = 0.25 * std::numbers::pi * 0.09;  // bore of the adjoining pipe
  EXPECT_NEAR(central(build.finish()).valves[0].coefficient[0], area * std::sqrt(2.0 * 9.80665 / 5.0), 1e-14);
  build.c.valves[0].bore = exact(0.2, Dimension::length);
  EXPECT_NEAR(
      central(build.finish()).valves[0].coefficient[0], area * (4.0 / 9.0) * std::sqrt(2.0 * 9.80665 / 5.0), 1e-14);
  build.c.valves[0].k = {};
  build.c.valves[0].bore = {};
  build.c.valves[0].area = exact(0.01, Dimension::area);
  build.c.valves[0].discharge_coefficient = exact(0.6);
  EXPECT_NEAR(central(build.finish()).valves[0].coefficient[0], 0.006 * std::sqrt(2.0 * 9.80665), 1e-15);
}

TEST(Realise, ElevationsComeFromEntryProfileOrLevel) {
  CaseBuilder build;
  build.basin("tank", 50.0).surface_pressure = exact(1e5, Dimension::pressure);
  build.c.basins[0].surface_pressure.gauge = true;
  build.basin("pond", 20.0);
  auto& one = build.pipe("one", "tank", "mid", 100.0, 0.3);
  CaseBuilder::profile_point(one, 0.0, 44.0);
  CaseBuilder::profile_point(one, 100.0, 31.0);
  build.pipe("two", "mid", "low", 100.0, 0.3);
  build.pipe("three", "low", "pond", 100.0, 0.3);
  build.place("low", 7.0);
  const auto c = build.finish();
  const auto plan = network::make_plan(c);
  const auto values = network::realise(c, plan);
  const auto elevation = [&](const char* place) {
    return values.places[static_cast<std::size_t>(plan.place_named(place))].elevation[0];
  };
  EXPECT_EQ(elevation("tank"), 44.0);
  EXPECT_EQ(elevation("mid"), 31.0);
  EXPECT_EQ(elevation("low"), 7.0);
  EXPECT_EQ(elevation("pond"), 20.0);
  EXPECT_EQ(values.pipes[1].elevation.front()[0], 31.0);
  EXPECT_EQ(values.pipes[1].elevation.back()[0], 7.0);
  EXPECT_EQ(values.pipes[2].elevation.back()[0], 20.0);
  EXPECT_NEAR(values.places[0].held_head[0], 50.0 + 1e5 / (1000.0 * 9.80665), 1e-12);
}

TEST(Realise, ProfileIsStretchedToTheDrawnLength) {
  CaseBuilder build = main_with_valve();
  auto& pipe = build.c.pipes[0];
  pipe.length = test::even(500.0, 495.0, 505.0, Dimension::length);
  CaseBuilder::profile_point(pipe, 0.0, 10.0);
  CaseBuilder::profile_point(pipe, 200.0, 15.0);
  CaseBuilder::profile_point(pipe, 499.0, 0.0);
  const auto c = build.finish();
  const auto plan = network::make_plan(c);
  network::Values<1> values;
  network::realise<1>(c, plan, {Lanes<1>(0.9)}, values);
  EXPECT_NEAR(values.pipes[0].length[0], 504.0, 1e-12);
  EXPECT_EQ(values.pipes[0].chainage.back()[0], values.pipes[0].length[0]);
  EXPECT_NEAR(values.pipes[0].chainage[1][0], 200.0 * 504.0 / 499.0, 1e-11);
}

TEST(Realise, SharedNumbersAreTheVerySameDraw) {
  CaseBuilder build = main_with_valve();
  build.pipe("spur", "end", "stop", 20.0, 0.3).roughness = test::same_as("main roughness", Dimension::length);
  build.c.pipes[0].roughness = test::lognormal(1e-4, 3.0, Dimension::length);
  const auto c = build.finish();
  const auto plan = network::make_plan(c);
  network::Values<1> values;
  for (const double score : {0.03, 0.5, 0.8}) {
    network::realise<1>(c, plan, {Lanes<1>(score)}, values);
    EXPECT_EQ(values.pipes[0].roughness[0], values.pipes[1].roughness[0]);
    EXPECT_EQ(values.pipes[0].roughness[0] < 1e-4, score < 0.5);
  }
}

TEST(Realise, StrokeTableInSharesFollowsItsDuration) {
  CaseBuilder build = main_with_valve();
  auto& event = build.move_valve("valve", 1.0, 0.0, 10.0);
  event.over = test::even(10.0, 8.0, 13.0, Dimension::time);
  event.travel_in_shares = true;
  event.travel.rows = {{exact(0.0, Dimension::share), exact(1.0, Dimension::share)},
                       {exact(0.25, Dimension::share), exact(0.2, Dimension::share)},
                       {exact(1.0, Dimension::share), exact(0.0, Dimension::share)}};
  const auto c = build.finish();
  network::Values<1> values;
  network::realise<1>(c, network::make_plan(c), {Lanes<1>(0.6)}, values);
  EXPECT_NEAR(values.events[0].over[0], 11.0, 1e-12);
  EXPECT_NEAR(values.events[0].travel_time[1][0], 2.75, 1e-12);
  EXPECT_EQ(values.events[0].travel_position[1][0], 0.2);
}

TEST(Realise, NotRandomRangesRunThroughTheirMiddle) {
  CaseBuilder build = main_with_valve();
  build.c.liquid.free_gas = test::not_random(0.0, 1e-3, Dimension::share);
  EXPECT_EQ(central(build.finish()).liquid.free_gas[0], 5e-4);
}

/// Everything uncertain at once: a Realiser must give what a full realisation gives, bit for bit.
TEST(Realiser, UpdatesAllThatDrawsChangeAndNothingElse) {
  CaseBuilder build;
  const auto loose = [](base::Quantity& q) {
    if (q.given() && q.value != 0.0 && q.dimension != Dimension::temperature)
      q.spread = base::Even{0.98 * q.value, 0.98 * q.value + 0.04 * std::abs(q.value)};
  };
  build.basin("tank", 50.0).surface_pressure = exact(2e5, Dimension::pressure);
  build.c.liquid.free_gas = exact(1e-4, Dimension::share);
  auto& pipe = build.pipe("main", "tank", "end", 500.0, 0.3);
  CaseBuilder::profile_point(pipe, 0.0, 10.0);
  CaseBuilder::profile_point(pipe, 500.0, 15.0);
  pipe.wall = exact(0.006, Dimension::length);
  pipe.modulus = exact(170e9, Dimension::modulus);
  pipe.poisson = exact(0.28);
  pipe.wave_speed_scatter = exact(1.0, Dimension::factor);
  pipe.rating = exact(1e6, Dimension::pressure);
  CaseBuilder::fitting(pipe, "bend", 0.3, 3.0);
  CaseBuilder::fitting(pipe, "screen", 2.0).at = exact(100.0, Dimension::length);
  build.pipe("tail", "end", "last", 50.0, 0.25).manning = exact(0.012);
  build.c.pipes[1].roughness = {};
  build.valve_by_area("valve", "last", "air", 0.01).near_seat = exact(1.0);
  build.pump("pump", "tank", "end", {{0.0, 70.0}, {0.1, 60.0}}).head_scatter = exact(1.0, Dimension::factor);
  build.draw_off("out", "end", 0.01);
  build.check_valve("check", "last", "tank").k = exact(2.0);
  build.c.friction.scatter = exact(1.0, Dimension::factor);
  build.move_valve("valve", 1.0, 0.5, 4.0);
  network::for_each_quantity(build.c, loose);
  const auto c = build.finish();
  ASSERT_GT(c.unknowns.size(), 30u);
  const auto plan = network::make_plan(c);
  const network::Realiser realiser(c, plan);
  auto drawn = realiser.prepare<8>();
  for (int batch = 0; batch < 3; ++batch) {
    network::Scores<8> scores(c.unknowns.size());
    for (std::size_t u = 0; u < scores.size(); ++u)
      for (int lane = 0; lane < 8; ++lane)
        scores[u].set(lane, std::fmod(0.137 * static_cast<double>(u + 1) + 0.091 * (lane + 8.0 * batch) + 0.01, 1.0));
    if (batch == 1) {  // the values of the unknowns found beforehand
      std::vector<std::vector<Lanes<8>>> ahead;
      realiser.look_ahead(std::vector{scores, scores}, ahead);
      realiser.draw(scores, ahead[1], drawn);
    } else {
      realiser.draw(scores, drawn);
    }
    network::Values<8> full;
    network::realise(c, plan, scores, full);
    const auto same = [](const Lanes<8>& a, const Lanes<8>& b, const char* what) {
      for (int lane = 0; lane < 8; ++lane) {
        if (std::isnan(a[lane]) && std::isnan(b[lane])) continue;
        EXPECT_EQ(a[lane], b[lane]) << what;
      }
    };
    same(drawn.gravity, full.gravity, "gravity");
    same(drawn.liquid.density, full.liquid.density, "density");
    same(drawn.liquid.kinematic_viscosity, full.liquid.kinematic_viscosity, "viscosity");
    same(drawn.liquid.free_gas, full.liquid.free_gas, "free gas");
    for (std::size_t i = 0; i < plan.places.size(); ++i) {
      same(drawn.places[i].elevation, full.places[i].elevation, "elevation");
      same(drawn.places[i].held_head, full.places[i].held_head, "held head");
    }
    for (std::size_t i = 0; i < plan.pipes.size(); ++i) {
      const auto &a = drawn.pipes[i], &b = full.pipes[i];
      same(a.length, b.length, "length");
      same(a.bore, b.bore, "bore");
      same(a.area, b.area, "area");
      same(a.roughness, b.roughness, "roughness");
      same(a.loss_number, b.loss_number, "loss number");
      same(a.friction_scatter, b.friction_scatter, "scatter");
      same(a.spread_k, b.spread_k, "k");
      same(a.wall_compliance, b.wall_compliance, "compliance");
      same(a.wave_speed_without_gas, b.wave_speed_without_gas, "wave speed");
      same(a.rating, b.rating, "rating");
      ASSERT_EQ(a.placed_fittings.size(), b.placed_fittings.size());
      for (std::size_t f = 0; f < a.placed_fittings.size(); ++f) {
        same(a.placed_fittings[f].k, b.placed_fittings[f].k, "placed k");
        same(a.placed_fittings[f].at, b.placed_fittings[f].at, "placed at");
      }
      for (std::size_t p = 0; p < a.chainage.size(); ++p) {
        same(a.chainage[p], b.chainage[p], "chainage");
        same(a.elevation[p], b.elevation[p], "profile");
      }
    }
    same(drawn.valves[0].coefficient, full.valves[0].coefficient, "valve");
    same(drawn.valves[0].seat_power, full.valves[0].seat_power, "seat");
    same(drawn.pumps[0].curve_head[1], full.pumps[0].curve_head[1], "pump");
    same(drawn.check_valves[0].coefficient, full.check_valves[0].coefficient, "check valve");
    same(drawn.draw_offs[0].flow, full.draw_offs[0].flow, "draw-off");
    same(drawn.events[0].over, full.events[0].over, "event");
  }
}

// The rating is a gauge pressure for limits and pages, however it is written.
TEST(Realise, ARatingWrittenAbsoluteIsCountedFromTheAtmosphere) {
  CaseBuilder build;
  build.basin("tank", 60.0);
  build.pipe("main", "tank", "end", 900.0, 0.3).rating = exact(17e5, Dimension::pressure);
  build.draw_off("out", "end", 0.08);
  build.c.site.atmosphere = exact(1e5, Dimension::pressure);
  const auto c = build.finish();
  ASSERT_FALSE(c.pipes[0].rating.gauge);
  const auto plan = network::make_plan(c);
  ASSERT_EQ(plan.limits.size(), 1U);
  EXPECT_EQ(plan.limits[0].bound, 16e5);
  EXPECT_EQ(network::realise(c, plan).pipes[0].rating[0], 16e5);
}

}  // namespace
}  // namespace headband
