// SPDX-License-Identifier: MIT
//
// What is wrong inside one element: sizes that do not fit, missing or doubled numbers.

#include "core/network/detail/problem_list.hpp"
#include "core/network/plan.hpp"

#include <algorithm>
#include <cmath>

namespace headband::network::detail {
namespace {

/// Largest share by which a profile's last chainage may miss the length: survey chainage is measured on the level.
constexpr double profile_misfit = 0.05;
/// Largest roughness a friction law is asked for, as a share of the bore (Colebrook-White is charted to 0.05).
constexpr double roughest = 0.2;

int count_given(std::initializer_list<const Quantity*> quantities) {
  return static_cast<int>(std::count_if(quantities.begin(), quantities.end(), [](auto* q) { return q->given(); }));
}

void must_be_positive(
    const Quantity& q, SourcePlace element, const std::string& path, const char* what, ProblemList& problems) {
  if (q.given() && !(q.value > 0.0))
    problems.add(q, element, path, std::string(what) + " must be over zero", "> 0", "check the number and its unit");
}

void check_profile(const Pipe& pipe, const std::string& path, ProblemList& problems) {
  if (pipe.profile.empty()) {
    if (!pipe.length.given())
      problems.missing(pipe.place,
                       path + "/length",
                       "the pipe has no length",
                       "length = \"1800 m\" or a profile",
                       "give its length");
    return;
  }
  const std::string where = path + "/profile";
  const auto& first = pipe.profile.front().first;
  const auto& last = pipe.profile.back().first;
  if (pipe.profile.size() < 2)
    problems.add(first,
                 pipe.place,
                 where,
                 "a profile needs at least two points",
                 "chainage and elevation of both ends",
                 "add the other end");
  if (first.value != 0.0)
    problems.add(first,
                 pipe.place,
                 where,
                 "the profile must begin at chainage 0",
                 "0 m at the `from` end",
                 "subtract the chainage of the `from` end");
  for (std::size_t i = 1; i < pipe.profile.size(); ++i)
    if (pipe.profile[i].first.value < pipe.profile[i - 1].first.value)
      problems.add(pipe.profile[i].first,
                   pipe.place,
                   where,
                   "the chainage of the profile falls",
                   "not under " + ProblemList::shown(pipe.profile[i - 1].first),
                   "put the points in order");
  if (pipe.length.given() && std::abs(last.value - pipe.length.value) > profile_misfit * pipe.length.value)
    problems.add(last,
                 pipe.place,
                 where,
                 "the profile does not end at the length of the pipe",
                 "the length is " + ProblemList::shown(pipe.length),
                 "check the units of both");
}

void check_section(const Pipe& pipe, const std::string& path, ProblemList& problems) {
  const bool by_outside = pipe.outside.given() && pipe.wall.given();
  if (!by_outside && !pipe.bore.given()) {
    problems.missing(pipe.place,
                     path + "/bore",
                     "the pipe has no bore",
                     "bore = \"492 mm\", or outside = \"508 mm\" and wall = \"8 mm\"",
                     "give bore, or outside and wall");
    return;
  }
  if (by_outside && pipe.bore.given())
    problems.add(pipe.bore,
                 pipe.place,
                 path + "/bore",
                 "the bore already follows from outside and wall",
                 "",
                 "leave out bore, or outside");
  must_be_positive(pipe.wall, pipe.place, path + "/wall", "the wall", problems);
  must_be_positive(pipe.bore, pipe.place, path + "/bore", "the bore", problems);
  must_be_positive(pipe.length, pipe.place, path + "/length", "the length", problems);
  const double lining = pipe.lining_thickness.given() ? pipe.lining_thickness.value : 0.0;
  if (by_outside && !(pipe.outside.value > 2.0 * (pipe.wall.value + lining)))
    problems.add(pipe.wall,
                 pipe.place,
                 path + "/wall",
                 "wall and lining leave no bore",
                 "less than half of the outside " + ProblemList::shown(pipe.outside),
                 "check the units of both");
  if (!by_outside && pipe.wall.given() && pipe.wall.value > 0.5 * pipe.bore.value)
    problems.add(pipe.wall,
                 pipe.place,
                 path + "/wall",
                 "the wall is thicker than half the bore",
                 "at most half of " + ProblemList::shown(pipe.bore),
                 "check the units of both");
  if (pipe.outside.given() && pipe.bore.given() && !(pipe.outside.value > pipe.bore.value))
    problems.add(pipe.outside,
                 pipe.place,
                 path + "/outside",
                 "the outside is not over the bore",
                 "over " + ProblemList::shown(pipe.bore),
                 "is one of them the other?");
}

double bore_of(const Pipe& pipe) {
  if (!pipe.outside.given() || !pipe.wall.given()) return pipe.bore.value;
  const double lining = pipe.lining_thickness.given() ? pipe.lining_thickness.value : 0.0;
  return pipe.outside.value - 2.0 * (pipe.wall.value + lining);
}

bool any_option(const Case& c, FrictionLaw law) {
  const auto& options = c.friction.law.options;
  return std::any_of(options.begin(), options.end(), [&](const auto& o) { return o.choice == law; });
}

void check_loss_law(const Case& c, const Pipe& pipe, const std::string& path, ProblemList& problems) {
  if (count_given({&pipe.roughness, &pipe.hazen_williams, &pipe.manning, &pipe.friction_factor}) > 1)
    problems.add(pipe.place,
                 path + "/roughness",
                 "more than one friction number is given",
                 "",
                 "one of roughness, hazen_williams, manning, friction_factor",
                 "leave the others out");
  if (loss_kind(c, pipe) != LossKind::darcy) return;
  if (any_option(c, FrictionLaw::hazen_williams)) {
    problems.missing(pipe.place,
                     path + "/hazen_williams",
                     "the Hazen-Williams law needs its number for this pipe",
                     "hazen_williams = 130",
                     "give it");
  } else if (any_option(c, FrictionLaw::manning)) {
    problems.missing(
        pipe.place, path + "/manning", "the Manning law needs its number for this pipe", "manning = 0.012", "give it");
  } else if (!pipe.roughness.given()) {
    const auto& options = c.friction.law.options;
    const bool smooth =
        std::all_of(options.begin(), options.end(), [](const auto& o) { return o.choice == FrictionLaw::smooth; });
    if (!smooth)
      problems.missing(pipe.place,
                       path + "/roughness",
                       "the roughness is missing",
                       "roughness = \"0.1 mm\"",
                       "give it, or hazen_williams, manning or friction_factor in its place");
  } else if (bore_of(pipe) > 0.0 && pipe.roughness.value > roughest * bore_of(pipe)) {  // no bore is told before
    problems.add(pipe.roughness,
                 pipe.place,
                 path + "/roughness",
                 "the roughness is over a fifth of the bore",
                 fmt::format("at most {:.4g} mm", 1000.0 * roughest * bore_of(pipe)),
                 "check its unit");
  } else if (pipe.roughness.value < 0.0) {
    problems.add(pipe.roughness,
                 pipe.place,
                 path + "/roughness",
                 "the roughness is negative",
                 "0 or more",
                 "0 mm is a smooth pipe");
  }
}

void check_fittings(const Pipe& pipe, const std::string& path, ProblemList& problems) {
  const double length =
      pipe.length.given() || pipe.profile.empty() ? pipe.length.value : pipe.profile.back().first.value;
  for (const auto& fitting : pipe.fittings) {
    const std::string where = path + "/fitting " + fitting.name;
    const SourcePlace place = fitting.place.line > 0 ? fitting.place : pipe.place;
    if (count_given({&fitting.k, &fitting.equivalent_length}) != 1)
      problems.add(place, where, "a fitting needs k or equivalent_length", "", "one of the two", "give one");
    if (fitting.at.given() && (fitting.at.value < 0.0 || fitting.at.value > length))
      problems.add(fitting.at,
                   place,
                   where + "/at",
                   "the fitting lies outside its pipe",
                   fmt::format("0 m to {:.6g} m", length),
                   "count from the `from` end of the pipe");
  }
}

void check_elasticity(const Pipe& pipe, const std::string& path, ProblemList& problems) {
  must_be_positive(pipe.modulus, pipe.place, path + "/modulus", "the modulus", problems);
  must_be_positive(pipe.wave_speed, pipe.place, path + "/wave_speed", "the wave speed", problems);
  must_be_positive(pipe.restraint_factor, pipe.place, path + "/restraint_factor", "the restraint factor", problems);
  if (pipe.poisson.given() && !(pipe.poisson.value >= 0.0 && pipe.poisson.value <= 0.5))
    problems.add(pipe.poisson,
                 pipe.place,
                 path + "/poisson",
                 "Poisson's ratio is out of its range",
                 "0 to 0.5",
                 "steel has 0.3");
}

void check_valve_size(const Valve& valve, const std::string& path, bool pipe_beside, ProblemList& problems) {
  const int sizes = count_given({&valve.kv, &valve.k, &valve.area, &valve.flow});
  if (sizes == 0)
    problems.missing(valve.place,
                     path + "/kv",
                     "the valve has no size",
                     "kv, cv, k with bore, area with "
                     "discharge_coefficient, or flow",
                     "give one of them");
  if (sizes > 1)
    problems.add(valve.place,
                 path,
                 valve.flow.given() ? "flow sizes the valve, and another size is given beside it"
                                    : "the valve has more than one size",
                 valve.flow.given() ? "flow = " + ProblemList::shown(valve.flow) : "",
                 "one of kv, cv, k, area, flow",
                 "leave the others out");
  if (valve.area.given() && !valve.discharge_coefficient.given())
    problems.missing(valve.place,
                     path + "/discharge_coefficient",
                     "area needs a discharge coefficient",
                     "discharge_coefficient = 0.6",
                     "give it");
  if (valve.k.given() && !valve.bore.given() && !pipe_beside)
    problems.missing(valve.place,
                     path + "/bore",
                     "k needs the bore it was measured in, and no pipe ends at the valve",
                     "bore = \"300 mm\"",
                     "give it");
  must_be_positive(valve.kv, valve.place, path + "/kv", "the flow coefficient", problems);
  must_be_positive(valve.k, valve.place, path + "/k", "the loss coefficient", problems);
  must_be_positive(valve.area, valve.place, path + "/area", "the area", problems);
  if (valve.flow.given() && valve.flow.value == 0.0)
    problems.add(valve.flow,
                 valve.place,
                 path + "/flow",
                 "a valve cannot be sized by no flow",
                 "not zero",
                 "shut it with opening = \"0 %\" and give its kv");
  if (valve.flow.given() && starts_shut(valve))
    problems.add(valve.opening,
                 valve.place,
                 path + "/opening",
                 "a shut valve passes no flow, yet flow sizes it",
                 "flow = " + ProblemList::shown(valve.flow),
                 "open it at the start, or give kv in place of flow");
}

void check_valve_law(const Valve& valve, const std::string& path, ProblemList& problems) {
  if (valve.opening.given() && !(valve.opening.value >= 0.0 && valve.opening.value <= 1.0))
    problems.add(valve.opening,
                 valve.place,
                 path + "/opening",
                 "the opening is out of its range",
                 "0 % to 100 %",
                 "it is the share of full travel");
  if (valve.law.kind == ValveLawKind::power && !(valve.law.parameter > 0.0))
    problems.add(valve.place,
                 path + "/law",
                 "the power of the law must be over zero",
                 fmt::format("{:g}", valve.law.parameter),
                 "> 0",
                 "");
  if (valve.law.kind == ValveLawKind::equal_percentage && !(valve.law.parameter > 1.0))
    problems.add(valve.place,
                 path + "/law",
                 "the rangeability must be over 1",
                 fmt::format("{:g}", valve.law.parameter),
                 "> 1",
                 "30 to 50 is usual");
  if (valve.law.kind != ValveLawKind::table) return;
  const auto& points = valve.law.points;
  const bool ordered = std::is_sorted(points.begin(), points.end(), [](auto& a, auto& b) { return a.first < b.first; });
  const bool strict = std::adjacent_find(points.begin(), points.end(), [](auto& a, auto& b) {
                        return a.first == b.first;
                      }) == points.end();
  if (points.size() < 2 || !ordered || !strict)
    problems.add(valve.place,
                 path + "/law",
                 "the table of the law needs rising travel in two rows or more",
                 "",
                 "[[\"0 %\", 0], [\"100 %\", 1]]",
                 "put the rows in order");
  for (const auto& [travel, share] : points)
    if (travel < 0.0 || travel > 1.0 || share < 0.0)
      problems.add(valve.place,
                   path + "/law",
                   "a row of the law is out of its range",
                   fmt::format("{:g} %, {:g}", 100.0 * travel, share),
                   "travel 0 % to 100 %, share 0 or more",
                   "");
}

void check_curve(const Pump& pump, const std::string& path, ProblemList& problems) {
  const auto& rows = pump.curve.rows;
  if (rows.size() < 2) {
    if (pump.characteristic == Characteristic::table && rows.empty()) {
      if (!pump.rated_flow.given() || !pump.rated_head.given())
        problems.missing(pump.place,
                         path + "/rated",
                         "a pump known by its four-quadrant table alone needs its rated point",
                         "rated = { flow = \"175 L/s\", head = \"60 m\" }",
                         "give it, or a curve");
      return;
    }
    problems.missing(pump.place,
                     path + "/curve",
                     "the pump curve needs at least two points",
                     "curve = [[\"0 L/s\", \"76 m\"], [\"175 L/s\", \"60 m\"]]",
                     "give flow and head of two points");
    return;
  }
  for (std::size_t i = 0; i < rows.size(); ++i) {
    const Quantity& flow = rows[i].first;
    if (flow.value < 0.0)
      problems.add(flow, pump.place, path + "/curve", "a flow of the pump curve is negative", "0 or more", "");
    if (i > 0 && !(flow.value > rows[i - 1].first.value))
      problems.add(flow,
                   pump.place,
                   path + "/curve",
                   "the flows of the pump curve must rise",
                   "over " + ProblemList::shown(rows[i - 1].first),
                   "put the points in order");
  }
}

// Angles rising from 0 to 2 pi (to a hundredth), a turn ending as it begins.
void check_quadrants(const Pump& pump, const std::string& path, ProblemList& problems) {
  const auto& rows = pump.suter.rows;
  if (pump.characteristic != Characteristic::table || rows.empty()) return;  // nothing read: told by the reader
  constexpr double turn = 6.283185307179586, close = 0.01;
  const auto add = [&](const char* what, double value, const char* bound) {
    problems.add(pump.place, path + "/characteristic", what, fmt::format("{:g}", value), bound, "correct the table");
  };
  if (std::abs(rows.front().first.value) > close)
    add("the four-quadrant table does not begin at angle 0", rows.front().first.value, "0 rad");
  if (std::abs(rows.back().first.value - turn) > close)
    add("the four-quadrant table does not end at a full turn", rows.back().first.value, "6.2832 rad");
  for (std::size_t i = 1; i < rows.size(); ++i)
    if (!(rows[i].first.value > rows[i - 1].first.value)) {
      add("the angles of the four-quadrant table must rise", rows[i].first.value, "rising angles");
      break;
    }
}

bool pipe_at(const Case& c, const std::string& from, const std::string& to) {
  return std::any_of(c.pipes.begin(), c.pipes.end(), [&](const Pipe& p) {
    return p.from == from || p.to == from || p.from == to || p.to == to;
  });
}

}  // namespace

void check_pipes(const Case& c, ProblemList& problems) {
  const auto& laws = c.friction.law.options;
  const auto apart = [](FrictionLaw law) {
    return law == FrictionLaw::hazen_williams || law == FrictionLaw::manning || law == FrictionLaw::none;
  };
  if (laws.size() > 1 && std::any_of(laws.begin(), laws.end(), [&](const auto& o) { return apart(o.choice); }))
    problems.add(c.friction.law.place,
                 "friction/laws",
                 "laws of different numbers cannot be weighed in one case",
                 "",
                 "laws that use the roughness",
                 "leave out hazen-williams, manning and none");
  for (const auto& pipe : c.pipes) {
    const std::string path = "pipe/" + pipe.name;
    check_profile(pipe, path, problems);
    check_section(pipe, path, problems);
    check_loss_law(c, pipe, path, problems);
    check_fittings(pipe, path, problems);
    check_elasticity(pipe, path, problems);
  }
}

void check_devices(const Case& c, ProblemList& problems) {
  for (const auto& basin : c.basins)
    if (!basin.level.given() && !basin.level_table.given())
      problems.missing(basin.place,
                       "basin/" + basin.name + "/level",
                       "the basin has no level",
                       "level = \"100 m\"",
                       "give it, or level_table");
  for (const auto& valve : c.valves) {
    const std::string path = "valve/" + valve.name;
    check_valve_size(valve, path, pipe_at(c, valve.from, valve.to), problems);
    check_valve_law(valve, path, problems);
  }
  for (const auto& pump : c.pumps) {
    const std::string path = "pump/" + pump.name;
    check_curve(pump, path, problems);
    check_quadrants(pump, path, problems);
    if (pump.check_valve.kind == CheckValveKind::none && starts_at_rest(c, pump))
      problems.add(pump.place,
                   path + "/check_valve",
                   "a pump that stands still at the start would let the line run back without a check valve",
                   "none",
                   "a check valve, or a pump that runs at the start",
                   "write check_valve = \"ideal\"");
    if (pump.count < 1)
      problems.add(
          pump.place, path + "/count", "a set needs at least one pump", fmt::format("{}", pump.count), "1 or more", "");
  }
  for (const auto& check : c.check_valves) {
    const std::string path = "check_valve/" + check.name;
    if (count_given({&check.kv, &check.k}) > 1)
      problems.add(check.place, path, "the check valve has more than one size", "", "kv, or k", "leave one out");
    if (check.k.given() && !check.bore.given() && !pipe_at(c, check.from, check.to))
      problems.missing(
          check.place, path + "/bore", "k needs the bore it was measured in", "bore = \"300 mm\"", "give it");
    must_be_positive(check.kv, check.place, path + "/kv", "the flow coefficient", problems);
    must_be_positive(check.k, check.place, path + "/k", "the loss coefficient", problems);
  }
  for (const auto& draw_off : c.draw_offs)
    if (!draw_off.flow.given())
      problems.missing(draw_off.place,
                       "draw_off/" + draw_off.name + "/flow",
                       "the draw-off has no flow",
                       "flow = \"100 L/s\"",
                       "give it");
}

}  // namespace headband::network::detail
