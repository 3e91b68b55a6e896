#pragma once
// SPDX-License-Identifier: MIT

#include "core/answers/study.hpp"
#include "core/base/dimension.hpp"

#include <string>

namespace headband::show {

/// What a number of a limit or an answer is, by the kind asked for ("highest_pressure", "flow", …).
[[nodiscard]] base::Dimension dimension_of_kind(const std::string& kind);

/// A kind in words: "highest pressure".
[[nodiscard]] std::string words_of_kind(const std::string& kind);

/// A key with its unit at the end ("max_gas_volume_m3") taken apart: "max gas volume" and what the number is.
struct KeyWords {
  std::string words;
  base::Dimension dimension = base::Dimension::number;
};
[[nodiscard]] KeyWords words_of_key(const std::string& key);

/// A share in percent, two or three figures: "26 %", "2.5 %"; "-" for a missing number.
[[nodiscard]] std::string percent(double share);

/// Numbers of a study in the words of one unit family; the same unit for the same kind of number everywhere, so that
/// columns can be compared.
class Amounts {
 public:
  /// @param units "si" or "us"; empty = the study's own
  Amounts(const answers::Study& study, const std::string& units);

  /// Number with unit, "11.95 bar g"; "-" for a missing number.
  [[nodiscard]] std::string of(double value, base::Dimension dimension, int digits = 4) const;
  /// A width or bound of the same kind: pressures without gauge mark, temperatures without zero point.
  [[nodiscard]] std::string width(double value, base::Dimension dimension, int digits = 2) const;
  [[nodiscard]] std::string number(double value, base::Dimension dimension, int digits = 4) const;
  [[nodiscard]] std::string unit(base::Dimension dimension) const;

 private:
  base::UnitFamily family_;
};

}  // namespace headband::show
