#pragma once
// SPDX-License-Identifier: MIT
//
// Head lost by friction in a full round pipe, with its slope by the flow: Darcy-Weisbach, Hazen-Williams, Manning.

#include "core/base/elementary.hpp"
#include "core/friction/factor.hpp"

namespace headband::friction {

/// Head lost along the flow and its slope; odd in the flow.
template <int W>
struct HeadLoss {
  Lanes<W> head;   ///< [m], sign of the flow
  Lanes<W> slope;  ///< d head / d flow [s/m2], >= 0
};

/// Darcy-Weisbach: h = f L/D V^2/(2g) with the factor at hand. @param area of the bore [m2] @param flow [m3/s]
template <int W>
[[nodiscard]] HEADBAND_INLINE HeadLoss<W> darcy_loss(const Factor<W>& f,
                                                     const Lanes<W>& length,
                                                     const Lanes<W>& bore,
                                                     const Lanes<W>& area,
                                                     const Lanes<W>& gravity,
                                                     const Lanes<W>& flow) {
  const Lanes<W> resistance = f.factor * length / (2.0 * gravity * bore * area * area);
  const Lanes<W> per_flow = resistance * abs(flow);
  return {per_flow * flow, (2.0 + f.log_slope) * per_flow};
}

/// Coefficient and exponents of the Hazen-Williams formula in SI units, h = 10.67 L Q^1.852/(C^1.852 D^4.8704)
/// (common practice; Williams & Hazen 1905).
inline constexpr double hazen_williams_constant = 10.67, hazen_williams_flow_power = 1.852,
                        hazen_williams_bore_power = 4.8704;

/// Resistance per |Q|^1.852 of Hazen-Williams. @param coefficient C [-]
template <int W>
[[nodiscard]] HEADBAND_INLINE Lanes<W> hazen_williams_resistance(const Lanes<W>& coefficient,
                                                                 const Lanes<W>& length,
                                                                 const Lanes<W>& bore) {
  return hazen_williams_constant * length * base::pow(1.0 / coefficient, hazen_williams_flow_power) *
         base::pow(1.0 / bore, hazen_williams_bore_power);
}

/// Hazen-Williams head loss. @param resistance of hazen_williams_resistance @param flow [m3/s]
template <int W>
[[nodiscard]] HEADBAND_INLINE HeadLoss<W> hazen_williams_loss(const Lanes<W>& resistance, const Lanes<W>& flow) {
  const Lanes<W> per_flow = resistance * base::pow(abs(flow), hazen_williams_flow_power - 1.0);
  return {per_flow * flow, hazen_williams_flow_power * per_flow};
}

/// Resistance per Q|Q| of Manning's formula, V = R^(2/3) S^(1/2)/n with R = D/4: 4^(10/3)/pi^2 n^2 L/D^(16/3).
/// @param roughness n [s/m^(1/3)]
template <int W>
[[nodiscard]] HEADBAND_INLINE Lanes<W> manning_resistance(const Lanes<W>& roughness,
                                                          const Lanes<W>& length,
                                                          const Lanes<W>& bore) {
  constexpr double constant = 10.29359062403265;  // 4^(10/3)/pi^2
  return constant * roughness * roughness * length * base::pow(1.0 / bore, 16.0 / 3.0);
}

/// Manning head loss. @param resistance of manning_resistance @param flow [m3/s]
template <int W>
[[nodiscard]] HEADBAND_INLINE HeadLoss<W> manning_loss(const Lanes<W>& resistance, const Lanes<W>& flow) {
  const Lanes<W> per_flow = resistance * abs(flow);
  return {per_flow * flow, 2.0 * per_flow};
}

/// The Darcy factor that loses the same head at this flow, for reports and for laws of another form [-].
/// @param loss_per_length head / length [-] @param velocity [m/s], not 0
template <int W>
[[nodiscard]] HEADBAND_INLINE Lanes<W> equivalent_factor(const Lanes<W>& loss_per_length,
                                                         const Lanes<W>& bore,
                                                         const Lanes<W>& gravity,
                                                         const Lanes<W>& velocity) {
  return abs(loss_per_length) * 2.0 * gravity * bore / (velocity * velocity);
}

}  // namespace headband::friction
