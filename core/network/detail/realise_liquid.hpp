#pragma once
// SPDX-License-Identifier: MIT

#include "core/liquid/draws.hpp"
#include "core/network/detail/draw.hpp"

namespace headband::network::detail {

enum class LiquidKind { water, sea_water, own };
[[nodiscard]] inline LiquidKind kind_of(const Liquid& liquid) {
  if (liquid.name == "water") return LiquidKind::water;
  return liquid.name == "seawater" ? LiquidKind::sea_water : LiquidKind::own;
}

[[nodiscard]] inline bool has_viscosity_law(const Liquid& liquid) { return liquid.viscosity_points.size() >= 2; }

/// What follows from the temperature: the numbers of water at 0.1 MPa (a case has one liquid, not one per place), or
/// the two-point viscosity law.
template <int W>
void realise_by_temperature(const Liquid& liquid, const Draw<W>& draw, LiquidValues<W>& values) {
  values.temperature = draw(liquid.temperature);
  const LiquidKind kind = kind_of(liquid);
  if (kind == LiquidKind::own) {
    values.density = values.bulk_modulus = values.bulk_modulus_isothermal = values.vapour_pressure = not_a_number;
    values.viscosity_by_temperature = not_a_number;
  } else {
    const headband::liquid::PropertiesOf<W> water = kind == LiquidKind::water
                                                        ? headband::liquid::water_of<W>(values.temperature)
                                                        : headband::liquid::sea_water_of<W>(values.temperature);
    values.density = water.density;
    values.bulk_modulus = water.bulk_modulus_isentropic;
    values.bulk_modulus_isothermal = water.bulk_modulus_isothermal;
    values.vapour_pressure = water.vapour_pressure;
    values.viscosity_by_temperature = water.dynamic_viscosity;
  }
  if (!has_viscosity_law(liquid)) return;
  const auto& first = liquid.viscosity_points[0];
  const auto& second = liquid.viscosity_points[1];
  values.viscosity_by_temperature = headband::liquid::viscosity_between<W>(
      {draw(first.first), draw(first.second), draw(second.first), draw(second.second)}, values.temperature);
}

/// Numbers given outright take the place of those that follow from the temperature; the viscosity comes after them.
template <int W>
void realise_given_numbers(const Liquid& liquid, const Draw<W>& draw, LiquidValues<W>& values) {
  if (liquid.density.given()) values.density = draw(liquid.density);
  if (liquid.bulk_modulus.given()) {
    values.bulk_modulus = draw(liquid.bulk_modulus);
    values.bulk_modulus_isothermal = not_a_number;
  }
  if (liquid.vapour_pressure.given()) values.vapour_pressure = draw(liquid.vapour_pressure);
  values.free_gas = draw(liquid.free_gas, 0.0);
}

template <int W>
void realise_viscosity(const Liquid& liquid, const Draw<W>& draw, LiquidValues<W>& values) {
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
