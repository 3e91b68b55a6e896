#pragma once
// SPDX-License-Identifier: MIT

#include <cstddef>
#include <cstdint>
#include <span>
#include <vector>

namespace headband::montecarlo {

/// Numbers of which some ranks are asked. One pass counts them into even bins; one more gathers and sorts the few bins
/// that hold the asked ranks. Ten quantiles of a million draws then cost two passes, not a sort.
class Ranked {
 public:
  explicit Ranked(std::vector<double> numbers);
  [[nodiscard]] std::size_t size() const { return numbers_.size(); }
  [[nodiscard]] bool empty() const { return numbers_.empty(); }

  /// Gathers the bins about these places (from 0) in one pass; a place not announced costs a pass of its own.
  void announce(std::span<const double> places) const;

  /// The number of rank `rank` (0 = least). Not for two threads at once.
  [[nodiscard]] double at(std::size_t rank) const;

  /// Straight line between the ranks about `place`, counted from 0.
  [[nodiscard]] double at_place(double place) const;

  /// Place of a quantile: (n - 1) p + 1 counted from 1 (Hyndman & Fan 1996, Amer. Stat. 50, 361, type 7).
  [[nodiscard]] double place_of(double probability) const;

  /// The number at `place_of`; not a number when empty.
  [[nodiscard]] double quantile(double probability) const;

  /// The numbers, in the order given where there are many of them.
  [[nodiscard]] const std::vector<double>& numbers() const { return numbers_; }

  /// Even bins and how many numbers each holds; none where the numbers are few.
  struct Bins {
    double low = 0.0, width = 0.0;
    std::vector<std::size_t> count;
  };
  [[nodiscard]] Bins bins() const;

 private:
  [[nodiscard]] std::size_t bin_of(double x) const;
  [[nodiscard]] std::size_t bin_of_rank(std::size_t rank) const;
  void gather(const std::vector<std::size_t>& bins) const;

  std::vector<double> numbers_;
  double low_ = 0.0, scale_ = 0.0;
  std::vector<std::size_t> first_;                   ///< rank of each bin's least number, one more at the end
  mutable std::vector<std::vector<double>> sorted_;  ///< per bin; empty: not gathered
};

}  // namespace headband::montecarlo
