// SPDX-License-Identifier: MIT
#include "core/liquid/draws.hpp"
#include "core/liquid/water.hpp"

#include <array>
#include <cmath>

namespace headband::liquid {

namespace {

/// c0 + c1 x + c2 x^2 + …
template <std::size_t N, int W>
Lanes<W> polynomial(const std::array<double, N>& c, const Lanes<W>& x) {
  Lanes<W> sum = 0.0;
  for (std::size_t i = N; i-- > 0;) sum = sum * x + c[i];
  return sum;
}

constexpr double practical_salinity = 35.0, root_of_salinity = 5.9160797830996160426;
/// The same water in grams of salt per kilogram (reference composition, Millero et al. 2008).
constexpr double grams_of_salt_per_kilogram = 35.16504;

// One-atmosphere equation of state of sea water, Millero & Poisson 1981, Deep-Sea Res. 28, 625 (from memory; its
// printed check S = 35, t = 5 and 25 degC is in the tests). t in degC.
template <int W>
Lanes<W> density_of_sea_water(const Lanes<W>& t) {
  constexpr std::array pure{999.842594, 6.793952e-2, -9.095290e-3, 1.001685e-4, -1.120083e-6, 6.536332e-9};
  constexpr std::array linear{0.824493, -4.0899e-3, 7.6438e-5, -8.2467e-7, 5.3875e-9};
  constexpr std::array three_halves{-5.72466e-3, 1.0227e-4, -1.6546e-6};
  constexpr double square = 4.8314e-4;
  constexpr double s = practical_salinity;
  return polynomial(pure, t) +
         s * (polynomial(linear, t) + root_of_salinity * polynomial(three_halves, t) + s * square);
}

// Secant bulk modulus at zero gauge pressure = isothermal modulus there. Millero, Chen, Bradshaw & Schleicher 1980,
// Deep-Sea Res. 27, 255 (from memory). t in degC; result in bar turned into Pa.
template <int W>
Lanes<W> isothermal_modulus_of_sea_water(const Lanes<W>& t) {
  constexpr std::array pure{19652.21, 148.4206, -2.327105, 1.360477e-2, -5.155288e-5};
  constexpr std::array linear{54.6746, -0.603459, 1.09987e-2, -6.1670e-5};
  constexpr std::array three_halves{7.944e-2, 1.6483e-2, -5.3009e-4};
  constexpr double s = practical_salinity;
  return 1e5 * (polynomial(pure, t) + s * (polynomial(linear, t) + root_of_salinity * polynomial(three_halves, t)));
}

// Speed of sound at atmospheric pressure. Chen & Millero 1977, J. Acoust. Soc. Am. 62, 1129 (from memory). t in degC.
template <int W>
Lanes<W> sound_speed_of_sea_water(const Lanes<W>& t) {
  constexpr std::array pure{1402.388, 5.03711, -5.80852e-2, 3.3420e-4, -1.47800e-6, 3.1464e-9};
  constexpr std::array linear{1.389, -1.262e-2, 7.164e-5, 2.006e-6, -3.21e-8};
  constexpr std::array three_halves{-1.922e-2, -4.42e-5};
  constexpr double square = 1.727e-3;
  constexpr double s = practical_salinity;
  return polynomial(pure, t) +
         s * (polynomial(linear, t) + root_of_salinity * polynomial(three_halves, t) + s * square);
}

// Sharqawy, Lienhard & Zubair 2010, Desalin. Water Treat. 16, 354, eq. 22 (after Isdale et al.; from memory):
// mu = mu_water (1 + A S + B S^2), S in kg/kg, t in degC.
template <int W>
Lanes<W> viscosity_ratio(const Lanes<W>& t) {
  constexpr std::array first{1.541, 1.998e-2, -9.52e-5};
  constexpr std::array second{7.974, -7.561e-2, 4.724e-4};
  constexpr double s = grams_of_salt_per_kilogram / 1000.0;
  return 1.0 + s * (polynomial(first, t) + s * polynomial(second, t));
}

// Raoult's law for sea salt, the same paper eq. 34 (from memory): p_water / p = 1 + 0.57357 S/(1000 - S), S in g/kg.
double vapour_pressure_ratio() {
  return 1.0 / (1.0 + 0.57357 * grams_of_salt_per_kilogram / (1000.0 - grams_of_salt_per_kilogram));
}

}  // namespace

template <int W>
PropertiesOf<W> sea_water_of(const Lanes<W>& temperature) {
  const Lanes<W> t = temperature - 273.15;
  PropertiesOf<W> p;
  p.density = density_of_sea_water<W>(t);
  const Lanes<W> speed = sound_speed_of_sea_water<W>(t);
  p.bulk_modulus_isothermal = isothermal_modulus_of_sea_water<W>(t);
  p.bulk_modulus_isentropic = p.density * speed * speed;
  p.dynamic_viscosity = water_at_one_bar<W>(temperature).dynamic_viscosity * viscosity_ratio<W>(t);
  p.vapour_pressure = vapour_pressure<W>(temperature) * vapour_pressure_ratio();
  return p;
}

template PropertiesOf<1> sea_water_of<1>(const Lanes<1>&);
template PropertiesOf<8> sea_water_of<8>(const Lanes<8>&);

Properties sea_water(double temperature) {
  const auto of = sea_water_of<1>(Lanes<1>(temperature));
  Properties p{};
  p.density = of.density.number;
  p.dynamic_viscosity = of.dynamic_viscosity.number;
  p.bulk_modulus_isentropic = of.bulk_modulus_isentropic.number;
  p.bulk_modulus_isothermal = of.bulk_modulus_isothermal.number;
  p.speed_of_sound = sound_speed_of_sea_water<1>(Lanes<1>(temperature - 273.15)).number;
  p.vapour_pressure = of.vapour_pressure.number;
  return p;
}

}  // namespace headband::liquid
