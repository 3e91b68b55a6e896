// SPDX-License-Identifier: MIT
#include "core/casefile/parts.hpp"
#include "core/casefile/tables.hpp"

#include <fmt/format.h>

#include <cmath>

namespace headband::casefile {

using namespace network;

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
    if (basin.level.given() && basin.level_table.given() &&
        std::abs(basin.level_table.rows.front().second.value - basin.level.value) >
            1e-9 * (1.0 + std::abs(basin.level.value)))
      section.report("level",
                     "the level is not that of the table's first row",
                     fmt::format("\"{} m\"", basin.level_table.rows.front().second.value),
                     "write the table's first level, with a spread where the whole table may be off by it");
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

namespace {

void read_air_vessels(Root& root, Case& c) {
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
}

void read_surge_tanks(Root& root, Case& c) {
  std::size_t index = 0;
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
}

void read_reliefs(Root& root, Case& c) {
  std::size_t index = 0;
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
}

void read_air_valves(Root& root, Case& c) {
  std::size_t index = 0;
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

}  // namespace

void read_protection(Root& root, Case& c) {
  read_air_vessels(root, c);
  read_surge_tanks(root, c);
  read_reliefs(root, c);
  read_air_valves(root, c);
}

}  // namespace headband::casefile
