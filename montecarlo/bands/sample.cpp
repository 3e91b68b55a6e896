// SPDX-License-Identifier: MIT
#include "montecarlo/bands/sample.hpp"

#include "core/base/lanes.hpp"

#include <algorithm>
#include <array>
#include <boost/math/distributions/students_t.hpp>
#include <cmath>
#include <cstring>
#include <numbers>
#include <utility>

namespace headband::montecarlo {

namespace {

/// Gaussian kernel estimate of the density on an even grid: counts in fine bins, then a convolution.
std::vector<double> density(const Ranked& ranked, double low, double high, double width, int bins) {
  const double step = (high - low) / bins, per_step = 1.0 / step;
  std::vector<double> count(static_cast<std::size_t>(bins), 0.0);
  const auto add = [&](double x, double many) {
    if (x < low || x > high) return;
    count[static_cast<std::size_t>(std::min(static_cast<int>((x - low) * per_step), bins - 1))] += many;
  };
  const Ranked::Bins counted = ranked.bins();
  if (!counted.count.empty() && counted.width < 0.2 * width) {  // what is counted already is fine enough
    for (std::size_t b = 0; b < counted.count.size(); ++b) {
      add(counted.low + (static_cast<double>(b) + 0.5) * counted.width, static_cast<double>(counted.count[b]));
    }
  } else {
    for (const double x : ranked.numbers()) add(x, 1.0);
  }
  const int reach = std::min(bins, static_cast<int>(std::ceil(5.0 * width / step)));
  std::vector<double> kernel(static_cast<std::size_t>(reach) + 1);
  for (std::size_t k = 0; k < kernel.size(); ++k) {
    const double z = static_cast<double>(k) * step / width;
    kernel[k] = std::exp(-0.5 * z * z);
  }
  const double scale = 1.0 / (static_cast<double>(ranked.size()) * width * std::sqrt(2.0 * std::numbers::pi));
  std::vector<double> result(count.size());
  for (int i = 0; i < bins; ++i) {
    double sum = 0.0;
    for (int k = std::max(0, i - reach); k <= std::min(bins - 1, i + reach); ++k) {
      sum += count[static_cast<std::size_t>(k)] * kernel[static_cast<std::size_t>(std::abs(i - k))];
    }
    result[static_cast<std::size_t>(i)] = sum * scale;
  }
  return result;
}

/// Sums over numbers about a pivot, and their ends. Not a number where one of them is not.
struct Sums {
  double sum = 0.0, squares = 0.0;
  Extent extent;
};

/// Eight sums side by side, added up in a fixed order: a function of the numbers alone.
Sums sums_about(double pivot, std::span<const double> numbers) {
  using base::Lanes;
  Lanes<8> sum = 0.0, squares = 0.0, low = pivot, high = pivot;
  const auto add = [&](const Lanes<8>& x) {
    const Lanes<8> off = x - pivot;
    sum += off;
    squares += off * off;
    low = base::min(low, x);
    high = base::max(high, x);
  };
  const std::size_t whole = numbers.size() / 8 * 8;
  for (std::size_t i = 0; i < whole; i += 8) {
    Lanes<8> x;
    std::memcpy(&x.part[0], &numbers[i], sizeof(base::Quad));
    std::memcpy(&x.part[1], &numbers[i + 4], sizeof(base::Quad));
    add(x);
  }
  if (whole < numbers.size()) {
    Lanes<8> x = pivot;  // adds nothing in the lanes left over
    for (std::size_t i = whole; i < numbers.size(); ++i) x.set(static_cast<int>(i - whole), numbers[i]);
    add(x);
  }
  Sums sums{0.0, 0.0, {pivot, pivot}};
  for (int lane = 0; lane < 8; ++lane) {
    sums.sum += sum[lane];
    sums.squares += squares[lane];
    sums.extent.low = std::min(sums.extent.low, low[lane]);
    sums.extent.high = std::max(sums.extent.high, high[lane]);
  }
  return sums;
}

bool all_zero(std::span<const std::int8_t> status) {
  int any = 0;
  for (const std::int8_t s : status) any |= s;
  return any == 0;
}

/// The finished ones among the values.
std::vector<double> finished_of(std::span<const double> values, std::span<const std::int8_t> status) {
  std::vector<double> finished;
  finished.reserve(values.size());
  for (std::size_t i = 0; i < values.size(); ++i)
    if (status[i] == 0 && !std::isnan(values[i])) finished.push_back(values[i]);
  return finished;
}

/// Where the shape of the density is looked at.
constexpr std::array<double, 4> shape_probabilities{0.001, 0.25, 0.75, 0.999};

}  // namespace

std::vector<double> plain_quantiles(std::span<const double> values,
                                    std::span<const std::int8_t> status,
                                    std::span<const double> probabilities) {
  std::vector<double> finished = finished_of(values, status);
  if (finished.empty()) return std::vector<double>(probabilities.size(), answers::missing);
  const Ranked ranked(std::move(finished));
  std::vector<double> result;
  for (const double p : probabilities) result.push_back(ranked.place_of(p));
  ranked.announce(result);
  for (double& place : result) place = ranked.at_place(place);
  return result;
}

std::vector<double> band_probabilities(double coverage) {
  // the ends to 15 digits, so that (1 - 0.95)/2 is written 0.025
  const auto rounded = [](double p) { return std::round(p * 1e15) / 1e15; };
  return {rounded(0.5 * (1.0 - coverage)), 0.5, rounded(0.5 * (1.0 + coverage))};
}

std::vector<double> asked_probabilities(double coverage) {
  const auto ends = band_probabilities(coverage);
  std::vector<double> all{0.05, 0.5, 0.95, ends.front(), ends.back()};
  std::sort(all.begin(), all.end());
  all.erase(std::unique(all.begin(), all.end()), all.end());
  return all;
}

Sample::Sample(std::span<const double> values, std::span<const std::int8_t> status, SampleShape shape)
    : shape_(shape), draws_(static_cast<long long>(values.size())) {
  if (values.empty()) return;
  Sums sums = sums_about(values.front(), values);
  const bool all_finished = all_zero(status.first(values.size())) && !std::isnan(sums.sum);
  if (all_finished) {
    find_moments(values, sums.sum, sums.squares);
    ranked_ = Ranked::of(values, sums.extent);
  } else {
    std::vector<double> finished = finished_of(values, status);
    if (finished.empty()) return;
    sums = sums_about(finished.front(), finished);
    find_moments(finished, sums.sum, sums.squares);
    ranked_ = Ranked(std::move(finished));
  }
  deal_out(values, status, all_finished);
}

void Sample::find_moments(std::span<const double> finished, double sum, double squares) {
  const double pivot = finished.front(), n = static_cast<double>(finished.size());
  const double shift = sum / n;
  if (squares > 1e8 * (squares - n * shift * shift)) {  // the pivot was a far one: once more about the mean
    squares = 0.0;
    for (const double x : finished) squares += (x - pivot - shift) * (x - pivot - shift);
  } else {
    squares -= n * shift * shift;
  }
  mean_ = pivot + shift;
  standard_deviation_ = n > 1.0 ? std::sqrt(std::max(0.0, squares) / (n - 1.0)) : 0.0;
}

void Sample::deal_out(std::span<const double> values, std::span<const std::int8_t> status, bool all_finished) {
  const auto replicates = static_cast<std::size_t>(std::max(1, shape_.replicates));
  if (replicates == 1) return;
  std::vector<std::vector<double>> parts(replicates);
  for (auto& part : parts) part.reserve(values.size() / replicates + 1);
  std::size_t whose = 0;
  for (std::size_t i = 0; i < values.size(); ++i) {
    if (all_finished || (status[i] == 0 && !std::isnan(values[i]))) parts[whose].push_back(values[i]);
    whose = whose + 1 == replicates ? 0 : whose + 1;
  }
  replicate_.reserve(replicates);
  for (auto& part : parts) replicate_.emplace_back(std::move(part));
}

bool Sample::replicated() const {
  return !replicate_.empty() && std::ranges::all_of(replicate_, [](const auto& r) { return r.size() >= 2; });
}

Sample::Places Sample::places_of(double probability) const {
  Places places{ranked_.place_of(probability), -1.0, -1.0};
  const auto all = static_cast<double>(draws_), good = static_cast<double>(finished());
  if (replicated()) {
    // a stratified sample puts the quantile at place n p - 1/2 (from 0); half a draw each way is its own coarseness
    places.lower = std::min(places.value, probability * all - (all - good) - 1.0);
    const double upper = std::max(places.value, probability * all);
    if (upper <= good - 1.0) places.upper = upper;
  } else {
    const Ranks ranks = quantile_ranks(draws_, probability, shape_.confidence);
    places.lower = static_cast<double>(ranks.lower - failed() - 1);
    if (ranks.upper <= finished()) places.upper = static_cast<double>(ranks.upper - 1);
  }
  return places;
}

answers::QuantileAnswer Sample::quantile(double probability) const {
  if (!ranked_.empty()) return quantile(probability, places_of(probability));
  answers::QuantileAnswer q;
  q.probability = probability;
  return q;
}

answers::QuantileAnswer Sample::quantile(double probability, const Places& places) const {
  answers::QuantileAnswer q;
  q.probability = probability;
  ranked_.announce(std::array{places.value, places.lower, places.upper});
  q.value = ranked_.at_place(places.value);
  double half = 0.0;
  if (replicated()) {
    const auto replicates = static_cast<double>(replicate_.size());
    double sum = 0.0, squares = 0.0;
    for (const auto& r : replicate_) sum += r.quantile(probability) - q.value;
    for (const auto& r : replicate_) {
      const double off = r.quantile(probability) - q.value - sum / replicates;
      squares += off * off;
    }
    const boost::math::students_t student(replicates - 1.0);
    half = boost::math::quantile(student, 0.5 * (1.0 + shape_.confidence)) *
           std::sqrt(squares / (replicates - 1.0) / replicates);
  }
  if (places.lower >= 0.0) q.lower = ranked_.at_place(places.lower) - half;
  if (places.upper >= 0.0) q.upper = ranked_.at_place(places.upper) + half;
  return q;
}

std::vector<answers::QuantileAnswer> Sample::quantiles(std::span<const double> probabilities) const {
  std::vector<answers::QuantileAnswer> answers;
  if (ranked_.empty()) {
    for (const double p : probabilities) answers.push_back(quantile(p));
    return answers;
  }
  std::vector<double> wanted;
  std::vector<Places> asked;
  for (const double p : probabilities) {
    const Places places = places_of(p);
    asked.push_back(places);
    wanted.insert(wanted.end(), {places.value, places.lower, places.upper});
  }
  for (const double p : shape_probabilities) wanted.push_back(ranked_.place_of(p));  // `modes` asks for them
  ranked_.announce(wanted);
  for (const auto& r : replicate_) {
    if (!replicated()) break;
    wanted.clear();
    for (const double p : probabilities) wanted.push_back(r.place_of(p));
    r.announce(wanted);
  }
  for (std::size_t i = 0; i < asked.size(); ++i) answers.push_back(quantile(probabilities[i], asked[i]));
  return answers;
}

int Sample::modes() const {
  if (ranked_.empty()) return 0;
  const auto n = static_cast<double>(ranked_.size());
  std::array<double, 4> places{};
  std::ranges::transform(shape_probabilities, places.begin(), [this](double p) { return ranked_.place_of(p); });
  ranked_.announce(places);
  const double quartiles = ranked_.quantile(0.75) - ranked_.quantile(0.25);
  const double spread = quartiles > 0.0 ? std::min(standard_deviation_, quartiles / 1.34) : standard_deviation_;
  if (!(spread > 1e-12 * std::fabs(mean_)) || ranked_.size() < 50) return 1;
  // Silverman, Density Estimation (1986), 3.31, and half of it: humps of a mixture are narrower than the whole
  const double width = 0.45 * spread * std::pow(n, -0.2);
  const double low = ranked_.quantile(0.001) - 3.0 * width, high = ranked_.quantile(0.999) + 3.0 * width;
  const int bins = std::clamp(static_cast<int>(4.0 * (high - low) / width), 64, 4000);
  const std::vector<double> f = density(ranked_, low, high, width, bins);
  // standard error of a kernel estimate: sqrt(f R(K) / (n h)), R = 1 / (2 sqrt(pi))
  const double noise = 1.0 / (2.0 * std::sqrt(std::numbers::pi) * n * width);
  int humps = 0;
  double peak = 0.0, valley = 0.0;
  bool rising = true;  // between a valley and the next peak
  const auto deep = [&](double top, double bottom) {
    return top - bottom > 3.5 * std::sqrt((top + bottom) * noise) && top - bottom > 0.1 * top;
  };
  for (const double x : f) {
    if (rising) {
      peak = std::max(peak, x);
      if (deep(peak, x)) {
        ++humps;
        rising = false;
        valley = x;
      }
    } else {
      valley = std::min(valley, x);
      if (deep(x, valley)) {
        rising = true;
        peak = x;
      }
    }
  }
  return std::max(1, humps);
}

}  // namespace headband::montecarlo
