#pragma once
// SPDX-License-Identifier: MIT

#include "core/liquid/water.hpp"
#include "core/network/detail/draw.hpp"

namespace headband::network::detail {

/// Water's numbers are taken at this pressure: a case has one liquid, not one per place [Pa].
inline constexpr double liquid_pressure = 0.1e6;

enum class LiquidKind { water, sea_water, own };
[[nodiscard]] inline LiquidKind kind_of(const Liquid& liquid) {
  if (liquid.name == "water") return LiquidKind::water;
  return liquid.name == "seawater" ? LiquidKind::sea_water : LiquidKind::own;
}

[[nodiscard]] inline bool has_viscosity_law(const Liquid& liquid) { return liquid.viscosity_points.size() >= 2; }

/// What follows from the temperature: the numbers of water, or the two-point viscosity law. Slow; lanes of one
/// temperature are computed once.
template <int W>
void realise_by_temperature(const Liquid& liquid, const Draw<W>& draw, LiquidValues<W>& values) {
  values.temperature = draw(liquid.temperature);
  const LiquidKind kind = kind_of(liquid);
  if (kind == LiquidKind::own) {
    values.density = values.bulk_modulus = values.bulk_modulus_isothermal = values.vapour_pressure = not_a_number;
    values.viscosity_by_temperature = not_a_number;
  } else {
    headband::liquid::Properties water{};
    for (int lane = 0; lane < W; ++lane) {
      const double temperature = values.temperature[lane];
      if (lane == 0 || temperature != values.temperature[lane - 1])
        water = kind == LiquidKind::water ? headband::liquid::water(temperature, liquid_pressure)
                                          : headband::liquid::sea_water(temperature);
      values.density.set(lane, water.density);
      values.bulk_modulus.set(lane, water.bulk_modulus_isentropic);
      values.bulk_modulus_isothermal.set(lane, water.bulk_modulus_isothermal);
      values.vapour_pressure.set(lane, water.vapour_pressure);
      values.viscosity_by_temperature.set(lane, water.dynamic_viscosity);
    }
  }
  if (!has_viscosity_law(liquid)) return;
  const auto& first = liquid.viscosity_points[0];
  const auto& second = liquid.viscosity_points[1];
  const Lanes<W> t1 = draw(first.first), nu1 = draw(first.second), t2 = draw(second.first), nu2 = draw(second.second);
  for (int lane = 0; lane < W; ++lane) {
    const auto law = headband::liquid::viscosity_law(t1[lane], nu1[lane], t2[lane], nu2[lane]);
    values.viscosity_by_temperature.set(lane, headband::liquid::viscosity_at(law, values.temperature[lane]));
  }
}

/// Numbers given outright take the place of those that follow from the temperature.
template <int W>
void realise_given_numbers(const Liquid& liquid, const Draw<W>& draw, LiquidValues<W>& values) {
  if (liquid.density.given()) values.density = draw(liquid.density);
  if (liquid.bulk_modulus.given()) {
    values.bulk_modulus = draw(liquid.bulk_modulus);
    values.bulk_modulus_isothermal = not_a_number;
  }
  if (liquid.vapour_pressure.given()) values.vapour_pressure = draw(liquid.vapour_pressure);
  values.free_gas = draw(liquid.free_gas, 0.0);

  if (liquid.viscosity.given()) {
    values.kinematic_viscosity = draw(liquid.viscosity);
    if (liquid.viscosity.dimension == base::Dimension::dynamic_viscosity) values.kinematic_viscosity /= values.density;
  } else if (has_viscosity_law(liquid)) {
    values.kinematic_viscosity = values.viscosity_by_temperature;
  } else {
    values.kinematic_viscosity = values.viscosity_by_temperature / values.density;
  }
  if (liquid.viscosity_scatter.given()) values.kinematic_viscosity *= draw(liquid.viscosity_scatter);
}

}  // namespace headband::network::detail
