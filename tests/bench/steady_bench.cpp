// SPDX-License-Identifier: MIT
//
// Steady flow: sampled pressure drops of one pipe per second, and Newton on a square grid of 10 000 pipes.
// Every figure carries the check value of its own results. Judge ratios taken in one run on a quiet machine.
//   bench_core --benchmark_filter=steady --benchmark_repetitions=7 --benchmark_report_aggregates_only=true
#include "core/base/spread.hpp"
#include "core/friction/factor.hpp"
#include "core/steady/evaluate.hpp"
#include "core/steady/steady.hpp"
#include "tests/support/case_builder.hpp"

#include <benchmark/benchmark.h>
#include <Eigen/SparseCore>
#include <Eigen/SparseLU>

#include <algorithm>
#include <cmath>
#include <random>
#include <string>
#include <tuple>
#include <utility>
#include <vector>

namespace {

using namespace headband;
using test::CaseBuilder;
using test::Dimension;

/// The reference Monte Carlo case: one pipe, roughness, viscosity and correlation uncertain.
network::Case line_case() {
  CaseBuilder build(998.2, 1.0016e-3 / 998.2);
  build.basin("source", 100.0);
  build.place("source", 0.0);
  auto& line = build.pipe("line", "source", "end", 1850.0, 0.254);
  line.roughness = test::exact(4.6e-5 / std::sqrt(1.01), Dimension::length);
  line.roughness.spread = base::LogNormal{std::sqrt(std::log(1.01))};
  build.c.liquid.viscosity = test::exact(1.0016e-3 / std::sqrt(1.01), Dimension::dynamic_viscosity);
  build.c.liquid.viscosity.spread = base::LogNormal{std::sqrt(std::log(1.01))};
  build.c.friction.scatter = test::exact(1.0, Dimension::factor);
  build.c.friction.scatter.spread = base::Normal{0.05};
  build.draw_off("out", "end", 0.075);
  build.answer(
      network::AnswerKind::pressure_drop, "drop", {CaseBuilder::at_place("source"), CaseBuilder::at_place("end")});
  return build.finish();
}

void steady_line_draws(benchmark::State& state) {
  const auto c = line_case();
  const auto plan = network::make_plan(c);
  const network::Realiser realiser(c, plan);
  auto values = realiser.prepare<8>();
  steady::SteadySolver solver(c, plan);
  steady::SteadyState<8> result;
  constexpr std::size_t batches = 512;
  std::vector<network::Scores<8>> scores(batches, network::Scores<8>(c.unknowns.size()));
  std::mt19937_64 bits(1);
  for (auto& batch : scores)
    for (auto& score : batch)
      for (int lane = 0; lane < 8; ++lane) score.set(lane, (static_cast<double>(bits() >> 12) + 0.5) / 0x1p52);
  double mean = 0.0;
  for (auto _ : state) {
    base::Lanes<8> sum = 0.0;
    for (const auto& batch : scores) {
      realiser.draw(batch, values);
      solver.solve(values, result);
      sum += steady::answer(plan, values, result, plan.answers[0]);
    }
    mean = 0.0;
    for (int lane = 0; lane < 8; ++lane) mean += sum[lane] / (8.0 * batches);
    benchmark::DoNotOptimize(mean);
  }
  // published mean 125 036.76 Pa, standard error 6 512/sqrt(n)
  if (!(std::abs(mean - 125036.76) < 4.0 * 6512.0 / std::sqrt(8.0 * batches))) state.SkipWithError("wrong mean");
  state.counters["check_mean_Pa"] = mean;
  state.SetItemsProcessed(state.iterations() * static_cast<std::int64_t>(8 * batches));
}
BENCHMARK(steady_line_draws);

/// A square grid of pipes with a basin in one corner and a draw-off at every place.
network::Case grid_case(int side) {
  CaseBuilder build;
  build.most_elements = static_cast<std::size_t>(2 * side * side);
  const auto name = [](int i, int j, const char* kind = "p") {
    std::string text(kind);
    text.append(std::to_string(i)).append("-").append(std::to_string(j));
    return text;
  };
  std::mt19937_64 bits(7);
  std::uniform_real_distribution<double> u(0.0, 1.0);
  build.basin(name(0, 0), 100.0);
  for (int i = 0; i < side; ++i)
    for (int j = 0; j < side; ++j)
      for (const bool right : {true, false}) {
        const int ni = right ? i + 1 : i, nj = right ? j : j + 1;
        if (ni >= side || nj >= side) continue;
        auto& pipe = build.pipe(name(i, j, right ? "right " : "down "),
                                name(i, j),
                                name(ni, nj),
                                50.0 + 100.0 * u(bits),
                                0.15 + 0.3 * u(bits));
        pipe.roughness = test::exact(1e-4, Dimension::length);
      }
  for (int i = 0; i < side; ++i)
    for (int j = 0; j < side; ++j)
      if (i + j > 0) build.draw_off(name(i, j, "out "), name(i, j), 2e-5 * u(bits));
  return build.finish();
}

void steady_grid(benchmark::State& state) {
  const auto c = grid_case(static_cast<int>(state.range(0)));
  const auto plan = network::make_plan(c);
  const auto values = network::realise(c, plan);
  steady::SteadySolver solver(c, plan);
  steady::SteadyState<1> result;
  for (auto _ : state) solver.solve(values, result);
  if (result.status[0] != steady::SteadyStatus::converged) state.SkipWithError("not converged");
  state.counters["pipes"] = static_cast<double>(plan.pipes.size());
  state.counters["iterations"] = result.iterations;
  state.counters["check_residual_m"] = result.residual[0];
  state.SetItemsProcessed(state.iterations() * result.iterations);  // Newton steps
}

/// The plain way: the same Newton on heads and flows, its matrix put together from triplets and factorised anew by a
/// general sparse LU at every step.
class PlainGrid {
 public:
  explicit PlainGrid(const network::Plan& plan, const network::Values<1>& values) : plan_(plan), values_(values) {
    for (const auto& device : plan.devices)
      draws_.push_back({device.from.index, values.draw_offs[draws_.size()].flow[0]});
    for (std::size_t i = 0; i < plan.places.size(); ++i) row_.push_back(plan.places[i].basin >= 0 ? -1 : rows_++);
  }
  /// Steps until flows change by less than 1e-9 of the largest. @return steps taken
  int solve(std::vector<double>& head) {
    std::vector<double> flow(plan_.pipes.size(), 1e-3);
    head.assign(plan_.places.size(), 0.0);
    for (std::size_t i = 0; i < head.size(); ++i)
      if (row_[i] < 0) head[i] = values_.places[i].held_head[0];
    for (int step = 1; step <= 60; ++step)
      if (newton_step(flow, head) < 1e-9) return step;
    return 60;
  }

 private:
  double newton_step(std::vector<double>& flow, std::vector<double>& head) {
    std::vector<Eigen::Triplet<double>> entries;
    Eigen::VectorXd right = Eigen::VectorXd::Zero(rows_);
    std::vector<double> loss(flow.size()), slope(flow.size());
    for (const auto& [place, out] : draws_) right[row_[static_cast<std::size_t>(place)]] -= out;
    for (std::size_t i = 0; i < flow.size(); ++i) {
      const auto& pipe = values_.pipes[i];
      const double reynolds =
          std::max(1e-6, 4.0 * std::abs(flow[i]) / (M_PI * pipe.bore[0] * values_.liquid.kinematic_viscosity[0]));
      friction::FactorRule<1> rule;
      rule.law = values_.law;
      rule.transition = values_.transition;
      rule.relative_roughness = pipe.roughness[0] / pipe.bore[0];
      const auto f = friction::darcy_factor<1>(rule, reynolds);
      const double per_square =
          f.factor[0] * pipe.length[0] / (2.0 * values_.gravity[0] * pipe.bore[0] * pipe.area[0] * pipe.area[0]);
      loss[i] = per_square * flow[i] * std::abs(flow[i]);
      slope[i] = std::max(1e-6, per_square * std::abs(flow[i]) * (2.0 + f.log_slope[0]));
      const auto from = plan_.pipes[i].from.at(), to = plan_.pipes[i].to.at();
      const double rest = flow[i] - loss[i] / slope[i];  // new flow = rest + (head from - head to)/slope
      for (const auto& [here, there, sign] : {std::tuple{from, to, 1.0}, std::tuple{to, from, -1.0}}) {
        if (row_[here] < 0) continue;
        right[row_[here]] -= sign * rest;
        entries.emplace_back(row_[here], row_[here], 1.0 / slope[i]);
        if (row_[there] >= 0)
          entries.emplace_back(row_[here], row_[there], -1.0 / slope[i]);
        else
          right[row_[here]] += head[there] / slope[i];
      }
    }
    Eigen::SparseMatrix<double> matrix(rows_, rows_);
    matrix.setFromTriplets(entries.begin(), entries.end());
    Eigen::SparseLU<Eigen::SparseMatrix<double>> solver(matrix);
    const Eigen::VectorXd heads = solver.solve(right);
    for (std::size_t i = 0; i < head.size(); ++i)
      if (row_[i] >= 0) head[i] = heads[row_[i]];
    double change = 0.0, largest = 0.0;
    for (std::size_t i = 0; i < flow.size(); ++i) {
      const double next =
          flow[i] - (loss[i] - head[plan_.pipes[i].from.at()] + head[plan_.pipes[i].to.at()]) / slope[i];
      change = std::max(change, std::abs(next - flow[i]));
      largest = std::max(largest, std::abs(next));
      flow[i] = next;
    }
    return change / largest;
  }

  const network::Plan& plan_;
  const network::Values<1>& values_;
  std::vector<std::pair<int, double>> draws_;
  std::vector<int> row_;
  int rows_ = 0;
};

void steady_grid_plain(benchmark::State& state) {
  const auto c = grid_case(static_cast<int>(state.range(0)));
  const auto plan = network::make_plan(c);
  const auto values = network::realise(c, plan);
  steady::SteadySolver solver(c, plan);
  steady::SteadyState<1> product;
  solver.solve(values, product);
  PlainGrid plain(plan, values);
  std::vector<double> head;
  int steps = 0;
  for (auto _ : state) steps = plain.solve(head);
  double worst = 0.0;
  for (std::size_t i = 0; i < head.size(); ++i) worst = std::max(worst, std::abs(head[i] - product.place_head[i][0]));
  if (!(worst < 1e-6)) state.SkipWithError("heads differ from the product's");
  state.counters["iterations"] = steps;
  state.counters["check_head_difference_m"] = worst;
  state.SetItemsProcessed(state.iterations() * steps);  // Newton steps
}
BENCHMARK(steady_grid_plain)->Arg(23)->Arg(71)->Unit(benchmark::kMillisecond);
BENCHMARK(steady_grid)->Arg(23)->Arg(71)->Unit(benchmark::kMillisecond);

/// Sampled surge lines have this steady problem per draw: a pipe and a valve between two basins.
void steady_pipe_and_valve(benchmark::State& state) {
  CaseBuilder build;
  build.basin("tank", 180.0);
  build.basin("works", 97.0);
  build.pipe("main", "tank", "chamber", 6200.0, 0.4).roughness = test::lognormal(3e-4, 3.0, Dimension::length);
  build.valve("valve", "chamber", "works").kv = test::exact(12000.0 / 3600.0, Dimension::kv);
  const auto c = build.finish();
  const auto plan = network::make_plan(c);
  const network::Realiser realiser(c, plan);
  auto values = realiser.prepare<8>();
  network::Scores<8> scores(1);
  for (int lane = 0; lane < 8; ++lane) scores[0].set(lane, (lane + 0.5) / 8.0);
  realiser.draw(scores, values);
  steady::SteadySolver solver(c, plan);
  steady::SteadyState<8> result;
  for (auto _ : state) solver.solve(values, result);
  state.counters["iterations"] = result.iterations;
  state.counters["check_residual_m"] = result.residual[0];
  state.SetItemsProcessed(state.iterations() * 8);
}
BENCHMARK(steady_pipe_and_valve);

}  // namespace
