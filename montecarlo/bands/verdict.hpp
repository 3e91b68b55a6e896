#pragma once
// SPDX-License-Identifier: MIT
//
// How numbers become OK, NOT OK or CANNOT TELL (rules in docs/methods.md).

#include "core/answers/study.hpp"

#include <span>
#include <string>
#include <vector>

namespace headband::montecarlo {

using answers::Verdict;

/// A bound on a number: kept when value <= bound (`not_over`) or value >= bound.
struct Bound {
  double bound = 0.0;
  bool not_over = true;
};

[[nodiscard]] bool kept(const Bound& bound, double value);

/// How far the true extreme may lie from the computed one, each >= 0; NaN: not known.
/// A run that shows the extreme before any vapour formed may know `kept` where `broken` stays unknown: finer grids may
/// move the later peak, not the earlier one.
struct GridRoom {
  double broken = 0.0;  ///< towards breaking the bound
  double kept = 0.0;    ///< towards keeping it

  GridRoom(double both = 0.0)
      : broken(both), kept(both) {}  // NOLINT(google-explicit-constructor): one bound, both ways
  GridRoom(double towards_broken, double towards_kept) : broken(towards_broken), kept(towards_kept) {}
};

/// `value` moved by `by` >= 0 towards the bound (and through it), and away from it.
[[nodiscard]] double moved_towards(const Bound& bound, double value, double by);
[[nodiscard]] double moved_away(const Bound& bound, double value, double by);

/// Distance to the bound, positive when kept.
[[nodiscard]] double margin(const Bound& bound, double value);

/// Verdict of a single run: kept by value ± grid bound, broken by value ± grid bound, else it cannot be told.
/// A value that is not a number cannot be told; room that is not known settles nothing on its side.
[[nodiscard]] Verdict verdict_of_run(const Bound& bound, double value, GridRoom room);

/// Verdict of a probability known to lie in [lower, upper], each end at its confidence, against what is allowed.
[[nodiscard]] Verdict verdict_of_probability(double lower, double upper, double at_most);

/// NOT OK before CANNOT TELL before OK; `none` where there is nothing to judge.
[[nodiscard]] Verdict worst(std::span<const Verdict> verdicts);

/// Verdict over the outer points of ranges that are not random: OK or NOT OK only where every point says so.
[[nodiscard]] Verdict over_outer_points(std::span<const Verdict> verdicts);

/// Counts of draws against one bound, and what they say.
struct Judged {
  long long draws = 0;  ///< all, failed ones included
  long long failed = 0;
  long long broken = 0;                           ///< as computed
  long long broken_towards = 0, broken_away = 0;  ///< with values moved by the grid bound
  double probability = answers::missing;  ///< share of the finished draws that break the bound; NaN: none finished
  double lower = 0.0, upper = 1.0;        ///< one-sided, each at `confidence`
  Verdict verdict = Verdict::cannot_tell;
};

/// Judges draws: failed ones (NaN, or status not 0) count against in the upper bound and not at all in the lower one.
/// @param room of the grid; not known towards broken: every draw may be broken, towards kept: none is for sure
[[nodiscard]] Judged judge(const Bound& bound,
                           std::span<const double> values,
                           std::span<const std::int8_t> status,
                           GridRoom room,
                           double at_most,
                           double confidence);

/// One of several bounds of which none may be broken.
struct Part {
  Bound bound;
  std::span<const double> values;  ///< one per draw
  GridRoom room = 0.0;             ///< as in `judge`
};

/// The same for "any of these is broken": a draw breaks the whole when it breaks a part, each part moved by its own
/// grid bound. Not under the largest of its parts, not over their sum. No verdict: nothing is allowed or not.
[[nodiscard]] Judged judge_any(std::span<const Part> parts, std::span<const std::int8_t> status, double confidence);

}  // namespace headband::montecarlo
