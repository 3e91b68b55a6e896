#pragma once
// SPDX-License-Identifier: MIT
//
// The closed family of spreads. Each alternative says how a value is uncertain; `quantile` turns a uniform score
// into the value. A spread belongs to a central value held by Quantity.

#include "core/base/lanes.hpp"

#include <limits>
#include <span>
#include <variant>
#include <vector>

namespace headband::base {

/// No spread.
struct Exact {};
/// Normal about the value.
struct Normal {
  double standard_deviation;  ///< [SI], > 0
};
/// ln(value) is normal about ln(central value).
struct LogNormal {
  double log_standard_deviation;  ///< [-], > 0
};
/// Even between two bounds.
struct Even {
  double low, high;  ///< [SI], low < high
};
/// Triangle with its mode at the central value.
struct Triangle {
  double low, high;  ///< [SI], low <= value <= high
};
/// A range from lack of knowledge; never mixed with chance. The score is the place in the range.
struct NotRandom {
  double low, high;  ///< [SI], low < high
};

using Spread = std::variant<Exact, Normal, LogNormal, Even, Triangle, NotRandom>;

/// Bounds inside which the distribution lives (renormalised there).
struct Cut {
  double low = -std::numeric_limits<double>::infinity();
  double high = std::numeric_limits<double>::infinity();
  [[nodiscard]] bool active() const {
    return low > -std::numeric_limits<double>::infinity() || high < std::numeric_limits<double>::infinity();
  }
};

/// Quantile of a spread about `central` inside `cut` at probability `score`.
///
/// @param score probability in (0, 1)
/// @return value [SI of the quantity]; `central` for Exact
/// Accuracy: 1e-13 relative for scores in 1e-16 .. 1 - 1e-16. The same bits for every W.
template <int W>
[[nodiscard]] Lanes<W> quantile(const Spread& spread, const Cut& cut, double central, const Lanes<W>& score);

/// A spread made ready for many scores: what hangs on no score is computed once.
struct ReadySpread {
  enum class Kind { exact, normal, log_normal, even, triangle };
  Kind kind = Kind::exact;
  double central = 0.0;                                     ///< [SI]; lower bound of `even`, mode of `triangle`
  double size = 0.0;                                        ///< standard deviation, that of the logarithm, or width
  bool cut = false;                                         ///< the cut takes something away
  double low = 0.0, high = 0.0;                             ///< the cut in standard deviations; ends of a triangle [SI]
  double below_low = 0.0, above_high = 0.0;                 ///< shares beyond the cut
  double inside = 1.0;                                      ///< share inside it
  double least = -std::numeric_limits<double>::infinity();  ///< the cut [SI]
  double most = std::numeric_limits<double>::infinity();
};
[[nodiscard]] ReadySpread ready_spread(const Spread& spread, const Cut& cut, double central);

/// The same as `quantile` of the spread, bit by bit.
template <int W>
[[nodiscard]] Lanes<W> quantile(const ReadySpread& spread, const Lanes<W>& score);

/// Quantiles of many spreads at eight scores each: the same bits as one by one. The tails of all normal ones are
/// gathered and evaluated together, which is where the time goes otherwise.
/// @param scores, values as `spreads`
void quantiles(std::span<const ReadySpread> spreads, std::span<const Lanes<8>> scores, std::span<Lanes<8>> values);
/// The same for several blocks of eight: the more tails there are, the better they fill the lanes.
/// @param values as many as `scores`, each sized as `spreads`
void quantiles(std::span<const ReadySpread> spreads,
               std::span<const std::vector<Lanes<8>>> scores,
               std::span<std::vector<Lanes<8>>> values);

/// Distribution function of the spread about `central` inside `cut`: the score at which `quantile` gives `x`, in
/// [0, 1]. An exact value has no distribution: 0.5.
[[nodiscard]] double probability(const Spread& spread, const Cut& cut, double central, double x);

/// Mean of the spread about `central` inside `cut` [SI].
[[nodiscard]] double mean(const Spread& spread, const Cut& cut, double central);

/// Standard deviation of the spread about `central` inside `cut` [SI].
[[nodiscard]] double standard_deviation(const Spread& spread, const Cut& cut, double central);

/// Normal distribution function and its inverse (AS 241, Wichura 1988, Appl. Statist. 37, 477).
[[nodiscard]] double normal_probability(double z);
template <int W>
[[nodiscard]] Lanes<W> normal_quantile(const Lanes<W>& probability);

extern template Lanes<1> quantile<1>(const Spread&, const Cut&, double, const Lanes<1>&);
extern template Lanes<8> quantile<8>(const Spread&, const Cut&, double, const Lanes<8>&);
extern template Lanes<1> quantile<1>(const ReadySpread&, const Lanes<1>&);
extern template Lanes<8> quantile<8>(const ReadySpread&, const Lanes<8>&);
extern template Lanes<1> normal_quantile<1>(const Lanes<1>&);
extern template Lanes<8> normal_quantile<8>(const Lanes<8>&);

}  // namespace headband::base
