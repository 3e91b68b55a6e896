// SPDX-License-Identifier: MIT
#include "core/liquid/water.hpp"

#include "core/liquid/draws.hpp"

#include <array>
#include <cmath>

namespace headband::liquid {

namespace {

/// x^n by repeated squaring; n of either sign.
double integer_power(double x, int n) {
  double base = n < 0 ? 1.0 / x : x, result = 1.0;
  for (auto k = static_cast<unsigned>(n < 0 ? -n : n); k != 0; k >>= 1) {
    if ((k & 1U) != 0) result *= base;
    base *= base;
  }
  return result;
}

}  // namespace

WaterAtOneBar water_at_one_bar(double temperature) {
  const auto w = water_at_one_bar<1>(base::Lanes<1>(temperature));
  return {w.specific_volume.number,
          w.volume_by_pressure.number,
          w.volume_by_temperature.number,
          w.heat_capacity.number,
          w.speed_of_sound.number,
          w.dynamic_viscosity.number};
}

namespace {

// IAPWS R7-97(2012), table 2: exponents I, J and coefficient n of the dimensionless Gibbs energy of region 1
// (from memory, proved by its check table 5).
struct RegionOneTerm {
  int i, j;
  double n;
};
constexpr std::array<RegionOneTerm, 34> region_one{
    {{0, -2, 0.14632971213167},       {0, -1, -0.84548187169114},       {0, 0, -0.37563603672040e1},
     {0, 1, 0.33855169168385e1},      {0, 2, -0.95791963387872},        {0, 3, 0.15772038513228},
     {0, 4, -0.16616417199501e-1},    {0, 5, 0.81214629983568e-3},      {1, -9, 0.28319080123804e-3},
     {1, -7, -0.60706301565874e-3},   {1, -1, -0.18990068218419e-1},    {1, 0, -0.32529748770505e-1},
     {1, 1, -0.21841717175414e-1},    {1, 3, -0.52838357969930e-4},     {2, -3, -0.47184321073267e-3},
     {2, 0, -0.30001780793026e-3},    {2, 1, 0.47661393906987e-4},      {2, 3, -0.44141845330846e-5},
     {2, 17, -0.72694996297594e-15},  {3, -4, -0.31679644845054e-4},    {3, 0, -0.28270797985312e-5},
     {3, 6, -0.85205128120103e-9},    {4, -5, -0.22425281908000e-5},    {4, -2, -0.65171222895601e-6},
     {4, 10, -0.14341729937924e-12},  {5, -8, -0.40516996860117e-6},    {8, -11, -0.12734301741641e-8},
     {8, -6, -0.17424871230634e-9},   {21, -29, -0.68762131295531e-18}, {23, -31, 0.14478307828521e-19},
     {29, -38, 0.26335781662795e-22}, {30, -39, -0.11947622640071e-22}, {31, -40, 0.18228094581404e-23},
     {32, -41, -0.93537087292458e-25}}};

}  // namespace

WaterUnderPressure water_under_pressure(double temperature, double pressure) {
  constexpr double gas_constant = 461.526, unit_pressure = 16.53e6, unit_temperature = 1386.0;  // R7-97 eq. 1, 7
  const double pi = pressure / unit_pressure, tau = unit_temperature / temperature;
  const double a = 7.1 - pi, b = tau - 1.222;
  double g_p = 0.0, g_pp = 0.0, g_tt = 0.0, g_pt = 0.0;
  for (const auto& t : region_one) {
    const double i = t.i, j = t.j;
    const double a_i = integer_power(a, t.i), b_j = integer_power(b, t.j);
    g_p -= t.n * i * a_i / a * b_j;
    g_pp += t.n * i * (i - 1.0) * a_i / (a * a) * b_j;
    g_tt += t.n * a_i * j * (j - 1.0) * b_j / (b * b);
    g_pt -= t.n * i * a_i / a * j * b_j / b;
  }
  WaterUnderPressure w{};
  w.specific_volume = pi * g_p * gas_constant * temperature / pressure;
  w.isothermal_compressibility = -g_pp / g_p / unit_pressure;
  w.heat_capacity = -tau * tau * g_tt * gas_constant;
  const double mixed = g_p - tau * g_pt;
  w.speed_of_sound = std::sqrt(gas_constant * temperature * g_p * g_p / (mixed * mixed / (tau * tau * g_tt) - g_pp));
  return w;
}

double vapour_pressure(double temperature) { return vapour_pressure<1>(base::Lanes<1>(temperature)).number; }

Properties water(double temperature, double pressure) {
  constexpr double one_bar_formula_to = 0.15e6;
  Properties p{};
  p.vapour_pressure = vapour_pressure(temperature);
  if (pressure <= one_bar_formula_to) {
    const WaterAtOneBar w = water_at_one_bar(temperature);
    p.density = 1.0 / (w.specific_volume + w.volume_by_pressure * (pressure - 0.1e6));
    p.dynamic_viscosity = w.dynamic_viscosity;
    p.speed_of_sound = w.speed_of_sound;
    p.bulk_modulus_isothermal = -w.specific_volume / w.volume_by_pressure;
  } else {
    p.density = density_of_water(temperature, pressure);
    const WaterByDensity w = water_by_density(temperature, p.density);
    p.dynamic_viscosity = viscosity_of_water(temperature, p.density);
    p.speed_of_sound = w.speed_of_sound;
    p.bulk_modulus_isothermal = w.isothermal_bulk_modulus;
  }
  p.bulk_modulus_isentropic = p.density * p.speed_of_sound * p.speed_of_sound;
  return p;
}

}  // namespace headband::liquid
