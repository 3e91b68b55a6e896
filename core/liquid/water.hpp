#pragma once
// SPDX-License-Identifier: MIT
//
// Properties of liquids. Water by the releases of the International Association for the Properties of Water and
// Steam (IAPWS): SR6-08(2011) liquid water at 0.1 MPa, R6-95(2018) "IAPWS-95" above, R12-08 viscosity, R7-97(2012)
// "IF97" vapour pressure.

namespace headband::liquid {

/// The pressure at which a liquid is meant when nobody names one, absolute [Pa].
inline constexpr double standard_pressure = 0.1e6;

/// Properties of a liquid at one state.
struct Properties {
  double density;                  ///< [kg/m3]
  double dynamic_viscosity;        ///< [Pa s]
  double speed_of_sound;           ///< [m/s]
  double bulk_modulus_isentropic;  ///< rho w^2 [Pa]
  double bulk_modulus_isothermal;  ///< -v (dp/dv) at constant temperature [Pa]
  double vapour_pressure;          ///< absolute [Pa]
};

/// Range in which `water` is good: temperature [K] and absolute pressure [Pa].
inline constexpr double water_coldest = 273.15, water_hottest = 373.15;
inline constexpr double water_lowest_pressure = 0.05e6, water_highest_pressure = 40e6;

/// Pure water.
/// @param temperature [K], 273.15 .. 373.15
/// @param pressure absolute [Pa], 0.05e6 .. 40e6; up to 0.15 MPa IAPWS SR6-08 (at 0.1 MPa; the specific volume follows
///        the pressure by its own slope, everything else is that of 0.1 MPa), above IAPWS-95;
///        viscosity SR6-08 up to 0.15 MPa, IAPWS R12-08 above; vapour pressure IF97 region 4
/// Accuracy of the formulas as coded: 1e-10 (SR6-08), 1e-9 (IAPWS-95). Of the releases against measurement: density
/// 1e-6 .. 3e-5, viscosity 1 %, speed of sound 0.02 %, vapour pressure 0.03 %.
/// Nothing is checked here: outside the range the formulas extrapolate. Where the pressure is below the vapour pressure
/// the values are those of the (metastable) liquid.
[[nodiscard]] Properties water(double temperature, double pressure);

/// SR6-08 at 0.1 MPa: everything above and what its check table prints besides.
struct WaterAtOneBar {
  double specific_volume;        ///< [m3/kg]
  double volume_by_pressure;     ///< (dv/dp) at constant temperature [m3/(kg Pa)]
  double volume_by_temperature;  ///< (dv/dT) at constant pressure [m3/(kg K)]
  double heat_capacity;          ///< isobaric [J/(kg K)]
  double speed_of_sound;         ///< [m/s]
  double dynamic_viscosity;      ///< [Pa s]
};
/// @param temperature [K], 253.15 .. 383.15 @cite IAPWS SR6-08(2011)
[[nodiscard]] WaterAtOneBar water_at_one_bar(double temperature);

/// IAPWS-95: everything from temperature and density.
struct WaterByDensity {
  double pressure;                 ///< absolute [Pa]
  double isothermal_bulk_modulus;  ///< [Pa]
  double isochoric_heat_capacity;  ///< [J/(kg K)]
  double speed_of_sound;           ///< [m/s]
};
/// @param temperature [K], 273.15 .. 1273 @param density [kg/m3], not the critical one @cite IAPWS R6-95(2018)
[[nodiscard]] WaterByDensity water_by_density(double temperature, double density);
/// Density of the liquid by IAPWS-95 [kg/m3]. @param temperature [K], 273.15 .. 623.15 @param pressure [Pa], .. 100e6
[[nodiscard]] double density_of_water(double temperature, double pressure);

/// IF97 region 1 (compressed liquid): quicker, and within 2e-5 (density) and 0.2 % (speed of sound) of IAPWS-95.
struct WaterUnderPressure {
  double specific_volume;             ///< [m3/kg]
  double isothermal_compressibility;  ///< [1/Pa]
  double heat_capacity;               ///< isobaric [J/(kg K)]
  double speed_of_sound;              ///< [m/s]
};
/// @param temperature [K], 273.15 .. 623.15 @param pressure [Pa], saturation .. 100e6 @cite IAPWS R7-97(2012) eq. 7
[[nodiscard]] WaterUnderPressure water_under_pressure(double temperature, double pressure);

/// Vapour pressure of water [Pa]. @param temperature [K], 273.15 .. 647.096 @cite IAPWS R7-97(2012) eq. 30
[[nodiscard]] double vapour_pressure(double temperature);

/// Dynamic viscosity of water [Pa s], critical enhancement left at 1 (it is 1 within 1e-4 far from the critical point).
/// @param temperature [K], @param density [kg/m3] @cite IAPWS R12-08
[[nodiscard]] double viscosity_of_water(double temperature, double density);

/// Range of `sea_water` [K].
inline constexpr double sea_water_coldest = 273.15, sea_water_hottest = 313.15;

/// Sea water of practical salinity 35 (35.165 g/kg) at atmospheric pressure. @param temperature [K], 273.15 .. 313.15
/// Density and isothermal modulus: EOS-80 (Millero & Poisson 1981; Millero, Chen, Bradshaw & Schleicher 1980).
/// Speed of sound: Chen & Millero 1977. Viscosity: Sharqawy, Lienhard & Zubair 2010 (after Isdale) on pure water.
/// Vapour pressure: Raoult's law as in the same paper. Coefficients from memory; accuracy as published: density 1e-5,
/// speed of sound 0.02 %, viscosity 1.5 %, vapour pressure 0.1 %.
[[nodiscard]] Properties sea_water(double temperature);

/// Two-point viscosity law in absolute temperature, log10 log10(nu/cSt + 0.7) = a - b log10 T (ASTM D341 form).
struct ViscosityLaw {
  double a, b;
};
/// The law through two points. @param temperature_1, temperature_2 [K], different; viscosities [m2/s], > 0.3e-6
[[nodiscard]] ViscosityLaw viscosity_law(double temperature_1,
                                         double viscosity_1,
                                         double temperature_2,
                                         double viscosity_2);
/// Kinematic viscosity of the law [m2/s]; at both points to rounding (1e-13).
[[nodiscard]] double viscosity_at(const ViscosityLaw& law, double temperature);
/// How far the law misses a third point: law / measured - 1 [-]. @param viscosity measured [m2/s]
[[nodiscard]] double misfit(const ViscosityLaw& law, double temperature, double viscosity);

}  // namespace headband::liquid
