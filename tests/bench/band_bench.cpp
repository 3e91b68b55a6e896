// SPDX-License-Identifier: MIT
//
// Bands: a million sampled pressure drops from draws to quantiles, product and plain loop in one run; and what the
// design is worth: errors of mean and upper quantile of a peak head, scrambled Sobol' against plain draws; and three
// order statistics of ten million numbers against the library's ways.
//   bench_band --benchmark_filter=line --benchmark_repetitions=7 --benchmark_report_aggregates_only=true
#include "montecarlo/bands/ranked.hpp"
#include "montecarlo/propagate/band.hpp"
#include "tests/support/case_builder.hpp"

#include <benchmark/benchmark.h>

#include <algorithm>
#include <array>
#include <cmath>
#include <random>
#include <string>
#include <vector>

namespace {

using namespace headband;
using test::CaseBuilder;
using test::Dimension;

constexpr double flow = 0.25, length = 1e4, density = 850.0, rise = 20.0;

/// 10 km of 0.5 m pipe, 250 L/s of oil; bore, roughness, viscosity and the factor itself uncertain.
network::Case line_case(long long draws) {
  CaseBuilder build(density, 1e-5);
  build.c.liquid.viscosity.spread = base::Normal{1e-6};
  build.basin("source", 500.0);
  build.place("source", rise);
  build.place("end", rise);
  auto& line = build.pipe("line", "source", "end", length, 0.5);
  line.bore.spread = base::Normal{0.0025};
  line.roughness = test::exact(5e-5, Dimension::length);
  line.roughness.spread = base::LogNormal{0.1};
  build.c.friction.scatter = test::exact(1.0, Dimension::factor);
  build.c.friction.scatter.spread = base::Normal{0.05};
  build.draw_off("out", "end", flow);
  build.answer(
      network::AnswerKind::pressure_drop, "drop", {CaseBuilder::at_place("source"), CaseBuilder::at_place("end")});
  build.c.band.draws = draws;
  build.c.band.design = network::Design::plain;
  build.c.band.seed = 42;
  return build.finish();
}

/// Loss of pressure along the level line [Pa].
double plain_drop(double bore, double rough, double viscosity, double scatter) {
  const double area = 0.25 * M_PI * bore * bore, speed = flow / area, re = speed * bore / viscosity;
  double f = 0.02, last = 0.0;
  for (int i = 0; i < 100 && std::fabs(f - last) > 1e-12 * f; ++i) {
    last = f;
    const double x = -2.0 * std::log10(rough / bore / 3.7 + 2.51 / (re * std::sqrt(f)));
    f = 1.0 / (x * x);
  }
  return scatter * f * length / bore * density * speed * speed / 2.0;
}

struct Line {
  std::array<double, 3> quantile{};  ///< 2.5, 50, 97.5 % [Pa]
};

void line_plain(benchmark::State& state) {
  const auto n = static_cast<std::size_t>(state.range(0));
  Line result;
  std::vector<double> drop(n);
  for (auto _ : state) {
    std::mt19937_64 bits(42);
    std::normal_distribution<double> z(0.0, 1.0);
    for (double& d : drop) {
      const double rough = 5e-5 * std::exp(0.1 * z(bits)), viscosity = 1e-5 * (1.0 + 0.1 * z(bits));
      const double scatter = 1.0 + 0.05 * z(bits), bore = 0.5 * (1.0 + 0.005 * z(bits));
      d = plain_drop(bore, rough, viscosity, scatter);
    }
    std::sort(drop.begin(), drop.end());
    for (std::size_t k = 0; k < 3; ++k) {
      const double p = std::array{0.025, 0.5, 0.975}[k];
      result.quantile[k] = drop[static_cast<std::size_t>(p * static_cast<double>(n - 1))];
    }
  }
  state.counters["check_median_Pa"] = result.quantile[1];
  state.counters["check_high_Pa"] = result.quantile[2];
  state.SetItemsProcessed(state.iterations() * static_cast<std::int64_t>(n));
}
BENCHMARK(line_plain)->Arg(1000000)->MeasureProcessCPUTime()->Unit(benchmark::kMillisecond);

/// Everything the verb does but the file: draws, answers, quantiles with confidence, budget, shares.
void line_product(benchmark::State& state) {
  const network::Case c = line_case(state.range(0));
  const network::Plan plan = network::make_plan(c);
  montecarlo::CentralRun central;
  central.answer_value = {0.0};
  central.answer_grid_bound = {0.0};
  montecarlo::BandOutcome outcome;
  for (auto _ : state) outcome = montecarlo::run_band(c, plan, central, {});
  // every stored run again by the plain formula
  const auto& bands = outcome.bands;
  const auto input = [&](const std::string& name) {
    const auto at = std::ranges::find(bands.input_name, name);
    return static_cast<std::size_t>(at - bands.input_name.begin());
  };
  const std::size_t inputs = bands.input_name.size();
  const std::size_t bore = input("line bore"), rough = input("line roughness"), viscosity = input("liquid viscosity"),
                    scatter = input("friction scatter");
  double worst = 0.0;
  for (std::size_t i = 0; i < bands.output_value.size(); ++i) {
    const double* x = &bands.input_value[i * inputs];
    const double plain = plain_drop(x[bore], x[rough], x[viscosity], x[scatter]);
    worst = std::max(worst, std::fabs(bands.output_value[i] / plain - 1.0));
  }
  if (!(worst <= 1e-9)) state.SkipWithError("other pressure drops than the plain formula's");
  for (const auto& q : bands.answers[0].quantiles) {
    if (q.probability == 0.5) state.counters["check_median_Pa"] = q.value;
    if (q.probability > 0.974 && q.probability < 0.976) state.counters["check_high_Pa"] = q.value;
  }
  state.counters["check_worst"] = worst;
  state.SetItemsProcessed(state.iterations() * state.range(0));
}
BENCHMARK(line_product)
    ->Arg(1000000)
    ->Arg(2000000)
    ->Arg(4000000)
    ->MeasureProcessCPUTime()
    ->Unit(benchmark::kMillisecond);

/// Ten million numbers of which the exact 2.5, 50 and 97.5 % order statistics are asked.
const std::vector<double>& many_numbers() {
  static const std::vector<double> numbers = [] {
    std::mt19937_64 bits(3);
    std::normal_distribution<double> z(0.0, 1.0);
    std::vector<double> x(10000000);
    for (double& v : x) v = 278500.0 * std::exp(0.06 * z(bits));
    return x;
  }();
  return numbers;
}

std::array<std::size_t, 3> asked_ranks(std::size_t n) {
  const auto last = static_cast<double>(n - 1);
  return {static_cast<std::size_t>(0.025 * last), n / 2, static_cast<std::size_t>(0.975 * last)};
}

std::array<double, 3> ranks_by_nth_element(std::vector<double>& x) {
  const auto [low, middle, high] = asked_ranks(x.size());
  const auto at = [&](std::size_t rank) { return x.begin() + static_cast<std::ptrdiff_t>(rank); };
  std::nth_element(x.begin(), at(middle), x.end());
  std::nth_element(x.begin(), at(low), at(middle));
  std::nth_element(at(middle) + 1, at(high), x.end());
  return {x[low], x[middle], x[high]};
}

/// The plain ways spoil their column: it is renewed outside the clock.
template <class Way>
void rank_plainly(benchmark::State& state, const Way& way) {
  std::vector<double> x;
  std::array<double, 3> found{};
  for (auto _ : state) {
    state.PauseTiming();
    x = many_numbers();
    state.ResumeTiming();
    found = way(x);
  }
  state.counters["check_median"] = found[1];
  state.SetItemsProcessed(state.iterations() * static_cast<std::int64_t>(many_numbers().size()));
}

void ranks_nth_element(benchmark::State& state) { rank_plainly(state, ranks_by_nth_element); }
BENCHMARK(ranks_nth_element)->Unit(benchmark::kMillisecond);

void ranks_sort(benchmark::State& state) {
  rank_plainly(state, [](std::vector<double>& x) {
    std::sort(x.begin(), x.end());
    const auto [low, middle, high] = asked_ranks(x.size());
    return std::array{x[low], x[middle], x[high]};
  });
}
BENCHMARK(ranks_sort)->Unit(benchmark::kMillisecond);

void ranks_product(benchmark::State& state) {
  std::vector<double> spoilt = many_numbers();
  const auto truth = ranks_by_nth_element(spoilt);
  const auto ranks = asked_ranks(spoilt.size());
  std::array<double, 3> found{};
  for (auto _ : state) {
    const auto ranked = montecarlo::Ranked::of(many_numbers());
    ranked.announce(
        std::array{static_cast<double>(ranks[0]), static_cast<double>(ranks[1]), static_cast<double>(ranks[2])});
    for (std::size_t k = 0; k < 3; ++k) found[k] = ranked.at(ranks[k]);
  }
  if (found != truth) state.SkipWithError("other order statistics than nth_element's");
  state.counters["check_median"] = found[1];
  state.SetItemsProcessed(state.iterations() * static_cast<std::int64_t>(spoilt.size()));
}
BENCHMARK(ranks_product)->Unit(benchmark::kMillisecond);

/// The sampled closing valve of the surge benchmarks on 16 reaches.
network::Case peak_case(network::Design design, std::uint64_t seed) {
  CaseBuilder build(1000.0, 1e-6);
  build.basin("tank", 50.0);
  build.place("end", 0.0);
  auto& pipe = build.pipe("main", "tank", "end", 1000.0, 0.5);
  pipe.wave_speed = test::normal(1000.0, 30.0 * test::half_width_95, Dimension::velocity);
  pipe.roughness = {};
  pipe.friction_factor = test::exact(0.018);
  build.c.friction.scatter = test::exact(1.0, Dimension::factor);
  build.c.friction.scatter.spread = base::LogNormal{0.1};
  build.valve_by_flow("valve", "end", "air", 0.2945);
  build.move_valve("valve", 0.0, 0.0, 3.0).over = test::normal(3.0, 0.3 * test::half_width_95, Dimension::time);
  auto& surge = build.surge(5.0, 16);
  surge.cavities = network::Cavities::off;
  surge.grid_check = false;
  surge.friction_in_time = network::FrictionInTime::fixed;
  build.answer(network::AnswerKind::highest_pressure, "peak", {CaseBuilder::at_place("end")});
  build.c.band.draws = 4096;
  build.c.band.design = design;
  build.c.band.seed = seed;
  return build.finish();
}

/// Root mean square errors over 24 seeds, against the mean of the Sobol' answers of other seeds.
void design_worth(benchmark::State& state) {
  const auto answers = [](network::Design design, std::uint64_t seed) {
    const network::Case c = peak_case(design, seed);
    const network::Plan plan = network::make_plan(c);
    montecarlo::CentralRun central;
    central.answer_value = {0.0};
    central.answer_grid_bound = {0.0};
    montecarlo::BandOptions options;
    options.surge = true;
    const auto outcome = montecarlo::run_band(c, plan, central, options);
    const auto& a = outcome.bands.answers[0];
    const auto high =
        std::ranges::find_if(a.quantiles, [](const auto& q) { return q.probability > 0.974 && q.probability < 0.976; });
    return std::array{a.mean, high->value};
  };
  constexpr std::uint64_t repeats = 24;
  for (auto _ : state) {
    std::array<double, 2> truth{};
    for (std::uint64_t s = 0; s < repeats; ++s) {
      const auto a = answers(network::Design::sobol, 1000 + s);
      for (std::size_t k = 0; k < 2; ++k) truth[k] += a[k] / repeats;
    }
    std::array<double, 2> sobol{}, plain{};
    for (std::uint64_t s = 0; s < repeats; ++s) {
      const auto a = answers(network::Design::sobol, 1 + s), b = answers(network::Design::plain, 1 + s);
      for (std::size_t k = 0; k < 2; ++k) {
        sobol[k] += (a[k] - truth[k]) * (a[k] - truth[k]);
        plain[k] += (b[k] - truth[k]) * (b[k] - truth[k]);
      }
    }
    state.counters["mean_error_ratio"] = std::sqrt(plain[0] / sobol[0]);
    state.counters["high_quantile_error_ratio"] = std::sqrt(plain[1] / sobol[1]);
    state.counters["check_mean_Pa"] = truth[0];
  }
}
BENCHMARK(design_worth)->Iterations(1)->Unit(benchmark::kMillisecond);

}  // namespace
