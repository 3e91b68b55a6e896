#pragma once
// SPDX-License-Identifier: MIT
//
// In which unit a quantity is shown, in each of the two families.

#include <string>
#include <string_view>

namespace headband::report {

enum class Family { si, us };

/// "us" gives US units, everything else SI.
[[nodiscard]] Family family_of(std::string_view units);

enum class Shown {
  number,
  share,     ///< shown in percent
  pressure,  ///< gauge
  absolute_pressure,
  pressure_difference,
  head,
  elevation,
  chainage,
  diameter,
  roughness,
  flow,
  velocity,
  time,
  volume,
  density,
  kinematic_viscosity,
  dynamic_viscosity,
  modulus,
  temperature,
  speed,
  torque,
};

/// shown value = SI value · scale + offset.
struct Measure {
  std::string unit;  ///< "bar", empty for bare numbers
  double scale = 1.0;
  double offset = 0.0;
  [[nodiscard]] double operator()(double si) const { return si * scale + offset; }
};

/// @param largest largest magnitude that will be shown [SI]; picks between m and km, L/s and m³/s, L and m³
[[nodiscard]] Measure measure(Shown shown, Family family, double largest = 0.0);

/// What a quantity of SI unit `unit` ("Pa", "m", "m3/s", "m3 s-1", …) is; `kind` tells gauge pressures from
/// differences.
[[nodiscard]] Shown shown_of_unit(std::string_view unit, std::string_view kind = {});

/// A key with its unit as in the JSON (`max_gas_volume_m3`) taken apart: words ("max gas volume") and what it is.
struct KeyWords {
  std::string words;
  Shown shown = Shown::number;
};
[[nodiscard]] KeyWords words_of_key(std::string_view key);

/// `value` to `significant` figures, plain where that reads well; "–" for a missing number.
[[nodiscard]] std::string figures(double value, int significant = 4);

/// `value` with this many decimals, thousands parted by a narrow space.
[[nodiscard]] std::string decimals(double value, int places);

/// Decimals at which two figures of `spread` show.
[[nodiscard]] int places_for(double spread);

/// A share in percent without idle zeros: "95 %", "2.5 %", "0.26 %".
[[nodiscard]] std::string percent(double share);

/// The unit behind a number, all of it kept on the number's line: a hard space and "bar g" with another; may be empty.
[[nodiscard]] std::string behind_number(const std::string& unit);

/// Number and unit of an SI value: "11.95 bar".
[[nodiscard]] std::string with_unit(double si, Shown shown, Family family, int significant = 4);

}  // namespace headband::report
