// SPDX-License-Identifier: MIT
#include "montecarlo/bands/ranked.hpp"

#include <algorithm>
#include <cmath>
#include <cstdint>
#include <limits>
#include <utility>

namespace headband::montecarlo {

namespace {
constexpr std::size_t worth_dealing = 2048;   ///< fewer numbers are sorted at once
constexpr std::size_t numbers_a_bucket = 256;
}  // namespace

Ranked::Ranked(std::vector<double> numbers) : numbers_(std::move(numbers)) {
  if (numbers_.size() < worth_dealing) {
    std::sort(numbers_.begin(), numbers_.end());
    return;
  }
  const auto [least, most] = std::minmax_element(numbers_.begin(), numbers_.end());
  const double low = *least, width = *most - low;
  const std::size_t buckets = std::min<std::size_t>(numbers_.size() / numbers_a_bucket, 16384);
  const double scale = width > 0.0 ? static_cast<double>(buckets) / width : 0.0;
  if (!std::isfinite(scale) || scale == 0.0) {
    std::sort(numbers_.begin(), numbers_.end());
    return;
  }
  const auto bucket_of = [&](double x) {
    return std::min(static_cast<std::size_t>(static_cast<std::int64_t>((x - low) * scale)), buckets - 1);
  };
  first_.assign(buckets + 1, 0);
  for (const double x : numbers_) ++first_[bucket_of(x) + 1];
  for (std::size_t b = 0; b < buckets; ++b) first_[b + 1] += first_[b];
  std::vector<std::size_t> next(first_.begin(), first_.end() - 1);
  std::vector<double> dealt(numbers_.size());
  for (const double x : numbers_) dealt[next[bucket_of(x)]++] = x;
  numbers_ = std::move(dealt);
  sorted_.assign(buckets, false);
}

double Ranked::at(std::size_t rank) const {
  if (!first_.empty()) {
    const auto behind = std::upper_bound(first_.begin(), first_.end(), rank);
    const auto bucket = static_cast<std::size_t>(behind - first_.begin()) - 1;
    if (!sorted_[bucket]) {
      std::sort(numbers_.begin() + static_cast<std::ptrdiff_t>(first_[bucket]),
                numbers_.begin() + static_cast<std::ptrdiff_t>(first_[bucket + 1]));
      sorted_[bucket] = true;
    }
  }
  return numbers_[rank];
}

double Ranked::at_place(double place) const {
  const std::size_t below = std::min(static_cast<std::size_t>(std::max(place, 0.0)), size() - 1);
  const std::size_t above = std::min(below + 1, size() - 1);
  const double share = place - static_cast<double>(below), number = at(below);
  return number + share * (at(above) - number);
}

double Ranked::quantile(double probability) const {
  if (empty()) return std::numeric_limits<double>::quiet_NaN();
  return at_place(std::clamp(probability, 0.0, 1.0) * static_cast<double>(size() - 1));
}

}  // namespace headband::montecarlo
