// SPDX-License-Identifier: MIT
#include "core/liquid/water.hpp"

#include <array>
#include <cmath>

namespace headband::liquid {

namespace {

// IAPWS R6-95(2018), Release on the IAPWS Formulation 1995, eq. 4 to 6, tables 1 and 2 (coefficients from memory,
// proved by its check table 7 and by an independent grid). Notation: delta = density/322, tau = 647.096 K/temperature.

/// A function of delta (d) and tau (t) with its derivatives up to the second.
struct Jet {
  double v = 0.0, d = 0.0, t = 0.0, dd = 0.0, dt = 0.0, tt = 0.0;
};
Jet operator+(const Jet& a, const Jet& b) {
  return {a.v + b.v, a.d + b.d, a.t + b.t, a.dd + b.dd, a.dt + b.dt, a.tt + b.tt};
}
Jet operator*(double c, const Jet& a) { return {c * a.v, c * a.d, c * a.t, c * a.dd, c * a.dt, c * a.tt}; }
Jet operator+(const Jet& a, double c) {
  Jet r = a;
  r.v += c;
  return r;
}
Jet operator*(const Jet& a, const Jet& b) {
  return {a.v * b.v,
          a.d * b.v + a.v * b.d,
          a.t * b.v + a.v * b.t,
          a.dd * b.v + 2.0 * a.d * b.d + a.v * b.dd,
          a.dt * b.v + a.d * b.t + a.t * b.d + a.v * b.dt,
          a.tt * b.v + 2.0 * a.t * b.t + a.v * b.tt};
}
/// f(a) from f and its two derivatives at a.v
Jet chain(const Jet& a, double f, double f1, double f2) {
  return {f, f1 * a.d, f1 * a.t, f2 * a.d * a.d + f1 * a.dd, f2 * a.d * a.t + f1 * a.dt, f2 * a.t * a.t + f1 * a.tt};
}
Jet exponential(const Jet& a) {
  const double e = std::exp(a.v);
  return chain(a, e, e, e);
}
Jet power(const Jet& a, double n) {
  const double p = std::pow(a.v, n - 2.0);
  return chain(a, p * a.v * a.v, n * p * a.v, n * (n - 1.0) * p);
}

/// n delta^d tau^t exp(-delta^c); c = 0: without the exponential.
struct PowerTerm {
  int c, d;
  double t, n;
};
constexpr std::array<PowerTerm, 51> power_terms{
    {{0, 1, -0.5, 0.12533547935523e-1}, {0, 1, 0.875, 0.78957634722828e1}, {0, 1, 1, -0.87803203303561e1},
     {0, 2, 0.5, 0.31802509345418},     {0, 2, 0.75, -0.26145533859358},   {0, 3, 0.375, -0.78199751687981e-2},
     {0, 4, 1, 0.88089493102134e-2},    {1, 1, 4, -0.66856572307965},      {1, 1, 6, 0.20433810950965},
     {1, 1, 12, -0.66212605039687e-4},  {1, 2, 1, -0.19232721156002},      {1, 2, 5, -0.25709043003438},
     {1, 3, 4, 0.16074868486251},       {1, 4, 2, -0.40092828925807e-1},   {1, 4, 13, 0.39343422603254e-6},
     {1, 5, 9, -0.75941377088144e-5},   {1, 7, 3, 0.56250979351888e-3},    {1, 9, 4, -0.15608652257135e-4},
     {1, 10, 11, 0.11537996422951e-8},  {1, 11, 4, 0.36582165144204e-6},   {1, 13, 13, -0.13251180074668e-11},
     {1, 15, 1, -0.62639586912454e-9},  {2, 1, 7, -0.10793600908932},      {2, 2, 1, 0.17611491008752e-1},
     {2, 2, 9, 0.22132295167546},       {2, 2, 10, -0.40247669763528},     {2, 3, 10, 0.58083399985759},
     {2, 4, 3, 0.49969146990806e-2},    {2, 4, 7, -0.31358700712549e-1},   {2, 4, 10, -0.74315929710341},
     {2, 5, 10, 0.47807329915480},      {2, 6, 6, 0.20527940895948e-1},    {2, 6, 10, -0.13636435110343},
     {2, 7, 10, 0.14180634400617e-1},   {2, 9, 1, 0.83326504880713e-2},    {2, 9, 2, -0.29052336009585e-1},
     {2, 9, 3, 0.38615085574206e-1},    {2, 9, 4, -0.20393486513704e-1},   {2, 9, 8, -0.16554050063734e-2},
     {2, 10, 6, 0.19955571979541e-2},   {2, 10, 9, 0.15870308324157e-3},   {2, 12, 8, -0.16388568342530e-4},
     {3, 3, 16, 0.43613615723811e-1},   {3, 4, 22, 0.34994005463765e-1},   {3, 4, 23, -0.76788197844621e-1},
     {3, 5, 23, 0.22446277332006e-1},   {4, 14, 10, -0.62689710414685e-4}, {6, 3, 50, -0.55711118565645e-9},
     {6, 6, 44, -0.19905718354408},     {6, 6, 46, 0.31777497330738},      {6, 6, 50, -0.11841182425981}}};

/// n delta^d tau^t exp(-20 (delta - 1)^2 - beta (tau - gamma)^2)
struct BellTerm {
  double d, t, beta, gamma, n;
};
constexpr std::array<BellTerm, 3> bell_terms{{{3, 0, 150, 1.21, -0.31306260323435e2},
                                              {3, 1, 150, 1.21, 0.31546140237781e2},
                                              {3, 4, 250, 1.25, -0.25213154341695e4}}};

/// n Delta^b delta exp(-C (delta - 1)^2 - D (tau - 1)^2); Delta = theta^2 + 0.2 ((delta-1)^2)^3.5,
/// theta = (1 - tau) + 0.32 ((delta-1)^2)^(1/0.6)
struct CriticalTerm {
  double b, c, d, n;
};
constexpr std::array<CriticalTerm, 2> critical_terms{
    {{0.85, 28, 700, -0.14874640856724}, {0.95, 32, 800, 0.31806110878444}}};

/// Residual part of the reduced Helmholtz energy.
Jet residual(double delta, double tau) {
  const Jet d{delta, 1.0, 0.0, 0.0, 0.0, 0.0}, t{tau, 0.0, 1.0, 0.0, 0.0, 0.0};
  Jet sum;
  for (const PowerTerm& p : power_terms) {
    Jet term = power(d, p.d) * power(t, p.t);
    if (p.c > 0) term = term * exponential(-1.0 * power(d, p.c));
    sum = sum + p.n * term;
  }
  const Jet off_d = d + -1.0, square_d = off_d * off_d;
  for (const BellTerm& p : bell_terms) {
    const Jet off_t = t + -p.gamma;
    sum = sum + p.n * (power(d, p.d) * power(t, p.t) * exponential(-20.0 * square_d + -p.beta * (off_t * off_t)));
  }
  const Jet off_t = t + -1.0;
  const Jet theta = -1.0 * off_t + 0.32 * power(square_d, 1.0 / 0.6);
  const Jet width = theta * theta + 0.2 * power(square_d, 3.5);
  for (const CriticalTerm& p : critical_terms)
    sum = sum + p.n * (power(width, p.b) * d * exponential(-p.c * square_d + -p.d * (off_t * off_t)));
  return sum;
}

/// Second derivative of the ideal-gas part by tau.
double ideal_tt(double tau) {
  constexpr double n3 = 3.00632;
  constexpr std::array<std::array<double, 2>, 5> terms{{{0.012436, 1.28728967},
                                                        {0.97315, 3.53734222},
                                                        {1.27950, 7.74073708},
                                                        {0.96956, 9.24437796},
                                                        {0.24873, 27.5075105}}};
  double sum = -n3 / (tau * tau);
  for (const auto& [n, g] : terms) {
    const double e = std::exp(-g * tau);
    sum -= n * g * g * e / ((1.0 - e) * (1.0 - e));
  }
  return sum;
}

constexpr double critical_temperature = 647.096, critical_density = 322.0, gas_constant = 461.51805;

}  // namespace

WaterByDensity water_by_density(double temperature, double density) {
  const double delta = density / critical_density, tau = critical_temperature / temperature;
  const Jet r = residual(delta, tau);
  const double rt = gas_constant * temperature;
  const double by_density = 1.0 + 2.0 * delta * r.d + delta * delta * r.dd;  // (dp/d rho)_T / (R T)
  const double mixed = 1.0 + delta * r.d - delta * tau * r.dt;
  const double cv = -tau * tau * (ideal_tt(tau) + r.tt);  // c_v / R
  WaterByDensity w{};
  w.pressure = density * rt * (1.0 + delta * r.d);
  w.isothermal_bulk_modulus = density * rt * by_density;
  w.isochoric_heat_capacity = gas_constant * cv;
  w.speed_of_sound = std::sqrt(rt * (by_density + mixed * mixed / cv));
  return w;
}

double density_of_water(double temperature, double pressure) {
  // IF97 lies within 2e-5 of the root and the liquid is nearly linear in pressure: four Newton steps are exact
  double density = 1.0 / water_under_pressure(temperature, pressure).specific_volume;
  for (int i = 0; i < 4; ++i) {
    const WaterByDensity w = water_by_density(temperature, density);
    density -= (w.pressure - pressure) / (w.isothermal_bulk_modulus / density);
  }
  return density;
}

}  // namespace headband::liquid
