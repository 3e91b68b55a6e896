#pragma once
// SPDX-License-Identifier: MIT
//
// What each unknown of a case is: its value at a score, its words, the score of its central value, its group.

#include "core/network/case.hpp"

#include <string>
#include <vector>

namespace headband::montecarlo {

/// One unknown as the result tells it.
struct Input {
  std::string name, units, distribution;
  const base::Quantity* quantity = nullptr;  ///< none: a choice between models
  std::vector<double> weights;               ///< of a choice's options, summing to 1
  double central_score = 0.5;                ///< the score of the value a single run uses
  bool friction_law = false;                 ///< group of the budget: law, transition, scatter

  /// Value [SI] at a score; the option's number (from 0) for a choice.
  [[nodiscard]] double value(double score) const;
  /// Spread of the quantity; of a choice, an exact number that says nothing.
  [[nodiscard]] base::ReadySpread spread() const;
};

/// As Case::unknowns. Points into `c`.
[[nodiscard]] std::vector<Input> inputs_of(const network::Case& c);

/// One setting of the ranges that are not random: a place in [0, 1] of each.
struct OuterPoint {
  std::vector<double> place;  ///< as `Ranges::unknown`
  std::string name;           ///< "vessel exponent = 1.4, relief lag = 0.05 s"; "middle" for the first
};

/// The ranges of a case and the outer points of a band: the middle first, then all corners of up to 4 ranges, else 64
/// Sobol' points and the ends of each axis.
struct Ranges {
  std::vector<std::size_t> unknown;
  std::vector<OuterPoint> points;  ///< at least the middle
};
[[nodiscard]] Ranges ranges_of(const network::Case& c);

}  // namespace headband::montecarlo
