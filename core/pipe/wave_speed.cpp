// SPDX-License-Identifier: MIT
#include "core/pipe/wave_speed.hpp"

#include "core/liquid/gas.hpp"

namespace headband::pipe {

template <int W>
Lanes<W> restraint_factor(
    Restraint restraint, bool thick, const Lanes<W>& poisson, const Lanes<W>& inner_diameter, const Lanes<W>& wall) {
  Lanes<W> thin = 1.0;
  switch (restraint) {
    case Restraint::anchored:
      thin = 1.0 - poisson * poisson;
      break;
    case Restraint::upstream_anchored:
      thin = 1.0 - 0.5 * poisson;
      break;
    case Restraint::expansion_joints:
      break;
  }
  if (!thick) return thin;
  return 2.0 * wall / inner_diameter * (1.0 + poisson) + inner_diameter / (inner_diameter + wall) * thin;
}

template <int W>
Lanes<W> wave_speed(const Lanes<W>& density,
                    const Lanes<W>& bulk_modulus,
                    const Lanes<W>& wall_compliance,
                    const Lanes<W>& free_gas,
                    const Lanes<W>& pressure,
                    const Lanes<W>& temperature) {
  const auto with_gas = free_gas > Lanes<W>(0.0);
  const Lanes<W> p = select(with_gas, pressure, Lanes<W>(liquid::gas_reference_pressure));
  const Lanes<W> share = liquid::gas_fraction(free_gas, p);
  const auto mixture = liquid::mix(density, bulk_modulus, share, p, select(with_gas, temperature, Lanes<W>(288.15)));
  const Lanes<W> rho = select(with_gas, mixture.density, density);
  const Lanes<W> compressibility = select(with_gas, mixture.compressibility, 1.0 / bulk_modulus);
  return sqrt(1.0 / (rho * (compressibility + wall_compliance)));
}

template Lanes<1> restraint_factor<1>(Restraint, bool, const Lanes<1>&, const Lanes<1>&, const Lanes<1>&);
template Lanes<8> restraint_factor<8>(Restraint, bool, const Lanes<8>&, const Lanes<8>&, const Lanes<8>&);
template Lanes<1> wave_speed<1>(
    const Lanes<1>&, const Lanes<1>&, const Lanes<1>&, const Lanes<1>&, const Lanes<1>&, const Lanes<1>&);
template Lanes<8> wave_speed<8>(
    const Lanes<8>&, const Lanes<8>&, const Lanes<8>&, const Lanes<8>&, const Lanes<8>&, const Lanes<8>&);

}  // namespace headband::pipe
