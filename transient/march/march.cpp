// SPDX-License-Identifier: MIT
#include "transient/march/march.hpp"

#include "core/network/valve_law.hpp"
#include "transient/device/valve.hpp"

#include <algorithm>
#include <cmath>

namespace headband::transient {
namespace {

std::size_t at(int i) { return static_cast<std::size_t>(i); }

// Loss of one reach after `row` at the first flow, as the march itself takes it.
template <int W>
Lanes<W> first_loss(const PipeNumbers<W>& p, const Numbers<W>& n, std::size_t row, const Lanes<W>& flow) {
  const Lanes<W>& fitting = n.fitting[row];
  const Lanes<W>& longer = n.longer[row];
  switch (p.resistance.form) {
    case Form::darcy:
      return steady_loss<W, Form::darcy>(p.resistance, flow, fitting, longer);
    case Form::power:
      return steady_loss<W, Form::power>(p.resistance, flow, fitting, longer);
    case Form::quadratic:
      break;
  }
  return steady_loss<W, Form::quadratic>(p.resistance, flow, fitting, longer);
}

}  // namespace

template <int W>
March<W>::March(const network::Case& c, const network::Plan& plan, Layout layout)
    : case_(&c), plan_(&plan), layout_(std::move(layout)), solver_(layout_), local_place_(plan.places.size(), -1) {}

template <int W>
void March<W>::point_rows() {
  rows_.assign(plan_->pipes.size(), PipeRows<W>{});
  for (std::size_t i = 0; i < rows_.size(); ++i) {
    const PipeNumbers<W>& p = numbers_.pipes[i];
    PipeRows<W>& r = rows_[i];
    r.rows = p.most_reaches + 1;
    r.head = &state_.head[p.first_row];
    r.flow = &state_.flow[p.first_row];
    r.flow_before = &state_.flow_before[p.first_row];
    r.volume = &state_.volume[p.first_row];
    r.vapour = &numbers_.vapour[p.first_row];
    if (p.placed) {
      r.fitting = &numbers_.fitting[p.first_row];
      r.longer = &numbers_.longer[p.first_row];
    }
    if (!state_.root.empty()) {
      r.root = &state_.root[p.first_row];
      r.root_on = &state_.root_on[p.first_row];
    }
    if (!p.uniform) r.reaches = &p.reach_count;
    if (state_.head_max.empty()) continue;
    r.head_max = &state_.head_max[p.first_row];
    r.head_min = &state_.head_min[p.first_row];
  }
}

template <int W>
void March<W>::prepare(const network::Values<W>& values,
                       const steady::SteadyState<W>& steady,
                       const base::PerLane<const Grid*, W>& grids,
                       bool envelopes) {
  fill_numbers(*case_, *plan_, layout_, values, steady, grids, numbers_, jumps_);
  status_ = {};
  time_ = Lanes<W>(0.0);
  state_.tally = CavityTally<W>{};
  set_initial_pipes(values, steady);
  set_initial_places(steady);
  set_initial_branches(steady);
  state_.head_max.clear();
  state_.head_min.clear();
  if (envelopes) {
    state_.head_max = state_.head;
    state_.head_min = state_.head;
  }
  point_rows();
  find_simple();
}

template <int W>
void March<W>::set_initial_pipes(const network::Values<W>& values, const steady::SteadyState<W>& steady) {
  (void)values;
  const Lanes<W> zero(0.0);
  state_.head.assign(numbers_.rows, zero);
  state_.flow.assign(numbers_.rows, zero);
  state_.flow_before.assign(numbers_.rows, zero);
  state_.volume.assign(numbers_.rows, zero);
  state_.cavities.assign(plan_->pipes.size(), 0);
  const bool roots = std::any_of(numbers_.pipes.begin(), numbers_.pipes.end(), [](const PipeNumbers<W>& p) {
    return p.resistance.form == Form::darcy && p.resistance.rule.root_kept;
  });
  state_.root.assign(roots ? numbers_.rows : 0, zero);
  state_.root_on.assign(roots ? numbers_.rows : 0, zero);
  for (std::size_t i = 0; i < plan_->pipes.size(); ++i) {
    const PipeNumbers<W>& p = numbers_.pipes[i];
    if (p.most_reaches == 0) continue;
    const Lanes<W>& flow = steady.pipe_flow[i];
    const Lanes<W>& last = steady.place_head[plan_->pipes[i].to.at()];
    Lanes<W> head = steady.place_head[plan_->pipes[i].from.at()];
    for (int row = 0; row <= p.most_reaches; ++row) {
      const std::size_t r = p.first_row + at(row);
      if (p.uniform) {
        state_.head[r] = row == p.most_reaches ? last : head;
        state_.flow[r] = flow;
      }
      for (int lane = 0; !p.uniform && lane < W; ++lane) {
        if (row > p.reaches[at(lane)]) continue;  // nothing stands behind the far end
        state_.head[r].set(lane, row == p.reaches[at(lane)] ? last[lane] : head[lane]);
        state_.flow[r].set(lane, flow[lane]);
      }
      if (row < p.most_reaches) head = head - first_loss(p, numbers_, r, flow);
    }
  }
}

template <int W>
void March<W>::set_initial_places(const steady::SteadyState<W>& steady) {
  const std::size_t count = plan_->places.size();
  const Lanes<W> zero(0.0);
  state_.place_head = steady.place_head;
  state_.place_max = state_.place_head;
  state_.place_min = state_.place_head;
  state_.place_volume.assign(count, zero);
  state_.place_growth.assign(count, zero);
  place_head_free_.assign(count, zero);
  place_gives_.assign(count, zero);
  state_.wave.resize(layout_.sides.size());
  state_.per_impedance.resize(layout_.sides.size());
  state_.side_flow.resize(layout_.sides.size());
  for (std::size_t s = 0; s < layout_.sides.size(); ++s) {
    const Side& side = layout_.sides[s];
    const Lanes<W>& flow = steady.pipe_flow[at(side.pipe)];
    state_.side_flow[s] = side.far ? flow : -flow;
  }
}

template <int W>
void March<W>::set_initial_branches(const steady::SteadyState<W>& steady) {
  const std::size_t count = layout_.branches.size();
  const Lanes<W> zero(0.0);
  state_.branch_flow.assign(count, zero);
  state_.branch_coefficient.assign(count, zero);
  state_.branch_opening.assign(count, zero);
  rigid_offset_.assign(count, zero);
  rigid_slope_.assign(count, zero);
  state_.memory.assign(count * W, BranchMemory{});
  for (std::size_t j = 0; j < count; ++j) {
    const Branch& b = layout_.branches[j];
    Lanes<W> flow = b.kind == BranchKind::rigid_pipe ? steady.pipe_flow[at(b.index)] : steady.device_flow[at(b.device)];
    if (b.kind == BranchKind::pump) flow = flow * (static_cast<double>(b.count) / case_->pumps[at(b.index)].count);
    state_.branch_flow[j] = flow;
    state_.branch_opening[j] = numbers_.branch_movement[j].position();
    for (int lane = 0; lane < W; ++lane) {
      BranchMemory& m = state_.memory[j * W + at(lane)];
      m.flow = flow[lane];
      m.shut = !(flow[lane] > 0.0);
      m.may_reverse = numbers_.check[j * W + at(lane)].lets_turn && !m.shut;
      if (b.kind == BranchKind::pump) {
        m.speed = steady.pump_speed[at(b.index)][lane];
        m.torque = numbers_.pump[j * W + at(lane)].at(m.flow / b.count, m.speed).torque;
      }
    }
  }
  state_.draw.resize(layout_.draws.size());
  for (std::size_t j = 0; j < layout_.draws.size(); ++j) state_.draw[j] = numbers_.draw_movement[j].position();
  move_devices();
}

template <int W>
void March<W>::open_branch(std::size_t j, const Lanes<W>& opening) {
  const Branch& b = layout_.branches[j];
  state_.branch_opening[j] = opening;
  state_.branch_coefficient[j] =
      numbers_.branch_full[j] *
      (b.kind == BranchKind::valve
           ? network::share_of_full<W>(case_->valves[at(b.index)].law, opening, numbers_.seat_power[j])
           : opening);
}

template <int W>
void March<W>::move_devices() {
  for (std::size_t j = 0; j < layout_.branches.size(); ++j) {
    const Branch& b = layout_.branches[j];
    if (b.kind == BranchKind::valve || b.kind == BranchKind::orifice) {
      const Lanes<W> opening = numbers_.branch_movement[j].move_to(time_);
      const auto same = opening == state_.branch_opening[j];
      if (time_[0] > 0.0 && all(same)) continue;
      open_branch(j, opening);
    } else if (b.kind == BranchKind::check_valve) {
      state_.branch_coefficient[j] = numbers_.branch_full[j];
    }
  }
  for (std::size_t j = 0; j < layout_.draws.size(); ++j) state_.draw[j] = numbers_.draw_movement[j].move_to(time_);
}

template <int W>
void March<W>::receive_waves() {
  for (std::size_t s = 0; s < layout_.sides.size(); ++s) {
    const Side& side = layout_.sides[s];
    const std::size_t i = at(side.pipe);
    const PipeNumbers<W>& p = numbers_.pipes[i];
    const PipeRows<W>& rows = rows_of(i);
    state_.wave[s] = side.far ? arriving_at_to(p.resistance, rows, p.reaches, p.uniform)
                              : arriving_at_from(p.resistance, rows, state_.cavities[i] != 0);
    state_.per_impedance[s] = 1.0 / state_.wave[s].impedance;
  }
}

template <int W>
void March<W>::march_pipes() {
  for (std::size_t i = 0; i < plan_->pipes.size(); ++i) {
    const PipeNumbers<W>& p = numbers_.pipes[i];
    if (p.most_reaches < 2) continue;
    bool cavities = state_.cavities[i] != 0;
    march_interior(
        p.resistance, rows_of(i), numbers_.time_step, p.per_section_volume, numbers_.limited, cavities, state_.tally);
    state_.cavities[i] = cavities ? 1 : 0;
  }
}

template <int W>
Lanes<W> March<W>::branch_outflow(int place) const {
  Lanes<W> out(0.0);
  for (const int j : layout_.branches_at[at(place)]) {
    const Branch& b = layout_.branches[at(j)];
    if (b.from == place) out += state_.branch_flow[at(j)];
    if (b.to == place) out = out - state_.branch_flow[at(j)];
  }
  return out;
}

template <int W>
Lanes<W> March<W>::draw_outflow(int place) const {
  Lanes<W> out(0.0);
  for (const int d : layout_.draws_at[at(place)]) out += state_.draw[at(d)];
  return out;
}

// Head of the place without device flow, and how much it gives way: H = free - gives x outflow.
template <int W>
void March<W>::solve_place(int place) {
  const auto& sides = layout_.sides_at[at(place)];
  const std::size_t p = at(place);
  const Lanes<W> draw = draw_outflow(place);
  if (sides.size() == 1) {
    const Arriving<W>& w = state_.wave[at(sides.front())];
    place_gives_[p] = w.impedance;
    place_head_free_[p] = w.head - w.impedance * draw;
    return;
  }
  Lanes<W> waves(0.0), gives(0.0);
  for (const int s : sides) {
    waves += state_.wave[at(s)].head * state_.per_impedance[at(s)];
    gives += state_.per_impedance[at(s)];
  }
  place_gives_[p] = 1.0 / gives;
  place_head_free_[p] = (waves - draw) * place_gives_[p];
}

// Sets the head of a place whose outflow is known, and the flows of its pipe ends.
template <int W>
void March<W>::give_head(int place, const Lanes<W>& head) {
  const std::size_t p = at(place);
  const auto& sides = layout_.sides_at[p];
  state_.place_head[p] = head;
  if (sides.size() == 1 && plan_->places[p].basin < 0) {
    // one pipe end: what comes in is what goes out, to the last bit
    state_.side_flow[at(sides.front())] = branch_outflow(place) + draw_outflow(place);
    return;
  }
  for (const int s : sides) state_.side_flow[at(s)] = (state_.wave[at(s)].head - head) * state_.per_impedance[at(s)];
}

template <int W>
void March<W>::solve_valve(const Cluster& cluster) {
  const std::size_t j = at(cluster.branches.front());
  const Branch& b = layout_.branches[j];
  for (const int place : cluster.places) solve_place(place);
  const Lanes<W> zero(0.0);
  const auto free_head = [&](int place) {
    if (place < 0) return numbers_.place_elevation[at(b.from)];
    return plan_->places[at(place)].basin >= 0 ? state_.place_head[at(place)] : place_head_free_[at(place)];
  };
  const auto gives = [&](int place) {
    return place < 0 || plan_->places[at(place)].basin >= 0 ? zero : place_gives_[at(place)];
  };
  const Lanes<W> gives_from = gives(b.from), gives_to = gives(b.to);
  Lanes<W> flow =
      valve_flow<W>(free_head(b.from) - free_head(b.to), gives_from + gives_to, state_.branch_coefficient[j]);
  if (b.to < 0) flow = max(flow, zero);  // air is never drawn in
  state_.branch_flow[j] = flow;
  auto low = zero > Lanes<W>(1.0);
  for (const int place : cluster.places) {
    const std::size_t p = at(place);
    const Lanes<W> out = place == b.from ? flow : -flow;
    give_head(place, place_head_free_[p] - place_gives_[p] * out);
    if (numbers_.limited)
      low = low | (state_.place_head[p] < numbers_.place_vapour[p]) | (state_.place_volume[p] > zero);
  }
  if (!any(low)) return;
  for (int lane = 0; lane < W; ++lane)
    if (low[lane]) solve_lane(cluster, lane, numbers_.time_step[lane]);
}

template <int W>
void March<W>::solve_places() {
  const Lanes<W> zero(0.0);
  for (const int place : layout_.basins) {
    const std::size_t p = at(place);
    give_head(place, numbers_.basin_movement[p].move_to(time_));
  }
  rigid_losses();
  for (const Cluster& cluster : layout_.clusters) {
    if (cluster.branches.empty() && !layout_.sides_at[at(cluster.places.front())].empty()) {
      const int place = cluster.places.front();
      const std::size_t p = at(place);
      solve_place(place);
      give_head(place, place_head_free_[p]);
      if (!numbers_.limited) continue;
      const auto low = (place_head_free_[p] < numbers_.place_vapour[p]) | (state_.place_volume[p] > zero);
      if (!any(low)) continue;
      for (int lane = 0; lane < W; ++lane)
        if (low[lane]) solve_lane(cluster, lane, numbers_.time_step[lane]);
    } else if (cluster.one_valve) {
      solve_valve(cluster);
    } else {
      for (int lane = 0; lane < W; ++lane) solve_lane(cluster, lane, numbers_.time_step[lane]);
    }
  }
  for (std::size_t p = 0; p < plan_->places.size(); ++p) {
    state_.place_max[p] = max(state_.place_max[p], state_.place_head[p]);
    state_.place_min[p] = min(state_.place_min[p], state_.place_head[p]);
  }
}

// Rigid columns: (L/gA)(Q - Q_before)/dt + loss(Q) = head difference, the loss taken along its slope.
template <int W>
void March<W>::rigid_losses() {
  for (std::size_t j = 0; j < layout_.branches.size(); ++j) {
    const Branch& b = layout_.branches[j];
    if (b.kind != BranchKind::rigid_pipe) continue;
    const PipeNumbers<W>& p = numbers_.pipes[at(b.index)];
    const Lanes<W>& q = state_.branch_flow[j];
    const Lanes<W> size = max(abs(q), Lanes<W>(steady::least_reynolds) / p.friction.reynolds_per_flow);
    friction::Factor<W> f = steady::factor_at_flow<W>(p.friction, size);
    const auto kept = p.kept_factor == p.kept_factor;
    f.factor = select(kept, p.kept_factor, f.factor);
    f.log_slope = select(kept, Lanes<W>(0.0), f.log_slope);
    const Lanes<W> friction_loss = f.factor * p.friction_number * size;  // per unit of flow
    const Lanes<W> fitting_loss = p.fitting_number * abs(q);
    const Lanes<W> slope = friction_loss * (Lanes<W>(2.0) + f.log_slope) + 2.0 * fitting_loss;
    const Lanes<W> mass = p.inertia / numbers_.time_step;
    rigid_slope_[j] = mass + slope;
    rigid_offset_[j] = (friction_loss + fitting_loss - slope - mass) * q;
  }
}

template <int W>
void March<W>::load_branch(const Branch& b, std::size_t j, int lane, double time_step, ClusterBranch& out) {
  const BranchMemory& m = state_.memory[j * W + at(lane)];
  out = ClusterBranch{};
  out.kind = b.kind;
  const auto local = [&](int place) {
    return place < 0 || plan_->places[at(place)].basin >= 0 ? -1 : local_place_[at(place)];
  };
  out.from = local(b.from);
  out.to = local(b.to);
  out.head_from = state_.place_head[at(b.from)][lane];
  out.head_to = b.to < 0 ? numbers_.place_elevation[at(b.from)][lane] : state_.place_head[at(b.to)][lane];
  out.flow = state_.branch_flow[j][lane];
  switch (b.kind) {
    case BranchKind::rigid_pipe:
      out.offset = rigid_offset_[j][lane];
      out.slope = rigid_slope_[j][lane];
      out.held_flow = time_step <= 0.0;
      break;
    case BranchKind::valve:
    case BranchKind::orifice: {
      const double c = state_.branch_coefficient[j][lane];
      out.blocked = !(c > 1e-12);
      out.resistance = out.blocked ? 0.0 : 1.0 / (c * c);
      out.one_way = b.to < 0;
      out.shut = out.one_way && m.shut;
      break;
    }
    case BranchKind::check_valve: {
      const double c = state_.branch_coefficient[j][lane];
      out.resistance = 1.0 / (c * c);
      out.one_way = !m.may_reverse;
      out.shut = m.shut;
      break;
    }
    case BranchKind::pump:
      load_pump(b, j * W + at(lane), lane, time_step, out);
      break;
  }
}

template <int W>
void March<W>::load_pump(const Branch& b, std::size_t k, int lane, double time_step, ClusterBranch& out) {
  const BranchMemory& m = state_.memory[k];
  const PumpModel& pump = numbers_.pump[k];
  out.pump = &pump;
  out.count = b.count;
  const bool checked = case_->pumps[at(b.index)].check_valve.kind != network::CheckValveKind::none;
  out.one_way = checked && !m.may_reverse;
  out.shut = checked && m.shut;
  out.speed = out.speed_before = m.speed;
  out.torque_before = m.torque;
  const bool instant = time_step <= 0.0;
  const double now = instant ? time_[lane] + 0.5 * numbers_.time_step[lane] : time_[lane];
  const PowerChange* last = nullptr;
  for (const PowerChange& change : numbers_.power[k])
    if (change.on ? now >= change.at : now > change.at) last = &change;
  if (last == nullptr || (instant && !(last->on && last->over == 0.0)))
    return;  // a speed does not jump but for a start
  if (!last->on) {
    out.free_speed = true;
    // the first part of a step may still be powered
    const double down = std::min(time_step, now - last->at);
    out.run_down = 0.5 * pump.rated_torque * down / (pump.inertia * pump.rated_speed);
  } else {
    const double ramp = last->over > 0.0 ? std::min(1.0, (now - last->at) / last->over) : 1.0;
    out.speed = std::max(ramp, std::min(1.0, m.speed));  // one that still turns is taken up where the ramp meets it
  }
}

template <int W>
void March<W>::solve_lane(const Cluster& cluster, int lane, double time_step) {
  if (numbers_.last_step[at(lane)] == 0) return;  // a lane that rests
  solver_.place_count = cluster.places.size();
  solver_.branch_count = cluster.branches.size();
  for (std::size_t i = 0; i < cluster.places.size(); ++i) {
    const int place = cluster.places[i];
    const std::size_t p = at(place);
    local_place_[p] = static_cast<int>(i);
    ClusterPlace& out = solver_.places[i];
    out = ClusterPlace{};
    for (const int s : layout_.sides_at[p]) {
      out.waves += state_.wave[at(s)].head[lane] * state_.per_impedance[at(s)][lane];
      out.gives += state_.per_impedance[at(s)][lane];
    }
    for (const int d : layout_.draws_at[p]) out.draw += state_.draw[at(d)][lane];
    out.vapour = numbers_.place_vapour[p][lane];
    out.volume = state_.place_volume[p][lane];
    out.growth = state_.place_growth[p][lane];
    out.head = state_.place_head[p][lane];
  }
  for (std::size_t k = 0; k < cluster.branches.size(); ++k) {
    const std::size_t j = at(cluster.branches[k]);
    load_branch(layout_.branches[j], j, lane, time_step, solver_.branches[k]);
  }
  if (!solver_.solve(time_step) && status_[at(lane)] == MarchStatus::completed)
    status_[at(lane)] = MarchStatus::boundary_not_converged;
  store_lane(cluster, lane, time_step);
}

template <int W>
void March<W>::store_lane(const Cluster& cluster, int lane, double time_step) {
  for (std::size_t k = 0; k < cluster.branches.size(); ++k) {
    const std::size_t j = at(cluster.branches[k]);
    state_.branch_flow[j].set(lane, solver_.branches[k].flow);
    remember(j, lane, solver_.branches[k], time_step);
  }
  for (std::size_t i = 0; i < cluster.places.size(); ++i) {
    const std::size_t p = at(cluster.places[i]);
    const ClusterPlace& in = solver_.places[i];
    state_.place_head[p].set(lane, in.head);
    state_.place_volume[p].set(lane, in.volume);
    state_.place_growth[p].set(lane, in.growth);
    const auto& sides = layout_.sides_at[p];
    for (const int s : sides) {
      const double flow = sides.size() == 1 && !in.pinned && !in.closed
                              ? branch_outflow(cluster.places[i])[lane] + draw_outflow(cluster.places[i])[lane]
                              : (state_.wave[at(s)].head[lane] - in.head) * state_.per_impedance[at(s)][lane];
      state_.side_flow[at(s)].set(lane, flow);
    }
    state_.tally.allowance.set(lane, state_.tally.allowance[lane] + in.allowance);
    if (in.closed) state_.tally.closed.set(lane, true);
    const double share = in.volume * numbers_.place_volume_scale[p][lane];
    if (share > state_.tally.share[lane]) state_.tally.share.set(lane, share);
  }
}

template <int W>
void March<W>::remember(std::size_t j, int lane, const ClusterBranch& b, double time_step) {
  BranchMemory& m = state_.memory[j * W + at(lane)];
  const double before = m.flow;
  m.flow = b.flow;
  m.shut = b.shut;
  m.speed = b.speed;
  m.torque = b.torque;
  const CheckRule& rule = numbers_.check[j * W + at(lane)];
  if (!rule.lets_turn) return;
  if (b.shut || b.flow > 0.0) {  // once open again it lets the flow turn again
    m.may_reverse = !b.shut;
    m.reversed_at = -1.0;
    return;
  }
  const double now = time_[lane];
  if (m.reversed_at < 0.0)  // between two rows by a straight line; at an instant at once
    m.reversed_at = now - (before > 0.0 ? b.flow / (b.flow - before) * time_step : 0.0);
  // shut from the next row on; of the two rows beside the end of the delay the nearer one
  const double soon = now + 1.5 * numbers_.time_step[lane];
  if (-b.flow >= rule.reverse_flow || soon >= m.reversed_at + rule.delay) m.may_reverse = false;
}

template <int W>
void March<W>::send_ends() {
  for (std::size_t s = 0; s < layout_.sides.size(); ++s) {
    const Side& side = layout_.sides[s];
    const PipeNumbers<W>& p = numbers_.pipes[at(side.pipe)];
    const Lanes<W>& head = state_.place_head[at(side.place)];
    const Lanes<W> flow = side.far ? state_.side_flow[s] : -state_.side_flow[s];
    if (!side.far || p.uniform) {
      const std::size_t row = p.first_row + (side.far ? at(p.most_reaches) : 0);
      state_.head[row] = head;
      state_.flow[row] = flow;
      state_.flow_before[row] = flow;
      continue;
    }
    for (int lane = 0; lane < W; ++lane) {
      const std::size_t row = p.first_row + at(p.reaches[at(lane)]);
      state_.head[row].set(lane, head[lane]);
      state_.flow[row].set(lane, flow[lane]);
      state_.flow_before[row].set(lane, flow[lane]);
    }
  }
}

// The state at 0+: waves are those of the row itself, seen through the impedance alone.
template <int W>
void March<W>::jump(long long step) {
  for (std::size_t s = 0; s < layout_.sides.size(); ++s) {
    const Side& side = layout_.sides[s];
    const Lanes<W>& impedance = numbers_.pipes[at(side.pipe)].impedance;
    state_.wave[s] = {state_.place_head[at(side.place)] + impedance * state_.side_flow[s], impedance};
    state_.per_impedance[s] = 1.0 / impedance;
  }
  // what moves at this instant moves together, then the places beside it are solved
  const std::size_t first = next_jump_;
  for (; next_jump_ < jumps_.size() && jumps_[next_jump_].step == step; ++next_jump_) move_subject(jumps_[next_jump_]);
  for (std::size_t k = first; k < next_jump_; ++k) solve_around(jumps_[k]);
  send_ends();
  for (std::size_t p = 0; p < plan_->places.size(); ++p) {
    state_.place_max[p] = max(state_.place_max[p], state_.place_head[p]);
    state_.place_min[p] = min(state_.place_min[p], state_.place_head[p]);
  }
}

// A run ends with its last row: what acts there acts on nothing.
template <int W>
bool March<W>::is_over(const Jump& j) const {
  return j.step >= numbers_.last_step[at(j.lane)];
}

// Brings the subject of an instant event to its state at 0+; whatever else moves stays where it is at this row.
template <int W>
void March<W>::move_subject(const Jump& j) {
  if (is_over(j)) return;
  const network::EventPlan& event = plan_->events[at(j.event)];
  Lanes<W> after = time_;
  after.set(j.lane, after[j.lane] + 0.5 * numbers_.time_step[j.lane]);
  const auto moved = [&](Movement<W>& movement) {
    (void)movement.move_to(after);           // into the movement that begins here
    return movement.move_to(time_)[j.lane];  // where that one stands now
  };
  if (event.kind == network::EventKind::move_basin) {
    for (const int place : layout_.basins) {
      if (plan_->places[at(place)].basin != event.basin) continue;
      const double head = moved(numbers_.basin_movement[at(place)]);
      state_.place_head[at(place)].set(j.lane, head);
      for (const int s : layout_.sides_at[at(place)])
        state_.side_flow[at(s)].set(j.lane,
                                    (state_.wave[at(s)].head[j.lane] - head) * state_.per_impedance[at(s)][j.lane]);
    }
    return;
  }
  for (std::size_t k = 0; k < layout_.branches.size(); ++k) {
    const Branch& b = layout_.branches[k];
    if (b.device != event.device || (b.kind != BranchKind::valve && b.kind != BranchKind::orifice)) continue;
    Lanes<W> opening = state_.branch_opening[k];
    opening.set(j.lane, moved(numbers_.branch_movement[k]));
    open_branch(k, opening);
  }
  for (std::size_t k = 0; k < layout_.draws.size(); ++k)
    if (layout_.draws[k].device == event.device) state_.draw[k].set(j.lane, moved(numbers_.draw_movement[k]));
}

// Solves the places beside the subject of an instant event anew.
template <int W>
void March<W>::solve_around(const Jump& j) {
  if (is_over(j)) return;
  const auto solve = [&](int place) {
    if (place >= 0 && layout_.cluster_of_place[at(place)] >= 0)
      solve_lane(layout_.clusters[at(layout_.cluster_of_place[at(place)])], j.lane, 0.0);
  };
  const auto solve_beside = [&](int place) {
    for (const int k : layout_.branches_at[at(place)]) {
      solve(layout_.branches[at(k)].from);
      solve(layout_.branches[at(k)].to);
    }
    solve(place);
  };
  const network::EventPlan& event = plan_->events[at(j.event)];
  if (event.kind == network::EventKind::move_basin) {
    for (const int place : layout_.basins)
      if (plan_->places[at(place)].basin == event.basin) solve_beside(place);
    return;
  }
  const auto& device = plan_->devices[at(event.device)];
  solve_beside(device.from.index);
  if (device.to.exists()) solve_beside(device.to.index);
}

template class March<1>;
template class March<8>;

}  // namespace headband::transient
