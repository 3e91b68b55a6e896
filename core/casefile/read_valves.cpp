// SPDX-License-Identifier: MIT
#include "core/casefile/parts.hpp"
#include "core/casefile/tables.hpp"

#include <fmt/format.h>

#include <charconv>
#include <cmath>
#include <optional>

namespace headband::casefile {
namespace {

using namespace network;

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
}  // namespace

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

}  // namespace headband::casefile
