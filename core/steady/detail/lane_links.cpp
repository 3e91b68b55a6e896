// SPDX-License-Identifier: MIT

#include "core/steady/detail/lane_links.hpp"

#include <algorithm>
#include <cmath>

namespace headband::steady::detail {
namespace {

/// Newton begins with this velocity in every pipe [m/s]; water mains run at 0.5 to 2.5 (common practice).
constexpr double start_velocity = 0.5;
/// Slope of a one-way link below zero flow, in units of head scale / flow scale.
constexpr double back_steepness = 1e6;
/// Least slope of any link in the matrix, in the same units; the losses themselves are untouched.
constexpr double least_steepness = 1e-9;
/// The loss beside a jump is taken this share of the flow away from it.
constexpr double beside = 1e-12;

/// Copies one lane of `from` into slot `slot` of `to`.
template <int From, int To>
void copy_slot(const PipeFriction<From>& from, int lane, PipeFriction<To>& to, int slot) {
  const auto source = static_cast<std::size_t>(lane), target = static_cast<std::size_t>(slot);
  to.kind = from.kind;
  to.rule.law[target] = from.rule.law[source];
  to.rule.transition[target] = from.rule.transition[source];
  to.rule.relative_roughness.set(slot, from.rule.relative_roughness[lane]);
  to.rule.scatter.set(slot, from.rule.scatter[lane]);
  to.rule.laminar_scatter.set(slot, from.rule.laminar_scatter[lane]);
  to.fixed_factor.set(slot, from.fixed_factor[lane]);
  to.factor_at_unit.set(slot, from.factor_at_unit[lane]);
  to.reynolds_per_flow.set(slot, from.reynolds_per_flow[lane]);
  to.diameters.set(slot, from.diameters[lane]);
  to.k.set(slot, from.k[lane]);
  to.velocity_head.set(slot, from.velocity_head[lane]);
}

}  // namespace

LaneLinks::LaneLinks(const FlowGraph& graph) {
  const std::size_t links = graph.links.size();
  loss.resize(links);
  slope.resize(links);
  start_flow.resize(links);
  loss_at_rest.resize(links);
  passable.resize(links);
  jumps.resize(links);
  resistance_.resize(links);
  curves_.resize(links);
  count_.resize(links);
}

LaneLinks::Group& LaneLinks::group_for(network::LossKind kind) {
  int& open = open_group_[static_cast<std::size_t>(kind)];
  if (open < 0 || groups_[static_cast<std::size_t>(open)].used == 8) {
    open = static_cast<int>(used_groups_++);
    if (groups_.size() < used_groups_) groups_.emplace_back();
    groups_[static_cast<std::size_t>(open)].used = 0;
  }
  return groups_[static_cast<std::size_t>(open)];
}

template <int W>
void LaneLinks::take(const FlowGraph& graph, const LinkNumbers<W>& numbers, int lane) {
  std::fill(passable.begin(), passable.end(), char{1});
  std::fill(loss_at_rest.begin(), loss_at_rest.end(), 0.0);
  std::fill(jumps.begin(), jumps.end(), Jump{});
  has_jumps_ = false;
  used_groups_ = 0;
  open_group_.fill(-1);

  double widest = 0.0;
  for (std::size_t l = 0; l < graph.links.size(); ++l) {
    const Link& link = graph.links[l];
    const auto index = static_cast<std::size_t>(link.index);
    switch (link.kind) {
      case LinkKind::pipe: {
        const PipeFriction<W>& pipe = numbers.pipes[index];
        Group& group = group_for(pipe.kind);
        // unused slots repeat a pipe: they are computed and thrown away
        const int last = group.used == 0 ? 7 : group.used;
        for (int slot = group.used; slot <= last; ++slot) copy_slot(pipe, lane, group.friction, slot);
        group.link[static_cast<std::size_t>(group.used++)] = static_cast<int>(l);
        const double area = numbers.area[index][lane];
        start_flow[l] = start_velocity * area;
        widest = std::max(widest, area);
        if (pipe.kind == network::LossKind::darcy &&
            pipe.rule.transition[static_cast<std::size_t>(lane)].kind == friction::Transition::Kind::sudden) {
          PipeFriction<1> one;
          copy_slot(pipe, lane, one, 0);
          one.prepared = friction::prepare(one.rule);
          find_jump(l, one);
        }
        break;
      }
      case LinkKind::valve:
        resistance_[l] = numbers.valve_resistance[index][lane];
        passable[l] = std::isinf(resistance_[l]) ? 0 : 1;
        break;
      case LinkKind::check_valve:
        resistance_[l] = numbers.check_resistance[index][lane];
        break;
      case LinkKind::pump:
        numbers.curves[index].copy_lane(lane, curves_[l]);
        count_[l] = numbers.pump_count[index][lane];
        loss_at_rest[l] = -curves_[l].at(0.0).value[0];
        start_flow[l] = count_[l] * 0.5 * numbers.last_curve_flow[index][lane];
        break;
    }
  }
  for (std::size_t g = 0; g < used_groups_; ++g)
    if (groups_[g].friction.kind == network::LossKind::darcy)
      groups_[g].friction.prepared = friction::prepare(groups_[g].friction.rule);
  held_heads_.clear();
  double known = 0.0;
  for (std::size_t n = 0; n < graph.held.size(); ++n) {
    if (graph.held[n]) held_heads_.push_back(numbers.node_head[n][lane]);
    known += std::abs(numbers.outflow[n][lane]);
  }
  flow_scale = std::max(known, widest * 1.0);
  find_scales(graph, held_heads_, known);
}

void LaneLinks::find_scales(const FlowGraph& graph, const std::vector<double>& held_heads, double known_flows) {
  const auto [low, high] = std::minmax_element(held_heads.begin(), held_heads.end());
  head_scale = held_heads.empty() ? 0.0 : *high - *low;
  for (const double rest : loss_at_rest) head_scale += std::abs(rest);
  head_scale = std::max(head_scale, 1.0);
  const double unit = head_scale / flow_scale;
  back_slope_ = back_steepness * unit;
  least_slope = least_steepness * unit;
  for (std::size_t l = 0; l < graph.links.size(); ++l) {
    const LinkKind kind = graph.links[l].kind;
    if (kind != LinkKind::valve && kind != LinkKind::check_valve) continue;
    const double at_one_metre = resistance_[l] > 0.0 ? 1.0 / std::sqrt(resistance_[l]) : flow_scale;
    start_flow[l] = std::min(at_one_metre, std::max(known_flows, flow_scale));
  }
}

void LaneLinks::find_jump(std::size_t l, const PipeFriction<1>& friction) {
  Jump& jump = jumps[l];
  jump.flow = friction.rule.transition[0].from / friction.reynolds_per_flow[0];
  jump.below = pipe_loss<1>(friction, jump.flow * (1.0 - beside)).head[0];
  jump.above = pipe_loss<1>(friction, jump.flow * (1.0 + beside)).head[0];
  has_jumps_ = true;
}

/// Between the jump and the end of its ramp the loss climbs from one side to the other.
void LaneLinks::climb_the_jump(std::size_t l, double flow) {
  const Jump& jump = jumps[l];
  const double past = std::abs(flow) - jump.flow;
  if (jump.flow <= 0.0 || past < 0.0 || past > jump.width()) return;
  const double steep = (jump.above - jump.below) / jump.width();
  loss[l] = std::copysign(jump.below + steep * past, flow);
  slope[l] = std::max(steep, slope[l]);
}

void LaneLinks::evaluate_device(const Link& link, std::size_t l, double flow) {
  if (link.one_way && flow < 0.0) {
    loss[l] = loss_at_rest[l] + back_slope_ * flow;
    slope[l] = back_slope_;
  } else if (link.kind == LinkKind::pump) {
    const auto point = curves_[l].at(flow / count_[l]);
    loss[l] = -point.value[0];
    slope[l] = -point.slope[0] / count_[l];
  } else {
    loss[l] = resistance_[l] * flow * std::abs(flow);
    slope[l] = 2.0 * resistance_[l] * std::abs(flow);
  }
}

void LaneLinks::evaluate(const FlowGraph& graph, const std::vector<double>& flow) {
  for (std::size_t g = 0; g < used_groups_; ++g) {
    const Group& group = groups_[g];
    Lanes<8> flows = 0.0;
    for (int slot = 0; slot < group.used; ++slot)
      flows.set(slot, flow[static_cast<std::size_t>(group.link[static_cast<std::size_t>(slot)])]);
    const PipeLoss<8> losses = pipe_loss(group.friction, flows);
    for (int slot = 0; slot < group.used; ++slot) {
      const auto l = static_cast<std::size_t>(group.link[static_cast<std::size_t>(slot)]);
      loss[l] = losses.head[slot];
      slope[l] = losses.slope[slot];
      if (has_jumps_) climb_the_jump(l, flow[l]);
    }
  }
  for (std::size_t l = 0; l < graph.links.size(); ++l)
    if (graph.links[l].kind != LinkKind::pipe) evaluate_device(graph.links[l], l, flow[l]);
}

template void LaneLinks::take<1>(const FlowGraph&, const LinkNumbers<1>&, int);
template void LaneLinks::take<8>(const FlowGraph&, const LinkNumbers<8>&, int);

}  // namespace headband::steady::detail
