// SPDX-License-Identifier: MIT
#include "core/base/units.hpp"
#include "core/casefile/parts.hpp"
#include "core/casefile/quantity_text.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <array>

namespace headband::casefile {
namespace {

using namespace network;

struct KindWord {
  std::string_view word;
  AnswerKind kind;
};
constexpr std::array kinds{
    KindWord{"pressure_drop", AnswerKind::pressure_drop},
    KindWord{"flow", AnswerKind::flow},
    KindWord{"head", AnswerKind::head},
    KindWord{"highest_pressure", AnswerKind::highest_pressure},
    KindWord{"lowest_pressure", AnswerKind::lowest_pressure},
    KindWord{"velocity", AnswerKind::velocity},
};

bool carries_bound(AnswerKind kind) {
  return kind == AnswerKind::highest_pressure || kind == AnswerKind::lowest_pressure || kind == AnswerKind::velocity;
}

/// One spot or, for a pressure drop, two.
std::vector<Spot> read_spots(Context& context, const toml::node& node, const std::string& path, AnswerKind kind) {
  std::vector<Spot> spots;
  if (const auto* list = node.as_array()) {
    if (kind != AnswerKind::pressure_drop || list->size() != 2) {
      context.report(place_of(node),
                     path,
                     kind == AnswerKind::pressure_drop ? "a pressure drop lies between two places"
                                                       : "one place or pipe is expected here",
                     written(node),
                     kind == AnswerKind::pressure_drop ? "[\"upper tank\", \"valve chamber\"]" : "\"valve chamber\"",
                     "correct the list");
      return {};
    }
    for (const auto& item : *list) spots.push_back(read_spot(context, item, path));
  } else {
    spots.push_back(read_spot(context, node, path));
  }
  return spots;
}

std::string name_of(const AnswerRequest& answer) {
  std::string name;
  for (const KindWord& k : kinds)
    if (k.kind == answer.kind) name = k.word;
  if (answer.where.empty()) return name + " everywhere";
  for (std::size_t i = 0; i < answer.where.size(); ++i) name += (i == 0 ? " " : ", ") + answer.where[i].written;
  return name;
}

/// Repeats get ` 2`, ` 3`.
template <class Name>
void number_repeats(std::vector<Name*>& names) {
  std::map<std::string, int> seen;
  for (Name* name : names) {
    const int count = ++seen[*name];
    if (count > 1) *name = fmt::format("{} {}", *name, count);
  }
}

void read_answers(Section& section, BandRequest& band) {
  const toml::node* node = section.ask("answers");
  if (node == nullptr) return;
  const auto* list = node->as_array();
  const std::string form =
      "[{ pressure_drop = [\"upper tank\", \"valve chamber\"], name = \"drop\" }, { flow = \"main\" }]";
  if (list == nullptr) {
    section.report("answers", "a list of answers is expected here", form, "put the answers in square brackets");
    return;
  }
  for (const auto& item : *list) {
    const auto* table = item.as_table();
    if (table == nullptr) {
      section.context().report(place_of(item),
                               "band/answers",
                               "an answer is a table",
                               written(item),
                               "{ flow = \"main\" }",
                               "put its words in curly brackets");
      continue;
    }
    Section inner(section.context(), *table, "band", "", "band/answers");
    AnswerRequest answer;
    answer.place = inner.place();
    answer.name = inner.text("name");
    int given = 0;
    for (const KindWord& k : kinds) {
      const toml::node* where = inner.ask(k.word);
      if (where == nullptr || ++given > 1) continue;
      answer.kind = k.kind;
      const auto* text = where->as_string();
      if (!(carries_bound(k.kind) && text != nullptr && text->get() == "everywhere"))
        answer.where = read_spots(section.context(), *where, inner.path(k.word), k.kind);
    }
    if (given != 1)
      section.context().report(answer.place,
                               inner.path(),
                               given == 0 ? "the answer asks for nothing" : "the answer asks for two things",
                               "",
                               "one of pressure_drop, flow, head, highest_pressure, lowest_pressure, velocity",
                               "write one answer in each pair of brackets");
    inner.finish();
    if (answer.name.empty()) answer.name = name_of(answer);
    band.answers.push_back(std::move(answer));
  }
  std::vector<std::string*> names;
  names.reserve(band.answers.size());
  for (AnswerRequest& answer : band.answers) names.push_back(&answer.name);
  number_repeats(names);
}

double read_until(Section& section) {
  const std::string text = section.text("until");
  static constexpr std::string_view tail = " of the band";
  if (text.ends_with(tail)) {
    const ParsedQuantity share =
        parse_quantity(std::string_view(text).substr(0, text.size() - tail.size()), key_rule("limit", "at_most"));
    if (!share.problem && share.quantity.value > 0.0 && share.quantity.value < 1.0) return share.quantity.value;
  }
  section.report("until",
                 "the stop rule is not understood",
                 "\"1 % of the band\"",
                 "write the share of the band its ends may still move by");
  return 0.0;
}

void bound_to_gauge(Section& section, std::string_view key, Quantity& bound, const Case& c) {
  if (!bound.given() || bound.dimension != base::Dimension::pressure || bound.gauge || !c.site.atmosphere.given())
    return;
  if (!c.site.atmosphere.exact()) {
    section.report(key,
                   "an absolute limit has no fixed gauge pressure where the atmosphere is uncertain",
                   "a gauge pressure, \"12 bar g\", or an exact atmosphere",
                   "write the limit as gauge pressure, or the atmosphere without a spread");
    return;
  }
  bound.value -= c.site.atmosphere.value;
  bound.gauge = true;
}

void read_rule(Section& section, const toml::table& table, Limit& limit) {
  limit.rule = section.word<std::string>("rule",
                                         {{"110 % of design pressure", "110 % of design pressure"},
                                          {"PFA PMA PEA", "PFA PMA PEA"},
                                          {"recurring and occasional surge", "recurring and occasional surge"},
                                          {"incidental pressure", "incidental pressure"},
                                          {"collapse of the bare ring", "collapse of the bare ring"},
                                          {"hoop stress", "hoop stress"}},
                                         "");
  limit.edition = section.text("edition");
  for (const auto& [key, node] : table) {
    const std::string name(key.str());
    if (name == "name" || name == "rule" || name == "edition" || name == "where" || name == "at_most" ||
        name == "confidence")
      continue;
    KeyRule rule{.section = "limit",
                 .key = key.str(),
                 .dimension = base::Dimension::number,
                 .spread = SpreadUse::refused,
                 .example = "16 bar g",
                 .instead = "a limit is not sampled: write the number alone"};
    if (const auto* text = node.as_string()) {  // the unit tells the kind
      const std::size_t unit = text->get().find_first_of(" %");
      if (unit != std::string::npos)
        if (const auto found =
                base::find_unit(std::string_view(text->get()).substr(text->get()[unit] == ' ' ? unit + 1 : unit)))
          for (int d = 0; d <= static_cast<int>(base::Dimension::year); ++d)
            if (const auto dimension = static_cast<base::Dimension>(d); base::kind_of(dimension) == found->unit.kind) {
              rule.dimension =
                  found->unit.kind == base::UnitKind::pressure && found->reference == base::PressureReference::unnamed
                      ? base::Dimension::modulus
                      : dimension;
              break;
            }
    }
    (void)section.ask(name);
    limit.rule_numbers.emplace_back(name, read_quantity(section.context(), node, rule, "", section.path(name)));
  }
}

void read_plain_limit(Section& section, const Case& c, Limit& limit) {
  int given = 0;
  for (const KindWord& k : kinds) {
    const toml::node* node = section.ask(k.word);
    if (node == nullptr) continue;
    if (++given > 1) {
      section.report(k.word,
                     "a limit has one subject",
                     "one of pressure_drop, flow, head, highest_pressure, lowest_pressure, velocity",
                     "write a [[limit]] for each");
      continue;
    }
    limit.subject.kind = k.kind;
    if (carries_bound(k.kind)) {
      limit.bound = section.quantity(k.word);
      limit.not_over = k.kind != AnswerKind::lowest_pressure;
      bound_to_gauge(section, k.word, limit.bound, c);
      continue;
    }
    limit.subject.where = read_spots(section.context(), *node, section.path(k.word), k.kind);
    const std::string rule = fmt::format("bound {}", k.word);
    const bool over = section.has("not_over");
    const bool under = section.has("not_under");
    if (over == under) {
      section.report(k.word,
                     over ? "the limit has two bounds" : "the limit has no bound",
                     "not_over = \"…\" or not_under = \"…\"",
                     "write one of the two");
      continue;
    }
    limit.not_over = over;
    limit.bound = section.quantity(over ? "not_over" : "not_under", rule);
  }
  for (const std::string_view key : {"not_over", "not_under"})
    if (section.has(key) && carries_bound(limit.subject.kind) && given > 0)
      section.report(key, "this limit carries its bound itself", "highest_pressure = \"12 bar g\"", "leave it out");
  if (const toml::node* where = section.ask("where")) {
    if (!carries_bound(limit.subject.kind) && given > 0)
      section.report("where", "this limit names its place itself", "flow = \"main\"", "leave `where` out");
    else
      limit.subject.where = read_spots(section.context(), *where, section.path("where"), limit.subject.kind);
  }
  if (given == 0)
    section.context().report(limit.place,
                             section.path(),
                             "the limit bounds nothing",
                             "",
                             "one of highest_pressure, lowest_pressure, velocity, pressure_drop, flow, head, rule",
                             "add what is limited");
}

void keep_other(Case& c, std::string name, SourcePlace place) { c.others.push_back({std::move(name), place}); }

void read_ageing(Root& root, Case& c);
void read_tests_and_match(Root& root, Case& c);

void need_number(Section& section, std::string_view key) {
  const toml::node* node = section.ask(key);
  if (node != nullptr && !node->is_integer())
    section.report(key, "a year is a whole number", "2030", "write it without quotes");
}

void read_growth(Section& section) {
  const toml::node* node = section.ask("growth");
  if (node == nullptr) return;
  const auto* text = node->as_string();
  if (text != nullptr && (text->get() == "none" || text->get().ends_with(" of before"))) return;
  (void)section.quantity("growth");
}

void read_ageing(Root& root, Case& c) {
  const toml::table* table = root.section("ageing");
  if (table == nullptr) return;
  keep_other(c, "ageing", place_of(*table));
  Section section(root.context(), *table, "ageing", "", "ageing");
  for (const std::string_view year : {"from_year", "to_year", "now"}) need_number(section, year);
  (void)section.ask("pipes");
  (void)section.quantity("growth");
  (void)section.ask("law");
  (void)section.text("bore_loss");
  for (const auto& [key, words] : {std::pair<std::string_view, std::vector<std::string_view>>{
                                       "energy", {"price", "hours", "efficiency", "discount"}},
                                   {"keep", {"flow", "head_available"}}}) {
    const toml::node* node = section.ask(key);
    if (node == nullptr) continue;
    if (const auto* inner_table = node->as_table()) {
      Section inner(
          root.context(), *inner_table, "ageing", "", "ageing", std::string(key) + " ", std::string(key) + " ");
      for (const std::string_view word : words) (void)inner.quantity(word);
      inner.finish();
    } else {
      section.report(key, "a table is expected here", "{ … }", "put its words in curly brackets");
    }
  }
  if (const toml::node* node = section.ask("option")) {
    const auto* list = node->as_array();
    if (list == nullptr || !list->is_homogeneous(toml::node_type::table)) {
      section.report(
          "option", "options are a list of tables", "[[ageing.option]]", "write [[ageing.option]] above each option");
    } else {
      for (const auto& item : *list) {
        Section option(root.context(), *item.as_table(), "ageing.option", "", "ageing/option");
        (void)option.needed_text("name", "name the work, \"reline\"");
        need_number(option, "year");
        (void)option.quantity("cost");
        (void)option.quantity("bore");
        (void)option.quantity("roughness");
        read_growth(option);
        option.finish();
      }
    }
  }
  section.finish();
}

void read_tests_and_match(Root& root, Case& c) {
  std::size_t index = 0;
  for (const toml::table* table : root.list("test")) {
    if (index == 0) keep_other(c, "test", place_of(*table));
    Section section(root.context(), *table, "test", "", fmt::format("test/{}", ++index));
    need_number(section, "date");
    (void)section.text("pipe");
    (void)section.text("at");
    for (const std::string_view key : {"flow", "head_loss", "pressure"}) (void)section.quantity(key);
    section.finish();
  }
  const toml::table* table = root.section("match");
  if (table == nullptr) return;
  keep_other(c, "match", place_of(*table));
  Section section(root.context(), *table, "match", "", "match");
  (void)section.text("log");
  (void)section.text("at");
  for (const std::string_view key : {"clock_offset", "gauge_lag", "gauge_noise"}) (void)section.quantity(key);
  (void)section.ask("fit");
  section.finish();
}

}  // namespace

void read_surge(Root& root, Case& c) {
  const toml::table* table = root.section("surge");
  if (table == nullptr) return;
  Section section(root.context(), *table, "surge", "", "surge");
  SurgeRequest& surge = c.surge;
  surge.given = true;
  surge.place = section.place();
  surge.duration = section.quantity("duration");
  if (!section.has("duration"))
    root.context().report(surge.place,
                          "surge/duration",
                          "the run has no duration",
                          "",
                          "duration = \"60 s\"",
                          "say how long the run lasts; a few periods 4L/a at least");
  surge.time_step = section.quantity("time_step");
  surge.reaches_given = section.has("reaches");
  surge.reaches = static_cast<int>(section.whole("reaches", 40, 1, 100000));
  if (surge.reaches_given && section.has("time_step"))
    section.report("time_step", "reaches and time_step are both given", "one of them", "leave one out");
  surge.cavities = section.word<Cavities>(
      "cavities",
      {{"vapour", Cavities::vapour}, {"gas", Cavities::gas}, {"both", Cavities::both}, {"off", Cavities::off}},
      Cavities::vapour);
  surge.unsteady_friction = section.word<bool>("unsteady_friction", {{"off", false}, {"on", true}}, false);
  surge.unsteady_each_step =
      section.word<bool>("unsteady_weighting", {{"each step", true}, {"first flow", false}}, true);
  surge.friction_in_time = section.word<FrictionInTime>(
      "friction_in_time",
      {{"reynolds", FrictionInTime::reynolds}, {"fixed", FrictionInTime::fixed}, {"linear", FrictionInTime::linear}},
      FrictionInTime::reynolds);
  surge.grid_check = section.flag("grid_check", true);
  section.finish();
}

void read_band(Root& root, Case& c) {
  const toml::table* table = root.section("band");
  if (table == nullptr) return;
  Section section(root.context(), *table, "band", "", "band");
  BandRequest& band = c.band;
  band.given = true;
  band.place = section.place();
  band.draws = section.whole("draws", 2000, 1, 1000000000);
  band.design = section.word<Design>(
      "design",
      {{"plain", Design::plain}, {"latin hypercube", Design::latin_hypercube}, {"sobol", Design::sobol}},
      Design::sobol);
  if (section.has("until")) {
    band.until_share = read_until(section);
    if (section.has("draws")) section.report("until", "draws and until are both given", "one of them", "leave one out");
    if (band.design == Design::latin_hypercube)
      section.report("until",
                     "a latin hypercube cannot be extended until a rule is met",
                     "draws = 2000, or design = \"sobol\"",
                     "write draws, or take another design");
  }
  band.seed = static_cast<unsigned long long>(section.whole("seed", 1, 0, 9223372036854775807LL));
  band.coverage = section.plain("coverage", 0.95);
  band.confidence = section.plain("confidence", 0.95);
  read_answers(section, band);
  section.finish();
}

void read_limits(Root& root, Case& c) {
  std::size_t index = 0;
  for (const toml::table* table : root.list("limit")) {
    Limit limit;
    const auto* name = table->get_as<std::string>("name");
    limit.name = name != nullptr ? name->get() : "";
    ++index;
    const std::string words = limit.name.empty() ? std::to_string(index) : limit.name;
    Section section(root.context(), *table, "limit", words, "limit/" + words);
    limit.place = section.place();
    (void)section.text("name");
    if (section.has("rule"))
      read_rule(section, *table, limit);
    else
      read_plain_limit(section, c, limit);
    if (const toml::node* where = section.ask("where"); where != nullptr && !limit.rule.empty())
      limit.subject.where = {read_spot(root.context(), *where, section.path("where"))};
    limit.at_most = section.plain("at_most", -1.0);
    limit.confidence_given = section.has("confidence");
    limit.confidence = section.plain("confidence", c.band.given ? c.band.confidence : 0.95);
    section.finish();
    limit.subject.place = limit.place;
    if (limit.name.empty()) limit.name = limit.rule.empty() ? name_of(limit.subject) : limit.rule;
    limit.subject.name = limit.name;
    c.limits.push_back(std::move(limit));
  }
  std::vector<std::string*> names;
  names.reserve(c.limits.size());
  for (Limit& limit : c.limits) names.push_back(&limit.name);
  number_repeats(names);
  for (Limit& limit : c.limits) limit.subject.name = limit.name;
}

void read_other_verbs(Root& root, Case& c) {
  if (const toml::table* table = root.section("fastest")) {
    keep_other(c, "fastest", place_of(*table));
    Section section(root.context(), *table, "fastest", "", "fastest");
    (void)section.ask("event");
    if (const toml::node* node = section.ask("between")) {
      const auto* pair = node->as_array();
      if (pair == nullptr || pair->size() != 2)
        section.report("between",
                       "two times are expected here",
                       "[\"10 s\", \"300 s\"]",
                       "write the shortest and the longest time");
      else
        for (const auto& item : *pair)
          (void)read_quantity(root.context(), item, key_rule("fastest", "between"), "", "fastest/between");
    }
    (void)section.ask("strokes");
    (void)section.quantity("to_within");
    section.finish();
  }
  read_ageing(root, c);
  read_tests_and_match(root, c);
}

}  // namespace headband::casefile
