// SPDX-License-Identifier: MIT
#include "montecarlo/bands/ranked.hpp"

#include <algorithm>
#include <array>
#include <cmath>
#include <limits>
#include <utility>

namespace headband::montecarlo {

namespace {

constexpr std::size_t worth_binning = 2048;  ///< fewer numbers are sorted at once
constexpr std::size_t numbers_a_bin = 128;
constexpr std::size_t most_bins = 4096;  ///< their counts fill half the first-level cache

/// Which bin each of some numbers falls into: worked out for many at a time, which takes a quarter of the time.
class BinNumbers {
 public:
  static constexpr std::size_t at_once = 256;

  BinNumbers(double low, double scale, std::size_t bins)
      : low_(low), scale_(scale), last_(static_cast<std::int32_t>(bins) - 1) {}

  /// Bins of `count` numbers, at most `at_once`; rises with the number.
  const std::array<std::int32_t, at_once>& of(const double* numbers, std::size_t count) {
    for (std::size_t i = 0; i < count; ++i) {
      const auto bin = static_cast<std::int32_t>((numbers[i] - low_) * scale_);
      bin_[i] = bin < last_ ? bin : last_;
    }
    return bin_;
  }

 private:
  double low_, scale_;
  std::int32_t last_;
  std::array<std::int32_t, at_once> bin_{};
};

Extent extent_of(std::span<const double> numbers) {
  // eight chains: each comparison waits for the one before it
  std::array<double, 8> low, high;
  low.fill(numbers.front());
  high.fill(numbers.front());
  std::size_t i = 0;
  for (; i + 8 <= numbers.size(); i += 8) {
    for (std::size_t k = 0; k < 8; ++k) {
      const double x = numbers[i + k];
      low[k] = x < low[k] ? x : low[k];
      high[k] = x > high[k] ? x : high[k];
    }
  }
  for (; i < numbers.size(); ++i) {
    low[0] = std::min(low[0], numbers[i]);
    high[0] = std::max(high[0], numbers[i]);
  }
  return {*std::ranges::min_element(low), *std::ranges::max_element(high)};
}

}  // namespace

Ranked::Ranked(std::vector<double> numbers) : own_(std::move(numbers)), numbers_(own_) { count({}); }

Ranked::Ranked(std::span<const double> numbers, Extent extent) : numbers_(numbers) { count(extent); }

Ranked Ranked::of(std::span<const double> numbers, Extent extent) { return {numbers, extent}; }

void Ranked::sort_all() {
  if (own_.empty()) own_.assign(numbers_.begin(), numbers_.end());
  std::sort(own_.begin(), own_.end());
  numbers_ = own_;
}

void Ranked::count(Extent extent) {
  const std::size_t n = numbers_.size();
  if (n < worth_binning) {
    sort_all();
    return;
  }
  if (extent.low > extent.high) extent = extent_of(numbers_);
  const std::size_t bins = std::min(n / numbers_a_bin, most_bins);
  const double scale = static_cast<double>(bins) / (extent.high - extent.low);
  if (!std::isfinite(scale) || scale == 0.0) {
    sort_all();
    return;
  }
  low_ = extent.low;
  scale_ = scale;
  gathered_.resize(bins);
  std::vector<std::uint32_t> counts(bins, 0);
  BinNumbers numbers(low_, scale_, bins);
  for (std::size_t from = 0; from < n; from += BinNumbers::at_once) {
    const std::size_t many = std::min(BinNumbers::at_once, n - from);
    const auto& bin = numbers.of(&numbers_[from], many);
    for (std::size_t i = 0; i < many; ++i) ++counts[static_cast<std::size_t>(bin[i])];
  }
  first_.assign(bins + 1, 0);
  for (std::size_t b = 0; b < bins; ++b) first_[b + 1] = first_[b] + counts[b];
}

std::size_t Ranked::bin_of_rank(std::size_t rank) const {
  return static_cast<std::size_t>(std::upper_bound(first_.begin(), first_.end(), rank) - first_.begin()) - 1;
}

void Ranked::gather(const std::vector<std::size_t>& bins) const {
  std::vector<std::size_t> wanted = bins;
  std::ranges::sort(wanted);
  wanted.erase(std::unique(wanted.begin(), wanted.end()), wanted.end());
  std::erase_if(wanted, [this](std::size_t b) { return gathered_[b].done(); });
  if (wanted.empty()) return;
  std::vector<std::uint8_t> is_wanted(gathered_.size(), 0);
  for (const std::size_t b : wanted) {
    is_wanted[b] = 1;
    gathered_[b].sorted.reserve(first_[b + 1] - first_[b]);
  }
  BinNumbers numbers(low_, scale_, gathered_.size());
  for (std::size_t from = 0; from < numbers_.size(); from += BinNumbers::at_once) {
    const std::size_t many = std::min(BinNumbers::at_once, numbers_.size() - from);
    const auto& bin = numbers.of(&numbers_[from], many);
    for (std::size_t i = 0; i < many; i += 8) {  // most of the time none of eight is wanted
      unsigned any = 0;
      for (std::size_t k = i; k < i + 8; ++k) any |= is_wanted[static_cast<std::size_t>(bin[k])];
      if (any == 0) continue;
      for (std::size_t k = i; k < std::min(i + 8, many); ++k) {
        const auto b = static_cast<std::size_t>(bin[k]);
        if (is_wanted[b] != 0) gathered_[b].sorted.push_back(numbers_[from + k]);
      }
    }
  }
  for (const std::size_t b : wanted) {
    auto& numbers_here = gathered_[b].sorted;
    if (numbers_here.size() > numbers_.size() / 4) {  // a far outlier: bins of their own are worth it
      gathered_[b].crowd = std::make_unique<Ranked>(std::exchange(numbers_here, {}));
    } else {
      std::sort(numbers_here.begin(), numbers_here.end());
    }
  }
}

void Ranked::announce(std::span<const double> places) const {
  if (first_.empty()) return;
  std::vector<std::size_t> bins;
  for (const double place : places) {
    if (!(place >= 0.0)) continue;
    const std::size_t below = std::min(static_cast<std::size_t>(place), size() - 1);
    bins.push_back(bin_of_rank(below));
    bins.push_back(bin_of_rank(std::min(below + 1, size() - 1)));
  }
  gather(bins);
}

double Ranked::at(std::size_t rank) const {
  if (first_.empty()) return numbers_[rank];
  const std::size_t bin = bin_of_rank(rank);
  if (!gathered_[bin].done()) gather({bin});
  const Gathered& here = gathered_[bin];
  return here.crowd ? here.crowd->at(rank - first_[bin]) : here.sorted[rank - first_[bin]];
}

Ranked::Bins Ranked::bins() const {
  Bins bins;
  if (first_.empty()) return bins;
  bins.low = low_;
  bins.width = 1.0 / scale_;
  for (std::size_t b = 0; b + 1 < first_.size(); ++b) bins.count.push_back(first_[b + 1] - first_[b]);
  return bins;
}

double Ranked::at_place(double place) const {
  const std::size_t below = std::min(static_cast<std::size_t>(std::max(place, 0.0)), size() - 1);
  const std::size_t above = std::min(below + 1, size() - 1);
  const double share = place - static_cast<double>(below), number = at(below);
  return number + share * (at(above) - number);
}

double Ranked::place_of(double probability) const {
  return std::clamp(probability, 0.0, 1.0) * static_cast<double>(std::max<std::size_t>(size(), 1) - 1);
}

double Ranked::quantile(double probability) const {
  return empty() ? std::numeric_limits<double>::quiet_NaN() : at_place(place_of(probability));
}

}  // namespace headband::montecarlo
