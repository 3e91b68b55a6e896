// SPDX-License-Identifier: MIT

#include "core/steady/evaluate.hpp"

#include "core/pipe/profile.hpp"

#include <limits>

namespace headband::steady {
namespace {

using network::AnswerKind;
using network::PipeId;
using network::PlaceId;
using network::SpotPlan;

constexpr double not_a_number = std::numeric_limits<double>::quiet_NaN();
constexpr double endless = std::numeric_limits<double>::infinity();

/// Head lost in one placed fitting [m], signed with the flow.
template <int W>
Lanes<W> placed_loss(const network::Values<W>& values,
                     const SteadyState<W>& state,
                     std::size_t pipe,
                     const network::FittingValues<W>& fitting) {
  const network::PipeValues<W>& numbers = values.pipes[pipe];
  const Lanes<W> velocity = state.pipe_flow[pipe] / numbers.area;
  const Lanes<W> coefficient = fitting.k + state.friction_factor[pipe] * fitting.equivalent_length / numbers.bore;
  return coefficient * velocity * base::abs(velocity) / (2.0 * values.gravity);
}

/// Head at a chainage; `beyond`: a fitting exactly there is already passed.
template <int W>
Lanes<W> head_along(const network::Plan& plan,
                    const network::Values<W>& values,
                    const SteadyState<W>& state,
                    std::size_t pipe,
                    const Lanes<W>& chainage,
                    bool beyond) {
  const network::PipeValues<W>& numbers = values.pipes[pipe];
  const Lanes<W> zero(0.0);
  Lanes<W> even_loss = state.head_loss[pipe], steps = zero;
  for (const auto& fitting : numbers.placed_fittings) {
    const Lanes<W> loss = placed_loss(values, state, pipe, fitting);
    even_loss = even_loss - loss;
    const base::Mask<W> passed = beyond ? fitting.at <= chainage : fitting.at < chainage;
    steps += base::select(passed, loss, zero);
  }
  return state.place_head[plan.pipes[pipe].from.at()] - even_loss * (chainage / numbers.length) - steps;
}

/// Calls `visit(chainage, head, elevation)` at every point where head minus elevation can have an extreme.
template <int W, class Visit>
void for_each_point(const network::Plan& plan,
                    const network::Values<W>& values,
                    const SteadyState<W>& state,
                    std::size_t pipe,
                    const Visit& visit) {
  const network::PipeValues<W>& numbers = values.pipes[pipe];
  for (std::size_t i = 0; i < numbers.chainage.size(); ++i)
    visit(numbers.chainage[i], head_along(plan, values, state, pipe, numbers.chainage[i], true), numbers.elevation[i]);
  for (const auto& fitting : numbers.placed_fittings) {
    const Lanes<W> elevation = headband::pipe::elevation_at<W>(numbers.chainage, numbers.elevation, fitting.at);
    visit(fitting.at, head_along(plan, values, state, pipe, fitting.at, false), elevation);
    visit(fitting.at, head_along(plan, values, state, pipe, fitting.at, true), elevation);
  }
}

/// Head and elevation of a spot.
template <int W>
struct SpotState {
  Lanes<W> head, elevation;
};

template <int W>
SpotState<W> at_spot(const network::Plan& plan,
                     const network::Values<W>& values,
                     const SteadyState<W>& state,
                     const SpotPlan& spot) {
  if (spot.place.exists()) return {state.place_head[spot.place.at()], values.places[spot.place.at()].elevation};
  if (!spot.pipe.exists()) return {Lanes<W>(not_a_number), Lanes<W>(not_a_number)};
  const network::PipeValues<W>& numbers = values.pipes[spot.pipe.at()];
  const Lanes<W> chainage = spot.chainage < 0.0 ? numbers.length : Lanes<W>(spot.chainage);
  return {head_along(plan, values, state, spot.pipe.at(), chainage, true),
          headband::pipe::elevation_at<W>(numbers.chainage, numbers.elevation, chainage)};
}

template <int W>
Lanes<W> gauge_pressure(const network::Values<W>& values, const Lanes<W>& head, const Lanes<W>& elevation) {
  return values.liquid.density * values.gravity * (head - elevation);
}

template <int W>
Lanes<W> pressure_at(const network::Plan& plan,
                     const network::Values<W>& values,
                     const SteadyState<W>& state,
                     const SpotPlan& spot) {
  const SpotState<W> there = at_spot(plan, values, state, spot);
  return gauge_pressure(values, there.head, there.elevation);
}

template <int W>
Lanes<W> drop(const network::Plan& plan,
              const network::Values<W>& values,
              const SteadyState<W>& state,
              const network::AnswerPlan& what) {
  if (what.where.place.exists() && what.other.place.exists()) {
    const std::size_t from = what.where.place.at(), to = what.other.place.at();
    const Lanes<W> weight = values.liquid.density * values.gravity;
    return weight * (state.place_head[from] - values.places[from].elevation) -
           weight * (state.place_head[to] - values.places[to].elevation);
  }
  const bool whole_pipe = what.where.pipe.exists() && !what.other.pipe.exists() && !what.other.place.exists();
  if (!whole_pipe) return pressure_at(plan, values, state, what.where) - pressure_at(plan, values, state, what.other);
  const std::size_t pipe = what.where.pipe.at();
  const network::PipeValues<W>& numbers = values.pipes[pipe];
  return gauge_pressure(values, state.place_head[plan.pipes[pipe].from.at()], numbers.elevation.front()) -
         gauge_pressure(values, state.place_head[plan.pipes[pipe].to.at()], numbers.elevation.back());
}

/// Highest (sign +1) or lowest (sign -1) gauge pressure of the subject.
template <int W>
Lanes<W> extreme_pressure(const network::Plan& plan,
                          const network::Values<W>& values,
                          const SteadyState<W>& state,
                          const SpotPlan& where,
                          double sign) {
  if (where.place.exists() || (where.pipe.exists() && where.chainage >= 0.0))
    return pressure_at(plan, values, state, where);
  Lanes<W> best = -endless;
  const auto take_pipe = [&](std::size_t pipe) {
    for_each_point(plan, values, state, pipe, [&](const Lanes<W>&, const Lanes<W>& head, const Lanes<W>& elevation) {
      best = base::max(best, sign * gauge_pressure(values, head, elevation));
    });
  };
  if (where.pipe.exists()) {
    take_pipe(where.pipe.at());
  } else {
    for (std::size_t pipe = 0; pipe < plan.pipes.size(); ++pipe) take_pipe(pipe);
    for (std::size_t place = 0; place < plan.places.size(); ++place)
      best = base::max(best, sign * gauge_pressure(values, state.place_head[place], values.places[place].elevation));
  }
  return sign * best;
}

template <int W>
Lanes<W> highest_velocity(const network::Plan& plan,
                          const network::Values<W>& values,
                          const SteadyState<W>& state,
                          const SpotPlan& where) {
  Lanes<W> best = 0.0;
  for (std::size_t pipe = 0; pipe < plan.pipes.size(); ++pipe) {
    if (where.pipe.exists() && where.pipe.at() != pipe) continue;
    const network::PipePlan& ends = plan.pipes[pipe];
    if (where.place.exists() && !(ends.from == where.place) && !(ends.to == where.place)) continue;
    best = base::max(best, base::abs(state.pipe_flow[pipe] / values.pipes[pipe].area));
  }
  return best;
}

/// Flow of a pipe; at a place where one pipe ends, that pipe's; elsewhere not a number.
template <int W>
Lanes<W> flow_of(const network::Plan& plan, const SteadyState<W>& state, const SpotPlan& where) {
  if (where.pipe.exists()) return state.pipe_flow[where.pipe.at()];
  int found = -1;
  for (std::size_t pipe = 0; pipe < plan.pipes.size(); ++pipe) {
    if (!(plan.pipes[pipe].from == where.place) && !(plan.pipes[pipe].to == where.place)) continue;
    if (found >= 0) return Lanes<W>(not_a_number);
    found = static_cast<int>(pipe);
  }
  return found >= 0 ? state.pipe_flow[static_cast<std::size_t>(found)] : Lanes<W>(not_a_number);
}

}  // namespace

template <int W>
Lanes<W> head_at(const network::Plan& plan,
                 const network::Values<W>& values,
                 const SteadyState<W>& state,
                 PipeId pipe,
                 const Lanes<W>& chainage) {
  return head_along(plan, values, state, pipe.at(), chainage, true);
}

template <int W>
Lanes<W> answer(const network::Plan& plan,
                const network::Values<W>& values,
                const SteadyState<W>& state,
                const network::AnswerPlan& what) {
  switch (what.kind) {
    case AnswerKind::pressure_drop:
      return drop(plan, values, state, what);
    case AnswerKind::flow:
      return flow_of(plan, state, what.where);
    case AnswerKind::head:
      return at_spot(plan, values, state, what.where).head;
    case AnswerKind::highest_pressure:
      return extreme_pressure(plan, values, state, what.where, 1.0);
    case AnswerKind::lowest_pressure:
      return extreme_pressure(plan, values, state, what.where, -1.0);
    case AnswerKind::velocity:
      return highest_velocity(plan, values, state, what.where);
  }
  return Lanes<W>(not_a_number);
}

namespace {

/// By how much a pipe's head line stays over its highest point at least, less what rounding can do to it: without
/// placed fittings it runs straight from end to end. Most lines clear their vapour head by that and need no look at
/// each of their points.
template <int W>
Lanes<W> least_clearance(const network::Plan& plan,
                         const network::Values<W>& values,
                         const SteadyState<W>& state,
                         std::size_t pipe) {
  constexpr double rounding = 1e-6;  // [m]; heads are good to 1e-10 m
  const network::PipeValues<W>& numbers = values.pipes[pipe];
  if (!numbers.placed_fittings.empty()) return Lanes<W>(-endless);
  Lanes<W> highest = numbers.elevation.front();
  for (const auto& elevation : numbers.elevation) highest = base::max(highest, elevation);
  const Lanes<W> from = state.place_head[plan.pipes[pipe].from.at()];
  const Lanes<W> lowest = base::min(from, from - state.head_loss[pipe]);
  return lowest - (highest + rounding);
}

}  // namespace

template <int W>
bool clears_vapour(const network::Plan& plan, const network::Values<W>& values, const SteadyState<W>& state) {
  const Lanes<W> vapour = values.liquid.vapour_pressure - values.atmosphere;
  if (!base::any(vapour == vapour)) return true;  // no vapour pressure is known
  const Lanes<W> weight = values.liquid.density * values.gravity;
  for (std::size_t pipe = 0; pipe < plan.pipes.size(); ++pipe)
    if (!base::all(weight * least_clearance(plan, values, state, pipe) > vapour)) return false;
  return true;
}

template <int W>
VapourCheck<W> check_vapour(const network::Plan& plan, const network::Values<W>& values, const SteadyState<W>& state) {
  VapourCheck<W> check;
  check.pipe.fill(-1);
  check.chainage = not_a_number;
  check.shortfall = 0.0;
  const Lanes<W> vapour_head =
      (values.liquid.vapour_pressure - values.atmosphere) / (values.liquid.density * values.gravity);
  if (!base::any(vapour_head == vapour_head)) return check;  // no vapour pressure is known
  for (std::size_t pipe = 0; pipe < plan.pipes.size(); ++pipe) {
    if (base::all(least_clearance(plan, values, state, pipe) > vapour_head)) continue;
    for_each_point(
        plan, values, state, pipe, [&](const Lanes<W>& chainage, const Lanes<W>& head, const Lanes<W>& elevation) {
          const Lanes<W> shortfall = elevation + vapour_head - head;
          const base::Mask<W> deeper = shortfall > check.shortfall;  // false without a vapour pressure
          if (!base::any(deeper)) return;
          for (int lane = 0; lane < W; ++lane)
            if (deeper[lane]) check.pipe[static_cast<std::size_t>(lane)] = static_cast<int>(pipe);
          check.chainage = base::select(deeper, chainage, check.chainage);
          check.shortfall = base::select(deeper, shortfall, check.shortfall);
        });
  }
  return check;
}

template Lanes<1> head_at<1>(
    const network::Plan&, const network::Values<1>&, const SteadyState<1>&, PipeId, const Lanes<1>&);
template Lanes<8> head_at<8>(
    const network::Plan&, const network::Values<8>&, const SteadyState<8>&, PipeId, const Lanes<8>&);
template Lanes<1> answer<1>(const network::Plan&,
                            const network::Values<1>&,
                            const SteadyState<1>&,
                            const network::AnswerPlan&);
template Lanes<8> answer<8>(const network::Plan&,
                            const network::Values<8>&,
                            const SteadyState<8>&,
                            const network::AnswerPlan&);
template bool clears_vapour<1>(const network::Plan&, const network::Values<1>&, const SteadyState<1>&);
template bool clears_vapour<8>(const network::Plan&, const network::Values<8>&, const SteadyState<8>&);
template VapourCheck<1> check_vapour<1>(const network::Plan&, const network::Values<1>&, const SteadyState<1>&);
template VapourCheck<8> check_vapour<8>(const network::Plan&, const network::Values<8>&, const SteadyState<8>&);

}  // namespace headband::steady
