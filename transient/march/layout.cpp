// SPDX-License-Identifier: MIT
#include "transient/march/layout.hpp"

#include <algorithm>
#include <cmath>
#include <numeric>

namespace headband::transient {
namespace {

using network::DeviceKind;

// The pumps of a set, those that share every trip and start in one branch. An event acts on the first of those it can
// act on (a trip on running ones), in the order of time of the central run; the ones it acts on stand first.
void add_pump(const network::Case& c, const network::Plan& plan, std::size_t device, Layout& layout) {
  const auto& d = plan.devices[device];
  const network::Pump& pump = c.pumps[static_cast<std::size_t>(d.index)];
  struct Group {
    Branch branch;
    bool runs;
  };
  Branch all;
  all.kind = BranchKind::pump;
  all.device = static_cast<int>(device);
  all.index = d.index;
  all.from = d.from.index;
  all.to = d.to.index;
  all.count = pump.count;
  std::vector<Group> groups;
  groups.push_back({all, !network::starts_at_rest(c, pump)});
  const auto time_of = [&](int e) {
    return c.events[static_cast<std::size_t>(plan.events[static_cast<std::size_t>(e)].index)].at.value;
  };
  std::vector<int> events;
  for (std::size_t e = 0; e < plan.events.size(); ++e) {
    const auto kind = plan.events[e].kind;
    const bool power = kind == network::EventKind::trip_pump || kind == network::EventKind::start_pump;
    if (power && plan.events[e].device == static_cast<int>(device) && std::isfinite(time_of(static_cast<int>(e))))
      events.push_back(static_cast<int>(e));
  }
  std::ranges::stable_sort(events, {}, time_of);
  for (const int e : events) {
    const auto& event = plan.events[static_cast<std::size_t>(e)];
    const bool trips = event.kind == network::EventKind::trip_pump;
    const int asked = c.events[static_cast<std::size_t>(event.index)].tripping;
    int left = asked <= 0 ? pump.count : asked;
    for (std::size_t g = 0; g < groups.size() && left > 0; ++g) {
      if (groups[g].runs != trips) continue;
      const int others = groups[g].branch.count - left;
      if (others > 0) {
        groups.insert(groups.begin() + static_cast<std::ptrdiff_t>(g) + 1, groups[g]);
        groups[g + 1].branch.count = others;
        groups[g].branch.count = left;
      }
      left -= groups[g].branch.count;
      groups[g].branch.power.push_back(e);
      groups[g].runs = !trips;
    }
  }
  for (const Group& group : groups) layout.branches.push_back(group.branch);
}

void add_devices(const network::Case& c, const network::Plan& plan, Layout& layout) {
  for (std::size_t i = 0; i < plan.devices.size(); ++i) {
    const auto& d = plan.devices[i];
    Branch b{.kind = BranchKind::valve,
             .device = static_cast<int>(i),
             .index = d.index,
             .from = d.from.index,
             .to = d.to.index};
    switch (d.kind) {
      case DeviceKind::valve:
        layout.branches.push_back(b);
        break;
      case DeviceKind::check_valve:
        b.kind = BranchKind::check_valve;
        layout.branches.push_back(b);
        break;
      case DeviceKind::pump:
        add_pump(c, plan, i, layout);
        break;
      case DeviceKind::draw_off:
        if (c.draw_offs[static_cast<std::size_t>(d.index)].pressure_dependent) {
          b.kind = BranchKind::orifice;
          b.to = -1;
          layout.branches.push_back(b);
        } else {
          layout.draws_at[d.from.at()].push_back(static_cast<int>(layout.draws.size()));
          layout.draws.push_back({static_cast<int>(i), d.index, d.from.index});
        }
        break;
      case DeviceKind::air_vessel:
      case DeviceKind::surge_tank:
      case DeviceKind::relief:
      case DeviceKind::air_valve:
        break;  // refused in front of the march where a case asks for them
    }
  }
}

int root(std::vector<int>& parent, int i) {
  while (parent[static_cast<std::size_t>(i)] != i) i = parent[static_cast<std::size_t>(i)];
  return i;
}

void add_clusters(const network::Plan& plan, Layout& layout) {
  const std::size_t count = plan.places.size();
  std::vector<int> parent(count);
  std::iota(parent.begin(), parent.end(), 0);
  const auto held = [&](int place) { return plan.places[static_cast<std::size_t>(place)].basin >= 0; };
  for (const Branch& b : layout.branches) {
    if (b.to < 0 || held(b.from) || held(b.to)) continue;
    const int high = root(parent, b.from), low = root(parent, b.to);
    parent[static_cast<std::size_t>(std::max(high, low))] = std::min(high, low);
  }
  layout.cluster_of_place.assign(count, -1);
  for (std::size_t p = 0; p < count; ++p) {
    if (held(static_cast<int>(p))) {
      layout.basins.push_back(static_cast<int>(p));
      continue;
    }
    const auto r = static_cast<std::size_t>(root(parent, static_cast<int>(p)));
    if (r == p) {
      layout.cluster_of_place[p] = static_cast<int>(layout.clusters.size());
      layout.clusters.emplace_back();
    } else {
      layout.cluster_of_place[p] = layout.cluster_of_place[r];
    }
    layout.clusters[static_cast<std::size_t>(layout.cluster_of_place[p])].places.push_back(static_cast<int>(p));
  }
  for (std::size_t j = 0; j < layout.branches.size(); ++j) {
    const Branch& b = layout.branches[j];
    layout.branches_at[static_cast<std::size_t>(b.from)].push_back(static_cast<int>(j));
    if (b.to >= 0) layout.branches_at[static_cast<std::size_t>(b.to)].push_back(static_cast<int>(j));
    int cluster = layout.cluster_of_place[static_cast<std::size_t>(b.from)];
    if (cluster < 0 && b.to >= 0) cluster = layout.cluster_of_place[static_cast<std::size_t>(b.to)];
    if (cluster < 0) {  // between two basins, or from a basin to the air: a cluster without places
      cluster = static_cast<int>(layout.clusters.size());
      layout.clusters.emplace_back();
    }
    layout.clusters[static_cast<std::size_t>(cluster)].branches.push_back(static_cast<int>(j));
  }
  for (Cluster& cluster : layout.clusters) {
    layout.most_places = std::max(layout.most_places, cluster.places.size());
    layout.most_branches = std::max(layout.most_branches, cluster.branches.size());
    if (cluster.branches.size() != 1) continue;
    const BranchKind kind = layout.branches[static_cast<std::size_t>(cluster.branches.front())].kind;
    cluster.one_valve = kind == BranchKind::valve || kind == BranchKind::orifice;
    for (const int p : cluster.places)
      cluster.one_valve = cluster.one_valve && !layout.sides_at[static_cast<std::size_t>(p)].empty();
  }
}

}  // namespace

Layout make_layout(const network::Case& c, const network::Plan& plan, const std::vector<bool>& rigid) {
  Layout layout;
  layout.rigid = rigid;
  const std::size_t places = plan.places.size();
  layout.sides_at.resize(places);
  layout.draws_at.resize(places);
  layout.branches_at.resize(places);
  layout.side_from.assign(plan.pipes.size(), -1);
  layout.side_to.assign(plan.pipes.size(), -1);
  for (std::size_t i = 0; i < plan.pipes.size(); ++i) {
    const auto& pipe = plan.pipes[i];
    if (rigid[i]) {
      layout.branches.push_back(
          {.kind = BranchKind::rigid_pipe, .index = static_cast<int>(i), .from = pipe.from.index, .to = pipe.to.index});
      continue;
    }
    for (const bool far : {false, true}) {
      const int place = far ? pipe.to.index : pipe.from.index;
      (far ? layout.side_to : layout.side_from)[i] = static_cast<int>(layout.sides.size());
      layout.sides_at[static_cast<std::size_t>(place)].push_back(static_cast<int>(layout.sides.size()));
      layout.sides.push_back({static_cast<int>(i), far, place});
    }
  }
  add_devices(c, plan, layout);
  add_clusters(plan, layout);
  return layout;
}

}  // namespace headband::transient
