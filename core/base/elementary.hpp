#pragma once
// SPDX-License-Identifier: MIT
//
// Logarithm, exponential and positive power for lanes. Branch-free: sums, products and quotients in a fixed order, no
// library call, so every W gives the same bits, and so does every machine with IEEE arithmetic. `log_of_ratio` alone
// has fused steps (base/lanes.hpp): its last bits are those of every build but the portable one.
//
// Method: argument reduction by powers of two, then the Taylor series of exp and of the inverse hyperbolic tangent
// (Abramowitz & Stegun 1964, 4.2.1 and 4.6.22), cut where the next term is below half a unit in the last place.

#include "core/base/lanes.hpp"

#include <bit>
#include <cstdint>
#include <limits>
#include <type_traits>

namespace headband::base {

namespace detail {

/// Four unsigned words: shifts fill with zeros.
typedef std::uint64_t QuadWord [[gnu::vector_size(32)]];

template <class Number>
using Word = std::conditional_t<std::is_same_v<Number, double>, std::uint64_t, QuadWord>;

HEADBAND_INLINE std::uint64_t to_word(double x) { return std::bit_cast<std::uint64_t>(x); }
HEADBAND_INLINE QuadWord to_word(const Quad& x) { return reinterpret_cast<QuadWord>(x); }
HEADBAND_INLINE double to_number(std::uint64_t x) { return std::bit_cast<double>(x); }
HEADBAND_INLINE Quad to_number(const QuadWord& x) { return reinterpret_cast<Quad>(x); }

/// The constant c in every lane.
template <class Number>
[[nodiscard]] HEADBAND_INLINE Number same(double c) {
  if constexpr (std::is_same_v<Number, double>) {
    return c;
  } else {
    return Number{c, c, c, c};
  }
}

inline constexpr double two_to_52 = 4503599627370496.0;
/// ln 2 cut to 32 leading bits (a product with an exponent is exact), and the rest of it.
inline constexpr double log_two_head = 0x1.62e42feep-1;
inline constexpr double log_two_tail = 0x1.a39ef35793c76p-33;
inline constexpr double sqrt_half = 0x1.6a09e667f3bcdp-1;
inline constexpr std::uint64_t one_word = 0x3ff0000000000000U;
inline constexpr std::uint64_t exponent_field = 0xfff0000000000000U;

/// x = 2^exponent (1 + fraction), 1 + fraction in [sqrt(1/2), sqrt(2)).
template <class Number>
struct Parted {
  Number exponent, fraction;
};

/// The same for a positive normal number.
template <class Number>
[[nodiscard]] HEADBAND_INLINE Parted<Number> part_normal(const Number& x) {
  const Word<Number> bits = to_word(x);
  const Word<Number> shifted = bits - std::bit_cast<std::uint64_t>(sqrt_half) + one_word;
  const Word<Number> biased = shifted >> 52;
  const Word<Number> mantissa = bits - (shifted & exponent_field) + one_word;
  const Number as_number = to_number(biased | std::bit_cast<std::uint64_t>(two_to_52)) - two_to_52;
  return {as_number - 1023.0, to_number(mantissa) - 1.0};
}

template <class Number>
[[nodiscard]] HEADBAND_INLINE Parted<Number> part(const Number& x) {
  const auto tiny = x < std::numeric_limits<double>::min();
  const Number scaled = tiny ? x * (4.0 * two_to_52) : x;
  const Word<Number> bits = to_word(scaled);
  const Word<Number> shifted = bits - std::bit_cast<std::uint64_t>(sqrt_half) + one_word;
  const Word<Number> biased = shifted >> 52;
  const Word<Number> mantissa = bits - (shifted & exponent_field) + one_word;
  // the integer `biased` < 2^12 becomes a number through the mantissa of 2^52
  const Number as_number = to_number(biased | std::bit_cast<std::uint64_t>(two_to_52)) - two_to_52;
  const Number plain = as_number - 1023.0;
  const Number lower = as_number - (1023.0 + 54.0);
  return {tiny ? lower : plain, to_number(mantissa) - 1.0};
}

/// (atanh(s) - s) / s for z = s^2 <= 0.0295.
template <class Number>
[[nodiscard]] HEADBAND_INLINE Number atanh_rest(const Number& z) {
  const Number z2 = z * z;
  const Number z4 = z2 * z2;
  const Number a = (1.0 / 3.0) + z * (1.0 / 5.0);
  const Number b = (1.0 / 7.0) + z * (1.0 / 9.0);
  const Number c = (1.0 / 11.0) + z * (1.0 / 13.0);
  const Number d = (1.0 / 15.0) + z * (1.0 / 17.0);
  const Number e = (1.0 / 19.0) + z * (1.0 / 21.0);
  return z * ((a + z2 * b) + z4 * ((c + z2 * d) + z4 * e));
}

template <class Number>
[[nodiscard]] HEADBAND_INLINE Number log_of_parts(const Parted<Number>& p) {
  const Number f = p.fraction;
  const Number s = f / (2.0 + f);
  const Number half_square = 0.5 * f * f;
  // log(1+f) = 2 atanh(s) = f - f^2/2 + s (f^2/2 + 2 rest): the leading term is exact
  const Number inner = s * (half_square + 2.0 * atanh_rest<Number>(s * s));
  const Number small = p.exponent * log_two_tail + inner;
  return p.exponent * log_two_head + (f - (half_square - small));
}

template <class Number>
[[nodiscard]] HEADBAND_INLINE Number log_core(const Number& x) {
  const auto usual = log_of_parts<Number>(part(x));
  Number r = x < std::numeric_limits<double>::infinity() ? usual : x;
  r = x == 0.0 ? same<Number>(-std::numeric_limits<double>::infinity()) : r;
  return x < 0.0 ? same<Number>(std::numeric_limits<double>::quiet_NaN()) : r;
}

/// log as an unevaluated sum head + tail, good to about 2^-62 of max(|log x|, 2^-3 |x - 1|); x > 0 and finite.
template <class Number>
struct Split {
  Number head, tail;
};

/// a b = head + tail exactly (Veltkamp 1968 and Dekker 1971, Numer. Math. 18, 224); |a|, |b| < 2^990.
template <class Number>
[[nodiscard]] HEADBAND_INLINE Split<Number> exact_product(const Number& a, const Number& b) {
  const Number ca = 134217729.0 * a;  // 2^27 + 1
  const Number ah = ca - (ca - a);
  const Number al = a - ah;
  const Number cb = 134217729.0 * b;
  const Number bh = cb - (cb - b);
  const Number bl = b - bh;
  const Number p = a * b;
  return {p, ((ah * bh - p) + ah * bl + al * bh) + al * bl};
}

/// a + b = head + tail exactly (Knuth, The Art of Computer Programming 2, 4.2.2).
template <class Number>
[[nodiscard]] HEADBAND_INLINE Split<Number> exact_sum(const Number& a, const Number& b) {
  const Number sum = a + b;
  const Number bb = sum - a;
  return {sum, (a - (sum - bb)) + (b - bb)};
}

template <class Number>
[[nodiscard]] HEADBAND_INLINE Split<Number> log_split(const Number& x) {
  const Parted<Number> p = part(x);
  const Number f = p.fraction;
  const Number c = 2.0 + f;
  const Number c_rest = f - (c - 2.0);
  const Number s = f / c;
  const Split<Number> sc = exact_product<Number>(s, c);
  const Number s_rest = ((f - sc.head) - sc.tail - s * c_rest) / c;
  // 2 atanh(s + s_rest): s^3/3 carries the tail's largest error, 2^-53 * 0.17^3 * 2/3
  const Number z = s * s;
  const Number cubic = 2.0 * s * atanh_rest<Number>(z);
  const Split<Number> first = exact_sum<Number>(p.exponent * log_two_head, 2.0 * s);
  const Split<Number> second = exact_sum<Number>(first.head, cubic);
  return {second.head, second.tail + (first.tail + (p.exponent * log_two_tail + 2.0 * s_rest * (1.0 + z)))};
}

/// exp(head + tail), |tail| much smaller than 1. Above 709.08 infinity, below -708.39 zero.
template <class Number>
[[nodiscard]] HEADBAND_INLINE Number exp_core(const Number& head, const Number& tail) {
  constexpr double highest = 709.08, lowest = -708.39;
  Number x = head > highest ? same<Number>(highest) : head;
  x = x < lowest ? same<Number>(lowest) : x;
  // adding 1.5 2^52 leaves the nearest integer in the low mantissa bits
  constexpr double rounder = 1.5 * two_to_52;
  const Number shifted = x * 1.4426950408889634 + rounder;  // 1 / ln 2
  const Number k = shifted - rounder;
  const Number r_head = x - k * log_two_head;
  const Number r_tail = tail - k * log_two_tail;
  const Number r = r_head + r_tail;
  const Number r_rest = (r_head - r) + r_tail;
  const Number r2 = r * r;
  const Number r4 = r2 * r2;
  // sum of r^(n-2)/n!, n = 2 … 13; the next term is under 2^-58
  const Number a = (1.0 / 2.0) + r * (1.0 / 6.0);
  const Number b = (1.0 / 24.0) + r * (1.0 / 120.0);
  const Number c = (1.0 / 720.0) + r * (1.0 / 5040.0);
  const Number d = (1.0 / 40320.0) + r * (1.0 / 362880.0);
  const Number e = (1.0 / 3628800.0) + r * (1.0 / 39916800.0);
  const Number g = (1.0 / 479001600.0) + r * (1.0 / 6227020800.0);
  const Number series = ((a + r2 * b) + r4 * ((c + r2 * d) + r4 * (e + r2 * g)));
  const Number mantissa = 1.0 + (r + (r2 * series + r_rest));
  const Word<Number> scale = (to_word(shifted) << 52) + one_word;
  const Number usual = mantissa * to_number(scale);
  const Number result = head > highest ? same<Number>(std::numeric_limits<double>::infinity()) : usual;
  return head < lowest ? same<Number>(0.0) : result;
}

}  // namespace detail

/// Natural logarithm. Relative error under 1.5 units in the last place over all positive numbers; log(0) = -infinity,
/// log of a negative number is not a number.
template <int W>
[[nodiscard]] HEADBAND_INLINE Lanes<W> log(const Lanes<W>& x) {
  if constexpr (W == 1) {
    return Lanes<W>(detail::log_core<double>(x.number));
  } else {
    Lanes<W> r;
    r.part[0] = detail::log_core<Quad>(x.part[0]);
    r.part[1] = detail::log_core<Quad>(x.part[1]);
    return r;
  }
}

namespace detail {
/// log(x) within 6e-4; x normal and positive. The polynomial is the cubic Chebyshev fit of log(1 + f).
template <class Number>
[[nodiscard]] HEADBAND_INLINE Number quick_log_core(const Number& x) {
  const Parted<Number> p = part_normal(x);
  const Number f = p.fraction;
  return p.exponent * 0.6931471805599453 + (3.73947376e-4 + f * (1.00249762 + f * (-0.526455338 + f * 0.304754131)));
}
}  // namespace detail

/// Natural logarithm of a positive normal number: the bits of `log` without its questions about special numbers.
template <int W>
[[nodiscard]] HEADBAND_INLINE Lanes<W> log_of_normal(const Lanes<W>& x) {
  if constexpr (W == 1) {
    return Lanes<W>(detail::log_of_parts<double>(detail::part_normal(x.number)));
  } else {
    Lanes<W> r;
    r.part[0] = detail::log_of_parts<Quad>(detail::part_normal(x.part[0]));
    r.part[1] = detail::log_of_parts<Quad>(detail::part_normal(x.part[1]));
    if constexpr (W == 16) {
      r.part[2] = detail::log_of_parts<Quad>(detail::part_normal(x.part[2]));
      r.part[3] = detail::log_of_parts<Quad>(detail::part_normal(x.part[3]));
    }
    return r;
  }
}

namespace detail {

/// a / b = 2^exponent a / b_scaled, a / b_scaled within 1/1.5 … 1.5, for a >= b.
template <class Number>
struct Ratio {
  Number exponent, b_scaled;
};

/// The bits of a positive number grow with it by 2^52 from one power of two to the next: the difference of two of them,
/// rounded, is the power of two between the numbers.
template <class Number>
[[nodiscard]] HEADBAND_INLINE Ratio<Number> ratio_of_normal(const Number& a, const Number& b) {
  constexpr std::uint64_t half = 0x0008000000000000U;
  const Word<Number> bits = to_word(b);
  const Word<Number> shifted = (to_word(a) - bits) + half;
  const Number as_number = to_number((shifted >> 52) | std::bit_cast<std::uint64_t>(two_to_52));
  return {as_number - two_to_52, to_number(bits + (shifted & exponent_field))};
}

template <int W>
[[nodiscard]] HEADBAND_INLINE Ratio<Lanes<W>> ratio_of_lanes(const Lanes<W>& a, const Lanes<W>& b) {
  if constexpr (W == 1) {
    const Ratio<double> r = ratio_of_normal<double>(a.number, b.number);
    return {Lanes<W>(r.exponent), Lanes<W>(r.b_scaled)};
  } else {
    Ratio<Lanes<W>> r;
    const auto set = [&](auto part) {
      const Ratio<Quad> one = ratio_of_normal<Quad>(a.part[part], b.part[part]);
      r.exponent.part[part] = one.exponent;
      r.b_scaled.part[part] = one.b_scaled;
    };
    set(std::integral_constant<int, 0>{});
    set(std::integral_constant<int, 1>{});
    if constexpr (W == 16) {
      set(std::integral_constant<int, 2>{});
      set(std::integral_constant<int, 3>{});
    }
    return r;
  }
}

/// 2 atanh(s) / s for z = s^2 <= 0.0401. What stands behind the 2 is the quotient by z at the seven Chebyshev nodes of
/// that range, as a polynomial; s times its error is under 3e-17.
template <int W>
[[nodiscard]] HEADBAND_INLINE Lanes<W> twice_atanh_by_s(const Lanes<W>& z) {
  const auto line = [&](double slope, double start)
                        __attribute__((always_inline)) { return fused(z, Lanes<W>(slope), Lanes<W>(start)); };
  const Lanes<W> z2 = z * z;
  const Lanes<W> a = line(0x1.999999997c60ap-2, 0x1.555555555556ep-1);
  const Lanes<W> b = line(0x1.c71c3cd5b95f4p-3, 0x1.2492495208437p-2);
  const Lanes<W> c = line(0x1.39029fee44135p-3, 0x1.746bbab7ddfe4p-3);
  const Lanes<W> series = fused(z2, fused(z2, fused(z2, Lanes<W>(0x1.35a069e7c1f02p-3), c), b), a);
  return fused(z, series, Lanes<W>(2.0));
}

}  // namespace detail

/// ln(a/b) and 1/c.
template <int W>
struct LogAndInverse {
  Lanes<W> log, inverse;
};

/// The same up to its quotient: ln(a/b) = exponent ln 2 + 2 atanh(s).
template <int W>
struct LogBegun {
  Lanes<W> exponent, s, inverse;
};

/// First half of log_of_ratio, for loops that do the halves of many numbers one after the other.
template <int W>
[[nodiscard]] HEADBAND_INLINE LogBegun<W> begin_log_of_ratio(const Lanes<W>& a, const Lanes<W>& b, const Lanes<W>& c) {
  const detail::Ratio<Lanes<W>> r = detail::ratio_of_lanes<W>(a, b);
  const Lanes<W> sum = a + r.b_scaled;
  const Lanes<W> both = 1.0 / (sum * c);
  return {r.exponent, (a - r.b_scaled) * (c * both), sum * both};
}

/// The logarithm begun.
template <int W>
[[nodiscard]] HEADBAND_INLINE Lanes<W> finish_log(const LogBegun<W>& l) {
  const Lanes<W> of_rest = l.s * detail::twice_atanh_by_s<W>(l.s * l.s);
  return fused(l.exponent, Lanes<W>(0.6931471805599453), of_rest);
}

/// ln(a/b) and 1/c by one quotient for both, where a quotient costs more than all the rest. a >= b > 0, both normal;
/// (a + b) c neither under- nor overflows. Error of the logarithm under 4e-16 (1 + |log|), of the inverse under 2 units
/// in the last place.
template <int W>
[[nodiscard]] HEADBAND_INLINE LogAndInverse<W> log_of_ratio(const Lanes<W>& a, const Lanes<W>& b, const Lanes<W>& c) {
  const LogBegun<W> begun = begin_log_of_ratio<W>(a, b, c);
  return {finish_log<W>(begun), begun.inverse};
}

/// Natural logarithm within 6e-4 (absolute), for the start of an iteration; x normal and positive.
template <int W>
[[nodiscard]] HEADBAND_INLINE Lanes<W> quick_log(const Lanes<W>& x) {
  if constexpr (W == 1) {
    return Lanes<W>(detail::quick_log_core<double>(x.number));
  } else {
    Lanes<W> r;
    r.part[0] = detail::quick_log_core<Quad>(x.part[0]);
    r.part[1] = detail::quick_log_core<Quad>(x.part[1]);
    if constexpr (W == 16) {
      r.part[2] = detail::quick_log_core<Quad>(x.part[2]);
      r.part[3] = detail::quick_log_core<Quad>(x.part[3]);
    }
    return r;
  }
}

/// Logarithm to base 10; relative error under 3 units in the last place.
template <int W>
[[nodiscard]] HEADBAND_INLINE Lanes<W> log10(const Lanes<W>& x) {
  return log(x) * 0.43429448190325183;  // 1 / ln 10
}

/// Exponential; relative error under 1.5 units in the last place for -708 <= x <= 709, 0 below, infinity above.
template <int W>
[[nodiscard]] HEADBAND_INLINE Lanes<W> exp(const Lanes<W>& x) {
  if constexpr (W == 1) {
    return Lanes<W>(detail::exp_core<double>(x.number, 0.0));
  } else {
    Lanes<W> r;
    r.part[0] = detail::exp_core<Quad>(x.part[0], Quad{0.0, 0.0, 0.0, 0.0});
    r.part[1] = detail::exp_core<Quad>(x.part[1], Quad{0.0, 0.0, 0.0, 0.0});
    return r;
  }
}

namespace detail {
template <class Number>
[[nodiscard]] HEADBAND_INLINE Number pow_core(const Number& x, const Number& y) {
  const Split<Number> l = log_split<Number>(x);
  const Split<Number> yl = exact_product<Number>(y, l.head);
  const Number usual = exp_core<Number>(yl.head, yl.tail + y * l.tail);
  const Number above = y > 0.0 ? same<Number>(0.0) : same<Number>(1.0);
  const Number at_zero = y < 0.0 ? same<Number>(std::numeric_limits<double>::infinity()) : above;
  return x == 0.0 ? at_zero : usual;
}
}  // namespace detail

/// x to the power y for finite x > 0 (also 0 to a positive power, which is 0, and 0^0 = 1).
/// Relative error under 6 units in the last place where the result lies in 1e-300 … 1e300, under 1.5 in 1e-9 … 1e9.
template <int W>
[[nodiscard]] HEADBAND_INLINE Lanes<W> pow(const Lanes<W>& x, const Lanes<W>& y) {
  if constexpr (W == 1) {
    return Lanes<W>(detail::pow_core<double>(x.number, y.number));
  } else {
    Lanes<W> r;
    r.part[0] = detail::pow_core<Quad>(x.part[0], y.part[0]);
    r.part[1] = detail::pow_core<Quad>(x.part[1], y.part[1]);
    return r;
  }
}
template <int W>
[[nodiscard]] HEADBAND_INLINE Lanes<W> pow(const Lanes<W>& x, double y) {
  return pow(x, Lanes<W>(y));
}

}  // namespace headband::base
