// SPDX-License-Identifier: MIT
#include "montecarlo/bands/ranked.hpp"

#include <algorithm>
#include <cmath>
#include <limits>
#include <utility>

namespace headband::montecarlo {

namespace {
constexpr std::size_t worth_binning = 2048;  ///< fewer numbers are sorted at once
constexpr std::size_t numbers_a_bin = 128;
constexpr std::size_t most_bins = 4096;
}  // namespace

Ranked::Ranked(std::vector<double> numbers) : numbers_(std::move(numbers)) {
  const auto sort_all = [this] { std::sort(numbers_.begin(), numbers_.end()); };
  if (numbers_.size() < worth_binning) {
    sort_all();
    return;
  }
  double low = numbers_.front(), high = low;
  for (const double x : numbers_) {
    low = x < low ? x : low;
    high = x > high ? x : high;
  }
  const std::size_t bins = std::min(numbers_.size() / numbers_a_bin, most_bins);
  const double scale = static_cast<double>(bins) / (high - low);
  if (!std::isfinite(scale) || scale == 0.0) {
    sort_all();
    return;
  }
  low_ = low;
  scale_ = scale;
  first_.assign(bins + 1, 0);
  sorted_.resize(bins);
  std::vector<std::uint32_t> even(bins, 0), odd(bins, 0);  // two counts: neighbours often fall into one bin
  std::size_t i = 0;
  for (; i + 1 < numbers_.size(); i += 2) {
    ++even[bin_of(numbers_[i])];
    ++odd[bin_of(numbers_[i + 1])];
  }
  if (i < numbers_.size()) ++even[bin_of(numbers_[i])];
  for (std::size_t b = 0; b < bins; ++b) first_[b + 1] = first_[b] + even[b] + odd[b];
}

std::size_t Ranked::bin_of(double x) const {
  return std::min(static_cast<std::size_t>(static_cast<std::int64_t>((x - low_) * scale_)), sorted_.size() - 1);
}

std::size_t Ranked::bin_of_rank(std::size_t rank) const {
  return static_cast<std::size_t>(std::upper_bound(first_.begin(), first_.end(), rank) - first_.begin()) - 1;
}

void Ranked::gather(const std::vector<std::size_t>& bins) const {
  std::vector<char> wanted(sorted_.size(), 0);
  bool any = false;
  for (const std::size_t bin : bins) {
    if (!sorted_[bin].empty()) continue;
    sorted_[bin].reserve(first_[bin + 1] - first_[bin]);
    wanted[bin] = 1;
    any = true;
  }
  if (!any) return;
  for (const double x : numbers_) {
    const std::size_t bin = bin_of(x);
    if (wanted[bin] != 0) sorted_[bin].push_back(x);
  }
  for (const std::size_t bin : bins) std::sort(sorted_[bin].begin(), sorted_[bin].end());
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
  std::sort(bins.begin(), bins.end());
  bins.erase(std::unique(bins.begin(), bins.end()), bins.end());
  gather(bins);
}

double Ranked::at(std::size_t rank) const {
  if (first_.empty()) return numbers_[rank];
  const std::size_t bin = bin_of_rank(rank);
  gather({bin});
  return sorted_[bin][rank - first_[bin]];
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
