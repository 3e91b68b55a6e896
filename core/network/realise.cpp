// SPDX-License-Identifier: MIT
//
// From quantities to numbers. Each group of numbers has one function; a full realisation calls them all, a Realiser
// only those that some draw changes.

#include "core/network/detail/realise_liquid.hpp"
#include "core/network/detail/realise_pipe.hpp"
#include "core/network/values.hpp"

#include <numbers>

namespace headband::network {
namespace {

using detail::Draw;
using detail::not_a_number;
using detail::varies;

/// Kv rates water of this density [kg/m3] at 1 bar (convention g).
constexpr double kv_density = 999.0;
constexpr double bar = 1e5;

template <int W>
void realise_site(const Site& site, const Draw<W>& draw, Values<W>& values) {
  values.gravity = draw(site.gravity, 9.80665);         // standard gravity, ISO 80000-3
  values.atmosphere = draw(site.atmosphere, 101325.0);  // standard atmosphere, ISO 2533
}

/// Gauge pressure of a quantity that may be written absolute [Pa].
template <int W>
Lanes<W> gauge_pressure(const Quantity& pressure, const Draw<W>& draw, const Values<W>& values) {
  if (!pressure.given()) return Lanes<W>(0.0);
  return pressure.gauge ? draw(pressure) : draw(pressure) - values.atmosphere;
}

/// Gauge pressure a pipe is rated for; not a number where it has none [Pa].
template <int W>
void realise_rating(const Pipe& pipe, const Draw<W>& draw, const Values<W>& values, PipeValues<W>& out) {
  out.rating = pipe.rating.given() ? gauge_pressure(pipe.rating, draw, values) : Lanes<W>(not_a_number);
}

/// Level of a basin at the start: as given, else the first of its table.
template <int W>
Lanes<W> first_level(const Basin& basin, const Draw<W>& draw) {
  return basin.level.given() || !basin.level_table.given() ? draw(basin.level)
                                                           : Lanes<W>(basin.level_table.rows.front().second.value);
}

template <int W>
void realise_places(const Case& c, const Plan& plan, const Draw<W>& draw, Values<W>& values) {
  for (std::size_t i = 0; i < plan.places.size(); ++i) {
    const PlacePlan& place = plan.places[i];
    const auto source = static_cast<std::size_t>(place.elevation_index);
    PlaceValues<W>& out = values.places[i];
    out.held_head = not_a_number;
    out.surface_head = 0.0;
    out.level_shift = 0.0;
    switch (place.elevation) {
      case ElevationSource::entry:
        out.elevation = draw(c.places[source].elevation);
        break;
      case ElevationSource::pipe_start:
        out.elevation = draw(c.pipes[source].profile.front().second);
        break;
      case ElevationSource::pipe_end:
        out.elevation = draw(c.pipes[source].profile.back().second);
        break;
      case ElevationSource::level:
        out.elevation = first_level(c.basins[source], draw);
        break;
      case ElevationSource::nowhere:
        out.elevation = 0.0;
        break;
    }
    if (place.basin >= 0) {
      const Basin& basin = c.basins[static_cast<std::size_t>(place.basin)];
      const Lanes<W> level = first_level(basin, draw);
      out.surface_head =
          gauge_pressure(basin.surface_pressure, draw, values) / (values.liquid.density * values.gravity);
      out.held_head = level + out.surface_head;
      if (basin.level.given()) out.level_shift = level - basin.level.value;
    } else if (place.head_given) {
      for (const auto& entry : c.places)
        if (entry.name == place.name) out.held_head = draw(entry.head);
    }
  }
}

/// Flow coefficient of a loss coefficient by a bore: Q = A sqrt(2 g / K) sqrt(dH).
template <int W>
Lanes<W> coefficient_of_k(const Lanes<W>& k, const Lanes<W>& bore, const Lanes<W>& gravity) {
  const Lanes<W> area = (0.25 * std::numbers::pi) * (bore * bore);
  return area * base::sqrt(2.0 * gravity / k);
}

/// Flow coefficient of Kv: Q = Kv sqrt(dp[bar] 999/rho) with dp = rho g dH, so the density drops out.
template <int W>
Lanes<W> coefficient_of_kv(const Lanes<W>& kv, const Lanes<W>& gravity) {
  return kv * base::sqrt((kv_density / bar) * gravity);
}

template <int W>
Lanes<W> bore_of(
    const Quantity& stated, const Plan& plan, const std::string& device, const Draw<W>& draw, const Values<W>& values) {
  if (stated.given()) return draw(stated);
  const int index = plan.device_named(device);
  const PipeId pipe = index >= 0 ? plan.devices[static_cast<std::size_t>(index)].adjoining : PipeId{};
  return pipe.exists() ? values.pipes[pipe.at()].bore : Lanes<W>(not_a_number);
}

template <int W>
void realise_valve(
    const Valve& valve, const Plan& plan, const Draw<W>& draw, const Values<W>& values, ValveValues<W>& out) {
  out.sizing_flow = draw(valve.flow);
  out.seat_power = draw(valve.near_seat, 1.0);
  out.starting_opening = draw(valve.opening, 1.0);
  out.coefficient = not_a_number;
  if (valve.flow.given()) return;
  if (valve.kv.given()) {
    out.coefficient = coefficient_of_kv(draw(valve.kv), values.gravity);
  } else if (valve.k.given()) {
    out.coefficient =
        coefficient_of_k(draw(valve.k), bore_of(valve.bore, plan, valve.name, draw, values), values.gravity);
  } else if (valve.area.given()) {
    out.coefficient = draw(valve.area) * draw(valve.discharge_coefficient, 1.0) * base::sqrt(2.0 * values.gravity);
  }
}

template <int W>
void realise_check_valve(
    const CheckValve& check, const Plan& plan, const Draw<W>& draw, const Values<W>& values, CheckValveValues<W>& out) {
  out.bore = bore_of(check.bore.given() ? check.bore : check.rule.bore, plan, check.name, draw, values);
  out.reverse_velocity = draw(check.rule.reverse_velocity);
  out.delay = draw(check.rule.delay);
  if (check.kv.given()) {
    out.coefficient = coefficient_of_kv(draw(check.kv), values.gravity);
  } else if (check.k.given()) {
    out.coefficient = coefficient_of_k(draw(check.k), out.bore, values.gravity);
  } else {
    out.coefficient = std::numeric_limits<double>::infinity();
  }
}

/// Rows of a table, the second column times `factor`.
template <int W>
void realise_table(const Table& table,
                   const Draw<W>& draw,
                   const Lanes<W>& factor,
                   std::vector<Lanes<W>>& first,
                   std::vector<Lanes<W>>& second) {
  first.resize(table.rows.size());
  second.resize(table.rows.size());
  for (std::size_t i = 0; i < table.rows.size(); ++i) {
    first[i] = draw(table.rows[i].first);
    second[i] = draw(table.rows[i].second) * factor;
  }
}

template <int W>
void realise_pump(
    const Pump& pump, const Plan& plan, const Draw<W>& draw, const Values<W>& values, PumpValues<W>& out) {
  realise_table(pump.curve, draw, draw(pump.head_scatter, 1.0), out.curve_flow, out.curve_head);
  realise_table(pump.torque, draw, Lanes<W>(1.0), out.torque_flow, out.torque_share);
  out.efficiency = draw(pump.efficiency);
  out.speed = draw(pump.speed);
  out.inertia = draw(pump.inertia);
  out.shut_off_torque = draw(pump.shut_off_torque);
  out.rated_flow = draw(pump.rated_flow);
  out.rated_head = draw(pump.rated_head);
  if (!pump.curve.given()) out.rated_head = out.rated_head * draw(pump.head_scatter, 1.0);  // scales the table's heads
  out.reverse_velocity = draw(pump.check_valve.reverse_velocity);
  out.check_bore = bore_of(pump.check_valve.bore, plan, pump.name, draw, values);
  out.check_delay = draw(pump.check_valve.delay);
}

template <int W>
void realise_event(const Event& event, const Draw<W>& draw, EventValues<W>& out) {
  out.at = draw(event.at);
  out.to = draw(event.to);
  out.over = draw(event.over);
  out.swing = draw(event.swing);
  out.period = draw(event.period);
  out.delay = draw(event.delay);
  realise_table(event.travel, draw, Lanes<W>(1.0), out.travel_time, out.travel_position);
  if (event.travel_in_shares)
    for (auto& time : out.travel_time) time *= out.over;
}

template <int W>
void realise_choices(const Friction& friction, const Draw<W>& draw, Values<W>& values) {
  for (int lane = 0; lane < W; ++lane) {
    values.law[static_cast<std::size_t>(lane)] = draw(friction.law, lane);
    values.transition[static_cast<std::size_t>(lane)] = draw(friction.transition, lane);
  }
}

template <int W>
void size_values(const Case& c, const Plan& plan, Values<W>& values) {
  values.places.resize(plan.places.size());
  values.pipes.resize(c.pipes.size());
  values.valves.resize(c.valves.size());
  values.pumps.resize(c.pumps.size());
  values.check_valves.resize(c.check_valves.size());
  values.draw_offs.resize(c.draw_offs.size());
  values.events.resize(c.events.size());
}

/// Everything, group by group; later groups lean on earlier ones.
template <int W>
void realise_all(const Case& c, const Plan& plan, const Draw<W>& draw, Values<W>& values) {
  size_values(c, plan, values);
  realise_site(c.site, draw, values);
  detail::realise_by_temperature(c.liquid, draw, values.liquid);
  detail::realise_given_numbers(c.liquid, draw, values.liquid);
  detail::realise_viscosity(c.liquid, draw, values.liquid);
  realise_places(c, plan, draw, values);
  for (std::size_t i = 0; i < c.pipes.size(); ++i) {
    detail::realise_length(c.pipes[i], draw, values.pipes[i]);
    detail::realise_section(c.pipes[i], draw, values.pipes[i]);
    realise_rating(c.pipes[i], draw, values, values.pipes[i]);
    detail::realise_wave(c.pipes[i], plan.pipes[i], draw, values.liquid, values.pipes[i]);
    detail::realise_friction(c, i, plan.pipes[i].loss, draw, values.pipes[i]);
    detail::realise_fittings(c.pipes[i], draw, values.pipes[i]);
    detail::realise_profile(c.pipes[i], plan.pipes[i], draw, values.places, values.pipes[i]);
  }
  for (std::size_t i = 0; i < c.valves.size(); ++i) realise_valve(c.valves[i], plan, draw, values, values.valves[i]);
  for (std::size_t i = 0; i < c.pumps.size(); ++i) realise_pump(c.pumps[i], plan, draw, values, values.pumps[i]);
  for (std::size_t i = 0; i < c.check_valves.size(); ++i)
    realise_check_valve(c.check_valves[i], plan, draw, values, values.check_valves[i]);
  for (std::size_t i = 0; i < c.draw_offs.size(); ++i) values.draw_offs[i].flow = draw(c.draw_offs[i].flow);
  for (std::size_t i = 0; i < c.events.size(); ++i) realise_event(c.events[i], draw, values.events[i]);
  realise_choices(c.friction, draw, values);
}

template <class Table>
bool varies_in_rows(const Table& rows) {
  for (const auto& [first, second] : rows)
    if (varies(first, second)) return true;
  return false;
}

}  // namespace

Realiser::Realiser(const Case& c, const Plan& plan, bool waves) : case_(&c), plan_(&plan), spreads_(c.unknowns.size()) {
  for_each_quantity(c, [this](const Quantity& q) {
    if (q.unknown >= 0) spreads_[static_cast<std::size_t>(q.unknown)] = base::ready_spread(q.spread, q.cut, q.value);
  });
  site_ = varies(c.site.atmosphere, c.site.gravity);
  const Liquid& l = c.liquid;
  temperature_ = varies(l.temperature) || varies_in_rows(l.viscosity_points);
  liquid_ = temperature_ || varies(l.density, l.bulk_modulus, l.vapour_pressure, l.free_gas);
  viscosity_ = temperature_ || varies(l.density, l.viscosity, l.viscosity_scatter);
  bool any_profile = false;
  for (const auto& p : c.pipes) {
    PipeChanges changes;
    const bool lining = varies(p.lining_thickness);
    const bool profile = varies_in_rows(p.profile);
    any_profile = any_profile || profile;
    changes.length = varies(p.length) || profile;
    changes.section = varies(p.outside, p.wall, p.bore) || lining;
    changes.rating = varies(p.rating) || (site_ && p.rating.given() && !p.rating.gauge);
    changes.wave =
        waves &&
        (changes.length || changes.section || temperature_ || varies(l.density, l.bulk_modulus) ||
         varies(p.lining_modulus, p.modulus, p.poisson, p.restraint_factor, p.wave_speed, p.wave_speed_scatter));
    changes.friction = varies(p.roughness,
                              p.hazen_williams,
                              p.manning,
                              p.friction_factor,
                              c.friction.scatter,
                              c.friction.laminar_scatter,
                              c.friction.fixed_factor);
    if (c.friction.scatter_per_pipe && pipes_.size() < c.friction.pipe_scatter.size())
      changes.friction = changes.friction || varies(c.friction.pipe_scatter[pipes_.size()]);
    for (const auto& f : p.fittings)
      changes.fittings = changes.fittings || varies(f.count, f.k, f.equivalent_length, f.at);
    changes.profile = changes.length;
    pipes_.push_back(changes);
  }
  places_ = any_profile;
  for (const auto& b : c.basins) {
    const bool weight = b.surface_pressure.given() && (site_ || temperature_ || varies(l.density));
    places_ = places_ || weight || varies(b.level, b.surface_pressure);
  }
  for (const auto& p : c.places) places_ = places_ || varies(p.elevation, p.head);
  bool any_bore = false;
  for (auto& p : pipes_) {
    p.profile = p.profile || places_;
    any_bore = any_bore || p.section;
  }
  for (const auto& v : c.valves)
    valves_.push_back(site_ || any_bore ||
                      varies(v.kv, v.k, v.bore, v.area, v.discharge_coefficient, v.flow, v.near_seat, v.opening));
  for (const auto& p : c.pumps)
    pumps_.push_back(any_bore || varies_in_rows(p.curve.rows) || varies_in_rows(p.torque.rows) ||
                     varies(p.head_scatter,
                            p.efficiency,
                            p.speed,
                            p.inertia,
                            p.shut_off_torque,
                            p.rated_flow,
                            p.rated_head,
                            p.check_valve.reverse_velocity,
                            p.check_valve.bore,
                            p.check_valve.delay));
  for (const auto& v : c.check_valves)
    check_valves_.push_back(site_ || any_bore ||
                            varies(v.kv, v.k, v.bore, v.rule.reverse_velocity, v.rule.bore, v.rule.delay));
  for (const auto& d : c.draw_offs) draw_offs_.push_back(varies(d.flow));
  for (const auto& e : c.events)
    events_.push_back(varies(e.at, e.to, e.over, e.swing, e.period, e.delay) || varies_in_rows(e.travel.rows));
  choices_ = c.friction.law.unknown >= 0 || c.friction.transition.unknown >= 0;
}

template <int W>
Values<W> Realiser::prepare() const {
  Values<W> values;
  realise_all(*case_, *plan_, Draw<W>(nullptr), values);
  values.drawn.resize(spreads_.size());
  return values;
}

template <int W>
void Realiser::draw(const Scores<W>& scores, Values<W>& values) const {
  if constexpr (W == 8) {
    base::quantiles(spreads_, std::span<const Lanes<8>>(scores), values.drawn);
  } else {
    for (std::size_t u = 0; u < spreads_.size(); ++u) values.drawn[u] = base::quantile<W>(spreads_[u], scores[u]);
  }
  overwrite<W>(scores, values.drawn, values);
}

void Realiser::look_ahead(std::span<const Scores<8>> scores, std::vector<std::vector<Lanes<8>>>& drawn) const {
  if (drawn.size() < scores.size()) drawn.resize(scores.size(), std::vector<Lanes<8>>(spreads_.size()));
  base::quantiles(spreads_, scores, std::span(drawn).first(scores.size()));
}

void Realiser::draw(const Scores<8>& scores, const std::vector<Lanes<8>>& drawn, Values<8>& values) const {
  overwrite<8>(scores, drawn, values);
}

template <int W>
void Realiser::overwrite(const Scores<W>& scores, const std::vector<Lanes<W>>& known, Values<W>& values) const {
  const Case& c = *case_;
  const Draw<W> drawn(scores, known);
  if (site_) realise_site(c.site, drawn, values);
  if (temperature_) detail::realise_by_temperature(c.liquid, drawn, values.liquid);
  if (liquid_) detail::realise_given_numbers(c.liquid, drawn, values.liquid);
  if (viscosity_) detail::realise_viscosity(c.liquid, drawn, values.liquid);
  if (places_) realise_places(c, *plan_, drawn, values);
  for (std::size_t i = 0; i < pipes_.size(); ++i) {
    PipeValues<W>& pipe = values.pipes[i];
    if (pipes_[i].length) detail::realise_length(c.pipes[i], drawn, pipe);
    if (pipes_[i].section) detail::realise_section(c.pipes[i], drawn, pipe);
    if (pipes_[i].rating) realise_rating(c.pipes[i], drawn, values, pipe);
    if (pipes_[i].wave) detail::realise_wave(c.pipes[i], plan_->pipes[i], drawn, values.liquid, pipe);
    if (pipes_[i].friction) detail::realise_friction(c, i, plan_->pipes[i].loss, drawn, pipe);
    if (pipes_[i].fittings) detail::realise_fittings(c.pipes[i], drawn, pipe);
    if (pipes_[i].profile) detail::realise_profile(c.pipes[i], plan_->pipes[i], drawn, values.places, pipe);
  }
  for (std::size_t i = 0; i < valves_.size(); ++i)
    if (valves_[i]) realise_valve(c.valves[i], *plan_, drawn, values, values.valves[i]);
  for (std::size_t i = 0; i < pumps_.size(); ++i)
    if (pumps_[i]) realise_pump(c.pumps[i], *plan_, drawn, values, values.pumps[i]);
  for (std::size_t i = 0; i < check_valves_.size(); ++i)
    if (check_valves_[i]) realise_check_valve(c.check_valves[i], *plan_, drawn, values, values.check_valves[i]);
  for (std::size_t i = 0; i < draw_offs_.size(); ++i)
    if (draw_offs_[i]) values.draw_offs[i].flow = drawn(c.draw_offs[i].flow);
  for (std::size_t i = 0; i < events_.size(); ++i)
    if (events_[i]) realise_event(c.events[i], drawn, values.events[i]);
  if (choices_) realise_choices(c.friction, drawn, values);
}

Values<1> realise(const Case& c, const Plan& plan) {
  Values<1> values;
  realise_all(c, plan, Draw<1>(nullptr), values);
  return values;
}

template <int W>
void realise(const Case& c, const Plan& plan, const Scores<W>& scores, Values<W>& values) {
  realise_all(c, plan, Draw<W>(&scores), values);
}

template Values<1> Realiser::prepare<1>() const;
template Values<8> Realiser::prepare<8>() const;
template void Realiser::draw<1>(const Scores<1>&, Values<1>&) const;
template void Realiser::draw<8>(const Scores<8>&, Values<8>&) const;
template void realise<1>(const Case&, const Plan&, const Scores<1>&, Values<1>&);
template void realise<8>(const Case&, const Plan&, const Scores<8>&, Values<8>&);

}  // namespace headband::network
