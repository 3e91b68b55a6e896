// SPDX-License-Identifier: MIT
#include "core/casefile/parts.hpp"
#include "core/casefile/quantity_text.hpp"
#include "core/casefile/tables.hpp"

#include <fmt/format.h>

namespace headband::casefile {
namespace {

using namespace network;

struct Subject {
  std::string_view key;
  EventKind kind;
  std::string_view to_rule;
};
constexpr Subject subjects[] = {
    {"valve", EventKind::move_valve, "to opening"},
    {"trip", EventKind::trip_pump, ""},
    {"start", EventKind::start_pump, ""},
    {"draw_off", EventKind::move_draw_off, "to flow"},
    {"basin", EventKind::move_basin, "to level"},
};

/// "pressure at X above P for T", "level of X below L", "flow in X below Q".
std::optional<Condition> read_condition(Section& section) {
  const std::string text = section.text("when");
  if (text.empty()) {
    if (section.has("when"))
      section.report(
          "when", "the condition is empty", "\"pressure at PLACE above 12 bar g for 2 s\"", "write the condition");
    return std::nullopt;
  }
  struct Start {
    std::string_view words;
    Condition::What what;
    std::string_view rule;
  };
  static constexpr Start starts[] = {{"pressure at ", Condition::What::pressure, "when pressure"},
                                     {"head at ", Condition::What::head, "when head"},
                                     {"level of ", Condition::What::level, "when level"},
                                     {"flow in ", Condition::What::flow, "when flow"}};
  const auto wrong = [&](const std::string& what) {
    section.report("when",
                   what,
                   "\"pressure at PLACE above 12 bar g for 2 s\"; also head at, level of, flow in; below",
                   "write the condition in this order");
    return std::nullopt;
  };
  for (const Start& start : starts) {
    if (!text.starts_with(start.words)) continue;
    Condition condition;
    condition.what = start.what;
    condition.written = text;
    std::string rest = text.substr(start.words.size());
    std::size_t side = rest.rfind(" above ");
    condition.above = side != std::string::npos;
    if (!condition.above) side = rest.rfind(" below ");
    if (side == std::string::npos) return wrong("the condition has neither above nor below");
    condition.element = rest.substr(0, side);
    std::string bound = rest.substr(side + 7);
    if (const std::size_t lasting = bound.find(" for "); lasting != std::string::npos) {
      const ParsedQuantity time = parse_quantity(bound.substr(lasting + 5), key_rule("event", "when lasting"));
      if (time.problem) return wrong("the time after 'for' is wrong: " + time.problem->what);
      condition.lasting = time.quantity;
      bound = bound.substr(0, lasting);
    }
    const ParsedQuantity parsed = parse_quantity(bound, key_rule("event", start.rule));
    if (parsed.problem) return wrong("the bound of the condition is wrong: " + parsed.problem->what);
    condition.bound = parsed.quantity;
    return condition;
  }
  return wrong("the condition is not understood");
}

void read_stroke(Section& section, Event& event, const Subject& subject) {
  event.to = section.quantity("to", subject.to_rule);
  if (section.has("travel")) {
    if (event.kind != EventKind::move_valve)
      section.report("travel", "only a valve has a travel", "to and over", "write `to` and `over`");
    const auto* rows = section.ask("travel")->as_array();
    const auto* row = rows != nullptr && !rows->empty() ? (*rows)[0].as_array() : nullptr;
    const auto* cell = row != nullptr && !row->empty() ? (*row)[0].as_string() : nullptr;
    event.travel_in_shares = row != nullptr && (cell == nullptr || cell->get().find('%') != std::string::npos);
    event.travel =
        read_table(section, "travel", event.travel_in_shares ? "travel share" : "travel time", "travel opening");
    for (std::size_t i = 1; i < event.travel.rows.size(); ++i)
      if (!(event.travel.rows[i].first.value > event.travel.rows[i - 1].first.value)) {
        section.context().report(event.travel.rows[i].first.place,
                                 event.travel.rows[i].first.path,
                                 "the travel does not rise in time",
                                 event.travel.rows[i].first.written,
                                 "above " + event.travel.rows[i - 1].first.written,
                                 "sort the rows");
        event.travel.rows.clear();
        break;
      }
    if (event.travel_in_shares && !section.has("over"))
      section.report(
          "travel", "a travel in shares needs `over`", "over = \"10 s\"", "add the time of the whole movement");
  }
  const toml::node* over = section.ask("over");
  if (over != nullptr && over->is_string() && over->as_string()->get() == "instant") {
    event.instant = true;
    if (section.has("travel")) section.report("over", "a travel is not instant", "a time", "leave `travel` out");
  } else if (over != nullptr) {
    const auto* text = over->as_string();
    const ParsedQuantity zero =
        text != nullptr ? parse_quantity(text->get(), key_rule("event", "at")) : ParsedQuantity{};
    if (text != nullptr && !zero.problem && zero.quantity.value == 0.0)
      section.report("over",
                     "a movement takes some time",
                     "above 0 s, or \"instant\"",
                     "for a sudden stop write over = \"instant\"");
    else
      event.over = section.quantity("over");
  } else if (!section.has("travel")) {
    section.context().report(section.place(),
                             section.path("over"),
                             "the movement has no time",
                             "",
                             "over = \"10 s\" or over = \"instant\"",
                             "say how long the movement takes");
  }
  if (!section.has("to") && !section.has("travel"))
    section.context().report(section.place(),
                             section.path("to"),
                             "the movement has no end",
                             "",
                             "to = \"0 %\"",
                             "say where the movement ends");
}

void read_start(Section& section, Event& event) {
  const toml::node* over = section.ask("over");
  if (over == nullptr)
    section.context().report(section.place(),
                             section.path("over"),
                             "the start of the pump has no time",
                             "",
                             "over = \"8 s\" or over = \"instant\"",
                             "say how long the pump runs up");
  else if (over->is_string() && over->as_string()->get() == "instant")
    event.instant = true;
  else
    event.over = section.quantity("over");
}

Event read_event(Context& context, const toml::table& table, std::size_t index) {
  Event event;
  const Subject* subject = nullptr;
  int given = 0;
  for (const Subject& s : subjects) {
    if (table.get(s.key) == nullptr) continue;
    ++given;
    if (subject == nullptr) subject = &s;
  }
  if (const auto* name = table.get_as<std::string>("name")) event.name = name->get();
  if (subject != nullptr)
    if (const auto* name = table.get_as<std::string>(subject->key)) event.subject = name->get();
  std::string words = event.name.empty() ? event.subject : event.name;
  if (words.empty()) words = std::to_string(index + 1);
  Section section(context, table, "event", words, "event/" + words);
  event.place = section.place();
  (void)section.text("name");
  for (const Subject& s : subjects) (void)section.text(s.key);
  if (given != 1 || event.subject.empty()) {
    context.report(event.place,
                   section.path(),
                   given == 0 ? "the event acts on nothing" : "the event acts on more than one thing",
                   "",
                   "one of valve, trip, start, draw_off, basin",
                   "name what moves; write an [[event]] for each");
    if (subject == nullptr) subject = subjects;
  }
  event.kind = subject->kind;
  event.at = section.quantity("at");
  if (section.has("when")) event.when = read_condition(section);
  if (section.has("at") == section.has("when"))
    context.report(section.place("when"),
                   section.path("at"),
                   section.has("at") ? "the event has `at` and `when`" : "the event has no time",
                   "",
                   "at = \"0 s\", or when = \"pressure at PLACE above 12 bar g\"",
                   "write one of the two");
  event.delay = section.quantity("delay");
  if (section.has("delay") && !section.has("when"))
    section.report("delay",
                   "a delay belongs to a condition",
                   "when = \"pressure at PLACE above 12 bar g\"",
                   "add the delay to `at`, or write the condition");
  const bool swings = section.has("swing");
  if (event.kind == EventKind::move_valve && swings) {
    event.kind = EventKind::swing_valve;
    event.swing = section.quantity("swing");
    event.period = section.quantity("period");
    if (!section.has("period"))
      section.report("swing", "the swing has no period", "period = \"6.22 s\"", "add the period");
  } else if (event.kind == EventKind::trip_pump || event.kind == EventKind::start_pump) {
    event.tripping = static_cast<int>(section.whole("tripping", 0, 1, 1000));
    if (event.kind == EventKind::start_pump) read_start(section, event);
  } else {
    read_stroke(section, event, *subject);
  }
  section.finish();
  return event;
}

}  // namespace

void read_events(Root& root, Case& c) {
  std::size_t index = 0;
  for (const toml::table* table : root.list("event")) c.events.push_back(read_event(root.context(), *table, index++));
}

}  // namespace headband::casefile
