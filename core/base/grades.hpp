#pragma once
// SPDX-License-Identifier: MIT
//
// Default spreads by grade of the information, used where a value states a grade and no spread, and echoed as
// "default for grade". Common practice: A measured here, B data sheet, C drawing or handbook, D guess.

#include <array>
#include <optional>
#include <string>
#include <string_view>

namespace headband::base {

/// How the number of the table is meant.
enum class GradeForm {
  share,   ///< ± a share of the value
  factor,  ///< x/ a factor (lognormal)
  length   ///< ± a length [m]
};

/// What a value is, for its default spread.
enum class GradeSubject {
  flow,
  bore,
  wall,
  roughness,
  wave_speed,
  stroke_time,
  near_seat,
  inertia,
  viscosity,
  level,
  fitting_loss,
  pump_head
};

/// A default spread: 95 % half-width (share, length) or factor.
struct GradeSpread {
  GradeForm form = GradeForm::share;
  double size = 0.0;  ///< [-] or [m]
  /// In the words of a case file: "± 5 %", "x/ 2", "± 0.2 m".
  [[nodiscard]] std::string written() const;
};

/// Default spread of a subject at a grade. @param grade "A" … "D"; anything else gives nothing
[[nodiscard]] std::optional<GradeSpread> default_spread(GradeSubject what, std::string_view grade);

/// The same by the key of a case file (`bore`, `outside`, `wall`, `roughness`, `flow`, `level`, `k`, `over`,
/// `near_seat`, `inertia_mr2`, `viscosity`, `wave_speed`, `head_scatter` …). Keys for which no default is agreed give
/// nothing.
[[nodiscard]] std::optional<GradeSpread> default_spread(std::string_view key, std::string_view grade);

/// What a grade means, in words: "measured here", "data sheet", "drawing or handbook", "guess"; empty when unknown.
[[nodiscard]] std::string_view grade_meaning(std::string_view grade);

}  // namespace headband::base
