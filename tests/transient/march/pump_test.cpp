// SPDX-License-Identifier: MIT
//
// Pump trips, check valves, slow openings against rigid-column answers (T07, T09a, T09f, T09h).
#include "transient/device/pump.hpp"
#include "tests/core/base/csv.hpp"
#include "tests/transient/march/run_case.hpp"

#include <gtest/gtest.h>

#include <numbers>

namespace headband::test {
namespace {

constexpr double g = 9.80665;

double area(double bore) { return 0.25 * std::numbers::pi * bore * bore; }

network::Pipe& rising_main(CaseBuilder& b, double length, double bore, double factor, double wave_speed) {
  auto& p = b.pipe("main", "delivery", "upper", length, bore);
  CaseBuilder::profile_point(p, 0.0, 0.0);
  CaseBuilder::profile_point(p, length, 0.0);
  p.wave_speed = exact(wave_speed, Dimension::velocity);
  p.roughness = {};
  p.friction_factor = exact(factor);
  return p;
}

/// T07a: parabolas of head and torque, ideal check valve.
CaseBuilder tripping_plant(double wave_speed, double duration) {
  CaseBuilder b(998.0);
  b.basin("sump", 0.0);
  b.basin("upper", 38.0);
  rising_main(b, 180.0, 0.5, 0.018, wave_speed);
  std::vector<std::pair<double, double>> curve;
  const auto head = [](double v) { return 45.0 * (1.28 + 0.06 * v - 0.34 * v * v); };
  const auto torque = [](double v) { return 0.45 + 0.65 * v - 0.10 * v * v; };
  for (const double v : {0.0, 0.7, 1.3}) curve.emplace_back(0.28 * v, head(v));
  auto& pump = b.pump("pump", "sump", "delivery", curve);
  for (const double v : {0.0, 0.7, 1.3})
    pump.torque.rows.emplace_back(exact(0.28 * v, Dimension::flow), exact(torque(v), Dimension::share));
  pump.speed = exact(980.0 * 2.0 * std::numbers::pi / 60.0, Dimension::rotational_speed);
  pump.efficiency = exact(0.82, Dimension::share);
  pump.inertia = exact(60.0, Dimension::inertia);
  pump.rated_flow = exact(0.28, Dimension::flow);
  pump.rated_head = exact(45.0, Dimension::length);
  b.trip_pump("pump", 0.0);
  auto& surge = b.surge(duration, 40);
  surge.cavities = network::Cavities::off;
  surge.friction_in_time = network::FrictionInTime::fixed;
  return b;
}

TEST(Pump, TripWithAnIdealCheckValve) {  // T07a
  for (const bool stiff : {false, true}) {
    CaseBuilder b = tripping_plant(stiff ? 5000.0 : 1000.0, 3.0);
    const Marched m(b);
    ASSERT_TRUE(m.run.completed) << m.run.transient.status;
    EXPECT_NEAR(m.flow(0, "delivery") / 0.28, 1.1955152, 1e-6 * 1.2);
    const double of_flow = stiff ? 0.002 : 0.018549008168289527, of_speed = stiff ? 0.001 : 0.003;
    const double rated = 980.0 * 2.0 * std::numbers::pi / 60.0;
    int compared = 0;
    for (const Row& r : reference_rows("transient/T07a_series.csv")) {
      const double t = std::stod(r[0]);
      const std::size_t row = m.row_at(t);
      if (row >= m.rows() || std::stod(r[1]) <= 0.0) continue;
      // between rows: the reference falls by less than its tolerance in one step
      const double late = m.time(row) - t;
      ASSERT_NEAR(m.series(row, "pump flow") / 0.28 + 0.5 * late, std::stod(r[1]), of_flow) << t;
      ASSERT_NEAR(m.series(row, "pump speed") / rated + 0.14 * late, std::stod(r[2]), of_speed) << t;
      if (!stiff) {
        ASSERT_NEAR(m.series(row, "pump head") / 45.0, std::stod(r[3]) / 45.0, 0.014224145707282313) << t;
      }
      ++compared;
    }
    EXPECT_GT(compared, 500);
    double zero = -1.0;
    for (const auto& e : m.run.events)
      if (e.kind == "zero_flow" && zero < 0.0) zero = e.time;
    EXPECT_NEAR(zero, 2.7150919, 0.02 * 2.7150919 + m.run.grid.time_step);
    EXPECT_GE(m.events_of("check_shut"), 1);
    EXPECT_EQ(m.events_of("tripped"), 1);
  }
}

TEST(Pump, RunDownAtAShutCheckValveMeetsTheClosedForm) {
  // torque = shut_off speed^2: speed = 1 / (1 + shut_off t / Tm)
  CaseBuilder b = tripping_plant(1000.0, 60.0);
  const Marched m(b);
  const double rated = 980.0 * 2.0 * std::numbers::pi / 60.0, machine_time = 4.2019679;
  const std::size_t from = m.row_at(20.0), to = m.row_at(60.0);
  ASSERT_EQ(m.series(from, "pump flow"), 0.0);
  const double a = m.series(from, "pump speed") / rated, z = m.series(to, "pump speed") / rated;
  const double expected = a / (1.0 + a * 0.45 * (m.time(to) - m.time(from)) / machine_time);
  EXPECT_NEAR(z, expected, 1e-4 * expected);
}

// Steady flow of T07c by bisection: pump by the four-quadrant table at rated speed against static lift and friction.
steady::SteadyState<1> table_steady(const network::Case&, const network::Plan& plan, const network::Values<1>& values) {
  const auto& table = transient::quadrants_ns25();
  const double loss = 0.016 * 200.0 / 0.6 / (2.0 * g * area(0.6) * area(0.6));
  const auto lift = [&](double q) {
    return 55.0 * transient::read_quadrants(table, table.head, q / 0.4, 1.0).value - 50.0 - loss * q * q;
  };
  double low = 0.3, high = 0.6;
  for (int i = 0; i < 200; ++i) (lift(0.5 * (low + high)) > 0.0 ? low : high) = 0.5 * (low + high);
  steady::SteadyState<1> s;
  s.pipe_flow = {low};
  s.device_flow = {low};
  s.place_head.resize(plan.places.size());
  for (std::size_t k = 0; k < plan.places.size(); ++k)
    s.place_head[k] = plan.places[k].basin >= 0 ? values.places[k].held_head : base::Lanes<1>(50.0 + loss * low * low);
  s.friction_factor = {0.016};
  s.reynolds = {low * 0.6 / (area(0.6) * 1e-6)};
  s.wave_speed = {values.pipes[0].wave_speed_given};
  s.pump_speed = {1.0};
  return s;
}

TEST(Pump, TripThroughReverseFlowToRunaway) {  // T07c
  for (const bool stiff : {false, true}) {
    CaseBuilder b(998.0);
    b.basin("sump", 0.0);
    b.basin("upper", 50.0);
    rising_main(b, 200.0, 0.6, 0.016, stiff ? 5000.0 : 1000.0);
    auto& pump = b.pump("pump", "sump", "delivery", {});
    pump.characteristic = network::Characteristic::table;
    const auto& table = transient::quadrants_ns25();
    for (std::size_t k = 0; k < table.angle.size(); ++k)
      pump.suter.rows.emplace_back(exact(table.angle[k]), exact(table.head[k]));
    pump.suter_torque = table.torque;
    pump.speed = exact(980.0 * 2.0 * std::numbers::pi / 60.0, Dimension::rotational_speed);
    pump.efficiency = exact(0.84, Dimension::share);
    pump.inertia = exact(120.0, Dimension::inertia);
    pump.rated_flow = exact(0.4, Dimension::flow);
    pump.rated_head = exact(55.0, Dimension::length);
    pump.check_valve.kind = network::CheckValveKind::none;
    b.trip_pump("pump", 0.0);
    auto& surge = b.surge(40.0, 40);
    surge.cavities = network::Cavities::off;
    surge.friction_in_time = network::FrictionInTime::fixed;
    surge.grid_check = false;
    const Marched m(b, table_steady);
    ASSERT_TRUE(m.run.completed) << m.run.transient.status;
    EXPECT_NEAR(m.flow(0, "delivery") / 0.4, 1.08907, 1e-6 * 1.1);
    const double of_flow = stiff ? 0.002 : 0.01875311666614643, of_speed = stiff ? 0.001 : 0.003;
    const double rated = 980.0 * 2.0 * std::numbers::pi / 60.0;
    int compared = 0;
    for (const Row& r : reference_rows("transient/T07c_series.csv")) {
      const double t = std::stod(r[0]);
      const double at_row = t / m.run.grid.time_step;
      const auto row = static_cast<std::size_t>(at_row + 1e-9);
      if (row + 1 >= m.rows()) continue;
      const double share = std::max(0.0, at_row - static_cast<double>(row));
      const auto between = [&](const char* name) {
        return m.series(row, name) + share * (m.series(row + 1, name) - m.series(row, name));
      };
      ASSERT_NEAR(between("pump flow") / 0.4, std::stod(r[1]), of_flow) << t;
      ASSERT_NEAR(between("pump speed") / rated, std::stod(r[2]), of_speed) << t;
      ++compared;
    }
    EXPECT_GT(compared, 500);
  }
}

TEST(Pump, OneOfTwoTripsBehindItsCheckValve) {
  CaseBuilder b(998.0);
  b.basin("sump", 0.0);
  b.basin("upper", 38.0);
  rising_main(b, 900.0, 0.6, 0.018, 1000.0);
  auto& pump = b.pump("pair", "sump", "delivery", {{0.0, 57.6}, {0.28, 45.0}, {0.4, 30.0}});
  pump.count = 2;
  pump.shut_off_torque = exact(0.45, Dimension::share);
  pump.speed = exact(100.0, Dimension::rotational_speed);
  pump.efficiency = exact(0.82, Dimension::share);
  pump.inertia = exact(20.0, Dimension::inertia);
  pump.rated_flow = exact(0.28, Dimension::flow);
  pump.rated_head = exact(45.0, Dimension::length);
  b.trip_pump("pair", 1.0).tripping = 1;
  b.surge(120.0, 40).cavities = network::Cavities::off;
  b.c.surge.grid_check = false;
  const Marched m(b);
  ASSERT_TRUE(m.run.completed);
  const std::size_t end = m.rows() - 1;
  EXPECT_EQ(m.events_of("check_shut"), 1);
  EXPECT_LT(m.series(end, "pair speed"), 30.0);
  // the other one carries on alone: its flow is the steady flow of a single pump
  CaseBuilder alone(998.0);
  alone.basin("sump", 0.0);
  alone.basin("upper", 38.0);
  rising_main(alone, 900.0, 0.6, 0.018, 1000.0);
  alone.pump("one", "sump", "delivery", {{0.0, 57.6}, {0.28, 45.0}, {0.4, 30.0}});
  alone.surge(1.0);
  const Marched one(alone);
  EXPECT_NEAR(m.series(end, "pair flow"), one.series(0, "one flow"), 1e-3 * one.series(0, "one flow"));
}

TEST(Pump, StartedAtOnceIsAnInstantLikeAnyOther) {
  for (const double at : {0.0, 0.5, 0.52}) {
    CaseBuilder b;
    b.basin("sump", 0.0);
    b.basin("upper", 30.0);
    rising_main(b, 600.0, 0.4, 0.02, 1200.0);
    auto& pump = b.pump("pump", "sump", "delivery", {{0.0, 50.0}, {0.1, 40.0}, {0.2, 20.0}});
    pump.shut_off_torque = exact(0.45, Dimension::share);
    pump.speed = exact(100.0, Dimension::rotational_speed);
    pump.efficiency = exact(0.8, Dimension::share);
    pump.inertia = exact(5.0, Dimension::inertia);
    pump.rated_flow = exact(0.1, Dimension::flow);
    pump.rated_head = exact(40.0, Dimension::length);
    auto& event = b.trip_pump("pump", at);
    event.kind = network::EventKind::start_pump;
    event.instant = true;
    b.c.show.places = {CaseBuilder::at_place("delivery"), CaseBuilder::on_pipe("main", 60.0)};
    b.surge(2.0, 10).cavities = network::Cavities::off;
    b.c.surge.grid_check = false;
    const Marched m(b);
    ASSERT_TRUE(m.run.completed) << m.run.transient.status;
    const std::size_t te = at > 0.51 ? 11 : m.row_at(at);  // dt = 0.05 s
    // head and flow behind the front: the curve against the pipe's impedance
    const double impedance = 1200.0 / (g * area(0.4));
    const auto behind = [&](double q) { return m.head(0, "delivery") + impedance * q; };
    for (std::size_t row = 0; row <= te; ++row) {
      EXPECT_EQ(m.series(row, "pump speed"), 0.0) << at;  // the row at te is the state before
      EXPECT_EQ(m.head(row, "delivery"), m.head(0, "delivery")) << at;
    }
    const double q = m.series(te + 1, "pump flow");
    EXPECT_GT(q, 0.01);
    EXPECT_NEAR(m.head(te + 1, "delivery"), behind(q), 1e-2);
    EXPECT_NEAR(m.head(te + 1, "main @ 60.000000 m"), behind(q), 1e-2) << at;  // one reach away one row later
    const auto told = std::count_if(m.run.warnings.begin(), m.run.warnings.end(), [](const std::string& w) {
      return w.find("next row of the grid, 0.03 s later") != std::string::npos;
    });
    EXPECT_EQ(told, at > 0.51 ? 1 : 0);
  }
}

struct Power {
  double at;
  bool on;
  int pumps = 0;  ///< 0 = all
};

/// Speed of a set of pumps at 12, 25 and 40 s after its events, as a share of the rated speed; its flow in L/s.
struct Powered {
  std::vector<double> speed, flow;
};
Powered powered(const std::vector<Power>& events, int count) {
  CaseBuilder b;
  b.basin("sump", 0.0);
  b.basin("upper", 30.0);
  rising_main(b, 600.0, 0.4, 0.02, 1200.0);
  auto& pump = b.pump("pump", "sump", "delivery", {{0.0, 50.0}, {0.1, 40.0}, {0.2, 20.0}});
  pump.count = count;
  pump.shut_off_torque = exact(0.45, Dimension::share);
  pump.speed = exact(100.0, Dimension::rotational_speed);
  pump.efficiency = exact(0.8, Dimension::share);
  pump.inertia = exact(5.0, Dimension::inertia);
  pump.rated_flow = exact(0.1, Dimension::flow);
  pump.rated_head = exact(40.0, Dimension::length);
  for (const Power& p : events) {
    auto& event = b.trip_pump("pump", p.at);
    event.tripping = p.pumps;
    if (!p.on) continue;
    event.kind = network::EventKind::start_pump;
    event.over = exact(2.0, Dimension::time);
  }
  b.surge(40.0, 10).cavities = network::Cavities::off;
  b.c.surge.grid_check = false;
  const Marched m(b);
  EXPECT_TRUE(m.run.completed) << m.run.transient.status;
  Powered p;
  for (const double t : {12.0, 25.0, 40.0}) {
    p.speed.push_back(m.series(m.row_at(t), "pump speed") / 100.0);
    p.flow.push_back(1e3 * m.series(m.row_at(t), "pump flow"));
  }
  return p;
}

TEST(Pump, FollowsEveryTripAndStart) {
  {
    const Powered p = powered({{1.0, false}, {6.0, true}, {16.0, false}}, 1);
    EXPECT_EQ(p.speed[0], 1.0);
    EXPECT_LT(p.speed[1], 0.6);
    EXPECT_EQ(p.flow[2], 0.0);
  }
  {
    const Powered p = powered({{0.0, true}, {14.0, false}, {30.0, true}}, 1);
    EXPECT_EQ(p.speed[0], 1.0);
    EXPECT_GT(p.flow[0], 50.0);
    EXPECT_LT(p.speed[1], 0.6);
    EXPECT_EQ(p.speed[2], 1.0);
  }
  {  // as written in the file, or in order of time: the same
    const Powered p = powered({{20.0, true}, {1.0, false}}, 1), q = powered({{1.0, false}, {20.0, true}}, 1);
    EXPECT_LT(p.speed[0], 0.6);
    EXPECT_EQ(p.speed[1], 1.0);
    EXPECT_EQ(p.speed, q.speed);
    EXPECT_EQ(p.flow, q.flow);
  }
}

TEST(Pump, OfASetAsManyTripAndStartAsAreNamed) {
  const double both = powered({}, 2).flow[2], one = powered({}, 1).flow[2];
  // one trips, then the other one: an event takes running pumps
  const Powered p = powered({{1.0, false, 1}, {14.0, false, 1}}, 2);
  EXPECT_NEAR(p.flow[0], one, 0.05 * one);
  EXPECT_EQ(p.flow[2], 0.0);
  // both trip though one was written to trip later; the later event finds none that runs
  const Powered q = powered({{14.0, false, 1}, {1.0, false}}, 2);
  EXPECT_EQ(q.flow[1], 0.0);
  // both at rest, one starts, later the other one
  const Powered r = powered({{0.0, true, 1}, {14.0, true, 1}}, 2);
  EXPECT_NEAR(r.flow[0], one, 0.05 * one);
  EXPECT_NEAR(r.flow[2], both, 0.02 * both);
}

TEST(CheckValve, AnInstantReversalStartsItsDelayAtOnce) {
  CaseBuilder b;
  b.basin("lower", 31.0);
  b.basin("upper", 30.0);
  rising_main(b, 600.0, 0.3, 0.02, 1200.0);
  auto& check = b.check_valve("check", "lower", "delivery");
  check.k = exact(1e-6);
  check.bore = exact(0.3, Dimension::length);
  check.rule.kind = network::CheckValveKind::delay;
  check.rule.delay = exact(0.2, Dimension::time);
  b.move_basin("lower", 0.5, -60.0, 0.0);  // 91 m at once: 0.74 m/s less at once, the flow turns
  b.surge(2.0, 10).cavities = network::Cavities::off;
  b.c.surge.grid_check = false;
  const Marched m(b);
  ASSERT_TRUE(m.run.completed);
  ASSERT_LT(m.flow(m.row_at(0.55), "delivery"), 0.0);
  double shut = -1.0;
  for (const auto& e : m.run.events)
    if (e.kind == "check_shut" && shut < 0.0) shut = e.time;
  EXPECT_NEAR(shut, 0.7, 1e-9);  // a row of the grid
}

TEST(CheckValve, ShutsAtTheReverseVelocityOneRowLater) {  // T09h with a = 5000 m/s
  for (const double reverse : {0.0, 0.15}) {
    CaseBuilder b;
    b.basin("lower", 0.0);
    b.basin("upper", 25.0);
    auto& p = rising_main(b, 400.0, 0.3, 0.02, 5000.0);
    (void)p;
    auto& check = b.check_valve("check", "lower", "delivery");
    check.k = exact(1e-6);
    check.bore = exact(0.3, Dimension::length);
    if (reverse > 0.0) {
      check.rule.kind = network::CheckValveKind::reverse_velocity;
      check.rule.reverse_velocity = exact(reverse, Dimension::velocity);
      check.rule.bore = exact(0.3, Dimension::length);
    }
    const double speed = 1.6, driving = 25.0 + 0.02 * 400.0 / 0.3 * speed * speed / (2.0 * g);
    b.c.basins[0].level = exact(driving, Dimension::length);
    b.move_basin("lower", 0.0, 0.0, 0.0);
    auto& surge = b.surge(6.0, 40);
    surge.cavities = network::Cavities::off;
    surge.friction_in_time = network::FrictionInTime::fixed;
    surge.grid_check = false;
    const Marched m(b);
    ASSERT_TRUE(m.run.completed) << m.run.transient.status;
    double shut = -1.0;
    for (const auto& e : m.run.events)
      if (e.kind == "check_shut" && shut < 0.0) shut = e.time;
    if (reverse > 0.0) {
      EXPECT_NEAR(shut, 2.7433689, 0.02 * 2.7433689);
      const std::size_t row = m.row_at(shut);
      const double stopped = -m.flow(row - 1, "delivery") / area(0.3);
      EXPECT_NEAR(
          m.head(row, "delivery") - m.head(row - 1, "delivery"), 5000.0 * stopped / g, 0.02 * 5000.0 * stopped / g);
    } else {
      EXPECT_NEAR(shut, 2.4985371, 0.0555 * 2.4985371);
    }
    const double tolerance = 0.04846907560517566 * 1.6;
    for (const Row& r : reference_rows("transient/T09h_series.csv")) {
      const double t = std::stod(r[0]);
      if (t > shut - 2.0 * m.run.grid.time_step || m.row_at(t) >= m.rows()) break;
      ASSERT_NEAR(m.flow(m.row_at(t), "delivery") / area(0.3), std::stod(r[1]), tolerance) << t;
    }
  }
}

TEST(Opening, AtOnceAndSlowlyFollowTheRigidColumn) {  // T09a, T09f
  {
    ValveLine line({.length = 900.0, .wave_speed = 1000.0, .bore = 0.5, .level = 18.0, .flow = 0.0, .factor = 0.02});
    line.valve->k = exact(4.0);
    line.valve->bore = exact(0.5, Dimension::length);
    line.valve->opening = exact(0.0, Dimension::share);
    line.b.move_valve("valve", 0.0, 1.0, 0.0);
    auto& surge = line.b.surge(60.0, 40);
    surge.cavities = network::Cavities::off;
    surge.friction_in_time = network::FrictionInTime::fixed;
    surge.grid_check = false;
    const Marched m(line.b);
    for (const Row& r : reference_rows("transient/T09a_series.csv")) {
      const double t = std::stod(r[0]);
      if (m.row_at(t) >= m.rows()) break;
      ASSERT_NEAR(m.flow(m.row_at(t), "end") / area(0.5), std::stod(r[1]), 0.08269235222740562 * 2.9708559) << t;
    }
    EXPECT_NEAR(m.flow(m.rows() - 1, "end"), 0.5833262, 3e-3 * 0.5833262);
  }
  ValveLine line({.length = 700.0, .wave_speed = 5000.0, .bore = 0.4, .level = 35.0, .flow = 0.0, .factor = 0.018});
  line.valve->area = exact(0.0093567542, Dimension::area);
  line.valve->discharge_coefficient = exact(1.0);
  line.valve->opening = exact(0.0, Dimension::share);
  line.b.move_valve("valve", 0.0, 1.0, 20.0);
  auto& surge = line.b.surge(60.0, 40);
  surge.cavities = network::Cavities::off;
  surge.friction_in_time = network::FrictionInTime::fixed;
  surge.grid_check = false;
  const Marched m(line.b);
  for (const Row& r : reference_rows("transient/T09f_series.csv")) {
    const double t = std::stod(r[0]);
    if (m.row_at(t) >= m.rows()) break;
    ASSERT_NEAR(m.flow(m.row_at(t), "end") / area(0.4), std::stod(r[1]), 0.0018060725540362886 * 1.8) << t;
    if (t > 2.0) {
      ASSERT_NEAR(m.head(m.row_at(t), "end"), std::stod(r[2]), 0.0003542785736063081 * 35.0) << t;
    }
  }
}

}  // namespace
}  // namespace headband::test
