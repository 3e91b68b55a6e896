// SPDX-License-Identifier: MIT
#include "core/liquid/water.hpp"

#include <array>
#include <cmath>

namespace headband::liquid {

// IAPWS R12-08, Release on the IAPWS Formulation 2008 for the Viscosity of Ordinary Water Substance, eq. 10 to 12,
// tables 1 and 2 (coefficients from memory, proved by its check table 4).
double viscosity_of_water(double temperature, double density) {
  constexpr double critical_temperature = 647.096, critical_density = 322.0, unit_viscosity = 1e-6;
  constexpr std::array<double, 4> dilute{1.67752, 2.20462, 0.6366564, -0.241605};
  // row: power of (1/T - 1); column: power of (density - 1)
  constexpr std::array<std::array<double, 7>, 6> dense{{
      {0.520094, 0.222531, -0.281378, 0.161913, -0.0325372, 0.0, 0.0},
      {0.0850895, 0.999115, -0.906851, 0.257399, 0.0, 0.0, 0.0},
      {-1.08374, 1.88797, -0.772479, 0.0, 0.0, 0.0, 0.0},
      {-0.289555, 1.26613, -0.489837, 0.0, 0.0698452, 0.0, -0.00435673},
      {0.0, 0.0, -0.257040, 0.0, 0.0, 0.00872102, 0.0},
      {0.0, 0.120573, 0.0, 0.0, 0.0, 0.0, -0.000593264},
  }};
  const double t = temperature / critical_temperature, r = density / critical_density;
  double sum = 0.0;
  for (std::size_t i = dilute.size(); i-- > 0;) sum = sum / t + dilute[i];
  const double at_zero_density = 100.0 * std::sqrt(t) / sum;
  double exponent = 0.0;
  for (std::size_t i = dense.size(); i-- > 0;) {
    double row = 0.0;
    for (std::size_t j = dense[i].size(); j-- > 0;) row = row * (r - 1.0) + dense[i][j];
    exponent = exponent * (1.0 / t - 1.0) + row;
  }
  return unit_viscosity * at_zero_density * std::exp(r * exponent);
}

}  // namespace headband::liquid
