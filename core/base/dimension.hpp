#pragma once
// SPDX-License-Identifier: MIT

namespace headband::base {

/// What people are shown; files and memory stay SI.
enum class UnitFamily { si, us };

/// Kind of a quantity; decides which unit names are understood and how the value is shown.
enum class Dimension {
  number,               ///< bare number [-]
  share,                ///< "30 %" or a bare number [-]
  factor,               ///< scatter-like key: a factor about 1 [-]
  length,               ///< [m]
  area,                 ///< [m2]
  volume,               ///< [m3]
  time,                 ///< [s]
  velocity,             ///< [m/s]
  flow,                 ///< [m3/s]
  pressure,             ///< SI absolute or gauge is decided per key, see Quantity::gauge [Pa]
  pressure_difference,  ///< [Pa]
  modulus,              ///< [Pa]
  compliance,           ///< [1/Pa]
  temperature,          ///< [K]
  density,              ///< [kg/m3]
  kinematic_viscosity,  ///< [m2/s]
  dynamic_viscosity,    ///< [Pa s]
  acceleration,         ///< [m/s2]
  rotational_speed,     ///< [rad/s]
  inertia,              ///< as m r2 [kg m2]
  kv,                   ///< metric or US flow coefficient, held as Kv [m3/h at 1 bar] / 3600 [m3/s]
  growth_rate,          ///< [m/s]
  energy_price,         ///< [currency/J]
  price_per_length,     ///< [currency/m]
  hours_per_year,       ///< [s/s], running share of the year
  year,                 ///< calendar year [-]
};

}  // namespace headband::base
