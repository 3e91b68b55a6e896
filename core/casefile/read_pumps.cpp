// SPDX-License-Identifier: MIT
#include "core/casefile/parts.hpp"
#include "core/casefile/tables.hpp"

#include <fmt/format.h>

namespace headband::casefile {
namespace {

using namespace network;

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

}  // namespace headband::casefile
