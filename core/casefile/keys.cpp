// SPDX-License-Identifier: MIT
#include "core/casefile/keys.hpp"

#include <array>
#include <stdexcept>
#include <string>

namespace headband::casefile {
namespace {

using base::Dimension;

constexpr KeyRule any(std::string_view section,
                      std::string_view key,
                      Dimension dimension,
                      std::string_view example = {}) {
  return {.section = section, .key = key, .dimension = dimension, .example = example};
}
constexpr KeyRule positive(std::string_view section,
                           std::string_view key,
                           Dimension dimension,
                           std::string_view example = {}) {
  return {.section = section, .key = key, .dimension = dimension, .low = 0.0, .low_open = true, .example = example};
}
constexpr KeyRule not_negative(std::string_view section,
                               std::string_view key,
                               Dimension dimension,
                               std::string_view example = {}) {
  return {.section = section, .key = key, .dimension = dimension, .low = 0.0, .example = example};
}
constexpr KeyRule between(std::string_view section,
                          std::string_view key,
                          Dimension dimension,
                          double low,
                          double high,
                          std::string_view example = {}) {
  return {.section = section, .key = key, .dimension = dimension, .low = low, .high = high, .example = example};
}
constexpr KeyRule scatter(std::string_view section, std::string_view key) {
  return {.section = section,
          .key = key,
          .dimension = Dimension::factor,
          .low = 0.0,
          .low_open = true,
          .form = Form::scatter};
}
constexpr KeyRule coefficient(std::string_view section, std::string_view key, Form form) {
  return {.section = section,
          .key = key,
          .dimension = Dimension::kv,
          .low = 0.0,
          .low_open = true,
          .form = form,
          .example = form == Form::cv ? "9000 gpm" : "12000 m3/h"};
}
// A value that is chosen, not drawn.
constexpr KeyRule chosen(KeyRule rule, std::string_view instead) {
  rule.spread = SpreadUse::refused;
  rule.instead = instead;
  return rule;
}

constexpr std::string_view choice = "this is a choice of the calculation: write it without a spread";
constexpr std::string_view bound_is_chosen = "a limit is not sampled: write the bound alone";
constexpr std::string_view not_here = "write the value alone";

constexpr std::array rules{
    // site, liquid
    positive("site", "atmosphere", Dimension::pressure, "101.325 kPa abs"),
    positive("site", "gravity", Dimension::acceleration),
    between("liquid", "temperature", Dimension::temperature, 200.0, 700.0),
    positive("liquid", "density", Dimension::density),
    KeyRule{.section = "liquid",
            .key = "viscosity",
            .dimension = Dimension::kinematic_viscosity,
            .low = 0.0,
            .low_open = true,
            .form = Form::viscosity,
            .example = "3.6 cSt"},
    chosen(positive("liquid", "viscosity_points temperature", Dimension::temperature, "25 degC"),
           "the points are exact: state the doubt as viscosity_scatter"),
    chosen(positive("liquid", "viscosity_points viscosity", Dimension::kinematic_viscosity, "180 cSt"),
           "the points are exact: state the doubt as viscosity_scatter"),
    scatter("liquid", "viscosity_scatter"),
    positive("liquid", "bulk_modulus", Dimension::modulus, "2.14 GPa"),
    any("liquid", "vapour_pressure", Dimension::pressure, "1.7 kPa abs"),
    between("liquid", "free_gas", Dimension::share, 0.0, 0.5, "0.01 %"),
    // basins, places
    any("basin", "level", Dimension::length, "100 m"),
    chosen(any("basin", "level_table time", Dimension::time), not_here),
    chosen(any("basin", "level_table level", Dimension::length, "100 m"),
           "the table is exact: state the doubt at the level"),
    any("basin", "surface_pressure", Dimension::pressure, "0 bar g"),
    any("place", "elevation", Dimension::length, "40 m"),
    any("place", "head", Dimension::length, "60 m"),
    // pipes
    positive("pipe", "length", Dimension::length, "2400 m"),
    chosen(any("pipe", "profile chainage", Dimension::length, "900 m"),
           "state the doubt at the elevation or the length"),
    any("pipe", "profile elevation", Dimension::length, "52 m"),
    positive("pipe", "outside", Dimension::length, "508 mm"),
    positive("pipe", "wall", Dimension::length, "8 mm"),
    not_negative("pipe", "lining thickness", Dimension::length, "6 mm"),
    positive("pipe", "lining modulus", Dimension::modulus, "25 GPa"),
    positive("pipe", "bore", Dimension::length, "492 mm"),
    positive("pipe", "modulus", Dimension::modulus),
    between("pipe", "poisson", Dimension::number, 0.0, 0.5),
    positive("pipe", "restraint_factor", Dimension::number, "1.006"),
    chosen(between("pipe", "wave_speed_change", Dimension::share, 0.0, 1.0, "5 %"), choice),
    positive("pipe", "wave_speed", Dimension::velocity),
    scatter("pipe", "wave_speed_scatter"),
    not_negative("pipe", "roughness", Dimension::length, "0.1 mm"),
    positive("pipe", "hazen_williams", Dimension::number, "130"),
    positive("pipe", "manning", Dimension::number, "0.012"),
    positive("pipe", "friction_factor", Dimension::number, "0.013"),
    scatter("pipe", "friction_scatter"),
    not_negative("pipe", "fitting count", Dimension::number, "4"),
    not_negative("pipe", "fitting k", Dimension::number, "0.3"),
    not_negative("pipe", "fitting equivalent_length", Dimension::length, "3 m"),
    chosen(not_negative("pipe", "fitting at", Dimension::length, "320 m"), "where a fitting stands is exact"),
    any("pipe", "rating", Dimension::pressure, "16 bar g"),
    not_negative("pipe", "creep compliance", Dimension::compliance),
    positive("pipe", "creep time", Dimension::time, "0.05 s"),
    // valves
    coefficient("valve", "kv", Form::kv),
    coefficient("valve", "cv", Form::cv),
    positive("valve", "k", Dimension::number, "5.0"),
    positive("valve", "bore", Dimension::length),
    positive("valve", "area", Dimension::area, "0.05 m2"),
    positive("valve", "discharge_coefficient", Dimension::number, "0.6"),
    any("valve", "flow", Dimension::flow),
    scatter("valve", "near_seat"),
    chosen(between("valve", "law travel", Dimension::share, 0.0, 1.0, "50 %"),
           "the points are exact: state the doubt as near_seat"),
    chosen(between("valve", "law share", Dimension::share, 0.0, 1.0, "0.28"),
           "the points are exact: state the doubt as near_seat"),
    between("valve", "opening", Dimension::share, 0.0, 1.0, "100 %"),
    // pumps, check valves
    chosen(any("pump", "curve flow", Dimension::flow, "175 L/s"),
           "the points are exact: state the doubt as head_scatter"),
    chosen(any("pump", "curve head", Dimension::length, "60 m"),
           "the points are exact: state the doubt as head_scatter"),
    scatter("pump", "head_scatter"),
    between("pump", "efficiency", Dimension::share, 0.0, 1.0, "82 %"),
    positive("pump", "speed", Dimension::rotational_speed),
    positive("pump", "inertia_mr2", Dimension::inertia),
    positive("pump", "inertia_gd2", Dimension::inertia, "18 kg m2"),
    positive("pump", "inertia_wr2", Dimension::inertia, "107 lb ft2"),
    not_negative("pump", "shut_off_torque", Dimension::share, "45 %"),
    chosen(any("pump", "torque flow", Dimension::flow, "175 L/s"),
           "the points are exact: state the doubt at shut_off_torque"),
    chosen(any("pump", "torque share", Dimension::share, "100 %"),
           "the points are exact: state the doubt at shut_off_torque"),
    positive("pump", "check_valve reverse_velocity", Dimension::velocity, "0.3 m/s"),
    positive("pump", "check_valve bore", Dimension::length),
    not_negative("pump", "check_valve delay", Dimension::time, "0.2 s"),
    positive("pump", "rated flow", Dimension::flow, "175 L/s"),
    positive("pump", "rated head", Dimension::length, "60 m"),
    coefficient("check_valve", "kv", Form::kv),
    coefficient("check_valve", "cv", Form::cv),
    not_negative("check_valve", "k", Dimension::number, "1.5"),
    positive("check_valve", "bore", Dimension::length),
    positive("check_valve", "reverse_velocity", Dimension::velocity, "0.3 m/s"),
    not_negative("check_valve", "delay", Dimension::time, "0.2 s"),
    // protection
    positive("air_vessel", "gas_volume", Dimension::volume),
    any("air_vessel", "precharge", Dimension::pressure, "3 bar g"),
    positive("air_vessel", "shell_volume", Dimension::volume, "17 m3"),
    positive("air_vessel", "area", Dimension::area),
    between("air_vessel", "exponent", Dimension::number, 1.0, 1.67, "1.0 .. 1.4, not random"),
    any("air_vessel", "water_level", Dimension::length, "1.0 m"),
    not_negative("air_vessel", "throttle_in", Dimension::number, "2.5"),
    not_negative("air_vessel", "throttle_out", Dimension::number, "1.0"),
    positive("air_vessel", "connection_bore", Dimension::length),
    positive("surge_tank", "area", Dimension::area, "12 m2"),
    positive("surge_tank", "throttle bore", Dimension::length, "400 mm"),
    not_negative("surge_tank", "throttle k", Dimension::number, "1.5"),
    any("surge_tank", "overflow_level", Dimension::length, "92 m"),
    any("surge_tank", "level", Dimension::length, "60 m"),
    any("relief", "set_pressure", Dimension::pressure, "200 psi g"),
    not_negative("relief", "full_open_over", Dimension::share, "10 %"),
    coefficient("relief", "kv", Form::kv),
    coefficient("relief", "cv", Form::cv),
    positive("relief", "area", Dimension::area, "0.01 m2"),
    positive("relief", "discharge_coefficient", Dimension::number, "0.6"),
    between("relief", "reset", Dimension::share, -1.0, 0.0, "-5 %"),
    any("relief", "back_pressure", Dimension::pressure, "5 psi g"),
    not_negative("relief", "lag", Dimension::time, "0.05 s"),
    positive("air_valve", "in_bore", Dimension::length, "80 mm"),
    positive("air_valve", "out_bore", Dimension::length, "5 mm"),
    positive("air_valve", "discharge_coefficient", Dimension::number, "0.6"),
    any("draw_off", "flow", Dimension::flow, "1500 gpm"),
    // events
    not_negative("event", "at", Dimension::time, "0 s"),
    between("event", "to opening", Dimension::share, 0.0, 1.0, "0 %"),
    any("event", "to flow", Dimension::flow, "0 L/s"),
    any("event", "to level", Dimension::length, "98 m"),
    positive("event", "over", Dimension::time),
    chosen(not_negative("event", "travel time", Dimension::time, "2.5 s"),
           "the points are exact: state the doubt at `over`, with shares of it in `travel`"),
    chosen(not_negative("event", "travel share", Dimension::share, "25 %"),
           "the points are exact: state the doubt at `over`"),
    chosen(between("event", "travel opening", Dimension::share, 0.0, 1.0, "20 %"),
           "the points are exact: state the doubt at `over`"),
    between("event", "swing", Dimension::share, 0.0, 1.0, "5 %"),
    positive("event", "period", Dimension::time, "6.22 s"),
    not_negative("event", "delay", Dimension::time, "0.5 s"),
    chosen(any("event", "when pressure", Dimension::pressure), not_here),
    chosen(any("event", "when head", Dimension::length, "60 m"), not_here),
    chosen(any("event", "when level", Dimension::length, "60 m"), not_here),
    chosen(any("event", "when flow", Dimension::flow), not_here),
    chosen(not_negative("event", "when lasting", Dimension::time, "2 s"), not_here),
    // friction
    scatter("friction", "scatter"),
    scatter("friction", "laminar_scatter"),
    positive("friction", "fixed_factor", Dimension::number, "0.013"),
    // the question
    chosen(positive("surge", "duration", Dimension::time, "60 s"), choice),
    chosen(positive("surge", "time_step", Dimension::time, "0.01 s"), choice),
    chosen(between("band", "coverage", Dimension::share, 0.5, 0.9999, "95 %"), choice),
    chosen(between("band", "confidence", Dimension::share, 0.5, 0.9999, "95 %"), choice),
    chosen(between("limit", "at_most", Dimension::share, 0.0, 1.0, "5 %"), bound_is_chosen),
    chosen(between("limit", "confidence", Dimension::share, 0.5, 0.9999, "95 %"), bound_is_chosen),
    chosen(any("limit", "highest_pressure", Dimension::pressure), bound_is_chosen),
    chosen(any("limit", "lowest_pressure", Dimension::pressure, "0 bar g"), bound_is_chosen),
    chosen(positive("limit", "velocity", Dimension::velocity, "2.5 m/s"), bound_is_chosen),
    chosen(any("limit", "bound pressure_drop", Dimension::pressure_difference), bound_is_chosen),
    chosen(any("limit", "bound flow", Dimension::flow, "300 L/s"), bound_is_chosen),
    chosen(any("limit", "bound head", Dimension::length, "60 m"), bound_is_chosen),
    chosen(any("spot", "chainage", Dimension::length, "900 m"), not_here),
    // other verbs
    chosen(positive("fastest", "between", Dimension::time, "300 s"), choice),
    chosen(positive("fastest", "to_within", Dimension::time, "1 s"), choice),
    KeyRule{.section = "ageing", .key = "growth", .dimension = Dimension::growth_rate, .low = 0.0},
    chosen(positive("ageing", "energy price", Dimension::energy_price), not_here),
    chosen(between("ageing", "energy hours", Dimension::hours_per_year, 0.0, 1.0), not_here),
    chosen(between("ageing", "energy efficiency", Dimension::share, 0.0, 1.0, "74 %"), not_here),
    chosen(between("ageing", "energy discount", Dimension::share, -1.0, 1.0, "4 %"), not_here),
    chosen(positive("ageing", "keep flow", Dimension::flow, "300 L/s"), not_here),
    chosen(positive("ageing", "keep head_available", Dimension::length, "36 m"), not_here),
    chosen(not_negative("ageing.option", "cost", Dimension::price_per_length), not_here),
    positive("ageing.option", "bore", Dimension::length, "586 mm"),
    not_negative("ageing.option", "roughness", Dimension::length, "0.1 mm"),
    KeyRule{.section = "ageing.option",
            .key = "growth",
            .dimension = Dimension::growth_rate,
            .low = 0.0,
            .form = Form::rate_or_relative},
    any("test", "flow", Dimension::flow, "262 L/s"),
    any("test", "head_loss", Dimension::length, "18.9 m"),
    any("test", "pressure", Dimension::pressure, "6.41 bar g"),
    any("match", "clock_offset", Dimension::time, "0 s .. 5 s, not random"),
    not_negative("match", "gauge_lag", Dimension::time, "0.15 s"),
    chosen(positive("match", "gauge_noise", Dimension::pressure_difference, "0.02 bar"), not_here),
};

}  // namespace

std::span<const KeyRule> key_rules() { return rules; }

const KeyRule& key_rule(std::string_view section, std::string_view key) {
  for (const KeyRule& rule : rules)
    if (rule.section == section && rule.key == key) return rule;
  throw std::logic_error("no rule for the key " + std::string(section) + "/" + std::string(key));
}

}  // namespace headband::casefile
