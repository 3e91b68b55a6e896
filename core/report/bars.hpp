#pragma once
// SPDX-License-Identifier: MIT
//
// Small pictures beside numbers: bars of a budget, and the strip that sets a value and its band against a limit.

#include "core/answers/study.hpp"
#include "core/report/measure.hpp"

#include <string>
#include <vector>

namespace headband::report {

struct Bar {
  std::string name;
  double value = 0.0;  ///< decides the length
  double inner = 0.0;  ///< darker part, 0 = none
  std::string text;    ///< number as shown, plain text
};

/// A bar in a table cell, decoration only: the number stands beside it.
[[nodiscard]] std::string bar_cell(double value, double inner, double largest);

/// Bars as a picture of its own.
[[nodiscard]] std::string bars_svg(const std::string& id, const std::string& title, const std::vector<Bar>& bars);

/// Value (dot), band (thick line, median as a gap), limit (upright line) and the side that fails (hatched), on one
/// strip.
/// @param answer the sampled answer the limit judges, or null
/// @param grid_bound of the value when there is no band; NaN = none
[[nodiscard]] std::string strip(const answers::LimitAnswer& limit,
                                const answers::BandAnswer* answer,
                                double coverage,
                                double grid_bound,
                                const std::string& id);

/// Whether values over the limit fail (else those under it do).
[[nodiscard]] bool fails_over(const answers::LimitAnswer& limit);

}  // namespace headband::report
