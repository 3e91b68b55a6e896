// SPDX-License-Identifier: MIT
//
// Sampled surge: one pipe, a closing valve, other friction, wave speed and stroke in each draw; product and plain loop
// in one run. Every figure comes with the distance of its own peaks from the plain loop's peaks of the same draws (over
// 1e-9 relative the figure is refused).
//   bench_surge --benchmark_repetitions=7 --benchmark_report_aggregates_only=true
//   --benchmark_enable_random_interleaving=true
#include "core/steady/steady.hpp"
#include "montecarlo/propagate/draws.hpp"
#include "montecarlo/propagate/model.hpp"
#include "tests/bench/plain_surge.hpp"
#include "tests/support/case_builder.hpp"
#include "transient/march/surge.hpp"

#include <benchmark/benchmark.h>

#include <cmath>
#include <random>

namespace {

using namespace headband;
using test::CaseBuilder;
using test::Dimension;

enum class Friction { fixed, haaland, colebrook };

constexpr double scatter_median = 0.018, kinematic_viscosity = 1e-6, roughness = 4e-4;

/// Reservoir 50 m, 1000 m of 0.5 m pipe, 1.5 m/s, straight closure of about 3 s.
network::Case valve_case(int reaches, Friction friction) {
  CaseBuilder build(1000.0, kinematic_viscosity);
  build.c.site.gravity = test::exact(9.81, Dimension::acceleration);
  build.basin("tank", 50.0);
  build.place("end", 0.0);
  auto& pipe = build.pipe("main", "tank", "end", 1000.0, 0.5);
  pipe.wave_speed = test::normal(1000.0, 0.03 * 1000.0 * test::half_width_95, Dimension::velocity);
  pipe.roughness = test::exact(roughness, Dimension::length);
  build.c.friction.scatter = test::exact(1.0, Dimension::factor);
  build.c.friction.scatter.spread = base::LogNormal{0.1};
  if (friction == Friction::fixed) {
    pipe.roughness = {};
    pipe.friction_factor = test::exact(scatter_median);
  }
  if (friction == Friction::haaland) build.c.friction.law.options = {{network::FrictionLaw::haaland, 1.0}};
  build.valve_by_flow("valve", "end", "air", 1.5 * 0.25 * M_PI * 0.25);
  build.move_valve("valve", 0.0, 0.0, 3.0).over = test::normal(3.0, 0.3 * test::half_width_95, Dimension::time);
  auto& surge = build.surge(8.0, reaches);
  surge.cavities = network::Cavities::off;
  surge.grid_check = false;
  surge.friction_in_time =
      friction == Friction::fixed ? network::FrictionInTime::fixed : network::FrictionInTime::reynolds;
  build.answer(network::AnswerKind::highest_pressure, "peak", {CaseBuilder::at_place("end")});
  return build.finish();
}

/// Some blocks of eight draws and all that both sides need of them.
struct Draws {
  static constexpr int blocks = 4;
  network::Case c;
  network::Plan plan;
  std::vector<network::Scores<8>> scores;
  std::vector<bench::PlainRun> runs;
  std::vector<double> scatter;
  Friction friction;

  Draws(int reaches, Friction law) : c(valve_case(reaches, law)), plan(network::make_plan(c)), friction(law) {
    std::mt19937_64 bits(5);
    network::Values<8> values;
    for (int b = 0; b < blocks; ++b) {
      auto& block = scores.emplace_back(c.unknowns.size());
      for (auto& score : block)
        for (int lane = 0; lane < 8; ++lane) score.set(lane, (static_cast<double>(bits() >> 12) + 0.5) / 0x1p52);
      network::realise<8>(c, plan, block, values);
      for (int lane = 0; lane < 8; ++lane) {
        const auto& pipe = values.pipes[0];
        runs.push_back({reaches,
                        pipe.length[lane],
                        pipe.area[lane],
                        pipe.bore[lane],
                        values.gravity[lane],
                        pipe.wave_speed_given[lane],
                        50.0,
                        c.valves[0].flow.value,
                        values.events[0].over[lane],
                        8.0,
                        kinematic_viscosity});
        scatter.push_back(pipe.friction_scatter[lane]);
      }
    }
  }

  /// Peaks of the first `count` draws by the plain loop [m].
  std::vector<double> plain(long long& sections, std::size_t count = 8 * blocks) const {
    std::vector<double> peaks;
    for (std::size_t i = 0; i < count; ++i) {
      const double reynolds = 1.0 / (0.25 * M_PI * runs[i].bore * runs[i].viscosity), s = scatter[i];
      const double rough = roughness / runs[i].bore;
      if (friction == Friction::fixed) {
        const double factor = scatter_median * s;
        peaks.push_back(
            bench::plain_peak(runs[i], [factor](double) { return bench::PlainFriction{factor, 0.0}; }, sections));
      } else if (friction == Friction::haaland) {
        peaks.push_back(
            bench::plain_peak(runs[i], [&](double q) { return haaland(reynolds * std::fabs(q), rough, s); }, sections));
      } else {
        peaks.push_back(bench::plain_peak(
            runs[i], [&](double q) { return colebrook(reynolds * std::fabs(q), rough, s); }, sections));
      }
    }
    return peaks;
  }

 private:
  // Laminar, turbulent, and the smooth step from 2100 to 4000 between them, with half the slope against Re.
  template <class Turbulent>
  static bench::PlainFriction joined(double re, double s, const Turbulent& turbulent) {
    if (re < 1e-9) re = 1e-9;
    const double laminar = 64.0 / re;
    if (re <= 2100.0) return {laminar, -0.5};
    bench::PlainFriction f = turbulent(re);
    f.factor *= s;
    if (re >= 4000.0) return f;
    const double t = (re - 2100.0) / 1900.0, w = t * t * (3.0 - 2.0 * t), dw = 6.0 * t * (1.0 - t) * re / 1900.0;
    const double factor = (1.0 - w) * laminar + w * f.factor;
    return {factor,
            0.5 * (w * f.factor * 2.0 * f.half_slope - (1.0 - w) * laminar + dw * (f.factor - laminar)) / factor};
  }
  static bench::PlainFriction haaland(double re, double rough, double s) {
    return joined(re, s, [rough](double r) {
      const double inside = std::pow(rough / 3.7, 1.11) + 6.9 / r, x = -1.8 * std::log10(inside);
      return bench::PlainFriction{1.0 / (x * x), -1.8 / std::log(10.0) * (6.9 / r) / inside / x};
    });
  }
  static bench::PlainFriction colebrook(double re, double rough, double s) {
    return joined(re, s, [rough](double r) {
      double f = 0.02, last = 0.0;
      for (int i = 0; i < 100 && std::fabs(f - last) > 1e-13 * f; ++i) {
        last = f;
        const double x = -2.0 * std::log10(rough / 3.7 + 2.51 / (r * std::sqrt(f)));
        f = 1.0 / (x * x);
      }
      const double x = 1.0 / std::sqrt(f), k = 2.0 / std::log(10.0), inside = rough / 3.7 * r / 2.51 + x;
      return bench::PlainFriction{f, -k / (inside + k)};
    });
  }
};

void report(benchmark::State& state,
            const std::vector<double>& peaks,
            const std::vector<double>& plain,
            long long sections) {
  double worst = 0.0, mean = 0.0;
  for (std::size_t i = 0; i < peaks.size(); ++i) {
    worst = std::max(worst, std::fabs(peaks[i] / plain[i] - 1.0));
    mean += peaks[i] / static_cast<double>(peaks.size());
  }
  if (!(worst <= 1e-9)) state.SkipWithError("the peaks are not those of the plain loop");
  state.counters["check_mean_peak_m"] = mean;
  state.counters["check_worst"] = worst;
  state.counters["draws_per_s"] =
      benchmark::Counter(static_cast<double>(peaks.size()), benchmark::Counter::kIsIterationInvariantRate);
  state.SetItemsProcessed(state.iterations() * sections);
}

void surge_plain(benchmark::State& state, Friction friction) {
  const Draws draws(static_cast<int>(state.range(0)), friction);
  std::vector<double> peaks;
  long long sections = 0;
  for (auto _ : state) {
    sections = 0;
    peaks = draws.plain(sections);
    benchmark::DoNotOptimize(peaks.data());
  }
  report(state, peaks, peaks, sections);
}

/// From scores to answers: numbers of the draws, steady states, grids, marches.
void surge_product(benchmark::State& state, Friction friction) {
  const Draws draws(static_cast<int>(state.range(0)), friction);
  long long sections = 0;
  const std::vector<double> plain = draws.plain(sections);
  montecarlo::BlockModel model = montecarlo::make_model(draws.c, draws.plan, true);
  montecarlo::BlockAnswers answers;
  std::vector<double> peaks;
  for (auto _ : state) {
    peaks.clear();
    for (const auto& block : draws.scores) {
      model(block, answers);
      for (int lane = 0; lane < 8; ++lane) peaks.push_back(answers.answer[0][lane] / (1000.0 * 9.81));
    }
  }
  report(state, peaks, plain, sections);
}

/// One draw with nothing beside it (one run of the program, or a replayed draw): steady state, grid, march.
void surge_alone(benchmark::State& state, Friction friction) {
  const Draws draws(static_cast<int>(state.range(0)), friction);
  long long sections = 0;
  const std::vector<double> plain = draws.plain(sections, 1);
  network::Scores<1> scores(draws.c.unknowns.size());
  for (std::size_t u = 0; u < scores.size(); ++u) scores[u] = draws.scores[0][u][0];
  network::Values<1> values;
  network::realise<1>(draws.c, draws.plan, scores, values);
  steady::SteadySolver solver(draws.c, draws.plan);
  steady::SteadyState<1> first;
  transient::BatchMarcher marcher(draws.c, draws.plan);
  transient::DrawAnswers<1> answers;
  for (auto _ : state) {
    solver.solve<1>(values, first);
    marcher.march<1>(values, first, answers);
    benchmark::DoNotOptimize(answers.answer.data());
  }
  report(state, {answers.answer[0].number / (1000.0 * 9.81)}, plain, sections);
}

BENCHMARK_CAPTURE(surge_plain, fixed, Friction::fixed)->Arg(64)->Arg(128)->Arg(1000);
BENCHMARK_CAPTURE(surge_product, fixed, Friction::fixed)->Arg(64)->Arg(128)->Arg(1000);
BENCHMARK_CAPTURE(surge_plain, haaland, Friction::haaland)->Arg(64);
BENCHMARK_CAPTURE(surge_product, haaland, Friction::haaland)->Arg(64);
BENCHMARK_CAPTURE(surge_plain, colebrook, Friction::colebrook)->Arg(64);
BENCHMARK_CAPTURE(surge_product, colebrook, Friction::colebrook)->Arg(64);
BENCHMARK_CAPTURE(surge_alone, fixed, Friction::fixed)->Arg(64)->Arg(1000);
BENCHMARK_CAPTURE(surge_alone, haaland, Friction::haaland)->Arg(64)->Arg(1000);
BENCHMARK_CAPTURE(surge_alone, colebrook, Friction::colebrook)->Arg(64)->Arg(256);

/// 1024 draws dealt to threads: wall time, to be read on a quiet machine. The answers are those of one thread.
void surge_threads(benchmark::State& state) {
  const network::Case c = valve_case(64, Friction::fixed);
  const network::Plan plan = network::make_plan(c);
  constexpr long long count = 1024;
  const montecarlo::ScoreSource scores = [&](long long first, std::span<network::Scores<8>> blocks) {
    for (auto& block : blocks) {
      block.resize(c.unknowns.size());
      for (std::size_t u = 0; u < block.size(); ++u)
        for (int lane = 0; lane < 8; ++lane) {
          const double x =
              (static_cast<double>(first + lane) + 0.5) * (u % 2 == 0 ? 0.6180339887498949 : 0.7548776662466927);
          block[u].set(lane, x - std::floor(x));
        }
      first += 8;
    }
  };
  const auto run = [&](std::size_t threads) {
    std::vector<montecarlo::BlockModel> models;
    for (std::size_t t = 0; t < threads; ++t) models.push_back(montecarlo::make_model(c, plan, true));
    montecarlo::DrawTable table(1, 0, 0);
    table.resize(count);
    (void)montecarlo::run_draws(0, count, scores, models, table, {});
    return std::vector<double>(table.answer[0].begin(), table.answer[0].end());
  };
  const auto one = run(1);
  auto answers = one;
  for (auto _ : state) answers = run(static_cast<std::size_t>(state.range(0)));
  if (answers != one) state.SkipWithError("other numbers on more threads");
  state.counters["check_first_Pa"] = answers.front();
  state.SetItemsProcessed(state.iterations() * count);
}
BENCHMARK(surge_threads)->Arg(1)->Arg(2)->UseRealTime()->Unit(benchmark::kMillisecond);

}  // namespace
