#pragma once
// SPDX-License-Identifier: MIT

#include "core/base/lanes.hpp"
#include "core/friction/law.hpp"

namespace headband::friction {

using base::Lanes;
using base::PerLane;

/// Everything that turns a Reynolds number into a Darcy factor, for W draws of one pipe.
template <int W>
struct FactorRule {
  PerLane<FrictionLaw, W> law{};
  PerLane<Transition, W> transition{};
  Lanes<W> relative_roughness = 0.0;  ///< roughness / bore [-], >= 0
  Lanes<W> scatter = 1.0;             ///< factor on the turbulent Darcy factor [-]
  Lanes<W> laminar_scatter = 1.0;     ///< factor on the laminar one [-]
};

/// Darcy factor and its slope.
template <int W>
struct Factor {
  Lanes<W> factor;     ///< Darcy f [-]
  Lanes<W> log_slope;  ///< d ln f / d ln Re [-]
};

/// Darcy factor f(Re) with laminar part, transition and scatter (conventions k and l of the case file).
/// @param reynolds >= 0; at 0 the factor is that of Re = 1e-12 or less without overflow (loss is 0 there anyway)
/// Accuracy: Colebrook-White 1e-12 relative of the exact root; explicit laws 1e-14. The same bits for every W.
template <int W>
[[nodiscard]] Factor<W> darcy_factor(const FactorRule<W>& rule, const Lanes<W>& reynolds);

extern template Factor<1> darcy_factor<1>(const FactorRule<1>&, const Lanes<1>&);
extern template Factor<8> darcy_factor<8>(const FactorRule<8>&, const Lanes<8>&);

}  // namespace headband::friction
