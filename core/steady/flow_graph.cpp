// SPDX-License-Identifier: MIT

#include "core/steady/flow_graph.hpp"

#include <deque>
#include <utility>

namespace headband::steady {
namespace {

using network::DeviceKind;

int add_air_node(FlowGraph& graph, int place) {
  graph.held.push_back(true);
  graph.air_of_node.push_back(place);
  return graph.nodes() - 1;
}

void add_device(const network::Case& c, const network::DevicePlan& device, int device_index, FlowGraph& graph) {
  const auto index = static_cast<std::size_t>(device.index);
  Link link;
  link.index = device.index;
  link.device = device_index;
  link.from = device.from.index;
  link.to = device.to.index;
  switch (device.kind) {
    case DeviceKind::valve: {
      const network::Valve& valve = c.valves[index];
      if (starts_shut(valve)) return;
      if (valve.flow.given()) {
        graph.known.push_back({device_index, device.from.index, device.to.index});
        return;
      }
      link.kind = LinkKind::valve;
      if (link.to < 0) {
        link.to = add_air_node(graph, link.from);
        link.one_way = true;
      }
      break;
    }
    case DeviceKind::pump:
      if (starts_at_rest(c, c.pumps[index])) return;
      link.kind = LinkKind::pump;
      link.one_way = c.pumps[index].check_valve.kind != network::CheckValveKind::none;
      break;
    case DeviceKind::check_valve:
      link.kind = LinkKind::check_valve;
      link.one_way = true;
      break;
    case DeviceKind::draw_off:
      graph.known.push_back({device_index, device.from.index, -1});
      return;
    case DeviceKind::air_vessel:
    case DeviceKind::surge_tank:
    case DeviceKind::relief:
    case DeviceKind::air_valve:
      return;  // no flow while nothing moves
  }
  graph.links.push_back(link);
}

/// Walks every part outwards from its held heads; finds loops, second held heads and parts without one.
void find_order(FlowGraph& graph) {
  const auto nodes = static_cast<std::size_t>(graph.nodes());
  std::vector<std::vector<int>> links_at(nodes);
  for (std::size_t l = 0; l < graph.links.size(); ++l) {
    links_at[static_cast<std::size_t>(graph.links[l].from)].push_back(static_cast<int>(l));
    links_at[static_cast<std::size_t>(graph.links[l].to)].push_back(static_cast<int>(l));
  }
  std::vector<bool> reached(nodes, false), used(graph.links.size(), false);
  graph.is_tree_each = true;
  const auto walk_from = [&](int root) {
    std::deque<int> open{root};
    reached[static_cast<std::size_t>(root)] = true;
    while (!open.empty()) {
      const int parent = open.front();
      open.pop_front();
      for (const int l : links_at[static_cast<std::size_t>(parent)]) {
        if (used[static_cast<std::size_t>(l)]) continue;
        used[static_cast<std::size_t>(l)] = true;
        const Link& link = graph.links[static_cast<std::size_t>(l)];
        const int child = link.from == parent ? link.to : link.from;
        if (reached[static_cast<std::size_t>(child)] || graph.held[static_cast<std::size_t>(child)])
          graph.is_tree_each = false;  // a loop, or a second held head
        if (reached[static_cast<std::size_t>(child)]) continue;
        reached[static_cast<std::size_t>(child)] = true;
        graph.steps.push_back({l, parent, child});
        open.push_back(child);
      }
    }
  };
  for (std::size_t n = 0; n < nodes; ++n)
    if (graph.held[n] && !reached[n]) walk_from(static_cast<int>(n));
  for (std::size_t n = 0; n < nodes; ++n) {
    if (reached[n]) continue;
    graph.headless.push_back(static_cast<int>(n));
    graph.is_tree_each = false;
    walk_from(static_cast<int>(n));
  }
  if (!graph.is_tree_each) graph.steps.clear();
}

}  // namespace

FlowGraph make_flow_graph(const network::Case& c, const network::Plan& plan) {
  FlowGraph graph;
  graph.places = static_cast<int>(plan.places.size());
  for (const auto& place : plan.places) graph.held.push_back(place.basin >= 0 || place.head_given);
  for (std::size_t i = 0; i < plan.pipes.size(); ++i) {
    Link link;
    link.index = static_cast<int>(i);
    link.from = plan.pipes[i].from.index;
    link.to = plan.pipes[i].to.index;
    graph.links.push_back(link);
  }
  for (std::size_t d = 0; d < plan.devices.size(); ++d) add_device(c, plan.devices[d], static_cast<int>(d), graph);
  find_order(graph);
  return graph;
}

}  // namespace headband::steady
