// SPDX-License-Identifier: MIT

#include "core/network/plan.hpp"

#include <algorithm>
#include <cmath>
#include <set>
#include <tuple>
#include <unordered_map>

namespace headband::network {
namespace {

template <class List>
int index_of_name(const List& list, const std::string& name) {
  for (std::size_t i = 0; i < list.size(); ++i)
    if (list[i].name == name) return static_cast<int>(i);
  return -1;
}

/// An element that names places, where it stands in the file.
struct Mention {
  SourcePlace place;
  std::size_t order;
  std::vector<std::string> names;
  friend bool operator<(const Mention& a, const Mention& b) {
    return std::tie(a.place, a.order) < std::tie(b.place, b.order);
  }
};

/// Every place name in the order a reader meets it in the file.
std::vector<Mention> mentions_in_file_order(const Case& c) {
  std::vector<Mention> list;
  const auto add = [&](SourcePlace place, std::vector<std::string> names) {
    list.push_back({place, list.size(), std::move(names)});
  };
  for (const auto& e : c.basins) add(e.place, {e.name});
  for (const auto& e : c.pipes) add(e.place, {e.from, e.to});
  for (const auto& e : c.places) add(e.place, {e.name});
  for (const auto& e : c.valves) add(e.place, {e.from, e.to});
  for (const auto& e : c.pumps) add(e.place, {e.from, e.to});
  for (const auto& e : c.check_valves) add(e.place, {e.from, e.to});
  for (const auto& e : c.draw_offs) add(e.place, {e.at});
  for (const auto& e : c.air_vessels) add(e.place, {e.at});
  for (const auto& e : c.surge_tanks) add(e.place, {e.at});
  for (const auto& e : c.reliefs) add(e.place, {e.at, e.to.empty() ? std::string("air") : e.to});
  for (const auto& e : c.air_valves) add(e.place, {e.at});
  std::sort(list.begin(), list.end());
  return list;
}

/// Builds the parts of a plan one after the other; names are looked up through an index.
class PlanMaker {
 public:
  explicit PlanMaker(const Case& c) : case_(c) {}

  Plan make() {
    add_places();
    add_pipes();
    add_devices();
    add_elevations();
    add_events();
    add_probes();
    add_answers_and_limits();
    return std::move(plan_);
  }

 private:
  void add_places() {
    for (const auto& mention : mentions_in_file_order(case_))
      for (const auto& name : mention.names) {
        if (name == "air" || name.empty() || place_index_.contains(name)) continue;
        PlacePlan place;
        place.name = name;
        place.basin = index_of_name(case_.basins, name);
        const int entry = index_of_name(case_.places, name);
        place.head_given = entry >= 0 && case_.places[static_cast<std::size_t>(entry)].head.given();
        place_index_.emplace(name, static_cast<int>(plan_.places.size()));
        plan_.places.push_back(std::move(place));
      }
  }

  [[nodiscard]] PlaceId place_id(const std::string& name) const {
    const auto found = place_index_.find(name);
    return found == place_index_.end() ? PlaceId{} : PlaceId{found->second};
  }

  void add_pipes() {
    for (const auto& pipe : case_.pipes) {
      PipePlan entry;
      entry.name = pipe.name;
      entry.from = place_id(pipe.from);
      entry.to = place_id(pipe.to);
      entry.loss = loss_kind(case_, pipe);
      entry.profile_points = std::max(2, static_cast<int>(pipe.profile.size()));
      entry.wave_speed_known = can_have_wave_speed(pipe);
      for (const auto& fitting : pipe.fittings) entry.fitting_has_place.push_back(fitting.at.given());
      plan_.pipes.push_back(std::move(entry));
    }
  }

  [[nodiscard]] bool can_have_wave_speed(const Pipe& pipe) const {
    if (pipe.wave_speed.given()) return true;
    const bool elastic = pipe.modulus.given() || !pipe.material.empty();
    const bool walled = pipe.wall.given() || (pipe.outside.given() && pipe.bore.given());
    const bool water = case_.liquid.name == "water" || case_.liquid.name == "seawater";
    return elastic && walled && (case_.liquid.bulk_modulus.given() || water);
  }

  void add_devices() {
    struct Found {
      SourcePlace place;
      std::size_t order;
      DevicePlan device;
    };
    std::vector<Found> found;
    const auto add = [&](DeviceKind kind, const auto& list, const auto& from, const auto& to) {
      for (std::size_t i = 0; i < list.size(); ++i)
        found.push_back({list[i].place,
                         found.size(),
                         {kind, list[i].name, static_cast<int>(i), place_id(from(list[i])), place_id(to(list[i]))}});
    };
    const auto from = [](const auto& e) { return e.from; };
    const auto to = [](const auto& e) { return e.to; };
    const auto at = [](const auto& e) { return e.at; };
    const auto nowhere = [](const auto&) { return std::string(); };
    add(DeviceKind::valve, case_.valves, from, to);
    add(DeviceKind::pump, case_.pumps, from, to);
    add(DeviceKind::check_valve, case_.check_valves, from, to);
    add(DeviceKind::draw_off, case_.draw_offs, at, nowhere);
    add(DeviceKind::air_vessel, case_.air_vessels, at, nowhere);
    add(DeviceKind::surge_tank, case_.surge_tanks, at, nowhere);
    add(DeviceKind::relief, case_.reliefs, at, to);
    add(DeviceKind::air_valve, case_.air_valves, at, nowhere);
    std::sort(found.begin(), found.end(), [](const Found& a, const Found& b) {
      return std::tie(a.place, a.order) < std::tie(b.place, b.order);
    });
    for (auto& entry : found) {
      entry.device.adjoining = pipe_at(entry.device.from);
      if (!entry.device.adjoining.exists()) entry.device.adjoining = pipe_at(entry.device.to);
      plan_.devices.push_back(std::move(entry.device));
    }
  }

  /// First pipe that ends at `place`.
  [[nodiscard]] PipeId pipe_at(PlaceId place) const {
    if (!place.exists()) return {};
    for (std::size_t i = 0; i < plan_.pipes.size(); ++i)
      if (plan_.pipes[i].from == place || plan_.pipes[i].to == place) return PipeId{static_cast<int>(i)};
    return {};
  }

  /// Convention (e): the place's own entry, a profile that ends there, a basin's level; else 0 m.
  void add_elevations() {
    const auto set = [&](std::size_t place, ElevationSource source, int index) {
      if (plan_.places[place].elevation != ElevationSource::nowhere) return;
      plan_.places[place].elevation = source;
      plan_.places[place].elevation_index = index;
    };
    for (std::size_t i = 0; i < case_.places.size(); ++i)
      if (case_.places[i].elevation.given())
        set(place_id(case_.places[i].name).at(), ElevationSource::entry, static_cast<int>(i));
    for (std::size_t i = 0; i < case_.pipes.size(); ++i) {
      if (case_.pipes[i].profile.empty()) continue;
      set(plan_.pipes[i].from.at(), ElevationSource::pipe_start, static_cast<int>(i));
      set(plan_.pipes[i].to.at(), ElevationSource::pipe_end, static_cast<int>(i));
    }
    for (std::size_t i = 0; i < plan_.places.size(); ++i)
      if (plan_.places[i].basin >= 0) set(i, ElevationSource::level, plan_.places[i].basin);
  }

  void add_events() {
    for (std::size_t i = 0; i < case_.events.size(); ++i) {
      const Event& event = case_.events[i];
      EventPlan entry;
      entry.index = static_cast<int>(i);
      entry.kind = event.kind;
      entry.name = event.name.empty() ? event.subject : event.name;
      if (event.kind == EventKind::move_basin) {
        entry.basin = index_of_name(case_.basins, event.subject);
      } else {
        entry.device = index_of_name(plan_.devices, event.subject);
      }
      plan_.events.push_back(std::move(entry));
    }
  }

  [[nodiscard]] SpotPlan spot(const Spot& written) const {
    SpotPlan entry;
    entry.name = written.written.empty() ? written.element : written.written;
    if (written.on_pipe) {
      entry.pipe = PipeId{index_of_name(plan_.pipes, written.element)};
      entry.chainage = written.chainage.value_or(-1.0);
    } else {
      entry.place = place_id(written.element);
    }
    return entry;
  }

  void add_probes() {
    for (const auto& written : case_.show.places) plan_.probes.push_back(spot(written));
    if (!plan_.probes.empty()) return;
    for (std::size_t i = 0; i < plan_.places.size(); ++i) {
      SpotPlan entry;
      entry.name = plan_.places[i].name;
      entry.place = PlaceId{static_cast<int>(i)};
      plan_.probes.push_back(std::move(entry));
    }
  }

  [[nodiscard]] AnswerPlan answer(const AnswerRequest& request) const {
    AnswerPlan entry;
    entry.name = request.name;
    entry.kind = request.kind;
    if (!request.where.empty()) entry.where = spot(request.where[0]);
    if (request.where.size() > 1) entry.other = spot(request.where[1]);
    return entry;
  }

  void add_answers_and_limits() {
    for (const auto& request : case_.band.answers) plan_.answers.push_back(answer(request));
    for (const auto& limit : case_.limits) {
      if (!limit.rule.empty()) continue;  // code rules have bounds of their own
      LimitPlan entry;
      entry.name = limit.name;
      entry.subject = answer(limit.subject);
      entry.bound = limit.bound.value;
      entry.not_over = limit.not_over;
      entry.at_most = limit.at_most;
      entry.confidence = limit.confidence;
      plan_.limits.push_back(std::move(entry));
      if (case_.band.answers.empty()) add_answer_once(answer(limit.subject));  // nothing asked: what is judged
    }
    for (std::size_t i = 0; i < case_.pipes.size(); ++i)
      if (case_.pipes[i].rating.given()) plan_.limits.push_back(rating_limit(i));
    if (case_.band.answers.empty() && case_.limits.empty())
      for (const auto& limit : plan_.limits) add_answer_once(limit.subject);
    number_repeated_names(plan_.answers);
    number_repeated_names(plan_.limits);
  }

  void add_answer_once(AnswerPlan entry) {
    const auto same = [&](const AnswerPlan& a) { return a.name == entry.name; };
    if (std::ranges::none_of(plan_.answers, same)) plan_.answers.push_back(std::move(entry));
  }

  [[nodiscard]] LimitPlan rating_limit(std::size_t pipe) const {
    LimitPlan entry;
    entry.name = case_.pipes[pipe].name + " rating";
    entry.subject.name = entry.name;
    entry.subject.kind = AnswerKind::highest_pressure;
    entry.subject.where.name = case_.pipes[pipe].name;
    entry.subject.where.pipe = PipeId{static_cast<int>(pipe)};
    const Quantity& rating = case_.pipes[pipe].rating;
    const Quantity& atmosphere = case_.site.atmosphere;
    entry.bound = rating.gauge ? rating.value : rating.value - (atmosphere.given() ? atmosphere.value : 101325.0);
    entry.rating_of_pipe = static_cast<int>(pipe);
    return entry;
  }

  /// The second of a name becomes "NAME 2", the third "NAME 3".
  template <class Entry>
  static void number_repeated_names(std::vector<Entry>& list) {
    std::set<std::string> taken;
    for (auto& entry : list) {
      const std::string plain = entry.name;
      for (int repeat = 2; !taken.insert(entry.name).second; ++repeat)
        entry.name = plain + " " + std::to_string(repeat);
    }
  }

  const Case& case_;
  Plan plan_;
  std::unordered_map<std::string, int> place_index_;
};

}  // namespace

LossKind loss_kind(const Case& c, const Pipe& pipe) {
  const bool settled = c.friction.law.options.size() == 1;
  if (settled && c.friction.law.central() == FrictionLaw::none) return LossKind::none;
  if (pipe.friction_factor.given()) return LossKind::fixed_factor;
  if (pipe.hazen_williams.given()) return LossKind::hazen_williams;
  if (pipe.manning.given()) return LossKind::manning;
  if (c.friction.fixed_factor.given()) return LossKind::fixed_factor;
  return LossKind::darcy;
}

bool starts_shut(const Valve& valve) {
  return valve.opening.given() && valve.opening.unknown < 0 && valve.opening.value <= 0.0;
}

bool starts_at_rest(const Case& c, const Pump& pump) {
  const Event* first = nullptr;  // in time, as the central run has it; what a condition starts has no time
  for (const auto& event : c.events) {
    if (event.subject != pump.name || (event.kind != EventKind::start_pump && event.kind != EventKind::trip_pump))
      continue;
    if (first == nullptr || event.at.value < first->at.value || std::isnan(first->at.value)) first = &event;
  }
  return first != nullptr && first->kind == EventKind::start_pump;
}

int Plan::place_named(const std::string& name) const { return index_of_name(places, name); }
int Plan::pipe_named(const std::string& name) const { return index_of_name(pipes, name); }
int Plan::device_named(const std::string& name) const { return index_of_name(devices, name); }

Plan make_plan(const Case& c) { return PlanMaker(c).make(); }

}  // namespace headband::network
