// SPDX-License-Identifier: MIT
//
// What is wrong with a case as a pipeline: names, places, parts, elevations. Elements and questions: their own files.

#include "core/network/case.hpp"
#include "core/network/detail/each_end.hpp"
#include "core/network/detail/problem_list.hpp"
#include "core/network/nearest_word.hpp"
#include "core/network/plan.hpp"

#include <algorithm>
#include <cmath>
#include <map>
#include <set>
#include <tuple>

namespace headband::network {
namespace detail {
namespace {

template <class Visit>
void for_each_element(const Case& c, const Visit& visit) {
  const auto all = [&](const char* kind, const auto& list) {
    for (const auto& e : list) visit(std::string(kind), e.name, e.place);
  };
  all("basin", c.basins);
  all("pipe", c.pipes);
  all("valve", c.valves);
  all("pump", c.pumps);
  all("check_valve", c.check_valves);
  all("air_vessel", c.air_vessels);
  all("surge_tank", c.surge_tanks);
  all("relief", c.reliefs);
  all("air_valve", c.air_valves);
  all("draw_off", c.draw_offs);
}

void check_names(const Case& c, ProblemList& problems) {
  std::map<std::string, SourcePlace> seen;
  const auto check_word = [&](const std::string& kind, const std::string& name, SourcePlace place) {
    const std::string path = kind + "/" + name + "/name";
    if (name.empty()) problems.missing(place, path, "an element needs a name", "name = \"…\"", "give it one");
    if (name == "air")
      problems.add(place, path, "the name 'air' is reserved for free discharge", name, "", "choose another name");
    const bool bad = std::any_of(name.begin(), name.end(), [](char ch) {
      return ch == ',' || ch == '@' || ch == '"' || ch == '\'' || (static_cast<unsigned char>(ch) < 0x20);
    });
    if (bad)
      problems.add(place,
                   path,
                   "the name holds a character that case files use themselves",
                   name,
                   "no comma, @, quotation mark or control character",
                   "choose another name");
  };
  for_each_element(c, [&](const std::string& kind, const std::string& name, SourcePlace place) {
    check_word(kind, name, place);
    const auto [first, fresh] = seen.emplace(name, place);
    if (!fresh)
      problems.add(place,
                   kind + "/" + name + "/name",
                   "two elements have one name",
                   name,
                   fmt::format("the other one is in line {}", first->second.line),
                   "give one of them another name");
  });
  std::set<std::string> pipes;
  for (const auto& pipe : c.pipes) pipes.insert(pipe.name);
  for_each_end(c, [&](const End& end) {
    if (pipes.contains(end.place_name))
      problems.add(end.place,
                   end.kind + "/" + end.element + "/" + end.key,
                   "a pipe and a place have one name",
                   end.place_name,
                   "",
                   "name the place where the pipe ends, not the pipe");
  });
}

/// Elements that touch each place.
std::map<std::string, int> count_ends(const Case& c) {
  std::map<std::string, int> count;
  for_each_end(c, [&](const End& end) { ++count[end.place_name]; });
  for (const auto& basin : c.basins) count[basin.name] += 2;  // a basin is enough of a neighbour
  return count;
}

std::string nearest_of(const std::string& name, const std::map<std::string, int>& count) {
  std::vector<std::string> others;
  for (const auto& [other, ends] : count)
    if (other != name && other != "air") others.push_back(other);
  const std::string found = nearest_word(name, others);
  return found.empty() ? "" : "the nearest name is '" + found + "'";
}

void check_places(const Case& c, ProblemList& problems) {
  const auto count = count_ends(c);
  for_each_end(c, [&](const End& end) {
    const std::string path = end.kind + "/" + end.element + "/" + end.key;
    if (end.place_name.empty()) {
      problems.missing(end.place,
                       path,
                       "the place where it is connected is missing",
                       end.key + " = \"PLACE\"",
                       "name a basin or a place");
    } else if (end.place_name == "air") {
      const bool discharge = end.key == "to" && (end.kind == "valve" || end.kind == "relief");
      if (!discharge)
        problems.add(end.place,
                     path,
                     "only a valve or a relief can discharge to the air",
                     "air",
                     "",
                     "end the pipe at a place and let a valve or a draw-off take the flow out there");
    } else if (end.kind != "pipe" && count.at(end.place_name) < 2) {
      problems.add(end.place,
                   path,
                   "nothing else is connected at '" + end.place_name + "'",
                   end.place_name,
                   nearest_of(end.place_name, count),
                   "check the spelling of the place");
    }
  });
  const auto ends_meet = [&](const char* kind, const auto& list) {
    for (const auto& e : list)
      if (!e.from.empty() && e.from == e.to)
        problems.add(e.place,
                     std::string(kind) + "/" + e.name + "/to",
                     "it begins and ends at one place",
                     e.to,
                     "",
                     "name two places");
  };
  ends_meet("pipe", c.pipes);
  ends_meet("valve", c.valves);
  ends_meet("pump", c.pumps);
  ends_meet("check_valve", c.check_valves);
  for (const auto& entry : c.places)
    if (!count.contains(entry.name))
      problems.add(entry.place,
                   "place/" + entry.name + "/name",
                   "nothing is connected at this place",
                   entry.name,
                   nearest_of(entry.name, count),
                   "check the spelling of the place");
}

/// Places joined by what passes flow at the start.
class Parts {
 public:
  int part_of(const std::string& place) {
    const auto [entry, fresh] = index_.emplace(place, static_cast<int>(parent_.size()));
    if (fresh) {
      parent_.push_back(entry->second);
      names_.push_back(place);
    }
    return root(entry->second);
  }
  void join(const std::string& a, const std::string& b) {
    const int first = part_of(a), second = part_of(b);
    parent_[static_cast<std::size_t>(std::max(first, second))] = std::min(first, second);
  }
  [[nodiscard]] const std::vector<std::string>& names() const { return names_; }

 private:
  int root(int i) {
    while (parent_[static_cast<std::size_t>(i)] != i) i = parent_[static_cast<std::size_t>(i)];
    return i;
  }
  std::map<std::string, int> index_;
  std::vector<int> parent_;
  std::vector<std::string> names_;
};

/// Convention (m): every part that can hold liquid has a head from a basin, the air, or `[[place]] head`.
void check_cut_off_parts(const Case& c, ProblemList& problems) {
  Parts parts;
  std::set<std::string> held_places;
  for (const auto& basin : c.basins) held_places.insert(basin.name);
  for (const auto& entry : c.places)
    if (entry.head.given()) held_places.insert(entry.name);
  for (const auto& pipe : c.pipes) parts.join(pipe.from, pipe.to);
  for (const auto& check : c.check_valves) parts.join(check.from, check.to);
  for (const auto& pump : c.pumps) {
    parts.part_of(pump.from);
    parts.part_of(pump.to);
    if (!starts_at_rest(c, pump)) parts.join(pump.from, pump.to);
  }
  for (const auto& valve : c.valves) {
    parts.part_of(valve.from);
    if (valve.to != "air") parts.part_of(valve.to);
    if (starts_shut(valve) || valve.flow.given()) continue;
    if (valve.to == "air") {
      held_places.insert(valve.from);
    } else {
      parts.join(valve.from, valve.to);
    }
  }
  std::set<int> held;
  for (const auto& place : held_places) held.insert(parts.part_of(place));
  std::map<int, std::vector<std::string>> cut_off;
  for (const auto& name : std::vector<std::string>(parts.names())) {
    const int part = parts.part_of(name);
    if (!held.contains(part)) cut_off[part].push_back(name);
  }
  for (const auto& [part, names] : cut_off) {
    std::string list;
    for (std::size_t i = 0; i < names.size() && i < 5; ++i) list += (i > 0 ? ", '" : "'") + names[i] + "'";
    if (names.size() > 5) list += fmt::format(" and {} more", names.size() - 5);
    SourcePlace place;
    std::string path = "place/" + names.front() + "/head";
    for_each_end(c, [&](const End& end) {
      if (place.line == 0 && end.place_name == names.front()) place = end.place;
    });
    problems.add(place,
                 path,
                 "a part of the network is cut off from every basin: " + list,
                 "",
                 "",
                 "connect it, or give the head it holds: [[place]] name = \"" + names.front() + "\", head = \"60 m\"");
  }
}

/// Largest disagreement on the elevation of a place [m] (convention e).
constexpr double elevation_disagreement = 0.01;

void check_elevations(const Case& c, ProblemList& problems) {
  struct Stated {
    double elevation;
    std::string by;
  };
  std::map<std::string, Stated> stated;
  const auto state = [&](const std::string& place,
                         const Quantity& elevation,
                         const std::string& by,
                         const std::string& path,
                         SourcePlace element) {
    if (!elevation.given()) return;
    const auto [first, fresh] = stated.emplace(place, Stated{elevation.value, by});
    if (fresh || std::abs(first->second.elevation - elevation.value) <= elevation_disagreement) return;
    problems.add(
        elevation,
        element,
        path,
        "the elevation of '" + place + "' is stated twice, differently",
        fmt::format(
            "{} puts it at {:.6g} m, {} at {:.6g} m", first->second.by, first->second.elevation, by, elevation.value),
        "make both agree to 1 cm");
  };
  for (const auto& entry : c.places)
    state(entry.name, entry.elevation, "[[place]]", "place/" + entry.name + "/elevation", entry.place);
  for (const auto& pipe : c.pipes) {
    if (pipe.profile.empty()) continue;
    const std::string by = "pipe '" + pipe.name + "'", path = "pipe/" + pipe.name + "/profile";
    state(pipe.from, pipe.profile.front().second, by, path, pipe.place);
    state(pipe.to, pipe.profile.back().second, by, path, pipe.place);
  }
}

}  // namespace

void check_names_and_places(const Case& c, ProblemList& problems) {
  check_names(c, problems);
  check_places(c, problems);
}

void check_parts_and_elevations(const Case& c, ProblemList& problems) {
  if (c.pipes.empty()) problems.missing({}, "pipe", "the case holds no pipe", "[[pipe]]", "describe at least one pipe");
  check_cut_off_parts(c, problems);
  check_elevations(c, problems);
}

}  // namespace detail

base::Problems validate(const Case& c) {
  detail::ProblemList problems;
  detail::check_names_and_places(c, problems);
  base::Problems found = problems.take();
  const bool connected = found.empty();

  detail::ProblemList rest;
  if (connected) detail::check_parts_and_elevations(c, rest);  // a misspelt place would be told twice
  detail::check_liquid(c, rest);
  detail::check_pipes(c, rest);
  detail::check_devices(c, rest);
  detail::check_events(c, rest);
  detail::check_question(c, rest);
  for (auto& problem : rest.take()) found.push_back(std::move(problem));
  std::sort(found.begin(), found.end(), [](const base::Problem& a, const base::Problem& b) {
    return std::tie(a.place, a.path, a.what) < std::tie(b.place, b.path, b.what);
  });
  return found;
}

}  // namespace headband::network
