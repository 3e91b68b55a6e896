// SPDX-License-Identifier: MIT
#include "core/liquid/draws.hpp"

#include "core/base/elementary.hpp"

#include <array>

namespace headband::liquid {

namespace {

/// One term of a sum of powers.
struct Term {
  double c;
  int power;
};

/// x, x^2 … x^11.
template <int W>
std::array<Lanes<W>, 12> powers_of(const Lanes<W>& x) {
  std::array<Lanes<W>, 12> p;
  p[0] = Lanes<W>(1.0);
  p[1] = x;
  for (std::size_t i = 2; i < p.size(); ++i) p[i] = p[i / 2] * p[i - i / 2];
  return p;
}

/// Sum of c x^(power + raise) times a factor of the power: 1, n, or n (n + 1) for raise 0, 1, 2 (the derivatives of
/// x = 10/(593 K - T) and x = 10/(T - 232 K), but for the sign of the first of the latter and the tens).
template <int raise, int W, std::size_t N>
HEADBAND_INLINE Lanes<W> sum(const std::array<Term, N>& terms, const std::array<Lanes<W>, 12>& p) {
  Lanes<W> total = 0.0;
  for (const Term& t : terms) {
    const double n = t.power;
    const double factor = raise == 0 ? 1.0 : (raise == 1 ? n : n * (n + 1.0));
    total += (t.c * factor) * p[static_cast<std::size_t>(t.power + raise)];
  }
  return total;
}

}  // namespace

// IAPWS SR6-08(2011), Supplementary Release on Properties of Liquid Water at 0.1 MPa, tables 1 to 3
// (coefficients from memory, proved by its check table 8).
template <int W>
WaterAtOneBarOf<W> water_at_one_bar(const Lanes<W>& temperature) {
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
  constexpr std::array<std::array<double, 2>, 4> viscosity{
      {{280.68, -1.9}, {511.45, -7.7}, {61.131, -19.6}, {0.45903, -40.0}}};

  const auto alpha = powers_of<W>(unit_temperature / (593.0 - temperature));
  const auto beta = powers_of<W>(unit_temperature / (temperature - 232.0));
  const Lanes<W> volume = a_constant + (sum<0, W>(a_volume, alpha) + sum<0, W>(b_volume, beta));
  const Lanes<W> expansion = sum<1, W>(a_volume, alpha) - sum<1, W>(b_volume, beta);
  const Lanes<W> slope = sum<0, W>(a_slope, alpha) + sum<0, W>(b_slope, beta);
  const Lanes<W> curvature = sum<2, W>(a_gibbs, alpha) + sum<2, W>(b_gibbs, beta);

  WaterAtOneBarOf<W> w;
  w.specific_volume = (gas_constant * unit_temperature / unit_pressure) * volume;
  w.volume_by_temperature = (gas_constant / unit_pressure) * expansion;
  w.volume_by_pressure = (gas_constant * unit_temperature / (unit_pressure * unit_pressure)) * slope;
  w.heat_capacity = -gas_constant * (c_log + (temperature / unit_temperature) * curvature);
  const Lanes<W> stiff =
      -w.volume_by_pressure - temperature * w.volume_by_temperature * w.volume_by_temperature / w.heat_capacity;
  w.speed_of_sound = w.specific_volume / sqrt(stiff);
  const Lanes<W> log_ratio = base::log(temperature / 300.0);
  w.dynamic_viscosity = 0.0;
  for (const auto& [c, power] : viscosity) w.dynamic_viscosity += (1e-6 * c) * base::exp(power * log_ratio);
  return w;
}

// IAPWS R7-97(2012), table 34, eq. 30 (from memory, proved by its check table 35).
template <int W>
Lanes<W> vapour_pressure(const Lanes<W>& temperature) {
  constexpr double n1 = 0.11670521452767e4, n2 = -0.72421316703206e6, n3 = -0.17073846940092e2, n4 = 0.12020824702470e5,
                   n5 = -0.32325550322333e7, n6 = 0.14915108613530e2, n7 = -0.48232657361591e4, n8 = 0.40511340542057e6,
                   n9 = -0.23855557567849, n10 = 0.65017534844798e3;
  const Lanes<W> theta = temperature + n9 / (temperature - n10);
  const Lanes<W> a = (theta + n1) * theta + n2;
  const Lanes<W> b = (n3 * theta + n4) * theta + n5;
  const Lanes<W> c = (n6 * theta + n7) * theta + n8;
  const Lanes<W> root = 2.0 * c / (sqrt(b * b - 4.0 * a * c) - b);
  return 1e6 * root * root * root * root;
}

template <int W>
PropertiesOf<W> water_of(const Lanes<W>& temperature) {
  const WaterAtOneBarOf<W> w = water_at_one_bar<W>(temperature);
  PropertiesOf<W> p;
  p.density = 1.0 / w.specific_volume;
  p.dynamic_viscosity = w.dynamic_viscosity;
  p.bulk_modulus_isentropic = p.density * w.speed_of_sound * w.speed_of_sound;
  p.bulk_modulus_isothermal = -w.specific_volume / w.volume_by_pressure;
  p.vapour_pressure = vapour_pressure<W>(temperature);
  return p;
}

// ASTM D341 form; the double logarithm is linear in log T (see ViscosityLaw).
template <int W>
Lanes<W> viscosity_between(const ViscosityPoints<W>& points, const Lanes<W>& temperature) {
  constexpr double centistokes = 1e-6, shift = 0.7;
  const Lanes<W> y1 = base::log(base::log10(points.viscosity_1 / centistokes + shift));
  const Lanes<W> y2 = base::log(base::log10(points.viscosity_2 / centistokes + shift));
  const Lanes<W> x1 = base::log(points.temperature_1), x2 = base::log(points.temperature_2);
  const Lanes<W> y = y1 + (y2 - y1) * ((base::log(temperature) - x1) / (x2 - x1));
  constexpr double ln_10 = 2.302585092994045684;
  return centistokes * (base::exp(ln_10 * base::exp(y)) - shift);
}

template WaterAtOneBarOf<1> water_at_one_bar<1>(const Lanes<1>&);
template WaterAtOneBarOf<8> water_at_one_bar<8>(const Lanes<8>&);
template Lanes<1> vapour_pressure<1>(const Lanes<1>&);
template Lanes<8> vapour_pressure<8>(const Lanes<8>&);
template PropertiesOf<1> water_of<1>(const Lanes<1>&);
template PropertiesOf<8> water_of<8>(const Lanes<8>&);
template Lanes<1> viscosity_between<1>(const ViscosityPoints<1>&, const Lanes<1>&);
template Lanes<8> viscosity_between<8>(const ViscosityPoints<8>&, const Lanes<8>&);

}  // namespace headband::liquid
