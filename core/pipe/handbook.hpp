#pragma once
// SPDX-License-Identifier: MIT

#include <optional>
#include <span>
#include <string_view>

namespace headband::pipe {

/// Elastic numbers of a pipe material; ranges as the source gives them.
struct Material {
  std::string_view name;
  double modulus, modulus_low, modulus_high;  ///< [Pa]
  double poisson;
  std::string_view source;
};

/// Absolute roughness of a pipe wall by material and condition.
struct RoughnessEntry {
  std::string_view material, condition;
  double typical, low, high;  ///< [m]
  std::string_view source;
};

[[nodiscard]] std::span<const Material> materials();
[[nodiscard]] std::optional<Material> material_named(std::string_view name);
[[nodiscard]] std::span<const RoughnessEntry> roughness_table();

}  // namespace headband::pipe
