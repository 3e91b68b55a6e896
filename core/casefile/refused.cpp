// SPDX-License-Identifier: MIT
#include "core/casefile/read.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <string_view>
#include <tuple>

namespace headband::casefile {
namespace {

using namespace network;

constexpr std::string_view not_yet = "not computed yet by this version";

class Refusals {
 public:
  void add(SourcePlace place, std::string path, std::string what, std::string hint) {
    problems_.push_back(
        {place, std::move(path), fmt::format("{}: {}", what, not_yet), "", "a case without it", std::move(hint)});
  }
  template <class Elements>
  void elements(std::string_view kind, std::string_view words, const Elements& list) {
    for (const auto& e : list)
      add(e.place,
          fmt::format("{}/{}", kind, e.name),
          fmt::format("the {} \"{}\"", words, e.name),
          "leave it out for this verb, or use `flow`, where it passes nothing");
  }
  base::Problems take() {
    std::sort(problems_.begin(), problems_.end(), [](const auto& a, const auto& b) {
      return std::tie(a.place, a.path) < std::tie(b.place, b.path);
    });
    return std::move(problems_);
  }

 private:
  base::Problems problems_;
};

void refuse_protection(const Case& c, Refusals& refusals) {
  refusals.elements("air_vessel", "air vessel", c.air_vessels);
  refusals.elements("surge_tank", "surge tank", c.surge_tanks);
  refusals.elements("relief", "relief", c.reliefs);
  refusals.elements("air_valve", "air valve", c.air_valves);
}

void refuse_of_surge(const Case& c, Refusals& refusals) {
  refuse_protection(c, refusals);
  for (const Pipe& p : c.pipes)
    if (!p.creep.empty())
      refusals.add(
          p.place, "pipe/" + p.name + "/creep", fmt::format("creep of pipe \"{}\"", p.name), "leave creep out");
  for (const Event& e : c.events) {
    if (e.when)
      refusals.add(e.place,
                   "event/" + (e.name.empty() ? e.subject : e.name) + "/when",
                   "an event that waits for a condition",
                   "give the event a time `at`");
  }
  if (c.surge.unsteady_friction)
    refusals.add(c.surge.place, "surge/unsteady_friction", "unsteady friction", "write unsteady_friction = \"off\"");
  if (c.surge.cavities == Cavities::gas || c.surge.cavities == Cavities::both)
    refusals.add(c.surge.place, "surge/cavities", "gas cavities", "write cavities = \"vapour\" or \"off\"");
}

}  // namespace

base::Problems refused_by_verb(const Case& c, const std::string& verb) {
  Refusals refusals;
  const bool marches = verb == "surge" || verb == "band --surge";
  if (marches) {
    if (!c.surge.given) {
      base::Problems missing;
      missing.push_back({{1, 1},
                         "surge",
                         fmt::format("`{}` needs the section [surge]", verb),
                         "",
                         "[surge] with duration",
                         "add [surge] and duration = \"60 s\""});
      return missing;
    }
    refuse_of_surge(c, refusals);
  }
  if (marches || verb == "flow" || verb == "band")
    for (const Limit& l : c.limits)
      if (!l.rule.empty())
        refusals.add(l.place,
                     "limit/" + l.name,
                     fmt::format("the rule \"{}\"", l.rule),
                     "write the limit as highest_pressure with its own bound");
  return refusals.take();
}

}  // namespace headband::casefile
