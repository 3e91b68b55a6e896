// SPDX-License-Identifier: MIT
#include "transient/march/surge.hpp"

#include "core/base/error.hpp"
#include "core/steady/evaluate.hpp"
#include "transient/march/grid_bound.hpp"
#include "transient/march/grid_request.hpp"
#include "transient/march/record.hpp"

#include <algorithm>
#include <cmath>
#include <cstdio>
#include <numbers>
#include <optional>

namespace headband::transient {
namespace {

std::size_t at(int i) { return static_cast<std::size_t>(i); }

/// One grid of the run: its march and what was kept.
struct GridRun {
  Grid grid;
  March<1> march;
  Record record;

  GridRun(const network::Case& c,
          const network::Plan& plan,
          const network::Values<1>& values,
          const steady::SteadyState<1>& steady,
          Grid g,
          const Layout& layout,
          bool histories)
      : grid(std::move(g)), march(c, plan, layout), record(values, histories) {
    march.prepare(values, steady, {&grid}, false);
    march.run(record);
  }
  [[nodiscard]] bool finished() const { return record.finished() && march.status(0) == MarchStatus::completed; }
};

[[noreturn]] void refuse(const network::Case& c, const network::Plan& plan, const Grid& grid) {
  const auto& pipe = plan.pipes[at(grid.worst_pipe)];
  base::Problem p;
  p.place = c.pipes[at(grid.worst_pipe)].place;
  p.path = "pipe/" + pipe.name + (grid.status == GridStatus::not_finite ? "/wave_speed" : "/wave_speed_change");
  p.what = refusal(grid, pipe.name);
  switch (grid.status) {
    case GridStatus::not_finite:
      p.hint = "give wall and material, or wave_speed";
      break;
    case GridStatus::rigid_refused:
      p.hint = "ask for more reaches, give a longer stroke, or join the pipe to its neighbour";
      break;
    case GridStatus::good:
    case GridStatus::change_refused:
    case GridStatus::uncertain_refused:
      p.hint = "ask for more reaches, or allow the change with wave_speed_change";
      break;
  }
  throw base::InputError({p});
}

void tell_grid(const network::Plan& plan, const steady::SteadyState<1>& steady, const Grid& grid, SurgeRun& run) {
  answers::GridAnswer& a = run.grid;
  a.time_step = grid.time_step;
  a.worst_wave_speed_change = grid.worst_change;
  if (grid.worst_pipe >= 0) a.worst_pipe = plan.pipes[at(grid.worst_pipe)].name;
  a.reaches = grid.reaches;
  a.marched_wave_speed = grid.marched_speed;
  for (std::size_t i = 0; i < plan.pipes.size(); ++i)
    if (grid.reaches[i] == 0) a.rigid_pipes.push_back(plan.pipes[i].name);
  constexpr double told_change = 0.02;
  const auto tell = [&](const std::string& pipe, double change) {
    char text[300];
    std::snprintf(
        text, sizeof text, "grid: the wave speed of pipe '%s' is changed by %.1f %%", pipe.c_str(), 100.0 * change);
    run.warnings.emplace_back(text);
  };
  if (grid.worst_change > told_change) tell(a.worst_pipe, grid.worst_change);
  double worst = told_change;
  int pipe = -1;
  for (std::size_t i = 0; i < plan.pipes.size(); ++i) {
    const double change = std::fabs(grid.marched_speed[i] / steady.wave_speed[i].number - 1.0);
    if (grid.reaches[i] == 0 || grid.long_pipe[i] || !(change > worst)) continue;
    worst = change;
    pipe = static_cast<int>(i);
  }
  if (pipe >= 0) tell(plan.pipes[at(pipe)].name, worst);
}

void tell_rigid(const network::Plan& plan, const network::Values<1>& values, const Grid& grid, SurgeRun& run) {
  for (std::size_t i = 0; i < plan.pipes.size(); ++i) {
    if (grid.reaches[i] != 0) continue;
    char text[300];
    std::snprintf(text,
                  sizeof text,
                  "pipe '%s' is too short for a wave on this grid and marches as a rigid column (2L/a = %.3g s, step "
                  "%.3g s)",
                  plan.pipes[i].name.c_str(),
                  2.0 * values.pipes[i].length.number / grid.marched_speed[i],
                  grid.time_step);
    run.warnings.emplace_back(text);
  }
}

void tell_jumps(const network::Plan& plan, const March<1>& march, SurgeRun& run) {
  for (const Jump& j : march.jumps()) {
    if (j.off_grid <= 1e-9 * march.numbers().time_step.number) continue;
    char text[300];
    std::snprintf(text,
                  sizeof text,
                  "event '%s' acts at the next row of the grid, %.3g s later than asked",
                  plan.events[at(j.event)].name.c_str(),
                  j.off_grid);
    run.warnings.emplace_back(text);
  }
}

// Times at which a movement ends or bends; what is instant has no bend.
std::vector<double> bends(const March<1>& march) {
  std::vector<double> times;
  const auto& n = march.numbers();
  const auto add = [&](const Movement<1>& m) {
    const auto& chain = m.chain(0);
    for (std::size_t k = 1; k < chain.size(); ++k)
      if (!chain[k].instant) times.push_back(chain[k].start);
  };
  for (const auto& m : n.branch_movement) add(m);
  for (const auto& m : n.draw_movement) add(m);
  for (const int p : march.layout().basins) add(n.basin_movement[at(p)]);
  return times;
}

/// Extremes of three grids further apart than this many asked steps are not one peak.
constexpr double one_peak = 2.0;

/// Bounds of the extremes from the runs on 1, 2 or 3 grids.
class Bounds {
 public:
  Bounds(const GridRun& asked, const GridRun* fine, const GridRun* finest)
      : asked_(&asked),
        fine_(fine),
        finest_(finest),
        bends_(bends(asked.march)),
        pressure_swing_(asked.record.extreme_everywhere(asked.march, true).value -
                        asked.record.extreme_everywhere(asked.march, false).value) {}

  /// Of the whole run [Pa].
  [[nodiscard]] double pressure_swing() const { return pressure_swing_; }

  /// @param swing highest minus lowest value of the run, in the unit of `extreme`
  /// @param vapour whether the extreme may be one of a run with cavities; false: one before they formed
  template <class F>
  [[nodiscard]] GridBound of(const F& extreme, double swing, bool vapour = true) const {
    const AnswerPeak a = extreme(*asked_);
    GridBound b;
    if (fine_ == nullptr || !fine_->finished()) return {std::numeric_limits<double>::quiet_NaN(), false};
    if (finest_ == nullptr) {
      const AnswerPeak fine = extreme(*fine_);
      b = bound_from_two(a.value, fine.value);
      b.bound += fine.missed;
    } else if (finest_->finished()) {
      const AnswerPeak fine = extreme(*fine_), finest = extreme(*finest_);
      const double apart = std::max({a.time, fine.time, finest.time}) - std::min({a.time, fine.time, finest.time});
      b = bound_from_three({.asked = a.value,
                            .fine = fine.value,
                            .finest = finest.value,
                            .swing = swing,
                            .cavity_closed = vapour && asked_->march.state().tally.closed[0],
                            .different_peaks = apart > one_peak * asked_->grid.time_step,
                            .between_rows = a.missed});
      b.bound += finest.missed;
    } else {
      return {std::numeric_limits<double>::quiet_NaN(), false};
    }
    const double step = asked_->grid.time_step * (1.0 + 1e-9);
    for (const double t : bends_)
      if (std::fabs(t - a.time) <= step) {
        b.bound += a.beside;
        break;
      }
    return b;
  }

 private:
  const GridRun* asked_;
  const GridRun* fine_;
  const GridRun* finest_;
  std::vector<double> bends_;
  double pressure_swing_;
};

// A third grid costs sixteen times the asked one; without cavities it is marched where that stays a matter of a second.
bool third_grid_is_cheap(const Grid& grid, double duration) {
  constexpr double most_sections = 4e7;
  double sections = 0.0;
  for (const int reaches : grid.reaches) sections += 4.0 * reaches;
  return sections * 4.0 * duration / grid.time_step <= most_sections;
}

answers::Extreme as_extreme(const network::Plan& plan, const AnswerPeak& p) {
  answers::Extreme e;
  e.pressure = p.value;
  e.head = p.head;
  e.chainage = p.chainage;
  e.time = p.time;
  if (p.pipe >= 0) e.pipe = plan.pipes[at(p.pipe)].name;
  return e;
}

// Highest minus lowest value of the run, in the unit of an answer; a velocity swings from rest to its top, `value`.
double swing_of(const network::AnswerPlan& what, double value, const Bounds& bounds) {
  return what.kind == network::AnswerKind::velocity ? value : bounds.pressure_swing();
}

// How far the extreme of a limit may lie on the side of keeping it: the grid bound, or the distance to what stood
// before any vapour formed and its own bound.
double bound_to_kept(const network::LimitPlan& limit,
                     std::size_t k,
                     double value,
                     double grid_bound,
                     const GridRun& asked,
                     const std::optional<Bounds>& bounds) {
  if (!bounds || !limit.subject.needs_surge() || !asked.record.extreme_before_vapour(k)) return grid_bound;
  const auto early = [&](const GridRun& r) {
    const auto before = r.record.extreme_before_vapour(k);
    return before ? *before : r.record.extreme_of(r.march, limit.subject);
  };
  const GridBound b = bounds->of(early, swing_of(limit.subject, early(asked).value, *bounds), false);
  const double room = std::fabs(value - early(asked).value) + b.bound;
  return std::isnan(grid_bound) || room < grid_bound ? room : grid_bound;
}

// Value and bound of answers and limits.
void fill_answers(const network::Plan& plan,
                  const network::Values<1>& values,
                  const steady::SteadyState<1>& steady,
                  const GridRun& asked,
                  const std::optional<Bounds>& bounds,
                  SurgeRun& run) {
  const auto fill = [&](const network::AnswerPlan& what, std::vector<double>& value, std::vector<double>& bound) {
    if (!what.needs_surge()) {
      value.push_back(steady::answer<1>(plan, values, steady, what).number);
      bound.push_back(0.0);
      return;
    }
    const auto extreme = [&](const GridRun& r) { return r.record.extreme_of(r.march, what); };
    value.push_back(extreme(asked).value);
    bound.push_back(bounds ? bounds->of(extreme, swing_of(what, value.back(), *bounds)).bound : 0.0);
    if (std::isnan(bound.back())) run.grid.converging = false;
  };
  for (const auto& a : plan.answers) fill(a, run.answer_value, run.answer_grid_bound);
  for (std::size_t k = 0; k < plan.limits.size(); ++k) {
    fill(plan.limits[k].subject, run.limit_value, run.limit_grid_bound);
    run.limit_bound_to_kept.push_back(
        bound_to_kept(plan.limits[k], k, run.limit_value[k], run.limit_grid_bound[k], asked, bounds));
  }
}

void fill_extremes(const network::Plan& plan,
                   const GridRun& asked,
                   const std::optional<Bounds>& bounds,
                   SurgeRun& run) {
  for (const bool highest : {true, false}) {
    const auto extreme = [&](const GridRun& r) { return r.record.extreme_everywhere(r.march, highest); };
    answers::Extreme e = as_extreme(plan, extreme(asked));
    if (bounds) {
      const GridBound b = bounds->of(extreme, bounds->pressure_swing());
      e.grid_bound = b.bound;
      e.grid_converging = b.converging;
      if (!b.converging) run.grid.converging = false;
    }
    (highest ? run.highest : run.lowest) = e;
  }
}

// The built-in four-quadrant table is that of specific speed 25: told where a moving pump is further than a fifth from
// it.
void tell_foreign_quadrants(const network::Plan& plan, const March<1>& march, SurgeRun& run) {
  constexpr double table_speed = 25.0, told = 0.2;
  const auto& n = march.numbers();
  const auto& branches = march.layout().branches;
  for (std::size_t j = 0; j < branches.size(); ++j) {
    const bool first = j == 0 || branches[j - 1].device != branches[j].device;
    if (branches[j].kind != BranchKind::pump || n.pump[j].quadrants != &quadrants_ns25() || !first) continue;
    const bool moves = std::any_of(plan.events.begin(), plan.events.end(), [&](const network::EventPlan& e) {
      return e.device == branches[j].device;
    });
    const PumpModel& pump = n.pump[j];
    const double rev_per_min = pump.rated_speed * 30.0 / std::numbers::pi;
    const double specific = rev_per_min * std::sqrt(pump.rated_flow) / std::pow(pump.rated_head, 0.75);
    if (!moves || !(std::fabs(specific / table_speed - 1.0) > told)) continue;
    char text[300];
    std::snprintf(
        text,
        sizeof text,
        "pump '%s' has specific speed %.3g (rev/min, m3/s, m); its reverse flow is taken from the table of %.3g, "
        "the only one there is",
        plan.devices[at(branches[j].device)].name.c_str(),
        specific,
        table_speed);
    run.warnings.emplace_back(text);
  }
}

// Flow back through a pump whose forward curve is all that is known of it.
void tell_pumps_beyond_their_curve(const network::Case& c, SurgeRun& run) {
  const auto& t = run.transient;
  for (const network::Pump& pump : c.pumps) {
    if (pump.characteristic != network::Characteristic::none) continue;
    const auto found = std::find(t.series_name.begin(), t.series_name.end(), pump.name + " flow");
    if (found == t.series_name.end()) continue;
    const std::size_t width = t.series_name.size();
    for (std::size_t k = static_cast<std::size_t>(found - t.series_name.begin()); k < t.series.size(); k += width)
      if (t.series[k] < 0.0) {
        run.warnings.push_back(
            "pump '" + pump.name +
            "': flow runs back through it, and without a four-quadrant characteristic its forward curve "
            "is followed there: not to be trusted");
        break;
      }
  }
}

}  // namespace

SurgeRun run_surge(const network::Case& c,
                   const network::Plan& plan,
                   const network::Values<1>& values,
                   const steady::SteadyState<1>& steady) {
  SurgeRun run;
  Grid grid;
  choose_grid(grid_request(c, plan, values, steady, 0), grid);
  if (grid.status != GridStatus::good) refuse(c, plan, grid);
  tell_grid(plan, steady, grid, run);
  tell_rigid(plan, values, grid, run);
  std::vector<bool> rigid(plan.pipes.size());
  for (std::size_t i = 0; i < rigid.size(); ++i) rigid[i] = grid.reaches[i] == 0;
  const Layout layout = make_layout(c, plan, rigid);

  GridRun asked(c, plan, values, steady, grid, layout, true);
  tell_jumps(plan, asked.march, run);
  tell_foreign_quadrants(plan, asked.march, run);
  std::optional<GridRun> fine, finest;
  std::optional<Bounds> bounds;
  if (c.surge.grid_check && asked.finished()) {
    fine.emplace(c, plan, values, steady, refined(grid, 2), layout, false);
    if (asked.march.state().tally.closed[0] || third_grid_is_cheap(grid, c.surge.duration.value))
      finest.emplace(c, plan, values, steady, refined(grid, 4), layout, false);
    bounds.emplace(asked, &*fine, finest ? &*finest : nullptr);
    run.grid.grids = finest ? 3 : 2;
  } else if (!c.surge.grid_check) {
    run.warnings.emplace_back("grid_check is off: the extremes carry no grid bound");
  }
  fill_extremes(plan, asked, bounds, run);
  fill_answers(plan, values, steady, asked, bounds, run);
  asked.record.finish(asked.march, run);
  tell_pumps_beyond_their_curve(c, run);
  if (run.audit.volume_residual_relative > 1e-2) {
    char text[200];
    std::snprintf(text,
                  sizeof text,
                  "volume audit: the residual is %.2g of the volume passed",
                  run.audit.volume_residual_relative);
    run.warnings.emplace_back(text);
  }
  return run;
}

}  // namespace headband::transient
