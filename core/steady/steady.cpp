// SPDX-License-Identifier: MIT

#include "core/steady/steady.hpp"

#include "core/pipe/wave_speed.hpp"
#include "core/steady/explicit_flow.hpp"
#include "core/steady/newton.hpp"

#include <algorithm>
#include <cmath>
#include <optional>
#include <tuple>

namespace headband::steady {
namespace {

using network::DeviceKind;

template <int W>
struct Workspace {
  LinkNumbers<W> numbers;
  LinkFlows<W> flows;
};

/// Mean absolute pressure of a pipe over its length: straight head line with steps at placed fittings, profile by
/// straight lines [Pa].
template <int W>
Lanes<W> mean_absolute_pressure(const network::Values<W>& values,
                                const network::PipeValues<W>& pipe,
                                const PipeFriction<W>& friction,
                                const PipeLoss<W>& loss,
                                const Lanes<W>& flow,
                                const Lanes<W>& head_from,
                                const Lanes<W>& head_to) {
  Lanes<W> mean_head = 0.5 * (head_from + head_to);
  for (const auto& fitting : pipe.placed_fittings) {
    const Lanes<W> step = (fitting.k + loss.factor * fitting.equivalent_length / pipe.bore) * friction.velocity_head *
                          flow * base::abs(flow);
    mean_head += step * (fitting.at / pipe.length - 0.5);  // the step comes at `at`, not evenly along the pipe
  }
  Lanes<W> area = 0.0;
  for (std::size_t i = 1; i < pipe.chainage.size(); ++i)
    area += 0.5 * (pipe.elevation[i] + pipe.elevation[i - 1]) * (pipe.chainage[i] - pipe.chainage[i - 1]);
  return values.atmosphere + values.liquid.density * values.gravity * (mean_head - area / pipe.length);
}

}  // namespace

struct SteadySolver::Parts {
  Parts(const network::Case& c, const network::Plan& plan, SteadyOptions chosen)
      : model(&c), topology(&plan), options(chosen), graph(make_flow_graph(c, plan)) {
    gas_possible = c.liquid.free_gas.given() && (c.liquid.free_gas.unknown >= 0 || c.liquid.free_gas.value > 0.0);
    one_law = c.friction.law.unknown < 0 && c.friction.transition.unknown < 0;
    if (!graph.is_tree_each) newton.emplace(graph);
  }

  const network::Case* model;
  const network::Plan* topology;
  SteadyOptions options;
  FlowGraph graph;
  std::optional<NewtonFlow> newton;  ///< where continuity alone does not fix the flows
  bool gas_possible = false;
  bool one_law = false;  ///< no draw changes law or transition
  std::tuple<Workspace<1>, Workspace<8>> workspaces;
  Workspace<8> second;  ///< of the second block of two

  template <int W>
  [[nodiscard]] Workspace<W>& workspace() {
    return std::get<Workspace<W>>(workspaces);
  }

  template <int W>
  void size_state(SteadyState<W>& state) const {
    const std::size_t pipes = topology->pipes.size(), devices = topology->devices.size();
    const bool sized = state.pipe_flow.size() == pipes && state.place_head.size() == topology->places.size() &&
                       state.device_flow.size() == devices && state.pump_speed.size() == model->pumps.size() &&
                       state.valve_coefficient.size() == model->valves.size();
    if (!sized) {
      state.pipe_flow.resize(pipes);
      state.friction_factor.resize(pipes);
      state.reynolds.resize(pipes);
      state.head_loss.resize(pipes);
      state.wave_speed.resize(pipes);
      state.place_head.resize(topology->places.size());
      state.device_flow.resize(devices);
      state.valve_coefficient.resize(model->valves.size());
      state.pump_speed.resize(model->pumps.size());
    }
    for (auto& flow : state.device_flow) flow = 0.0;
    state.status.fill(SteadyStatus::converged);
    state.residual = 0.0;
    state.iterations = 0;
  }

  template <int W>
  static void refuse_impossible(const Workspace<W>& work, SteadyState<W>& state) {
    if (base::all(work.flows.possible)) return;
    for (int lane = 0; lane < W; ++lane)
      if (!work.flows.possible[lane]) set_status(state, lane, SteadyStatus::not_converged);
  }

  /// Flows by continuity, or by Newton lane after lane.
  template <int W>
  void solve_flows(Workspace<W>& work, SteadyState<W>& state) {
    if (!newton) {
      solve_explicit(graph, work.numbers, work.flows);
      refuse_impossible(work, state);
      return;
    }
    for (int lane = 0; lane < W; ++lane) {
      const LaneOutcome outcome = newton->solve(graph, options, lane, work.numbers, work.flows);
      state.status[static_cast<std::size_t>(lane)] = outcome.status;
      state.residual.set(lane, outcome.residual);
      state.iterations = std::max(state.iterations, outcome.iterations);
    }
    work.flows.losses.resize(work.numbers.pipes.size());
    for (std::size_t i = 0; i < work.numbers.pipes.size(); ++i)
      work.flows.losses[i] = pipe_loss(work.numbers.pipes[i], work.flows.flow[i]);  // pipes are the first links
  }

  /// A pipe on the jump of its law loses what the heads at its ends say, between both sides of the jump.
  template <int W>
  void tell_losses_on_jumps(const Workspace<W>& work, SteadyState<W>& state) {
    if (!newton) return;  // where continuity gives the flow, it decides the side of the jump
    for (int lane = 0; lane < W; ++lane) {
      if (state.status[static_cast<std::size_t>(lane)] != SteadyStatus::on_jump) continue;
      for (std::size_t i = 0; i < state.pipe_flow.size(); ++i) {
        const double fall =
            state.place_head[topology->pipes[i].from.at()][lane] - state.place_head[topology->pipes[i].to.at()][lane];
        const double flow = state.pipe_flow[i][lane];
        const PipeFriction<W>& pipe = work.numbers.pipes[i];
        const double velocity_head = pipe.velocity_head[lane] * flow * flow;
        state.head_loss[i].set(lane, fall);
        if (velocity_head > 0.0)
          state.friction_factor[i].set(lane, (std::abs(fall) / velocity_head - pipe.k[lane]) / pipe.diameters[lane]);
      }
    }
  }

  template <int W>
  void copy_flows(const network::Values<W>& values, const Workspace<W>& work, SteadyState<W>& state) {
    for (std::size_t i = 0; i < state.place_head.size(); ++i) state.place_head[i] = work.numbers.node_head[i];
    for (std::size_t l = 0; l < graph.links.size(); ++l) {
      const Link& link = graph.links[l];
      if (link.kind == LinkKind::pipe) {
        const auto pipe = static_cast<std::size_t>(link.index);
        state.pipe_flow[pipe] = work.flows.flow[l];
        state.friction_factor[pipe] = work.flows.losses[pipe].factor;
        state.reynolds[pipe] = work.flows.losses[pipe].reynolds;
        state.head_loss[pipe] = work.flows.losses[pipe].head;
      } else {
        state.device_flow[static_cast<std::size_t>(link.device)] = work.flows.flow[l];
      }
    }
    for (const auto& known : graph.known)
      state.device_flow[static_cast<std::size_t>(known.device)] = known_flow(*topology, values, known);
    for (std::size_t i = 0; i < model->pumps.size(); ++i)
      state.pump_speed[i] = network::starts_at_rest(*model, model->pumps[i]) ? 0.0 : 1.0;
  }

  /// Coefficients of valves; those sized by `flow` get what passes it at the starting opening (convention n).
  template <int W>
  void size_valves(const network::Values<W>& values, const Workspace<W>& work, SteadyState<W>& state) {
    for (std::size_t i = 0; i < values.valves.size(); ++i) state.valve_coefficient[i] = values.valves[i].coefficient;
    for (const auto& known : graph.known) {
      const network::DevicePlan& device = topology->devices[static_cast<std::size_t>(known.device)];
      if (device.kind != DeviceKind::valve) continue;
      const auto valve = static_cast<std::size_t>(device.index);
      const Lanes<W> flow = values.valves[valve].sizing_flow;
      const Lanes<W> to_head = known.to >= 0 ? state.place_head[static_cast<std::size_t>(known.to)]
                                             : values.places[static_cast<std::size_t>(known.from)].elevation;
      const Lanes<W> fall = state.place_head[static_cast<std::size_t>(known.from)] - to_head;
      const Lanes<W> zero(0.0);
      const base::Mask<W> backwards = fall * flow <= zero;
      for (int lane = 0; lane < W; ++lane)
        if (backwards[lane]) set_status(state, lane, SteadyStatus::valve_without_head);
      state.valve_coefficient[valve] =
          base::abs(flow) / (work.numbers.valve_share[valve] * base::sqrt(base::abs(fall)));
    }
  }

  /// Wave speeds: free gas is compressed to the pipe's mean steady pressure, not below the vapour pressure.
  template <int W>
  void find_wave_speeds(const network::Values<W>& values, const Workspace<W>& work, SteadyState<W>& state) {
    for (std::size_t i = 0; i < values.pipes.size(); ++i) {
      const network::PipeValues<W>& pipe = values.pipes[i];
      state.wave_speed[i] = pipe.wave_speed_without_gas;
      if (!gas_possible) continue;
      const bool by_formula = topology->pipes[i].wave_speed_known && !model->pipes[i].wave_speed.given();
      if (!by_formula) continue;
      const Lanes<W> mean = mean_absolute_pressure(values,
                                                   pipe,
                                                   work.numbers.pipes[i],
                                                   work.flows.losses[i],
                                                   state.pipe_flow[i],
                                                   state.place_head[topology->pipes[i].from.at()],
                                                   state.place_head[topology->pipes[i].to.at()]);
      const Lanes<W> least = base::max(values.liquid.vapour_pressure, Lanes<W>(least_gas_pressure));
      state.wave_speed[i] = pipe.wave_speed_scatter * headband::pipe::wave_speed<W>(values.liquid.density,
                                                                                    values.liquid.bulk_modulus,
                                                                                    pipe.wall_compliance,
                                                                                    values.liquid.free_gas,
                                                                                    base::max(mean, least),
                                                                                    values.liquid.temperature);
    }
  }

  template <int W>
  static void set_status(SteadyState<W>& state, int lane, SteadyStatus status) {
    auto& current = state.status[static_cast<std::size_t>(lane)];
    if (is_usable(current)) current = status;
  }

  /// Marks lanes whose heads or flows are not numbers.
  template <int W>
  static void find_lost_lanes(SteadyState<W>& state) {
    Lanes<W> sum = 0.0;
    for (const auto& head : state.place_head) sum += head * 0.0;
    for (const auto& flow : state.pipe_flow) sum += flow * 0.0;
    for (const auto& flow : state.device_flow) sum += flow * 0.0;
    const base::Mask<W> finite = sum == Lanes<W>(0.0);
    if (base::all(finite)) return;
    for (int lane = 0; lane < W; ++lane)
      if (!finite[lane]) state.status[static_cast<std::size_t>(lane)] = SteadyStatus::not_finite;
  }

  /// Before the flows: room, and what each link does.
  template <int W>
  void begin(const network::Values<W>& values, Workspace<W>& work, SteadyState<W>& state) {
    size_state(state);
    work.numbers.fill(*model, *topology, graph, values, one_law);
  }

  /// Behind the flows: everything else of a state.
  template <int W>
  void finish(const network::Values<W>& values, const Workspace<W>& work, SteadyState<W>& state) {
    copy_flows(values, work, state);
    tell_losses_on_jumps(work, state);
    size_valves(values, work, state);
    find_wave_speeds(values, work, state);
    find_lost_lanes(state);
  }

  static constexpr double least_gas_pressure = 100.0;  ///< keeps the gas modulus above zero in lost lines [Pa]
};

SteadySolver::SteadySolver(const network::Case& c, const network::Plan& plan, SteadyOptions options)
    : parts_(std::make_unique<Parts>(c, plan, options)) {}
SteadySolver::~SteadySolver() = default;
SteadySolver::SteadySolver(SteadySolver&&) noexcept = default;
SteadySolver& SteadySolver::operator=(SteadySolver&&) noexcept = default;

bool SteadySolver::is_explicit() const { return parts_->graph.is_tree_each; }

template <int W>
void SteadySolver::solve(const network::Values<W>& values, SteadyState<W>& state) {
  Workspace<W>& work = parts_->workspace<W>();
  parts_->begin(values, work, state);
  parts_->solve_flows(work, state);
  parts_->finish(values, work, state);
}

void SteadySolver::solve(const std::array<network::Values<8>, 2>& values, std::array<SteadyState<8>, 2>& states) {
  if (!is_explicit()) {
    for (std::size_t k = 0; k < 2; ++k) solve<8>(values[k], states[k]);
    return;
  }
  const std::array<Workspace<8>*, 2> work{&parts_->workspace<8>(), &parts_->second};
  for (std::size_t k = 0; k < 2; ++k) parts_->begin(values[k], *work[k], states[k]);
  solve_explicit_two(parts_->graph, work[0]->numbers, work[0]->flows, work[1]->numbers, work[1]->flows);
  for (std::size_t k = 0; k < 2; ++k) {
    Parts::refuse_impossible(*work[k], states[k]);
    parts_->finish(values[k], *work[k], states[k]);
  }
}

template void SteadySolver::solve<1>(const network::Values<1>&, SteadyState<1>&);
template void SteadySolver::solve<8>(const network::Values<8>&, SteadyState<8>&);

}  // namespace headband::steady
