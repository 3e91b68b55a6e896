#pragma once
// SPDX-License-Identifier: MIT

#include <cstddef>
#include <cstdint>
#include <memory>
#include <span>
#include <vector>

namespace headband::montecarlo {

/// The least and the largest of some numbers; low > high: there are none.
struct Extent {
  double low = 1.0, high = 0.0;
};

/// Numbers of which some ranks are asked. One pass counts them into even bins; one more gathers and sorts the few bins
/// that hold the asked ranks. Ten quantiles of a million draws then cost two passes, not a sort, and nothing is copied
/// but those bins. Where a far outlier leaves most numbers in one bin, that bin is binned in its turn.
class Ranked {
 public:
  /// @param numbers none of them not a number
  explicit Ranked(std::vector<double> numbers);

  /// Of numbers held elsewhere, which must stay there unchanged while any rank is asked.
  /// @param extent theirs, where it is known already
  [[nodiscard]] static Ranked of(std::span<const double> numbers, Extent extent = {});

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
  [[nodiscard]] std::span<const double> numbers() const { return numbers_; }

  /// Even bins and how many numbers each holds; none where the numbers are few.
  struct Bins {
    double low = 0.0, width = 0.0;
    std::vector<std::size_t> count;
  };
  [[nodiscard]] Bins bins() const;

 private:
  Ranked(std::span<const double> numbers, Extent extent);
  void count(Extent extent);
  void sort_all();
  [[nodiscard]] std::size_t bin_of_rank(std::size_t rank) const;
  void gather(const std::vector<std::size_t>& bins) const;

  /// The numbers of one bin: sorted, or where they are most of all, binned in their turn.
  struct Gathered {
    std::vector<double> sorted;
    std::unique_ptr<Ranked> crowd;
    [[nodiscard]] bool done() const { return crowd || !sorted.empty(); }
  };

  std::vector<double> own_;                 ///< the numbers, where nobody else holds them
  std::span<const double> numbers_;         ///< all of them; sorted when there are no bins
  double low_ = 0.0, scale_ = 0.0;          ///< of the bins
  std::vector<std::size_t> first_;          ///< rank of each bin's least number, one more at the end; empty: no bins
  mutable std::vector<Gathered> gathered_;  ///< per bin
};

}  // namespace headband::montecarlo
