#pragma once
// SPDX-License-Identifier: MIT

namespace headband::liquid {

/// Properties of a liquid at one state.
struct Properties {
  double density;                  ///< [kg/m3]
  double dynamic_viscosity;        ///< [Pa s]
  double speed_of_sound;           ///< [m/s]
  double bulk_modulus_isentropic;  ///< rho w^2 [Pa]
  double bulk_modulus_isothermal;  ///< [Pa]
  double vapour_pressure;          ///< absolute [Pa]
};

/// Pure water.
/// @param temperature [K], 273.15 .. 373.15
/// @param pressure absolute [Pa], 0.05e6 .. 40e6; at 0.1 MPa (up to 0.15 MPa) IAPWS SR6-08, above IAPWS IF97 region 1;
///        viscosity IAPWS R12-08; vapour pressure IF97 region 4
[[nodiscard]] Properties water(double temperature, double pressure);

/// Sea water of practical salinity 35 at atmospheric pressure. @param temperature [K], 273.15 .. 313.15
[[nodiscard]] Properties sea_water(double temperature);

/// Two-point viscosity law in absolute temperature, log10 log10(nu/cSt + 0.7) = A - B log10 T (ASTM D341 form).
struct ViscosityLaw {
  double a, b;
};
[[nodiscard]] ViscosityLaw viscosity_law(double temperature_1, double viscosity_1, double temperature_2, double viscosity_2);
/// Kinematic viscosity of the law [m2/s]; exact at both points.
[[nodiscard]] double viscosity_at(const ViscosityLaw& law, double temperature);

}  // namespace headband::liquid
