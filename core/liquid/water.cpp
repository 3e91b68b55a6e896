// SPDX-License-Identifier: MIT
#include "core/liquid/water.hpp"

#include <array>
#include <cmath>

namespace headband::liquid {

namespace {

/// x^n by repeated squaring; n of either sign.
double integer_power(double x, int n) {
  double base = n < 0 ? 1.0 / x : x, result = 1.0;
  for (unsigned k = static_cast<unsigned>(n < 0 ? -n : n); k != 0; k >>= 1) {
    if (k & 1U) result *= base;
    base *= base;
  }
  return result;
}

/// One term: coefficient times a power.
struct Term {
  double c;
  int power;
};

/// Value, first and second derivative of a sum of powers, by temperature.
struct Jet {
  double value = 0.0, first = 0.0, second = 0.0;
};

/// Adds sum of c x^power with dx/dT = x * rate (rate itself +x/10 or -x/10: x = 10/(593-T) or 10/(T-232)).
template <std::size_t N>
void add(Jet& jet, const std::array<Term, N>& terms, double x, double sign) {
  for (const Term& t : terms) {
    const double n = t.power, p = t.c * integer_power(x, t.power);
    jet.value += p;
    jet.first += sign * n * p * x / 10.0;
    jet.second += n * (n + 1.0) * p * x * x / 100.0;
  }
}

}  // namespace

// IAPWS SR6-08(2011), Supplementary Release on Properties of Liquid Water at 0.1 MPa, tables 1 to 3
// (coefficients from memory, proved by its check table 8).
WaterAtOneBar water_at_one_bar(double temperature) {
  constexpr double gas_constant = 461.51805, unit_temperature = 10.0, unit_pressure = 0.1e6;
  constexpr std::array<Term, 3> a_gibbs{{{-1.661470539e5, 4}, {2.708781640e6, 5}, {-1.557191544e8, 7}}};
  constexpr std::array<Term, 4> b_gibbs{
      {{-8.237426256e-1, 2}, {1.908956353, 3}, {-2.017597384, 4}, {8.546361348e-1, 5}}};
  constexpr double c_log = -8.983025854;
  constexpr double a_constant = 1.93763157e-2;
  constexpr std::array<Term, 5> a_volume{
      {{6.74458446e3, 4}, {-2.22521604e5, 5}, {1.00231247e8, 7}, {-1.63552118e9, 8}, {8.32299658e9, 9}}};
  constexpr std::array<Term, 6> b_volume{{{5.78545292e-3, 1},
                                          {-1.53195665e-2, 2},
                                          {3.11337859e-2, 3},
                                          {-4.23546241e-2, 4},
                                          {3.38713507e-2, 5},
                                          {-1.19946761e-2, 6}}};
  constexpr std::array<Term, 5> a_slope{
      {{-7.5245878e-6, 1}, {-1.3767418e-2, 3}, {1.0627293e1, 5}, {-2.0457795e2, 6}, {1.2037414e3, 7}}};
  constexpr std::array<Term, 7> b_slope{{{-3.1091470e-6, 1},
                                         {2.8964919e-5, 3},
                                         {-1.3112763e-4, 4},
                                         {3.0410453e-4, 5},
                                         {-3.9034594e-4, 6},
                                         {2.3403117e-4, 7},
                                         {-4.8510101e-5, 9}}};
  constexpr std::array<Term, 4> viscosity_terms{{{280.68, -19}, {511.45, -77}, {61.131, -196}, {0.45903, -400}}};

  const double alpha = unit_temperature / (593.0 - temperature);
  const double beta = unit_temperature / (temperature - 232.0);
  Jet gibbs, volume, slope;
  add(gibbs, a_gibbs, alpha, 1.0);
  add(gibbs, b_gibbs, beta, -1.0);
  add(volume, a_volume, alpha, 1.0);
  add(volume, b_volume, beta, -1.0);
  add(slope, a_slope, alpha, 1.0);
  add(slope, b_slope, beta, -1.0);

  WaterAtOneBar w{};
  w.specific_volume = gas_constant * unit_temperature / unit_pressure * (a_constant + volume.value);
  w.volume_by_temperature = gas_constant * unit_temperature / unit_pressure * volume.first;
  w.volume_by_pressure = gas_constant * unit_temperature / (unit_pressure * unit_pressure) * slope.value;
  const double tau = temperature / unit_temperature;
  w.heat_capacity = -gas_constant * (c_log + tau * unit_temperature * unit_temperature * gibbs.second);
  const double denominator =
      -w.volume_by_pressure - temperature * w.volume_by_temperature * w.volume_by_temperature / w.heat_capacity;
  w.speed_of_sound = std::sqrt(w.specific_volume * w.specific_volume / denominator);
  double sum = 0.0;
  for (const Term& t : viscosity_terms) sum += t.c * std::pow(temperature / 300.0, t.power / 10.0);
  w.dynamic_viscosity = 1e-6 * sum;
  return w;
}

namespace {

// IAPWS R7-97(2012), table 2: exponents I, J and coefficient n of the dimensionless Gibbs energy of region 1
// (from memory, proved by its check table 5).
struct RegionOneTerm {
  int i, j;
  double n;
};
constexpr std::array<RegionOneTerm, 34> region_one{{{0, -2, 0.14632971213167},
                                                    {0, -1, -0.84548187169114},
                                                    {0, 0, -0.37563603672040e1},
                                                    {0, 1, 0.33855169168385e1},
                                                    {0, 2, -0.95791963387872},
                                                    {0, 3, 0.15772038513228},
                                                    {0, 4, -0.16616417199501e-1},
                                                    {0, 5, 0.81214629983568e-3},
                                                    {1, -9, 0.28319080123804e-3},
                                                    {1, -7, -0.60706301565874e-3},
                                                    {1, -1, -0.18990068218419e-1},
                                                    {1, 0, -0.32529748770505e-1},
                                                    {1, 1, -0.21841717175414e-1},
                                                    {1, 3, -0.52838357969930e-4},
                                                    {2, -3, -0.47184321073267e-3},
                                                    {2, 0, -0.30001780793026e-3},
                                                    {2, 1, 0.47661393906987e-4},
                                                    {2, 3, -0.44141845330846e-5},
                                                    {2, 17, -0.72694996297594e-15},
                                                    {3, -4, -0.31679644845054e-4},
                                                    {3, 0, -0.28270797985312e-5},
                                                    {3, 6, -0.85205128120103e-9},
                                                    {4, -5, -0.22425281908000e-5},
                                                    {4, -2, -0.65171222895601e-6},
                                                    {4, 10, -0.14341729937924e-12},
                                                    {5, -8, -0.40516996860117e-6},
                                                    {8, -11, -0.12734301741641e-8},
                                                    {8, -6, -0.17424871230634e-9},
                                                    {21, -29, -0.68762131295531e-18},
                                                    {23, -31, 0.14478307828521e-19},
                                                    {29, -38, 0.26335781662795e-22},
                                                    {30, -39, -0.11947622640071e-22},
                                                    {31, -40, 0.18228094581404e-23},
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

double vapour_pressure(double temperature) {
  // IAPWS R7-97(2012), table 34, eq. 30 (from memory, proved by its check table 35)
  constexpr double n1 = 0.11670521452767e4, n2 = -0.72421316703206e6, n3 = -0.17073846940092e2,
                   n4 = 0.12020824702470e5, n5 = -0.32325550322333e7, n6 = 0.14915108613530e2,
                   n7 = -0.48232657361591e4, n8 = 0.40511340542057e6, n9 = -0.23855557567849, n10 = 0.65017534844798e3;
  const double theta = temperature + n9 / (temperature - n10);
  const double a = (theta + n1) * theta + n2;
  const double b = (n3 * theta + n4) * theta + n5;
  const double c = (n6 * theta + n7) * theta + n8;
  const double root = 2.0 * c / (-b + std::sqrt(b * b - 4.0 * a * c));
  return 1e6 * root * root * root * root;
}

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
