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

double search_step(const GridRequest& r, const Grid& g, double shortest, int reaches) {
  double best = shortest / reaches, best_worst = 1e300;
  int pipe = -1;
  for (int n = reaches; n <= reaches + reaches / 4; ++n) {
    const double worst = worst_at(r, g, shortest / n, pipe);
    if (worst < best_worst - tie) {
      best_worst = worst;
      best = shortest / n;
    }
  }
  return best;
}

void fill(const GridRequest& r, double dt, Grid& g) {
  g.time_step = dt;
  for (std::size_t i = 0; i < r.pipes.size(); ++i) {
    const GridPipe& p = r.pipes[i];
    const double travel = travel_time(p);
    int n = count_at(travel, dt);
    if (!g.long_pipe[i]) {
      const double allowed = std::isnan(p.allowed_change) ? default_change : p.allowed_change;
      if (travel < 0.5 * dt || change_at(travel, dt) > allowed) n = 0;
    }
    g.reaches[i] = n;
    g.marched_speed[i] = n > 0 ? p.length / (n * dt) : p.wave_speed;
  }
  g.worst_change = std::max(0.0, worst_at(r, g, dt, g.worst_pipe));
}

// What this grid may not do, the wave speed furthest over its bound first; `good` when it may march.
GridStatus judge(const GridRequest& r, Grid& g) {
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
    if (g.reaches[i] == 0 && r.pipes[i].fastest_movement < 2.0 * g.time_step) {
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
  Grid first;
  for (int factor = 1; factor <= 8; factor *= 2) {
    const double dt = std::isnan(request.time_step) ? search_step(request, grid, shortest, request.reaches * factor)
                                                    : request.time_step / factor;
    fill(request, dt, grid);
    grid.status = judge(request, grid);
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
      std::snprintf(text,
                    sizeof text,
                    "even 8 times the reaches change the uncertain wave speed of pipe '%s' by more than %.1f %%",
                    pipe.c_str(),
                    100.0 * grid.allowed);
      return text;
    case GridStatus::rigid_refused:
      std::snprintf(text,
                    sizeof text,
                    "pipe '%s' is too short for a wave on this grid, and something at its end moves in less than two "
                    "steps",
                    pipe.c_str());
      return text;
    case GridStatus::not_finite:
      return "pipe '" + pipe + "' has no wave speed";
  }
  return {};
}

}  // namespace headband::transient
