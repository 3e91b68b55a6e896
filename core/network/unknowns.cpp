// SPDX-License-Identifier: MIT
//
// Which numbers of a case are unknowns, in which order, and which of them share one draw.

#include "core/network/case.hpp"
#include "core/network/each_quantity.hpp"
#include "core/network/nearest_word.hpp"

#include <algorithm>
#include <map>
#include <tuple>
#include <variant>

namespace headband::network {
namespace {

/// Everything of the case that may carry an unknown: a quantity, or a choice between models.
struct Candidate {
  Quantity* quantity = nullptr;
  int* choice_unknown = nullptr;  ///< Choice::unknown
  Unknown unknown;
  std::size_t order = 0;  ///< as met: decides where places are equal
};

template <class T>
void add_choice(Choice<T>& choice, const char* fallback_name, const char* path, std::vector<Candidate>& list) {
  choice.unknown = -1;
  if (choice.options.size() < 2) return;
  Candidate candidate;
  candidate.choice_unknown = &choice.unknown;
  candidate.unknown = {choice.name.empty() ? fallback_name : choice.name, path, choice.place, true};
  list.push_back(std::move(candidate));
}

bool has_spread(const Quantity& quantity) { return !std::holds_alternative<base::Exact>(quantity.spread); }

/// Turns every "as" into the number it points at. Returns problems: unknown target, other kind, ring.
class SharedNumbers {
 public:
  explicit SharedNumbers(Case& c) {
    for_each_quantity(c, [&](Quantity& q) {
      if (!q.name.empty() && (q.given() || !q.same_as.empty())) by_name_.emplace(q.name, &q);
    });
  }

  /// The quantity at the end of the chain that starts at `start`; null with a problem told.
  [[nodiscard]] Quantity* end_of_chain(Quantity& start, base::Problems& problems) const {
    Quantity* at = &start;
    for (std::size_t step = 0; step <= by_name_.size(); ++step) {
      if (at->same_as.empty()) return at;
      const auto next = by_name_.find(at->same_as);
      if (next == by_name_.end()) {
        problems.push_back({start.place,
                            start.path,
                            "no value is called '" + at->same_as + "'",
                            start.written,
                            nearest(at->same_as),
                            "write the element's name and the key, as in 'as upper main wall'"});
        return nullptr;
      }
      at = next->second;
      if (at == &start) break;
    }
    problems.push_back({start.place,
                        start.path,
                        "the chain of 'as' runs in a ring and never meets a number",
                        start.written,
                        "",
                        "give one of the values of the ring a number"});
    return nullptr;
  }

 private:
  [[nodiscard]] std::string nearest(const std::string& name) const {
    const std::string found = nearest_word(name, names());
    return found.empty() ? "" : "the nearest name is '" + found + "'";
  }
  [[nodiscard]] std::vector<std::string> names() const {
    std::vector<std::string> list;
    for (const auto& [name, quantity] : by_name_) list.push_back(name);
    return list;
  }
  std::map<std::string, Quantity*> by_name_;
};

/// Copies what is drawn from `from`; name, words and place stay.
void share_number(const Quantity& from, Quantity& to) {
  to.value = from.value;
  to.spread = from.spread;
  to.cut = from.cut;
  to.gauge = from.gauge;
  to.unknown = from.unknown;
}

void refuse_repeated_names(const std::vector<Candidate>& list, base::Problems& problems) {
  std::map<std::string, const Candidate*> seen;
  for (const auto& candidate : list) {
    const auto [first, fresh] = seen.emplace(candidate.unknown.name, &candidate);
    if (fresh) continue;
    problems.push_back({candidate.unknown.place,
                        candidate.unknown.path,
                        "two uncertain values are called '" + candidate.unknown.name + "'",
                        "",
                        "the other one is at line " + std::to_string(first->second->unknown.place.line),
                        "give one of the two elements another name"});
  }
}

}  // namespace

void for_each_quantity(Case& c, const std::function<void(Quantity&)>& visit) {
  for_each_quantity_in_words(c, [&](Quantity& quantity, const QuantityWords&) { visit(quantity); });
}

void for_each_quantity(const Case& c, const std::function<void(const Quantity&)>& visit) {
  for_each_quantity_in_words(c, [&](const Quantity& quantity, const QuantityWords&) { visit(quantity); });
}

base::Problems number_unknowns(Case& c) {
  base::Problems problems;
  std::vector<Candidate> list;
  std::vector<Quantity*> shared;
  for_each_quantity(c, [&](Quantity& q) {
    q.unknown = -1;
    if (!q.same_as.empty()) {
      shared.push_back(&q);
    } else if (q.given() && has_spread(q)) {
      Candidate candidate;
      candidate.quantity = &q;
      candidate.unknown = {q.name, q.path, q.place, !std::holds_alternative<base::NotRandom>(q.spread)};
      list.push_back(std::move(candidate));
    }
  });
  add_choice(c.friction.law, "friction law", "friction/laws", list);
  add_choice(c.friction.transition, "friction transition", "friction/transitions", list);

  for (std::size_t i = 0; i < list.size(); ++i) list[i].order = i;
  std::sort(list.begin(), list.end(), [](const Candidate& a, const Candidate& b) {
    return std::tie(a.unknown.place, a.order) < std::tie(b.unknown.place, b.order);
  });
  refuse_repeated_names(list, problems);
  c.unknowns.clear();
  for (auto& candidate : list) {
    const int index = static_cast<int>(c.unknowns.size());
    if (candidate.quantity != nullptr) candidate.quantity->unknown = index;
    if (candidate.choice_unknown != nullptr) *candidate.choice_unknown = index;
    c.unknowns.push_back(std::move(candidate.unknown));
  }

  const SharedNumbers numbers(c);
  for (Quantity* quantity : shared) {
    const Quantity* end = numbers.end_of_chain(*quantity, problems);
    if (end == nullptr) continue;
    if (end->dimension != quantity->dimension) {
      problems.push_back({quantity->place,
                          quantity->path,
                          "'" + end->name + "' is a value of another kind",
                          quantity->written,
                          "",
                          "share a value with one of the same kind"});
      continue;
    }
    share_number(*end, *quantity);
  }
  return problems;
}

}  // namespace headband::network
