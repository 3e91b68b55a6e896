#pragma once
// SPDX-License-Identifier: MIT

#include "core/network/case.hpp"

#include <string>

namespace headband::network::detail {

/// One end of an element: which place it names.
struct End {
  std::string kind, element, key, place_name;
  SourcePlace place;
};

/// Calls `visit(End)` for every place an element names, in the order of the case's lists.
template <class Visit>
void for_each_end(const Case& c, const Visit& visit) {
  const auto both = [&](const char* kind, const auto& list) {
    for (const auto& e : list) {
      visit(End{kind, e.name, "from", e.from, e.place});
      visit(End{kind, e.name, "to", e.to, e.place});
    }
  };
  const auto one = [&](const char* kind, const auto& list) {
    for (const auto& e : list) visit(End{kind, e.name, "at", e.at, e.place});
  };
  both("pipe", c.pipes);
  both("valve", c.valves);
  both("pump", c.pumps);
  both("check_valve", c.check_valves);
  one("draw_off", c.draw_offs);
  one("air_vessel", c.air_vessels);
  one("surge_tank", c.surge_tanks);
  one("relief", c.reliefs);
  one("air_valve", c.air_valves);
  for (const auto& e : c.reliefs)
    if (!e.to.empty()) visit(End{"relief", e.name, "to", e.to, e.place});
}

}  // namespace headband::network::detail
