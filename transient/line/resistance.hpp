#pragma once
// SPDX-License-Identifier: MIT
//
// Friction along a characteristic: what one reach takes away from a wave, second order in every mode.
//
// With F(Q) = loss of one reach, the march uses F_A + F'_A (Q_P - Q_A) / 2 (A the foot of the characteristic, P its
// head). Written as H_P = (H_A + carry Q_A) - damp Q_P it costs one divide a node:
//   loss g Q, g growing as |Q|^(1+s):  carry = B + g s/2,  damp = B + g (1 + s/2)
// s = 0 quadratic (fixed factor), s = -1 linear (laminar: the trapezoid), between them the law's own slope.

#include "core/base/elementary.hpp"
#include "core/friction/factor.hpp"

namespace headband::transient {

using base::Lanes;

/// Which terms the pipe's friction needs at each node and step.
enum class Form {
  quadratic,  ///< fixed factors and linear friction: constants only
  darcy,      ///< some lane follows f(Re) at each step
  power       ///< Hazen-Williams at each step
};

/// Friction of one pipe on its grid, per lane.
template <int W>
struct Resistance {
  Form form = Form::quadratic;
  Lanes<W> carry = 0.0;            ///< impedance B of the marched wave speed, less half the linear loss [s/m2]
  Lanes<W> damp = 0.0;             ///< B plus half the linear loss [s/m2]
  Lanes<W> quadratic = 0.0;        ///< loss of a reach = quadratic Q|Q|: fixed factors and fittings [s2/m5]
  Lanes<W> darcy = 0.0;            ///< loss of a reach = darcy f Q|Q|; 0 in lanes that do not follow f(Re) [s2/m5]
  Lanes<W> reynolds = 0.0;         ///< Reynolds number of a flow of 1 m3/s [s/m3]
  friction::PreparedRule<W> rule;  ///< of the lanes that do
  Lanes<W> power = 0.0;            ///< loss of a reach = power Q |Q|^0.852; 0 in lanes that do not follow it
};

/// The friction of one run in every lane, for its rows in the lanes instead of draws.
[[nodiscard]] inline Resistance<8> in_every_lane(const Resistance<1>& r) {
  Resistance<8> wide;
  wide.form = r.form;
  wide.carry = r.carry.number;
  wide.damp = r.damp.number;
  wide.quadratic = r.quadratic.number;
  wide.darcy = r.darcy.number;
  wide.reynolds = r.reynolds.number;
  if (r.form == Form::darcy) wide.rule = friction::in_every_lane(r.rule);
  wide.power = r.power.number;
  return wide;
}

/// What a node sends along a characteristic.
template <int W>
struct Sent {
  Lanes<W> carry;  ///< head carried per unit of flow at the foot [s/m2]
  Lanes<W> damp;   ///< head lost per unit of flow at the head of the characteristic [s/m2]
};

/// Exponent of the Hazen-Williams formula less one.
inline constexpr double hazen_williams_slope = 0.852;
/// Below this Reynolds number the laminar factor is followed to zero flow without dividing by it.
inline constexpr double still = 1e-9;

/// What the flow at a node costs, whichever reach it is sent over.
template <int W>
struct Cost {
  Lanes<W> size;  ///< |Q| [m3/s]
  Lanes<W> loss;  ///< loss of a reach by the law, per unit of flow [s/m2]; unused for quadratic friction
  Lanes<W> half;  ///< half the law's slope s of that loss against flow
};

namespace detail {

/// f(Re) by the general rule, for V lanes or for two rows of them.
template <int W, int V>
[[nodiscard]] friction::Factor<W> general_factor(const friction::PreparedRule<V>& rule,
                                                 const Lanes<W>& reynolds,
                                                 Lanes<W>* root) {
  if constexpr (W == V) {
    return root != nullptr ? friction::darcy_factor_near<W>(rule, reynolds, *root)
                           : friction::darcy_factor<W>(rule, reynolds);
  } else {
    Lanes<V> one = 0.0, two = 0.0;
    if (root != nullptr) {
      one = first_eight(*root);
      two = last_eight(*root);
    }
    const auto a = general_factor<V>(rule, first_eight(reynolds), root != nullptr ? &one : nullptr);
    const auto b = general_factor<V>(rule, last_eight(reynolds), root != nullptr ? &two : nullptr);
    if (root != nullptr) *root = side_by_side(one, two);
    return {side_by_side(a.factor, b.factor), side_by_side(a.log_slope, b.log_slope)};
  }
}

}  // namespace detail

/// The cost of a turbulent flow from the law's side.
template <int W, int V>
[[nodiscard]] HEADBAND_INLINE Cost<W> turbulent_cost(const Resistance<V>& r,
                                                     const Lanes<W>& size,
                                                     const friction::Turbulent<W>& side) {
  using base::for_rows;
  return {size, (for_rows<W>(r.rule.scatter) * side.factor) * (for_rows<W>(r.darcy) * size), side.half_slope};
}

/// What the flow at a node costs. W = 16, V = 8: two rows of the same eight draws.
/// @param root last root of the implicit laws at this node, see friction::darcy_factor_near; null: solved anew
template <int W, Form form, int V>
[[nodiscard]] HEADBAND_INLINE Cost<W> cost_of(const Resistance<V>& r, const Lanes<W>& q, Lanes<W>* root) {
  using base::for_rows;
  Cost<W> c;
  c.size = abs(q);
  if constexpr (form == Form::darcy) {
    const Lanes<W> per_flow = for_rows<W>(r.reynolds), re = c.size * per_flow;
    const bool swift = r.rule.swift && (root != nullptr || !r.rule.root_kept);
    if (swift && all(re >= for_rows<W>(r.rule.all_turbulent_from))) [[likely]] {
      Lanes<W> none = 0.0;
      return turbulent_cost<W>(r, c.size, friction::turbulent_near<W>(r.rule, re, root != nullptr ? *root : none));
    } else {
      const auto f = detail::general_factor<W>(r.rule, max(re, Lanes<W>(still)), root);
      c.loss = f.factor * (for_rows<W>(r.darcy) * max(c.size, still / per_flow));
      c.half = 0.5 * f.log_slope;
    }
  } else if constexpr (form == Form::power) {
    // the loss per unit of flow: loss = g Q, g ~ |Q|^0.852
    static_assert(W == V);
    c.loss = r.power * exp(hazen_williams_slope * log(max(c.size, Lanes<W>(1e-15))));
    c.half = Lanes<W>(0.5 * (hazen_williams_slope - 1.0));
  }
  return c;
}

/// Carry and damp of a node over one reach.
/// @param fitting  extra quadratic loss of this reach (fittings with a place) [s2/m5]
/// @param longer   extra equivalent length of this reach as a share of its own loss [-]
template <int W, Form form, bool placed, int V>
[[nodiscard]] HEADBAND_INLINE Sent<W> sent_over(const Resistance<V>& r,
                                                const Cost<W>& c,
                                                const Lanes<W>* fitting,
                                                const Lanes<W>* longer) {
  using base::for_rows;
  Sent<W> s;
  if constexpr (placed) {
    s = {r.carry, fused(r.quadratic + *fitting, c.size, r.damp)};
  } else {
    s = {for_rows<W>(r.carry), fused(for_rows<W>(r.quadratic), c.size, for_rows<W>(r.damp))};
  }
  if constexpr (form != Form::quadratic) {
    const Lanes<W> g = placed ? c.loss * (Lanes<W>(1.0) + *longer) : c.loss;
    const Lanes<W> share = g * c.half;
    s.carry += share;
    s.damp += g + share;
  }
  return s;
}

/// Carry and damp of a node with flow `q`. @param root see cost_of
template <int W, Form form>
[[nodiscard]] HEADBAND_INLINE Sent<W> sent_by(const Resistance<W>& r,
                                              const Lanes<W>& q,
                                              const Lanes<W>& fitting,
                                              const Lanes<W>& longer,
                                              Lanes<W>* root = nullptr) {
  return sent_over<W, form, true>(r, cost_of<W, form>(r, q, root), &fitting, &longer);
}

/// Loss of one reach at a steady flow [m], signed with the flow: what the march itself takes from a still wave.
template <int W, Form form>
[[nodiscard]] HEADBAND_INLINE Lanes<W> steady_loss(const Resistance<W>& r,
                                                   const Lanes<W>& q,
                                                   const Lanes<W>& fitting,
                                                   const Lanes<W>& longer) {
  const Sent<W> s = sent_by<W, form>(r, q, fitting, longer);
  return (s.damp - s.carry) * q;
}

}  // namespace headband::transient
