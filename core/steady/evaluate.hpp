#pragma once
// SPDX-License-Identifier: MIT

#include "core/steady/steady.hpp"

namespace headband::steady {

/// Head at a chainage of a pipe: straight line between the computed heads plus placed fittings [m].
template <int W>
[[nodiscard]] Lanes<W> head_at(const network::Plan& plan, const network::Values<W>& values, const SteadyState<W>& state,
                               network::PipeId pipe, const Lanes<W>& chainage);

/// Value of an answer in the steady state [SI; pressures gauge]. Highest and lowest pressures are taken over the
/// profile points and ends of the pipes named (all pipes and places when the subject is everywhere).
template <int W>
[[nodiscard]] Lanes<W> answer(const network::Plan& plan, const network::Values<W>& values, const SteadyState<W>& state,
                              const network::AnswerPlan& what);

/// First point below the vapour limit, per lane: pipe index (or -1) and shortfall [m].
template <int W>
struct VapourCheck {
  base::PerLane<int, W> pipe{};
  Lanes<W> chainage, shortfall;
};
template <int W>
[[nodiscard]] VapourCheck<W> check_vapour(const network::Plan& plan, const network::Values<W>& values,
                                          const SteadyState<W>& state);

}  // namespace headband::steady
