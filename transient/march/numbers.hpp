#pragma once
// SPDX-License-Identifier: MIT
//
// Everything a draw changes: coefficients of W draws on their grids.

#include "core/network/values.hpp"
#include "core/steady/pipe_loss.hpp"
#include "core/steady/steady.hpp"
#include "transient/device/movement.hpp"
#include "transient/device/pump.hpp"
#include "transient/grid/grid.hpp"
#include "transient/line/interior.hpp"
#include "transient/march/layout.hpp"

#include <vector>

namespace headband::transient {

/// One pipe of W draws on its grid.
template <int W>
struct PipeNumbers {
  base::PerLane<int, W> reaches{};  ///< 0 in a rigid pipe
  bool uniform = true;              ///< all lanes the same count
  Lanes<W> reach_count;             ///< `reaches` as numbers
  int most_reaches = 0;
  std::size_t first_row = 0;  ///< into the state
  bool placed = false;        ///< has fittings with a place
  Resistance<W> resistance;
  Lanes<W> impedance;           ///< marched wave speed / (g area) [s/m2]
  Lanes<W> reach;               ///< [m]
  Lanes<W> per_section_volume;  ///< 1 / (area reach) [1/m3]
  // a rigid column
  Lanes<W> inertia;  ///< length / (g area) [s2/m2]
  steady::PipeFriction<W> friction;
  Lanes<W> kept_factor;      ///< NaN: the law at each step
  Lanes<W> friction_number;  ///< length / (2 g bore area^2), fittings' equivalent length included [s2/m5]
  Lanes<W> fitting_number;   ///< loss of all fittings = this Q|Q| [s2/m5]
};

/// When a check valve that lets the flow turn shuts, one draw.
struct CheckRule {
  bool lets_turn = false;     ///< false: shuts at zero flow, or there is none
  double reverse_flow = 0.0;  ///< shuts in the row after one with this flow backwards [m3/s]; infinity = by delay
  double delay = 0.0;         ///< shuts this long after the flow turned [s]; infinity = by flow
};

/// Power taken from pumps, or given to them, one draw.
struct PowerChange {
  double at = 0.0;    ///< [s]; of a start at once half a step behind its row
  bool on = false;    ///< a start
  double over = 0.0;  ///< run-up of a start [s]; 0 = at once
};

/// Numbers of W draws; storage is kept between draws.
template <int W>
struct Numbers {
  Lanes<W> time_step;  ///< [s]
  base::PerLane<long long, W> last_step{};
  Lanes<W> gravity, density, atmosphere;
  bool limited = true;  ///< cavities can form
  std::vector<PipeNumbers<W>> pipes;
  std::size_t rows = 0;
  std::vector<Lanes<W>> vapour, fitting, longer;           ///< per row
  std::vector<Lanes<W>> place_vapour, place_volume_scale;  ///< [m], 1 / section volume [1/m3]
  std::vector<Lanes<W>> place_elevation;
  std::vector<Lanes<W>> branch_full;            ///< per branch: fully open coefficient [m^2.5/s]
  std::vector<Lanes<W>> seat_power;             ///< per branch
  std::vector<Movement<W>> branch_movement;     ///< per branch: opening, or share of the starting flow
  std::vector<Movement<W>> draw_movement;       ///< per fixed draw-off: flow
  std::vector<Movement<W>> basin_movement;      ///< per place: head; only basins are used
  std::vector<FourQuadrants> quadrants;         ///< the user's own tables, per pump of the case
  std::vector<PumpModel> pump;                  ///< per branch and lane, [branch * W + lane]
  std::vector<std::vector<PowerChange>> power;  ///< per branch and lane, in order of time
  std::vector<CheckRule> check;                 ///< per branch and lane
};

/// Something that happens at once: the place is solved again at the row's own time.
struct Jump {
  long long step = 0;
  int lane = 0;
  int event = 0;          ///< into Plan::events
  double off_grid = 0.0;  ///< how much later than asked [s]
};

/// Fills the numbers of W draws and the list of jumps, sorted by step and lane.
template <int W>
void fill_numbers(const network::Case& c,
                  const network::Plan& plan,
                  const Layout& layout,
                  const network::Values<W>& values,
                  const steady::SteadyState<W>& steady,
                  const base::PerLane<const Grid*, W>& grids,
                  Numbers<W>& numbers,
                  std::vector<Jump>& jumps);

}  // namespace headband::transient
