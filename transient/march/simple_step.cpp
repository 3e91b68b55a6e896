// SPDX-License-Identifier: MIT
//
// The step of a march whose every place has a closed form and which knows no vapour: the same operations as the full
// step of march.cpp, without what cannot happen there.
#include "transient/device/valve.hpp"
#include "transient/march/march.hpp"

#include <algorithm>

namespace headband::transient {
namespace {

std::size_t at(int i) { return static_cast<std::size_t>(i); }

}  // namespace

// Whether the march is a simple one; where it is, the ends of its pipes.
template <int W>
void March<W>::find_simple() {
  simple_ = !numbers_.limited;
  for (const PipeNumbers<W>& p : numbers_.pipes)
    simple_ = simple_ && p.most_reaches > 0 && p.uniform && !p.placed && p.resistance.form == Form::quadratic;
  for (const Cluster& c : layout_.clusters) {
    const bool closed_form = c.branches.empty() ? !layout_.sides_at[at(c.places.front())].empty() : c.one_valve;
    simple_ = simple_ && closed_form;
  }
  ends_.clear();
  outlets_.clear();
  if (!simple_) return;
  for (const Side& side : layout_.sides) {
    const PipeNumbers<W>& p = numbers_.pipes[at(side.pipe)];
    const PipeRows<W>& rows = rows_[at(side.pipe)];
    const int row = side.far ? p.most_reaches : 0, beside = side.far ? row - 1 : 1;
    PipeEnd<W> e;
    e.carry = &p.resistance.carry;
    e.damp = &p.resistance.damp;
    e.quadratic = &p.resistance.quadratic;
    e.head = rows.head + beside;
    e.flow = rows.flow + beside;
    e.end_head = rows.head + row;
    e.end_flow = rows.flow + row;
    e.place = side.place;
    e.far = side.far;
    e.shared = plan_->places[at(side.place)].basin >= 0 || layout_.sides_at[at(side.place)].size() > 1;
    ends_.push_back(e);
  }
  for (const Cluster& c : layout_.clusters) {
    const int j = c.branches.empty() ? -1 : c.branches.front();
    const bool outlet = j >= 0 && layout_.branches[at(j)].to < 0 && c.places.size() == 1 &&
                        layout_.sides_at[at(c.places.front())].size() == 1 &&
                        layout_.draws_at[at(c.places.front())].empty();
    outlets_.push_back(outlet ? j : -1);
  }
}

template <int W>
void March<W>::step_simply() {
  move_devices();
  for (std::size_t s = 0; s < ends_.size(); ++s) {
    const PipeEnd<W>& e = ends_[s];
    const Lanes<W> flow = *e.flow, carried = *e.carry * flow;
    Arriving<W>& wave = state_.wave[s];
    wave.head = e.far ? *e.head + carried : *e.head - carried;
    wave.impedance = fused(*e.quadratic, abs(flow), *e.damp);
    if (e.shared) state_.per_impedance[s] = 1.0 / wave.impedance;
  }
  march_pipes();
  solve_simply();
  for (std::size_t s = 0; s < ends_.size(); ++s) {
    const PipeEnd<W>& e = ends_[s];
    *e.end_head = state_.place_head[at(e.place)];
    *e.end_flow = e.far ? state_.side_flow[s] : -state_.side_flow[s];
  }
}

template <int W>
void March<W>::solve_simply() {
  const Lanes<W> zero(0.0);
  for (const int place : layout_.basins) {
    const std::size_t p = at(place);
    const Lanes<W> head = numbers_.basin_movement[p].move_to(time_);
    state_.place_head[p] = head;
    for (const int s : layout_.sides_at[p])
      state_.side_flow[at(s)] = (state_.wave[at(s)].head - head) * state_.per_impedance[at(s)];
  }
  for (std::size_t k = 0; k < layout_.clusters.size(); ++k) {
    const Cluster& cluster = layout_.clusters[k];
    if (outlets_[k] >= 0) {
      // one pipe and a valve to the air: solve_valve without its choices
      const std::size_t j = at(outlets_[k]), p = at(cluster.places.front()), s = at(layout_.sides_at[p].front());
      const Arriving<W>& wave = state_.wave[s];
      const Lanes<W> flow = max(
          valve_flow<W>(wave.head - numbers_.place_elevation[p], wave.impedance, state_.branch_coefficient[j]), zero);
      state_.branch_flow[j] = flow;
      state_.place_head[p] = wave.head - wave.impedance * flow;
      state_.side_flow[s] = zero + flow;
    } else if (cluster.branches.empty()) {
      const int place = cluster.places.front();
      solve_place(place);
      give_head(place, place_head_free_[at(place)]);
    } else {
      solve_valve(cluster);
    }
  }
  for (std::size_t p = 0; p < state_.place_head.size(); ++p) {
    state_.place_max[p] = max(state_.place_max[p], state_.place_head[p]);
    state_.place_min[p] = min(state_.place_min[p], state_.place_head[p]);
  }
}

#define HEADBAND_SIMPLE(W)               \
  template void March<W>::find_simple(); \
  template void March<W>::step_simply(); \
  template void March<W>::solve_simply();
HEADBAND_SIMPLE(1)
HEADBAND_SIMPLE(8)
#undef HEADBAND_SIMPLE

}  // namespace headband::transient
