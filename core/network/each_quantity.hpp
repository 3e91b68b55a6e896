#pragma once
// SPDX-License-Identifier: MIT
//
// The one list of the quantities of a case that a draw may change, with the words they are known by.

#include "core/network/case.hpp"

#include <string>

namespace headband::network {

/// The words of one quantity: the name of the unknown is "ELEMENT KEY", its path "SECTION/ELEMENT/KEY".
struct QuantityWords {
  std::string section;  ///< `pipe`
  std::string element;  ///< `main`; empty for sections without elements
  std::string key;      ///< `wall`, `fitting bend 90 k`, `profile 2`

  /// Name of the unknown: `main wall`, `friction scatter`.
  [[nodiscard]] std::string name() const { return (element.empty() ? section : element) + " " + key; }
  /// `pipe/main/wall`, `friction/scatter`
  [[nodiscard]] std::string path() const { return section + (element.empty() ? "" : "/" + element) + "/" + key; }
};

namespace detail {

/// Calls `visit(quantity, key)` for both columns of a table; the second column carries the row number alone.
template <class Rows, class Visit>
void visit_rows(Rows& rows, const std::string& key, const std::string& first_column, const Visit& visit) {
  int row = 0;
  for (auto& [first, second] : rows) {
    const std::string numbered = key + " " + std::to_string(++row);
    visit(first, numbered + " " + first_column);
    visit(second, numbered);
  }
}

template <class Fitting, class Visit>
void visit_fitting(Fitting& fitting, const Visit& visit) {
  const std::string key = "fitting " + fitting.name + " ";
  visit(fitting.count, key + "count");
  visit(fitting.k, key + "k");
  visit(fitting.equivalent_length, key + "equivalent_length");
  visit(fitting.at, key + "at");
}

template <class Pipe, class Visit>
void visit_pipe(Pipe& pipe, const Visit& visit) {
  visit(pipe.length, "length");
  visit_rows(pipe.profile, "profile", "chainage", visit);
  visit(pipe.outside, "outside");
  visit(pipe.wall, "wall");
  visit(pipe.bore, "bore");
  visit(pipe.lining_thickness, "lining thickness");
  visit(pipe.lining_modulus, "lining modulus");
  visit(pipe.modulus, "modulus");
  visit(pipe.poisson, "poisson");
  visit(pipe.restraint_factor, "restraint_factor");
  visit(pipe.wave_speed, "wave_speed");
  visit(pipe.wave_speed_scatter, "wave_speed_scatter");
  visit(pipe.roughness, "roughness");
  visit(pipe.hazen_williams, "hazen_williams");
  visit(pipe.manning, "manning");
  visit(pipe.friction_factor, "friction_factor");
  for (auto& fitting : pipe.fittings) visit_fitting(fitting, visit);
  visit(pipe.rating, "rating");
  int element = 0;
  for (auto& creep : pipe.creep) {
    const std::string key = "creep " + std::to_string(++element) + " ";
    visit(creep.compliance, key + "compliance");
    visit(creep.time, key + "time");
  }
}

template <class Rule, class Visit>
void visit_check_rule(Rule& rule, const std::string& prefix, const Visit& visit) {
  visit(rule.reverse_velocity, prefix + "reverse_velocity");
  if (!prefix.empty()) visit(rule.bore, prefix + "bore");
  visit(rule.delay, prefix + "delay");
}

template <class Pump, class Visit>
void visit_pump(Pump& pump, const Visit& visit) {
  visit_rows(pump.curve.rows, "curve", "flow", visit);
  visit(pump.head_scatter, "head_scatter");
  visit(pump.efficiency, "efficiency");
  visit(pump.speed, "speed");
  visit(pump.inertia, "inertia_" + (pump.inertia_label.empty() ? std::string("mr2") : pump.inertia_label));
  visit(pump.shut_off_torque, "shut_off_torque");
  visit_rows(pump.torque.rows, "torque", "flow", visit);
  visit_check_rule(pump.check_valve, "check_valve ", visit);
  visit(pump.rated_flow, "rated flow");
  visit(pump.rated_head, "rated head");
}

template <class C, class VisitElement>
void visit_liquid_and_site(C& c, const VisitElement& visit_element) {
  visit_element("site", "", [&](const auto& visit) {
    visit(c.site.atmosphere, "atmosphere");
    visit(c.site.gravity, "gravity");
  });
  visit_element("liquid", "", [&](const auto& visit) {
    visit(c.liquid.temperature, "temperature");
    visit(c.liquid.density, "density");
    visit(c.liquid.viscosity, "viscosity");
    visit_rows(c.liquid.viscosity_points, "viscosity_points", "temperature", visit);
    visit(c.liquid.viscosity_scatter, "viscosity_scatter");
    visit(c.liquid.bulk_modulus, "bulk_modulus");
    visit(c.liquid.vapour_pressure, "vapour_pressure");
    visit(c.liquid.free_gas, "free_gas");
  });
}

template <class C, class VisitElement>
void visit_lines_and_valves(C& c, const VisitElement& visit_element) {
  for (auto& basin : c.basins)
    visit_element("basin", basin.name, [&](const auto& visit) {
      visit(basin.level, "level");
      visit(basin.surface_pressure, "surface_pressure");
    });
  for (auto& place : c.places)
    visit_element("place", place.name, [&](const auto& visit) {
      visit(place.elevation, "elevation");
      visit(place.head, "head");
    });
  for (auto& pipe : c.pipes) visit_element("pipe", pipe.name, [&](const auto& visit) { visit_pipe(pipe, visit); });
  for (auto& valve : c.valves)
    visit_element("valve", valve.name, [&](const auto& visit) {
      visit(valve.kv, "kv");
      visit(valve.k, "k");
      visit(valve.bore, "bore");
      visit(valve.area, "area");
      visit(valve.discharge_coefficient, "discharge_coefficient");
      visit(valve.flow, "flow");
      visit(valve.near_seat, "near_seat");
      visit(valve.opening, "opening");
    });
  for (auto& pump : c.pumps) visit_element("pump", pump.name, [&](const auto& visit) { visit_pump(pump, visit); });
  for (auto& check : c.check_valves)
    visit_element("check_valve", check.name, [&](const auto& visit) {
      visit(check.kv, "kv");
      visit(check.k, "k");
      visit(check.bore, "bore");
      visit_check_rule(check.rule, "", visit);
    });
}

template <class C, class VisitElement>
void visit_other_devices(C& c, const VisitElement& visit_element) {
  for (auto& vessel : c.air_vessels)
    visit_element("air_vessel", vessel.name, [&](const auto& visit) {
      visit(vessel.gas_volume, "gas_volume");
      visit(vessel.precharge, "precharge");
      visit(vessel.shell_volume, "shell_volume");
      visit(vessel.area, "area");
      visit(vessel.exponent, "exponent");
      visit(vessel.water_level, "water_level");
      visit(vessel.throttle_in, "throttle_in");
      visit(vessel.throttle_out, "throttle_out");
      visit(vessel.connection_bore, "connection_bore");
    });
  for (auto& tank : c.surge_tanks)
    visit_element("surge_tank", tank.name, [&](const auto& visit) {
      visit(tank.area, "area");
      visit(tank.throttle_bore, "throttle bore");
      visit(tank.throttle_k, "throttle k");
      visit(tank.overflow_level, "overflow_level");
      visit(tank.level, "level");
    });
  for (auto& relief : c.reliefs)
    visit_element("relief", relief.name, [&](const auto& visit) {
      visit(relief.set_pressure, "set_pressure");
      visit(relief.full_open_over, "full_open_over");
      visit(relief.kv, "kv");
      visit(relief.area, "area");
      visit(relief.discharge_coefficient, "discharge_coefficient");
      visit(relief.reset, "reset");
      visit(relief.back_pressure, "back_pressure");
      visit(relief.lag, "lag");
    });
  for (auto& valve : c.air_valves)
    visit_element("air_valve", valve.name, [&](const auto& visit) {
      visit(valve.in_bore, "in_bore");
      visit(valve.out_bore, "out_bore");
      visit(valve.discharge_coefficient, "discharge_coefficient");
    });
  for (auto& draw_off : c.draw_offs)
    visit_element("draw_off", draw_off.name, [&](const auto& visit) { visit(draw_off.flow, "flow"); });
}

template <class C, class VisitElement>
void visit_events_and_friction(C& c, const VisitElement& visit_element) {
  for (auto& event : c.events)
    visit_element("event", event.name.empty() ? event.subject : event.name, [&](const auto& visit) {
      visit(event.at, "at");
      visit(event.delay, "delay");
      visit(event.to, "to");
      visit(event.over, "over");
      visit_rows(event.travel.rows, "travel", "time", visit);
      visit(event.swing, "swing");
      visit(event.period, "period");
    });
  visit_element("friction", "", [&](const auto& visit) {
    if (!c.friction.scatter_per_pipe) visit(c.friction.scatter, "scatter");
    visit(c.friction.laminar_scatter, "laminar_scatter");
    visit(c.friction.fixed_factor, "fixed_factor");
  });
  if (c.friction.scatter_per_pipe)
    for (std::size_t i = 0; i < c.friction.pipe_scatter.size() && i < c.pipes.size(); ++i)
      visit_element("pipe", c.pipes[i].name, [&](const auto& visit) { visit(c.friction.pipe_scatter[i], "scatter"); });
}

}  // namespace detail

/// Calls `visit(quantity, QuantityWords)` for every quantity of `c` (Case or const Case) that a draw may change.
/// The words are those of a quantity without a name of its own; the reader may have given a better one (cv for kv).
template <class C, class Visit>
void for_each_quantity_in_words(C& c, const Visit& visit) {
  const auto visit_element = [&](const std::string& section, const std::string& element, const auto& body) {
    body([&](auto& quantity, const std::string& key) { visit(quantity, QuantityWords{section, element, key}); });
  };
  detail::visit_liquid_and_site(c, visit_element);
  detail::visit_lines_and_valves(c, visit_element);
  detail::visit_other_devices(c, visit_element);
  detail::visit_events_and_friction(c, visit_element);
}

}  // namespace headband::network
