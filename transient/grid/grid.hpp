#pragma once
// SPDX-License-Identifier: MIT
//
// How long a step is and how many reaches each pipe gets: a function of one draw alone.

#include <limits>
#include <string>
#include <vector>

namespace headband::transient {

/// What the grid needs to know of one pipe.
struct GridPipe {
  double length = 0.0;      ///< [m], > 0
  double wave_speed = 0.0;  ///< [m/s], > 0
  double allowed_change =
      std::numeric_limits<double>::quiet_NaN();  ///< the user's `wave_speed_change` [-]; NaN = default
  bool uncertain = false;                        ///< something that feeds length or wave speed is sampled
  /// Shortest movement of anything at the pipe's ends [s]; 0 = instant, infinity = nothing moves there.
  double fastest_movement = std::numeric_limits<double>::infinity();
};

/// What is asked of the grid.
struct GridRequest {
  int reaches = 40;                                             ///< of the shortest long pipe, >= 1
  double time_step = std::numeric_limits<double>::quiet_NaN();  ///< [s]; NaN = searched
  std::vector<GridPipe> pipes;
};

enum class GridStatus {
  good,
  change_refused,     ///< a long pipe's wave speed would change by more than is allowed
  uncertain_refused,  ///< the same where the wave speed is uncertain, even with 8 times the reaches
  rigid_refused,      ///< a pipe too short for a wave beside a movement that needs one
  not_finite          ///< no wave speed, or a length that is no number
};

/// Reaches and step of one draw.
struct Grid {
  GridStatus status = GridStatus::good;
  double time_step = 0.0;             ///< [s]
  std::vector<int> reaches;           ///< per pipe; 0 = marches as a rigid column
  std::vector<double> marched_speed;  ///< length / (reaches dt) [m/s]; the given speed for rigid pipes
  std::vector<bool> long_pipe;        ///< travel time at least a 50th of the longest
  double worst_change = 0.0;          ///< over the long pipes [-]
  int worst_pipe = -1;                ///< which one; also the pipe that was refused
  double allowed = 0.0;               ///< the bound that was broken [-]
};

/// The grid of one draw by the rule of docs/methods.md "Grid".
///
/// Travel times T = length / wave speed; long: T >= T_max / 50. The step divides the shortest long pipe by
/// n = reaches … 1.25 reaches, the others get max(1, round(T / dt)); kept is the smallest worst change of a wave speed
/// over the long pipes, the larger step on a tie (1e-12). A pipe shorter than half a step, or a short one still changed
/// by more than 5 %, marches as a rigid column. Where something at such a pipe's end moves in under two steps, the pipe
/// has to carry waves: the search keeps to steps at which it does, with up to 8 times the reaches, else the grid is
/// refused. Where a long pipe's travel time is uncertain its wave speed is changed by 1 % at most (or what its user
/// allows), the reaches doubled up to 8 times the asked ones, else refused with the pipe named.
void choose_grid(const GridRequest& request, Grid& grid);

/// The same grid with every count multiplied (a grid pair doubles the very same counts).
[[nodiscard]] Grid refined(const Grid& grid, int factor);

/// Why a grid was refused, in the user's words; `pipe` its name.
[[nodiscard]] std::string refusal(const Grid& grid, const std::string& pipe);

}  // namespace headband::transient
