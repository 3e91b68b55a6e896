// SPDX-License-Identifier: MIT
#include "core/base/units.hpp"
#include "core/casefile/parts.hpp"
#include "core/casefile/tables.hpp"

#include <fmt/format.h>

#include <charconv>
#include <cmath>
#include <optional>

namespace headband::casefile {
namespace {

using namespace network;

constexpr double bar_per_psi = 0.45359237 * 9.80665 / 6.4516e-4 / 1.0e5;  // exact definitions of lb, g0, in

// Kv and Cv by one key each; both at once is a question.
Quantity read_flow_coefficient(Section& section) {
  Quantity kv = section.quantity("kv");
  if (!section.has("cv")) return kv;
  if (section.has("kv")) {
    section.report("cv", "kv and cv are both given", "one of them", "leave one out; Cv = 1.156 Kv");
    return kv;
  }
  Quantity cv = section.quantity("cv");
  // Q = Cv sqrt(dp/psi) gpm = Kv sqrt(dp/bar) m3/h: both are held as the flow in m3/s at 1 bar.
  if (cv.given()) scale(cv, 1.0 / std::sqrt(bar_per_psi));
  return cv;
}

ValveLaw read_law_table(Section& section, const toml::array& rows) {
  ValveLaw law;
  law.kind = ValveLawKind::table;
  const KeyRule& travel = key_rule("valve", "law travel");
  const KeyRule& open_share = key_rule("valve", "law share");
  for (const auto& item : rows) {
    const auto* row = item.as_array();
    if (row == nullptr || row->size() != 2) {
      section.context().report(place_of(item),
                               section.path("law"),
                               "a point of the valve's law is not a pair",
                               written(item),
                               "[\"50 %\", 0.28]",
                               "write travel and share");
      return {};
    }
    const Quantity position = read_quantity(section.context(), (*row)[0], travel, "", section.path("law"));
    const Quantity share = read_quantity(section.context(), (*row)[1], open_share, "", section.path("law"));
    if (!position.given() || !share.given()) return {};
    if (!law.points.empty() && !(position.value > law.points.back().first)) {
      section.context().report(place_of((*row)[0]),
                               section.path("law"),
                               "the travel does not rise from row to row",
                               written((*row)[0]),
                               "rising travel",
                               "sort the rows");
      return {};
    }
    law.points.emplace_back(position.value, share.value);
  }
  if (law.points.size() < 2 || law.points.front().first != 0.0 || law.points.back().first != 1.0) {
    section.report("law",
                   "the valve's law does not reach from 0 % to 100 % of the travel",
                   "points at 0 % and at 100 %",
                   "add the missing end");
    return {};
  }
  if (!(law.points.back().second > 0.0))
    section.report("law", "the valve is shut at full travel", "a share above 0 at 100 %", "correct the last point");
  return law;
}

ValveLaw read_law_words(Section& section, const std::string& words) {
  const std::size_t space = words.rfind(' ');
  const std::string head = words.substr(0, space);
  const auto number = [&]() -> std::optional<double> {
    if (space == std::string::npos) return std::nullopt;
    double value = 0.0;
    const auto [end, error] = std::from_chars(words.data() + space + 1, words.data() + words.size(), value);
    if (error != std::errc() || end != words.data() + words.size() || !std::isfinite(value)) return std::nullopt;
    return value;
  }();
  if (words == "linear") return {};
  if (words == "quick opening") return {ValveLawKind::quick_opening, 1.0, {}};
  if (head == "power" && number && *number > 0.0) return {ValveLawKind::power, *number, {}};
  if (head == "equal percentage" && number && *number > 1.0) return {ValveLawKind::equal_percentage, *number, {}};
  section.report("law",
                 "the valve's law is not known",
                 "\"linear\", \"power 1.5\", \"equal percentage 50\", \"quick opening\" or a table",
                 "write one of these, with its number where it has one (power above 0, range above 1)");
  return {};
}

ValveLaw read_law(Section& section) {
  const toml::node* node = section.ask("law");
  if (node == nullptr) return {};
  if (const auto* rows = node->as_array()) return read_law_table(section, *rows);
  if (const auto* words = node->as_string()) {
    if (!words->get().ends_with(".csv")) return read_law_words(section, words->get());
    ValveLaw law;
    const Table table = read_table(section, "law", "law travel", "law share");
    law.kind = ValveLawKind::table;
    for (const auto& [travel, share] : table.rows) law.points.emplace_back(travel.value, share.value);
    if (law.points.size() < 2 || law.points.front().first != 0.0 || law.points.back().first != 1.0) {
      if (table.given())
        section.report("law",
                       "the valve's law does not reach from 0 % to 100 % of the travel",
                       "points at 0 % and at 100 %",
                       "add the missing end");
      return {};
    }
    return law;
  }
  section.report("law",
                 "a valve's law is expected here",
                 "\"linear\" or [[\"0 %\", 0], [\"100 %\", 1]]",
                 "write a word or a table");
  return {};
}

Fitting read_fitting(Context& context, const toml::table& table, const std::string& pipe, std::size_t index) {
  Fitting fitting;
  const auto* name = table.get_as<std::string>("name");
  fitting.name = name != nullptr ? name->get() : std::to_string(index + 1);
  fitting.place = place_of(table);
  Section section(context, table, "pipe", pipe, "pipe/" + pipe, "fitting ", "fitting " + fitting.name + " ");
  (void)section.ask("name");
  if (table.get("name") != nullptr && name == nullptr)
    section.report("name", "a text is expected here", "name = \"bend 90\"", "put the name in quotes");
  fitting.count = section.quantity_or("count", "1");
  fitting.k = section.quantity("k");
  fitting.equivalent_length = section.quantity("equivalent_length");
  fitting.at = section.quantity("at");
  if (!section.has("k") && !section.has("equivalent_length"))
    context.report(fitting.place,
                   section.path("k"),
                   fmt::format("the fitting \"{}\" has no loss", fitting.name),
                   "",
                   "k = 0.3 or equivalent_length = \"3 m\"",
                   "add one of them");
  section.finish();
  return fitting;
}

void read_fittings(Section& section, Pipe& pipe) {
  const toml::node* node = section.ask("fittings");
  if (node == nullptr) return;
  const auto* list = node->as_array();
  if (list == nullptr) {
    section.report("fittings",
                   "a list of fittings is expected here",
                   "[{ name = \"bend 90\", count = 4, k = 0.3 }]",
                   "put the fittings in square brackets");
    return;
  }
  for (std::size_t i = 0; i < list->size(); ++i) {
    const auto* table = (*list)[i].as_table();
    if (table == nullptr)
      section.context().report(place_of((*list)[i]),
                               section.path("fittings"),
                               "a fitting is a table",
                               written((*list)[i]),
                               "{ name = \"bend 90\", count = 4, k = 0.3 }",
                               "put its words in curly brackets");
    else
      pipe.fittings.push_back(read_fitting(section.context(), *table, pipe.name, i));
  }
}

void read_creep(Section& section, Pipe& pipe) {
  const toml::node* node = section.ask("creep");
  if (node == nullptr) return;
  const auto* list = node->as_array();
  if (list == nullptr || list->empty() || !list->is_homogeneous(toml::node_type::table)) {
    section.report("creep",
                   "a list of creep elements is expected here",
                   "[{ compliance = \"1.2e-10 1/Pa\", time = \"0.05 s\" }]",
                   "put each element in curly brackets");
    return;
  }
  for (std::size_t i = 0; i < list->size(); ++i) {
    Section inner(section.context(),
                  *(*list)[i].as_table(),
                  "pipe",
                  pipe.name,
                  section.path(),
                  "creep ",
                  fmt::format("creep {} ", i + 1));
    CreepElement element{inner.quantity("compliance"), inner.quantity("time")};
    if (!inner.has("compliance") || !inner.has("time"))
      section.context().report(inner.place(),
                               inner.path("compliance"),
                               "a creep element needs compliance and time",
                               "",
                               "{ compliance = \"1.2e-10 1/Pa\", time = \"0.05 s\" }",
                               "add the missing one");
    pipe.creep.push_back(std::move(element));
    inner.finish();
  }
}

void read_lining(Section& section, Pipe& pipe) {
  const toml::node* node = section.ask("lining");
  if (node == nullptr) return;
  const auto* table = node->as_table();
  if (table == nullptr) {
    section.report("lining",
                   "a lining is a table",
                   "{ thickness = \"6 mm\", modulus = \"25 GPa\" }",
                   "put its words in curly brackets");
    return;
  }
  Section inner(section.context(), *table, "pipe", pipe.name, section.path(), "lining ", "lining ");
  pipe.lining_thickness = inner.quantity("thickness");
  pipe.lining_modulus = inner.quantity("modulus");
  if (!inner.has("thickness"))
    section.context().report(inner.place(),
                             inner.path("thickness"),
                             "the lining has no thickness",
                             "",
                             "thickness = \"6 mm\"",
                             "add it; a lining narrows the bore");
  inner.finish();
}

void read_profile(Section& section, Pipe& pipe) {
  Table table = read_table(section, "profile", "profile chainage", "profile elevation");
  if (!table.given()) return;
  auto& rows = table.rows;
  const auto complain =
      [&](std::size_t row, const std::string& what, const std::string& bound, const std::string& hint) {
        section.context().report(
            rows[row].first.place, rows[row].first.path, what, rows[row].first.written, bound, hint);
      };
  if (rows.size() < 2) return complain(0, "the profile has one point", "at least the two ends", "add the other end");
  if (rows.front().first.value != 0.0)
    return complain(0,
                    "the profile does not begin at chainage 0",
                    "\"0 m\" at the pipe's `from` end",
                    "count the chainage from the beginning of this pipe");
  for (std::size_t i = 1; i < rows.size(); ++i)
    if (!(rows[i].first.value > rows[i - 1].first.value))
      return complain(
          i, "the chainage does not rise from point to point", "above " + rows[i - 1].first.written, "sort the points");
  const double end = rows.back().first.value;
  if (!pipe.length.given() && pipe.length.same_as.empty()) {
    pipe.length = rows.back().first;
    pipe.length.written = pipe.length.written + " (end of the profile)";
    pipe.length.name = pipe.name + " length";
    pipe.length.path = section.path("length");
  } else if (pipe.length.given() && std::abs(pipe.length.value - end) > 1e-6 * end) {
    return complain(rows.size() - 1,
                    "the profile does not end at the pipe's length",
                    "\"" + pipe.length.written + "\"",
                    "correct the length or the last point");
  }
  pipe.profile = rows;
  pipe.profile_table = std::move(table);
  pipe.profile_table.rows.clear();
}

void warn_of_outside_as_bore(Context& context, const Pipe& pipe) {
  // Outside diameters of steel pipe by ASME B36.10 and EN 10220 [mm]; from memory, used for a remark only.
  static constexpr double outside_mm[] = {168.3, 219.1, 273.0,  273.1,  323.8,  323.9, 355.6, 406.4,
                                          457.0, 508.0, 559.0,  610.0,  660.0,  711.0, 762.0, 813.0,
                                          864.0, 914.0, 1016.0, 1067.0, 1118.0, 1219.0};
  if (!pipe.bore.given() || !pipe.wall.given() || pipe.outside.given() || pipe.material != "steel") return;
  for (const double mm : outside_mm)
    if (std::abs(pipe.bore.value * 1000.0 - mm) < 0.06)
      context.warnings.push_back(
          fmt::format("pipe {}: the bore {} is also a standard outside diameter of steel pipe; if it is the outside, "
                      "write outside = \"{} mm\"",
                      pipe.name,
                      pipe.bore.written,
                      base::significant(mm, 5)));
}

Pipe read_pipe(Context& context, const toml::table& table, std::size_t index) {
  Pipe pipe;
  pipe.name = element_name(context, table, "pipe", index);
  Section section(context, table, "pipe", pipe.name, "pipe/" + pipe.name);
  pipe.place = section.place("name");
  (void)section.ask("name");
  pipe.from = section.needed_text("from", "name the place the pipe begins at");
  pipe.to = section.needed_text("to", "name the place the pipe ends at");
  pipe.length = section.quantity("length");
  read_profile(section, pipe);
  pipe.outside = section.quantity("outside");
  pipe.wall = section.quantity("wall");
  read_lining(section, pipe);
  pipe.bore = section.quantity("bore");
  pipe.material = section.text("material");
  pipe.modulus = section.quantity("modulus");
  pipe.poisson = section.quantity("poisson");
  pipe.joint_given = section.has("joint");
  pipe.joint = section.word<Joint>("joint",
                                   {{"anchored", Joint::anchored},
                                    {"upstream anchored", Joint::upstream_anchored},
                                    {"expansion joints", Joint::expansion_joints}},
                                   Joint::anchored);
  pipe.restraint_factor = section.quantity("restraint_factor");
  pipe.wall_formula = section.word<WallFormula>(
      "wall_formula", {{"thick", WallFormula::thick}, {"thin", WallFormula::thin}}, WallFormula::thick);
  pipe.wave_speed_change = section.quantity("wave_speed_change");
  pipe.wave_speed = section.quantity("wave_speed");
  pipe.wave_speed_scatter = section.quantity_or("wave_speed_scatter", "none");
  pipe.roughness = section.quantity("roughness");
  pipe.hazen_williams = section.quantity("hazen_williams");
  pipe.manning = section.quantity("manning");
  pipe.friction_factor = section.quantity("friction_factor");
  read_fittings(section, pipe);
  pipe.rating = section.quantity("rating");
  read_creep(section, pipe);
  (void)section.ask("friction_scatter");  // read with [friction]: it belongs to the scatter of all pipes
  section.finish();
  warn_of_outside_as_bore(context, pipe);
  return pipe;
}

CheckValveRule read_check_rule(Section& section) {
  CheckValveRule rule;
  const toml::node* node = section.ask("check_valve");
  if (node == nullptr) {
    rule.guess = true;
    return rule;
  }
  const auto* table = node->as_table();
  if (table == nullptr) {
    rule.kind = section.word<CheckValveKind>(
        "check_valve", {{"ideal", CheckValveKind::ideal}, {"none", CheckValveKind::none}}, CheckValveKind::ideal);
    return rule;
  }
  Section inner(section.context(), *table, "pump", section.element(), section.path(), "check_valve ", "check_valve ");
  rule.reverse_velocity = inner.quantity("reverse_velocity");
  rule.bore = inner.quantity("bore");
  rule.delay = inner.quantity("delay");
  rule.kind = inner.has("reverse_velocity") ? CheckValveKind::reverse_velocity : CheckValveKind::delay;
  if (inner.has("reverse_velocity") == inner.has("delay"))
    section.report("check_valve",
                   "the check valve needs reverse_velocity or delay, not both",
                   "{ reverse_velocity = \"0.3 m/s\", bore = \"300 mm\" } or { delay = \"0.2 s\" }",
                   "write one of the two");
  inner.finish();
  return rule;
}

void read_inertia(Section& section, Pump& pump) {
  int given = 0;
  for (const std::string label : {"mr2", "gd2", "wr2"}) {
    const std::string key = "inertia_" + label;
    if (!section.has(key)) continue;
    if (++given > 1) {
      section.report(
          key, "the inertia is given twice", "one of inertia_mr2, inertia_gd2, inertia_wr2", "leave the others out");
      continue;
    }
    pump.inertia = section.quantity(key);
    pump.inertia_label = label;
    if (label == "gd2" && pump.inertia.given()) scale(pump.inertia, 0.25);  // GD2 = 4 I (weight x diameter squared)
  }
}

void read_characteristic(Section& section, Pump& pump) {
  const toml::node* node = section.ask("characteristic");
  if (node == nullptr) return;
  const auto* words = node->as_string();
  if (node->is_array() || (words != nullptr && words->get().ends_with(".csv"))) {
    ThreeColumns table = read_three_columns(section, "characteristic");
    pump.characteristic = Characteristic::table;
    pump.suter.file = table.file;
    pump.suter.text = table.text;
    pump.suter.place = place_of(*node);
    for (std::size_t i = 0; i < table.first.size(); ++i) {
      std::pair<Quantity, Quantity> row;
      row.first.value = table.first[i];
      row.second.value = table.second[i];
      pump.suter.rows.push_back(std::move(row));
    }
    pump.suter_torque = std::move(table.third);
    return;
  }
  pump.characteristic = section.word<Characteristic>(
      "characteristic",
      {{"by specific speed", Characteristic::by_specific_speed}, {"none", Characteristic::none}},
      Characteristic::by_specific_speed);
}

void read_rated(Section& section, Pump& pump) {
  const toml::node* node = section.ask("rated");
  if (node == nullptr) return;
  const auto* table = node->as_table();
  if (table == nullptr) {
    section.report("rated",
                   "the rated point is a table",
                   "{ flow = \"175 L/s\", head = \"60 m\" }",
                   "put flow and head in curly brackets");
    return;
  }
  Section inner(section.context(), *table, "pump", pump.name, section.path(), "rated ", "rated ");
  pump.rated_flow = inner.quantity("flow");
  pump.rated_head = inner.quantity("head");
  if (!inner.has("flow") || !inner.has("head"))
    section.report("rated",
                   "the rated point needs flow and head",
                   "{ flow = \"175 L/s\", head = \"60 m\" }",
                   "add the missing one");
  inner.finish();
}

void check_rising(Section& section, std::string_view key, Table& table) {
  for (std::size_t i = 1; i < table.rows.size(); ++i) {
    const auto& [left, right] = table.rows[i];
    if (left.value > table.rows[i - 1].first.value) continue;
    section.context().report(left.place,
                             left.path,
                             fmt::format("the first column of `{}` does not rise from row to row", key),
                             left.written,
                             "above " + table.rows[i - 1].first.written,
                             "sort the rows");
    table.rows.clear();
    return;
  }
  if (table.rows.size() == 1) section.report(key, "the table has one row", "at least two points", "add the others");
}

Pump read_pump(Context& context, const toml::table& table, std::size_t index) {
  Pump pump;
  pump.name = element_name(context, table, "pump", index);
  Section section(context, table, "pump", pump.name, "pump/" + pump.name);
  pump.place = section.place("name");
  (void)section.ask("name");
  pump.from = section.needed_text("from", "name the place on the suction side");
  pump.to = section.needed_text("to", "name the place on the delivery side");
  pump.count = static_cast<int>(section.whole("count", 1, 1, 1000));
  pump.curve = read_table(section, "curve", "curve flow", "curve head");
  check_rising(section, "curve", pump.curve);
  pump.head_scatter = section.quantity_or("head_scatter", "none");
  pump.efficiency = section.quantity("efficiency");
  pump.speed = section.quantity("speed");
  read_inertia(section, pump);
  pump.shut_off_torque = section.quantity("shut_off_torque");
  pump.torque = read_table(section, "torque", "torque flow", "torque share");
  check_rising(section, "torque", pump.torque);
  pump.check_valve = read_check_rule(section);
  read_rated(section, pump);
  read_characteristic(section, pump);
  section.finish();
  return pump;
}

}  // namespace

void read_places(Root& root, Case& c) {
  std::size_t index = 0;
  for (const toml::table* table : root.list("basin")) {
    Basin basin;
    basin.name = element_name(root.context(), *table, "basin", index++);
    Section section(root.context(), *table, "basin", basin.name, "basin/" + basin.name);
    basin.place = section.place("name");
    (void)section.ask("name");
    basin.level = section.quantity("level");
    basin.level_table = read_table(section, "level_table", "level_table time", "level_table level");
    check_rising(section, "level_table", basin.level_table);
    basin.surface_pressure = section.quantity_or("surface_pressure", "0 bar g");
    if (!section.has("level") && !section.has("level_table"))
      root.context().report(basin.place,
                            section.path("level"),
                            fmt::format("the basin \"{}\" has no level", basin.name),
                            "",
                            "level = \"100 m\" or level_table = \"FILE.csv\"",
                            "add the level above the datum of the case");
    section.finish();
    c.basins.push_back(std::move(basin));
  }
  index = 0;
  for (const toml::table* table : root.list("place")) {
    PlaceEntry place;
    place.name = element_name(root.context(), *table, "place", index++);
    Section section(root.context(), *table, "place", place.name, "place/" + place.name);
    place.place = section.place("name");
    (void)section.ask("name");
    place.elevation = section.quantity("elevation");
    place.head = section.quantity("head");
    section.finish();
    c.places.push_back(std::move(place));
  }
}

void read_pipes(Root& root, Case& c) {
  std::size_t index = 0;
  for (const toml::table* table : root.list("pipe")) c.pipes.push_back(read_pipe(root.context(), *table, index++));
}

void read_valves(Root& root, Case& c) {
  std::size_t index = 0;
  for (const toml::table* table : root.list("valve")) {
    Valve valve;
    valve.name = element_name(root.context(), *table, "valve", index++);
    Section section(root.context(), *table, "valve", valve.name, "valve/" + valve.name);
    valve.place = section.place("name");
    (void)section.ask("name");
    valve.from = section.needed_text("from", "name the place on the upstream side");
    valve.to = section.needed_text("to", "name the place behind the valve, or \"air\" for free discharge");
    valve.kv = read_flow_coefficient(section);
    valve.k = section.quantity("k");
    valve.bore = section.quantity("bore");
    valve.area = section.quantity("area");
    valve.discharge_coefficient = section.quantity("discharge_coefficient");
    valve.flow = section.quantity("flow");
    valve.law = read_law(section);
    valve.near_seat = section.quantity_or("near_seat", "none");
    valve.opening = section.quantity_or("opening", "100 %");
    section.finish();
    c.valves.push_back(std::move(valve));
  }
}

void read_pumps(Root& root, Case& c) {
  std::size_t index = 0;
  for (const toml::table* table : root.list("pump")) c.pumps.push_back(read_pump(root.context(), *table, index++));
  index = 0;
  for (const toml::table* table : root.list("check_valve")) {
    CheckValve check;
    check.name = element_name(root.context(), *table, "check_valve", index++);
    Section section(root.context(), *table, "check_valve", check.name, "check_valve/" + check.name);
    check.place = section.place("name");
    (void)section.ask("name");
    check.from = section.needed_text("from", "name the place the flow comes from");
    check.to = section.needed_text("to", "name the place the flow goes to");
    check.kv = read_flow_coefficient(section);
    check.k = section.quantity("k");
    check.bore = section.quantity("bore");
    check.rule.reverse_velocity = section.quantity("reverse_velocity");
    check.rule.delay = section.quantity("delay");
    if (section.has("reverse_velocity") && section.has("delay"))
      section.report("delay", "reverse_velocity and delay are both given", "one of them", "leave one out");
    if (section.has("reverse_velocity")) check.rule.kind = CheckValveKind::reverse_velocity;
    if (section.has("delay")) check.rule.kind = CheckValveKind::delay;
    section.finish();
    c.check_valves.push_back(std::move(check));
  }
}

void read_draw_offs(Root& root, Case& c) {
  std::size_t index = 0;
  for (const toml::table* table : root.list("draw_off")) {
    DrawOff draw_off;
    draw_off.name = element_name(root.context(), *table, "draw_off", index++);
    Section section(root.context(), *table, "draw_off", draw_off.name, "draw_off/" + draw_off.name);
    draw_off.place = section.place("name");
    (void)section.ask("name");
    draw_off.at = section.needed_text("at", "name the place it stands at");
    draw_off.flow = section.quantity("flow");
    if (!section.has("flow"))
      root.context().report(draw_off.place,
                            section.path("flow"),
                            fmt::format("the draw-off \"{}\" has no flow", draw_off.name),
                            "",
                            "flow = \"1500 gpm\"",
                            "add the flow out of the line; a negative one is an inflow");
    draw_off.pressure_dependent = section.flag("pressure_dependent", false);
    section.finish();
    c.draw_offs.push_back(std::move(draw_off));
  }
}

void read_protection(Root& root, Case& c) {
  std::size_t index = 0;
  for (const toml::table* table : root.list("air_vessel")) {
    AirVessel vessel;
    vessel.name = element_name(root.context(), *table, "air_vessel", index++);
    Section section(root.context(), *table, "air_vessel", vessel.name, "air_vessel/" + vessel.name);
    vessel.place = section.place("name");
    (void)section.ask("name");
    vessel.at = section.needed_text("at", "name the place it stands at");
    vessel.gas_volume = section.quantity("gas_volume");
    vessel.precharge = section.quantity("precharge");
    vessel.shell_volume = section.quantity("shell_volume");
    vessel.area = section.quantity("area");
    vessel.exponent = section.quantity("exponent");
    vessel.water_level = section.quantity("water_level");
    vessel.throttle_in = section.quantity("throttle_in");
    vessel.throttle_out = section.quantity("throttle_out");
    vessel.connection_bore = section.quantity("connection_bore");
    section.finish();
    c.air_vessels.push_back(std::move(vessel));
  }
  index = 0;
  for (const toml::table* table : root.list("surge_tank")) {
    SurgeTank tank;
    tank.name = element_name(root.context(), *table, "surge_tank", index++);
    Section section(root.context(), *table, "surge_tank", tank.name, "surge_tank/" + tank.name);
    tank.place = section.place("name");
    (void)section.ask("name");
    tank.at = section.needed_text("at", "name the place it stands at");
    tank.area = section.quantity("area");
    if (const toml::node* node = section.ask("throttle")) {
      if (const auto* inner_table = node->as_table()) {
        Section inner(root.context(), *inner_table, "surge_tank", tank.name, section.path(), "throttle ", "throttle ");
        tank.throttle_bore = inner.quantity("bore");
        tank.throttle_k = inner.quantity("k");
        inner.finish();
      } else {
        section.report(
            "throttle", "the throttle is a table", "{ bore = \"400 mm\", k = 1.5 }", "put its words in curly brackets");
      }
    }
    tank.overflow_level = section.quantity("overflow_level");
    tank.level = section.quantity("level");
    tank.one_way = section.flag("one_way", false);
    section.finish();
    c.surge_tanks.push_back(std::move(tank));
  }
  index = 0;
  for (const toml::table* table : root.list("relief")) {
    Relief relief;
    relief.name = element_name(root.context(), *table, "relief", index++);
    Section section(root.context(), *table, "relief", relief.name, "relief/" + relief.name);
    relief.place = section.place("name");
    (void)section.ask("name");
    relief.at = section.needed_text("at", "name the place it protects");
    relief.to = section.text("to");
    if (relief.to.empty()) relief.to = "air";
    relief.set_pressure = section.quantity("set_pressure");
    relief.full_open_over = section.quantity("full_open_over");
    relief.kv = read_flow_coefficient(section);
    relief.area = section.quantity("area");
    relief.discharge_coefficient = section.quantity("discharge_coefficient");
    relief.reset = section.quantity("reset");
    relief.back_pressure = section.quantity("back_pressure");
    relief.lag = section.quantity("lag");
    section.finish();
    c.reliefs.push_back(std::move(relief));
  }
  index = 0;
  for (const toml::table* table : root.list("air_valve")) {
    AirValve valve;
    valve.name = element_name(root.context(), *table, "air_valve", index++);
    Section section(root.context(), *table, "air_valve", valve.name, "air_valve/" + valve.name);
    valve.place = section.place("name");
    (void)section.ask("name");
    valve.at = section.needed_text("at", "name the place it stands at");
    valve.in_bore = section.quantity("in_bore");
    valve.out_bore = section.quantity("out_bore");
    valve.discharge_coefficient = section.quantity("discharge_coefficient");
    section.finish();
    c.air_valves.push_back(std::move(valve));
  }
}

}  // namespace headband::casefile
