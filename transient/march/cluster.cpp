// SPDX-License-Identifier: MIT
#include "transient/march/cluster.hpp"

#include <algorithm>
#include <cmath>

namespace headband::transient {
namespace {

constexpr int most_newton = 100;           // halving from any flow to 1e-12 of it takes 40
constexpr double head_close = 1e-11;       // of 1 m + |head|
constexpr double flow_close = 1e-13;       // of the largest flow
constexpr double still_flow = 1e-9;        // [m3/s] added to that
constexpr double cavity_rounding = 1e-12;  // of a volume
constexpr double growth_rounding = 1e-12;  // of the flows that meet at a place
constexpr double least_slope = 1e-9;       // [s/m2] of a loss: under it the square law goes straight to zero
constexpr double no_pipe_gives = 1e-14;    // [m2/s] keeps a place between shut devices at its head

}  // namespace

ClusterSolver::ClusterSolver(const Layout& layout)
    : places(layout.most_places), branches(layout.most_branches), speed_column_(layout.most_branches) {
  const std::size_t most = layout.most_places + 2 * layout.most_branches;
  matrix_.resize(most * most);
  rest_.resize(most);
}

double ClusterSolver::outflow(std::size_t place) const {
  double out = places[place].draw;
  for (std::size_t j = 0; j < branch_count; ++j) {
    if (branches[j].from == static_cast<int>(place)) out += branches[j].flow;
    if (branches[j].to == static_cast<int>(place)) out -= branches[j].flow;
  }
  return out;
}

double ClusterSolver::head_difference(const ClusterBranch& b) const {
  const double from = b.from >= 0 ? places[static_cast<std::size_t>(b.from)].head : b.head_from;
  const double to = b.to >= 0 ? places[static_cast<std::size_t>(b.to)].head : b.head_to;
  return from - to;
}

void ClusterSolver::assemble_branch(std::size_t j) {
  const ClusterBranch& b = branches[j];
  const std::size_t row = place_count + j;
  if (b.free_speed) {
    const std::size_t own = speed_column_[j];
    const PumpPoint p = b.pump->at(b.flow / b.count, b.speed);
    rest_[own] = -(b.speed - b.speed_before + b.run_down * (b.torque_before + p.torque));
    entry(own, own) = 1.0 + b.run_down * p.torque_by_speed;
    entry(own, row) = b.run_down * p.torque_by_flow / b.count;
  }
  if (b.blocked || b.shut || b.held_flow) {
    entry(row, row) = 1.0;
    rest_[row] = b.held_flow && !b.blocked && !b.shut ? 0.0 : -b.flow;
    return;
  }
  if (b.from >= 0) entry(row, static_cast<std::size_t>(b.from)) = 1.0;
  if (b.to >= 0) entry(row, static_cast<std::size_t>(b.to)) -= 1.0;
  double loss = 0.0, slope = 0.0;
  if (b.kind == BranchKind::rigid_pipe) {
    loss = b.offset + b.slope * b.flow;
    slope = b.slope;
  } else {
    const double stiff = b.resistance * std::abs(b.flow);
    const bool straight = b.resistance > 0.0 && stiff < least_slope;  // else no step finds the zero of a square
    loss = (straight ? least_slope : stiff) * b.flow;
    slope = straight ? least_slope : 2.0 * stiff + least_slope;
  }
  if (b.pump != nullptr) {
    const PumpPoint p = b.pump->at(b.flow / b.count, b.speed);
    loss -= p.head;
    slope -= p.head_by_flow / b.count;
    if (b.free_speed) entry(row, speed_column_[j]) = p.head_by_speed;
  }
  entry(row, row) = -slope;
  rest_[row] = -(head_difference(b) - loss);
}

void ClusterSolver::assemble() {
  unknowns_ = place_count + branch_count;
  for (std::size_t j = 0; j < branch_count; ++j)
    if (branches[j].free_speed) speed_column_[j] = unknowns_++;
  std::fill(matrix_.begin(), matrix_.begin() + static_cast<std::ptrdiff_t>(unknowns_ * unknowns_), 0.0);
  for (std::size_t i = 0; i < place_count; ++i) {
    const ClusterPlace& p = places[i];
    if (p.pinned) {
      entry(i, i) = 1.0;
      rest_[i] = p.vapour - p.head;
      continue;
    }
    const double gives = p.gives > 0.0 ? p.gives : no_pipe_gives;
    entry(i, i) = -gives;
    rest_[i] = -(p.waves - p.gives * p.head - outflow(i) - p.fills);
    for (std::size_t j = 0; j < branch_count; ++j) {
      if (branches[j].from == static_cast<int>(i)) entry(i, place_count + j) -= 1.0;
      if (branches[j].to == static_cast<int>(i)) entry(i, place_count + j) += 1.0;
    }
  }
  for (std::size_t j = 0; j < branch_count; ++j) assemble_branch(j);
}

bool ClusterSolver::eliminate() {
  for (std::size_t k = 0; k < unknowns_; ++k) {
    std::size_t best = k;
    for (std::size_t r = k + 1; r < unknowns_; ++r)
      if (std::abs(entry(r, k)) > std::abs(entry(best, k))) best = r;
    if (!(std::abs(entry(best, k)) > 0.0)) return false;
    if (best != k) {
      for (std::size_t c = k; c < unknowns_; ++c) std::swap(entry(k, c), entry(best, c));
      std::swap(rest_[k], rest_[best]);
    }
    for (std::size_t r = k + 1; r < unknowns_; ++r) {
      const double share = entry(r, k) / entry(k, k);
      if (share == 0.0) continue;
      for (std::size_t c = k; c < unknowns_; ++c) entry(r, c) -= share * entry(k, c);
      rest_[r] -= share * rest_[k];
    }
  }
  for (std::size_t k = unknowns_; k-- > 0;) {
    for (std::size_t c = k + 1; c < unknowns_; ++c) rest_[k] -= entry(k, c) * rest_[c];
    rest_[k] /= entry(k, k);
  }
  return true;
}

bool ClusterSolver::newton() {
  for (int iteration = 1; iteration <= most_newton; ++iteration) {
    most_iterations = std::max(most_iterations, iteration);
    assemble();
    if (!eliminate()) return false;
    bool close = true;
    double largest = still_flow;
    for (std::size_t j = 0; j < branch_count; ++j) {
      branches[j].flow += rest_[place_count + j];
      largest = std::max(largest, std::abs(branches[j].flow));
    }
    for (std::size_t j = 0; j < branch_count; ++j) {
      ClusterBranch& b = branches[j];
      close = close && std::abs(rest_[place_count + j]) <= flow_close * largest;
      if (b.blocked || b.shut) b.flow = 0.0;
      if (b.free_speed) {
        b.speed += rest_[speed_column_[j]];
        close = close && std::abs(rest_[speed_column_[j]]) <= 1e-12;
      }
    }
    for (std::size_t i = 0; i < place_count; ++i) {
      places[i].head += rest_[i];
      close = close && std::abs(rest_[i]) <= head_close * (1.0 + std::abs(places[i].head));
    }
    if (close) return true;
  }
  return false;
}

// Opens, shuts and pins what the last solution says; true when nothing changed.
bool ClusterSolver::settle_states() {
  bool settled = true;
  for (std::size_t j = 0; j < branch_count; ++j) {
    ClusterBranch& b = branches[j];
    if (b.blocked || b.held_flow) continue;
    if (!b.shut) {
      if (b.one_way && b.flow < 0.0) {
        b.shut = true;
        b.flow = 0.0;
        settled = false;
      }
      continue;
    }
    const double push = head_difference(b) + (b.pump != nullptr ? b.pump->at(0.0, b.speed).head : 0.0);
    if (push > head_close * (1.0 + std::abs(head_difference(b)))) {
      b.shut = false;
      settled = false;
    }
  }
  for (std::size_t i = 0; i < place_count; ++i) {
    ClusterPlace& p = places[i];
    if (!p.pinned && p.head < p.vapour) {
      p.pinned = true;
      p.head = p.vapour;
      settled = false;
    }
  }
  return settled;
}

bool ClusterSolver::solve(double time_step) {
  // what is left of a cavity if nothing grows from this row on; less than rounding is nothing
  const auto left = [&](const ClusterPlace& p) {
    const double rest = p.volume + 0.5 * time_step * p.growth;
    return rest > cavity_rounding * p.volume ? rest : 0.0;
  };
  for (std::size_t i = 0; i < place_count; ++i) {
    ClusterPlace& p = places[i];
    p.pinned = left(p) > 0.0;
    p.fills = p.allowance = 0.0;
    p.closed = false;
    if (p.pinned) p.head = p.vapour;
  }
  const auto growth_at_vapour = [&](std::size_t i) {
    return outflow(i) - (places[i].waves - places[i].gives * places[i].vapour);
  };
  // Lets go of the vapour head where no cavity is and none would grow (another place's cavity relieves this one), and
  // where a cavity is used up before the next row: that one is filled by just its rest. True where one did.
  const auto let_go = [&] {
    bool changed = false;
    for (std::size_t i = 0; i < place_count; ++i) {
      ClusterPlace& p = places[i];
      if (!p.pinned) continue;
      const double growth = growth_at_vapour(i), rest = left(p);
      if (!(rest > 0.0)) {
        if (growth >= -growth_rounding * (std::abs(p.waves) + std::abs(p.gives * p.vapour))) continue;
      } else {
        if (time_step <= 0.0 || p.closed || rest + time_step * growth > 0.0) continue;
        p.closed = true;
        p.fills = rest / time_step;
        p.allowance = std::max(std::abs(p.growth), std::abs(growth)) * time_step;
      }
      p.pinned = false;
      changed = true;
    }
    return changed;
  };
  bool good = true, settled = false;
  const std::size_t most_changes = 3 * (place_count + branch_count) + 4;
  for (std::size_t change = 0; change < most_changes && !settled; ++change) {
    if (!newton()) good = false;
    settled = settle_states() && !let_go();
  }
  good = good && settled;
  for (std::size_t i = 0; i < place_count; ++i) {
    ClusterPlace& p = places[i];
    const double growth = p.pinned ? growth_at_vapour(i) : -p.fills;
    if (time_step > 0.0) p.volume = std::max(0.0, left(p) + 0.5 * time_step * growth);
    p.growth = growth;
  }
  for (std::size_t j = 0; j < branch_count; ++j) {
    ClusterBranch& b = branches[j];
    if (b.pump != nullptr) b.torque = b.pump->at(b.flow / b.count, b.speed).torque;
  }
  return good;
}

}  // namespace headband::transient
