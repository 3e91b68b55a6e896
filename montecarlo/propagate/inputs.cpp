// SPDX-License-Identifier: MIT
#include "montecarlo/propagate/inputs.hpp"

#include "core/base/units.hpp"
#include "montecarlo/sampling/sobol.hpp"

#include <fmt/format.h>
#include <algorithm>
#include <cmath>

namespace headband::montecarlo {

namespace {

template <class... F>
struct Overloaded : F... {
  using F::operator()...;
};

std::string distribution_words(const base::Quantity& q) {
  const std::string words = std::visit(
      Overloaded{
          [](const base::Exact&) { return std::string("exact"); },
          [&](const base::Normal& n) {
            return fmt::format("normal, median {}, standard deviation {}", q.value, n.standard_deviation);
          },
          [&](const base::LogNormal& n) {
            return fmt::format(
                "lognormal, median {}, standard deviation of the logarithm {}", q.value, n.log_standard_deviation);
          },
          [](const base::Even& e) { return fmt::format("even, {} to {}", e.low, e.high); },
          [&](const base::Triangle& t) {
            return fmt::format("triangle, {} to {}, most likely {}", t.low, t.high, q.value);
          },
          [](const base::NotRandom& r) { return fmt::format("not random, {} to {}", r.low, r.high); },
      },
      q.spread);
  if (!q.cut.active()) return words;
  const bool low = std::isfinite(q.cut.low), high = std::isfinite(q.cut.high);
  return words + (low ? fmt::format(", not below {}", q.cut.low) : "") +
         (high ? fmt::format(", not above {}", q.cut.high) : "");
}

template <class T>
void fill_choice(const network::Choice<T>& choice, std::vector<Input>& inputs) {
  if (choice.unknown < 0) return;
  Input& input = inputs[static_cast<std::size_t>(choice.unknown)];
  input.units = std::string("1");
  input.friction_law = true;
  double total = 0.0;
  for (const auto& option : choice.options) total += option.weight;
  std::size_t best = 0;
  for (std::size_t i = 0; i < choice.options.size(); ++i) {
    input.weights.push_back(choice.options[i].weight / total);
    if (choice.options[i].weight > choice.options[best].weight) best = i;
  }
  double before = 0.0;
  for (std::size_t i = 0; i < best; ++i) before += input.weights[i];
  input.central_score = before + 0.5 * input.weights[best];
  input.distribution = fmt::format(
      "choice of {}, numbered from 0, weights {:.6g}", input.weights.size(), fmt::join(input.weights, " : "));
}

std::string point_name(const network::Case& c,
                       const std::vector<Input>& inputs,
                       const Ranges& ranges,
                       const std::vector<double>& place) {
  std::string words;
  for (std::size_t i = 0; i < place.size(); ++i) {
    const Input& input = inputs[ranges.unknown[i]];
    words += fmt::format("{}{} = {:.6g}{}",
                         words.empty() ? "" : ", ",
                         c.unknowns[ranges.unknown[i]].name,
                         input.value(place[i]),
                         input.units == "1" ? "" : " " + input.units);
  }
  return words;
}

}  // namespace

double Input::value(double score) const {
  if (quantity != nullptr) return base::value<1>(*quantity, base::Lanes<1>(score)).number;
  double sum = 0.0;
  for (std::size_t i = 0; i < weights.size(); ++i) {
    sum += weights[i];
    if (score < sum) return static_cast<double>(i);
  }
  return static_cast<double>(weights.size()) - 1.0;
}

base::ReadySpread Input::spread() const {
  if (quantity == nullptr) return {};
  return base::ready_spread(quantity->spread, quantity->cut, quantity->value);
}

std::vector<Input> inputs_of(const network::Case& c) {
  std::vector<Input> inputs(c.unknowns.size());
  for (std::size_t u = 0; u < inputs.size(); ++u) inputs[u].name = c.unknowns[u].name;
  network::for_each_quantity(c, [&](const base::Quantity& q) {
    if (q.unknown < 0 || !q.same_as.empty()) return;
    Input& input = inputs[static_cast<std::size_t>(q.unknown)];
    if (input.quantity != nullptr) return;
    input.quantity = &q;
    const auto unit = base::si_name(q.dimension);
    input.units = unit.empty() ? "1" : std::string(unit);
    input.distribution = distribution_words(q);
    const bool range = std::holds_alternative<base::NotRandom>(q.spread);
    if (!range)
      input.central_score = std::clamp(base::probability(q.spread, q.cut, q.value, q.value), 0x1p-53, 1.0 - 0x1p-53);
  });
  fill_choice(c.friction.law, inputs);
  fill_choice(c.friction.transition, inputs);
  const auto mark = [&](const base::Quantity& q) {
    if (q.unknown >= 0) inputs[static_cast<std::size_t>(q.unknown)].friction_law = true;
  };
  mark(c.friction.scatter);
  mark(c.friction.laminar_scatter);
  for (const auto& q : c.friction.pipe_scatter) mark(q);
  return inputs;
}

Ranges ranges_of(const network::Case& c) {
  Ranges ranges;
  for (std::size_t u = 0; u < c.unknowns.size(); ++u)
    if (!c.unknowns[u].random) ranges.unknown.push_back(u);
  const std::size_t n = ranges.unknown.size();
  const std::vector<Input> inputs = inputs_of(c);
  const auto add = [&](const std::vector<double>& place) {
    ranges.points.push_back({place, point_name(c, inputs, ranges, place)});
  };
  const std::vector<double> middle(n, 0.5);
  ranges.points.push_back({middle, "middle"});
  if (n == 0) return ranges;
  if (n <= 4) {
    for (std::size_t corner = 0; corner < (std::size_t{1} << n); ++corner) {
      std::vector<double> place(n);
      for (std::size_t i = 0; i < n; ++i) place[i] = (corner >> i & 1) != 0 ? 1.0 : 0.0;
      add(place);
    }
    return ranges;
  }
  const SobolDirections directions = sobol_directions(n);
  for (std::uint64_t point = 1; point <= 64; ++point) {
    std::vector<double> place(n);
    for (std::size_t i = 0; i < n; ++i) place[i] = static_cast<double>(sobol_point(directions[i], point)) * 0x1p-52;
    add(place);
  }
  for (std::size_t i = 0; i < n; ++i) {
    for (const double end : {0.0, 1.0}) {
      std::vector<double> place = middle;
      place[i] = end;
      add(place);
    }
  }
  return ranges;
}

}  // namespace headband::montecarlo
