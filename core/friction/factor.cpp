// SPDX-License-Identifier: MIT
#include "core/friction/factor.hpp"

#include "core/friction/colebrook.hpp"
#include "core/friction/explicit_laws.hpp"

#include <limits>
#include <type_traits>

namespace headband::friction {

namespace {

constexpr unsigned bit(FrictionLaw law) { return 1U << static_cast<unsigned>(law); }

/// Laws that share the implicit solve, and those without a factor of Reynolds number.
constexpr unsigned root_laws = bit(FrictionLaw::colebrook_white) | bit(FrictionLaw::smooth);
constexpr unsigned factorless_laws =
    bit(FrictionLaw::hazen_williams) | bit(FrictionLaw::manning) | bit(FrictionLaw::none);

/// Least Reynolds number worked with.
constexpr double least_reynolds = 1e-12;

/// No older root at hand: the full solve.
struct NoRoot {};

/// An older root, left alone in `idle` lanes (laminar ones): what stays there must not hang on the other lanes.
template <int W>
struct OlderRoot {
  Lanes<W>& root;
  Mask<W> idle;
};

template <int W>
HEADBAND_INLINE Lanes<W> solve(
    const PreparedRule<W>& rule, const Lanes<W>& rough, const Lanes<W>&, const Lanes<W>& inverse, const NoRoot&) {
  return colebrook_root<W>(rough, rule.root_constant * inverse);
}
template <int W>
HEADBAND_INLINE Lanes<W> solve(const PreparedRule<W>& rule,
                               const Lanes<W>& rough,
                               const Lanes<W>& reynolds,
                               const Lanes<W>&,
                               const OlderRoot<W>& older) {
  const Lanes<W> x = colebrook_correct<W>(rough, reynolds, rule.root_shift, older.root, older.idle);
  older.root = select(older.idle, older.root, x);
  return x;
}

template <int W>
HEADBAND_INLINE Turbulent<W> explicit_side(const Root<W>& r) {
  const Lanes<W> inverse = 1.0 / r.x;
  return {r.x, inverse * inverse, -r.dx * inverse};
}

/// One law; Colebrook-White and smooth through the shared solve.
template <int W, class Kept>
HEADBAND_INLINE Turbulent<W> side_of(
    const PreparedRule<W>& rule, FrictionLaw law, const Lanes<W>& reynolds, const Lanes<W>& inverse, const Kept& kept) {
  switch (law) {
    case FrictionLaw::colebrook_white:
    case FrictionLaw::smooth: {
      const Lanes<W> rough = rule.rough_by_reynolds * reynolds;
      return colebrook_side<W>(rough, solve<W>(rule, rough, reynolds, inverse, kept));
    }
    case FrictionLaw::haaland:
      return haaland<W>(rule.rough_term, reynolds);
    case FrictionLaw::swamee_jain:
      return explicit_side<W>(swamee_jain<W>(rule.relative_roughness * (1.0 / 3.7), inverse));
    case FrictionLaw::serghides:
      return explicit_side<W>(serghides<W>(rule.relative_roughness * (1.0 / 3.7), inverse));
    case FrictionLaw::zigrang_sylvester:
      return explicit_side<W>(zigrang_sylvester<W>(rule.relative_roughness * (1.0 / 3.7), inverse));
    case FrictionLaw::churchill:
      return explicit_side<W>(churchill_turbulent<W>(rule.relative_roughness, inverse));
    case FrictionLaw::hazen_williams:
    case FrictionLaw::manning:
    case FrictionLaw::none:
      break;
  }
  return {Lanes<W>(1.0), Lanes<W>(1.0), Lanes<W>(0.0)};
}

/// The turbulent root in lanes of several laws: each law present is evaluated for all lanes and picked where it holds.
template <int W, class Kept>
Turbulent<W> mixed_side(const PreparedRule<W>& rule,
                        const Lanes<W>& reynolds,
                        const Lanes<W>& inverse,
                        const Kept& kept) {
  Turbulent<W> r{Lanes<W>(1.0), Lanes<W>(1.0), Lanes<W>(0.0)};
  constexpr FrictionLaw one_by_one[] = {FrictionLaw::colebrook_white,
                                        FrictionLaw::haaland,
                                        FrictionLaw::swamee_jain,
                                        FrictionLaw::serghides,
                                        FrictionLaw::zigrang_sylvester,
                                        FrictionLaw::churchill};
  for (const FrictionLaw law : one_by_one) {
    const unsigned family = law == FrictionLaw::colebrook_white ? root_laws : bit(law);
    if ((rule.laws_present & family) == 0) continue;
    const Turbulent<W> here = side_of<W>(rule, law, reynolds, inverse, kept);
    Mask<W> on{};
    for (int i = 0; i < W; ++i) on.set(i, (family & bit(rule.laws[static_cast<std::size_t>(i)])) != 0);
    r.x = select(on, here.x, r.x);
    r.factor = select(on, here.factor, r.factor);
    r.half_slope = select(on, here.half_slope, r.half_slope);
  }
  return r;
}

/// Churchill's joint; lanes of the law `churchill` alone also pass here under the other transitions.
template <int W>
HEADBAND_INLINE Factor<W> churchill_factor(const Lanes<W>& laminar,
                                           const Lanes<W>& inverse,
                                           const Lanes<W>& x,
                                           const Lanes<W>& scatter,
                                           const Lanes<W>& turbulent_slope) {
  const Lanes<W> a = power_16<W>(2.8284271247461900976 * x / sqrt(scatter));  // (8 x^2/scatter)^8
  const Joined<W> j = churchill_joint<W>(laminar, inverse, a, turbulent_slope);
  return {j.factor, j.log_slope};
}

/// The smooth step between laminar and turbulent, or the switch.
template <int W>
HEADBAND_INLINE Factor<W> join(const PreparedRule<W>& rule,
                               const Lanes<W>& reynolds,
                               const Lanes<W>& laminar,
                               const Factor<W>& turbulent) {
  const Mask<W> all_turbulent = reynolds >= rule.to;
  if (all(all_turbulent)) return turbulent;
  const Mask<W> all_laminar = (reynolds <= rule.from) & !all_turbulent;
  if (all(all_laminar)) return {laminar, Lanes<W>(-1.0)};
  const Lanes<W> t = (reynolds - rule.from) * rule.one_over_span;
  const Lanes<W> s = t * t * (3.0 - 2.0 * t);
  const Lanes<W> blended = (1.0 - s) * laminar + s * turbulent.factor;
  // d s / d ln Re = 6 t (1 - t) Re / (to - from)
  const Lanes<W> ds = 6.0 * t * (1.0 - t) * (reynolds * rule.one_over_span);
  const Lanes<W> slope =
      (s * turbulent.factor * turbulent.log_slope - (1.0 - s) * laminar + ds * (turbulent.factor - laminar)) / blended;
  Factor<W> f{select(all_laminar, laminar, blended), select(all_laminar, Lanes<W>(-1.0), slope)};
  f.factor = select(all_turbulent, turbulent.factor, f.factor);
  f.log_slope = select(all_turbulent, turbulent.log_slope, f.log_slope);
  return f;
}

/// The same bits come out whatever the other lanes hold: every branch on `all` skips work whose result no lane uses.
template <int W, class Kept>
HEADBAND_INLINE Factor<W> evaluate(const PreparedRule<W>& rule, const Lanes<W>& given, Kept kept) {
  if ((rule.laws_present & ~factorless_laws) == 0) {
    const Lanes<W> nothing = std::numeric_limits<double>::quiet_NaN();
    return {select(rule.no_factor, nothing, Lanes<W>(0.0)), select(rule.no_factor, nothing, Lanes<W>(0.0))};
  }
  const Lanes<W> reynolds = max(given, Lanes<W>(least_reynolds));
  const Lanes<W> inverse = 1.0 / reynolds;
  const Lanes<W> laminar = 64.0 * inverse * rule.laminar_scatter;
  const bool joint_only = rule.uniform && rule.kind == Transition::Kind::churchill;
  const Mask<W> quiet = (reynolds <= rule.from) & (reynolds < rule.to) & !rule.churchill;
  if (rule.uniform && all(quiet)) return {laminar, Lanes<W>(-1.0)};
  if constexpr (std::is_same_v<Kept, OlderRoot<W>>) kept.idle = quiet;

  const Mask<W> low = reynolds < Lanes<W>(least_turbulent_reynolds);
  const Lanes<W> held = select(low, Lanes<W>(least_turbulent_reynolds), reynolds);
  const Lanes<W> held_inverse = select(low, Lanes<W>(1.0 / least_turbulent_reynolds), inverse);
  const Turbulent<W> side = rule.uniform ? side_of<W>(rule, rule.law, held, held_inverse, kept)
                                         : mixed_side<W, Kept>(rule, held, held_inverse, kept);
  const Lanes<W> plain_slope = select(low, Lanes<W>(0.0), 2.0 * side.half_slope);

  if (joint_only) return churchill_factor<W>(laminar, inverse, side.x, rule.scatter, plain_slope);
  Factor<W> turbulent{rule.scatter * side.factor, plain_slope};
  if ((rule.laws_present & bit(FrictionLaw::churchill)) != 0) {
    // the paper's formula is the turbulent side here, its own laminar term included
    const Factor<W> full = churchill_factor<W>(64.0 * held_inverse, held_inverse, side.x, Lanes<W>(1.0), plain_slope);
    Mask<W> on{};
    for (int i = 0; i < W; ++i) on.set(i, rule.laws[static_cast<std::size_t>(i)] == FrictionLaw::churchill);
    turbulent.factor = select(on, rule.scatter * full.factor, turbulent.factor);
    turbulent.log_slope = select(on, select(low, Lanes<W>(0.0), full.log_slope), turbulent.log_slope);
  }
  Factor<W> f = join<W>(rule, reynolds, laminar, turbulent);
  if (rule.uniform) return f;
  if (any(rule.churchill)) {
    const Factor<W> joint = churchill_factor<W>(laminar, inverse, side.x, rule.scatter, plain_slope);
    f.factor = select(rule.churchill, joint.factor, f.factor);
    f.log_slope = select(rule.churchill, joint.log_slope, f.log_slope);
  }
  const Lanes<W> nothing = std::numeric_limits<double>::quiet_NaN();
  f.factor = select(rule.lossless, Lanes<W>(0.0), select(rule.no_factor, nothing, f.factor));
  f.log_slope = select(rule.lossless, Lanes<W>(0.0), select(rule.no_factor, nothing, f.log_slope));
  return f;
}

}  // namespace

namespace {

/// What the law and the transition of lane `lane` mean for the prepared rule.
template <int W>
void prepare_lane(PreparedRule<W>& p, FrictionLaw law, const Transition& transition, int lane) {
  p.sudden.set(lane, transition.kind == Transition::Kind::sudden);
  p.churchill.set(lane, transition.kind == Transition::Kind::churchill);
  p.lossless.set(lane, law == FrictionLaw::none);
  p.no_factor.set(lane, law == FrictionLaw::hazen_williams || law == FrictionLaw::manning);
  const bool step = transition.kind == Transition::Kind::sudden || !(transition.to > transition.from);
  p.from.set(lane, transition.from);
  p.to.set(lane, step ? transition.from : transition.to);
  p.one_over_span.set(lane, step ? 0.0 : 1.0 / (transition.to - transition.from));
  if (law == FrictionLaw::smooth) {
    p.root_constant.set(lane, prandtl_constant);
    p.root_shift.set(lane, prandtl_shift);
  }
}

/// The same for every lane at once, from a rule of one lane.
template <int W>
void prepare_all(PreparedRule<W>& p, FrictionLaw law, const Transition& transition) {
  PreparedRule<1> one;
  one.root_constant = Lanes<1>(colebrook_constant);
  one.root_shift = Lanes<1>(colebrook_shift);
  prepare_lane<1>(one, law, transition, 0);
  p.from = Lanes<W>(one.from.number);
  p.to = Lanes<W>(one.to.number);
  p.one_over_span = Lanes<W>(one.one_over_span.number);
  p.root_constant = Lanes<W>(one.root_constant.number);
  p.root_shift = Lanes<W>(one.root_shift.number);
  const auto everywhere = [](bool on) { return Lanes<W>(on ? 1.0 : 0.0) > Lanes<W>(0.5); };
  p.sudden = everywhere(one.sudden[0]);
  p.churchill = everywhere(one.churchill[0]);
  p.lossless = everywhere(one.lossless[0]);
  p.no_factor = everywhere(one.no_factor[0]);
}

}  // namespace

template <int W>
void refresh(PreparedRule<W>& p,
             const Lanes<W>& relative_roughness,
             const Lanes<W>& scatter,
             const Lanes<W>& laminar_scatter) {
  p.relative_roughness = relative_roughness;
  p.scatter = scatter;
  p.laminar_scatter = laminar_scatter;
  p.rough_by_reynolds = relative_roughness * colebrook_rough;
  if ((p.laws_present & bit(FrictionLaw::smooth)) != 0) {
    for (int lane = 0; lane < W; ++lane)
      if (p.laws[static_cast<std::size_t>(lane)] == FrictionLaw::smooth) p.rough_by_reynolds.set(lane, 0.0);
  }
  if ((p.laws_present & bit(FrictionLaw::haaland)) != 0) p.rough_term = base::pow(relative_roughness / 3.7, 1.11);
}

template <int W>
PreparedRule<W> prepare(const FactorRule<W>& rule) {
  PreparedRule<W> p;
  p.law = rule.law[0];
  p.kind = rule.transition[0].kind;
  p.laws = rule.law;
  p.root_constant = Lanes<W>(colebrook_constant);
  p.root_shift = Lanes<W>(colebrook_shift);
  bool alike = true;
  for (std::size_t lane = 0; lane < static_cast<std::size_t>(W); ++lane) {
    p.laws_present |= bit(rule.law[lane]);
    p.uniform = p.uniform && rule.law[lane] == p.law && rule.transition[lane].kind == p.kind;
    alike = alike && rule.law[lane] == p.law && rule.transition[lane] == rule.transition[0];
  }
  if (alike) {
    prepare_all<W>(p, p.law, rule.transition[0]);
  } else {
    for (int i = 0; i < W; ++i)
      prepare_lane<W>(p, rule.law[static_cast<std::size_t>(i)], rule.transition[static_cast<std::size_t>(i)], i);
  }
  p.root_kept = (p.laws_present & root_laws) != 0;
  const bool swift_law = p.law == FrictionLaw::haaland || (bit(p.law) & root_laws) != 0;
  p.swift = p.uniform && swift_law && p.kind != Transition::Kind::churchill;
  p.all_turbulent_from = max(p.to, Lanes<W>(least_turbulent_reynolds));
  p.rough_term = Lanes<W>(0.0);
  refresh<W>(p, rule.relative_roughness, rule.scatter, rule.laminar_scatter);
  return p;
}

PreparedRule<8> in_every_lane(const PreparedRule<1>& rule) {
  PreparedRule<8> p;
  p.uniform = rule.uniform;
  p.swift = rule.swift;
  p.root_kept = rule.root_kept;
  p.law = rule.law;
  p.kind = rule.kind;
  p.laws_present = rule.laws_present;
  p.laws.fill(rule.law);
  const auto everywhere = [](bool on) { return Lanes<8>(on ? 1.0 : 0.0) > Lanes<8>(0.5); };
  p.sudden = everywhere(rule.sudden[0]);
  p.churchill = everywhere(rule.churchill[0]);
  p.lossless = everywhere(rule.lossless[0]);
  p.no_factor = everywhere(rule.no_factor[0]);
  p.from = rule.from.number;
  p.to = rule.to.number;
  p.one_over_span = rule.one_over_span.number;
  p.all_turbulent_from = rule.all_turbulent_from.number;
  p.relative_roughness = rule.relative_roughness.number;
  p.rough_by_reynolds = rule.rough_by_reynolds.number;
  p.root_constant = rule.root_constant.number;
  p.root_shift = rule.root_shift.number;
  p.rough_term = rule.rough_term.number;
  p.scatter = rule.scatter.number;
  p.laminar_scatter = rule.laminar_scatter.number;
  return p;
}

template <int W>
Factor<W> darcy_factor(const PreparedRule<W>& rule, const Lanes<W>& reynolds) {
  return evaluate<W>(rule, reynolds, NoRoot{});
}

std::array<Factor<8>, 2> darcy_factor_of_two(const PreparedRule<8>& first,
                                             const Lanes<8>& first_reynolds,
                                             const PreparedRule<8>& second,
                                             const Lanes<8>& second_reynolds) {
  const bool by_root = first.swift && second.swift && (bit(first.law) & bit(second.law) & root_laws) != 0;
  const bool turbulent =
      all((first_reynolds >= first.all_turbulent_from) & (second_reynolds >= second.all_turbulent_from));
  if (!by_root || !turbulent) return {darcy_factor<8>(first, first_reynolds), darcy_factor<8>(second, second_reynolds)};
  const auto both = [](const Lanes<8>& a, const Lanes<8>& b) { return base::side_by_side(a, b); };
  const Lanes<16> rough = both(first.rough_by_reynolds * first_reynolds, second.rough_by_reynolds * second_reynolds);
  const Lanes<16> inverse = 1.0 / both(first_reynolds, second_reynolds);
  const Lanes<16> x = colebrook_root<16>(rough, both(first.root_constant, second.root_constant) * inverse);
  const Turbulent<16> side = colebrook_side<16>(rough, x);
  const Lanes<16> slope = 2.0 * side.half_slope;
  return {Factor<8>{first.scatter * base::first_eight(side.factor), base::first_eight(slope)},
          Factor<8>{second.scatter * base::last_eight(side.factor), base::last_eight(slope)}};
}

template <int W>
Factor<W> darcy_factor(const FactorRule<W>& rule, const Lanes<W>& reynolds) {
  return darcy_factor<W>(prepare<W>(rule), reynolds);
}

template <int W>
Factor<W> darcy_factor_near(const PreparedRule<W>& rule, const Lanes<W>& reynolds, Lanes<W>& root) {
  return evaluate<W>(rule, reynolds, OlderRoot<W>{root, {}});
}

template void refresh<1>(PreparedRule<1>&, const Lanes<1>&, const Lanes<1>&, const Lanes<1>&);
template void refresh<8>(PreparedRule<8>&, const Lanes<8>&, const Lanes<8>&, const Lanes<8>&);
template PreparedRule<1> prepare<1>(const FactorRule<1>&);
template PreparedRule<8> prepare<8>(const FactorRule<8>&);
template Factor<1> darcy_factor<1>(const PreparedRule<1>&, const Lanes<1>&);
template Factor<8> darcy_factor<8>(const PreparedRule<8>&, const Lanes<8>&);
template Factor<1> darcy_factor<1>(const FactorRule<1>&, const Lanes<1>&);
template Factor<8> darcy_factor<8>(const FactorRule<8>&, const Lanes<8>&);
template Factor<1> darcy_factor_near<1>(const PreparedRule<1>&, const Lanes<1>&, Lanes<1>&);
template Factor<8> darcy_factor_near<8>(const PreparedRule<8>&, const Lanes<8>&, Lanes<8>&);

}  // namespace headband::friction
