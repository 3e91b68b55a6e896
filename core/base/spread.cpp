// SPDX-License-Identifier: MIT
#include "core/base/spread.hpp"

#include "core/base/elementary.hpp"

#include <algorithm>
#include <array>
#include <bit>
#include <boost/math/quadrature/gauss_kronrod.hpp>
#include <cmath>
#include <cstdint>
#include <cstring>
#include <numbers>
#include <utility>

namespace headband::base {

namespace {

// ---------------------------------------------------------------- normal quantile

/// An argument and its powers, for the polynomials of it.
template <int W>
struct Powers {
  Lanes<W> x, square, fourth;
};
template <int W>
HEADBAND_INLINE Powers<W> powers_of(const Lanes<W>& x) {
  const Lanes<W> square = x * x;
  return {x, square, square * square};
}

/// c0 + c1 x + … + c7 x^7, in pairs: a short chain of operations.
template <int W>
HEADBAND_INLINE Lanes<W> polynomial(const std::array<double, 8>& c, const Powers<W>& p) {
  const auto pair = [&](std::size_t k) { return fused(Lanes<W>(c[k + 1]), p.x, Lanes<W>(c[k])); };
  const Lanes<W> low = fused(pair(2), p.square, pair(0)), high = fused(pair(6), p.square, pair(4));
  return fused(high, p.fourth, low);
}

// AS 241 (Wichura 1988, Applied Statistics 37, 477-484), routine PPND16: coefficients from memory, checked in the
// test against the inverse error function of Boost.Math to 1e-15.
constexpr std::array<double, 8> central_over{3.3871328727963666080e0,
                                             1.3314166789178437745e2,
                                             1.9715909503065514427e3,
                                             1.3731693765509461125e4,
                                             4.5921953931549871457e4,
                                             6.7265770927008700853e4,
                                             3.3430575583588128105e4,
                                             2.5090809287301226727e3};
constexpr std::array<double, 8> central_under{1.0,
                                              4.2313330701600911252e1,
                                              6.8718700749205790830e2,
                                              5.3941960214247511077e3,
                                              2.1213794301586595867e4,
                                              3.9307895800092710610e4,
                                              2.8729085735721942674e4,
                                              5.2264952788528545610e3};
constexpr std::array<double, 8> tail_over{1.42343711074968357734e0,
                                          4.63033784615654529590e0,
                                          5.76949722146069140550e0,
                                          3.64784832476320460504e0,
                                          1.27045825245236838258e0,
                                          2.41780725177450611770e-1,
                                          2.27238449892691845833e-2,
                                          7.74545014278341407640e-4};
constexpr std::array<double, 8> tail_under{1.0,
                                           2.05319162663775882187e0,
                                           1.67638483018380384940e0,
                                           6.89767334985100004550e-1,
                                           1.48103976427480074590e-1,
                                           1.51986665636164571966e-2,
                                           5.47593808499534494600e-4,
                                           1.05075007164441684324e-9};
constexpr std::array<double, 8> far_over{6.65790464350110377720e0,
                                         5.46378491116411436990e0,
                                         1.78482653991729133580e0,
                                         2.96560571828504891230e-1,
                                         2.65321895265761230930e-2,
                                         1.24266094738807843860e-3,
                                         2.71155556874348757815e-5,
                                         2.01033439929228813265e-7};
constexpr std::array<double, 8> far_under{1.0,
                                          5.99832206555887937690e-1,
                                          1.36929880922735805310e-1,
                                          1.48753612908506148525e-2,
                                          7.86869131145613259100e-4,
                                          1.84631831751005468180e-5,
                                          1.42151175831644588870e-7,
                                          2.04426310338993978564e-15};

constexpr double central_half_width = 0.425;

/// Quotient of the middle part: over / under.
template <int W>
HEADBAND_INLINE Lanes<W> central_quantile(const Lanes<W>& middle) {
  const Powers<W> r = powers_of(fused_less(Lanes<W>(0.180625), middle, middle));
  return (middle * polynomial(central_over, r)) / polynomial(central_under, r);
}

/// Size of the quantile at a tail's probability, at most 0.075.
template <int W>
HEADBAND_INLINE Lanes<W> tail_quantile(const Lanes<W>& tail) {
  const bool usual = !any(tail < Lanes<W>(std::numeric_limits<double>::min()));  // `log` asks more, and says the same
  const Lanes<W> root = sqrt(-(usual ? log_of_normal(tail) : log(tail)));
  const Powers<W> t = powers_of<W>(root - 1.6);
  Lanes<W> over = polynomial(tail_over, t), under = polynomial(tail_under, t);
  const Mask<W> far = root > 5.0;
  if (any(far)) {
    const Powers<W> u = powers_of<W>(root - 5.0);
    over = select(far, polynomial(far_over, u), over);
    under = select(far, polynomial(far_under, u), under);
  }
  return over / under;
}

/// A score inside a cut, told by both tails at once: `below` + `above` = 1, each exact in its own tail.
template <int W>
struct Tails {
  Lanes<W> below, above, middle;
};

/// Normal quantile from both tails.
template <int W>
HEADBAND_INLINE Lanes<W> quantile_of_tails(const Tails<W>& t) {
  const Mask<W> central = abs(t.middle) <= central_half_width;
  const Lanes<W> z = central_quantile<W>(t.middle);
  if (all(central)) return z;
  const Lanes<W> size = tail_quantile<W>(min(t.below, t.above));
  return select(central, z, select(t.middle < Lanes<W>(0.0), -size, size));
}

/// 1e-33 is under the last place of every score: a cut further out than this changes nothing.
constexpr double no_effect_distance = 12.2;

/// Share of the standard normal outside a cut, each side exact in its own tail.
struct CutTails {
  double below_low = 0.0, above_low = 1.0;    ///< P(z < low), P(z > low)
  double below_high = 1.0, above_high = 0.0;  ///< the same of the upper cut
  double inside = 1.0;
};

CutTails tails_of(double low, double high) {
  CutTails t;
  if (low > -no_effect_distance) {
    t.below_low = normal_probability(low);
    t.above_low = normal_probability(-low);
  }
  if (high < no_effect_distance) {
    t.below_high = normal_probability(high);
    t.above_high = normal_probability(-high);
  }
  t.inside = low > 0.0 ? t.above_low - t.above_high : t.below_high - t.below_low;
  return t;
}

/// The cut in standard deviations about ln(central); [low, high].
std::pair<double, double> log_cut(const Cut& cut, double central, double deviation) {
  double low = cut.low, high = cut.high;
  if (central < 0.0) {
    std::swap(low, high);
    low = -low;
    high = -high;
  }
  const auto score = [&](double bound) {
    if (!(bound > 0.0)) return -std::numeric_limits<double>::infinity();
    if (bound == std::numeric_limits<double>::infinity()) return bound;
    return log(Lanes<1>(bound / std::fabs(central))).number / deviation;
  };
  return {score(low), score(high)};
}

/// Distribution function of a triangle, and of its complement.
struct TriangleTails {
  double below, above;
};
TriangleTails triangle_tails(double low, double mode, double high, double x) {
  if (x <= low) return {0.0, 1.0};
  if (x >= high) return {1.0, 0.0};
  if (x < mode) {
    const double p = (x - low) * (x - low) / ((high - low) * (mode - low));
    return {p, 1.0 - p};
  }
  const double p = (high - x) * (high - x) / ((high - low) * (high - mode));
  return {1.0 - p, p};
}

template <int W>
Lanes<W> triangle_quantile(const ReadySpread& s, const Lanes<W>& score) {
  const double low = s.low, mode = s.central, high = s.high, width = s.size;
  if (!(high > low)) return mode;
  Lanes<W> below = score, above = 1.0 - score;
  if (s.cut) {
    below = s.below_low + score * s.inside;
    above = s.above_high + (1.0 - score) * s.inside;
  }
  const Lanes<W> rising = low + sqrt(below * (width * (mode - low)));
  const Lanes<W> falling = high - sqrt(above * (width * (high - mode)));
  return select(below < Lanes<W>((mode - low) / width), rising, falling);
}

template <class... F>
struct Overloaded : F... {
  using F::operator()...;
};

double density(double z) { return std::isinf(z) ? 0.0 : std::exp(-0.5 * z * z) / std::sqrt(2.0 * std::numbers::pi); }

struct Moments {
  double mean, variance;
};

/// Mean and variance of `value_at(z)`, z standard normal inside a cut that leaves next to nothing: the closed forms
/// lose all digits there, an adaptive Gauss-Kronrod rule does not.
template <class ValueAt>
Moments moments_in_thin_cut(double low, double high, const ValueAt& value_at) {
  const double nearest = low > 0.0 ? low : (high < 0.0 ? high : 0.0);
  const double a = std::max(low, nearest - 40.0), b = std::min(high, nearest + 40.0);
  const double origin = value_at(nearest);
  const auto weight = [&](double z) { return std::exp(-0.5 * (z - nearest) * (z + nearest)); };
  const auto integral = [&](const auto& f) {
    return boost::math::quadrature::gauss_kronrod<double, 31>::integrate(f, a, b, 12, 1e-13);
  };
  const double all = integral(weight);
  const double m = integral([&](double z) { return weight(z) * (value_at(z) - origin); }) / all;
  const double square = integral([&](double z) {
    const double off = value_at(z) - origin - m;
    return weight(z) * off * off;
  });
  return {origin + m, square / all};
}

/// Least share inside a cut at which the closed forms hold their ten digits.
constexpr double thin_cut = 0.02;

Moments normal_moments(double central, double deviation, const Cut& cut) {
  if (!cut.active()) return {central, deviation * deviation};
  const double low = (cut.low - central) / deviation, high = (cut.high - central) / deviation;
  const CutTails t = tails_of(low, high);
  if (t.inside < thin_cut) {
    return moments_in_thin_cut(low, high, [&](double z) { return central + deviation * z; });
  }
  // Johnson, Kotz, Balakrishnan, Continuous Univariate Distributions 1 (1994), 13.10
  const double at_low = density(low), at_high = density(high);
  const double shift = (at_low - at_high) / t.inside;
  const double low_term = std::isinf(low) ? 0.0 : low * at_low;
  const double high_term = std::isinf(high) ? 0.0 : high * at_high;
  return {central + deviation * shift,
          deviation * deviation * (1.0 + (low_term - high_term) / t.inside - shift * shift)};
}

Moments log_normal_moments(double central, double deviation, const Cut& cut) {
  const auto [low, high] = log_cut(cut, central, deviation);
  const CutTails t = tails_of(low, high);
  if (t.inside < thin_cut) {
    return moments_in_thin_cut(low, high, [&](double z) { return central * std::exp(deviation * z); });
  }
  // E[x^n] = m^n exp(n^2 s^2 / 2) (share inside the cut of the density shifted by n s)
  const double s = deviation;
  const double first = std::exp(0.5 * s * s) * tails_of(low - s, high - s).inside / t.inside;
  const double second = std::exp(2.0 * s * s) * tails_of(low - 2.0 * s, high - 2.0 * s).inside / t.inside;
  if (!cut.active()) return {central * first, central * central * std::exp(s * s) * std::expm1(s * s)};
  return {central * first, central * central * std::max(0.0, second - first * first)};
}

Moments even_moments(double low, double high, const Cut& cut) {
  const double a = std::max(low, cut.low), b = std::min(high, cut.high);
  return {0.5 * (a + b), (b - a) * (b - a) / 12.0};
}

/// The density is straight on each side of the mode: two Gauss points a piece are exact for mean and square.
Moments triangle_moments(double low, double mode, double high, const Cut& cut) {
  const double a = std::max(low, cut.low), b = std::min(high, cut.high);
  if (!(b > a)) return {mode, 0.0};
  double weight = 0.0, sum = 0.0, squares = 0.0;
  const auto add = [&](double from, double to) {
    if (!(to > from)) return;
    const double half = 0.5 * (to - from), middle = 0.5 * (to + from);
    for (const double side : {-1.0, 1.0}) {
      const double x = middle + side * half / std::sqrt(3.0);
      const double w = half * (x < mode ? (x - low) / (mode - low) : (high - x) / (high - mode));
      weight += w;
      sum += w * (x - mode);
      squares += w * (x - mode) * (x - mode);
    }
  };
  add(a, std::min(b, mode));
  add(std::max(a, mode), b);
  const double m = sum / weight;
  return {mode + m, std::max(0.0, squares / weight - m * m)};
}

Moments moments(const Spread& spread, const Cut& cut, double central) {
  return std::visit(Overloaded{
                        [&](const Exact&) { return Moments{central, 0.0}; },
                        [&](const Normal& n) { return normal_moments(central, n.standard_deviation, cut); },
                        [&](const LogNormal& n) { return log_normal_moments(central, n.log_standard_deviation, cut); },
                        [&](const Even& e) { return even_moments(e.low, e.high, cut); },
                        [&](const Triangle& t) { return triangle_moments(t.low, central, t.high, cut); },
                        [&](const NotRandom& n) { return even_moments(n.low, n.high, cut); },
                    },
                    spread);
}

[[nodiscard]] bool is_normal(const ReadySpread& s) {
  return s.kind == ReadySpread::Kind::normal || s.kind == ReadySpread::Kind::log_normal;
}

/// Where a score stands in the standard normal behind `s`.
template <int W>
HEADBAND_INLINE Tails<W> tails_at(const ReadySpread& s, const Lanes<W>& score) {
  if (!s.cut) return {score, 1.0 - score, score - 0.5};
  const Lanes<W> below = s.below_low + score * s.inside;
  const Lanes<W> above = s.above_high + (1.0 - score) * s.inside;
  return {below, above, 0.5 * (below - above)};
}

/// From the standard normal to the value; `bounded`: the cut is looked at, which without one changes nothing.
template <int W, bool bounded = true>
HEADBAND_INLINE Lanes<W> value_of_normal(const ReadySpread& s, const Lanes<W>& standard) {
  const Lanes<W> z = bounded && s.cut ? max(min(standard, Lanes<W>(s.high)), Lanes<W>(s.low)) : standard;
  const Lanes<W> x = s.kind == ReadySpread::Kind::normal ? fused(Lanes<W>(s.size), z, Lanes<W>(s.central))
                                                         : s.central * exp(s.size * z);
  if constexpr (bounded) return max(min(x, Lanes<W>(s.most)), Lanes<W>(s.least));
  return x;
}
[[nodiscard]] bool is_bounded(const ReadySpread& s) {
  return s.cut || s.most < std::numeric_limits<double>::infinity() ||
         s.least > -std::numeric_limits<double>::infinity();
}

/// Spreads without a normal behind them.
template <int W>
HEADBAND_INLINE Lanes<W> straight_quantile(const ReadySpread& s, const Lanes<W>& score) {
  switch (s.kind) {
    case ReadySpread::Kind::even:
      return s.central + s.size * score;
    case ReadySpread::Kind::triangle:
      return triangle_quantile<W>(s, score);
    default:
      return s.central;
  }
}

/// The cut of a normal at [low, high] standard deviations.
void cut_normal(ReadySpread& s, double low, double high) {
  if (low <= -no_effect_distance && high >= no_effect_distance) return;
  const CutTails t = tails_of(low, high);
  s.cut = true;
  s.low = low;
  s.high = high;
  s.below_low = t.below_low;
  s.above_high = t.above_high;
  s.inside = t.inside;
}

void even_between(ReadySpread& s, double low, double high, const Cut& cut) {
  s.kind = ReadySpread::Kind::even;
  s.central = std::max(low, cut.low);
  s.size = std::min(high, cut.high) - s.central;
}

#if defined(__AVX2__)
/// Of four lanes those whose bit is set, moved to the front: their halves as `_mm256_permutevar8x32_epi32` takes them.
struct alignas(32) FrontOrder {
  std::array<std::uint32_t, 8> half{};
};
constexpr std::array<FrontOrder, 16> front_order = [] {
  std::array<FrontOrder, 16> table{};
  for (std::uint32_t which = 0; which < 16; ++which) {
    std::size_t at = 0;
    for (std::uint32_t lane = 0; lane < 4; ++lane) {
      if ((which >> lane & 1U) == 0) continue;
      table[which].half[at++] = 2 * lane;
      table[which].half[at++] = 2 * lane + 1;
    }
  }
  return table;
}();
/// The numbers of those lanes, 16 bits each.
constexpr std::array<std::uint64_t, 16> front_lanes = [] {
  std::array<std::uint64_t, 16> table{};
  for (std::uint32_t which = 0; which < 16; ++which) {
    unsigned at = 0;
    for (std::uint64_t lane = 0; lane < 4; ++lane) {
      if ((which >> lane & 1U) == 0) continue;
      table[which] |= lane << at;
      at += 16;
    }
  }
  return table;
}();
#endif

/// Normal quantiles of many blocks of eight scores: the middle part at once, the tails of all of them together.
class NormalQuantiles {
 public:
  /// Takes a block; its value stands when `settle` was called.
  HEADBAND_INLINE void add(const ReadySpread& spread, const Lanes<8>& score, Lanes<8>& value) {
    if (!is_normal(spread)) {
      value = straight_quantile<8>(spread, score);
      return;
    }
    if (taken == most_blocks) settle();
    const Tails<8> tails = tails_at<8>(spread, score);
    value = central_quantile<8>(tails.middle);
    note(tails, 8 * taken);
    block[taken] = {&spread, &value};
    ++taken;
  }

  void settle() {
    settle_tails();
    for (std::size_t from = 0, to = 0; from < taken; from = to) {  // blocks of one spread together
      const ReadySpread& spread = *block[from].spread;
      while (to < taken && block[to].spread == &spread) ++to;
      for (std::size_t i = from; i < to; ++i) {
        Lanes<8>& x = *block[i].value;
        x = is_bounded(spread) ? value_of_normal<8>(spread, x) : value_of_normal<8, false>(spread, x);
      }
    }
    taken = count = 0;
  }

 private:
  static constexpr std::size_t most_blocks = 64, room = 8 * most_blocks;
  struct Block {
    const ReadySpread* spread;
    Lanes<8>* value;
  };
  std::array<Block, most_blocks> block;
  alignas(64) std::array<double, room + 8> tail;  ///< those that wait, with the sign of the quantile
  std::array<std::uint16_t, room + 8> owner;      ///< eight times the block, and the lane
  std::size_t taken = 0, count = 0;

  HEADBAND_INLINE void note_four(const QuadBits& outside, const Quad& with_sign, std::size_t from) {
#if defined(__AVX2__)
    const auto which = static_cast<std::size_t>(_mm256_movemask_pd(reinterpret_cast<__m256d>(outside)));
    const __m256i order = _mm256_load_si256(reinterpret_cast<const __m256i*>(&front_order[which]));
    const __m256i moved = _mm256_permutevar8x32_epi32(reinterpret_cast<__m256i>(with_sign), order);
    std::memcpy(&tail[count], &moved, sizeof moved);
    const std::uint64_t owners = front_lanes[which] + from * 0x0001000100010001U;
    std::memcpy(&owner[count], &owners, sizeof owners);
    count += static_cast<std::size_t>(std::popcount(which));
#else
    for (int lane = 0; lane < 4; ++lane) {
      tail[count] = with_sign[lane];
      owner[count] = static_cast<std::uint16_t>(from + static_cast<std::size_t>(lane));
      count += outside[lane] != 0 ? 1U : 0U;
    }
#endif
  }

  /// Notes the lanes outside the middle; `from`: eight times the spread's place. No branch: four lanes are written
  /// each time, those outside first, and the rest is written over.
  HEADBAND_INLINE void note(const Tails<8>& t, std::size_t from) {
    const Mask<8> outside = abs(t.middle) > central_half_width;
    const Lanes<8> least = min(t.below, t.above);
    for (std::size_t part = 0; part < 2; ++part) {
      const Quad with_sign = reinterpret_cast<Quad>(reinterpret_cast<QuadBits>(least.part[part]) |
                                                    (reinterpret_cast<QuadBits>(t.middle.part[part]) & INT64_MIN));
      note_four(outside.part[part], with_sign, from + 4 * part);
    }
  }

  /// Puts each tail's quantile in its place.
  void settle_tails() {
    for (std::size_t i = 0; i < 8; ++i) tail[count + i] = 0.07;  // something harmless behind the last
    for (std::size_t i = 0; i < count; i += 8) {
      Lanes<8> with_sign;
      std::memcpy(&with_sign.part[0], &tail[i], sizeof(Quad));
      std::memcpy(&with_sign.part[1], &tail[i + 4], sizeof(Quad));
      const Lanes<8> size = tail_quantile<8>(abs(with_sign));
      const Lanes<8> quantile = select(with_sign < Lanes<8>(0.0), -size, size);
      const std::size_t here = std::min<std::size_t>(8, count - i);
      for (std::size_t lane = 0; lane < here; ++lane) {
        const std::size_t whose = owner[i + lane];
        block[whose / 8].value->set(static_cast<int>(whose % 8), quantile[static_cast<int>(lane)]);
      }
    }
  }
};

}  // namespace

double normal_probability(double z) { return 0.5 * std::erfc(-z / std::numbers::sqrt2); }

template <int W>
Lanes<W> normal_quantile(const Lanes<W>& probability) {
  return quantile_of_tails<W>({probability, 1.0 - probability, probability - 0.5});
}

ReadySpread ready_spread(const Spread& spread, const Cut& cut, double central) {
  using Kind = ReadySpread::Kind;
  ReadySpread s;
  s.central = central;
  std::visit(Overloaded{
                 [&](const Exact&) {},
                 [&](const Normal& n) {
                   s.kind = Kind::normal;
                   s.size = n.standard_deviation;
                   s.least = cut.low;
                   s.most = cut.high;
                   cut_normal(s, (cut.low - central) / s.size, (cut.high - central) / s.size);
                 },
                 [&](const LogNormal& n) {
                   s.kind = Kind::log_normal;
                   s.size = n.log_standard_deviation;
                   s.least = cut.low;
                   s.most = cut.high;
                   if (!cut.active()) return;
                   const auto [low, high] = log_cut(cut, central, s.size);
                   cut_normal(s, low, high);
                 },
                 [&](const Even& e) { even_between(s, e.low, e.high, cut); },
                 [&](const Triangle& t) {
                   s.kind = Kind::triangle;
                   s.low = t.low;
                   s.high = t.high;
                   s.size = t.high - t.low;
                   if (!cut.active() || !(t.high > t.low)) return;
                   const TriangleTails at_low = triangle_tails(t.low, central, t.high, cut.low);
                   const TriangleTails at_high = triangle_tails(t.low, central, t.high, cut.high);
                   s.cut = true;
                   s.below_low = at_low.below;
                   s.above_high = at_high.above;
                   s.inside = at_low.below > 0.5 ? at_low.above - at_high.above : at_high.below - at_low.below;
                 },
                 [&](const NotRandom& r) { even_between(s, r.low, r.high, cut); },
             },
             spread);
  return s;
}

template <int W>
Lanes<W> quantile(const ReadySpread& spread, const Lanes<W>& score) {
  if (!is_normal(spread)) return straight_quantile<W>(spread, score);
  return value_of_normal<W>(spread, quantile_of_tails<W>(tails_at<W>(spread, score)));
}

template <int W>
Lanes<W> quantile(const Spread& spread, const Cut& cut, double central, const Lanes<W>& score) {
  return quantile<W>(ready_spread(spread, cut, central), score);
}

void quantiles(std::span<const ReadySpread> spreads, std::span<const Lanes<8>> scores, std::span<Lanes<8>> values) {
  NormalQuantiles normals;
  for (std::size_t i = 0; i < spreads.size(); ++i) normals.add(spreads[i], scores[i], values[i]);
  normals.settle();
}

void quantiles(std::span<const ReadySpread> spreads,
               std::span<const std::vector<Lanes<8>>> scores,
               std::span<std::vector<Lanes<8>>> values) {
  NormalQuantiles normals;
  for (std::size_t i = 0; i < spreads.size(); ++i) {
    for (std::size_t block = 0; block < scores.size(); ++block)
      normals.add(spreads[i], scores[block][i], values[block][i]);
  }
  normals.settle();
}

double probability(const Spread& spread, const Cut& cut, double central, double x) {
  const auto share = [](const CutTails& cut_tails, double z) {
    const double inside = z > 0.0 ? cut_tails.inside - (normal_probability(-z) - cut_tails.above_high)
                                  : normal_probability(z) - cut_tails.below_low;
    return std::clamp(inside / cut_tails.inside, 0.0, 1.0);
  };
  const auto even = [&](double low, double high) {
    const double a = std::max(low, cut.low), b = std::min(high, cut.high);
    return std::clamp((x - a) / (b - a), 0.0, 1.0);
  };
  return std::visit(Overloaded{
                        [&](const Exact&) { return 0.5; },
                        [&](const Normal& n) {
                          const double s = n.standard_deviation;
                          return share(tails_of((cut.low - central) / s, (cut.high - central) / s), (x - central) / s);
                        },
                        [&](const LogNormal& n) {
                          const double s = n.log_standard_deviation;
                          if (!(x / central > 0.0)) return 0.0;
                          const auto [low, high] = log_cut(cut, central, s);
                          return share(tails_of(low, high), std::log(x / central) / s);
                        },
                        [&](const Even& e) { return even(e.low, e.high); },
                        [&](const Triangle& t) {
                          const double low = triangle_tails(t.low, central, t.high, cut.low).below;
                          const double high = triangle_tails(t.low, central, t.high, cut.high).below;
                          const double at = triangle_tails(t.low, central, t.high, x).below;
                          return std::clamp((at - low) / (high - low), 0.0, 1.0);
                        },
                        [&](const NotRandom& r) { return even(r.low, r.high); },
                    },
                    spread);
}

double mean(const Spread& spread, const Cut& cut, double central) { return moments(spread, cut, central).mean; }

double standard_deviation(const Spread& spread, const Cut& cut, double central) {
  return std::sqrt(moments(spread, cut, central).variance);
}

template Lanes<1> quantile<1>(const Spread&, const Cut&, double, const Lanes<1>&);
template Lanes<8> quantile<8>(const Spread&, const Cut&, double, const Lanes<8>&);
template Lanes<1> quantile<1>(const ReadySpread&, const Lanes<1>&);
template Lanes<8> quantile<8>(const ReadySpread&, const Lanes<8>&);
template Lanes<1> normal_quantile<1>(const Lanes<1>&);
template Lanes<8> normal_quantile<8>(const Lanes<8>&);

}  // namespace headband::base
