#pragma once
// SPDX-License-Identifier: MIT

#include "core/base/lanes.hpp"

namespace headband::pipe {

using base::Lanes;

enum class Restraint { anchored, upstream_anchored, expansion_joints };

/// Restraint factor c1 of the wave-speed formula (Wylie & Streeter; Halliwell 1963 for the thick wall).
/// thin: 1 - nu^2 | 1 - nu/2 | 1; thick: (2e/D)(1 + nu) + D/(D + e) times the thin factor. D inner diameter of the metal.
template <int W>
[[nodiscard]] Lanes<W> restraint_factor(Restraint restraint, bool thick, const Lanes<W>& poisson,
                                        const Lanes<W>& inner_diameter, const Lanes<W>& wall);

/// Wave speed [m/s] of a liquid with free gas in an elastic pipe.
/// 1/(rho_m a^2) = (1-alpha)/K + alpha/p + compliance, isothermal gas (Wood 1930; Korteweg 1878).
/// @param wall_compliance c1 D/(E e), plus a lining's where its modulus is known [1/Pa]
/// @param free_gas volume fraction at 101 325 Pa [-], compressed isothermally to `pressure`
/// @param pressure absolute [Pa], > 0; unused where free_gas is 0
/// @param density of the liquid [kg/m3], @param bulk_modulus isentropic [Pa]
template <int W>
[[nodiscard]] Lanes<W> wave_speed(const Lanes<W>& density, const Lanes<W>& bulk_modulus, const Lanes<W>& wall_compliance,
                                  const Lanes<W>& free_gas, const Lanes<W>& pressure, const Lanes<W>& temperature);

}  // namespace headband::pipe
