#pragma once
// SPDX-License-Identifier: MIT
//
// Where a friction law is good, in words for the user.

#include "core/friction/law.hpp"

#include <string>
#include <vector>

namespace headband::friction {

/// The flow a law is used for.
struct FlowState {
  double reynolds = 0.0;             ///< [-]
  double relative_roughness = 0.0;   ///< [-]; not used by Hazen-Williams and Manning
  double bore = 0.0;                 ///< [m]
  double velocity = 0.0;             ///< [m/s]
  double kinematic_viscosity = 0.0;  ///< [m2/s]
};

/// Remarks where `law` is used outside the range it was made for; empty where it is inside. A pipe at rest gets none.
/// Ranges: Swamee-Jain as its paper states; the others common practice (from memory).
[[nodiscard]] std::vector<std::string> range_remarks(FrictionLaw law, const FlowState& flow);

/// The law's name as a case file spells it.
[[nodiscard]] const char* name_of(FrictionLaw law);

}  // namespace headband::friction
