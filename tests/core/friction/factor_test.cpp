// SPDX-License-Identifier: MIT
#include "core/friction/factor.hpp"

#include "core/friction/colebrook.hpp"

#include <gtest/gtest.h>

#include <array>
#include <cmath>
#include <vector>

namespace {

using namespace headband;
using base::Lanes;
using friction::FactorRule;
using friction::FrictionLaw;
using friction::Transition;

constexpr std::array<FrictionLaw, 8> laws{FrictionLaw::colebrook_white,
                                          FrictionLaw::haaland,
                                          FrictionLaw::swamee_jain,
                                          FrictionLaw::serghides,
                                          FrictionLaw::zigrang_sylvester,
                                          FrictionLaw::churchill,
                                          FrictionLaw::smooth,
                                          FrictionLaw::none};
constexpr std::array<Transition, 5> transitions{{{Transition::Kind::blend, 2100.0, 4000.0},
                                                 {Transition::Kind::blend, 600.0, 9000.0},
                                                 {Transition::Kind::sudden, 2300.0, 0.0},
                                                 {Transition::Kind::sudden, 3000.0, 5000.0},
                                                 {Transition::Kind::churchill, 2100.0, 4000.0}}};

FactorRule<1> rule_of(
    FrictionLaw law, Transition transition, double e = 1e-3, double scatter = 1.0, double laminar = 1.0) {
  FactorRule<1> r;
  r.law[0] = law;
  r.transition[0] = transition;
  r.relative_roughness = e;
  r.scatter = scatter;
  r.laminar_scatter = laminar;
  return r;
}
double factor(const FactorRule<1>& rule, double re) { return friction::darcy_factor<1>(rule, re).factor.number; }
double log_slope(const FactorRule<1>& rule, double re) { return friction::darcy_factor<1>(rule, re).log_slope.number; }

TEST(darcy_factor, is_laminar_below_the_transition_and_the_law_above) {
  for (const auto& t : {transitions[0], transitions[1], transitions[2], transitions[3]}) {
    const double end = t.kind == Transition::Kind::blend ? t.to : t.from;
    for (const FrictionLaw law : laws) {
      if (law == FrictionLaw::none) continue;
      const auto rule = rule_of(law, t, 1e-3, 1.07, 0.97);
      for (double re = 1e-3; re < t.from; re *= 3.0) {
        EXPECT_NEAR(factor(rule, re) / (0.97 * 64.0 / re), 1.0, 1e-14);
        EXPECT_EQ(log_slope(rule, re), -1.0);
      }
      // scatter is a factor on the law
      for (double re = end; re < 1e8; re *= 3.0)
        EXPECT_NEAR(factor(rule, re) / (1.07 * factor(rule_of(law, t), re)), 1.0, 1e-14);
    }
  }
  EXPECT_NEAR(
      factor(rule_of(FrictionLaw::colebrook_white, transitions[0]), 1e5) / friction::colebrook_plain(1e-3, 1e5).factor,
      1.0,
      1e-14);
}

TEST(darcy_factor, a_blend_is_the_smooth_step_between_both_at_the_same_reynolds_number) {
  const auto rule = rule_of(FrictionLaw::colebrook_white, transitions[0], 1e-3, 1.1, 0.95);
  for (double re = 2101.0; re < 4000.0; re += 37.0) {
    const double t = (re - 2100.0) / 1900.0, s = t * t * (3.0 - 2.0 * t);
    const double expected = (1.0 - s) * 0.95 * 64.0 / re + s * 1.1 * friction::colebrook_factor(1e-3, re);
    EXPECT_NEAR(factor(rule, re) / expected, 1.0, 1e-14) << re;
  }
}

TEST(darcy_factor, joins_without_a_step_where_it_blends) {
  for (const FrictionLaw law : laws) {
    if (law == FrictionLaw::none) continue;
    const auto rule = rule_of(law, transitions[0], 1e-4, 1.2, 0.9);
    for (const double re : {2100.0, 4000.0}) {
      EXPECT_NEAR(factor(rule, re * (1.0 - 1e-10)) / factor(rule, re * (1.0 + 1e-10)), 1.0, 1e-8);
      // the slope joins as well: s' = 0 at both ends
      EXPECT_NEAR(log_slope(rule, re * (1.0 - 1e-9)), log_slope(rule, re * (1.0 + 1e-9)), 1e-6);
    }
  }
}

TEST(darcy_factor, a_switch_is_laminar_below_and_turbulent_from_its_number_on) {
  const auto rule = rule_of(FrictionLaw::haaland, transitions[2]);
  EXPECT_DOUBLE_EQ(factor(rule, std::nextafter(2300.0, 0.0)), 64.0 / std::nextafter(2300.0, 0.0));
  EXPECT_GT(factor(rule, 2300.0), 1.5 * 64.0 / 2300.0);
}

TEST(darcy_factor, churchills_joint_tends_to_both_sides_for_any_law) {
  for (const FrictionLaw law : laws) {
    if (law == FrictionLaw::none) continue;
    const auto rule = rule_of(law, transitions[4], 1e-3, 1.1, 0.9);
    EXPECT_NEAR(factor(rule, 100.0) / (0.9 * 0.64), 1.0, 1e-12);
    const auto plain = rule_of(law, transitions[2], 1e-3, 1.1, 0.9);
    if (law != FrictionLaw::churchill) {
      EXPECT_NEAR(factor(rule, 1e7) / factor(plain, 1e7), 1.0, 1e-12);
    }
  }
}

TEST(darcy_factor, slopes_agree_with_difference_quotients) {
  for (const FrictionLaw law : laws)
    for (const auto& t : transitions)
      for (const double e : {0.0, 1e-5, 2e-2})
        for (double re = 0.5; re < 1e9; re *= 1.618) {
          if (law == FrictionLaw::none) continue;
          const auto rule = rule_of(law, t, e, 1.13, 0.93);
          const double h = 2e-5;
          const double low = re * std::exp(-h), high = re * std::exp(h);
          // not across a switch, nor across the Reynolds number below which the turbulent factor is held
          if (t.kind == Transition::Kind::sudden && low < t.from && high >= t.from) continue;
          if (low < 100.0 && high > 100.0) continue;
          const double quotient = std::log(factor(rule, high) / factor(rule, low)) / (2.0 * h);
          EXPECT_NEAR(log_slope(rule, re), quotient, 2e-7 * (1.0 + std::abs(quotient)))
              << static_cast<int>(law) << ' ' << static_cast<int>(t.kind) << ' ' << e << ' ' << re;
        }
}

// The loss f Re^2 of a pipe must rise with the flow where the law does not jump: Newton and the march need it.
TEST(darcy_factor, the_loss_rises_with_the_flow_and_with_roughness) {
  for (const FrictionLaw law : laws)
    for (const auto& t : {transitions[0], transitions[1], transitions[4]}) {
      if (law == FrictionLaw::none) continue;
      double last = 0.0;
      for (double re = 1.0; re < 1e9; re *= 1.05) {
        const auto rule = rule_of(law, t, 1e-3);
        const double loss = factor(rule, re) * re * re;
        EXPECT_GT(loss, last) << static_cast<int>(law) << ' ' << re;
        EXPECT_GT(log_slope(rule, re), -2.0);
        last = loss;
        if (re > 5000.0 && law != FrictionLaw::smooth) {
          EXPECT_GT(factor(rule_of(law, t, 2e-3), re), factor(rule, re));
        }
      }
    }
}

TEST(darcy_factor, nothing_overflows_at_rest) {
  for (const FrictionLaw law : laws)
    for (const auto& t : transitions)
      for (const double re : {0.0, 1e-300, 1e-12}) {
        const auto f = friction::darcy_factor<1>(rule_of(law, t), Lanes<1>(re));
        EXPECT_TRUE(std::isfinite(f.factor.number)) << static_cast<int>(law);
        if (law != FrictionLaw::none) {
          EXPECT_EQ(f.factor.number, factor(rule_of(law, t), 1e-12));
          EXPECT_NEAR(f.factor.number * 1e-12, 64.0, 1e-11);
        }
      }
}

TEST(darcy_factor, none_is_frictionless_and_flow_laws_have_no_factor) {
  const auto none = friction::darcy_factor<1>(rule_of(FrictionLaw::none, transitions[0]), Lanes<1>(1e5));
  EXPECT_EQ(none.factor.number, 0.0);
  EXPECT_EQ(none.log_slope.number, 0.0);
  EXPECT_TRUE(std::isnan(factor(rule_of(FrictionLaw::hazen_williams, transitions[0]), 1e5)));
  EXPECT_TRUE(std::isnan(factor(rule_of(FrictionLaw::manning, transitions[0]), 1e5)));
}

/// Eight lanes with laws and transitions picked by `pick`.
struct Eight {
  FactorRule<8> rule;
  std::array<FactorRule<1>, 8> alone;
};
template <class Pick>
Eight eight(Pick pick) {
  Eight r;
  for (int i = 0; i < 8; ++i) {
    const auto at = static_cast<std::size_t>(i);
    const auto [law, transition] = pick(at);
    r.alone[at] = rule_of(law, transition, i == 3 ? 0.0 : 1e-6 * std::pow(5.0, i), 0.9 + 0.03 * i, 1.0 + 0.01 * i);
    r.rule.law[at] = law;
    r.rule.transition[at] = transition;
    r.rule.relative_roughness.set(i, r.alone[at].relative_roughness.number);
    r.rule.scatter.set(i, r.alone[at].scatter.number);
    r.rule.laminar_scatter.set(i, r.alone[at].laminar_scatter.number);
  }
  return r;
}

void expect_same_bits(const Eight& e) {
  FactorRule<8> others = e.rule;  // a rule made for other draws of the same laws, then given these
  others.relative_roughness = 0.01;
  others.scatter = 1.3;
  others.laminar_scatter = 0.7;
  auto prepared = friction::prepare<8>(others);
  friction::refresh<8>(prepared, e.rule.relative_roughness, e.rule.scatter, e.rule.laminar_scatter);
  Lanes<8> root = 0.0;
  std::array<Lanes<1>, 8> root_alone;
  root_alone.fill(0.0);
  for (int step = 0; step < 400; ++step) {
    Lanes<8> re;
    for (int i = 0; i < 8; ++i) {
      // in, through and out of the transition at different times, and reversals
      const double swing = std::sin(0.013 * step + 0.7 * i);
      re.set(i, step % 2 == 0 ? std::pow(10.0, 3.6 + 2.5 * swing) : std::abs(5000.0 * swing));
    }
    const auto f = friction::darcy_factor<8>(prepared, re);
    const auto g = friction::darcy_factor<8>(e.rule, re);
    const auto near = friction::darcy_factor_near<8>(prepared, re, root);
    for (int i = 0; i < 8; ++i) {
      const auto at = static_cast<std::size_t>(i);
      const auto alone = friction::darcy_factor<1>(e.alone[at], Lanes<1>(re[i]));
      ASSERT_EQ(f.factor[i], alone.factor.number) << step << ' ' << i;
      ASSERT_EQ(f.log_slope[i], alone.log_slope.number) << step << ' ' << i;
      ASSERT_EQ(f.factor[i], g.factor[i]);
      const auto n = friction::darcy_factor_near<1>(friction::prepare<1>(e.alone[at]), Lanes<1>(re[i]), root_alone[at]);
      ASSERT_EQ(near.factor[i], n.factor.number) << step << ' ' << i;
      ASSERT_EQ(near.log_slope[i], n.log_slope.number) << step << ' ' << i;
      if (f.factor[i] != 0.0) {
        ASSERT_NEAR(near.factor[i] / f.factor[i], 1.0, 2e-12) << step << ' ' << i;
      }
    }
  }
}

// The inline form of the inner loop: turbulent lanes only, one row of eight draws or two rows of them.
TEST(darcy_factor, the_inline_turbulent_form_gives_the_bits_of_the_general_one) {
  for (const FrictionLaw law : {FrictionLaw::colebrook_white, FrictionLaw::smooth, FrictionLaw::haaland})
    for (const auto& t : {transitions[0], transitions[1], transitions[2]}) {
      const Eight e = eight([&](std::size_t) { return std::pair{law, t}; });
      const auto rule = friction::prepare<8>(e.rule);
      ASSERT_TRUE(rule.swift);
      Lanes<8> root_a = 0.0, root_b = 0.0;
      Lanes<16> root = 0.0;
      for (int step = 0; step < 300; ++step) {
        Lanes<8> a, b;
        for (int i = 0; i < 8; ++i) {
          a.set(i, rule.all_turbulent_from[i] * (1.0 + std::exp(4.0 + 4.0 * std::sin(0.02 * step + i))));
          b.set(i, rule.all_turbulent_from[i] * (1.0 + (step % 50 == 0 ? 1e4 : 0.0) + 0.01 * i));
        }
        const auto both = friction::turbulent_near<16>(rule, side_by_side(a, b), root);
        const auto near_a = friction::darcy_factor_near<8>(rule, a, root_a);
        const auto near_b = friction::darcy_factor_near<8>(rule, b, root_b);
        for (int i = 0; i < 8; ++i) {
          ASSERT_EQ(rule.scatter[i] * both.factor[i], near_a.factor[i]) << step << ' ' << i;
          ASSERT_EQ(2.0 * both.half_slope[i], near_a.log_slope[i]) << step << ' ' << i;
          ASSERT_EQ(rule.scatter[i] * both.factor[8 + i], near_b.factor[i]) << step << ' ' << i;
          ASSERT_EQ(root[i], root_a[i]);
          ASSERT_EQ(root[8 + i], root_b[i]);
        }
      }
    }
  EXPECT_FALSE(friction::prepare<1>(rule_of(FrictionLaw::colebrook_white, transitions[4])).swift);
  EXPECT_FALSE(friction::prepare<1>(rule_of(FrictionLaw::serghides, transitions[0])).swift);
}

// Two rules at once: both by the root and turbulent, which is the short way, or one of them not.
TEST(darcy_factor, two_rules_give_the_bits_of_one_by_one) {
  for (const FrictionLaw law : laws)
    for (const auto& t : transitions)
      for (const FrictionLaw other : {law, FrictionLaw::colebrook_white, FrictionLaw::smooth}) {
        const auto a = friction::prepare<8>(eight([&](std::size_t) { return std::pair{law, t}; }).rule);
        const auto b = friction::prepare<8>(eight([&](std::size_t) { return std::pair{other, transitions[0]}; }).rule);
        for (int step = 0; step < 40; ++step) {
          Lanes<8> re_a, re_b;
          for (int i = 0; i < 8; ++i) {
            re_a.set(i, (step < 10 ? 1.0 : 1e4) * std::pow(10.0, 1.5 + 1.5 * std::sin(0.3 * step + i)));
            re_b.set(i, (step % 10 == 0 ? 1.0 : 1e4) * std::pow(10.0, 2.0 + 1.2 * std::cos(0.4 * step + i)));
          }
          const auto both = friction::darcy_factor_of_two(a, re_a, b, re_b);
          const auto f = friction::darcy_factor<8>(a, re_a), g = friction::darcy_factor<8>(b, re_b);
          const auto same = [](double x, double y) { return x == y || (std::isnan(x) && std::isnan(y)); };
          for (int i = 0; i < 8; ++i) {
            ASSERT_TRUE(same(both[0].factor[i], f.factor[i])) << step << ' ' << i;
            ASSERT_TRUE(same(both[0].log_slope[i], f.log_slope[i])) << step << ' ' << i;
            ASSERT_TRUE(same(both[1].factor[i], g.factor[i])) << step << ' ' << i;
            ASSERT_TRUE(same(both[1].log_slope[i], g.log_slope[i])) << step << ' ' << i;
          }
        }
      }
}

TEST(darcy_factor, a_rule_of_one_draw_in_every_lane_gives_its_bits) {
  for (const FrictionLaw law : laws)
    for (const auto& t : transitions) {
      const auto one = friction::prepare<1>(rule_of(law, t, 2e-4, 1.1, 0.9));
      const auto wide = friction::in_every_lane(one);
      Lanes<8> re, roots = 0.0;
      for (int i = 0; i < 8; ++i) re.set(i, 10.0 * std::pow(7.0, i));
      const auto f = friction::darcy_factor_near<8>(wide, re, roots);
      for (int i = 0; i < 8; ++i) {
        Lanes<1> root = 0.0;
        const auto alone = friction::darcy_factor_near<1>(one, Lanes<1>(re[i]), root);
        ASSERT_EQ(f.factor[i], alone.factor.number);
        ASSERT_EQ(f.log_slope[i], alone.log_slope.number);
        ASSERT_EQ(roots[i], root.number);
      }
    }
}

TEST(darcy_factor, one_draw_and_eight_give_the_same_bits_in_every_law) {
  for (const FrictionLaw law : laws)
    for (const auto& t : transitions) expect_same_bits(eight([&](std::size_t) { return std::pair{law, t}; }));
}

TEST(darcy_factor, one_draw_and_eight_give_the_same_bits_in_mixed_laws) {
  expect_same_bits(eight([](std::size_t i) { return std::pair{laws[i], transitions[0]}; }));
  expect_same_bits(eight([](std::size_t i) { return std::pair{laws[i], transitions[i % 5]}; }));
  expect_same_bits(eight([](std::size_t i) { return std::pair{laws[(i * 3) % 8], transitions[(i + 2) % 5]}; }));
  expect_same_bits(eight([](std::size_t i) { return std::pair{FrictionLaw::colebrook_white, transitions[i % 5]}; }));
  expect_same_bits(eight([](std::size_t i) {
    return std::pair{i % 2 == 0 ? FrictionLaw::smooth : FrictionLaw::colebrook_white, transitions[0]};
  }));
}

}  // namespace
