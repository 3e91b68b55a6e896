#pragma once
// SPDX-License-Identifier: MIT

#include "core/base/dimension.hpp"
#include "core/base/problem.hpp"
#include "core/base/spread.hpp"

#include <cmath>
#include <limits>
#include <string>

namespace headband::base {

/// One number of a case: value, spread, origin. Not given at all: `given()` is false.
struct Quantity {
  double value = std::numeric_limits<double>::quiet_NaN();  ///< central (written) value [SI]
  Spread spread = Exact{};                                  ///< how it is uncertain [SI]
  Cut cut;                                                  ///< the distribution lives inside these bounds [SI]
  Dimension dimension = Dimension::number;
  bool gauge = false;  ///< pressures: true = value is gauge, false = absolute
  int unknown = -1;    ///< index into Case::unknowns; -1 = not sampled. Set by network::number_unknowns

  std::string name;     ///< name of the unknown, `main wall`; empty where it cannot be one
  std::string path;     ///< `pipe/main/wall`
  std::string written;  ///< as the user wrote it, or the default in the same words
  std::string same_as;  ///< name of the unknown this one shares its draw with ("as upper main wall")
  std::string source;   ///< origin in the user's words, or of the default
  std::string grade;    ///< A, B, C, D or empty
  bool guess = false;   ///< a default nobody stated: counted in the report
  SourcePlace place;

  [[nodiscard]] bool given() const { return !std::isnan(value); }
  [[nodiscard]] bool exact() const { return std::holds_alternative<Exact>(spread) && same_as.empty(); }
};

/// The value of `quantity` at `score`, the one door from a Case to a number.
///
/// @param score uniform number in (0, 1), already correlated where the case says so; ignored by exact quantities
/// @return the value [SI]: quantile of the spread inside its cut
template <int W>
[[nodiscard]] Lanes<W> value(const Quantity& quantity, const Lanes<W>& score) {
  return quantile<W>(quantity.spread, quantity.cut, quantity.value, score);
}

}  // namespace headband::base
