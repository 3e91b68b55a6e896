#pragma once
// SPDX-License-Identifier: MIT
//
// The meeting point of waves and devices: unknown heads of places and flows of branches, one draw, by a bounded Newton.

#include "transient/device/pump.hpp"
#include "transient/march/layout.hpp"

#include <limits>
#include <vector>

namespace headband::transient {

/// A place as its cluster sees it. Waves: sum of (arriving head - H) / impedance = outflow.
struct ClusterPlace {
  double waves = 0.0;  ///< sum of arriving head / impedance [m3/s]
  double gives = 0.0;  ///< sum of 1 / impedance [m2/s]; 0 = no marched pipe ends here
  double draw = 0.0;   ///< fixed flow out of the line [m3/s]
  double vapour = -std::numeric_limits<double>::infinity();  ///< lowest head [m]
  double volume = 0.0;                                       ///< cavity [m3]; in and out
  double growth = 0.0;                                       ///< of the cavity, outflow less inflow [m3/s]; in and out
  double head = 0.0;                                         ///< in: the guess; out [m]
  bool pinned = false;                                       ///< out: held at the vapour head
  double fills = 0.0;                                        ///< flow that uses up the rest of a cavity [m3/s]
  double allowance = 0.0;                                    ///< out: |flow jump| dt of a closing [m3]
  bool closed = false;                                       ///< out: its cavity closed in this step
};

/// A branch as its cluster sees it: from -> to against a loss, or with the pump's head.
struct ClusterBranch {
  BranchKind kind = BranchKind::valve;
  int from = -1, to = -1;                 ///< into the cluster's places; -1 = a held head
  double head_from = 0.0, head_to = 0.0;  ///< the held heads [m]
  double resistance = 0.0;                ///< loss = resistance Q|Q| [s2/m5]
  bool blocked = false;                   ///< passes nothing whatever happens
  bool one_way = false;                   ///< may not flow backwards in this step
  bool shut = false;                      ///< in and out: a one-way branch that is shut
  double offset = 0.0, slope = 0.0;       ///< rigid pipe: loss = offset + slope Q [m], [s/m2]
  bool held_flow = false;                 ///< flow cannot change now (rigid column at an instant)
  const PumpModel* pump = nullptr;
  int count = 1;            ///< pumps in parallel
  bool free_speed = false;  ///< runs down by its inertia
  double speed = 1.0;       ///< in and out, share of rated
  double speed_before = 1.0, torque_before = 0.0;
  double run_down = 0.0;  ///< rated torque dt / (2 inertia rated speed) [-]
  double torque = 0.0;    ///< out, share of rated
  double flow = 0.0;      ///< in: the guess; out [m3/s]
};

/// Solves clusters of one layout; storage made once.
class ClusterSolver {
 public:
  ClusterSolver() = default;
  explicit ClusterSolver(const Layout& layout);

  std::vector<ClusterPlace> places;  ///< filled by the caller, first `place_count`
  std::vector<ClusterBranch> branches;
  std::size_t place_count = 0, branch_count = 0;

  /// One step of `time_step` [s]; 0 = an instant: cavities and speeds stay.
  /// @return false when the iteration did not settle (bounded; the last iterate is kept)
  [[nodiscard]] bool solve(double time_step);

  int most_iterations = 0;  ///< worst so far

 private:
  [[nodiscard]] bool newton();
  void assemble();
  void assemble_branch(std::size_t j);
  [[nodiscard]] bool eliminate();
  [[nodiscard]] bool settle_states();
  [[nodiscard]] double outflow(std::size_t place) const;
  [[nodiscard]] double head_difference(const ClusterBranch& b) const;
  double& entry(std::size_t row, std::size_t column) { return matrix_[row * unknowns_ + column]; }

  std::vector<double> matrix_, rest_;
  std::vector<std::size_t> speed_column_;
  std::size_t unknowns_ = 0;
};

}  // namespace headband::transient
