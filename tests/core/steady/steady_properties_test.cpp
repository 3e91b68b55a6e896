// SPDX-License-Identifier: MIT
//
// Identities over generated cases, fixed seeds: what must hold whatever the numbers are.

#include "core/steady/steady.hpp"
#include "tests/support/case_builder.hpp"

#include <gtest/gtest.h>

#include <cmath>
#include <random>
#include <string>

namespace headband {
namespace {

using network::FrictionLaw;
using test::CaseBuilder;
using test::Dimension;
using test::exact;

class Dice {
 public:
  explicit Dice(std::uint64_t seed) : bits_(seed) {}
  double between(double low, double high) { return low + (high - low) * u_(bits_); }
  /// Log-uniform.
  double about(double low, double high) { return low * std::pow(high / low, u_(bits_)); }
  int upto(int most) { return static_cast<int>(u_(bits_) * (most + 1)); }
  bool chance(double p) { return u_(bits_) < p; }

 private:
  std::mt19937_64 bits_;
  std::uniform_real_distribution<double> u_{0.0, 1.0};
};

std::string numbered(const char* word, int i) {
  std::string text(word);
  return text.append(std::to_string(i));
}

void roll_friction(Dice& dice, network::Pipe& pipe, double bore) {
  switch (dice.upto(5)) {
    case 0:
      pipe.roughness = {};
      pipe.hazen_williams = exact(dice.between(70.0, 150.0));
      break;
    case 1:
      pipe.roughness = {};
      pipe.manning = exact(dice.between(0.009, 0.016));
      break;
    case 2:
      pipe.roughness = {};
      pipe.friction_factor = exact(dice.between(0.01, 0.04));
      break;
    default:
      pipe.roughness = exact(bore * dice.about(1e-6, 3e-2), Dimension::length);
      break;
  }
  if (dice.chance(0.3)) CaseBuilder::fitting(pipe, "bends", dice.between(0.1, 5.0), 2.0);
}

/// A connected network of 3 to 12 places with loops, one to three basins, sometimes a pump, a valve, a check valve.
CaseBuilder roll_network(Dice& dice) {
  CaseBuilder build(dice.between(700.0, 1100.0), dice.about(5e-7, 2e-4));
  build.c.friction.law.options[0].choice = std::vector{FrictionLaw::colebrook_white,
                                                       FrictionLaw::haaland,
                                                       FrictionLaw::serghides,
                                                       FrictionLaw::churchill,
                                                       FrictionLaw::smooth}[static_cast<std::size_t>(dice.upto(4))];
  const int places = 3 + dice.upto(9), basins = 1 + dice.upto(2);
  const auto place = [&](int i) { return i < basins ? numbered("basin ", i) : numbered("place ", i); };
  for (int i = 0; i < basins; ++i) build.basin(place(i), dice.between(20.0, 80.0));
  int pipes = 0;
  const auto add_pipe = [&](int a, int b) {
    const double bore = dice.between(0.05, 0.6);
    roll_friction(
        dice, build.pipe(numbered("pipe ", pipes++), place(a), place(b), dice.about(5.0, 5000.0), bore), bore);
  };
  for (int i = 1; i < places; ++i) add_pipe(dice.upto(i - 1), i);
  for (int extra = dice.upto(4); extra > 0; --extra) {
    const int a = dice.upto(places - 1), b = dice.upto(places - 1);
    if (a != b) add_pipe(a, b);
  }
  for (int i = basins; i < places; ++i)
    if (dice.chance(0.4)) build.draw_off(numbered("out ", i), place(i), dice.between(-0.01, 0.03));
  if (dice.chance(0.3))
    build.pump("pump",
               place(0),
               place(places - 1),
               {{0.0, dice.between(10.0, 80.0)}, {dice.between(0.02, 0.2), dice.between(2.0, 9.0)}});
  if (dice.chance(0.3))
    build.valve_by_area("valve", place(dice.upto(places - 2)), place(places - 1), dice.about(1e-5, 0.05));
  if (dice.chance(0.3))
    build.check_valve("check", place(places - 1), place(dice.upto(places - 2))).kv =
        exact(dice.about(1e-3, 1.0), Dimension::kv);
  if (dice.chance(0.2)) build.valve_by_area("vent", place(places - 1), "air", dice.about(1e-5, 0.01));
  return build;
}

TEST(SteadyProperties, TenThousandNetworksConvergeAndBalance) {
  Dice dice(20260101);
  int explicit_ones = 0, most_iterations = 0;
  for (int trial = 0; trial < 10000; ++trial) {
    const auto c = roll_network(dice).finish();
    ASSERT_TRUE(network::validate(c).empty()) << trial << " " << network::validate(c).front().what;
    const auto plan = network::make_plan(c);
    const auto values = network::realise(c, plan);
    steady::SteadySolver solver(c, plan);
    steady::SteadyState<1> state;
    solver.solve(values, state);
    ASSERT_TRUE(steady::is_usable(state.status[0])) << trial;
    explicit_ones += solver.is_explicit() ? 1 : 0;
    most_iterations = std::max(most_iterations, state.iterations);

    double flowing = 0.0, head_scale = 1.0;
    std::vector<double> sum(plan.places.size(), 0.0);
    for (std::size_t i = 0; i < plan.pipes.size(); ++i) {
      const double flow = state.pipe_flow[i][0];
      flowing += std::abs(flow);
      sum[plan.pipes[i].from.at()] -= flow;
      sum[plan.pipes[i].to.at()] += flow;
      const double from = state.place_head[plan.pipes[i].from.at()][0], to = state.place_head[plan.pipes[i].to.at()][0];
      head_scale = std::max({head_scale, std::abs(from), std::abs(to)});
      // every loop closes to far under 1 mm, since every pipe loses what its ends differ by
      ASSERT_NEAR(from - to, state.head_loss[i][0], 1e-8 * std::max(1.0, std::abs(state.head_loss[i][0]))) << trial;
      ASSERT_GE(state.head_loss[i][0] * flow, 0.0) << trial;
    }
    ASSERT_LE(state.residual[0], 1e-9 * std::max(head_scale, 100.0)) << trial;
    for (std::size_t d = 0; d < plan.devices.size(); ++d) {
      sum[plan.devices[d].from.at()] -= state.device_flow[d][0];
      if (plan.devices[d].to.exists()) sum[plan.devices[d].to.at()] += state.device_flow[d][0];
      const bool one_way = plan.devices[d].kind == network::DeviceKind::pump ||
                           plan.devices[d].kind == network::DeviceKind::check_valve ||
                           (plan.devices[d].kind == network::DeviceKind::valve && !plan.devices[d].to.exists());
      if (one_way) {
        ASSERT_GE(state.device_flow[d][0], 0.0) << trial;
      }
      flowing += std::abs(state.device_flow[d][0]);
    }
    for (std::size_t i = 0; i < sum.size(); ++i) {
      if (plan.places[i].basin >= 0) continue;
      ASSERT_NEAR(sum[i], 0.0, 1e-9 * (flowing + 1e-3)) << trial;
    }
  }
  EXPECT_GT(explicit_ones, 100);  // both ways of solving were met
  EXPECT_LE(most_iterations, 80);
}

/// One pipe, everything rolled; the loss must rise with what the argument names.
double loss_of_line(double flow, double roughness, double viscosity, double bore, FrictionLaw law) {
  CaseBuilder build(950.0, viscosity);
  build.basin("tank", 0.0);
  build.pipe("line", "tank", "end", 1000.0, bore).roughness = exact(roughness, Dimension::length);
  build.draw_off("out", "end", flow);
  build.c.friction.law.options[0].choice = law;
  const auto c = build.finish();
  const auto plan = network::make_plan(c);
  steady::SteadySolver solver(c, plan);
  steady::SteadyState<1> state;
  solver.solve(network::realise(c, plan), state);
  return state.head_loss[0][0];
}

TEST(SteadyProperties, LossRisesWithFlowRoughnessAndViscosity) {
  Dice dice(20260202);
  const std::vector laws{FrictionLaw::colebrook_white,
                         FrictionLaw::haaland,
                         FrictionLaw::swamee_jain,
                         FrictionLaw::serghides,
                         FrictionLaw::zigrang_sylvester,
                         FrictionLaw::churchill};
  for (int trial = 0; trial < 10000; ++trial) {
    const FrictionLaw law = laws[static_cast<std::size_t>(dice.upto(5))];
    const double bore = dice.between(0.05, 1.2), roughness = bore * dice.about(1e-6, 2e-2);
    const double reynolds = dice.chance(0.2) ? dice.about(1.0, 1500.0) : dice.about(6e3, 5e7);
    const double viscosity = dice.about(5e-7, 1e-4);
    const double flow = reynolds * viscosity * 0.25 * 3.141592653589793 * bore;
    const double more = dice.between(1.01, 1.3);
    const double loss = loss_of_line(flow, roughness, viscosity, bore, law);
    EXPECT_GT(loss_of_line(more * flow, roughness, viscosity, bore, law), loss * more * 0.999) << trial;
    EXPECT_GE(loss_of_line(flow, more * roughness, viscosity, bore, law), loss * (1.0 - 1e-12)) << trial;
    EXPECT_GE(loss_of_line(flow, roughness, viscosity * more, bore, law), loss * (1.0 - 1e-12)) << trial;
    EXPECT_NEAR(loss_of_line(-flow, roughness, viscosity, bore, law) / loss, -1.0, 1e-14) << trial;
  }
}

}  // namespace
}  // namespace headband
