#pragma once
// SPDX-License-Identifier: MIT
//
// Free gas in a liquid: how its share follows the pressure, and the mixture it makes (Wood 1930).

#include "core/base/lanes.hpp"

namespace headband::liquid {

using base::Lanes;

/// Pressure at which a gas fraction is stated [Pa] (convention 3a i of the case file).
inline constexpr double gas_reference_pressure = 101325.0;
/// Specific gas constant of dry air [J/(kg K)] (8.314462618 / 0.0289647; CODATA 2018 and the US Standard Atmosphere
/// 1976 mean molar mass, rounded; from memory).
inline constexpr double air_gas_constant = 287.058;

/// Volume fraction of free gas at `pressure` when it is `at_reference` at 101 325 Pa, compressed isothermally; the
/// liquid's own volume is taken as constant: a/(1-a) is proportional to 1/p.
/// @param at_reference [-], 0 <= a < 1 @param pressure absolute [Pa], > 0
template <int W>
[[nodiscard]] HEADBAND_INLINE Lanes<W> gas_fraction(const Lanes<W>& at_reference, const Lanes<W>& pressure) {
  const Lanes<W> gas = at_reference * (gas_reference_pressure / pressure);
  return gas / (1.0 - at_reference + gas);
}

/// A liquid with free gas in a pipe, at one pressure.
template <int W>
struct Mixture {
  Lanes<W> gas_fraction;     ///< volume fraction at the pressure [-]
  Lanes<W> density;          ///< (1 - a) rho_l + a rho_g [kg/m3]
  Lanes<W> compressibility;  ///< (1 - a)/K + a/p [1/Pa]
};

/// Mixture of a liquid and a share `fraction` (at `pressure`) of ideal gas, isothermal.
template <int W>
[[nodiscard]] HEADBAND_INLINE Mixture<W> mix(const Lanes<W>& density,
                                             const Lanes<W>& bulk_modulus,
                                             const Lanes<W>& fraction,
                                             const Lanes<W>& pressure,
                                             const Lanes<W>& temperature) {
  const Lanes<W> gas_density = pressure / (air_gas_constant * temperature);
  const Lanes<W> rest = 1.0 - fraction;
  return {fraction, rest * density + fraction * gas_density, rest / bulk_modulus + fraction / pressure};
}

}  // namespace headband::liquid
