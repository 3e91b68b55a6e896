// SPDX-License-Identifier: MIT
#include "montecarlo/bands/sample.hpp"

#include "core/base/spread.hpp"
#include "montecarlo/sampling/philox.hpp"
#include "montecarlo/sampling/sobol.hpp"

#include <gtest/gtest.h>

#include <cmath>

namespace headband::montecarlo {
namespace {

std::vector<double> normals(int n, std::uint64_t seed) {
  std::vector<double> x;
  for (int i = 0; i < n; ++i) {
    x.push_back(
        base::normal_quantile(base::Lanes<1>(score_of_bits(philox_bits(seed, static_cast<std::uint64_t>(i), 1))))
            .number);
  }
  return x;
}

std::vector<std::int8_t> finished(std::size_t n) { return std::vector<std::int8_t>(n, 0); }

TEST(Sample, QuantilesAreOrderStatistics) {
  std::vector<double> x;
  for (int i = 1000; i > 0; --i) x.push_back(i);
  const Sample s(x, finished(1000), {.confidence = 0.95});
  const auto q = s.quantile(0.95);
  EXPECT_DOUBLE_EQ(q.value, 950.05);
  EXPECT_EQ(q.lower, 936.0);  // ranks of the reference file
  EXPECT_EQ(q.upper, 964.0);
  EXPECT_DOUBLE_EQ(s.mean(), 500.5);
  EXPECT_DOUBLE_EQ(s.standard_deviation(), std::sqrt(1000.0 * 1001.0 / 12.0));
}

TEST(Sample, FailedDrawsWidenBothEnds) {
  std::vector<double> x;
  for (int i = 1; i <= 1000; ++i) x.push_back(i);
  auto status = finished(1000);
  for (std::size_t i = 400; i < 410; ++i) status[i] = 2;  // ten in the middle
  const Sample s(x, status, {.confidence = 0.95});
  EXPECT_EQ(s.failed(), 10);
  const auto q = s.quantile(0.95);
  EXPECT_EQ(q.lower, 936.0);  // rank 936 of 1000 with the failed below all: the 926th finished one is 936
  EXPECT_EQ(q.upper, 974.0);  // rank 964 with the failed above all: the 964th finished one is 974
}

/// A draw may be failed by its status, by its number, or both: the rest must say what it says alone.
TEST(Sample, FailedDrawsAreLeftOutOfEverything) {
  for (const int n : {3, 8, 9, 100, 5003}) {
    std::vector<double> x = normals(n, 3), rest;
    auto status = finished(static_cast<std::size_t>(n));
    for (std::size_t i = 0; i < x.size(); ++i) {
      if (i % 7 == 0) status[i] = 1;
      if (i % 5 == 0) x[i] = std::nan("");
      if (i % 7 != 0 && i % 5 != 0) rest.push_back(x[i]);
    }
    const Sample some(x, status, {}), alone(rest, finished(rest.size()), {});
    EXPECT_EQ(some.finished(), alone.finished());
    EXPECT_EQ(some.mean(), alone.mean());
    EXPECT_EQ(some.standard_deviation(), alone.standard_deviation());
    for (const double p : {0.01, 0.5, 0.975}) EXPECT_EQ(some.quantile(p).value, alone.quantile(p).value);
    const Sample none(std::vector<double>(x.size(), std::nan("")), status, {});
    EXPECT_EQ(none.finished(), 0);
    EXPECT_TRUE(std::isnan(none.mean()));
  }
}

/// Sums in twice the precision.
struct LongMoments {
  long double mean = 0.0L, squares = 0.0L;
  explicit LongMoments(const std::vector<double>& numbers) {
    for (const double v : numbers) mean += static_cast<long double>(v);
    mean /= static_cast<long double>(numbers.size());
    for (const double v : numbers)
      squares += (static_cast<long double>(v) - mean) * (static_cast<long double>(v) - mean);
  }
};

/// Moments against sums in twice the precision, from few to many numbers, far from zero too.
TEST(Sample, MomentsAreThoseOfTheNumbers) {
  for (const double offset : {0.0, 1e9}) {
    for (const int n : {1, 2, 7, 8, 9, 4099, 100000}) {
      auto x = normals(n, 9);
      for (double& v : x) v += offset;
      const LongMoments exact(x);
      const Sample s(x, finished(x.size()), {});
      EXPECT_NEAR(s.mean(), static_cast<double>(exact.mean), 1e-15 * (1.0 + offset));
      if (n == 1) continue;
      const double deviation = static_cast<double>(std::sqrt(exact.squares / (n - 1)));
      EXPECT_NEAR(s.standard_deviation() / deviation, 1.0, 1e-12) << n;
    }
  }
  std::vector<double> far(1000, 1.0);  // the first number lies far from all others
  for (std::size_t i = 0; i < far.size(); ++i) far[i] = 1.0 + 1e-3 * static_cast<double>(i % 2);
  far[0] = 1e12;
  const Sample s(far, finished(far.size()), {});
  EXPECT_NEAR(s.standard_deviation() / static_cast<double>(std::sqrt(LongMoments(far).squares / 999)), 1.0, 1e-12);
}

TEST(Sample, TooFewDrawsLeaveAnEndOpen) {
  const Sample s(normals(20, 1), finished(20), {.confidence = 0.95});
  EXPECT_TRUE(std::isnan(s.quantile(0.025).lower));
  EXPECT_TRUE(std::isnan(s.quantile(0.975).upper));
  EXPECT_FALSE(std::isnan(s.quantile(0.5).lower));
  const Sample none(std::vector<double>{}, finished(0), {});
  EXPECT_TRUE(std::isnan(none.quantile(0.5).value));
  EXPECT_EQ(none.modes(), 0);
}

/// The intervals hold the true quantile about as often as they say: 400 samples, binomial noise allowed (4 s.e.).
TEST(Sample, IntervalsCover) {
  const double truth = base::normal_quantile(base::Lanes<1>(0.9)).number;
  int plain = 0, replicated = 0;
  const auto directions = sobol_directions(1);
  for (std::uint64_t seed = 1; seed <= 400; ++seed) {
    const auto x = normals(512, seed);
    const auto q = Sample(x, finished(512), {.confidence = 0.9}).quantile(0.9);
    plain += q.lower <= truth && truth <= q.upper ? 1 : 0;
    const ScrambledSobol sobol(directions[0], seed, 5);
    std::vector<double> y;
    for (std::uint64_t i = 0; i < 512; ++i) {
      y.push_back(base::normal_quantile(base::Lanes<1>((static_cast<double>(sobol.point(i)) + 0.5) * 0x1p-52)).number);
    }
    const auto r = Sample(y, finished(512), {.replicates = 16, .confidence = 0.9}).quantile(0.9);
    replicated += r.lower <= truth && truth <= r.upper ? 1 : 0;
    EXPECT_LT(r.upper - r.lower, q.upper - q.lower);  // a one-dimensional net is far better than plain draws
  }
  EXPECT_GE(plain, 360 - 24);
  EXPECT_GE(replicated, 360 - 24);
}

TEST(Sample, HumpsAreCounted) {
  for (const std::uint64_t seed : {1U, 2U, 3U, 4U, 5U}) {
    const auto x = normals(2048, seed);
    EXPECT_EQ(Sample(x, finished(2048), {}).modes(), 1) << seed;
    std::vector<double> two = x, near = x, skew = x;
    for (std::size_t i = 0; i < two.size(); ++i) {
      if (i % 3 == 0) two[i] += 6.0;
      if (i % 2 == 0) near[i] += 1.0;  // closer than two standard deviations: one hump (Behboodian 1970)
      skew[i] = std::exp(x[i]);
    }
    EXPECT_EQ(Sample(two, finished(2048), {}).modes(), 2) << seed;
    EXPECT_EQ(Sample(near, finished(2048), {}).modes(), 1) << seed;
    EXPECT_EQ(Sample(skew, finished(2048), {}).modes(), 1) << seed;
  }
  EXPECT_EQ(Sample(std::vector<double>(100, 3.0), finished(100), {}).modes(), 1);
}

TEST(Sample, ProbabilitiesAreWrittenShort) {
  EXPECT_EQ(asked_probabilities(0.95), (std::vector<double>{0.025, 0.05, 0.5, 0.95, 0.975}));
  EXPECT_EQ(asked_probabilities(0.9), (std::vector<double>{0.05, 0.5, 0.95}));
}

TEST(Sample, PlainQuantilesAreTheSameBits) {
  std::vector<double> values;
  std::vector<std::int8_t> status;
  unsigned x = 7;
  for (int i = 0; i < 40000; ++i) {
    x = 1664525U * x + 1013904223U;
    values.push_back(static_cast<double>(x >> 8));
    status.push_back(i % 91 == 0 ? std::int8_t{3} : std::int8_t{0});
  }
  const auto probabilities = band_probabilities(0.95);
  ASSERT_EQ(probabilities.size(), 3U);
  for (const std::size_t n : {std::size_t{2}, std::size_t{300}, values.size()}) {
    const std::span<const double> v(values.data(), n);
    const std::span<const std::int8_t> s(status.data(), n);
    const auto plain = plain_quantiles(v, s, probabilities);
    const auto full = Sample(v, s, {}).quantiles(probabilities);
    for (std::size_t p = 0; p < 3; ++p) EXPECT_EQ(plain[p], full[p].value) << n;
  }
  EXPECT_TRUE(std::isnan(plain_quantiles(std::span(values).first(1), std::span(status).first(1), probabilities)[1]));
}

}  // namespace
}  // namespace headband::montecarlo
