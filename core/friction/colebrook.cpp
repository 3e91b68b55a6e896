// SPDX-License-Identifier: MIT
#include "core/friction/colebrook.hpp"

#include <algorithm>
#include <array>
#include <cmath>
#include <cstring>

namespace headband::friction {

PlainRoot colebrook_plain(double relative_roughness, double reynolds) {
  constexpr int most_steps = 50;
  const double a = relative_roughness / 3.7, b = colebrook_constant / reynolds;
  // convex and rising: from any start at or left of the root Newton comes from above, monotone
  double x = -2.0 * std::log10(a + b * 8.0);
  if (!(x > 1e-3)) x = 1e-3;
  PlainRoot root;
  for (root.iterations = 1; root.iterations <= most_steps; ++root.iterations) {
    const double y = a + b * x;
    const double step = (x + 2.0 * std::log10(y)) / (1.0 + two_over_ln_10 * b / y);
    x = std::max(x - step, 1e-3 * x);
    if (std::abs(step) <= 1e-15 * x) {
      root.converged = true;
      break;
    }
  }
  // the last bits can swing for ever: a step of rounding size is convergence as well
  if (!root.converged) {
    const double y = a + b * x;
    root.converged = std::abs(x + 2.0 * std::log10(y)) <= 1e-14 * (1.0 + x);
    root.iterations = most_steps;
  }
  root.factor = 1.0 / (x * x);
  return root;
}

namespace {

template <int W>
HEADBAND_INLINE Lanes<W> factor_of(const Lanes<W>& relative_roughness, const Lanes<W>& reynolds) {
  const Lanes<W> re = max(reynolds, Lanes<W>(least_turbulent_reynolds));
  const Lanes<W> x = colebrook_root<W>(relative_roughness * colebrook_rough * re, colebrook_constant / re);
  return 1.0 / (x * x);
}

/// Register by register: a copy of the whole struct would pass through memory.
HEADBAND_INLINE Lanes<8> load(const double* from) {
  Lanes<8> r;
  for (int i = 0; i < Lanes<8>::parts; ++i) std::memcpy(&r.part[i], from + 4 * i, sizeof(base::Quad));
  return r;
}
HEADBAND_INLINE void store(const Lanes<8>& from, double* to) {
  for (int i = 0; i < Lanes<8>::parts; ++i) std::memcpy(to + 4 * i, &from.part[i], sizeof(base::Quad));
}

}  // namespace

double colebrook_factor(double relative_roughness, double reynolds) {
  return factor_of<1>(relative_roughness, reynolds).number;
}

void colebrook_factors(std::span<const double> relative_roughness,
                       std::span<const double> reynolds,
                       std::span<double> factor) {
  constexpr std::size_t lanes = 8;
  const std::size_t n = std::min({relative_roughness.size(), reynolds.size(), factor.size()});
  std::size_t i = 0;
  for (; i + lanes <= n; i += lanes) {
    store(factor_of<8>(load(&relative_roughness[i]), load(&reynolds[i])), &factor[i]);
  }
  for (; i < n; ++i) factor[i] = colebrook_factor(relative_roughness[i], reynolds[i]);
}

}  // namespace headband::friction
