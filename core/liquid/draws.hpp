#pragma once
// SPDX-License-Identifier: MIT
//
// Properties of liquids for W draws of the temperature at once. The single-state functions of water.hpp are these with
// W = 1, so that a draw has the same bits alone and in a batch.

#include "core/base/lanes.hpp"

namespace headband::liquid {

using base::Lanes;

/// IAPWS SR6-08(2011), as WaterAtOneBar. @param temperature [K], 253.15 .. 383.15
template <int W>
struct WaterAtOneBarOf {
  Lanes<W> specific_volume, volume_by_pressure, volume_by_temperature, heat_capacity, speed_of_sound, dynamic_viscosity;
};
template <int W>
[[nodiscard]] WaterAtOneBarOf<W> water_at_one_bar(const Lanes<W>& temperature);

/// Vapour pressure of water [Pa], IAPWS R7-97(2012) eq. 30. @param temperature [K], 273.15 .. 647.096
template <int W>
[[nodiscard]] Lanes<W> vapour_pressure(const Lanes<W>& temperature);

/// Numbers of a liquid that a case needs, at the standard pressure of 0.1 MPa.
template <int W>
struct PropertiesOf {
  Lanes<W> density;                  ///< [kg/m3]
  Lanes<W> dynamic_viscosity;        ///< [Pa s]
  Lanes<W> bulk_modulus_isentropic;  ///< [Pa]
  Lanes<W> bulk_modulus_isothermal;  ///< [Pa]
  Lanes<W> vapour_pressure;          ///< absolute [Pa]
};
/// Pure water: the bits of `water(temperature, standard_pressure)` lane by lane.
template <int W>
[[nodiscard]] PropertiesOf<W> water_of(const Lanes<W>& temperature);
/// Sea water: the bits of `sea_water(temperature)` lane by lane.
template <int W>
[[nodiscard]] PropertiesOf<W> sea_water_of(const Lanes<W>& temperature);

/// Two viscosity points (temperatures [K], kinematic viscosities [m2/s]) of W draws.
template <int W>
struct ViscosityPoints {
  Lanes<W> temperature_1, viscosity_1, temperature_2, viscosity_2;
};
/// Kinematic viscosity [m2/s] by the law through the two points (see ViscosityLaw): to rounding at both points.
template <int W>
[[nodiscard]] Lanes<W> viscosity_between(const ViscosityPoints<W>& points, const Lanes<W>& temperature);

extern template WaterAtOneBarOf<1> water_at_one_bar<1>(const Lanes<1>&);
extern template WaterAtOneBarOf<8> water_at_one_bar<8>(const Lanes<8>&);
extern template Lanes<1> vapour_pressure<1>(const Lanes<1>&);
extern template Lanes<8> vapour_pressure<8>(const Lanes<8>&);
extern template PropertiesOf<1> water_of<1>(const Lanes<1>&);
extern template PropertiesOf<8> water_of<8>(const Lanes<8>&);
extern template PropertiesOf<1> sea_water_of<1>(const Lanes<1>&);
extern template PropertiesOf<8> sea_water_of<8>(const Lanes<8>&);
extern template Lanes<1> viscosity_between<1>(const ViscosityPoints<1>&, const Lanes<1>&);
extern template Lanes<8> viscosity_between<8>(const ViscosityPoints<8>&, const Lanes<8>&);

}  // namespace headband::liquid
