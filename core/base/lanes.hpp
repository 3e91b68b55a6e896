#pragma once
// SPDX-License-Identifier: MIT
//
// W numbers that travel together: one number each for W draws (or a plain double for W = 1).
//
// The same templates compute one run (W = 1) and a batch of eight draws (W = 8). W = 16 holds two rows of eight draws,
// or sixteen rows of one run: long formulas wait for their own results, and two rows at once fill the waiting. Every
// operation here is the same IEEE operation per lane for every W, and nothing is contracted (-ffp-contract=off) but
// where `fused` is written, so a draw gives the same bits alone and in a batch.

#include <array>
#include <cmath>
#include <cstddef>
#include <cstdint>
#include <cstring>
#if defined(__AVX__)
#include <immintrin.h>
#endif

#define HEADBAND_INLINE [[gnu::always_inline]] inline

namespace headband::base {

/// One T per lane, for what is not a double.
template <class T, int W>
using PerLane = std::array<T, static_cast<std::size_t>(W)>;

/// Four doubles in one register. Lanes are built from two of these: g++ 12 takes wider vectors apart at every
/// comparison, and keeps an array in registers only where its indices are constants (a loop over the parts sends each
/// through memory).
typedef double Quad [[gnu::vector_size(32)]];
typedef std::int64_t QuadBits [[gnu::vector_size(32)]];

/// Outcome of a comparison, all ones = true. W is 1, 8 or 16.
template <int W>
struct Mask {
  static_assert(W == 8 || W == 16, "one draw or eight, or two rows of eight");
  static constexpr int parts = W / 4;
  QuadBits part[static_cast<std::size_t>(parts)];
  [[nodiscard]] HEADBAND_INLINE bool operator[](int lane) const { return part[lane / 4][lane % 4] != 0; }
  HEADBAND_INLINE void set(int lane, bool on) { part[lane / 4][lane % 4] = on ? -1 : 0; }
};

template <>
struct Mask<1> {
  bool bit;
  [[nodiscard]] HEADBAND_INLINE bool operator[](int) const { return bit; }
  HEADBAND_INLINE void set(int, bool on) { bit = on; }
};

/// W doubles, one per draw, eight in one cache line. Implicit from double (the same number in each lane).
template <int W>
struct alignas(64) Lanes {
  static_assert(W == 8 || W == 16, "one draw or eight, or two rows of eight");
  static constexpr int parts = W / 4;
  Quad part[static_cast<std::size_t>(parts)];
  Lanes() = default;
  // Register by register: g++ 12 copies the struct by halves otherwise, which costs ten times the arithmetic.
  HEADBAND_INLINE Lanes(const Lanes& other) {
    part[0] = other.part[0];
    part[1] = other.part[1];
    if constexpr (W == 16) {
      part[2] = other.part[2];
      part[3] = other.part[3];
    }
  }
  HEADBAND_INLINE Lanes& operator=(const Lanes& other) {
    part[0] = other.part[0];
    part[1] = other.part[1];
    if constexpr (W == 16) {
      part[2] = other.part[2];
      part[3] = other.part[3];
    }
    return *this;
  }
  ~Lanes() = default;
  HEADBAND_INLINE Lanes(double x) {  // NOLINT(google-explicit-constructor)
    part[0] = Quad{x, x, x, x};
    part[1] = part[0];
    if constexpr (W == 16) part[3] = part[2] = part[0];
  }
  [[nodiscard]] HEADBAND_INLINE double operator[](int lane) const { return part[lane / 4][lane % 4]; }
  HEADBAND_INLINE void set(int lane, double x) { part[lane / 4][lane % 4] = x; }
};

template <>
struct Lanes<1> {
  double number;
  Lanes() = default;
  HEADBAND_INLINE Lanes(double x) : number(x) {}  // NOLINT(google-explicit-constructor)
  [[nodiscard]] HEADBAND_INLINE double operator[](int) const { return number; }
  HEADBAND_INLINE void set(int, double x) { number = x; }
};

/// Eight numbers that stand one behind the other, at any address.
[[nodiscard]] HEADBAND_INLINE Lanes<8> load_eight(const double* from) {
  Lanes<8> r;
  std::memcpy(&r.part[0], from, sizeof(Quad));
  std::memcpy(&r.part[1], from + 4, sizeof(Quad));
  return r;
}
HEADBAND_INLINE void store_eight(const Lanes<8>& x, double* to) {
  std::memcpy(to, &x.part[0], sizeof(Quad));
  std::memcpy(to + 4, &x.part[1], sizeof(Quad));
}

/// Two rows of eight side by side, and each of them.
[[nodiscard]] HEADBAND_INLINE Lanes<16> side_by_side(const Lanes<8>& a, const Lanes<8>& b) {
  Lanes<16> r;
  r.part[0] = a.part[0];
  r.part[1] = a.part[1];
  r.part[2] = b.part[0];
  r.part[3] = b.part[1];
  return r;
}
[[nodiscard]] HEADBAND_INLINE Lanes<8> first_eight(const Lanes<16>& x) {
  Lanes<8> r;
  r.part[0] = x.part[0];
  r.part[1] = x.part[1];
  return r;
}
[[nodiscard]] HEADBAND_INLINE Lanes<8> last_eight(const Lanes<16>& x) {
  Lanes<8> r;
  r.part[0] = x.part[2];
  r.part[1] = x.part[3];
  return r;
}

/// The draws of a number in V lanes, for one row or for two of them.
template <int W, int V>
[[nodiscard]] HEADBAND_INLINE Lanes<W> for_rows(const Lanes<V>& x) {
  if constexpr (W == V) {
    return x;
  } else {
    static_assert(W == 16 && V == 8);
    return side_by_side(x, x);
  }
}

#define HEADBAND_LANES_OPERATOR(op)                                                          \
  template <int W>                                                                           \
  [[nodiscard]] HEADBAND_INLINE Lanes<W> operator op(const Lanes<W>& a, const Lanes<W>& b) { \
    if constexpr (W == 1) {                                                                  \
      return Lanes<W>(a.number op b.number);                                                 \
    } else {                                                                                 \
      Lanes<W> r;                                                                            \
      r.part[0] = a.part[0] op b.part[0];                                                    \
      r.part[1] = a.part[1] op b.part[1];                                                    \
      if constexpr (W == 16) {                                                               \
        r.part[2] = a.part[2] op b.part[2];                                                  \
        r.part[3] = a.part[3] op b.part[3];                                                  \
      }                                                                                      \
      return r;                                                                              \
    }                                                                                        \
  }                                                                                          \
  template <int W>                                                                           \
  [[nodiscard]] HEADBAND_INLINE Lanes<W> operator op(const Lanes<W>& a, double b) {          \
    return a op Lanes<W>(b);                                                                 \
  }                                                                                          \
  template <int W>                                                                           \
  [[nodiscard]] HEADBAND_INLINE Lanes<W> operator op(double a, const Lanes<W>& b) {          \
    return Lanes<W>(a) op b;                                                                 \
  }                                                                                          \
  template <int W>                                                                           \
  HEADBAND_INLINE Lanes<W>& operator op##=(Lanes<W>& a, const Lanes<W>& b) {                 \
    a = a op b;                                                                              \
    return a;                                                                                \
  }
HEADBAND_LANES_OPERATOR(+)
HEADBAND_LANES_OPERATOR(-)
HEADBAND_LANES_OPERATOR(*)
HEADBAND_LANES_OPERATOR(/)
#undef HEADBAND_LANES_OPERATOR

template <int W>
[[nodiscard]] HEADBAND_INLINE Lanes<W> operator-(const Lanes<W>& a) {
  if constexpr (W == 1) {
    return Lanes<W>(-a.number);
  } else {
    Lanes<W> r;
    r.part[0] = -a.part[0];
    r.part[1] = -a.part[1];
    if constexpr (W == 16) {
      r.part[2] = -a.part[2];
      r.part[3] = -a.part[3];
    }
    return r;
  }
}

#define HEADBAND_LANES_COMPARE(op)                                                          \
  template <int W>                                                                          \
  [[nodiscard]] HEADBAND_INLINE Mask<W> operator op(const Lanes<W>& a, const Lanes<W>& b) { \
    if constexpr (W == 1) {                                                                 \
      return Mask<W>{a.number op b.number};                                                 \
    } else {                                                                                \
      Mask<W> r;                                                                            \
      r.part[0] = a.part[0] op b.part[0];                                                   \
      r.part[1] = a.part[1] op b.part[1];                                                   \
      if constexpr (W == 16) {                                                              \
        r.part[2] = a.part[2] op b.part[2];                                                 \
        r.part[3] = a.part[3] op b.part[3];                                                 \
      }                                                                                     \
      return r;                                                                             \
    }                                                                                       \
  }                                                                                         \
  template <int W>                                                                          \
  [[nodiscard]] HEADBAND_INLINE Mask<W> operator op(const Lanes<W>& a, double b) {          \
    return a op Lanes<W>(b);                                                                \
  }
HEADBAND_LANES_COMPARE(<)
HEADBAND_LANES_COMPARE(<=)
HEADBAND_LANES_COMPARE(>)
HEADBAND_LANES_COMPARE(>=)
HEADBAND_LANES_COMPARE(==)
#undef HEADBAND_LANES_COMPARE

#define HEADBAND_MASK_OPERATOR(op, logical)                                               \
  template <int W>                                                                        \
  [[nodiscard]] HEADBAND_INLINE Mask<W> operator op(const Mask<W>& a, const Mask<W>& b) { \
    if constexpr (W == 1) {                                                               \
      return Mask<W>{a.bit logical b.bit};                                                \
    } else {                                                                              \
      Mask<W> r;                                                                          \
      r.part[0] = a.part[0] op b.part[0];                                                 \
      r.part[1] = a.part[1] op b.part[1];                                                 \
      if constexpr (W == 16) {                                                            \
        r.part[2] = a.part[2] op b.part[2];                                               \
        r.part[3] = a.part[3] op b.part[3];                                               \
      }                                                                                   \
      return r;                                                                           \
    }                                                                                     \
  }
HEADBAND_MASK_OPERATOR(&, &&)
HEADBAND_MASK_OPERATOR(|, ||)
#undef HEADBAND_MASK_OPERATOR

template <int W>
[[nodiscard]] HEADBAND_INLINE Mask<W> operator!(const Mask<W>& a) {
  if constexpr (W == 1) {
    return Mask<W>{!a.bit};
  } else {
    Mask<W> r;
    r.part[0] = ~a.part[0];
    r.part[1] = ~a.part[1];
    if constexpr (W == 16) {
      r.part[2] = ~a.part[2];
      r.part[3] = ~a.part[3];
    }
    return r;
  }
}

/// `yes` where the mask is set, else `no`. Both sides are evaluated.
template <int W>
[[nodiscard]] HEADBAND_INLINE Lanes<W> select(const Mask<W>& where, const Lanes<W>& yes, const Lanes<W>& no) {
  if constexpr (W == 1) {
    return Lanes<W>(where.bit ? yes.number : no.number);
  } else {
    Lanes<W> r;
    r.part[0] = where.part[0] ? yes.part[0] : no.part[0];
    r.part[1] = where.part[1] ? yes.part[1] : no.part[1];
    if constexpr (W == 16) {
      r.part[2] = where.part[2] ? yes.part[2] : no.part[2];
      r.part[3] = where.part[3] ? yes.part[3] : no.part[3];
    }
    return r;
  }
}

template <int W>
[[nodiscard]] HEADBAND_INLINE bool any(const Mask<W>& m) {
  if constexpr (W == 1) {
    return m.bit;
  } else {
    QuadBits some = m.part[0] | m.part[1];
    if constexpr (W == 16) some = some | (m.part[2] | m.part[3]);
#if defined(__AVX__)
    return _mm256_movemask_pd(reinterpret_cast<__m256d>(some)) != 0;
#else
    return (some[0] | some[1] | some[2] | some[3]) != 0;
#endif
  }
}
template <int W>
[[nodiscard]] HEADBAND_INLINE bool all(const Mask<W>& m) {
  return !any(!m);
}

/// The smaller; `a` where they are equal or one is not a number.
template <int W>
[[nodiscard]] HEADBAND_INLINE Lanes<W> min(const Lanes<W>& a, const Lanes<W>& b) {
#if defined(__AVX__)
  if constexpr (W > 1) {
    Lanes<W> r;
    r.part[0] = _mm256_min_pd(b.part[0], a.part[0]);
    r.part[1] = _mm256_min_pd(b.part[1], a.part[1]);
    if constexpr (W == 16) {
      r.part[2] = _mm256_min_pd(b.part[2], a.part[2]);
      r.part[3] = _mm256_min_pd(b.part[3], a.part[3]);
    }
    return r;
  }
#endif
  return select(b < a, b, a);
}
/// The larger; `a` where they are equal or one is not a number.
template <int W>
[[nodiscard]] HEADBAND_INLINE Lanes<W> max(const Lanes<W>& a, const Lanes<W>& b) {
#if defined(__AVX__)
  if constexpr (W > 1) {
    Lanes<W> r;
    r.part[0] = _mm256_max_pd(b.part[0], a.part[0]);
    r.part[1] = _mm256_max_pd(b.part[1], a.part[1]);
    if constexpr (W == 16) {
      r.part[2] = _mm256_max_pd(b.part[2], a.part[2]);
      r.part[3] = _mm256_max_pd(b.part[3], a.part[3]);
    }
    return r;
  }
#endif
  return select(b > a, b, a);
}
template <int W>
[[nodiscard]] HEADBAND_INLINE Lanes<W> abs(const Lanes<W>& a) {
  if constexpr (W == 1) {
    return Lanes<W>(std::fabs(a.number));
  } else {
    Lanes<W> r;
    r.part[0] = __builtin_bit_cast(Quad, __builtin_bit_cast(QuadBits, a.part[0]) & INT64_MAX);
    r.part[1] = __builtin_bit_cast(Quad, __builtin_bit_cast(QuadBits, a.part[1]) & INT64_MAX);
    if constexpr (W == 16) {
      r.part[2] = __builtin_bit_cast(Quad, __builtin_bit_cast(QuadBits, a.part[2]) & INT64_MAX);
      r.part[3] = __builtin_bit_cast(Quad, __builtin_bit_cast(QuadBits, a.part[3]) & INT64_MAX);
    }
    return r;
  }
}

namespace detail {
/// a b + c, rounded once where the processor has the instruction (every build but the portable one), else twice.
HEADBAND_INLINE double fused(double a, double b, double c) {
#if defined(__FMA__)
  return __builtin_fma(a, b, c);
#else
  return a * b + c;
#endif
}
HEADBAND_INLINE Quad fused(const Quad& a, const Quad& b, const Quad& c) {
#if defined(__FMA__)
  return _mm256_fmadd_pd(a, b, c);
#else
  return a * b + c;
#endif
}
/// c - a b, likewise.
HEADBAND_INLINE double fused_less(double c, double a, double b) { return fused(-a, b, c); }
HEADBAND_INLINE Quad fused_less(const Quad& c, const Quad& a, const Quad& b) {
#if defined(__FMA__)
  return _mm256_fnmadd_pd(a, b, c);
#else
  return c - a * b;
#endif
}
}  // namespace detail

/// a b + c in every lane, rounded once (twice in a build for processors without the instruction): one operation where
/// product and sum would be two. All widths round alike.
template <int W>
[[nodiscard]] HEADBAND_INLINE Lanes<W> fused(const Lanes<W>& a, const Lanes<W>& b, const Lanes<W>& c) {
  if constexpr (W == 1) {
    return Lanes<W>(detail::fused(a.number, b.number, c.number));
  } else {
    Lanes<W> r;
    r.part[0] = detail::fused(a.part[0], b.part[0], c.part[0]);
    r.part[1] = detail::fused(a.part[1], b.part[1], c.part[1]);
    if constexpr (W == 16) {
      r.part[2] = detail::fused(a.part[2], b.part[2], c.part[2]);
      r.part[3] = detail::fused(a.part[3], b.part[3], c.part[3]);
    }
    return r;
  }
}
/// c - a b in every lane, rounded once like `fused`.
template <int W>
[[nodiscard]] HEADBAND_INLINE Lanes<W> fused_less(const Lanes<W>& c, const Lanes<W>& a, const Lanes<W>& b) {
  if constexpr (W == 1) {
    return Lanes<W>(detail::fused_less(c.number, a.number, b.number));
  } else {
    Lanes<W> r;
    r.part[0] = detail::fused_less(c.part[0], a.part[0], b.part[0]);
    r.part[1] = detail::fused_less(c.part[1], a.part[1], b.part[1]);
    if constexpr (W == 16) {
      r.part[2] = detail::fused_less(c.part[2], a.part[2], b.part[2]);
      r.part[3] = detail::fused_less(c.part[3], a.part[3], b.part[3]);
    }
    return r;
  }
}

/// Square root, correctly rounded in every lane.
template <int W>
[[nodiscard]] HEADBAND_INLINE Lanes<W> sqrt(const Lanes<W>& a) {
  if constexpr (W == 1) {
    return Lanes<W>(std::sqrt(a.number));
  } else {
    Lanes<W> r;
#if defined(__AVX__)
    r.part[0] = _mm256_sqrt_pd(a.part[0]);
    r.part[1] = _mm256_sqrt_pd(a.part[1]);
    if constexpr (W == 16) {
      r.part[2] = _mm256_sqrt_pd(a.part[2]);
      r.part[3] = _mm256_sqrt_pd(a.part[3]);
    }
#else
    for (int j = 0; j < 4; ++j) {
      r.part[0][j] = std::sqrt(a.part[0][j]);
      r.part[1][j] = std::sqrt(a.part[1][j]);
    }
#endif
    return r;
  }
}

}  // namespace headband::base
