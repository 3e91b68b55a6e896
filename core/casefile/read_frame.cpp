// SPDX-License-Identifier: MIT
#include "core/casefile/parts.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <charconv>
#include <cmath>
#include <optional>

namespace headband::casefile {
namespace {

using namespace network;

constexpr std::pair<std::string_view, FrictionLaw> friction_laws[] = {
    {"colebrook-white", FrictionLaw::colebrook_white},
    {"haaland", FrictionLaw::haaland},
    {"swamee-jain", FrictionLaw::swamee_jain},
    {"serghides", FrictionLaw::serghides},
    {"zigrang-sylvester", FrictionLaw::zigrang_sylvester},
    {"churchill", FrictionLaw::churchill},
    {"smooth", FrictionLaw::smooth},
    {"hazen-williams", FrictionLaw::hazen_williams},
    {"manning", FrictionLaw::manning},
    {"none", FrictionLaw::none},
};

std::optional<FrictionLaw> law_named(std::string_view name) {
  for (const auto& [word, law] : friction_laws)
    if (word == name) return law;
  return std::nullopt;
}

std::optional<double> number_of(std::string_view text) {
  double value = 0.0;
  const auto [end, error] = std::from_chars(text.data(), text.data() + text.size(), value);
  if (error != std::errc() || end != text.data() + text.size() || !std::isfinite(value)) return std::nullopt;
  return value;
}

std::vector<std::string_view> words_of(std::string_view text) {
  std::vector<std::string_view> words;
  while (!text.empty()) {
    const std::size_t end = std::min(text.find(' '), text.size());
    if (end > 0) words.push_back(text.substr(0, end));
    text.remove_prefix(std::min(end + 1, text.size()));
  }
  return words;
}

std::optional<Transition> transition_named(std::string_view text) {
  const auto words = words_of(text);
  if (words.size() == 1 && words[0] == "churchill") return Transition{Transition::Kind::churchill, 0.0, 0.0};
  if (words.size() == 2 && words[0] == "switch") {
    const auto at = number_of(words[1]);
    if (at && *at > 0.0) return Transition{Transition::Kind::sudden, *at, *at};
  }
  if (words.size() == 3 && words[0] == "blend") {
    const auto from = number_of(words[1]);
    const auto to = number_of(words[2]);
    if (from && to && *from > 0.0 && *to > *from) return Transition{Transition::Kind::blend, *from, *to};
  }
  return std::nullopt;
}

/// `{ "A" = 0.5, "B" = 0.5 }`, in file order.
template <class T, class Find>
Choice<T> weighted(Section& section, std::string_view key, const Find& find, const std::string& bound) {
  Choice<T> choice;
  const toml::table* table = section.ask(key)->as_table();
  if (table == nullptr || table->empty()) {
    section.report(key, "weighted choices are a table", bound, "write each choice with its weight");
    return choice;
  }
  std::vector<std::pair<SourcePlace, Weighted<T>>> options;
  for (const auto& [name, node] : *table) {
    const auto option = find(name.str());
    const auto weight = node.template value<double>();
    if (!option) {
      section.context().report(place_of(name),
                               section.path(key),
                               fmt::format("'{}' is not a choice here", std::string(name.str())),
                               "",
                               bound,
                               "write one of the words shown");
    } else if (!weight || node.is_string() || node.is_boolean() || !(*weight > 0.0) || !std::isfinite(*weight)) {
      section.context().report(place_of(node),
                               section.path(key),
                               fmt::format("the weight of '{}' is not a number above 0", std::string(name.str())),
                               written(node),
                               "a number above 0, such as 0.5",
                               "leave a choice without weight out");
    } else {
      options.push_back({place_of(name), {*option, *weight}});
    }
  }
  std::sort(options.begin(), options.end(), [](const auto& a, const auto& b) { return a.first < b.first; });
  for (auto& [place, option] : options) choice.options.push_back(std::move(option));
  return choice;
}

void read_laws(Section& section, Friction& friction) {
  friction.law.name = "friction law";
  friction.law.place = section.place("law");
  friction.law.options = {{FrictionLaw::colebrook_white, 1.0}};
  const std::string bound = "{ \"colebrook-white\" = 0.5, \"haaland\" = 0.5 }";
  if (section.has("law") && section.has("laws"))
    section.report("laws", "law and laws are both given", "one of them", "leave one out");
  if (section.has("laws")) {
    auto choice = weighted<FrictionLaw>(section, "laws", law_named, bound);
    friction.law.place = section.place("laws");
    if (!choice.options.empty()) friction.law.options = std::move(choice.options);
  } else if (section.has("law")) {
    friction.law.options = {{section.word<FrictionLaw>("law", friction_laws, FrictionLaw::colebrook_white), 1.0}};
  }
}

void read_transitions(Section& section, Friction& friction) {
  friction.transition.name = "friction transition";
  friction.transition.place = section.place("transition");
  friction.transition.options = {{Transition{}, 1.0}};
  const std::string bound = "\"blend 2100 4000\", \"switch 2300\" or \"churchill\"";
  if (section.has("transition") && section.has("transitions"))
    section.report("transitions", "transition and transitions are both given", "one of them", "leave one out");
  if (section.has("transitions")) {
    auto choice = weighted<Transition>(section, "transitions", transition_named, bound);
    friction.transition.place = section.place("transitions");
    if (!choice.options.empty()) friction.transition.options = std::move(choice.options);
  } else if (section.has("transition")) {
    const auto transition = transition_named(section.text("transition"));
    if (transition)
      friction.transition.options = {{*transition, 1.0}};
    else
      section.report("transition",
                     "the rule between laminar and turbulent is not understood",
                     bound,
                     "two rising Reynolds numbers for a blend, one for a switch");
  }
}

/// `shared = "per pipe"`: the same spread, drawn for each pipe; a pipe's own friction_scatter replaces it there.
void read_pipe_scatter(Root& root, Section* friction_section, Case& c) {
  Friction& friction = c.friction;
  const auto pipes = root.list("pipe");
  const bool any_own = std::any_of(
      pipes.begin(), pipes.end(), [](const toml::table* table) { return table->get("friction_scatter") != nullptr; });
  bool per_pipe = false;
  if (friction_section != nullptr && friction_section->has("shared"))
    per_pipe = friction_section->word<bool>("shared", {{"all pipes", false}, {"per pipe", true}}, false);
  friction.scatter_per_pipe = per_pipe || any_own;
  if (!friction.scatter_per_pipe) return;
  for (std::size_t i = 0; i < c.pipes.size() && i < pipes.size(); ++i) {
    Quantity scatter = friction.scatter;
    scatter.name = c.pipes[i].name + " scatter";
    scatter.path = "pipe/" + c.pipes[i].name + "/scatter";
    scatter.place = c.pipes[i].place;
    if (const toml::node* own = pipes[i]->get("friction_scatter"))
      scatter = read_quantity(root.context(), *own, key_rule("pipe", "friction_scatter"), scatter.name, scatter.path);
    friction.pipe_scatter.push_back(std::move(scatter));
  }
}

void read_together(Root& root, Case& c) {
  const toml::table* table = root.section("together");
  if (table == nullptr) return;
  Context& context = root.context();
  for (const auto& [key, node] : *table) {
    const std::string pair(key.str());
    const std::size_t comma = pair.find(',');
    const auto r = node.value<double>();
    const bool number = node.is_integer() || node.is_floating_point();
    const std::string path = "together/" + pair;
    if (comma == std::string::npos || pair.find(',', comma + 1) != std::string::npos) {
      context.report(place_of(key),
                     path,
                     "a correlation names two unknowns",
                     "\"" + pair + "\"",
                     "\"main wall, upper main wall\" = 0.7",
                     "write both names in quotes, with a comma between");
      continue;
    }
    if (!number || !r || !(*r >= -1.0 && *r <= 1.0)) {
      context.report(place_of(node),
                     path,
                     "a rank correlation is a number",
                     written(node),
                     "-1 to 1",
                     "write the number without quotes");
      continue;
    }
    Correlation correlation;
    const auto trim = [](std::string text) {
      while (text.starts_with(' ')) text.erase(0, 1);
      while (text.ends_with(' ')) text.pop_back();
      return text;
    };
    correlation.first = trim(pair.substr(0, comma));
    correlation.second = trim(pair.substr(comma + 1));
    correlation.rank_correlation = *r;
    correlation.place = place_of(key);
    context.places.emplace(path, correlation.place);
    if (correlation.first == correlation.second)
      context.report(place_of(key),
                     path,
                     "an unknown is always together with itself",
                     "\"" + pair + "\"",
                     "two different unknowns",
                     "name the other one");
    else
      c.together.push_back(std::move(correlation));
  }
  std::sort(c.together.begin(), c.together.end(), [](const Correlation& a, const Correlation& b) {
    return a.place < b.place;
  });
}

}  // namespace

void read_frame(Root& root, Case& c) {
  Context& context = root.context();
  if (const toml::table* table = root.section("about")) {
    Section section(context, *table, "about", "", "about");
    c.about.title = section.text("title");
    c.about.note = section.text("note");
    section.finish();
  }
  if (const toml::table* table = root.section("show")) {
    Section section(context, *table, "show", "", "show");
    c.show.units = section.word<base::UnitFamily>(
        "units", {{"si", base::UnitFamily::si}, {"us", base::UnitFamily::us}}, base::UnitFamily::si);
    if (const toml::node* node = section.ask("places")) {
      const auto* list = node->as_array();
      if (list == nullptr)
        section.report("places",
                       "a list of places is expected here",
                       "[\"valve chamber\", \"main @ 900 m\"]",
                       "put the names in square brackets");
      else
        for (const auto& item : *list) c.show.places.push_back(read_spot(context, item, "show/places"));
    }
    section.finish();
  }
  static const toml::table nothing;
  const toml::table* site = root.section("site");
  Section section(context, site == nullptr ? nothing : *site, "site", "", "site");
  c.site.atmosphere = section.quantity_or("atmosphere", "101.325 kPa abs");
  c.site.gravity = section.quantity_or("gravity", "9.80665 m/s2");
  if (c.site.atmosphere.given() && c.site.atmosphere.gauge)
    section.report("atmosphere",
                   "the atmosphere itself has no gauge pressure",
                   "\"101.325 kPa abs\"",
                   "write it as absolute pressure");
  section.finish();
}

void read_liquid(Root& root, Case& c) {
  Context& context = root.context();
  const toml::table* table = root.section("liquid");
  if (table == nullptr) {
    if (root.place("liquid").line == 0)
      context.report({1, 1},
                     "liquid",
                     "the section [liquid] is missing",
                     "",
                     "[liquid] with name and temperature",
                     "add [liquid], name = \"water\", temperature = \"15 degC\"");
    return;
  }
  Section section(context, *table, "liquid", "", "liquid");
  c.liquid.place = section.place();
  if (section.has("name")) c.liquid.name = section.needed_text("name", "water, seawater, or your own word");
  c.liquid.temperature = section.quantity("temperature");
  c.liquid.density = section.quantity("density");
  c.liquid.viscosity = section.quantity("viscosity");
  if (const toml::node* node = section.ask("viscosity_points")) {
    const auto* rows = node->as_array();
    const KeyRule& temperature = key_rule("liquid", "viscosity_points temperature");
    const KeyRule& viscosity = key_rule("liquid", "viscosity_points viscosity");
    if (rows == nullptr || rows->size() < 2) {
      section.report("viscosity_points",
                     "the viscosity law needs two points or more",
                     "[[\"25 degC\", \"180 cSt\"], [\"50 degC\", \"50 cSt\"]]",
                     "add the missing point");
    } else {
      std::size_t index = 0;
      for (const auto& item : *rows) {
        const auto* row = item.as_array();
        const std::string path = fmt::format("liquid/viscosity_points {}", ++index);
        if (row == nullptr || row->size() != 2) {
          context.report(place_of(item),
                         path,
                         "a point of the viscosity law is not a pair",
                         written(item),
                         "[\"25 degC\", \"180 cSt\"]",
                         "write temperature and kinematic viscosity");
          continue;
        }
        auto point = std::pair{
            read_quantity(context,
                          (*row)[0],
                          temperature,
                          fmt::format("liquid viscosity_points {} temperature", index),
                          path + " temperature"),
            read_quantity(context, (*row)[1], viscosity, fmt::format("liquid viscosity_points {}", index), path)};
        for (const auto& other : c.liquid.viscosity_points)
          if (other.first.given() && other.first.value == point.first.value)
            context.report(place_of((*row)[0]),
                           path,
                           "two points have one temperature",
                           written((*row)[0]),
                           "different temperatures",
                           "leave one out");
        c.liquid.viscosity_points.push_back(std::move(point));
      }
    }
  }
  c.liquid.viscosity_scatter = section.quantity_or("viscosity_scatter", "none");
  c.liquid.bulk_modulus = section.quantity("bulk_modulus");
  c.liquid.vapour_pressure = section.quantity("vapour_pressure");
  if (c.liquid.vapour_pressure.given() && c.liquid.vapour_pressure.gauge)
    section.report("vapour_pressure",
                   "a vapour pressure does not depend on the atmosphere",
                   "\"1.7 kPa abs\"",
                   "write it as absolute pressure");
  c.liquid.free_gas = section.quantity_or("free_gas", "0 %");
  section.finish();
}

void read_friction(Root& root, Case& c) {
  static const toml::table nothing;
  const toml::table* table = root.section("friction");
  Section section(root.context(), table == nullptr ? nothing : *table, "friction", "", "friction");
  read_laws(section, c.friction);
  read_transitions(section, c.friction);
  c.friction.scatter_given = section.has("scatter");
  const bool frictionless =
      c.friction.law.options.size() == 1 && c.friction.law.options.front().choice == FrictionLaw::none;
  c.friction.scatter = section.quantity_or("scatter", frictionless ? "none" : "± 10 %", !frictionless);
  c.friction.laminar_scatter = section.quantity_or("laminar_scatter", "none");
  c.friction.fixed_factor = section.quantity("fixed_factor");
  read_pipe_scatter(root, &section, c);
  section.finish();
  read_together(root, c);
}

}  // namespace headband::casefile
