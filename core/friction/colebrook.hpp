#pragma once
// SPDX-License-Identifier: MIT
//
// Colebrook-White (Colebrook 1939): x = -2 log10(e/3.7 + 2.51 x/Re), x = 1/sqrt(f), and the smooth law of Prandtl,
// x = 2 log10(Re/x) - 0.8, which is the same equation with e = 0 and 10^0.4 in place of 2.51.
//
// Notation of this file: k = 2/ln 10, e = roughness/bore, b = 2.51/Re, rough = e Re/(3.7 2.51), p = x + rough, so that
// the argument of the logarithm is b p and the equation x + k ln(b p) = 0. With x = x0 + p0 u the residual r of x0
// leaves u = u0 + q (u^2/2 - u^3/3 + …), u0 = -r/(p0 + k), q = k/(p0 + k): a power series in u0, one quotient a step.

#include "core/base/elementary.hpp"
#include "core/base/lanes.hpp"

#include <span>

namespace headband::friction {

using base::Lanes;

inline constexpr double two_over_ln_10 = 0.86858896380650365530;
inline constexpr double colebrook_constant = 2.51;
/// 10^0.4: Prandtl's 2.0 log10(Re sqrt f) - 0.8 in the form of Colebrook-White.
inline constexpr double prandtl_constant = 2.5118864315095801111;
/// k ln of these: what is added where the logarithm is that of p/Re instead of b p.
inline constexpr double colebrook_shift = 0.79934744296207627868;
inline constexpr double prandtl_shift = 0.8;
/// Factor of e Re in `rough`.
inline constexpr double colebrook_rough = 1.0 / (3.7 * colebrook_constant);
/// Least Reynolds number at which a turbulent factor is evaluated; below it the value there is taken.
inline constexpr double least_turbulent_reynolds = 100.0;

/// Outcome of the plain solver.
struct PlainRoot {
  double factor = 0.0;     ///< Darcy f [-]
  int iterations = 0;      ///< Newton steps taken, at most 50
  bool converged = false;  ///< last step under 1e-15 of x
};

/// Colebrook-White by plain Newton steps with the library's logarithm: the oracle of the fast forms.
/// @param relative_roughness [-], >= 0 @param reynolds [-], > 0. Accurate to rounding (about 4e-16).
[[nodiscard]] PlainRoot colebrook_plain(double relative_roughness, double reynolds);

namespace detail {

/// One high-order correction of x from u0 and q. Order 4: error of order u0^5; order 5: u0^6.
template <int W, int order>
[[nodiscard]] HEADBAND_INLINE Lanes<W> corrected_by(const Lanes<W>& x,
                                                    const Lanes<W>& p,
                                                    const Lanes<W>& u0,
                                                    const Lanes<W>& q) {
  static_assert(order == 4 || order == 5);
  const Lanes<W> c2 = 0.5 * q;
  const Lanes<W> c3 = q * (c2 - 1.0 / 3.0);
  const Lanes<W> c4 = q * (q * (0.625 * q - 5.0 / 6.0) + 0.25);
  Lanes<W> tail = c4;
  if constexpr (order == 5) {
    const Lanes<W> c5 = q * ((c4 + c2 * c3) - (c2 * c2 + c3) + (c2 - 0.2));
    tail = c4 + u0 * c5;
  }
  return x + p * (u0 + u0 * u0 * (c2 + u0 * (c3 + u0 * tail)));
}

/// The same; `log_argument` = ln(b p) at x.
template <int W, int order>
[[nodiscard]] HEADBAND_INLINE Lanes<W> corrected(const Lanes<W>& x, const Lanes<W>& p, const Lanes<W>& log_argument) {
  const Lanes<W> inverse = 1.0 / (p + two_over_ln_10);
  const Lanes<W> u0 = -(x + two_over_ln_10 * log_argument) * inverse;
  return corrected_by<W, order>(x, p, u0, two_over_ln_10 * inverse);
}

}  // namespace detail

/// Root x = 1/sqrt(f) [-] from nothing: one step with a quick logarithm from x = 9, one with the full logarithm.
/// @param rough colebrook_rough e Re (0 for the smooth law) @param b 2.51/Re (10^0.4/Re for the smooth law)
/// Error of x under 1e-14 relative for Re 2000 .. 1e12, under 1e-13 down to Re = 100, for e in 0 .. 0.3. Fixed work, no
/// branch.
template <int W>
[[nodiscard]] HEADBAND_INLINE Lanes<W> colebrook_root(const Lanes<W>& rough, const Lanes<W>& b) {
  const Lanes<W> start = 9.0;
  const Lanes<W> p0 = rough + start;
  const Lanes<W> x1 = detail::corrected<W, 4>(start, p0, base::quick_log(b * p0));
  const Lanes<W> p1 = rough + x1;
  return detail::corrected<W, 5>(x1, p1, base::log_of_normal(b * p1));
}

/// Up to this size of u0 one correction of order 5 is enough: it leaves (k/6)/x u0^6 of x at most.
inline constexpr double widest_correction = 0.014;

namespace detail {

/// The same of order 5 from q and u0 alone, with fused steps.
template <int W>
[[nodiscard]] HEADBAND_INLINE Lanes<W> corrected_near(
    const Lanes<W>& x, const Lanes<W>& p, const Lanes<W>& u0, const Lanes<W>& square, const Lanes<W>& q) {
  const auto next = [&](const Lanes<W>& series, double c)
                        __attribute__((always_inline)) { return fused(q, series, Lanes<W>(c)); };
  // u = u0 + q u0^2 (1/2 + c3 u0 + c4 u0^2 + c5 u0^3)
  const Lanes<W> c3 = next(Lanes<W>(0.5), -1.0 / 3.0);
  const Lanes<W> c4 = next(next(Lanes<W>(0.625), -5.0 / 6.0), 0.25);
  const Lanes<W> c5 = next(next(next(Lanes<W>(0.875), -1.75), 13.0 / 12.0), -0.2);
  const Lanes<W> series = fused(u0, fused(u0, fused(u0, c5, c4), c3), Lanes<W>(0.5));
  return fused(p, fused(q * square, series, u0), x);
}

}  // namespace detail

/// One correction of an older root, and where it was enough.
template <int W>
struct Corrected {
  Lanes<W> x;
  base::Mask<W> enough;
};

/// One correction of an older root up to its quotient.
template <int W>
struct CorrectionBegun {
  Lanes<W> x;             ///< the older root within its bounds
  base::LogBegun<W> log;  ///< of Re/p; its inverse is 1/(p + k)
};

/// First half of a correction. @param rough, reynolds, older as in colebrook_correct
template <int W>
[[nodiscard]] HEADBAND_INLINE CorrectionBegun<W> begin_correction(const Lanes<W>& rough,
                                                                  const Lanes<W>& reynolds,
                                                                  const Lanes<W>& older) {
  // within these bounds p is under Re, and what is not a number becomes the lower one
  const Lanes<W> x = min(Lanes<W>(20.0), max(Lanes<W>(1.0), older)), p = rough + x;
  return {x, base::begin_log_of_ratio(reynolds, p, p + two_over_ln_10)};
}

/// u0 of a correction. @param shift as in colebrook_correct
template <int W>
[[nodiscard]] HEADBAND_INLINE Lanes<W> first_of_correction(const CorrectionBegun<W>& c, const Lanes<W>& shift) {
  // k ln(b p) = shift - k ln(Re/p)
  return fused(Lanes<W>(two_over_ln_10), base::finish_log(c.log), -(c.x + shift)) * c.log.inverse;
}

/// The root corrected, and where that was enough. @param inverse 1/(p + k)
template <int W>
[[nodiscard]] HEADBAND_INLINE Corrected<W> finish_correction(const Lanes<W>& rough,
                                                             const Lanes<W>& x,
                                                             const Lanes<W>& inverse,
                                                             const Lanes<W>& u0) {
  const Lanes<W> square = u0 * u0;
  return {detail::corrected_near<W>(x, rough + x, u0, square, two_over_ln_10 * inverse),
          square <= Lanes<W>(widest_correction * widest_correction)};
}

namespace detail {

template <int W>
[[nodiscard]] HEADBAND_INLINE Corrected<W> corrected_once(const Lanes<W>& rough,
                                                          const Lanes<W>& reynolds,
                                                          const Lanes<W>& shift,
                                                          const Lanes<W>& older) {
  const CorrectionBegun<W> c = begin_correction<W>(rough, reynolds, older);
  return finish_correction<W>(rough, c.x, c.log.inverse, first_of_correction<W>(c, shift));
}

}  // namespace detail

/// The root where one correction of the older one was not enough: a second one, and the full solve where that was not
/// enough either. @param once what the first correction gave
template <int W>
[[nodiscard]] Lanes<W> colebrook_root_far(const Lanes<W>& rough,
                                          const Lanes<W>& reynolds,
                                          const Lanes<W>& shift,
                                          const Lanes<W>& once);
extern template Lanes<1> colebrook_root_far<1>(const Lanes<1>&, const Lanes<1>&, const Lanes<1>&, const Lanes<1>&);
extern template Lanes<8> colebrook_root_far<8>(const Lanes<8>&, const Lanes<8>&, const Lanes<8>&, const Lanes<8>&);
extern template Lanes<16> colebrook_root_far<16>(const Lanes<16>&,
                                                 const Lanes<16>&,
                                                 const Lanes<16>&,
                                                 const Lanes<16>&);

/// The root from an older one of the same pipe, for a march in time: one logarithm where the flow has changed little
/// (up to some tens per cent), two or three in the other lanes. Anything may stand in `older`, also not a number.
/// @param rough as above, e up to 0.3 @param reynolds >= 100 @param shift colebrook_shift, or prandtl_shift for the
/// smooth law
/// @param idle lanes whose result nobody reads: they never force more work
/// Error of x under 5e-13 relative (factor: 1e-12) for x >= 2, f <= 0.25. The same bits for every W.
template <int W>
[[nodiscard]] HEADBAND_INLINE Lanes<W> colebrook_correct(const Lanes<W>& rough,
                                                         const Lanes<W>& reynolds,
                                                         const Lanes<W>& shift,
                                                         const Lanes<W>& older,
                                                         const base::Mask<W>& idle) {
  const Corrected<W> c = detail::corrected_once<W>(rough, reynolds, shift, older);
  if (all(c.enough | idle)) [[likely]]
    return c.x;
  return select(c.enough, c.x, colebrook_root_far<W>(rough, reynolds, shift, c.x));
}

template <int W>
[[nodiscard]] HEADBAND_INLINE Lanes<W> colebrook_correct(const Lanes<W>& rough,
                                                         const Lanes<W>& reynolds,
                                                         const Lanes<W>& shift,
                                                         const Lanes<W>& older) {
  const Corrected<W> c = detail::corrected_once<W>(rough, reynolds, shift, older);
  if (all(c.enough)) [[likely]]
    return c.x;
  return select(c.enough, c.x, colebrook_root_far<W>(rough, reynolds, shift, c.x));
}

/// Slope d ln f / d ln Re [-] at the root.
template <int W>
[[nodiscard]] HEADBAND_INLINE Lanes<W> colebrook_log_slope(const Lanes<W>& rough, const Lanes<W>& x) {
  return -2.0 * two_over_ln_10 / (rough + x + two_over_ln_10);
}

/// Colebrook-White factors of many pipes. @param factor same length; @param reynolds >= 100 each
/// Error under 1e-12 relative (observed 1e-15); the same bits as `colebrook_factor` one by one.
void colebrook_factors(std::span<const double> relative_roughness,
                       std::span<const double> reynolds,
                       std::span<double> factor);

/// One Colebrook-White factor, bounded work. @param reynolds >= 100; below it the factor at 100
[[nodiscard]] double colebrook_factor(double relative_roughness, double reynolds);

}  // namespace headband::friction
