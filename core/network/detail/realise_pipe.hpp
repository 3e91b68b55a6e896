#pragma once
// SPDX-License-Identifier: MIT

#include "core/network/detail/draw.hpp"
#include "core/pipe/handbook.hpp"
#include "core/pipe/wave_speed.hpp"

#include <numbers>

namespace headband::network::detail {

template <int W>
void realise_length(const Pipe& pipe, const Draw<W>& draw, PipeValues<W>& values) {
  values.length = pipe.length.given() ? draw(pipe.length) : draw(pipe.profile.back().first);
}

/// Bore, wall and inner diameter of the metal from what is given: outside + wall, bore + wall, outside + bore, or bore
/// alone. One drawn wall feeds all three.
template <int W>
void realise_section(const Pipe& pipe, const Draw<W>& draw, PipeValues<W>& values) {
  const Lanes<W> lining = draw(pipe.lining_thickness, 0.0);
  if (pipe.outside.given() && pipe.wall.given()) {
    values.wall = draw(pipe.wall);
    values.metal_inner_diameter = draw(pipe.outside) - 2.0 * values.wall;
    values.bore = values.metal_inner_diameter - 2.0 * lining;
  } else {
    values.bore = draw(pipe.bore);
    values.metal_inner_diameter = values.bore + 2.0 * lining;
    values.wall = pipe.outside.given() ? 0.5 * (draw(pipe.outside) - values.metal_inner_diameter) : draw(pipe.wall);
  }
  values.area = (0.25 * std::numbers::pi) * (values.bore * values.bore);
}

[[nodiscard]] inline headband::pipe::Restraint restraint_of(Joint joint) {
  switch (joint) {
    case Joint::anchored:
      return headband::pipe::Restraint::anchored;
    case Joint::upstream_anchored:
      return headband::pipe::Restraint::upstream_anchored;
    case Joint::expansion_joints:
      return headband::pipe::Restraint::expansion_joints;
  }
  return headband::pipe::Restraint::anchored;
}

/// Elastic part: restraint factor, compliance of the wall, wave speed without gas (convention i).
/// A lining of known modulus carries hoop stress with the metal: E e of both add up (thin ring, one hoop strain;
/// Wylie & Streeter, composite pipes). Needs geometry and liquid.
template <int W>
void realise_wave(
    const Pipe& pipe, const PipePlan& plan, const Draw<W>& draw, const LiquidValues<W>& liquid, PipeValues<W>& values) {
  values.wave_speed_scatter = draw(pipe.wave_speed_scatter, 1.0);
  values.wave_speed_given = draw(pipe.wave_speed);
  values.restraint_factor = not_a_number;
  values.wall_compliance = 0.0;
  if (pipe.wave_speed.given()) {
    values.wave_speed_without_gas = values.wave_speed_given * values.wave_speed_scatter;
    return;
  }
  values.wave_speed_without_gas = not_a_number;
  if (!plan.wave_speed_known) return;

  const auto material = headband::pipe::material_named(pipe.material);
  const Lanes<W> modulus = draw(pipe.modulus, material ? material->modulus : not_a_number);
  const Lanes<W> poisson = draw(pipe.poisson, material ? material->poisson : not_a_number);
  if (pipe.restraint_factor.given()) {
    values.restraint_factor = draw(pipe.restraint_factor);
  } else {
    values.restraint_factor = headband::pipe::restraint_factor<W>(restraint_of(pipe.joint),
                                                                  pipe.wall_formula == WallFormula::thick,
                                                                  poisson,
                                                                  values.metal_inner_diameter,
                                                                  values.wall);
  }
  Lanes<W> stiffness = modulus * values.wall;
  if (pipe.lining_modulus.given()) stiffness += draw(pipe.lining_modulus) * draw(pipe.lining_thickness, 0.0);
  values.wall_compliance = values.restraint_factor * values.metal_inner_diameter / stiffness;
  values.wave_speed_without_gas = values.wave_speed_scatter * headband::pipe::wave_speed<W>(liquid.density,
                                                                                            liquid.bulk_modulus,
                                                                                            values.wall_compliance,
                                                                                            Lanes<W>(0.0),
                                                                                            Lanes<W>(101325.0),
                                                                                            liquid.temperature);
}

/// Roughness or the number of another law, and the scatter factors.
template <int W>
void realise_friction(const Case& c, std::size_t index, LossKind loss, const Draw<W>& draw, PipeValues<W>& values) {
  const Pipe& pipe = c.pipes[index];
  values.roughness = not_a_number;
  values.loss_number = not_a_number;
  switch (loss) {
    case LossKind::darcy:
      values.roughness = draw(pipe.roughness, 0.0);  // `validate` asks for it where a law uses it
      break;
    case LossKind::hazen_williams:
      values.loss_number = draw(pipe.hazen_williams);
      break;
    case LossKind::manning:
      values.loss_number = draw(pipe.manning);
      break;
    case LossKind::fixed_factor:
      values.loss_number = draw(pipe.friction_factor.given() ? pipe.friction_factor : c.friction.fixed_factor);
      break;
    case LossKind::none:
      break;
  }
  const bool own = c.friction.scatter_per_pipe && index < c.friction.pipe_scatter.size();
  values.friction_scatter = draw(own ? c.friction.pipe_scatter[index] : c.friction.scatter, 1.0);
  values.laminar_scatter = draw(c.friction.laminar_scatter, 1.0);
}

/// Loss of the fittings, counts included; those without a place are summed.
template <int W>
void realise_fittings(const Pipe& pipe, const Draw<W>& draw, PipeValues<W>& values) {
  values.spread_k = 0.0;
  values.spread_equivalent_length = 0.0;
  values.placed_fittings.clear();
  for (const auto& fitting : pipe.fittings) {
    const Lanes<W> count = draw(fitting.count, 1.0);
    const Lanes<W> k = count * draw(fitting.k, 0.0);
    const Lanes<W> extra_length = count * draw(fitting.equivalent_length, 0.0);
    if (fitting.at.given()) {
      values.placed_fittings.push_back({k, extra_length, draw(fitting.at)});
    } else {
      values.spread_k += k;
      values.spread_equivalent_length += extra_length;
    }
  }
}

/// Profile points, stretched to the drawn length; without a profile the straight line between the places.
template <int W>
void realise_profile(const Pipe& pipe,
                     const PipePlan& plan,
                     const Draw<W>& draw,
                     const std::vector<PlaceValues<W>>& places,
                     PipeValues<W>& values) {
  if (pipe.profile.empty()) {
    values.chainage.assign(2, Lanes<W>(0.0));
    values.elevation.assign(2, Lanes<W>(0.0));
    values.chainage[1] = values.length;
    values.elevation[0] = places[plan.from.at()].elevation;
    values.elevation[1] = places[plan.to.at()].elevation;
    return;
  }
  const std::size_t points = pipe.profile.size();
  values.chainage.assign(points, Lanes<W>(0.0));
  values.elevation.assign(points, Lanes<W>(0.0));
  const Lanes<W> last = draw(pipe.profile.back().first);
  for (std::size_t i = 0; i < points; ++i) {
    values.chainage[i] = draw(pipe.profile[i].first);
    if (pipe.length.given()) values.chainage[i] = values.chainage[i] * (values.length / last);
    values.elevation[i] = draw(pipe.profile[i].second);
  }
  values.chainage.back() = values.length;
}

}  // namespace headband::network::detail
