// SPDX-License-Identifier: MIT
//
// Liquid, events, limits, answers, places shown; and what single verbs need.

#include "core/network/detail/each_end.hpp"
#include "core/network/detail/problem_list.hpp"
#include "core/network/nearest_word.hpp"
#include "core/network/plan.hpp"

#include <algorithm>
#include <set>

namespace headband::network {
namespace detail {
namespace {

void need(const Quantity& q,
          SourcePlace place,
          const std::string& path,
          const char* what,
          const char* form,
          ProblemList& problems) {
  if (!q.given()) problems.missing(place, path, std::string(what) + " is missing", form, "give it");
}

bool is_water(const Liquid& liquid) { return liquid.name == "water" || liquid.name == "seawater"; }

void check_temperature(const Liquid& liquid, ProblemList& problems) {
  const bool all_given = liquid.density.given() && liquid.viscosity.given() && liquid.bulk_modulus.given() &&
                         liquid.vapour_pressure.given();
  const bool needed = (is_water(liquid) && !all_given) || !liquid.viscosity_points.empty();
  if (!needed) return;
  need(
      liquid.temperature, liquid.place, "liquid/temperature", "the temperature", "temperature = \"15 degC\"", problems);
  if (!liquid.temperature.given() || !is_water(liquid)) return;
  const double highest = liquid.name == "water" ? 373.15 : 313.15;  // ranges of the property formulas, liquid/water.hpp
  if (liquid.temperature.value < 273.15 || liquid.temperature.value > highest)
    problems.add(liquid.temperature,
                 liquid.place,
                 "liquid/temperature",
                 "the temperature is outside the range of the formulas of " + liquid.name,
                 fmt::format("0 degC to {:.0f} degC", highest - 273.15),
                 "give another liquid with its own numbers");
}

/// Every word a spot may use: places and pipes.
std::vector<std::string> spot_names(const Case& c) {
  std::set<std::string> names;
  for_each_end(c, [&](const End& end) { names.insert(end.place_name); });
  for (const auto& basin : c.basins) names.insert(basin.name);
  for (const auto& pipe : c.pipes) names.insert(pipe.name);
  names.erase("air");
  names.erase("");
  return {names.begin(), names.end()};
}

void check_spot(const Case& c,
                const Spot& spot,
                const std::vector<std::string>& names,
                SourcePlace element,
                const std::string& path,
                ProblemList& problems) {
  const SourcePlace place = spot.place.line > 0 ? spot.place : element;
  const auto pipe = std::find_if(c.pipes.begin(), c.pipes.end(), [&](const Pipe& p) { return p.name == spot.element; });
  if (std::find(names.begin(), names.end(), spot.element) == names.end() || (spot.on_pipe && pipe == c.pipes.end())) {
    const std::string near = nearest_word(spot.element, names);
    problems.add(place,
                 path,
                 "no place or pipe is called '" + spot.element + "'",
                 spot.written,
                 near.empty() ? "" : "the nearest name is '" + near + "'",
                 "check the spelling");
    return;
  }
  if (!spot.chainage) return;
  const double length = pipe == c.pipes.end()   ? 0.0
                        : pipe->length.given()  ? pipe->length.value
                        : pipe->profile.empty() ? 0.0
                                                : pipe->profile.back().first.value;
  if (*spot.chainage < 0.0 || *spot.chainage > length)
    problems.add(place,
                 path,
                 "the chainage lies outside the pipe",
                 spot.written,
                 fmt::format("0 m to {:.6g} m", length),
                 "count from the `from` end of the pipe");
}

void check_subject(const Case& c,
                   const AnswerRequest& request,
                   const std::vector<std::string>& names,
                   const std::string& path,
                   ProblemList& problems) {
  for (const auto& spot : request.where) check_spot(c, spot, names, request.place, path, problems);
  const bool whole_pipe = request.where.size() == 1 && request.where[0].on_pipe && !request.where[0].chainage;
  switch (request.kind) {
    case AnswerKind::pressure_drop:
      if (request.where.size() != 2 && !whole_pipe)
        problems.add(request.place,
                     path,
                     "a pressure drop lies between two places or along a pipe",
                     "",
                     "pressure_drop = [\"A\", \"B\"]",
                     "name both");
      break;
    case AnswerKind::flow:
      if (request.where.size() != 1)
        problems.add(request.place, path, "a flow is asked for one pipe", "", "flow = \"PIPE\"", "name it");
      break;
    case AnswerKind::head:
      if (request.where.size() != 1 || whole_pipe)
        problems.add(request.place,
                     path,
                     "a head is asked for one place",
                     "",
                     "head = \"PLACE\" or \"PIPE @ 900 m\"",
                     "name it");
      break;
    case AnswerKind::highest_pressure:
    case AnswerKind::lowest_pressure:
    case AnswerKind::velocity:
      break;
  }
}

template <class List>
const typename List::value_type* find_named(const List& list, const std::string& name) {
  const auto found = std::find_if(list.begin(), list.end(), [&](const auto& e) { return e.name == name; });
  return found == list.end() ? nullptr : &*found;
}

template <class List>
std::string nearest_in(const List& list, const std::string& name) {
  std::vector<std::string> names;
  for (const auto& e : list) names.push_back(e.name);
  const std::string near = nearest_word(name, names);
  return near.empty() ? "" : "the nearest name is '" + near + "'";
}

template <class List>
void subject_must_exist(
    const List& list, const char* kind, const Event& event, const std::string& path, ProblemList& problems) {
  if (find_named(list, event.subject) == nullptr)
    problems.add(event.place,
                 path,
                 std::string("no ") + kind + " is called '" + event.subject + "'",
                 event.subject,
                 nearest_in(list, event.subject),
                 "check the spelling");
}

void check_event_subject(const Case& c, const Event& event, const std::string& path, ProblemList& problems) {
  switch (event.kind) {
    case EventKind::move_valve:
    case EventKind::swing_valve:
      subject_must_exist(c.valves, "valve", event, path, problems);
      break;
    case EventKind::trip_pump:
    case EventKind::start_pump: {
      subject_must_exist(c.pumps, "pump", event, path, problems);
      const Pump* pump = find_named(c.pumps, event.subject);
      if (pump != nullptr && event.tripping > pump->count)
        problems.add(event.place,
                     path,
                     "more pumps trip than the set holds",
                     fmt::format("{}", event.tripping),
                     fmt::format("at most {}", pump->count),
                     "");
      break;
    }
    case EventKind::move_draw_off:
      subject_must_exist(c.draw_offs, "draw-off", event, path, problems);
      break;
    case EventKind::move_basin:
      subject_must_exist(c.basins, "basin", event, path, problems);
      break;
  }
}

void check_movement(const Event& event, const std::string& path, ProblemList& problems) {
  if (!event.at.given() && !event.when)
    problems.missing(event.place, path + "/at", "the event has no time", "at = \"0 s\"", "give at or when");
  const bool moves = event.kind == EventKind::move_valve || event.kind == EventKind::move_draw_off ||
                     event.kind == EventKind::move_basin;
  if (!moves || event.travel.given()) return;
  if (!event.to.given())
    problems.missing(event.place, path + "/to", "the movement has no end", "to = \"0 %\"", "say where it ends");
  if (!event.instant && !event.over.given())
    problems.missing(
        event.place, path + "/over", "the movement has no duration", "over = \"10 s\" or \"instant\"", "give it");
  if (!event.instant && event.over.given() && !(event.over.value > 0.0))
    problems.add(event.over,
                 event.place,
                 path + "/over",
                 "the duration must be over zero",
                 "> 0 s",
                 "write over = \"instant\" for a sudden movement");
  if (event.kind == EventKind::move_valve && event.to.given() && !(event.to.value >= 0.0 && event.to.value <= 1.0))
    problems.add(event.to, event.place, path + "/to", "the opening is out of its range", "0 % to 100 %", "");
}

void check_together(const Case& c, ProblemList& problems) {
  std::vector<std::string> names;
  for (const auto& unknown : c.unknowns) names.push_back(unknown.name);
  for (const auto& pair : c.together) {
    const std::string path = "together/" + pair.first + ", " + pair.second;
    for (const auto& name : {pair.first, pair.second}) {
      if (std::find(names.begin(), names.end(), name) != names.end()) continue;
      const std::string near = nearest_word(name, names);
      problems.add(pair.place,
                   path,
                   "no uncertain value is called '" + name + "'",
                   name,
                   near.empty() ? "only values with a spread can be correlated" : "the nearest name is '" + near + "'",
                   "write the element's name and the key");
    }
    if (!(pair.rank_correlation >= -1.0 && pair.rank_correlation <= 1.0))
      problems.add(pair.place,
                   path,
                   "a rank correlation lies between -1 and 1",
                   fmt::format("{:g}", pair.rank_correlation),
                   "-1 to 1",
                   "");
  }
}

}  // namespace

void check_liquid(const Case& c, ProblemList& problems) {
  const Liquid& liquid = c.liquid;
  check_temperature(liquid, problems);
  if (liquid.viscosity_points.size() == 1)
    problems.add(liquid.viscosity_points.front().second,
                 liquid.place,
                 "liquid/viscosity_points",
                 "the viscosity law needs two points",
                 "two or more",
                 "add one, or give viscosity");
  if (is_water(liquid)) return;
  need(liquid.density, liquid.place, "liquid/density", "the density", "density = \"845 kg/m3\"", problems);
  if (liquid.viscosity_points.size() < 2)
    need(liquid.viscosity,
         liquid.place,
         "liquid/viscosity",
         "the viscosity",
         "viscosity = \"3.6 cSt\" or viscosity_points",
         problems);
}

void check_events(const Case& c, ProblemList& problems) {
  for (const auto& event : c.events) {
    const std::string path = "event/" + (event.name.empty() ? event.subject : event.name);
    check_event_subject(c, event, path, problems);
    check_movement(event, path, problems);
  }
}

void check_question(const Case& c, ProblemList& problems) {
  const auto names = spot_names(c);
  for (const auto& spot : c.show.places) check_spot(c, spot, names, spot.place, "show/places", problems);
  for (const auto& answer : c.band.answers) check_subject(c, answer, names, "band/answers", problems);
  for (const auto& limit : c.limits) {
    if (!limit.rule.empty()) continue;
    const std::string path = "limit/" + limit.name;
    AnswerRequest subject = limit.subject;
    if (subject.place.line == 0) subject.place = limit.place;
    check_subject(c, subject, names, path, problems);
    if (!limit.bound.given())
      problems.missing(limit.place, path, "the limit has no bound", "a value with its unit", "give it");
  }
  check_together(c, problems);
}

}  // namespace detail

namespace {

void need_for_surge(const Case& c, detail::ProblemList& problems) {
  if (!c.surge.duration.given())
    problems.missing(c.surge.place,
                     "surge/duration",
                     "the duration of the run is missing",
                     "[surge] duration = \"60 s\"",
                     "give it");
  const Plan plan = make_plan(c);
  for (std::size_t i = 0; i < c.pipes.size(); ++i)
    if (!plan.pipes[i].wave_speed_known)
      problems.missing(c.pipes[i].place,
                       "pipe/" + c.pipes[i].name + "/wave_speed",
                       "the wave speed of the pipe cannot be found",
                       "wave_speed = \"1150 m/s\", or wall and material (or modulus and poisson), and the liquid's "
                       "bulk_modulus",
                       "give one of the two");
  const bool own = c.liquid.name != "water" && c.liquid.name != "seawater";
  if (own && c.surge.cavities != Cavities::off && !c.liquid.vapour_pressure.given())
    problems.missing(c.liquid.place,
                     "liquid/vapour_pressure",
                     "the vapour pressure is missing",
                     "vapour_pressure = \"0.3 bar abs\"",
                     "give it, or [surge] cavities = \"off\"");
  if (own && !c.liquid.bulk_modulus.given() && (c.liquid.free_gas.value > 0.0 || !c.liquid.free_gas.exact()))
    problems.missing(c.liquid.place,
                     "liquid/bulk_modulus",
                     "free gas needs the liquid's bulk modulus",
                     "bulk_modulus = \"1.43 GPa\"",
                     "give it");
  for (const auto& event : c.events) {
    if (event.kind != EventKind::trip_pump && event.kind != EventKind::start_pump) continue;
    for (const auto& pump : c.pumps) {
      if (pump.name != event.subject) continue;
      const auto need_number = [&](const Quantity& q, const char* key, const char* form) {
        if (!q.given())
          problems.missing(pump.place,
                           "pump/" + pump.name + "/" + key,
                           "a pump that trips or starts needs its " + std::string(key),
                           form,
                           "give it");
      };
      need_number(pump.speed, "speed", "speed = \"1480 rpm\"");
      need_number(pump.inertia, "inertia", "inertia_mr2, inertia_gd2 or inertia_wr2");
      need_number(pump.efficiency, "efficiency", "efficiency = \"82 %\"");
      if (starts_at_rest(c, pump) && !(pump.rated_flow.given() && pump.rated_head.given()))
        problems.missing(pump.place,
                         "pump/" + pump.name + "/rated",
                         "a pump that stands still at the start has no operating point to take as its rated one",
                         "rated = { flow = \"175 L/s\", head = \"60 m\" }",
                         "give it");
      const bool by_table = pump.characteristic == Characteristic::table && !pump.curve.given();
      if (!pump.torque.given() && !by_table)
        need_number(pump.shut_off_torque, "shut_off_torque", "shut_off_torque = \"45 %\"");
    }
  }
}

}  // namespace

base::Problems validate_for(const Case& c, const std::string& verb) {
  detail::ProblemList problems;
  if (verb == "surge" || verb == "band --surge") need_for_surge(c, problems);
  if ((verb == "band" || verb == "band --surge") && c.band.answers.empty() && c.limits.empty()) {
    const bool rated = std::any_of(c.pipes.begin(), c.pipes.end(), [](const Pipe& p) { return p.rating.given(); });
    if (!rated)
      problems.missing(c.band.place,
                       "band/answers",
                       "nothing is asked: no answers and no limits",
                       "[band] answers = [{ pressure_drop = [\"A\", \"B\"] }]",
                       "say what the band is of");
  }
  return problems.take();
}

}  // namespace headband::network
