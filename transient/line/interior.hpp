#pragma once
// SPDX-License-Identifier: MIT
//
// The interior of a pipe, one time step: every row between its ends, in place, W draws at a time.

#include "transient/line/resistance.hpp"

namespace headband::transient {

/// The rows of one pipe in the state. A row holds W draws; row 0 is the `from` end. Lanes with fewer reaches than
/// `rows - 1` have their far end at an earlier row and nothing meaningful behind it.
template <int W>
struct PipeRows {
  int rows = 0;                       ///< largest reach count of the lanes + 1
  Lanes<W>* head = nullptr;           ///< [m]
  Lanes<W>* flow = nullptr;           ///< at a cavity: on its `to` side [m3/s]
  Lanes<W>* flow_before = nullptr;    ///< at a cavity: on its `from` side; kept only while `cavities` [m3/s]
  Lanes<W>* volume = nullptr;         ///< of the cavity at the row [m3]
  const Lanes<W>* vapour = nullptr;   ///< lowest head the row can have [m]; -infinity: no limit
  const Lanes<W>* fitting = nullptr;  ///< extra loss of the reach after the row [s2/m5]; null = none in the pipe
  const Lanes<W>* longer = nullptr;   ///< extra equivalent length of that reach [-]; null with `fitting`
  Lanes<W>* root = nullptr;           ///< last roots of the friction law at the rows, see friction::darcy_factor_near;
  Lanes<W>* root_on = nullptr;        ///< on the `to` side of cavities; both null = solved anew each time
  const Lanes<W>* reaches = nullptr;  ///< of each lane, where lanes differ; null = all `rows - 1`
  Lanes<W>* head_max = nullptr;       ///< envelopes; null = not kept
  Lanes<W>* head_min = nullptr;
};

/// What a step with cavities adds up, per lane.
template <int W>
struct CavityTally {
  Lanes<W> allowance = 0.0;  ///< sum of |flow jump| dt over closings [m3]
  Lanes<W> share = 0.0;      ///< largest volume as a share of its section's volume [-]
  base::Mask<W> closed{};    ///< a cavity closed in this lane
};

/// Marches the interior rows of one pipe by one step. Starts without cavities; changes over to the rows with cavities
/// at the first row that falls below its vapour limit.
///
/// @param cavities in and out: the pipe holds cavities (its `flow_before` is valid)
/// @param limited  false: no vapour limit anywhere (compile-time variant without the check)
template <int W>
void march_interior(const Resistance<W>& resistance,
                    const PipeRows<W>& rows,
                    const Lanes<W>& time_step,
                    const Lanes<W>& per_section_volume,
                    bool limited,
                    bool& cavities,
                    CavityTally<W>& tally);

/// A wave on its way to a pipe end: head there = head - impedance x flow into the end [m, s/m2].
template <int W>
struct Arriving {
  Lanes<W> head, impedance;
};

/// The wave that reaches the `from` end of the pipe in this step. Called before march_interior.
template <int W>
[[nodiscard]] Arriving<W> arriving_at_from(const Resistance<W>& resistance, const PipeRows<W>& rows, bool cavities);

/// The wave that reaches the `to` end, at row `reaches` of each lane. Called before march_interior.
template <int W>
[[nodiscard]] Arriving<W> arriving_at_to(const Resistance<W>& resistance,
                                         const PipeRows<W>& rows,
                                         const base::PerLane<int, W>& reaches,
                                         bool uniform);

}  // namespace headband::transient
