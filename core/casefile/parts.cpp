// SPDX-License-Identifier: MIT
#include "core/casefile/parts.hpp"

#include "core/casefile/nearest.hpp"
#include "core/casefile/quantity_text.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>

namespace headband::casefile {

const toml::table* Root::section(std::string_view name) {
  asked_.emplace(name);
  const toml::node* node = table_.get(name);
  if (node == nullptr) return nullptr;
  if (const auto* table = node->as_table()) return table;
  const auto* list = node->as_array();
  const bool doubled = list != nullptr && list->is_homogeneous(toml::node_type::table) && !list->empty();
  context_.report(
      place(name),
      std::string(name),
      doubled ? fmt::format("[[{}]] is written with double brackets", name) : fmt::format("`{}` is a section", name),
      "",
      fmt::format("[{}]", name),
      fmt::format("write [{}] once, its keys below it", name));
  return doubled ? (*list)[0].as_table() : nullptr;
}

std::vector<const toml::table*> Root::list(std::string_view name) {
  const bool first = asked_.emplace(name).second;
  const toml::node* node = table_.get(name);
  if (node == nullptr) return {};
  std::vector<const toml::table*> tables;
  if (const auto* list = node->as_array()) {
    for (const auto& item : *list)
      if (const auto* table = item.as_table())
        tables.push_back(table);
      else if (first)
        context_.report(place_of(item),
                        std::string(name),
                        fmt::format("an entry of `{}` is not a section", name),
                        written(item),
                        fmt::format("[[{}]]", name),
                        fmt::format("write [[{}]] above its keys", name));
    return tables;
  }
  if (first)
    context_.report(place(name),
                    std::string(name),
                    fmt::format("[{}] is written with single brackets", name),
                    "",
                    fmt::format("[[{}]]", name),
                    "there can be several of them: use double brackets");
  if (const auto* table = node->as_table()) tables.push_back(table);
  return tables;
}

SourcePlace Root::place(std::string_view name) const {
  for (const auto& [key, node] : table_)
    if (key.str() == name) return place_of(node);
  return {};
}

void Root::finish() {
  const std::vector<std::string> known(asked_.begin(), asked_.end());
  for (const auto& [key, node] : table_) {
    if (asked_.contains(key.str())) continue;
    const std::string name(key.str());
    const std::string near = nearest(name, known);
    const bool section_like = node.is_table() || node.is_array_of_tables();
    if (node.is_array_of_tables() || near == "liquid") context_.names_doubtful = true;
    std::string list;
    for (const std::string& k : known) list += (list.empty() ? "" : ", ") + k;
    context_.report(place_of(key),
                    name,
                    fmt::format("unknown {} `{}`", section_like ? "section" : "key outside of a section", name),
                    "",
                    near.empty() ? "a section of a case file" : fmt::format("[{}]", near),
                    near.empty() ? "sections are " + list : fmt::format("did you mean [{}]?", near));
  }
}

std::string element_name(Context& context, const toml::table& table, std::string_view kind, std::size_t index) {
  std::string stand_in = fmt::format("{} {}", kind, index + 1);
  const toml::node* node = table.get("name");
  if (node == nullptr) {
    context.names_doubtful = true;
    context.report(place_of(table),
                   fmt::format("{}/{}/name", kind, stand_in),
                   fmt::format("a [[{}]] has no name", kind),
                   "",
                   "name = \"…\"",
                   "give every element a name of its own");
    return stand_in;
  }
  const auto* text = node->as_string();
  std::string name = text == nullptr ? std::string() : text->get();
  const auto complain = [&](std::string what, std::string bound) {
    context.names_doubtful = true;
    context.report(place_of(*node),
                   fmt::format("{}/{}/name", kind, name),
                   std::move(what),
                   written(*node),
                   std::move(bound),
                   "give the element another name");
  };
  if (text == nullptr)
    complain("a name is a text", "name = \"…\"");
  else if (name.empty())
    complain("the name is empty", "name = \"…\"");
  else if (name == "air")
    complain("the name `air` is reserved for free discharge", "any other name");
  else if (name == "everywhere")
    complain("the name `everywhere` is reserved for limits", "any other name");
  else if (name.front() == ' ' || name.back() == ' ')
    complain("the name begins or ends with a space", "a name without them");
  else if (std::any_of(name.begin(), name.end(), [](char ch) {
             return ch == ',' || ch == '@' || ch == '"' || ch == '\'' || static_cast<unsigned char>(ch) < 0x20U ||
                    ch == 0x7f;
           }))
    complain("the name holds a sign that is used otherwise", "a name without , @ quotes and control characters");
  else
    return name;
  return stand_in;
}

void scale(Quantity& q, double factor) {
  q.value *= factor;
  if (q.cut.low > 0.0 || q.cut.low < 0.0) q.cut.low *= factor;
  q.cut.high *= factor;
  struct Scale {
    double factor;
    void operator()(base::Exact&) const {}
    void operator()(base::Normal& n) const { n.standard_deviation *= factor; }
    void operator()(base::LogNormal&) const {}
    void operator()(base::Even& e) const { e = {e.low * factor, e.high * factor}; }
    void operator()(base::Triangle& t) const { t = {t.low * factor, t.high * factor}; }
    void operator()(base::NotRandom& r) const { r = {r.low * factor, r.high * factor}; }
  };
  std::visit(Scale{factor}, q.spread);
}

network::Spot read_spot(Context& context, const toml::node& node, const std::string& path) {
  network::Spot spot;
  spot.place = place_of(node);
  context.places.emplace(path + "/" + written(node), spot.place);
  const auto* text = node.as_string();
  if (text == nullptr) {
    context.report(spot.place,
                   path,
                   "a place or pipe is expected here",
                   written(node),
                   "\"valve chamber\" or \"main @ 900 m\"",
                   "write its name in quotes");
    return spot;
  }
  spot.written = text->get();
  spot.element = spot.written;
  const std::size_t at = spot.written.find('@');
  if (at == std::string::npos) return spot;
  spot.on_pipe = true;
  spot.element = spot.written.substr(0, at);
  while (spot.element.ends_with(' ')) spot.element.pop_back();
  const ParsedQuantity chainage =
      parse_quantity(std::string_view(spot.written).substr(at + 1), key_rule("spot", "chainage"));
  if (chainage.problem)
    context.report(spot.place,
                   path,
                   "the chainage after @ is wrong: " + chainage.problem->what,
                   written(node),
                   "\"PIPE @ 900 m\"",
                   chainage.problem->hint);
  else
    spot.chainage = chainage.quantity.value;
  return spot;
}

namespace {
// By the exact definitions of the pound, standard gravity and the inch.
constexpr double bar_per_psi = 0.45359237 * 9.80665 / 6.4516e-4 / 1.0e5;
}  // namespace

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

}  // namespace headband::casefile
