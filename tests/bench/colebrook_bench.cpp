// SPDX-License-Identifier: MIT
//
// Colebrook-White solves per second: the array form against plain scalar loops over the same pipes in the same run.
// Each benchmark carries the check value of its own results: the worst distance from the oracle over all pipes (an
// error over 1e-12 stops it) and their mean. Judge the ratios of one run, never the absolute figures.
//   bench_core --benchmark_filter=colebrook --benchmark_repetitions=7 --benchmark_report_aggregates_only=true
#include "core/friction/colebrook.hpp"
#include "core/friction/factor.hpp"

#include <benchmark/benchmark.h>

#include <algorithm>
#include <cmath>
#include <cstring>
#include <random>
#include <vector>

namespace {

using namespace headband;

/// Re log-uniform 4e3 .. 1e8, roughness/bore log-uniform 1e-6 .. 5e-2, every 16th pipe smooth; fixed seed.
struct Pipes {
  static constexpr std::size_t count = 4096;
  std::vector<double> roughness, reynolds, factor, exact;
  Pipes() : factor(count) {
    std::mt19937_64 bits(1);
    std::uniform_real_distribution<double> u(0.0, 1.0);
    for (std::size_t i = 0; i < count; ++i) {
      reynolds.push_back(4e3 * std::pow(2.5e4, u(bits)));
      roughness.push_back(i % 16 == 0 ? 0.0 : 1e-6 * std::pow(5e4, u(bits)));
      exact.push_back(friction::colebrook_plain(roughness[i], reynolds[i]).factor);
    }
  }
};

void report(benchmark::State& state, const Pipes& p, double allowed) {
  double worst = 0.0, sum = 0.0;
  for (std::size_t i = 0; i < Pipes::count; ++i) {
    worst = std::max(worst, std::abs(p.factor[i] / p.exact[i] - 1.0));
    sum += p.factor[i];
  }
  if (!(worst <= allowed)) state.SkipWithError("wrong values: the figure would be bought with errors");
  state.counters["check_worst"] = worst;
  state.counters["check_mean"] = sum / static_cast<double>(Pipes::count);
  state.SetItemsProcessed(state.iterations() * static_cast<std::int64_t>(Pipes::count));
}

/// Fixed point on f with the library's logarithm, as a textbook has it, to 1e-10.
double fixed_point(double roughness, double reynolds) {
  double f = 0.02, last = 0.0;
  for (int i = 0; i < 100 && std::abs(f - last) > 1e-10 * f; ++i) {
    last = f;
    const double x = -2.0 * std::log10(roughness / 3.7 + 2.51 / (reynolds * std::sqrt(f)));
    f = 1.0 / (x * x);
  }
  return f;
}

/// Scalar Newton from Swamee & Jain's estimate to 1e-12.
double scalar_newton(double roughness, double reynolds) {
  const double a = roughness / 3.7, b = 2.51 / reynolds;
  double x = -2.0 * std::log10(a + 5.74 / std::pow(reynolds, 0.9));
  for (int i = 0; i < 20; ++i) {
    const double y = a + b * x;
    const double step = (x + 2.0 * std::log10(y)) / (1.0 + friction::two_over_ln_10 * b / y);
    x -= step;
    if (std::abs(step) < 1e-12 * x) break;
  }
  return 1.0 / (x * x);
}

void colebrook_fixed_point(benchmark::State& state) {
  Pipes p;
  for (auto _ : state) {
    for (std::size_t i = 0; i < Pipes::count; ++i) p.factor[i] = fixed_point(p.roughness[i], p.reynolds[i]);
    benchmark::ClobberMemory();
  }
  report(state, p, 1e-9);
}
BENCHMARK(colebrook_fixed_point);

void colebrook_newton(benchmark::State& state) {
  Pipes p;
  for (auto _ : state) {
    for (std::size_t i = 0; i < Pipes::count; ++i) p.factor[i] = scalar_newton(p.roughness[i], p.reynolds[i]);
    benchmark::ClobberMemory();
  }
  report(state, p, 1e-12);
}
BENCHMARK(colebrook_newton);

void colebrook_array(benchmark::State& state) {
  Pipes p;
  for (auto _ : state) {
    friction::colebrook_factors(p.roughness, p.reynolds, p.factor);
    benchmark::ClobberMemory();
  }
  report(state, p, 1e-12);
}
BENCHMARK(colebrook_array);

void colebrook_one_by_one(benchmark::State& state) {
  Pipes p;
  for (auto _ : state) {
    for (std::size_t i = 0; i < Pipes::count; ++i)
      p.factor[i] = friction::colebrook_factor(p.roughness[i], p.reynolds[i]);
    benchmark::ClobberMemory();
  }
  report(state, p, 1e-12);
}
BENCHMARK(colebrook_one_by_one);

/// Through the door the march uses: prepared rules of eight draws, factor and slope.
template <bool near>
void colebrook_rule(benchmark::State& state) {
  Pipes p;
  constexpr std::size_t lanes = 8, groups = Pipes::count / lanes;
  std::vector<friction::PreparedRule<8>> rules;
  std::vector<base::Lanes<8>> reynolds(groups), roots(groups, base::Lanes<8>(0.0));
  for (std::size_t g = 0; g < groups; ++g) {
    friction::FactorRule<8> rule;
    std::memcpy(static_cast<void*>(&rule.relative_roughness), &p.roughness[g * lanes], sizeof rule.relative_roughness);
    std::memcpy(static_cast<void*>(&reynolds[g]), &p.reynolds[g * lanes], sizeof reynolds[g]);
    rules.push_back(friction::prepare<8>(rule));
  }
  for (auto _ : state) {
    for (std::size_t g = 0; g < groups; ++g) {
      const auto f = near ? friction::darcy_factor_near<8>(rules[g], reynolds[g], roots[g])
                          : friction::darcy_factor<8>(rules[g], reynolds[g]);
      benchmark::DoNotOptimize(f.log_slope);
      std::memcpy(&p.factor[g * lanes], &f.factor, sizeof f.factor);
    }
    benchmark::ClobberMemory();
  }
  report(state, p, 2e-12);
}
BENCHMARK(colebrook_rule<false>)->Name("colebrook_rule_with_slope");
BENCHMARK(colebrook_rule<true>)->Name("colebrook_rule_one_correction");

}  // namespace
