#pragma once
// SPDX-License-Identifier: MIT

#include "core/steady/steady.hpp"

namespace headband::steady {

/// Head at a chainage of a pipe: straight line between the computed heads plus placed fittings [m].
template <int W>
[[nodiscard]] Lanes<W> head_at(const network::Plan& plan,
                               const network::Values<W>& values,
                               const SteadyState<W>& state,
                               network::PipeId pipe,
                               const Lanes<W>& chainage);

/// Value of an answer in the steady state [SI; pressures gauge]. Highest and lowest pressures are taken over the
/// profile points and ends of the pipes named (all pipes and places when the subject is everywhere).
template <int W>
[[nodiscard]] Lanes<W> answer(const network::Plan& plan,
                              const network::Values<W>& values,
                              const SteadyState<W>& state,
                              const network::AnswerPlan& what);

/// Where the line falls deepest below the vapour limit (convention h), per lane: pipe index (-1: nowhere below),
/// chainage [m] and shortfall of head [m]. Looked at: profile points, pipe ends, both sides of placed fittings.
template <int W>
struct VapourCheck {
  base::PerLane<int, W> pipe{};
  Lanes<W> chainage, shortfall;
};
template <int W>
[[nodiscard]] VapourCheck<W> check_vapour(const network::Plan& plan,
                                          const network::Values<W>& values,
                                          const SteadyState<W>& state);

/// A quick look at the same: true where `check_vapour` would find no lane below anywhere. False says nothing.
template <int W>
[[nodiscard]] bool clears_vapour(const network::Plan& plan,
                                 const network::Values<W>& values,
                                 const SteadyState<W>& state);

extern template Lanes<1> head_at<1>(
    const network::Plan&, const network::Values<1>&, const SteadyState<1>&, network::PipeId, const Lanes<1>&);
extern template Lanes<8> head_at<8>(
    const network::Plan&, const network::Values<8>&, const SteadyState<8>&, network::PipeId, const Lanes<8>&);
extern template Lanes<1> answer<1>(const network::Plan&,
                                   const network::Values<1>&,
                                   const SteadyState<1>&,
                                   const network::AnswerPlan&);
extern template Lanes<8> answer<8>(const network::Plan&,
                                   const network::Values<8>&,
                                   const SteadyState<8>&,
                                   const network::AnswerPlan&);
extern template bool clears_vapour<1>(const network::Plan&, const network::Values<1>&, const SteadyState<1>&);
extern template bool clears_vapour<8>(const network::Plan&, const network::Values<8>&, const SteadyState<8>&);
extern template VapourCheck<1> check_vapour<1>(const network::Plan&, const network::Values<1>&, const SteadyState<1>&);
extern template VapourCheck<8> check_vapour<8>(const network::Plan&, const network::Values<8>&, const SteadyState<8>&);

}  // namespace headband::steady
