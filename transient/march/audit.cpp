// SPDX-License-Identifier: MIT
#include "transient/march/audit.hpp"

#include <cmath>

namespace headband::transient {

AuditSums::Exchange AuditSums::exchange(const March<1>& march) {
  Exchange e;
  const auto add = [&e](double in) {
    e.in += in;
    e.passing += 0.5 * std::fabs(in);
  };
  const auto& layout = march.layout();
  const auto& state = march.state();
  const auto outside = [&](int place) {
    return place < 0 || march.plan().places[static_cast<std::size_t>(place)].basin >= 0;
  };
  for (const int place : layout.basins)
    for (const int s : layout.sides_at[static_cast<std::size_t>(place)])
      add(-state.side_flow[static_cast<std::size_t>(s)].number);
  for (std::size_t j = 0; j < layout.branches.size(); ++j) {  // what has no end in the line passes beside it
    const bool from = outside(layout.branches[j].from), to = outside(layout.branches[j].to);
    if (from != to) add(from ? state.branch_flow[j].number : -state.branch_flow[j].number);
  }
  for (std::size_t j = 0; j < layout.draws.size(); ++j)
    if (!outside(layout.draws[j].place)) add(-state.draw[j].number);
  return e;
}

// Volume stored since the first state: (g A / a^2) H along the pipes = (dt / impedance) H per reach, and the cavities.
double AuditSums::stored(const March<1>& march) const {
  double sum = 0.0;
  const auto& n = march.numbers();
  const auto& state = march.state();
  for (const auto& p : n.pipes) {
    if (p.most_reaches == 0) continue;
    const double per_head = n.time_step.number / p.impedance.number;
    double heads = 0.0;
    for (int row = 0; row <= p.most_reaches; ++row) {
      const std::size_t r = p.first_row + static_cast<std::size_t>(row);
      const double change = state.head[r].number - first_head_[r];
      heads += row == 0 || row == p.most_reaches ? 0.5 * change : change;
      sum -= state.volume[r].number;
    }
    sum += per_head * heads;
  }
  for (const auto& v : state.place_volume) sum -= v.number;
  return sum;
}

void AuditSums::begin(const March<1>& march) {
  first_head_.clear();
  for (const auto& h : march.state().head) first_head_.push_back(h.number);
  last_ = exchange(march);
  in_ = passed_ = 0.0;
  base_ = 0.0;
}

void AuditSums::step(const March<1>& march) {
  const Exchange now = exchange(march);
  const double half = 0.5 * march.numbers().time_step.number;
  in_ += half * (now.in + last_.in);
  passed_ += half * (now.passing + last_.passing);
  last_ = now;
}

void AuditSums::before_jump(const March<1>& march) { before_jump_ = stored(march); }

void AuditSums::after_jump(const March<1>& march) {
  base_ += stored(march) - before_jump_;
  last_ = exchange(march);
}

answers::Audit AuditSums::result(const March<1>& march) const {
  answers::Audit a;
  a.volume_residual = stored(march) - base_ - in_;
  a.volume_passed = passed_;
  if (passed_ > 0.0) a.volume_residual_relative = std::fabs(a.volume_residual) / passed_;
  a.cavity_allowance = march.state().tally.allowance.number;
  a.cavity_reset_volume = 0.0;  // a cavity is filled by just its rest: no volume goes below zero
  return a;
}

}  // namespace headband::transient
