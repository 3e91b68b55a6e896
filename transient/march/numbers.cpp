// SPDX-License-Identifier: MIT
#include "transient/march/numbers.hpp"

#include "core/pipe/profile.hpp"

#include <algorithm>
#include <cmath>
#include <limits>
#include <numbers>
#include <span>
#include <tuple>

namespace headband::transient {
namespace {

constexpr double never = std::numeric_limits<double>::infinity();
/// A pipe whose first Reynolds number is below this follows f(Re) even where the first factor is asked to stay.
constexpr double still_reynolds = 1.0;

template <int W>
void fill_grid(const Layout& layout, const base::PerLane<const Grid*, W>& grids, std::size_t i, PipeNumbers<W>& p) {
  p.uniform = true;
  p.most_reaches = 0;
  for (int lane = 0; lane < W; ++lane) {
    const auto l = static_cast<std::size_t>(lane);
    p.reaches[l] = layout.rigid[i] ? 0 : std::max(1, grids[l]->reaches[i]);
    p.uniform = p.uniform && p.reaches[l] == p.reaches[0];
    p.reach_count.set(lane, p.reaches[l]);
    p.most_reaches = std::max(p.most_reaches, p.reaches[l]);
  }
}

// Friction of one reach in the mode asked for; per lane, so that a draw never depends on its neighbours.
template <int W>
void fill_friction(const network::Case& c,
                   const network::Values<W>& values,
                   const steady::SteadyState<W>& steady,
                   std::size_t i,
                   PipeNumbers<W>& p) {
  const auto& v = values.pipes[i];
  Lanes<W> count(1.0);
  for (int lane = 0; lane < W; ++lane) count.set(lane, std::max(1, p.reaches[static_cast<std::size_t>(lane)]));
  const Lanes<W> per_square = 1.0 / (2.0 * values.gravity * v.area * v.area);
  const Lanes<W> whole = (v.length + v.spread_equivalent_length) / v.bore * per_square;
  const Lanes<W> of_reach = whole / count;
  Resistance<W>& r = p.resistance;
  r = Resistance<W>{};
  r.carry = r.damp = p.impedance;
  r.quadratic = v.spread_k * per_square / count;
  r.reynolds = p.friction.reynolds_per_flow;
  p.friction_number = whole;
  p.fitting_number = v.spread_k * per_square;
  for (const auto& f : v.placed_fittings) {
    p.friction_number += f.equivalent_length / v.bore * per_square;
    p.fitting_number += f.k * per_square;
  }
  const auto kind = p.friction.kind;
  const auto mode = c.surge.friction_in_time;
  const bool one_factor = kind == network::LossKind::fixed_factor || kind == network::LossKind::manning;
  const auto kept = mode == network::FrictionInTime::reynolds ? Lanes<W>(0.0) > Lanes<W>(1.0)
                                                              : steady.reynolds[i] >= Lanes<W>(still_reynolds);
  const auto straight = mode == network::FrictionInTime::linear ? kept : Lanes<W>(0.0) > Lanes<W>(1.0);
  const Lanes<W> zero(0.0);
  const Lanes<W> first = kind == network::LossKind::none ? zero : select(kept, steady.friction_factor[i], zero);
  p.kept_factor = select(kept, first, Lanes<W>(std::numeric_limits<double>::quiet_NaN()));
  const Lanes<W> linear = select(straight, of_reach * first * abs(steady.pipe_flow[i]), zero);
  r.carry = r.carry - 0.5 * linear;
  r.damp = r.damp + 0.5 * linear;
  r.quadratic += select(straight, zero, of_reach * first);
  if (kind == network::LossKind::none) return;
  if (one_factor) {
    r.quadratic += select(kept, zero, of_reach * p.friction.fixed_factor);
  } else if (!all(kept)) {
    r.form = kind == network::LossKind::darcy ? Form::darcy : Form::power;
    if (r.form == Form::darcy) {
      r.rule = p.friction.prepared;
      r.darcy = select(kept, zero, of_reach);
    } else {
      r.power = select(kept, zero, of_reach * p.friction.factor_at_unit);
    }
  }
}

// Fittings with a place act in the reach that holds them.
template <int W>
void place_fittings(const network::Values<W>& values, std::size_t i, PipeNumbers<W>& p, Numbers<W>& n) {
  const auto& v = values.pipes[i];
  p.placed = !v.placed_fittings.empty() && p.most_reaches > 0;
  if (!p.placed) return;
  const Lanes<W> per_square = 1.0 / (2.0 * values.gravity * v.area * v.area);
  const Lanes<W> factor = select(p.kept_factor == p.kept_factor, p.kept_factor, p.friction.fixed_factor);
  const Lanes<W> spread_share = Lanes<W>(1.0) + v.spread_equivalent_length / v.length;
  for (const auto& f : v.placed_fittings) {
    for (int lane = 0; lane < W; ++lane) {
      const int last = p.reaches[static_cast<std::size_t>(lane)] - 1;
      const int reach = std::clamp(static_cast<int>(std::floor(f.at[lane] / p.reach[lane])), 0, last);
      const std::size_t row = p.first_row + static_cast<std::size_t>(reach);
      const double le = f.equivalent_length[lane];
      // constant factors turn an equivalent length into a loss coefficient; f(Re) makes the reach longer
      const double k = f.k[lane] + factor[lane] * le / v.bore[lane];
      n.fitting[row].set(lane, n.fitting[row][lane] + k * per_square[lane]);
      n.longer[row].set(lane, n.longer[row][lane] + le / (p.reach[lane] * spread_share[lane]));
    }
  }
}

template <int W>
void fill_vapour(const network::Plan& plan, const Layout& layout, const network::Values<W>& values, Numbers<W>& n) {
  const Lanes<W> none(-never);
  const Lanes<W> below = (values.liquid.vapour_pressure - values.atmosphere) / (values.liquid.density * values.gravity);
  n.place_vapour.assign(plan.places.size(), none);
  n.place_volume_scale.assign(plan.places.size(), Lanes<W>(0.0));
  std::vector<Lanes<W>> place_volume(plan.places.size(), Lanes<W>(0.0));
  for (std::size_t i = 0; i < plan.pipes.size(); ++i) {
    const PipeNumbers<W>& p = n.pipes[i];
    if (p.most_reaches == 0) continue;
    const auto& v = values.pipes[i];
    const std::span<const Lanes<W>> x(v.chainage), z(v.elevation);
    const std::size_t from = plan.pipes[i].from.at(), to = plan.pipes[i].to.at();
    place_volume[from] += 0.5 * v.area * p.reach;
    place_volume[to] += 0.5 * v.area * p.reach;
    if (!n.limited) continue;
    for (int row = 0; row <= p.most_reaches; ++row) {
      const Lanes<W> at = p.reach * static_cast<double>(row);
      const Lanes<W> top =
          pipe::highest_point<W>(x, z, max(at - p.reach, Lanes<W>(0.0)), min(at + p.reach, v.length)).elevation;
      Lanes<W> limit = top + below;
      for (int lane = 0; lane < W; ++lane)
        if (row >= p.reaches[static_cast<std::size_t>(lane)]) limit.set(lane, -never);  // the end is its place's
      n.vapour[p.first_row + static_cast<std::size_t>(row)] = limit;
    }
    n.place_vapour[from] = max(n.place_vapour[from], n.vapour[p.first_row]);
    const Lanes<W> top_end = pipe::highest_point<W>(x, z, max(v.length - p.reach, Lanes<W>(0.0)), v.length).elevation;
    n.place_vapour[to] = max(n.place_vapour[to], top_end + below);
  }
  for (std::size_t k = 0; k < plan.places.size(); ++k) {
    if (n.limited && layout.sides_at[k].empty() && plan.places[k].basin < 0)
      n.place_vapour[k] = values.places[k].elevation + below;
    n.place_volume_scale[k] =
        select(place_volume[k] > Lanes<W>(0.0), 1.0 / max(place_volume[k], Lanes<W>(1e-300)), Lanes<W>(0.0));
  }
}

// Time on the grid at which something instant acts: its own, or the next row.
long long step_of(double at, double dt) { return static_cast<long long>(std::ceil(at / dt - 1e-9)); }

template <int W>
Stroke stroke_of(const network::Case& c, const network::EventPlan& event, const network::EventValues<W>& v, int lane) {
  const network::Event& e = c.events[static_cast<std::size_t>(event.index)];
  Stroke s;
  s.at = v.at[lane];
  s.to = v.to[lane];
  s.over = e.instant ? 0.0 : v.over[lane];
  if (event.kind == network::EventKind::swing_valve) {
    s.swing = v.swing[lane];
    s.period = v.period[lane];
  }
  for (std::size_t k = 0; k < v.travel_time.size(); ++k) {
    s.travel_time.push_back(v.travel_time[k][lane]);
    s.travel_position.push_back(v.travel_position[k][lane]);
  }
  return s;
}

// The movement an event acts on, and its subject's own start; null where the event moves nothing of this kind.
template <int W>
struct Mover {
  Numbers<W>& n;
  const Layout& layout;
  const network::Plan& plan;

  [[nodiscard]] std::vector<Movement<W>*> of(const network::EventPlan& e) const {
    std::vector<Movement<W>*> found;
    if (e.kind == network::EventKind::move_basin) {
      for (const int p : layout.basins)
        if (plan.places[static_cast<std::size_t>(p)].basin == e.basin)
          found.push_back(&n.basin_movement[static_cast<std::size_t>(p)]);
      return found;
    }
    for (std::size_t j = 0; j < layout.branches.size(); ++j)
      if (layout.branches[j].device == e.device && layout.branches[j].kind != BranchKind::pump)
        found.push_back(&n.branch_movement[j]);
    for (std::size_t j = 0; j < layout.draws.size(); ++j)
      if (layout.draws[j].device == e.device) found.push_back(&n.draw_movement[j]);
    return found;
  }
};

template <int W>
void start_movements(const network::Case& c,
                     const network::Plan& plan,
                     const Layout& layout,
                     const network::Values<W>& values,
                     Numbers<W>& n) {
  const auto begin = [](Movement<W>& m, int lane, double position) {
    m.chain(lane).assign(1, Segment{-1.0, position});
  };
  for (int lane = 0; lane < W; ++lane) {
    for (std::size_t j = 0; j < layout.branches.size(); ++j) {
      const Branch& b = layout.branches[j];
      const double start =
          b.kind == BranchKind::valve ? values.valves[static_cast<std::size_t>(b.index)].starting_opening[lane] : 1.0;
      begin(n.branch_movement[j], lane, start);
    }
    for (std::size_t j = 0; j < layout.draws.size(); ++j)
      begin(n.draw_movement[j], lane, values.draw_offs[static_cast<std::size_t>(layout.draws[j].index)].flow[lane]);
    for (const int p : layout.basins) {
      const auto place = static_cast<std::size_t>(p);
      Movement<W>& m = n.basin_movement[place];
      begin(m, lane, values.places[place].held_head[lane]);
      const int basin = plan.places[place].basin;
      const auto& rows = c.basins[static_cast<std::size_t>(basin)].level_table.rows;
      const double above = values.places[place].surface_head[lane], shift = values.places[place].level_shift[lane];
      for (std::size_t k = 0; k < rows.size(); ++k) {
        const double t = rows[k].first.value, x = (rows[k].second.value + shift) + above;
        const double slope = k + 1 < rows.size() && rows[k + 1].first.value > t
                                 ? (rows[k + 1].second.value - rows[k].second.value) / (rows[k + 1].first.value - t)
                                 : 0.0;
        m.chain(lane).push_back({t, x, slope});
      }
    }
  }
}

template <int W>
void add_events(const network::Case& c,
                const network::Plan& plan,
                const Layout& layout,
                const network::Values<W>& values,
                Numbers<W>& n,
                std::vector<Jump>& jumps) {
  std::vector<std::size_t> order(plan.events.size());
  const Mover<W> mover{n, layout, plan};
  for (int lane = 0; lane < W; ++lane) {
    const double dt = n.time_step[lane];
    for (std::size_t k = 0; k < order.size(); ++k) order[k] = k;
    const auto begins = [&](std::size_t k) {
      return values.events[static_cast<std::size_t>(plan.events[k].index)].at[lane];
    };
    std::sort(order.begin(), order.end(), [&](std::size_t a, std::size_t b) {
      return begins(a) < begins(b) || (!(begins(b) < begins(a)) && a < b);
    });
    const auto add_jump = [&](double asked, std::size_t event) {  // the time it acts
      const long long step = step_of(asked, dt);
      const double grid_time = static_cast<double>(step) * dt;
      jumps.push_back({step, lane, static_cast<int>(event), grid_time - asked});
      return grid_time;
    };
    for (const std::size_t k : order) {
      const network::EventPlan& event = plan.events[k];
      const auto& v = values.events[static_cast<std::size_t>(event.index)];
      const network::Event& e = c.events[static_cast<std::size_t>(event.index)];
      if (!std::isfinite(v.at[lane])) continue;  // started by a condition
      if (event.kind == network::EventKind::trip_pump || event.kind == network::EventKind::start_pump) {
        PowerChange change{.at = v.at[lane], .on = event.kind == network::EventKind::start_pump, .over = 0.0};
        if (change.on && e.instant) {
          change.at = add_jump(change.at, k) + 0.5 * dt;
        } else if (change.on) {
          change.over = v.over[lane];
        }
        for (std::size_t j = 0; j < layout.branches.size(); ++j)
          if (std::ranges::count(layout.branches[j].power, static_cast<int>(k)) > 0)
            n.power[j * W + static_cast<std::size_t>(lane)].push_back(change);
        continue;
      }
      Stroke s = stroke_of(c, event, v, lane);
      if (event.kind == network::EventKind::move_basin)
        for (std::size_t p = 0; p < plan.places.size(); ++p)
          if (plan.places[p].basin == event.basin) s.to += values.places[p].surface_head[lane];
      const bool instant = e.instant && s.travel_time.empty() && s.swing == 0.0;
      if (instant) s.at = add_jump(s.at, k);
      if (event.kind == network::EventKind::move_draw_off) {
        const auto& d = plan.devices[static_cast<std::size_t>(event.device)];
        const double start = values.draw_offs[static_cast<std::size_t>(d.index)].flow[lane];
        if (c.draw_offs[static_cast<std::size_t>(d.index)].pressure_dependent) s.to = start > 0.0 ? s.to / start : 0.0;
      }
      for (Movement<W>* m : mover.of(event)) m->add(lane, s, dt);
    }
  }
  std::sort(jumps.begin(), jumps.end(), [](const Jump& a, const Jump& b) {
    return std::tie(a.step, a.lane, a.event) < std::tie(b.step, b.lane, b.event);
  });
  for (auto& m : n.branch_movement) m.rewind();
  for (auto& m : n.draw_movement) m.rewind();
  for (const int p : layout.basins) n.basin_movement[static_cast<std::size_t>(p)].rewind();
}

template <int W>
void fit_lane(network::PumpCurve<1>& curve,
              const std::vector<Lanes<W>>& flow,
              const std::vector<Lanes<W>>& value,
              int lane) {
  std::vector<Lanes<1>> x, y;
  for (std::size_t k = 0; k < flow.size(); ++k) {
    x.emplace_back(flow[k][lane]);
    y.emplace_back(value[k][lane]);
  }
  curve.fit(x, y);
}

// One pump of a set in one draw. `quadrants`: the user's table where he gave one.
template <int W>
void fill_pump(const network::Pump& given,
               const network::PumpValues<W>& v,
               double weight,
               double first_flow,
               double first_head,
               const FourQuadrants* quadrants,
               int lane,
               PumpModel& pump) {
  pump.has_curve = !v.curve_flow.empty();
  if (pump.has_curve) fit_lane(pump.curve, v.curve_flow, v.curve_head, lane);
  pump.has_torque_table = !v.torque_flow.empty();
  if (pump.has_torque_table) fit_lane(pump.torque_curve, v.torque_flow, v.torque_share, lane);
  pump.shut_off_torque = v.shut_off_torque[lane];
  pump.rated_flow = std::isnan(v.rated_flow[lane]) ? first_flow : v.rated_flow[lane];
  pump.rated_head = std::isnan(v.rated_head[lane]) ? first_head : v.rated_head[lane];
  pump.rated_speed = v.speed[lane];
  pump.rated_torque = weight * pump.rated_flow * pump.rated_head / (v.efficiency[lane] * pump.rated_speed);
  pump.inertia = v.inertia[lane];
  pump.quadrants = nullptr;
  const bool can_reverse = given.check_valve.kind != network::CheckValveKind::ideal;
  if (quadrants != nullptr) {
    pump.quadrants = quadrants;
  } else if (given.characteristic == network::Characteristic::by_specific_speed &&
             (can_reverse || (std::isnan(pump.shut_off_torque) && !pump.has_torque_table))) {
    pump.quadrants = &quadrants_ns25();
  }
}

// Bore of the first pipe that ends at a place [m].
template <int W>
double bore_beside(const network::Plan& plan, const network::Values<W>& values, int place, int lane) {
  for (std::size_t i = 0; i < plan.pipes.size(); ++i)
    if (plan.pipes[i].from.index == place || plan.pipes[i].to.index == place) return values.pipes[i].bore[lane];
  return 1.0;
}

template <int W>
void fill_checks(const network::Case& c,
                 const network::Plan& plan,
                 const Layout& layout,
                 const network::Values<W>& values,
                 Numbers<W>& n) {
  n.check.assign(layout.branches.size() * W, CheckRule{});
  for (std::size_t j = 0; j < layout.branches.size(); ++j) {
    const Branch& b = layout.branches[j];
    const auto index = static_cast<std::size_t>(b.index);
    const bool pump = b.kind == BranchKind::pump;
    if (!pump && b.kind != BranchKind::check_valve) continue;
    const network::CheckValveRule& rule = pump ? c.pumps[index].check_valve : c.check_valves[index].rule;
    for (int lane = 0; lane < W; ++lane) {
      CheckRule& out = n.check[j * W + static_cast<std::size_t>(lane)];
      if (rule.kind == network::CheckValveKind::reverse_velocity) {
        double bore = pump ? values.pumps[index].check_bore[lane] : values.check_valves[index].bore[lane];
        if (!(bore > 0.0)) bore = bore_beside(plan, values, b.to, lane);
        const double velocity =
            pump ? values.pumps[index].reverse_velocity[lane] : values.check_valves[index].reverse_velocity[lane];
        out = {true, velocity * 0.25 * std::numbers::pi * bore * bore * b.count, never};
      } else if (rule.kind == network::CheckValveKind::delay) {
        out = {true, never, pump ? values.pumps[index].check_delay[lane] : values.check_valves[index].delay[lane]};
      }
    }
  }
}

template <int W>
void fill_pumps(const network::Case& c,
                const Layout& layout,
                const network::Values<W>& values,
                const steady::SteadyState<W>& steady,
                Numbers<W>& n) {
  n.quadrants.resize(c.pumps.size());
  for (std::size_t j = 0; j < layout.branches.size(); ++j) {
    const Branch& b = layout.branches[j];
    if (b.kind != BranchKind::pump) continue;
    const auto index = static_cast<std::size_t>(b.index);
    const network::Pump& given = c.pumps[index];
    FourQuadrants* own = nullptr;
    if (given.characteristic == network::Characteristic::table && given.suter.given()) {
      own = &n.quadrants[index];
      own->angle.clear();
      own->head.clear();
      for (const auto& [x, head] : given.suter.rows) {
        own->angle.push_back(x.value);
        own->head.push_back(head.value);
      }
      own->torque = given.suter_torque;
    }
    for (int lane = 0; lane < W; ++lane) {
      const double weight = values.liquid.density[lane] * values.gravity[lane];
      const double flow = steady.device_flow[static_cast<std::size_t>(b.device)][lane] / given.count;
      const double head = steady.place_head[static_cast<std::size_t>(b.to)][lane] -
                          steady.place_head[static_cast<std::size_t>(b.from)][lane];
      fill_pump(
          given, values.pumps[index], weight, flow, head, own, lane, n.pump[j * W + static_cast<std::size_t>(lane)]);
    }
  }
}

template <int W>
void fill_branches(const Layout& layout,
                   const network::Values<W>& values,
                   const steady::SteadyState<W>& steady,
                   Numbers<W>& n) {
  const std::size_t count = layout.branches.size();
  n.branch_full.assign(count, Lanes<W>(0.0));
  n.seat_power.assign(count, Lanes<W>(1.0));
  // their chains are begun anew below and keep their storage
  n.branch_movement.resize(count, Movement<W>(0.0, 1.0));
  n.draw_movement.resize(layout.draws.size());
  n.basin_movement.resize(values.places.size());
  n.pump.resize(count * W);
  n.power.resize(count * W);
  for (auto& changes : n.power) changes.clear();
  for (std::size_t j = 0; j < count; ++j) {
    const Branch& b = layout.branches[j];
    const auto at = static_cast<std::size_t>(b.index);
    if (b.kind == BranchKind::valve) {
      n.branch_full[j] = steady.valve_coefficient[at];
      n.seat_power[j] = values.valves[at].seat_power;
    } else if (b.kind == BranchKind::check_valve) {
      n.branch_full[j] = values.check_valves[at].coefficient;
    } else if (b.kind == BranchKind::orifice) {
      const auto place = static_cast<std::size_t>(b.from);
      const Lanes<W> flow = steady.device_flow[static_cast<std::size_t>(b.device)];
      const Lanes<W> head = steady.place_head[place] - values.places[place].elevation;
      const auto works = (flow > Lanes<W>(0.0)) & (head > Lanes<W>(0.0));
      n.branch_full[j] = select(works, flow / sqrt(max(head, Lanes<W>(1e-300))), Lanes<W>(0.0));
    }
  }
}

}  // namespace

template <int W>
void fill_numbers(const network::Case& c,
                  const network::Plan& plan,
                  const Layout& layout,
                  const network::Values<W>& values,
                  const steady::SteadyState<W>& steady,
                  const base::PerLane<const Grid*, W>& grids,
                  Numbers<W>& n,
                  std::vector<Jump>& jumps) {
  n.limited = c.surge.cavities != network::Cavities::off;
  n.gravity = values.gravity;
  n.density = values.liquid.density;
  n.atmosphere = values.atmosphere;
  n.pipes.resize(plan.pipes.size());
  n.rows = 0;
  for (int lane = 0; lane < W; ++lane) {
    const auto l = static_cast<std::size_t>(lane);
    n.time_step.set(lane, grids[l]->time_step);
    n.last_step[l] =
        grids[l]->status == GridStatus::good ? std::max(1LL, step_of(c.surge.duration.value, grids[l]->time_step)) : 0;
  }
  for (std::size_t i = 0; i < plan.pipes.size(); ++i) {
    PipeNumbers<W>& p = n.pipes[i];
    const auto& v = values.pipes[i];
    fill_grid(layout, grids, i, p);
    p.first_row = n.rows;
    n.rows += static_cast<std::size_t>(p.most_reaches + 1);
    p.impedance = p.reach = Lanes<W>(0.0);
    for (int lane = 0; lane < W; ++lane) {
      const auto l = static_cast<std::size_t>(lane);
      p.impedance.set(lane, grids[l]->marched_speed[i]);
      p.reach.set(lane, v.length[lane] / std::max(1, p.reaches[l]));
    }
    p.impedance = p.impedance / (values.gravity * v.area);
    p.per_section_volume = 1.0 / (v.area * p.reach);
    p.inertia = v.length / (values.gravity * v.area);
    const auto& rule = p.friction.rule;
    const bool laws_kept =
        p.friction.prepared.laws_present != 0 && rule.law == values.law && rule.transition == values.transition;
    steady::renew_pipe_friction<W>(plan, values, i, laws_kept, p.friction);
    fill_friction(c, values, steady, i, p);
  }
  n.fitting.assign(n.rows, Lanes<W>(0.0));
  n.longer.assign(n.rows, Lanes<W>(0.0));
  n.vapour.assign(n.rows, Lanes<W>(-never));
  for (std::size_t i = 0; i < plan.pipes.size(); ++i) place_fittings(values, i, n.pipes[i], n);
  fill_vapour(plan, layout, values, n);
  n.place_elevation.resize(plan.places.size());
  for (std::size_t k = 0; k < plan.places.size(); ++k) n.place_elevation[k] = values.places[k].elevation;
  fill_branches(layout, values, steady, n);
  fill_pumps(c, layout, values, steady, n);
  fill_checks(c, plan, layout, values, n);
  jumps.clear();
  start_movements(c, plan, layout, values, n);
  add_events(c, plan, layout, values, n, jumps);
}

#define HEADBAND_NUMBERS(W)                                           \
  template void fill_numbers<W>(const network::Case&,                 \
                                const network::Plan&,                 \
                                const Layout&,                        \
                                const network::Values<W>&,            \
                                const steady::SteadyState<W>&,        \
                                const base::PerLane<const Grid*, W>&, \
                                Numbers<W>&,                          \
                                std::vector<Jump>&);
HEADBAND_NUMBERS(1)
HEADBAND_NUMBERS(8)
#undef HEADBAND_NUMBERS

}  // namespace headband::transient
