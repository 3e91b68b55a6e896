// SPDX-License-Identifier: MIT
#include "transient/grid/grid.hpp"

#include <algorithm>
#include <cmath>
#include <cstdio>

namespace headband::transient {
namespace {

constexpr double long_share = 50.0;        // design rule: long = at least a 50th of the longest travel time
constexpr double default_change = 0.05;    // refused above, on a long pipe
constexpr double uncertain_change = 0.01;  // the same where the wave speed is sampled
constexpr double tie = 1e-12;
constexpr double quick_movement = 2.0;  // steps: what moves faster at the end of a rigid pipe needs a wave there
constexpr int most_refinement = 8;      // of the reaches asked for

double travel_time(const GridPipe& p) { return p.length / p.wave_speed; }

int count_at(double travel, double dt) { return std::max(1, static_cast<int>(std::lround(travel / dt))); }

double change_at(double travel, double dt) { return std::abs(travel / (count_at(travel, dt) * dt) - 1.0); }

double worst_at(const GridRequest& r, const Grid& g, double dt, int& pipe) {
  double worst = -1.0;
  for (std::size_t i = 0; i < r.pipes.size(); ++i) {
    if (!g.long_pipe[i]) continue;
    const double change = change_at(travel_time(r.pipes[i]), dt);
    if (change > worst + tie) {
      worst = change;
      pipe = static_cast<int>(i);
    }
  }
  return worst;
}

double allowed_change(const GridPipe& p) {
  if (!std::isnan(p.allowed_change)) return p.allowed_change;
  return p.uncertain ? uncertain_change : default_change;
}

// Too short for a wave at this step, or changed by too much to carry one: marches as a rigid column.
bool is_rigid(const GridPipe& p, double dt) {
  const double travel = travel_time(p);
  const double allowed = std::isnan(p.allowed_change) ? default_change : p.allowed_change;
  return travel < 0.5 * dt || change_at(travel, dt) > allowed + tie;
}

// At this step every pipe that must carry waves does so, and no long one is changed by more than allowed.
bool waves_carried(const GridRequest& r, const Grid& g, const std::vector<bool>& needs_wave, double dt) {
  for (std::size_t i = 0; i < r.pipes.size(); ++i) {
    const GridPipe& p = r.pipes[i];
    if (needs_wave[i] && is_rigid(p, dt)) return false;
    if (g.long_pipe[i] && change_at(travel_time(p), dt) > allowed_change(p) + tie) return false;
  }
  return true;
}

double search_step(
    const GridRequest& r, const Grid& g, const std::vector<bool>& needs_wave, double shortest, int reaches) {
  const bool any_needs = std::find(needs_wave.begin(), needs_wave.end(), true) != needs_wave.end();
  double best = shortest / reaches, best_worst = 1e300;
  bool best_carries = false;
  int pipe = -1;
  for (int n = reaches; n <= reaches + reaches / 4; ++n) {
    const double dt = shortest / n, worst = worst_at(r, g, dt, pipe);
    const bool carries = any_needs && waves_carried(r, g, needs_wave, dt);
    if ((best_carries && !carries) || (carries == best_carries && !(worst < best_worst - tie))) continue;
    best_carries = carries;
    best_worst = worst;
    best = dt;
  }
  return best;
}

void fill(const GridRequest& r, double dt, Grid& g) {
  g.time_step = dt;
  for (std::size_t i = 0; i < r.pipes.size(); ++i) {
    const GridPipe& p = r.pipes[i];
    const int n = !g.long_pipe[i] && is_rigid(p, dt) ? 0 : count_at(travel_time(p), dt);
    g.reaches[i] = n;
    g.marched_speed[i] = n > 0 ? p.length / (n * dt) : p.wave_speed;
  }
  g.worst_change = std::max(0.0, worst_at(r, g, dt, g.worst_pipe));
}

// Marks the rigid pipes beside a movement quicker than two steps: from here on they must carry waves. True where one is
// new.
bool mark_quick(const GridRequest& r, const Grid& g, std::vector<bool>& needs_wave) {
  bool found = false;
  for (std::size_t i = 0; i < r.pipes.size(); ++i) {
    const bool quick = g.reaches[i] == 0 && r.pipes[i].fastest_movement < quick_movement * g.time_step;
    found = found || (quick && !needs_wave[i]);
    needs_wave[i] = needs_wave[i] || quick;
  }
  return found;
}

// What this grid may not do, the wave speed furthest over its bound first; `good` when it may march.
GridStatus judge(const GridRequest& r, const std::vector<bool>& needs_wave, Grid& g) {
  GridStatus status = GridStatus::good;
  double furthest = tie;
  for (std::size_t i = 0; i < r.pipes.size(); ++i) {
    const GridPipe& p = r.pipes[i];
    if (!g.long_pipe[i]) continue;
    const double change = change_at(travel_time(p), g.time_step), over = change - allowed_change(p);
    // a certain wave speed is told before an uncertain one: a finer step is not tried for it
    const bool before = status == GridStatus::uncertain_refused && !p.uncertain && over > tie;
    if (!before && (over <= furthest || (status == GridStatus::change_refused && p.uncertain))) continue;
    furthest = over;
    g.worst_pipe = static_cast<int>(i);
    g.worst_change = change;
    g.allowed = allowed_change(p);
    status = p.uncertain ? GridStatus::uncertain_refused : GridStatus::change_refused;
  }
  if (status != GridStatus::good) return status;
  for (std::size_t i = 0; i < r.pipes.size(); ++i)
    if (g.reaches[i] == 0 && needs_wave[i]) {
      g.worst_pipe = static_cast<int>(i);
      return GridStatus::rigid_refused;
    }
  return GridStatus::good;
}

}  // namespace

void choose_grid(const GridRequest& request, Grid& grid) {
  const std::size_t count = request.pipes.size();
  grid = Grid{};
  grid.reaches.assign(count, 0);
  grid.marched_speed.assign(count, 0.0);
  grid.long_pipe.assign(count, false);
  double longest = 0.0;
  for (std::size_t i = 0; i < count; ++i) {
    const double travel = travel_time(request.pipes[i]);
    if (!std::isfinite(travel) || !(travel > 0.0)) {
      grid.status = GridStatus::not_finite;
      grid.worst_pipe = static_cast<int>(i);
      grid.time_step = 1.0;
      return;
    }
    longest = std::max(longest, travel);
  }
  double shortest = longest;
  for (std::size_t i = 0; i < count; ++i) {
    const double travel = travel_time(request.pipes[i]);
    grid.long_pipe[i] = travel >= longest / long_share;
    if (grid.long_pipe[i]) shortest = std::min(shortest, travel);
  }
  std::vector<bool> needs_wave(count, false);
  Grid first;
  for (int factor = 1; factor <= most_refinement; factor *= 2) {
    const auto divide = [&] {
      const double dt = std::isnan(request.time_step)
                            ? search_step(request, grid, needs_wave, shortest, request.reaches * factor)
                            : request.time_step / factor;
      fill(request, dt, grid);
    };
    divide();
    while (mark_quick(request, grid, needs_wave)) divide();
    grid.status = judge(request, needs_wave, grid);
    if (factor == 1) first = grid;
    // A certain wave speed is refused at once: the user can allow the change. The other two are mended by a finer step.
    if (grid.status == GridStatus::good || grid.status == GridStatus::change_refused) return;
  }
  grid = first;
}

Grid refined(const Grid& grid, int factor) {
  Grid fine = grid;
  fine.time_step = grid.time_step / factor;
  for (int& n : fine.reaches) n *= factor;
  return fine;
}

std::string refusal(const Grid& grid, const std::string& pipe) {
  char text[400];
  switch (grid.status) {
    case GridStatus::good:
      return {};
    case GridStatus::change_refused:
      std::snprintf(text,
                    sizeof text,
                    "the grid would change the wave speed of pipe '%s' by %.1f %%, more than %.1f %%",
                    pipe.c_str(),
                    100.0 * grid.worst_change,
                    100.0 * grid.allowed);
      return text;
    case GridStatus::uncertain_refused:
      std::snprintf(
          text,
          sizeof text,
          "even 8 times the reaches change the wave speed of pipe '%s', whose travel time is uncertain, by more "
          "than %.1f %%",
          pipe.c_str(),
          100.0 * grid.allowed);
      return text;
    case GridStatus::rigid_refused:
      std::snprintf(
          text,
          sizeof text,
          "pipe '%s' is too short for a wave on this grid, even with 8 times the reaches, and something at its end "
          "moves in less than two steps",
          pipe.c_str());
      return text;
    case GridStatus::not_finite:
      return "pipe '" + pipe + "' has no wave speed";
  }
  return {};
}

}  // namespace headband::transient
