// SPDX-License-Identifier: MIT
#include "core/casefile/section.hpp"

#include "core/base/units.hpp"
#include "core/casefile/grades.hpp"
#include "core/casefile/nearest.hpp"
#include "core/casefile/quantity_text.hpp"

#include <fmt/format.h>

#include <cmath>
#include <sstream>

namespace headband::casefile {
namespace {

/// The place of code point `column` of a string that stands at `node`: exact where the text of the file shows the
/// string as it is (no escapes, one line), else the string's own place.
SourcePlace place_inside(const Context& context, const toml::node& node, const std::string& text, int column) {
  SourcePlace place = place_of(node);
  if (place.line < 1 || static_cast<std::size_t>(place.line) > context.lines.size()) return place;
  std::string_view line = context.lines[static_cast<std::size_t>(place.line) - 1];
  for (int i = 1; i < place.column && !line.empty(); ++i) {
    line.remove_prefix(1);
    while (!line.empty() && (static_cast<unsigned char>(line.front()) & 0xC0U) == 0x80U) line.remove_prefix(1);
  }
  if (line.empty() || (line.front() != '"' && line.front() != '\'') || !line.substr(1).starts_with(text)) return place;
  place.column += 1 + column;
  return place;
}

void report_text(
    Context& context, const toml::node& node, const std::string& text, const std::string& path, const TextProblem& p) {
  context.report(
      place_inside(context, node, text, p.column), path, p.what, fmt::format("\"{}\"", text), p.bound, p.hint);
}

Quantity from_text(Context& context, const toml::node& node, const KeyRule& rule, const std::string& path) {
  if (const auto* string = node.as_string()) {
    ParsedQuantity parsed = parse_quantity(string->get(), rule);
    if (parsed.problem) report_text(context, node, string->get(), path, *parsed.problem);
    return std::move(parsed.quantity);
  }
  const bool number = node.is_integer() || node.is_floating_point();
  if (number) {
    const double value = node.value<double>().value_or(std::nan(""));
    ParsedQuantity parsed = parse_number(value, written(node), rule);
    if (parsed.problem)
      context.report(
          place_of(node), path, parsed.problem->what, written(node), parsed.problem->bound, parsed.problem->hint);
    return std::move(parsed.quantity);
  }
  const std::string form(rule.example.empty() ? base::example_of(rule.dimension) : rule.example);
  context.report(place_of(node),
                 path,
                 "a value is expected here",
                 written(node),
                 fmt::format("\"{}\"", form),
                 fmt::format("write {} = \"{}\"", rule.key, form));
  return {};
}

/// `{ value = "…", not_below = "…", not_above = "…", source = "…", grade = "B" }`
Quantity from_table(Context& context, const toml::table& table, const KeyRule& rule, const std::string& path) {
  Section inner(context, table, std::string(rule.section), "", path);
  const toml::node* value = inner.ask("value");
  Quantity q;
  if (value == nullptr)
    context.report(place_of(table),
                   path,
                   "the table around a value has no `value`",
                   "",
                   "{ value = \"…\", source = \"…\" }",
                   "add value = \"…\"");
  else
    q = from_text(context, *value, rule, path);
  KeyRule exact = rule;
  exact.spread = SpreadUse::refused;
  exact.instead = "a cut-off is exact";
  for (const auto& [key, below] : {std::pair{"not_below", true}, {"not_above", false}}) {
    const toml::node* node = inner.ask(key);
    if (node == nullptr) continue;
    const Quantity cut = from_text(context, *node, exact, path + "/" + key);
    if (!cut.given()) continue;
    if (rule.spread == SpreadUse::refused) {
      inner.report(
          key, "a cut-off belongs to a spread, and none is taken here", "the value alone", std::string(rule.instead));
    } else if (q.given() && (below ? !(cut.value < q.value) && !(cut.value == q.value)
                                   : !(cut.value > q.value) && !(cut.value == q.value))) {
      inner.report(key,
                   "the value lies outside its own cut-off",
                   fmt::format("{} the value", below ? "at most" : "at least"),
                   "correct the value or the cut-off");
    } else {
      (below ? q.cut.low : q.cut.high) = cut.value;
    }
  }
  if (q.given() && !(q.cut.low < q.cut.high))
    inner.report("not_above", "the cut-offs leave no room", "not_below under not_above", "correct the cut-offs");
  q.source = inner.text("source");
  q.grade = inner.text("grade");
  if (!q.grade.empty() && q.grade != "A" && q.grade != "B" && q.grade != "C" && q.grade != "D")
    inner.report("grade",
                 "the grade is not known",
                 "A measured here, B data sheet, C drawing or handbook, D guess",
                 "write one of A, B, C, D");
  else if (!q.grade.empty() && q.given() && q.exact() && rule.spread == SpreadUse::sampled)
    apply_default_spread(q, rule);
  inner.finish();
  return q;
}

}  // namespace

void Context::report(
    SourcePlace place, std::string path, std::string what, std::string value, std::string bound, std::string hint) {
  problems.push_back({place, std::move(path), std::move(what), std::move(value), std::move(bound), std::move(hint)});
}

std::string Context::unique_name(const std::string& name) {
  const int count = ++names[name];
  return count == 1 ? name : unique_name(fmt::format("{} {}", name, count));
}

SourcePlace place_of(const toml::node& node) {
  return {static_cast<int>(node.source().begin.line), static_cast<int>(node.source().begin.column)};
}
SourcePlace place_of(const toml::key& key) {
  return {static_cast<int>(key.source().begin.line), static_cast<int>(key.source().begin.column)};
}

std::string written(const toml::node& node) {
  std::ostringstream out;
  if (const auto* string = node.as_string()) {
    out << '"' << string->get() << '"';
  } else if (const auto* table = node.as_table()) {
    return table->empty() ? "{ }" : "{ … }";
  } else if (const auto* array = node.as_array()) {
    return array->empty() ? "[ ]" : "[ … ]";
  } else if (const auto* number = node.as_floating_point()) {
    return fmt::format("{}", number->get());
  } else {
    node.visit([&](const auto& value) {
      if constexpr (toml::is_value<decltype(value)>) out << value;
    });
  }
  return out.str();
}

Section::Section(Context& context,
                 const toml::table& table,
                 std::string section,
                 std::string element,
                 std::string path,
                 std::string rule_prefix,
                 std::string name_prefix)
    : context_(context),
      table_(table),
      section_(std::move(section)),
      element_(std::move(element)),
      path_(std::move(path)),
      rule_prefix_(std::move(rule_prefix)),
      name_prefix_(std::move(name_prefix)),
      place_(place_of(table)) {
  context_.places.emplace(path_, place_);
}

const toml::node* Section::ask(std::string_view key) {
  asked_.emplace(key);
  const toml::node* node = table_.get(key);
  if (node != nullptr) context_.places.emplace(path(key), place_of(*node));
  return node;
}

bool Section::has(std::string_view key) { return ask(key) != nullptr; }

SourcePlace Section::place(std::string_view key) const {
  const toml::node* node = table_.get(key);
  return node == nullptr ? place_ : place_of(*node);
}

Quantity Section::quantity(std::string_view key) { return quantity(key, rule_prefix_ + std::string(key)); }

std::string Section::name_of(std::string_view key) const {
  return fmt::format("{} {}{}", element_.empty() ? section_ : element_, name_prefix_, key);
}

Quantity Section::quantity(std::string_view key, std::string_view rule_key) {
  const toml::node* node = ask(key);
  if (node == nullptr) return {};
  return read_quantity(context_, *node, key_rule(section_, rule_key), context_.unique_name(name_of(key)), path(key));
}

Quantity Section::quantity_or(std::string_view key, std::string_view default_text, bool guess) {
  if (has(key)) return quantity(key);
  Quantity q = parse_quantity(default_text, key_rule(section_, rule_prefix_ + std::string(key))).quantity;
  q.name = context_.unique_name(name_of(key));
  q.path = path(key);
  q.source = "default";
  q.guess = guess;
  q.place = place_;
  return q;
}

double Section::plain(std::string_view key, double when_left_out) {
  const Quantity q = quantity(key);
  return q.given() ? q.value : when_left_out;
}

std::string Section::text(std::string_view key) {
  const toml::node* node = ask(key);
  if (node == nullptr) return {};
  if (const auto* string = node->as_string()) return string->get();
  report(key, "a text is expected here", fmt::format("{} = \"…\"", key), "put the words in quotes");
  return {};
}

std::string Section::needed_text(std::string_view key, std::string_view hint) {
  if (!has(key)) {
    context_.report(
        place_, path(key), fmt::format("`{}` is missing", key), "", fmt::format("{} = \"…\"", key), std::string(hint));
    return {};
  }
  std::string given = text(key);
  if (given.empty() && table_.get(key)->is_string())
    report(key, fmt::format("`{}` is empty", key), fmt::format("{} = \"…\"", key), std::string(hint));
  return given;
}

bool Section::flag(std::string_view key, bool when_left_out) {
  const toml::node* node = ask(key);
  if (node == nullptr) return when_left_out;
  if (const auto value = node->value_exact<bool>()) return *value;
  report(key, "yes or no is expected here", "true or false", "write it without quotes");
  return when_left_out;
}

long long Section::whole(std::string_view key, long long when_left_out, long long low, long long high) {
  const toml::node* node = ask(key);
  if (node == nullptr) return when_left_out;
  const auto value = node->value_exact<std::int64_t>();
  if (value && *value >= low && *value <= high) return *value;
  report(key,
         value ? "the number is out of its range" : "a whole number is expected here",
         fmt::format("a whole number, {} to {}", low, high),
         value ? "correct the number" : "write it without quotes and without a point");
  return when_left_out;
}

void Section::report(std::string_view key, std::string what, std::string bound, std::string hint) {
  const toml::node* node = table_.get(key);
  context_.report(place(key),
                  path(key),
                  std::move(what),
                  node == nullptr ? std::string() : written(*node),
                  std::move(bound),
                  std::move(hint));
}

void Section::report_word(std::string_view key, const toml::node& node, const std::vector<std::string>& known) {
  std::string list;
  for (const std::string& name : known) list += (list.empty() ? "" : ", ") + name;
  const std::string near = node.is_string() ? nearest(node.as_string()->get(), known) : std::string();
  report(key,
         fmt::format("`{}` does not know this word", key),
         list,
         near.empty() ? std::string("write one of these words") : fmt::format("did you mean \"{}\"?", near));
}

void Section::finish() {
  const std::vector<std::string> known(asked_.begin(), asked_.end());
  for (const auto& [key, node] : table_) {
    if (asked_.contains(key.str())) continue;
    const std::string name(key.str());
    std::string hint = question_for_key(section_, name);
    const std::string near = hint.empty() ? nearest(name, known) : std::string();
    if (hint.empty()) {
      if (near.empty()) {
        std::string list;
        for (const std::string& k : known) list += (list.empty() ? "" : ", ") + k;
        hint = fmt::format("keys here are {}", list);
      } else {
        hint = fmt::format("did you mean `{}`?", near);
      }
    }
    const std::string where =
        element_.empty() ? fmt::format("[{}]", section_) : fmt::format("{} \"{}\"", section_, element_);
    context_.report(place_of(key),
                    path(name),
                    fmt::format("unknown key `{}` in {}", name, where),
                    "",
                    near.empty() ? "a key of this section" : fmt::format("`{}`", near),
                    hint);
  }
}

Quantity read_quantity(
    Context& context, const toml::node& node, const KeyRule& rule, const std::string& name, const std::string& path) {
  context.places.emplace(path, place_of(node));
  Quantity q;
  if (const auto* table = node.as_table())
    q = from_table(context, *table, rule, path);
  else
    q = from_text(context, node, rule, path);
  q.name = name;
  q.path = path;
  q.place = place_of(node);
  return q;
}

}  // namespace headband::casefile
