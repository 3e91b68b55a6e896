#pragma once
// SPDX-License-Identifier: MIT

#include "core/network/pump_curve.hpp"
#include "core/network/valve_law.hpp"
#include "core/steady/flow_graph.hpp"
#include "core/steady/pipe_loss.hpp"

#include <vector>

namespace headband::steady {

/// What the links of a graph do to the head, for W draws. Storage is kept between draws.
template <int W>
struct LinkNumbers {
  std::vector<PipeFriction<W>> pipes;         ///< as Plan::pipes
  std::vector<Lanes<W>> area;                 ///< as Plan::pipes [m2]
  std::vector<Lanes<W>> valve_share;          ///< as Case::valves: share of full coefficient at the start [-]
  std::vector<Lanes<W>> valve_resistance;     ///< dH = this Q|Q| [s2/m5]; infinite when shut, NaN when sized by flow
  std::vector<Lanes<W>> check_resistance;     ///< as Case::check_valves [s2/m5]
  std::vector<network::PumpCurve<W>> curves;  ///< as Case::pumps: one pump, rated speed
  std::vector<Lanes<W>> last_curve_flow;      ///< as Case::pumps: last point of the curve [m3/s]
  std::vector<Lanes<W>> pump_count;           ///< pumps in parallel [-]
  std::vector<Lanes<W>> node_head;            ///< per node of the graph: held heads filled, others unset [m]
  std::vector<Lanes<W>> outflow;              ///< per node: known flows out of the network of links [m3/s]

  /// Makes room for the numbers; once per solver.
  void size(const network::Values<W>& values, const FlowGraph& graph);
  /// @param one_law no draw changes friction law or transition: what hangs on them is kept from the last time
  void fill(const network::Case& c,
            const network::Plan& plan,
            const FlowGraph& graph,
            const network::Values<W>& values,
            bool one_law);
};

/// Flow of a known flow, in the direction of its device [m3/s].
template <int W>
[[nodiscard]] Lanes<W> known_flow(const network::Plan& plan, const network::Values<W>& values, const KnownFlow& known) {
  const network::DevicePlan& device = plan.devices[static_cast<std::size_t>(known.device)];
  const auto index = static_cast<std::size_t>(device.index);
  return device.kind == network::DeviceKind::valve ? values.valves[index].sizing_flow : values.draw_offs[index].flow;
}

template <int W>
void LinkNumbers<W>::size(const network::Values<W>& values, const FlowGraph& graph) {
  pipes.resize(values.pipes.size());
  area.resize(values.pipes.size());
  valve_share.resize(values.valves.size());
  valve_resistance.resize(values.valves.size());
  check_resistance.resize(values.check_valves.size());
  curves.resize(values.pumps.size());
  pump_count.resize(values.pumps.size());
  last_curve_flow.resize(values.pumps.size());
  node_head.resize(static_cast<std::size_t>(graph.nodes()));
  outflow.resize(static_cast<std::size_t>(graph.nodes()));
}

template <int W>
void LinkNumbers<W>::fill(const network::Case& c,
                          const network::Plan& plan,
                          const FlowGraph& graph,
                          const network::Values<W>& values,
                          bool one_law) {
  const bool made_before = outflow.size() == static_cast<std::size_t>(graph.nodes());
  if (!made_before) size(values, graph);
  for (std::size_t i = 0; i < pipes.size(); ++i) {
    const auto& rule = pipes[i].rule;
    const bool kept =
        one_law && made_before && rule.law[0] == values.law[0] && rule.transition[0] == values.transition[0];
    renew_pipe_friction(plan, values, i, kept, pipes[i]);
    area[i] = values.pipes[i].area;
  }

  for (std::size_t i = 0; i < values.valves.size(); ++i) {
    const network::ValveValues<W>& valve = values.valves[i];
    valve_share[i] = network::share_of_full<W>(c.valves[i].law, valve.starting_opening, valve.seat_power);
    const Lanes<W> coefficient = valve.coefficient * valve_share[i];
    valve_resistance[i] = 1.0 / (coefficient * coefficient);
  }
  for (std::size_t i = 0; i < check_resistance.size(); ++i) {
    const Lanes<W> coefficient = values.check_valves[i].coefficient;
    check_resistance[i] = 1.0 / (coefficient * coefficient);
  }
  for (std::size_t i = 0; i < curves.size(); ++i) {
    const network::PumpValues<W>& pump = values.pumps[i];
    pump_count[i] = static_cast<double>(c.pumps[i].count);
    if (pump.curve_flow.size() < 2) {  // a pump known by its four-quadrant table alone
      std::vector<double> angle, head;
      for (const auto& [x, share] : c.pumps[i].suter.rows) {
        angle.push_back(x.value);
        head.push_back(share.value);
      }
      curves[i].fit_quadrants(angle, head, pump.rated_flow, pump.rated_head);
      last_curve_flow[i] = 2.0 * pump.rated_flow;
      continue;
    }
    curves[i].fit(pump.curve_flow, pump.curve_head);
    last_curve_flow[i] = pump.curve_flow.back();
  }

  for (auto& flow : outflow) flow = 0.0;
  for (std::size_t n = 0; n < values.places.size(); ++n) node_head[n] = values.places[n].held_head;
  for (std::size_t a = 0; a < graph.air_of_node.size(); ++a)
    node_head[values.places.size() + a] = values.places[static_cast<std::size_t>(graph.air_of_node[a])].elevation;
  for (const auto& known : graph.known) {
    const Lanes<W> flow = known_flow(plan, values, known);
    outflow[static_cast<std::size_t>(known.from)] += flow;
    if (known.to >= 0) outflow[static_cast<std::size_t>(known.to)] -= flow;
  }
}

}  // namespace headband::steady
