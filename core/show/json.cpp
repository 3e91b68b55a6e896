// SPDX-License-Identifier: MIT
#include "core/show/json_text.hpp"
#include "core/show/reported.hpp"
#include "core/show/show.hpp"

#include "core/base/version.hpp"

#include <nlohmann/json.hpp>

#include <algorithm>
#include <cmath>
#include <string>
#include <utility>

namespace headband::show {

namespace {

using Json = nlohmann::ordered_json;

Json number(double value) { return std::isfinite(value) ? Json(value) : Json(nullptr); }

Json text_or_null(const std::string& text) { return text.empty() ? Json(nullptr) : Json(text); }

Json pair(const std::array<double, 2>& range) { return Json::array({number(range[0]), number(range[1])}); }

/// A probability, or [least, most] where a range from lack of knowledge is in the case.
Json chance(double value, const std::optional<std::array<double, 2>>& range) {
  return range ? pair(*range) : number(value);
}

Json verdict(answers::Verdict verdict) {
  return verdict == answers::Verdict::none ? Json(nullptr) : Json(words_of(verdict));
}

/// Adds a member; a name that is taken already gets " 2", " 3", so that nothing is lost.
void add(Json& object, const std::string& name, Json value) {
  std::string key = name;
  for (int i = 2; object.contains(key); ++i) key = name + ' ' + std::to_string(i);
  object[key] = std::move(value);
}

Json liquid(const answers::LiquidAnswer& l) {
  return {{"density_kg_per_m3", number(l.density)},
          {"kinematic_viscosity_m2_per_s", number(l.kinematic_viscosity)},
          {"dynamic_viscosity_Pa_s", number(l.dynamic_viscosity)},
          {"bulk_modulus_isentropic_Pa", number(l.bulk_modulus_isentropic)},
          {"bulk_modulus_isothermal_Pa", number(l.bulk_modulus_isothermal)},
          {"sound_speed_m_per_s", number(l.sound_speed)},
          {"vapour_pressure_Pa", number(l.vapour_pressure)}};
}

Json values(const answers::Study& study) {
  Json list = Json::array();
  for (const auto& v : study.values) {
    list.push_back({{"path", v.path},
                    {"name", v.name},
                    {"written", v.written},
                    {"value", number(v.value)},
                    {"unit", v.unit},
                    {"spread", v.spread},
                    {"source", v.source},
                    {"grade", v.grade},
                    {"guess", v.guess}});
  }
  return list;
}

Json pipes(const answers::Study& study) {
  Json object = Json::object();
  for (const auto& p : study.pipes) {
    add(object,
        p.name,
        {{"bore_m", number(p.bore)},
         {"roughness_m", number(p.roughness)},
         {"restraint_factor", number(p.restraint_factor)},
         {"flow_m3_per_s", number(p.flow)},
         {"velocity_m_per_s", number(p.velocity)},
         {"reynolds", number(p.reynolds)},
         {"friction_factor", number(p.friction_factor)},
         {"head_loss_m", number(p.head_loss)},
         {"pressure_drop_Pa", number(p.pressure_drop)},
         {"wave_speed_m_per_s", number(p.wave_speed)}});
  }
  return object;
}

Json places(const answers::Study& study) {
  Json object = Json::object();
  for (const auto& p : study.places) {
    Json place = {
        {"elevation_m", number(p.elevation)}, {"head_m", number(p.head)}, {"pressure_Pa", number(p.pressure)}};
    if (p.surged) {
      place["max_head_m"] = number(p.max_head);
      place["max_pressure_Pa"] = number(p.max_pressure);
      place["time_of_max_s"] = number(p.time_of_max);
      place["min_head_m"] = number(p.min_head);
      place["min_pressure_Pa"] = number(p.min_pressure);
      place["time_of_min_s"] = number(p.time_of_min);
    }
    add(object, p.name, std::move(place));
  }
  return object;
}

Json devices(const answers::Study& study) {
  Json object = Json::object();
  for (const auto& d : study.devices) {
    Json device = Json::object();
    for (const auto& [key, value] : d.numbers) add(device, key, number(value));
    add(object, d.name, std::move(device));
  }
  return object;
}

void add_extreme(Json& object, const std::string& side, const answers::Extreme& e) {
  object[side + "pressure_Pa"] = number(e.pressure);
  object[side + "head_m"] = number(e.head);
  object[side + "pipe"] = e.pipe.empty() ? Json(nullptr) : Json(e.pipe);
  object[side + "chainage_m"] = number(e.chainage);
  object[side + "time_s"] = number(e.time);
  object[side + "grid_bound_Pa"] = number(e.grid_bound);
}

Json extremes(const answers::Study& study) {
  Json object = Json::object();
  add_extreme(object, "max_", study.highest.value_or(answers::Extreme{}));
  add_extreme(object, "min_", study.lowest.value_or(answers::Extreme{}));
  return object;
}

Json cavities(const answers::Study& study) {
  Json list = Json::array();
  for (const auto& c : reported_cavities(study)) {
    list.push_back({{"pipe", c.pipe},
                    {"chainage_m", number(c.chainage)},
                    {"opens_s", number(c.opens)},
                    {"closes_s", number(c.closes)},
                    {"max_volume_m3", number(c.max_volume)}});
  }
  return list;
}

Json events(const answers::Study& study) {
  Json list = Json::array();
  for (const auto& e : study.events) {
    list.push_back({{"time_s", number(e.time)}, {"subject", e.subject}, {"kind", e.kind}, {"what", e.what}});
  }
  return list;
}

Json grid(const answers::GridAnswer& g) {
  return {{"time_step_s", number(g.time_step)},
          {"worst_wave_speed_change", number(g.worst_wave_speed_change)},
          {"worst_pipe", g.worst_pipe.empty() ? Json(nullptr) : Json(g.worst_pipe)},
          {"rigid_pipes", g.rigid_pipes}};
}

Json limits(const answers::Study& study) {
  Json list = Json::array();
  for (const auto& l : study.limits) {
    list.push_back({{"name", l.name},
                    {"kind", l.kind},
                    {"unit", l.unit},
                    {"limit", number(l.limit)},
                    {"value", number(l.value)},
                    {"margin", number(l.margin)},
                    {"probability", chance(l.probability, l.probability_range)},
                    {"probability_lower", chance(l.probability_lower, l.probability_lower_range)},
                    {"probability_upper", chance(l.probability_upper, l.probability_upper_range)},
                    {"worst_corner", l.worst_corner.empty() ? Json(nullptr) : Json(l.worst_corner)},
                    {"verdict", verdict(l.verdict)}});
  }
  return list;
}

Json quantiles(const answers::BandAnswer& a) {
  Json object = Json::object();
  for (const auto& q : a.quantiles) {
    object[shortest_decimal(q.probability)] = Json::array({number(q.value), number(q.lower), number(q.upper)});
  }
  return object;
}

Json band(const answers::BandAnswer& a) {
  Json object = {{"unit", a.unit},
                 {"central", number(a.central)},
                 {"mean", number(a.mean)},
                 {"sd", number(a.standard_deviation)},
                 {"quantiles", quantiles(a)}};
  if (a.range) object["range"] = pair(*a.range);  // not random: [least, most] of the median
  object["modes"] = a.modes;
  object["draws"] = a.draws;
  object["failed"] = a.failed;
  object["budget"] = {{"inputs", number(a.budget_inputs)},
                      {"friction law", number(a.budget_friction_law)},
                      {"grid", number(a.budget_grid)},
                      {"sampling", number(a.budget_sampling)}};
  object["budget_draws"] = a.budget_draws;
  if (!a.sensitivity.empty()) {
    Json shares = Json::object();
    for (const auto& s : a.sensitivity) add(shares, s.input, {{"first", number(s.first)}, {"total", number(s.total)}});
    object["sensitivity"] = std::move(shares);
  }
  return object;
}

Json bands(const answers::Bands& b) {
  Json object = Json::object();
  for (const auto& a : b.answers) add(object, a.name, band(a));
  return object;
}

}  // namespace

std::string json(const answers::Study& study) {
  Json object = {{"headband", study.provenance.version},
                 {"verb", study.verb},
                 {"case", text_or_null(file_name_of(study.provenance.case_file))},
                 {"verdict", verdict(study.verdict)},
                 {"warnings", study.warnings},
                 {"guesses", study.guesses}};
  if (study.liquid) object["liquid"] = liquid(*study.liquid);
  if (study.values_shown) object["values"] = values(study);
  if (!study.pipes.empty()) object["pipes"] = pipes(study);
  if (!study.places.empty()) object["places"] = places(study);
  if (!study.devices.empty()) object["devices"] = devices(study);
  if (study.highest || study.lowest) object["extremes"] = extremes(study);
  if (study.transient) {
    object["cavities"] = cavities(study);
    object["events"] = events(study);
  }
  if (study.audit) {
    object["audit"] = {{"volume_residual_m3", number(study.audit->volume_residual)},
                       {"volume_residual_relative", number(study.audit->volume_residual_relative)}};
  }
  if (study.grid) object["grid"] = grid(*study.grid);
  if (study.limits_shown) object["limits"] = limits(study);
  if (study.bands) object["answers"] = bands(*study.bands);
  return json_text(object);
}

std::string problems_json(const base::Problems& problems) {
  Json list = Json::array();
  for (const auto& p : problems) {
    const auto position = [](int at) { return at > 0 ? Json(at) : Json(nullptr); };
    list.push_back({{"line", position(p.place.line)},
                    {"column", position(p.place.column)},
                    {"path", p.path},
                    {"what", p.what},
                    {"value", p.value},
                    {"bound", p.bound},
                    {"hint", p.hint}});
  }
  return json_text({{"headband", base::version()}, {"problems", std::move(list)}});
}

}  // namespace headband::show
