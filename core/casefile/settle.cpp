// SPDX-License-Identifier: MIT
#include "core/casefile/parts.hpp"
#include "core/network/plan.hpp"

#include "core/base/units.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <set>

namespace headband::casefile {
namespace {

using namespace network;

void refuse_repeated_names(Context& context, const Case& c) {
  std::map<std::string, std::pair<std::string, SourcePlace>> seen;
  const auto take = [&](std::string_view kind, const auto& elements) {
    for (const auto& e : elements) {
      const auto [first, fresh] = seen.emplace(e.name, std::pair{std::string(kind), e.place});
      if (fresh) continue;
      context.names_doubtful = true;
      context.report(e.place,
                     fmt::format("{}/{}/name", kind, e.name),
                     "two elements have one name",
                     fmt::format("\"{}\"", e.name),
                     fmt::format("the other one is the {} in line {}", first->second.first, first->second.second.line),
                     "give one of them another name");
    }
  };
  take("basin", c.basins);
  take("pipe", c.pipes);
  take("valve", c.valves);
  take("pump", c.pumps);
  take("check_valve", c.check_valves);
  take("air_vessel", c.air_vessels);
  take("surge_tank", c.surge_tanks);
  take("relief", c.reliefs);
  take("air_valve", c.air_valves);
  take("draw_off", c.draw_offs);
  std::set<std::string> place_names;
  for (const auto& p : c.places) {
    const auto other = seen.find(p.name);
    // An entry [[place]] may add the elevation of a basin's place; two entries for one place are a slip.
    if ((other != seen.end() && other->second.first != "basin") || !place_names.insert(p.name).second)
      context.report(p.place,
                     fmt::format("place/{}/name", p.name),
                     "two elements have one name",
                     fmt::format("\"{}\"", p.name),
                     "a name of its own",
                     "give one of them another name");
  }
}

// A name is a pipe's where a pipe has it; places and pipes share no names.
void settle_spots(Case& c) {
  const auto settle_one = [&](Spot& spot) {
    spot.on_pipe = spot.on_pipe ||
                   std::any_of(c.pipes.begin(), c.pipes.end(), [&](const Pipe& p) { return p.name == spot.element; });
  };
  for (Spot& spot : c.show.places) settle_one(spot);
  for (AnswerRequest& answer : c.band.answers)
    for (Spot& spot : answer.where) settle_one(spot);
  for (Limit& limit : c.limits)
    for (Spot& spot : limit.subject.where) settle_one(spot);
}

bool wave_speed_by_formula(const Pipe& p) {
  return !p.wave_speed.given() && p.wave_speed.same_as.empty() && (p.wall.given() || !p.wall.same_as.empty());
}

void count_guesses(Context& context, const Case& c) {
  auto& guesses = context.guesses;
  for (const Pipe& p : c.pipes)
    if (!p.joint_given && !p.restraint_factor.given() && wave_speed_by_formula(p))
      guesses.push_back(fmt::format("pipe {}: joint anchored, nobody stated it", p.name));
  for (const Pump& p : c.pumps)
    if (p.check_valve.guess) guesses.push_back(fmt::format("pump {}: ideal check valve, nobody stated it", p.name));
  for (const Pump& p : c.pumps) {
    const bool trips = std::any_of(c.events.begin(), c.events.end(), [&](const Event& e) {
      return (e.kind == EventKind::trip_pump || e.kind == EventKind::start_pump) && e.subject == p.name;
    });
    if (trips && !p.rated_flow.given() && !network::starts_at_rest(c, p))
      guesses.push_back(
          fmt::format("pump {}: rated point taken as the first operating point, nobody stated it", p.name));
  }
  network::for_each_quantity(c, [&](const Quantity& q) {
    if (q.grade == "D") guesses.push_back(fmt::format("{}: {}, stated as a guess (grade D)", q.name, q.written));
  });
}

// Places whose elevation nobody states lie at 0 m.
void guess_elevations(Context& context, const Case& c) {
  std::set<std::string> known;
  std::vector<std::string> order;
  for (const Basin& b : c.basins) known.insert(b.name);
  for (const PlaceEntry& p : c.places)
    if (p.elevation.given() || !p.elevation.same_as.empty()) known.insert(p.name);
  const auto meet = [&](const std::string& name) {
    if (!name.empty() && name != "air" && std::find(order.begin(), order.end(), name) == order.end())
      order.push_back(name);
  };
  for (const Pipe& p : c.pipes) {
    if (!p.profile.empty()) known.insert({p.from, p.to});
    meet(p.from);
    meet(p.to);
  }
  for (const Valve& v : c.valves) {
    meet(v.from);
    meet(v.to);
  }
  for (const Pump& p : c.pumps) {
    meet(p.from);
    meet(p.to);
  }
  for (const std::string& name : order)
    if (!known.contains(name))
      context.guesses.push_back(fmt::format("place {}: elevation 0 m, nobody stated it", name));
}

/// When a movement has ended [s]; that of a sudden one is its start. NaN where it is not known.
double end_of(const Event& e) {
  double end = e.at.value;
  if (e.kind == EventKind::swing_valve || e.kind == EventKind::trip_pump || e.instant) return end;
  if (!e.travel.rows.empty() && !e.travel_in_shares) return end + e.travel.rows.back().first.value;
  return end + e.over.value;
}

// Events of which the run sees nothing, or not all.
void warn_of_late_events(Context& context, const Case& c) {
  if (!c.surge.duration.given()) return;
  const double duration = c.surge.duration.value;
  for (const Event& e : c.events) {
    if (!e.at.given()) continue;
    const std::string& name = e.name.empty() ? e.subject : e.name;
    if (e.at.value >= duration)
      context.warnings.push_back(fmt::format("event '{}' comes at {}, but the run ends at {}: it does nothing here",
                                             name,
                                             base::shown(e.at.value, base::Dimension::time, c.show.units),
                                             base::shown(duration, base::Dimension::time, c.show.units)));
    else if (end_of(e) > duration)
      context.warnings.push_back(
          fmt::format("event '{}' ends at {}, but the run ends at {}: the extremes are those of a part of it",
                      name,
                      base::shown(end_of(e), base::Dimension::time, c.show.units),
                      base::shown(duration, base::Dimension::time, c.show.units)));
  }
}

// A valve asked to go where it stands already does not move: perhaps its `opening` was forgotten.
void warn_of_standing_valves(Context& context, const Case& c) {
  for (const Valve& v : c.valves) {
    const Event* first = nullptr;
    for (const Event& e : c.events)
      if (e.subject == v.name && e.kind == EventKind::move_valve && e.at.given() &&
          (first == nullptr || e.at.value < first->at.value))
        first = &e;
    if (first == nullptr || !first->travel.rows.empty() || !first->to.given()) continue;
    const double stands = v.opening.given() ? v.opening.value : 1.0;
    if (first->to.value == stands)
      context.warnings.push_back(fmt::format("event '{}' moves valve '{}' to {}, where it stands already",
                                             first->name.empty() ? first->subject : first->name,
                                             v.name,
                                             first->to.written));
  }
}

// Sizes that no pipeline has: a unit is wrong more often than not.
void warn_of_sizes(Context& context, const Case& c) {
  constexpr double least_bore = 2e-3, most_bore = 15.0, least_speed = 20.0, most_speed = 1600.0;
  const auto ask = [&](const Pipe& p, const Quantity& q, const char* what, double least, double most) {
    if (q.given() && !(q.value >= least && q.value <= most))
      context.warnings.push_back(fmt::format("pipe '{}': {} {}, read as {}: is the unit right?",
                                             p.name,
                                             what,
                                             q.written,
                                             base::shown(q.value, q.dimension, c.show.units)));
  };
  for (const Pipe& p : c.pipes) {
    ask(p, p.bore, "bore", least_bore, most_bore);
    ask(p, p.outside, "outside", least_bore, most_bore);
    ask(p, p.wave_speed, "wave speed", least_speed, most_speed);
  }
}

// Elevations below the datum all along a pipe whose basins stand above it: perhaps depths under the ground.
void warn_of_depths(Context& context, const Case& c) {
  const bool above = !c.basins.empty() && std::all_of(c.basins.begin(), c.basins.end(), [](const Basin& b) {
    return b.level.given() && b.level.value > 0.0;
  });
  if (!above) return;
  for (const Pipe& p : c.pipes) {
    const bool below = !p.profile.empty() && std::all_of(p.profile.begin(), p.profile.end(), [](const auto& point) {
      return point.second.value < 0.0;
    });
    if (below)
      context.warnings.push_back(
          fmt::format("pipe '{}' lies below the datum all along and every basin above it: elevations and levels count "
                      "from one datum, are these depths under the ground?",
                      p.name));
  }
}

}  // namespace

void settle(Context& context, Case& c) {
  refuse_repeated_names(context, c);
  settle_spots(c);
  count_guesses(context, c);
  guess_elevations(context, c);
  warn_of_late_events(context, c);
  warn_of_standing_valves(context, c);
  warn_of_sizes(context, c);
  warn_of_depths(context, c);
  c.guesses = context.guesses;
  c.warnings = context.warnings;
}

}  // namespace headband::casefile
