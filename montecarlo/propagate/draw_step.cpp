// SPDX-License-Identifier: MIT
#include "montecarlo/propagate/draw_step.hpp"

#include "core/steady/steady.hpp"
#include "transient/march/grid_request.hpp"

namespace headband::montecarlo {

std::optional<double> step_of_its_own(const network::Case& c, const std::vector<double>& scores) {
  const network::Plan plan = network::make_plan(c);
  const network::Scores<1> drawn(scores.begin(), scores.end());
  network::Values<1> values;
  network::realise<1>(c, plan, drawn, values);
  steady::SteadyState<1> state;
  steady::SteadySolver solver(c, plan);
  solver.solve<1>(values, state);
  if (!steady::is_usable(state.status[0])) return std::nullopt;
  transient::GridRequest request = transient::grid_request<1>(c, plan, values, state, 0);
  transient::Grid own, plain;
  transient::choose_grid(request, own);
  for (auto& pipe : request.pipes) pipe.uncertain = false;
  transient::choose_grid(request, plain);
  if (own.status != transient::GridStatus::good) return std::nullopt;
  if (plain.status == transient::GridStatus::good && plain.time_step == own.time_step) return std::nullopt;
  return own.time_step;
}

}  // namespace headband::montecarlo
