#pragma once
// SPDX-License-Identifier: MIT
//
// Named liquids: what is known of each, with source and default spread, for the `liquid` verb and the default spreads.

#include "core/liquid/water.hpp"

#include <optional>
#include <span>
#include <string>
#include <string_view>
#include <vector>

namespace headband::liquid {

/// What a number of a liquid is.
enum class Property {
  density,
  kinematic_viscosity,
  dynamic_viscosity,
  bulk_modulus_isentropic,
  bulk_modulus_isothermal,
  sound_speed,
  vapour_pressure
};

/// One line of the table that `liquid NAME` prints.
struct LiquidRow {
  Property property = Property::density;
  std::string_view words;  ///< "density", "kinematic viscosity" …
  std::string_view key;    ///< name in `--json`, SI unit included: "density_kg_per_m3" …
  std::string_view unit;   ///< SI unit: "kg/m3"
  double value = 0.0;      ///< [SI]; NaN where nothing is known
  double spread_95 = 0.0;  ///< default half-width of the 95 % interval as a share of the value [-]
  std::string spread;      ///< the same in the words of a case file: "± 0.1 %"
  std::string source;      ///< published formula, or "common practice"
};

/// A liquid at one state.
struct LiquidSheet {
  std::string name;                  ///< the table's own spelling
  double temperature = 0.0;          ///< [K]
  double pressure = 0.0;             ///< absolute [Pa]
  Properties properties{};           ///< the same numbers; NaN where nothing is known
  std::vector<LiquidRow> rows;       ///< in the order of Property
  std::vector<std::string> remarks;  ///< out of range, not a measured liquid …
};

/// Everything known of a named liquid at one state.
/// @param name "water", "seawater" (as the case file spells them), or a name of `common_liquids()`; case ignored
/// @param temperature [K] @param pressure absolute [Pa]; only water follows it
/// @return nothing when the name is unknown. Out of a formula's range: the sheet with a remark.
[[nodiscard]] std::optional<LiquidSheet> sheet(std::string_view name, double temperature, double pressure);

/// All names `sheet` knows, water first.
[[nodiscard]] std::vector<std::string_view> known_names();

/// A liquid of trade by round numbers, for guidance only: no two deliveries are alike. Common practice, from memory.
struct CommonLiquid {
  std::string_view name, what;
  double density_15;                                     ///< at 15 degC [kg/m3]
  double expansion;                                      ///< -(1/rho) d rho/dT [1/K]
  double viscosity_20;                                   ///< kinematic at 20 degC [m2/s]
  double viscosity_50;                                   ///< kinematic at 50 degC [m2/s]
  double bulk_modulus;                                   ///< isentropic, about 20 degC and low pressure [Pa]
  double vapour_pressure_20;                             ///< absolute at 20 degC [Pa]; NaN where practice gives none
  double density_spread, viscosity_spread, bulk_spread;  ///< 95 % half-width as a share [-]
};
[[nodiscard]] std::span<const CommonLiquid> common_liquids();

/// Default 95 % spreads of water's numbers, as shares [-]: the release's own uncertainty widened to what an engineer
/// knows of the water in a pipe (dissolved salts and gas; common practice).
struct WaterSpread {
  double density = 0.001, viscosity = 0.02, bulk_modulus = 0.01, sound_speed = 0.005, vapour_pressure = 0.01;
};

}  // namespace headband::liquid
