#pragma once
// SPDX-License-Identifier: MIT

#include "core/friction/factor.hpp"
#include "core/network/values.hpp"

namespace headband::steady {

using base::Lanes;

/// Everything that turns the flow of one pipe into its loss, for W draws.
template <int W>
struct PipeFriction {
  network::LossKind kind = network::LossKind::darcy;
  friction::FactorRule<W> rule;          ///< Darcy laws
  friction::PreparedRule<W> prepared{};  ///< of `rule`
  Lanes<W> fixed_factor = 0.0;           ///< fixed factor, Manning: Darcy factor, scatter included [-]
  Lanes<W> factor_at_unit = 0.0;         ///< Hazen-Williams: Darcy factor at 1 m3/s, scatter included [-]
  Lanes<W> reynolds_per_flow;            ///< Re = this |Q| [s/m3]
  Lanes<W> diameters;                    ///< (length + equivalent lengths of all fittings) / bore [-]
  Lanes<W> k;                            ///< loss coefficients of all fittings [-]
  Lanes<W> velocity_head;                ///< V^2/2g at 1 m3/s [m / (m3/s)^2]
};

/// The friction law of pipe `index` of a plan, its numbers taken from `values`.
template <int W>
[[nodiscard]] PipeFriction<W> pipe_friction(const network::Plan& plan,
                                            const network::Values<W>& values,
                                            std::size_t index);

/// The same in place of the numbers of other draws. @param laws_kept `out` was made for this pipe, and the laws and
/// transitions of all its draws are still those
template <int W>
void renew_pipe_friction(const network::Plan& plan,
                         const network::Values<W>& values,
                         std::size_t index,
                         bool laws_kept,
                         PipeFriction<W>& out);

/// Darcy factor (scatter included) and d ln f / d ln Q at a flow.
///
/// Hazen-Williams h = 10.67 L Q^1.852 / (C^1.852 D^4.8704) and Manning h = n^2 V^2 L / (D/4)^(4/3), both SI, are told
/// as the Darcy factor that gives the same loss.
/// @param flow_size |Q| [m3/s], > 0
template <int W>
[[nodiscard]] friction::Factor<W> factor_at_flow(const PipeFriction<W>& pipe, const Lanes<W>& flow_size);

/// Smallest flow a factor is asked for: at this Reynolds number. Below it the loss runs straight to zero.
inline constexpr double least_reynolds = 1e-6;

/// Loss of a whole pipe and what it comes from.
template <int W>
struct PipeLoss {
  Lanes<W> head;      ///< friction and fittings, signed with the flow [m]
  Lanes<W> slope;     ///< d head / d flow [s/m2], >= 0
  Lanes<W> factor;    ///< Darcy factor, scatter included [-]
  Lanes<W> reynolds;  ///< [-]
};

/// Loss of a pipe at a flow [m3/s].
template <int W>
[[nodiscard]] PipeLoss<W> pipe_loss(const PipeFriction<W>& pipe, const Lanes<W>& flow);

/// Losses of two pipes, or of one pipe in two blocks of draws: the bits of `pipe_loss` one by one, in less time.
void pipe_loss_of_two(const PipeFriction<8>& first,
                      const Lanes<8>& first_flow,
                      PipeLoss<8>& first_loss,
                      const PipeFriction<8>& second,
                      const Lanes<8>& second_flow,
                      PipeLoss<8>& second_loss);

extern template PipeFriction<1> pipe_friction<1>(const network::Plan&, const network::Values<1>&, std::size_t);
extern template PipeFriction<8> pipe_friction<8>(const network::Plan&, const network::Values<8>&, std::size_t);
extern template void renew_pipe_friction<1>(
    const network::Plan&, const network::Values<1>&, std::size_t, bool, PipeFriction<1>&);
extern template void renew_pipe_friction<8>(
    const network::Plan&, const network::Values<8>&, std::size_t, bool, PipeFriction<8>&);
extern template friction::Factor<1> factor_at_flow<1>(const PipeFriction<1>&, const Lanes<1>&);
extern template friction::Factor<8> factor_at_flow<8>(const PipeFriction<8>&, const Lanes<8>&);
extern template PipeLoss<1> pipe_loss<1>(const PipeFriction<1>&, const Lanes<1>&);
extern template PipeLoss<8> pipe_loss<8>(const PipeFriction<8>&, const Lanes<8>&);

}  // namespace headband::steady
