#pragma once
// SPDX-License-Identifier: MIT
//
// Explicit friction laws for the turbulent pipe. Notation: x = 1/sqrt(f), e = roughness/bore, Re, log = log10; each
// returns x and its derivative dx = d x / d ln Re. Constants as in the papers named.

#include "core/base/elementary.hpp"
#include "core/base/lanes.hpp"
#include "core/friction/colebrook.hpp"

namespace headband::friction {

/// x = 1/sqrt(f) and d x / d ln Re [-].
template <int W>
struct Root {
  Lanes<W> x, dx;
};

/// The turbulent side of a law [-].
template <int W>
struct Turbulent {
  Lanes<W> x, factor, half_slope;  ///< 1/sqrt(f), f without scatter, half of d ln f/d ln Re
};

/// Factor and slope at a root of Colebrook-White or the smooth law, by one quotient for both.
/// @param rough as in colebrook.hpp
template <int W>
[[nodiscard]] HEADBAND_INLINE Turbulent<W> colebrook_side(const Lanes<W>& rough, const Lanes<W>& x) {
  const Lanes<W> square = x * x, sum = (rough + two_over_ln_10) + x;
  const Lanes<W> both = 1.0 / (square * sum);
  return {x, sum * both, -two_over_ln_10 * (square * both)};
}

namespace detail {

inline constexpr double one_over_ln_10 = 0.43429448190325182765;

/// -2 log10(w) and its derivative from dw = d w / d ln Re.
template <int W>
[[nodiscard]] HEADBAND_INLINE Root<W> minus_two_log(const Lanes<W>& w, const Lanes<W>& dw) {
  return {-two_over_ln_10 * base::log(w), -two_over_ln_10 * (dw / w)};
}

}  // namespace detail

/// Haaland 1983, J. Fluids Eng. 105, 89: x = -1.8 log((e/3.7)^1.11 + 6.9/Re). Two quotients; this is up to the first.
/// @param rough_term (e/3.7)^1.11 @param reynolds >= 100
template <int W>
[[nodiscard]] HEADBAND_INLINE base::LogBegun<W> begin_haaland(const Lanes<W>& rough_term, const Lanes<W>& reynolds) {
  const Lanes<W> over = fused(rough_term, reynolds, Lanes<W>(6.9));  // the argument of the logarithm is over/Re
  return base::begin_log_of_ratio(reynolds, over, over);
}

/// From the first quotient on. @param log the logarithm begun @param inverse that of `begin_haaland`
template <int W>
[[nodiscard]] HEADBAND_INLINE Turbulent<W> finish_haaland(const Lanes<W>& log, const Lanes<W>& inverse) {
  constexpr double c = 1.8 * detail::one_over_ln_10;
  const Lanes<W> factor = (1.0 / (c * c)) / (log * log);
  // x = c log, d x / d ln Re = c 6.9/over, d ln f / d ln Re = -2 (d x / d ln Re)/x
  return {c * log, factor, (-6.9 * c * c) * inverse * (log * factor)};
}

/// The whole of it.
template <int W>
[[nodiscard]] HEADBAND_INLINE Turbulent<W> haaland(const Lanes<W>& rough_term, const Lanes<W>& reynolds) {
  const base::LogBegun<W> begun = begin_haaland<W>(rough_term, reynolds);
  return finish_haaland<W>(base::finish_log(begun), begun.inverse);
}

/// Swamee & Jain 1976, J. Hydraul. Div. ASCE 102, 657: f = 0.25/log(e/3.7 + 5.74/Re^0.9)^2; stated for Re 5e3 .. 1e8
/// and e 1e-6 .. 1e-2. @param a e/3.7
template <int W>
[[nodiscard]] HEADBAND_INLINE Root<W> swamee_jain(const Lanes<W>& a, const Lanes<W>& inverse) {
  const Lanes<W> viscous = 5.74 * base::pow(inverse, 0.9);
  return detail::minus_two_log<W>(a + viscous, -0.9 * viscous);
}

/// Serghides 1984, Chem. Eng. 91, 63: A = -2 log(e/3.7 + 12/Re), B = -2 log(e/3.7 + 2.51 A/Re), C the same from B,
/// x = A - (B-A)^2/(C - 2B + A).
template <int W>
[[nodiscard]] HEADBAND_INLINE Root<W> serghides(const Lanes<W>& a, const Lanes<W>& inverse) {
  const Lanes<W> b = 2.51 * inverse;
  const Lanes<W> twelve = 12.0 * inverse;
  const Root<W> first = detail::minus_two_log<W>(a + twelve, -twelve);
  const Root<W> second = detail::minus_two_log<W>(a + b * first.x, b * (first.dx - first.x));
  const Root<W> third = detail::minus_two_log<W>(a + b * second.x, b * (second.dx - second.x));
  const Lanes<W> step = second.x - first.x;
  const Lanes<W> bend = (third.x - second.x) - step;
  // fully rough: all three agree to rounding and the quotient says nothing; the middle one is then exact
  const auto alike = abs(step) < Lanes<W>(1e-13);
  const Lanes<W> share = step / select(alike, Lanes<W>(1.0), bend);
  const Lanes<W> dstep = second.dx - first.dx;
  const Lanes<W> dbend = (third.dx - second.dx) - dstep;
  return {select(alike, second.x, first.x - step * share),
          select(alike, second.dx, first.dx - share * (2.0 * dstep - share * dbend))};
}

/// Zigrang & Sylvester 1982, AIChE J. 28, 514, the form with three logarithms:
/// x = -2 log(e/3.7 - 5.02/Re log(e/3.7 - 5.02/Re log(e/3.7 + 13/Re))).
template <int W>
[[nodiscard]] HEADBAND_INLINE Root<W> zigrang_sylvester(const Lanes<W>& a, const Lanes<W>& inverse) {
  const Lanes<W> h = 5.02 * inverse, thirteen = 13.0 * inverse;
  const Lanes<W> w1 = a + thirteen;
  const Lanes<W> l1 = detail::one_over_ln_10 * base::log(w1);
  const Lanes<W> dl1 = -detail::one_over_ln_10 * (thirteen / w1);
  const Lanes<W> w2 = a - h * l1;
  const Lanes<W> l2 = detail::one_over_ln_10 * base::log(w2);
  const Lanes<W> dl2 = detail::one_over_ln_10 * (h * (l1 - dl1) / w2);
  return detail::minus_two_log<W>(a - h * l2, h * (l2 - dl2));
}

/// x^16 by products.
template <int W>
[[nodiscard]] HEADBAND_INLINE Lanes<W> power_16(const Lanes<W>& x) {
  const Lanes<W> x2 = x * x, x4 = x2 * x2, x8 = x4 * x4;
  return x8 * x8;
}

/// Turbulent part of Churchill 1977, Chem. Eng. 84, 91: f = 8 A^(-1/8), A = (2.457 ln(1/((7/Re)^0.9 + 0.27 e)))^16.
/// @return x of that part; x^16 = A/8^8
template <int W>
[[nodiscard]] HEADBAND_INLINE Root<W> churchill_turbulent(const Lanes<W>& relative_roughness, const Lanes<W>& inverse) {
  constexpr double one_over_sqrt_8 = 0.35355339059327376220;
  const Lanes<W> viscous = base::pow(7.0 * inverse, 0.9);
  const Lanes<W> w = viscous + 0.27 * relative_roughness;
  constexpr double c = 2.457 * one_over_sqrt_8;
  return {-c * base::log(w), c * (0.9 * viscous / w)};
}

/// Factor and slope of a joined law.
template <int W>
struct Joined {
  Lanes<W> factor, log_slope;
};

/// Churchill's joint of laminar and turbulent flow, f = 8 ((8/Re)^12 + (A + B)^(-3/2))^(1/12), B = (37530/Re)^16, for
/// any turbulent factor: A = (8/f_turbulent)^8 (Churchill 1977 with its own turbulent part gives the paper's formula).
/// @param laminar 64/Re, scatter included @param a (8/f_turbulent)^8 [-] @param turbulent_slope d ln f_t/d ln Re
template <int W>
[[nodiscard]] HEADBAND_INLINE Joined<W> churchill_joint(const Lanes<W>& laminar,
                                                        const Lanes<W>& inverse,
                                                        const Lanes<W>& a,
                                                        const Lanes<W>& turbulent_slope) {
  const Lanes<W> eighth = 0.125 * laminar;
  const Lanes<W> e2 = eighth * eighth, e4 = e2 * e2;
  const Lanes<W> laminar_12 = e4 * e4 * e4;
  const Lanes<W> b = power_16<W>(37530.0 * inverse);
  const Lanes<W> sum = a + b;
  const Lanes<W> rest = 1.0 / (sum * sqrt(sum));
  const Lanes<W> total = laminar_12 + rest;
  const Lanes<W> factor = 8.0 * base::exp(base::log(total) * (1.0 / 12.0));
  // d ln A = -8 d ln f_t, d ln B = -16, d ln laminar^12 = -12; then a twelfth of the weighted sum
  const Lanes<W> drest = 12.0 * turbulent_slope * a + 24.0 * b;
  const Lanes<W> slope = (-12.0 * laminar_12 + rest * (drest / sum)) / (12.0 * total);
  return {factor, slope};
}

}  // namespace headband::friction
