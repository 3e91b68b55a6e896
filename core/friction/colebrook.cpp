// SPDX-License-Identifier: MIT
#include "core/friction/colebrook.hpp"

#include <algorithm>
#include <cmath>

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
Lanes<W> root_anew(const Lanes<W>& rough, const Lanes<W>& b) {
  if constexpr (W == 16) {
    return side_by_side(colebrook_root<8>(first_eight(rough), first_eight(b)),
                        colebrook_root<8>(last_eight(rough), last_eight(b)));
  } else {
    return colebrook_root<W>(rough, b);
  }
}

}  // namespace

template <int W>
Lanes<W> colebrook_root_far(const Lanes<W>& rough,
                            const Lanes<W>& reynolds,
                            const Lanes<W>& shift,
                            const Lanes<W>& once) {
  const Corrected<W> c = detail::corrected_once<W>(rough, reynolds, shift, once);
  if (all(c.enough)) return c.x;
  const Lanes<W> constant =
      select(shift == Lanes<W>(prandtl_shift), Lanes<W>(prandtl_constant), Lanes<W>(colebrook_constant));
  return select(c.enough, c.x, root_anew<W>(rough, constant / reynolds));
}
template Lanes<1> colebrook_root_far<1>(const Lanes<1>&, const Lanes<1>&, const Lanes<1>&, const Lanes<1>&);
template Lanes<8> colebrook_root_far<8>(const Lanes<8>&, const Lanes<8>&, const Lanes<8>&, const Lanes<8>&);
template Lanes<16> colebrook_root_far<16>(const Lanes<16>&, const Lanes<16>&, const Lanes<16>&, const Lanes<16>&);

namespace {

template <int W>
HEADBAND_INLINE Lanes<W> factor_of(const Lanes<W>& relative_roughness, const Lanes<W>& reynolds) {
  const Lanes<W> re = max(reynolds, Lanes<W>(least_turbulent_reynolds));
  const Lanes<W> x = colebrook_root<W>(relative_roughness * colebrook_rough * re, colebrook_constant / re);
  return 1.0 / (x * x);
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
    base::store_eight(factor_of<8>(base::load_eight(&relative_roughness[i]), base::load_eight(&reynolds[i])),
                      &factor[i]);
  }
  for (; i < n; ++i) factor[i] = colebrook_factor(relative_roughness[i], reynolds[i]);
}

}  // namespace headband::friction
