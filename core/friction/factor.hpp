#pragma once
// SPDX-License-Identifier: MIT
//
// Reynolds number to Darcy factor: law, transition, scatter. The laws stand in explicit_laws.hpp and colebrook.hpp.

#include "core/base/lanes.hpp"
#include "core/friction/explicit_laws.hpp"
#include "core/friction/law.hpp"

#include <array>

namespace headband::friction {

using base::Lanes;
using base::Mask;
using base::PerLane;

/// Everything that turns a Reynolds number into a Darcy factor, for W draws of one pipe.
template <int W>
struct FactorRule {
  PerLane<FrictionLaw, W> law{};
  PerLane<Transition, W> transition{};
  Lanes<W> relative_roughness = 0.0;  ///< roughness / bore [-], >= 0
  Lanes<W> scatter = 1.0;             ///< factor on the turbulent Darcy factor [-]
  Lanes<W> laminar_scatter = 1.0;     ///< factor on the laminar one [-]
};

/// Darcy factor and its slope.
template <int W>
struct Factor {
  Lanes<W> factor;     ///< Darcy f [-]
  Lanes<W> log_slope;  ///< d ln f / d ln Re [-]
};

/// A rule made ready for many Reynolds numbers: what does not depend on the flow is computed once.
template <int W>
struct PreparedRule {
  bool uniform = true;        ///< every lane the same law and kind of transition
  bool swift = false;         ///< one law that turbulent_near knows, and no joint
  bool root_kept = false;     ///< some lane solves for a root (Colebrook-White, smooth): see darcy_factor_near
  FrictionLaw law{};          ///< of lane 0
  Transition::Kind kind{};    ///< of lane 0
  unsigned laws_present = 0;  ///< bit per FrictionLaw
  PerLane<FrictionLaw, W> laws{};
  Mask<W> sudden{}, churchill{}, lossless{}, no_factor{};  ///< lanes of that transition or law
  Lanes<W> from, to, one_over_span;  ///< of the transition; for `sudden` both ends are its Reynolds number
  Lanes<W> all_turbulent_from;       ///< Reynolds number from which `swift` holds
  Lanes<W> relative_roughness;       ///< e
  Lanes<W> rough_by_reynolds;        ///< e/(3.7 2.51); 0 in lanes of the smooth law
  Lanes<W> root_constant;            ///< 2.51; 10^0.4 in lanes of the smooth law
  Lanes<W> root_shift;               ///< k ln of that
  Lanes<W> rough_term;               ///< (e/3.7)^1.11 where Haaland is used
  Lanes<W> scatter, laminar_scatter;
};

template <int W>
[[nodiscard]] PreparedRule<W> prepare(const FactorRule<W>& rule);

/// Gives a prepared rule the numbers of other draws whose laws and transitions are the same: the bits of `prepare`.
template <int W>
void refresh(PreparedRule<W>& prepared,
             const Lanes<W>& relative_roughness,
             const Lanes<W>& scatter,
             const Lanes<W>& laminar_scatter);

/// The rule of one draw in every lane, for places in the lanes instead of draws.
[[nodiscard]] PreparedRule<8> in_every_lane(const PreparedRule<1>& rule);

/// Darcy factor f(Re) with laminar part, transition and scatter (conventions k and l of the case file).
/// `sudden`: laminar below its Reynolds number, turbulent from it on. Churchill's joint is used with any law; the law
/// `churchill` is the paper's full formula under every transition. `none`: factor 0. Hazen-Williams and Manning have no
/// factor of their own (see head_loss.hpp): not a number.
/// @param reynolds >= 0; below 1e-12 the factor of 1e-12 (the loss is 0 there anyway)
/// Accuracy: Colebrook-White 1e-12 relative of the exact root; explicit laws 1e-14. The same bits for every W.
/// The turbulent factor of any law is held at its value at Re = 100 below that.
template <int W>
[[nodiscard]] Factor<W> darcy_factor(const FactorRule<W>& rule, const Lanes<W>& reynolds);

/// The same with a rule made ready: the form for loops. Identical bits to the form above.
template <int W>
[[nodiscard]] Factor<W> darcy_factor(const PreparedRule<W>& rule, const Lanes<W>& reynolds);

/// Two rules of eight draws each, at a Reynolds number each: the bits of `darcy_factor` one by one. A root waits for
/// its own logarithms and quotients most of the time; two at once fill the waiting.
[[nodiscard]] std::array<Factor<8>, 2> darcy_factor_of_two(const PreparedRule<8>& first,
                                                           const Lanes<8>& first_reynolds,
                                                           const PreparedRule<8>& second,
                                                           const Lanes<8>& second_reynolds);

/// The same for a march in time, with the last root 1/sqrt(f) of Colebrook-White or the smooth law kept by the caller
/// per section: one logarithm where the flow changed by a few per cent, else the full solve. The factor differs from
/// `darcy_factor` by less than 2e-12 relative.
/// @param root kept between calls; 0 at first. Untouched by laws that need none
template <int W>
[[nodiscard]] Factor<W> darcy_factor_near(const PreparedRule<W>& rule, const Lanes<W>& reynolds, Lanes<W>& root);

/// The turbulent side where the rule is `swift` and every lane at or above `all_turbulent_from`: with the scatter on
/// it, the bits of `darcy_factor_near`. Inline, for the inner loop of the march. Two quotients and a logarithm, from a
/// root close by where the law needs one. W = 16, V = 8: two rows of the same eight draws.
template <int W, int V>
[[nodiscard]] HEADBAND_INLINE Turbulent<W> turbulent_near(const PreparedRule<V>& rule,
                                                          const Lanes<W>& reynolds,
                                                          Lanes<W>& root) {
  if (rule.law == FrictionLaw::haaland) return haaland<W>(base::for_rows<W>(rule.rough_term), reynolds);
  const Lanes<W> rough = base::for_rows<W>(rule.rough_by_reynolds) * reynolds;
  root = colebrook_correct<W>(rough, reynolds, base::for_rows<W>(rule.root_shift), root);
  return colebrook_side<W>(rough, root);
}

extern template PreparedRule<1> prepare<1>(const FactorRule<1>&);
extern template PreparedRule<8> prepare<8>(const FactorRule<8>&);
extern template void refresh<1>(PreparedRule<1>&, const Lanes<1>&, const Lanes<1>&, const Lanes<1>&);
extern template void refresh<8>(PreparedRule<8>&, const Lanes<8>&, const Lanes<8>&, const Lanes<8>&);
extern template Factor<1> darcy_factor<1>(const FactorRule<1>&, const Lanes<1>&);
extern template Factor<8> darcy_factor<8>(const FactorRule<8>&, const Lanes<8>&);
extern template Factor<1> darcy_factor<1>(const PreparedRule<1>&, const Lanes<1>&);
extern template Factor<8> darcy_factor<8>(const PreparedRule<8>&, const Lanes<8>&);
extern template Factor<1> darcy_factor_near<1>(const PreparedRule<1>&, const Lanes<1>&, Lanes<1>&);
extern template Factor<8> darcy_factor_near<8>(const PreparedRule<8>&, const Lanes<8>&, Lanes<8>&);

}  // namespace headband::friction
