#pragma once
// SPDX-License-Identifier: MIT
//
// What the grid is asked for: the pipes of one draw, and what moves at their ends.

#include "core/network/values.hpp"
#include "core/steady/steady.hpp"
#include "transient/grid/grid.hpp"

namespace headband::transient {

/// True where something that feeds the pipe's length or wave speed is sampled, so that draws differ in their travel
/// time. With free gas a wave speed follows the steady pressure, which everything but events and bounds feeds.
[[nodiscard]] bool travel_time_is_uncertain(const network::Case& c, const network::Pipe& pipe);

/// What the grid needs of one lane of values.
template <int W>
[[nodiscard]] GridRequest grid_request(const network::Case& c,
                                       const network::Plan& plan,
                                       const network::Values<W>& values,
                                       const steady::SteadyState<W>& steady,
                                       int lane);

}  // namespace headband::transient
