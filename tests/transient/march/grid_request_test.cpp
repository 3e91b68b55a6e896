// SPDX-License-Identifier: MIT
//
// What a case asks of its grid: which travel times are uncertain, how quick the movements at a pipe's ends are, and
// what the run says of its grid.
#include "transient/march/grid_request.hpp"

#include "tests/transient/march/run_case.hpp"

#include <gtest/gtest.h>

#include <functional>
#include <limits>

namespace headband::test {
namespace {

/// Tank - main - joint - branch - end valve to the air; the branch has a wall, no wave speed of its own.
struct TwoPipes {
  CaseBuilder b;
  network::Pipe *main = nullptr, *branch = nullptr;

  TwoPipes() {
    b.basin("tank", 60.0);
    main = &b.pipe("main", "tank", "joint", 1000.0, 0.4);
    main->wave_speed = exact(1000.0, Dimension::velocity);
    branch = &b.pipe("branch", "joint", "end", 900.0, 0.3);
    branch->wall = exact(0.006, Dimension::length);
    branch->modulus = exact(2.0e11, Dimension::modulus);
    branch->poisson = exact(0.3);
    for (auto* p : {main, branch}) {
      CaseBuilder::profile_point(*p, 0.0, 0.0);
      CaseBuilder::profile_point(*p, p->length.value, 0.0);
    }
    b.valve_by_flow("valve", "end", "air", 0.05);
    b.surge(5.0, 20);
  }
};

transient::GridRequest request_of(CaseBuilder& b) {
  const network::Case c = b.finish();
  const network::Plan plan = network::make_plan(c);
  const auto values = network::realise(c, plan);
  steady::SteadySolver solver(c, plan);
  steady::SteadyState<1> steady;
  solver.solve<1>(values, steady);
  return transient::grid_request(c, plan, values, steady, 0);
}

std::vector<bool> uncertain(const std::function<void(TwoPipes&)>& change) {
  TwoPipes two;
  change(two);
  const auto r = request_of(two.b);
  return {r.pipes[0].uncertain, r.pipes[1].uncertain};
}

TEST(GridRequest, WhateverFeedsATravelTimeMakesItUncertain) {
  const std::vector<bool> none = {false, false}, first = {true, false}, second = {false, true};
  EXPECT_EQ(uncertain([](TwoPipes&) {}), none);
  EXPECT_EQ(uncertain([](TwoPipes& t) { t.main->wave_speed = normal(1000, 20, Dimension::velocity); }), first);
  EXPECT_EQ(uncertain([](TwoPipes& t) { t.main->wave_speed_scatter = normal(1.0, 0.05); }), first);
  EXPECT_EQ(uncertain([](TwoPipes& t) { t.branch->wall = normal(0.006, 0.0006, Dimension::length); }), second);
  EXPECT_EQ(uncertain([](TwoPipes& t) { t.branch->bore = normal(0.3, 0.003, Dimension::length); }), second);
  EXPECT_EQ(uncertain([](TwoPipes& t) { t.branch->modulus = normal(2e11, 1e10, Dimension::modulus); }), second);
  EXPECT_EQ(uncertain([](TwoPipes& t) { t.b.c.liquid.bulk_modulus = normal(2.1e9, 1e8, Dimension::modulus); }), second);
  EXPECT_EQ(uncertain([](TwoPipes& t) { t.b.c.liquid.density = normal(1000, 5, Dimension::density); }), second);
  // a wave speed that is given has no use for bore and wall
  EXPECT_EQ(uncertain([](TwoPipes& t) { t.main->bore = normal(0.4, 0.004, Dimension::length); }), none);
  EXPECT_EQ(uncertain([](TwoPipes& t) { t.main->roughness = lognormal(1e-4, 2.0, Dimension::length); }), none);
  EXPECT_EQ(
      uncertain([](TwoPipes& t) { t.b.move_valve("valve", 0.0, 0.0, 2.0).over = normal(2, 0.5, Dimension::time); }),
      none);
}

TEST(GridRequest, AnUncertainLengthCounts) {
  const std::vector<bool> first = {true, false};
  EXPECT_EQ(uncertain([](TwoPipes& t) { t.main->length = normal(1000, 5, Dimension::length); }), first);
  const auto by_profile = [](TwoPipes& t) {
    t.main->length = {};
    t.main->profile.back().first = normal(1000, 5, Dimension::length);
  };
  EXPECT_EQ(uncertain(by_profile), first);
  // a survey point in between moves no end; with a length of its own the profile is stretched to it
  const auto between = [](TwoPipes& t) {
    t.main->profile.insert(t.main->profile.begin() + 1,
                           {normal(400, 5, Dimension::length), normal(2.0, 0.5, Dimension::length)});
  };
  EXPECT_EQ(uncertain(between), (std::vector<bool>{false, false}));
}

TEST(GridRequest, WithFreeGasEverythingThatMovesThePressureCounts) {
  const auto with_gas = [](const std::function<void(TwoPipes&)>& change) {
    return uncertain([&](TwoPipes& t) {
      t.b.c.liquid.free_gas = exact(1e-3, Dimension::share);
      change(t);
    });
  };
  const std::vector<bool> none = {false, false}, second = {false, true};
  EXPECT_EQ(with_gas([](TwoPipes&) {}), none);
  EXPECT_EQ(with_gas([](TwoPipes& t) { t.b.c.basins[0].level = normal(60, 1, Dimension::length); }), second);
  EXPECT_EQ(with_gas([](TwoPipes& t) { t.main->roughness = lognormal(1e-4, 2.0, Dimension::length); }), second);
  EXPECT_EQ(with_gas([](TwoPipes& t) { t.main->rating = normal(1e6, 1e4, Dimension::pressure); }), none);
  EXPECT_EQ(with_gas([](TwoPipes& t) { t.b.move_valve("valve", 0.0, 0.0, 2.0).over = normal(2, 1, Dimension::time); }),
            none);
}

TEST(GridRequest, SharedNumbersAreUncertainOnlyWhereTheirSourceIs) {
  const auto shared = [](const Quantity& source) {
    return uncertain([&](TwoPipes& t) {
      t.main->wave_speed = source;
      t.branch->wave_speed = same_as("main wave_speed", Dimension::velocity);
    });
  };
  EXPECT_EQ(shared(exact(1000, Dimension::velocity)), (std::vector<bool>{false, false}));
  EXPECT_EQ(shared(normal(1000, 20, Dimension::velocity)), (std::vector<bool>{true, true}));
}

TEST(GridRequest, TheQuickestMovementAtEitherEnd) {
  constexpr double never = std::numeric_limits<double>::infinity();
  const auto quickest = [](const std::function<void(TwoPipes&)>& change) {
    TwoPipes t;
    change(t);
    const auto r = request_of(t.b);
    return std::vector{r.pipes[0].fastest_movement, r.pipes[1].fastest_movement};
  };
  EXPECT_EQ(quickest([](TwoPipes&) {}), (std::vector{never, never}));
  EXPECT_EQ(quickest([](TwoPipes& t) { t.b.move_valve("valve", 0.0, 0.0, 3.0); }), (std::vector{never, 3.0}));
  EXPECT_EQ(quickest([](TwoPipes& t) {
              t.b.move_valve("valve", 0.0, 0.5, 3.0);
              t.b.move_valve("valve", 5.0, 0.0, 0.0);
            }),
            (std::vector{never, 0.0}));
  EXPECT_EQ(quickest([](TwoPipes& t) { t.b.move_basin("tank", 0.0, 50.0, 8.0); }), (std::vector{8.0, never}));
  EXPECT_EQ(quickest([](TwoPipes& t) {
              t.b.draw_off("town", "joint", 0.01);
              t.b.move_draw_off("town", 1.0, 0.0, 4.0);
            }),
            (std::vector{4.0, 4.0}));
}

TEST(GridRequest, ChangesOverTwoPercentAreTold) {
  const auto warned = [](double second_length, double stub_length) {
    CaseBuilder b;
    b.basin("tank", 60.0);
    const auto add = [&](const char* name, const char* from, const char* to, double length) {
      auto& p = b.pipe(name, from, to, length, 0.4);
      p.wave_speed = exact(1000.0, Dimension::velocity);
      CaseBuilder::profile_point(p, 0.0, 0.0);
      CaseBuilder::profile_point(p, length, 0.0);
    };
    add("first", "tank", "joint", 500.0);
    add("second", "joint", "end", second_length);
    add("stub", "joint", "cap", stub_length);
    b.valve_by_flow("valve", "end", "air", 0.05);
    b.surge(1.0).time_step = exact(0.005, Dimension::time);
    b.c.surge.grid_check = false;
    std::vector<std::string> told;
    for (const auto& w : Marched(b).run.warnings)
      if (w.find("wave speed") != std::string::npos) told.push_back(w);
    return told;
  };
  EXPECT_TRUE(warned(500.0, 5.0).empty());
  EXPECT_TRUE(warned(15.25, 5.0).empty());  // 3.05 steps: 1.7 %
  const auto on_long = warned(15.45, 5.0);
  ASSERT_EQ(on_long.size(), 1U);
  EXPECT_EQ(on_long[0], "grid: the wave speed of pipe 'second' is changed by 3.0 %");
  const auto on_short = warned(500.0, 5.2);  // 0.0052 s: a short pipe that still carries a wave
  ASSERT_EQ(on_short.size(), 1U);
  EXPECT_EQ(on_short[0], "grid: the wave speed of pipe 'stub' is changed by 4.0 %");
}

}  // namespace
}  // namespace headband::test
