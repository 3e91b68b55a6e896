#pragma once
// SPDX-License-Identifier: MIT
//
// What stays the same for every draw: which pipe ends meet where, which devices join which places, which places must
// be solved together.

#include "core/network/plan.hpp"

#include <vector>

namespace headband::transient {

/// One end of a marched pipe.
struct Side {
  int pipe = 0;
  bool far = false;  ///< true: the `to` end
  int place = 0;
};

enum class BranchKind {
  valve,    ///< in line, or to the air
  orifice,  ///< pressure-dependent draw-off: a valve to the air
  check_valve,
  pump,       ///< alike pumps of one set that share their fate
  rigid_pipe  ///< a pipe too short for a wave: inertia and friction
};

/// Something that carries flow from a place to another, or to the air.
struct Branch {
  BranchKind kind = BranchKind::valve;
  int device = -1;              ///< into Plan::devices; rigid pipes: -1
  int index = -1;               ///< into the case's vector of that kind; rigid pipes: into Plan::pipes
  int from = 0;                 ///< place
  int to = -1;                  ///< place; -1 = the air at the elevation of `from`
  int count = 1;                ///< pumps in parallel
  std::vector<int> power = {};  ///< events that take the power from these pumps or give it to them
};

/// Places that must be solved together: those joined by branches, basins apart.
struct Cluster {
  std::vector<int> places;  ///< without basins
  std::vector<int> branches;
  bool one_valve = false;  ///< a single valve between places that all have pipes: closed form
};

/// A draw-off of fixed flow.
struct FixedDraw {
  int device = 0, index = 0, place = 0;
};

/// Topology of the march; const and shared. Depends on the plan and on which pipes march as rigid columns.
struct Layout {
  std::vector<bool> rigid;  ///< per pipe
  std::vector<Side> sides;
  std::vector<std::vector<int>> sides_at;  ///< per place
  std::vector<int> side_from, side_to;     ///< per pipe: its sides; -1 for rigid pipes
  std::vector<Branch> branches;
  std::vector<FixedDraw> draws;
  std::vector<std::vector<int>> draws_at;  ///< per place: into `draws`
  std::vector<Cluster> clusters;
  std::vector<int> basins;                         ///< places with a held level
  std::vector<int> cluster_of_place;               ///< -1 for basins
  std::vector<std::vector<int>> branches_at;       ///< per place
  std::size_t most_places = 1, most_branches = 0;  ///< of a cluster
};

[[nodiscard]] Layout make_layout(const network::Case& c, const network::Plan& plan, const std::vector<bool>& rigid);

}  // namespace headband::transient
