#pragma once
// SPDX-License-Identifier: MIT

#include <cstddef>
#include <vector>

namespace headband::montecarlo {

/// Numbers of which some ranks are asked: dealt into even buckets once, each bucket sorted when first looked into.
/// Ten quantiles of a million draws then cost a pass or two, not a sort.
class Ranked {
 public:
  explicit Ranked(std::vector<double> numbers);
  [[nodiscard]] std::size_t size() const { return numbers_.size(); }
  [[nodiscard]] bool empty() const { return numbers_.empty(); }

  /// The number of rank `rank` (0 = least). Not for two threads at once.
  [[nodiscard]] double at(std::size_t rank) const;

  /// Straight line between the ranks about `place`, counted from 0.
  [[nodiscard]] double at_place(double place) const;

  /// (n - 1) p + 1 (Hyndman & Fan 1996, Amer. Stat. 50, 361, type 7); not a number when empty.
  [[nodiscard]] double quantile(double probability) const;

  /// The numbers in no order of use.
  [[nodiscard]] const std::vector<double>& numbers() const { return numbers_; }

 private:
  mutable std::vector<double> numbers_;
  std::vector<std::size_t> first_;        ///< where each bucket starts; one more at the end
  mutable std::vector<bool> sorted_;      ///< per bucket
};

}  // namespace headband::montecarlo
