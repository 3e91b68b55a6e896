#pragma once
// SPDX-License-Identifier: MIT

#include "core/base/lanes.hpp"

namespace headband::pipe {

using base::Lanes;

/// How the pipe is held along its axis. Authors differ on the names: the factor used is printed, not the label alone.
enum class Restraint {
  anchored,           ///< held throughout: 1 - nu^2
  upstream_anchored,  ///< held at its upstream end: 1 - nu/2 (Wylie & Streeter)
  expansion_joints    ///< free to move: 1
};

/// Restraint factor c1 of the wave-speed formula [-] (Wylie & Streeter; Halliwell 1963 for the thick wall).
/// thin: 1 - nu^2 | 1 - nu/2 | 1; thick: (2e/D)(1 + nu) + D/(D + e) times the thin factor.
/// @param inner_diameter D of the metal [m] @param wall e of the metal [m]
template <int W>
[[nodiscard]] Lanes<W> restraint_factor(
    Restraint restraint, bool thick, const Lanes<W>& poisson, const Lanes<W>& inner_diameter, const Lanes<W>& wall);

/// Compliance of an elastic ring to inner pressure: relative growth of the bore's area per pressure, c1 D/(E e) [1/Pa]
/// (Korteweg 1878).
template <int W>
[[nodiscard]] HEADBAND_INLINE Lanes<W> wall_compliance(const Lanes<W>& restraint_factor,
                                                       const Lanes<W>& inner_diameter,
                                                       const Lanes<W>& modulus,
                                                       const Lanes<W>& wall) {
  return restraint_factor * inner_diameter / (modulus * wall);
}

/// The same for a metal wall with a lining of known modulus bonded inside it [1/Pa]: at one mean diameter the two rings
/// stretch together, so the lining counts as extra metal E_lining/E times its thickness (transformed section, common
/// practice; Wylie & Streeter for reinforced concrete). A lining without modulus only narrows the bore: leave it out.
/// @param inner_diameter of the metal [m]
template <int W>
[[nodiscard]] HEADBAND_INLINE Lanes<W> lined_wall_compliance(const Lanes<W>& restraint_factor,
                                                             const Lanes<W>& inner_diameter,
                                                             const Lanes<W>& modulus,
                                                             const Lanes<W>& wall,
                                                             const Lanes<W>& lining_modulus,
                                                             const Lanes<W>& lining_thickness) {
  return restraint_factor * inner_diameter / (modulus * wall + lining_modulus * lining_thickness);
}

/// Wave speed [m/s] of a liquid with free gas in an elastic pipe.
/// 1/(rho_m a^2) = (1-alpha)/K + alpha/p + compliance, isothermal gas (Wood 1930; Korteweg 1878), rho_m the mixture's.
/// @param wall_compliance c1 D/(E e), plus a lining's where its modulus is known [1/Pa]
/// @param free_gas volume fraction at 101 325 Pa [-], compressed isothermally to `pressure`
/// @param pressure absolute [Pa], > 0; unused where free_gas is 0 (may be anything, even not a number)
/// @param density of the liquid [kg/m3], @param bulk_modulus isentropic [Pa] @param temperature [K], of the gas
/// Accuracy: rounding only. The same bits for every W.
template <int W>
[[nodiscard]] Lanes<W> wave_speed(const Lanes<W>& density,
                                  const Lanes<W>& bulk_modulus,
                                  const Lanes<W>& wall_compliance,
                                  const Lanes<W>& free_gas,
                                  const Lanes<W>& pressure,
                                  const Lanes<W>& temperature);

/// Joukowsky: pressure rise per velocity stopped, rho a dV [Pa].
template <int W>
[[nodiscard]] HEADBAND_INLINE Lanes<W> joukowsky_pressure(const Lanes<W>& density,
                                                          const Lanes<W>& wave_speed,
                                                          const Lanes<W>& velocity_change) {
  return density * wave_speed * velocity_change;
}

/// Hoop stress of a thin ring by the inner diameter, p D/(2 e) [Pa]. @param pressure inside minus outside [Pa]
template <int W>
[[nodiscard]] HEADBAND_INLINE Lanes<W> hoop_stress(const Lanes<W>& pressure,
                                                   const Lanes<W>& inner_diameter,
                                                   const Lanes<W>& wall) {
  return pressure * inner_diameter / (2.0 * wall);
}

extern template Lanes<1> restraint_factor<1>(Restraint, bool, const Lanes<1>&, const Lanes<1>&, const Lanes<1>&);
extern template Lanes<8> restraint_factor<8>(Restraint, bool, const Lanes<8>&, const Lanes<8>&, const Lanes<8>&);
extern template Lanes<1> wave_speed<1>(
    const Lanes<1>&, const Lanes<1>&, const Lanes<1>&, const Lanes<1>&, const Lanes<1>&, const Lanes<1>&);
extern template Lanes<8> wave_speed<8>(
    const Lanes<8>&, const Lanes<8>&, const Lanes<8>&, const Lanes<8>&, const Lanes<8>&, const Lanes<8>&);

}  // namespace headband::pipe
