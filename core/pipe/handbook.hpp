#pragma once
// SPDX-License-Identifier: MIT
//
// Elastic numbers of pipe materials and roughness of pipe walls: defaults with their ranges and sources.

#include <optional>
#include <span>
#include <string_view>

namespace headband::pipe {

/// Elastic numbers of a pipe material; ranges as the source gives them.
struct Material {
  std::string_view name;
  double modulus, modulus_low, modulus_high;  ///< [Pa]
  double poisson;                             ///< [-]
  std::string_view source;
  std::string_view other_names = "";             ///< further spellings understood, separated by ", "
  double poisson_low = 0.0, poisson_high = 0.5;  ///< [-]
};

/// Absolute roughness of a pipe wall by material and condition.
struct RoughnessEntry {
  std::string_view material, condition;
  double typical, low, high;  ///< [m]
  std::string_view source;
};

[[nodiscard]] std::span<const Material> materials();
/// The material of that name or other spelling; letter case and the choice of blank, `-` or `_` do not matter.
[[nodiscard]] std::optional<Material> material_named(std::string_view name);
[[nodiscard]] std::span<const RoughnessEntry> roughness_table();

}  // namespace headband::pipe
