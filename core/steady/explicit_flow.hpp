#pragma once
// SPDX-License-Identifier: MIT

#include "core/steady/link_numbers.hpp"

namespace headband::steady {

/// Flows and heads of W draws.
template <int W>
struct LinkFlows {
  std::vector<Lanes<W>> flow;       ///< per link [m3/s]
  std::vector<PipeLoss<W>> losses;  ///< per pipe
  base::Mask<W> possible;           ///< false: a one-way link would have to flow backwards
};

/// Head lost from `from` to `to` of a link that is not a pipe [m].
template <int W>
[[nodiscard]] Lanes<W> device_loss(const LinkNumbers<W>& numbers, const Link& link, const Lanes<W>& flow) {
  const auto index = static_cast<std::size_t>(link.index);
  const Lanes<W> zero(0.0);
  switch (link.kind) {
    case LinkKind::pump:
      return -numbers.curves[index].at(flow / numbers.pump_count[index]).value;
    case LinkKind::valve:
      return base::select(flow == zero, zero, numbers.valve_resistance[index] * flow * base::abs(flow));
    case LinkKind::check_valve:
      return numbers.check_resistance[index] * flow * base::abs(flow);
    case LinkKind::pipe:
      break;
  }
  return zero;
}

/// Flows by continuity from the far ends inwards, then heads outwards from the held ones. Needs graph.is_tree_each.
template <int W>
void solve_explicit(const FlowGraph& graph, LinkNumbers<W>& numbers, LinkFlows<W>& flows) {
  const Lanes<W> zero(0.0);
  if (flows.flow.size() != graph.links.size()) flows.flow.resize(graph.links.size());
  if (flows.losses.size() != numbers.pipes.size()) flows.losses.resize(numbers.pipes.size());
  flows.possible = zero == zero;  // NOLINT(misc-redundant-expression): a mask with every lane on
  for (auto step = graph.steps.rbegin(); step != graph.steps.rend(); ++step) {
    const Link& link = graph.links[static_cast<std::size_t>(step->link)];
    const Lanes<W> outwards = numbers.outflow[static_cast<std::size_t>(step->child)];
    numbers.outflow[static_cast<std::size_t>(step->parent)] += outwards;
    flows.flow[static_cast<std::size_t>(step->link)] = link.from == step->parent ? outwards : -outwards;
  }
  for (const auto& step : graph.steps) {
    const Link& link = graph.links[static_cast<std::size_t>(step.link)];
    const Lanes<W> flow = flows.flow[static_cast<std::size_t>(step.link)];
    Lanes<W> loss;
    if (link.kind == LinkKind::pipe) {
      auto& pipe = flows.losses[static_cast<std::size_t>(link.index)];
      pipe = pipe_loss(numbers.pipes[static_cast<std::size_t>(link.index)], flow);
      loss = pipe.head;
    } else {
      loss = device_loss(numbers, link, flow);
      if (link.one_way) flows.possible = flows.possible & (flow >= zero);
    }
    const Lanes<W> parent = numbers.node_head[static_cast<std::size_t>(step.parent)];
    numbers.node_head[static_cast<std::size_t>(step.child)] = link.from == step.parent ? parent - loss : parent + loss;
  }
}

}  // namespace headband::steady
