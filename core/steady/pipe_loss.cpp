// SPDX-License-Identifier: MIT

#include "core/steady/pipe_loss.hpp"

#include "core/base/elementary.hpp"
#include "core/friction/head_loss.hpp"

namespace headband::steady {
template <int W>
void renew_pipe_friction(const network::Plan& plan,
                         const network::Values<W>& values,
                         std::size_t index,
                         bool laws_kept,
                         PipeFriction<W>& out) {
  const network::PipeValues<W>& pipe = values.pipes[index];
  out.kind = plan.pipes[index].loss;
  // two quotients for four: bore / (area viscosity), 1 / (2 g area^2), and two by the bore
  const Lanes<W> slow = pipe.area * values.liquid.kinematic_viscosity;
  const Lanes<W> quick = 2.0 * values.gravity * pipe.area * pipe.area;
  const Lanes<W> both = 1.0 / (slow * quick);
  out.reynolds_per_flow = pipe.bore * (quick * both);
  out.velocity_head = slow * both;
  const Lanes<W> per_bore = 1.0 / pipe.bore;
  out.k = pipe.spread_k;
  Lanes<W> length = pipe.length + pipe.spread_equivalent_length;
  for (const auto& fitting : pipe.placed_fittings) {
    out.k += fitting.k;
    length += fitting.equivalent_length;
  }
  out.diameters = length * per_bore;
  switch (out.kind) {
    case network::LossKind::darcy:
      out.rule.relative_roughness = pipe.roughness * per_bore;
      out.rule.scatter = pipe.friction_scatter;
      out.rule.laminar_scatter = pipe.laminar_scatter;
      if (laws_kept) {
        friction::refresh(out.prepared, out.rule.relative_roughness, out.rule.scatter, out.rule.laminar_scatter);
      } else {
        out.rule.law = values.law;
        out.rule.transition = values.transition;
        out.prepared = friction::prepare(out.rule);
      }
      break;
    case network::LossKind::hazen_williams:
      // f = h 2 g D A^2 / (L Q^2) at Q = 1
      out.factor_at_unit = pipe.friction_scatter * (2.0 * friction::hazen_williams_constant) * values.gravity *
                           pipe.bore * pipe.area * pipe.area /
                           (base::pow(pipe.loss_number, friction::hazen_williams_flow_power) *
                            base::pow(pipe.bore, friction::hazen_williams_bore_power));
      break;
    case network::LossKind::manning:
      // f = 8 g n^2 / R^(1/3), R = D/4 hydraulic radius
      out.fixed_factor = pipe.friction_scatter * 8.0 * values.gravity * pipe.loss_number * pipe.loss_number /
                         base::pow(0.25 * pipe.bore, 1.0 / 3.0);
      break;
    case network::LossKind::fixed_factor:
      out.fixed_factor = pipe.friction_scatter * pipe.loss_number;
      break;
    case network::LossKind::none:
      break;
  }
}

template <int W>
PipeFriction<W> pipe_friction(const network::Plan& plan, const network::Values<W>& values, std::size_t index) {
  PipeFriction<W> out;
  renew_pipe_friction<W>(plan, values, index, false, out);
  return out;
}

template <int W>
friction::Factor<W> factor_at_flow(const PipeFriction<W>& pipe, const Lanes<W>& flow_size) {
  switch (pipe.kind) {
    case network::LossKind::darcy:
      return friction::darcy_factor<W>(pipe.prepared, pipe.reynolds_per_flow * flow_size);
    case network::LossKind::hazen_williams:
      return {pipe.factor_at_unit * base::pow(flow_size, friction::hazen_williams_flow_power - 2.0),
              Lanes<W>(friction::hazen_williams_flow_power - 2.0)};
    case network::LossKind::manning:
    case network::LossKind::fixed_factor:
    case network::LossKind::none:
      break;
  }
  return {pipe.fixed_factor, Lanes<W>(0.0)};
}

namespace {

/// What a flow asks of its pipe, before the factor is known.
template <int W>
struct AskedFlow {
  Lanes<W> reynolds, effective;  ///< of the flow; its size, not under the least one looked at
  base::Mask<W> moving;
};

template <int W>
HEADBAND_INLINE AskedFlow<W> ask(const PipeFriction<W>& pipe, const Lanes<W>& flow) {
  AskedFlow<W> asked;
  const Lanes<W> size = base::abs(flow);
  asked.reynolds = pipe.reynolds_per_flow * size;
  asked.moving = asked.reynolds > Lanes<W>(least_reynolds);
  asked.effective = size;
  if (!base::all(asked.moving))
    asked.effective = base::select(asked.moving, size, Lanes<W>(least_reynolds) / pipe.reynolds_per_flow);
  return asked;
}

template <int W>
HEADBAND_INLINE PipeLoss<W> loss_of(const PipeFriction<W>& pipe,
                                    const Lanes<W>& flow,
                                    const AskedFlow<W>& asked,
                                    const friction::Factor<W>& factor) {
  const Lanes<W> head_per_velocity_head = pipe.velocity_head * asked.effective;
  const Lanes<W> friction_part = factor.factor * pipe.diameters * head_per_velocity_head;  // head per flow [s/m2]
  const Lanes<W> fitting_part = pipe.k * head_per_velocity_head;

  PipeLoss<W> loss;
  loss.head = (friction_part + fitting_part) * flow;
  loss.slope = base::select(
      asked.moving, friction_part * (2.0 + factor.log_slope) + 2.0 * fitting_part, friction_part + fitting_part);
  loss.factor = factor.factor;
  loss.reynolds = asked.reynolds;
  return loss;
}

}  // namespace

template <int W>
PipeLoss<W> pipe_loss(const PipeFriction<W>& pipe, const Lanes<W>& flow) {
  const AskedFlow<W> asked = ask(pipe, flow);
  return loss_of(pipe, flow, asked, factor_at_flow(pipe, asked.effective));
}

void pipe_loss_of_two(const PipeFriction<8>& first,
                      const Lanes<8>& first_flow,
                      PipeLoss<8>& first_loss,
                      const PipeFriction<8>& second,
                      const Lanes<8>& second_flow,
                      PipeLoss<8>& second_loss) {
  const AskedFlow<8> a = ask(first, first_flow), b = ask(second, second_flow);
  if (first.kind != network::LossKind::darcy || second.kind != network::LossKind::darcy) {
    first_loss = loss_of(first, first_flow, a, factor_at_flow(first, a.effective));
    second_loss = loss_of(second, second_flow, b, factor_at_flow(second, b.effective));
    return;
  }
  const auto factor = friction::darcy_factor_of_two(
      first.prepared, first.reynolds_per_flow * a.effective, second.prepared, second.reynolds_per_flow * b.effective);
  first_loss = loss_of(first, first_flow, a, factor[0]);
  second_loss = loss_of(second, second_flow, b, factor[1]);
}

template PipeFriction<1> pipe_friction<1>(const network::Plan&, const network::Values<1>&, std::size_t);
template PipeFriction<8> pipe_friction<8>(const network::Plan&, const network::Values<8>&, std::size_t);
template void renew_pipe_friction<1>(
    const network::Plan&, const network::Values<1>&, std::size_t, bool, PipeFriction<1>&);
template void renew_pipe_friction<8>(
    const network::Plan&, const network::Values<8>&, std::size_t, bool, PipeFriction<8>&);
template friction::Factor<1> factor_at_flow<1>(const PipeFriction<1>&, const Lanes<1>&);
template friction::Factor<8> factor_at_flow<8>(const PipeFriction<8>&, const Lanes<8>&);
template PipeLoss<1> pipe_loss<1>(const PipeFriction<1>&, const Lanes<1>&);
template PipeLoss<8> pipe_loss<8>(const PipeFriction<8>&, const Lanes<8>&);

}  // namespace headband::steady
