// SPDX-License-Identifier: MIT
#include "transient/march/grid_request.hpp"

#include <algorithm>
#include <limits>

namespace headband::transient {
namespace {

constexpr double never = std::numeric_limits<double>::infinity();

template <class... Q>
bool sampled(const Q&... quantities) {
  return ((quantities.unknown >= 0) || ...);
}

// Something that a steady pressure may follow is sampled: anything but movements and the pipes' ratings.
bool pressure_is_uncertain(const network::Case& c) {
  return std::any_of(c.unknowns.begin(), c.unknowns.end(), [](const network::Unknown& u) {
    return !u.path.starts_with("event/") && !u.path.ends_with("/rating");
  });
}

// Shortest movement of an event on something at `place` [s].
template <int W>
double fastest_at(
    const network::Case& c, const network::Plan& plan, const network::Values<W>& values, int place, int lane) {
  double fastest = never;
  for (const auto& event : plan.events) {
    const network::Event& e = c.events[static_cast<std::size_t>(event.index)];
    const auto& v = values.events[static_cast<std::size_t>(event.index)];
    bool here = false;
    if (event.device >= 0) {
      const auto& d = plan.devices[static_cast<std::size_t>(event.device)];
      here = d.from.index == place || d.to.index == place;
    } else if (event.basin >= 0) {
      here = plan.places[static_cast<std::size_t>(place)].basin == event.basin;
    }
    if (!here || event.kind == network::EventKind::trip_pump) continue;
    double over = e.instant ? 0.0 : v.over[lane];
    if (event.kind == network::EventKind::swing_valve) over = 0.25 * v.period[lane];
    if (!v.travel_time.empty()) over = v.travel_time.back()[lane] - v.travel_time.front()[lane];
    if (over < fastest) fastest = over;
  }
  return fastest;
}

}  // namespace

bool travel_time_is_uncertain(const network::Case& c, const network::Pipe& p) {
  if (p.length.given() ? sampled(p.length) : !p.profile.empty() && sampled(p.profile.back().first)) return true;
  if (sampled(p.wave_speed_scatter)) return true;
  if (p.wave_speed.given()) return sampled(p.wave_speed);
  const auto& l = c.liquid;
  if (sampled(l.temperature, l.density, l.bulk_modulus, l.free_gas)) return true;
  if (l.free_gas.given() && l.free_gas.value > 0.0 && pressure_is_uncertain(c)) return true;
  return sampled(
      p.outside, p.wall, p.bore, p.lining_thickness, p.lining_modulus, p.modulus, p.poisson, p.restraint_factor);
}

template <int W>
GridRequest grid_request(const network::Case& c,
                         const network::Plan& plan,
                         const network::Values<W>& values,
                         const steady::SteadyState<W>& steady,
                         int lane) {
  GridRequest r;
  r.reaches = c.surge.reaches;
  if (c.surge.time_step.given()) r.time_step = c.surge.time_step.value;
  r.pipes.resize(plan.pipes.size());
  for (std::size_t i = 0; i < plan.pipes.size(); ++i) {
    GridPipe& p = r.pipes[i];
    p.length = values.pipes[i].length[lane];
    p.wave_speed = steady.wave_speed[i][lane];
    const auto& allowed = c.pipes[i].wave_speed_change;
    if (allowed.given()) p.allowed_change = allowed.value;
    p.uncertain = travel_time_is_uncertain(c, c.pipes[i]);
    p.fastest_movement = std::min(fastest_at(c, plan, values, plan.pipes[i].from.index, lane),
                                  fastest_at(c, plan, values, plan.pipes[i].to.index, lane));
  }
  return r;
}

template GridRequest grid_request<1>(
    const network::Case&, const network::Plan&, const network::Values<1>&, const steady::SteadyState<1>&, int);
template GridRequest grid_request<8>(
    const network::Case&, const network::Plan&, const network::Values<8>&, const steady::SteadyState<8>&, int);

}  // namespace headband::transient
