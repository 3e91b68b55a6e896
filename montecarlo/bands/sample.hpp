#pragma once
// SPDX-License-Identifier: MIT
//
// Quantiles of sampled answers with their confidence, moments, and humps of the density.

#include "core/answers/study.hpp"
#include "montecarlo/bands/counts.hpp"
#include "montecarlo/bands/ranked.hpp"

#include <span>
#include <vector>

namespace headband::montecarlo {

/// How the draws of an answer hang together.
struct SampleShape {
  int replicates = 1;  ///< > 1: draw i belongs to replicate i mod replicates, replicates are independent
  double confidence = 0.95;
};

/// One answer's finished draws, ready for questions.
class Sample {
 public:
  /// @param values one per draw, NaN or a status other than 0 = failed; not copied: they must outlive the questions
  Sample(std::span<const double> values, std::span<const std::int8_t> status, SampleShape shape);

  [[nodiscard]] long long draws() const { return draws_; }
  [[nodiscard]] long long failed() const { return draws_ - finished(); }
  [[nodiscard]] long long finished() const { return static_cast<long long>(ranked_.size()); }
  [[nodiscard]] double mean() const { return mean_; }
  [[nodiscard]] double standard_deviation() const { return standard_deviation_; }

  /// Quantile of the finished draws (straight line between order statistics) with its confidence interval.
  ///
  /// Independent draws: the order statistics of `quantile_ranks`. Replicated designs: the spread of the replicates'
  /// own quantiles, Student's t, and half a draw. Failed draws may lie anywhere: they stand below all others for the
  /// lower end and above all others for the upper end. An end that no draw can hold is missing.
  [[nodiscard]] answers::QuantileAnswer quantile(double probability) const;

  /// The same at several probabilities; of many draws much cheaper than one after another.
  [[nodiscard]] std::vector<answers::QuantileAnswer> quantiles(std::span<const double> probabilities) const;

  /// Humps of the density: 1 or more (0 where nothing finished). A hump counts when the valley beside it is deeper than
  /// the noise of the sample (3.5 standard errors of a Gaussian kernel estimate) and than a tenth of its height.
  [[nodiscard]] int modes() const;

 private:
  /// Places (from 0) of a quantile and of the ends of its interval; an end that no draw can hold is under 0.
  struct Places {
    double value, lower, upper;
  };
  [[nodiscard]] Places places_of(double probability) const;
  [[nodiscard]] answers::QuantileAnswer quantile(double probability, const Places& places) const;
  [[nodiscard]] bool replicated() const;
  /// Mean and deviation of the finished draws from their sums about the first of them.
  void find_moments(std::span<const double> finished, double sum, double squares);
  /// Fills the replicates.
  void deal_out(std::span<const double> values, std::span<const std::int8_t> status, bool all_finished);
  SampleShape shape_;
  long long draws_ = 0;
  Ranked ranked_{{}};
  std::vector<Ranked> replicate_;  ///< finished draws of each replicate
  double mean_ = answers::missing, standard_deviation_ = answers::missing;
};

/// The probabilities every answer is asked at: 0.05, 0.5, 0.95 and the ends of `coverage`, rising, each once.
[[nodiscard]] std::vector<double> asked_probabilities(double coverage);

/// The quantiles alone of one column of finished draws, without their intervals: for many columns of few draws.
/// @return as `probabilities`, the same bits as Sample's; missing where nothing finished
[[nodiscard]] std::vector<double> plain_quantiles(std::span<const double> values,
                                                  std::span<const std::int8_t> status,
                                                  std::span<const double> probabilities);

/// The ends of `coverage` and the middle, rising: of the bands along the line and over time.
[[nodiscard]] std::vector<double> band_probabilities(double coverage);

}  // namespace headband::montecarlo
