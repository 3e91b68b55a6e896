#pragma once
// SPDX-License-Identifier: MIT
//
// Units of the case file and of what people are shown. Memory and files are SI; nothing but core/casefile, core/show
// and core/report has reason to include this.

#include "core/base/dimension.hpp"

#include <optional>
#include <span>
#include <string>
#include <string_view>

namespace headband::base {

/// Physical kind of a unit. Several dimensions share a kind (a pressure and a modulus are both in Pa).
enum class UnitKind {
  share,
  length,
  area,
  volume,
  time,
  velocity,
  flow,
  pressure,
  compliance,
  temperature,
  density,
  kinematic_viscosity,
  dynamic_viscosity,
  acceleration,
  rotational_speed,
  inertia,
  growth_rate,
  energy_price,
  price_per_length,
  hours_per_year,
};

/// What a pressure unit is counted from.
enum class PressureReference { unnamed, gauge, absolute };

/// One unit of the table: SI value = (number + offset) * times / by, correctly rounded for decimal units.
struct Unit {
  std::string_view name;
  UnitKind kind;
  double times = 1.0;
  double by = 1.0;
  double offset = 0.0;          ///< only temperatures
  std::string_view definition;  ///< the exact definition the factor comes from
};

/// A unit as understood from text: table entry and, for pressures, what it is counted from.
struct FoundUnit {
  Unit unit;
  PressureReference reference = PressureReference::unnamed;
};

/// All units understood.
[[nodiscard]] std::span<const Unit> unit_table();

/// The unit that `text` names: `m3/h`, `m^3/h`, `m³/h`, `bar g`, `barg`, `psi abs`. Nothing when it is unknown.
[[nodiscard]] std::optional<FoundUnit> find_unit(std::string_view text);

/// Unit kind of a dimension; nothing for plain numbers, factors and years.
[[nodiscard]] std::optional<UnitKind> kind_of(Dimension dimension);

/// "a length", "a pressure": the kind in words.
[[nodiscard]] std::string_view words_of(UnitKind kind);

/// A value with its right form for messages: "8 mm", "12 bar g".
[[nodiscard]] std::string_view example_of(Dimension dimension);

/// Value in SI. `difference`: a temperature difference (no offset).
[[nodiscard]] double to_si(const Unit& unit, double number, bool difference = false);

/// Name of the SI unit as udunits reads it: "Pa", "m3 s-1"; "1" for plain numbers.
[[nodiscard]] std::string_view si_name(Dimension dimension);

/// Unit a value is shown in. shown number = value * by / times - offset.
struct DisplayUnit {
  std::string name;  ///< "bar", "ft"; empty for plain numbers
  double times = 1.0;
  double by = 1.0;
  double offset = 0.0;
};

/// Unit for values of the size of `magnitude` [SI]; NaN: the usual one (for axes and table columns).
[[nodiscard]] DisplayUnit display_unit(Dimension dimension, UnitFamily family, double magnitude);
[[nodiscard]] DisplayUnit display_unit(Dimension dimension, UnitFamily family);

/// The number to show for `value` [SI].
[[nodiscard]] double to_display(const DisplayUnit& unit, double value);

/// `digits` significant digits without trailing zeros: 11.95, 0.0527, 123456. Missing (NaN) is "-".
[[nodiscard]] std::string significant(double number, int digits = 4);

/// A value [SI] in words of a family, "11.95 bar g", "173.3 psi g". NaN gives "-".
/// @param gauge only for Dimension::pressure: g or abs is written after the unit
[[nodiscard]] std::string shown(
    double value, Dimension dimension, UnitFamily family, bool gauge = true, int digits = 4);

}  // namespace headband::base
