#pragma once
// SPDX-License-Identifier: MIT

namespace headband::friction {

/// The closed family of friction laws a case can name.
enum class FrictionLaw {
  colebrook_white,
  haaland,
  swamee_jain,
  serghides,
  zigrang_sylvester,
  churchill,
  smooth,
  hazen_williams,
  manning,
  none
};

/// How the laminar and the turbulent factor join.
struct Transition {
  /// `blend` smooth step between two Reynolds numbers; `sudden` = the word "switch"; `churchill` = Churchill 1977
  enum class Kind { blend, sudden, churchill } kind = Kind::blend;
  double from = 2100.0;  ///< Reynolds number where the blend starts, or of the switch [-]
  double to = 4000.0;    ///< where the blend ends [-]
  friend bool operator==(const Transition&, const Transition&) = default;
};

}  // namespace headband::friction
