#pragma once
// SPDX-License-Identifier: MIT
//
// A plan seen as a graph for steady flow: nodes with heads, links whose loss follows from their flow, and flows that
// are known beforehand. Built once per plan.

#include "core/network/plan.hpp"

#include <vector>

namespace headband::steady {

enum class LinkKind { pipe, valve, pump, check_valve };

/// A link whose head difference is a function of its flow.
struct Link {
  LinkKind kind = LinkKind::pipe;
  int index = -1;        ///< into Plan::pipes, or the case's vector of its kind
  int device = -1;       ///< into Plan::devices; -1 for pipes
  int from = -1;         ///< node
  int to = -1;           ///< node
  bool one_way = false;  ///< check valves, pumps with one, valves to the air: no flow to -> from
};

/// A flow known before heads are: draw-offs, valves sized by `flow`.
struct KnownFlow {
  int device = -1;  ///< into Plan::devices
  int from = -1;    ///< node the flow leaves
  int to = -1;      ///< node it enters; -1 = out of the network
};

/// One step away from a held head in the explicit evaluation.
struct TreeStep {
  int link = -1;
  int parent = -1;  ///< node nearer to the held head
  int child = -1;
};

struct FlowGraph {
  int places = 0;                ///< nodes 0 .. places-1 are the plan's places, then one air node per valve to air
  std::vector<int> air_of_node;  ///< per node beyond the places: the place whose elevation is its head
  std::vector<bool> held;        ///< per node: head known
  std::vector<Link> links;       ///< pipes first, in the plan's order
  std::vector<KnownFlow> known;
  bool is_tree_each = false;    ///< every part is a tree with exactly one held head: flows follow from continuity
  std::vector<TreeStep> steps;  ///< outwards from the held heads; filled where `is_tree_each`
  std::vector<int> headless;    ///< one place of every part without a held head

  [[nodiscard]] int nodes() const { return static_cast<int>(held.size()); }
};

[[nodiscard]] FlowGraph make_flow_graph(const network::Case& c, const network::Plan& plan);

}  // namespace headband::steady
