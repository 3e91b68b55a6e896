// SPDX-License-Identifier: MIT
#include "transient/line/resistance.hpp"

#include "tests/transient/line/pipe_state.hpp"

#include <gtest/gtest.h>

#include <array>
#include <cmath>

namespace {

using namespace headband;
using base::Lanes;
using friction::FrictionLaw;
using transient::Form;
using transient::Resistance;
using Joint = friction::Transition::Kind;

constexpr double impedance = 400.0;
const Lanes<1> none = 0.0;

Resistance<1> resistance(Form form, FrictionLaw law = FrictionLaw::colebrook_white, Joint joint = Joint::blend) {
  return test::resistance_of(form, law, joint, impedance, 0);
}

template <Form form>
double loss(const Resistance<1>& r, double q) {
  return transient::steady_loss<1, form>(r, Lanes<1>(q), none, none).number;
}

// A steady flow loses what the laws say: quadratic, linear (damp - carry), f(Re) by the plain solver, Hazen-Williams.
TEST(resistance, a_steady_flow_loses_what_the_law_says) {
  for (const double q : {0.3, -0.3, 0.02, 1e-3, -1e-3}) {
    const double size = std::fabs(q), linear = 0.6 * q;
    EXPECT_NEAR(loss<Form::quadratic>(resistance(Form::quadratic), q), 1.7 * q * size + linear, 1e-13);
    const double re = 3e5 * size;
    if (re > 4000.0 || re < 2100.0) {
      const double f = re > 4000.0 ? friction::colebrook_plain(1e-4, re).factor : 64.0 / re;
      EXPECT_NEAR(loss<Form::darcy>(resistance(Form::darcy), q), (40.0 * f + 0.2) * q * size + linear, 1e-12);
    }
    const double power = 1.1 * q * std::pow(size, 0.852) + 0.2 * q * size + linear;
    EXPECT_NEAR(loss<Form::power>(resistance(Form::power), q), power, 1e-13);
  }
}

// Each form takes F + F' (Q_P - Q)/2 along the characteristic: damp - B is half the slope of the loss plus what the
// foot adds, so that damp + carry - 2B = d(loss)/dQ less the loss per flow … checked as carry and damp themselves.
template <Form form>
void expect_semi_implicit(const Resistance<1>& r, double q) {
  const auto sent = transient::sent_by<1, form>(r, Lanes<1>(q), none, none);
  const double h = 1e-6 * std::fabs(q);
  const double slope = (loss<form>(r, q + h) - loss<form>(r, q - h)) / (2.0 * h);
  // H_P = H + B q - F - F'(Q_P - q)/2, hence carry = B - F/q + F'/2 and damp = B + F'/2
  const double per_flow = loss<form>(r, q) / q;
  EXPECT_NEAR(sent.damp.number, impedance + 0.5 * slope, 2e-6);
  EXPECT_NEAR(sent.carry.number, impedance - per_flow + 0.5 * slope, 2e-6);
}

TEST(resistance, carry_and_damp_are_the_semi_implicit_rule) {
  for (const double q : {0.31, -0.31, 0.02, -0.009, 1e-3}) {
    expect_semi_implicit<Form::quadratic>(resistance(Form::quadratic), q);
    for (const FrictionLaw law : {FrictionLaw::colebrook_white, FrictionLaw::haaland, FrictionLaw::churchill})
      for (const Joint joint : {Joint::blend, Joint::churchill})
        expect_semi_implicit<Form::darcy>(resistance(Form::darcy, law, joint), q);
    expect_semi_implicit<Form::power>(resistance(Form::power), q);
  }
}

TEST(resistance, a_wave_does_not_care_which_way_the_flow_runs) {
  for (const double q : {0.31, 0.009, 1e-5, 0.0}) {
    const Resistance<1> r = resistance(Form::darcy);
    const auto on = transient::sent_by<1, Form::darcy>(r, Lanes<1>(q), none, none);
    const auto back = transient::sent_by<1, Form::darcy>(r, Lanes<1>(-q), none, none);
    EXPECT_EQ(on.carry.number, back.carry.number);
    EXPECT_EQ(on.damp.number, back.damp.number);
    EXPECT_TRUE(std::isfinite(on.damp.number));
  }
}

// Sixteen lanes hold two rows of eight draws; the same bits whatever stands in the other lanes.
TEST(resistance, two_rows_at_once_cost_what_each_costs) {
  std::vector<Resistance<1>> alone;
  for (int lane = 0; lane < 8; ++lane)
    alone.push_back(test::resistance_of(Form::darcy, FrictionLaw::colebrook_white, Joint::blend, impedance, lane));
  const Resistance<8> r = test::together(alone, FrictionLaw::colebrook_white, Joint::blend);
  Lanes<8> one_root = 0.0, two_root = 0.0;
  Lanes<16> root = 0.0;
  for (int step = 0; step < 300; ++step) {
    std::array<double, 8> flow_one, flow_two;
    for (std::size_t lane = 0; lane < 8; ++lane) {
      const auto at = static_cast<double>(lane);
      flow_one[lane] = 0.3 * std::cos(0.03 * step + 0.01 * at);  // through rest: all lanes, some, none turbulent
      flow_two[lane] = step % 90 < 45 ? 0.2 : 1e-3 * at;         // jumps
    }
    const Lanes<8> one = base::load_eight(flow_one.data()), two = base::load_eight(flow_two.data());
    const auto both = transient::cost_of<16, Form::darcy>(r, side_by_side(one, two), &root);
    const auto first = transient::cost_of<8, Form::darcy>(r, one, &one_root);
    const auto second = transient::cost_of<8, Form::darcy>(r, two, &two_root);
    for (int lane = 0; lane < 8; ++lane) {
      ASSERT_EQ(both.loss[lane], first.loss[lane]) << step << ' ' << lane;
      ASSERT_EQ(both.half[lane], first.half[lane]) << step << ' ' << lane;
      ASSERT_EQ(both.loss[8 + lane], second.loss[lane]) << step << ' ' << lane;
      ASSERT_EQ(both.half[8 + lane], second.half[lane]) << step << ' ' << lane;
      ASSERT_EQ(root[lane], one_root[lane]);
      ASSERT_EQ(root[8 + lane], two_root[lane]);
      // and what is kept differs from what is solved anew by rounding alone
      const auto anew = transient::cost_of<8, Form::darcy>(r, one, nullptr);
      ASSERT_NEAR(both.loss[lane], anew.loss[lane], 1e-12 * anew.loss[lane]);
    }
  }
}

TEST(resistance, fittings_and_longer_reaches_add_to_their_own_reach) {
  const Resistance<1> r = resistance(Form::darcy);
  for (const double q : {0.3, -0.05}) {
    const double plain = loss<Form::darcy>(r, q);
    const double longer = transient::steady_loss<1, Form::darcy>(r, Lanes<1>(q), none, Lanes<1>(0.5)).number;
    const double fitted = transient::steady_loss<1, Form::darcy>(r, Lanes<1>(q), Lanes<1>(3.0), none).number;
    const double f = friction::colebrook_plain(1e-4, 3e5 * std::fabs(q)).factor;
    EXPECT_NEAR(longer - plain, 0.5 * 40.0 * f * q * std::fabs(q), 1e-12);
    EXPECT_NEAR(fitted - plain, 3.0 * q * std::fabs(q), 1e-12);
  }
}

}  // namespace
