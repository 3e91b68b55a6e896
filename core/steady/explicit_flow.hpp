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

/// Flows by continuity from the far ends inwards. Needs graph.is_tree_each.
template <int W>
void flows_by_continuity(const FlowGraph& graph, LinkNumbers<W>& numbers, LinkFlows<W>& flows) {
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
}

/// The head behind a link, from the head before it and what the link loses; of a pipe the loss stands in `flows`.
template <int W>
void head_behind(const FlowGraph& graph, const TreeStep& step, LinkNumbers<W>& numbers, LinkFlows<W>& flows) {
  const Link& link = graph.links[static_cast<std::size_t>(step.link)];
  Lanes<W> loss;
  if (link.kind == LinkKind::pipe) {
    loss = flows.losses[static_cast<std::size_t>(link.index)].head;
  } else {
    const Lanes<W> flow = flows.flow[static_cast<std::size_t>(step.link)];
    loss = device_loss(numbers, link, flow);
    if (link.one_way) flows.possible = flows.possible & (flow >= Lanes<W>(0.0));
  }
  const Lanes<W> parent = numbers.node_head[static_cast<std::size_t>(step.parent)];
  numbers.node_head[static_cast<std::size_t>(step.child)] = link.from == step.parent ? parent - loss : parent + loss;
}

/// Flows by continuity, then heads outwards from the held ones. Needs graph.is_tree_each.
template <int W>
void solve_explicit(const FlowGraph& graph, LinkNumbers<W>& numbers, LinkFlows<W>& flows) {
  flows_by_continuity(graph, numbers, flows);
  for (const auto& step : graph.steps) {
    const Link& link = graph.links[static_cast<std::size_t>(step.link)];
    if (link.kind == LinkKind::pipe) {
      const auto pipe = static_cast<std::size_t>(link.index);
      flows.losses[pipe] = pipe_loss(numbers.pipes[pipe], flows.flow[static_cast<std::size_t>(step.link)]);
    }
    head_behind(graph, step, numbers, flows);
  }
}

/// The same for two blocks of draws side by side, bit by bit.
inline void solve_explicit_two(const FlowGraph& graph,
                               LinkNumbers<8>& first,
                               LinkFlows<8>& first_flows,
                               LinkNumbers<8>& second,
                               LinkFlows<8>& second_flows) {
  flows_by_continuity(graph, first, first_flows);
  flows_by_continuity(graph, second, second_flows);
  for (const auto& step : graph.steps) {
    const auto at = static_cast<std::size_t>(step.link);
    if (graph.links[at].kind == LinkKind::pipe) {
      const auto pipe = static_cast<std::size_t>(graph.links[at].index);
      pipe_loss_of_two(first.pipes[pipe],
                       first_flows.flow[at],
                       first_flows.losses[pipe],
                       second.pipes[pipe],
                       second_flows.flow[at],
                       second_flows.losses[pipe]);
    }
    head_behind(graph, step, first, first_flows);
    head_behind(graph, step, second, second_flows);
  }
}

}  // namespace headband::steady
