// SPDX-License-Identifier: MIT
#include "montecarlo/propagate/stored_runs.hpp"

#include <algorithm>
#include <array>
#include <span>

namespace headband::montecarlo {

namespace {

constexpr long long most_stored_runs = 100000;

/// Columns by draw → rows of a file, every `stride`-th of the first `draws`.
template <class Columns>
std::vector<double> rows_of(const Columns& columns, std::size_t draws, std::size_t stride) {
  std::vector<double> rows;
  rows.reserve((draws + stride - 1) / stride * columns.size());
  for (std::size_t draw = 0; draw < draws; draw += stride)
    for (const auto& column : columns) rows.push_back(draw < column.size() ? column[draw] : answers::missing);
  return rows;
}

template <class Columns>
void columns_of(const std::vector<double>& rows, Columns& columns, std::size_t draws) {
  for (std::size_t i = 0; i < columns.size(); ++i)
    for (std::size_t draw = 0; draw < std::min(draws, columns[i].size()); ++draw)
      columns[i][draw] = rows[draw * columns.size() + i];
}

}  // namespace

namespace {

/// Values of the inputs, (run, input): drawn again, some blocks of eight runs at a time.
std::vector<double> input_rows(const std::vector<Input>& inputs,
                               const Sampler& sampler,
                               const Ranges& ranges,
                               std::size_t draws,
                               std::size_t stride) {
  const std::size_t runs = (draws + stride - 1) / stride, many = inputs.size();
  std::vector<base::ReadySpread> spreads(many);
  for (std::size_t u = 0; u < many; ++u) spreads[u] = inputs[u].spread();
  std::vector<double> rows(runs * many);
  constexpr std::size_t at_once = 16;
  std::array<network::Scores<8>, at_once> scores;
  std::vector<network::Scores<8>> values(at_once, network::Scores<8>(many));
  for (std::size_t run = 0; run < runs; run += 8 * at_once) {
    const std::size_t here = std::min(8 * at_once, runs - run), blocks = (here + 7) / 8;
    const auto drawn = std::span(scores).first(blocks);
    sampler.spaced(static_cast<long long>(run * stride), static_cast<long long>(stride), drawn);
    for (auto& block : drawn)
      for (const std::size_t unknown : ranges.unknown) block[unknown] = 0.5;
    base::quantiles(spreads, drawn, std::span(values).first(blocks));
    for (std::size_t u = 0; u < many; ++u) {
      const bool choice = inputs[u].quantity == nullptr;
      double* at = &rows[run * many + u];
      for (std::size_t k = 0; k < here; ++k, at += many) {
        const int lane = static_cast<int>(k % 8);
        *at = choice ? inputs[u].value(scores[k / 8][u][lane]) : values[k / 8][u][lane];
      }
    }
  }
  return rows;
}

/// Histories by draw, (draw, time, probe).
std::vector<double> history_rows(const DrawTable& table, std::size_t kept) {
  std::vector<double> rows;
  rows.reserve(kept * table.history_cells);
  for (std::size_t draw = 0; draw < kept; ++draw)
    for (std::size_t cell = 0; cell < table.history_cells; ++cell)
      rows.push_back(table.history[table.history_place(cell, draw)]);
  return rows;
}

}  // namespace

long long stride_of(long long draws) { return std::max(1LL, (draws + most_stored_runs - 1) / most_stored_runs); }

void name_runs(answers::Bands& bands,
               const std::vector<Input>& inputs,
               const network::Plan& plan,
               const std::vector<std::size_t>&) {
  for (const auto& input : inputs) {
    bands.input_name.push_back(input.name);
    bands.input_units.push_back(input.units);
    bands.input_distribution.push_back(input.distribution);
  }
  for (const auto& limit : plan.limits) bands.limit_name.push_back(limit.name);
}

void keep_runs(answers::Bands& bands,
               const DrawTable& table,
               long long draws,
               const std::vector<Input>& inputs,
               const Sampler& sampler,
               const Ranges& ranges,
               long long stride,
               bool with_envelopes) {
  const auto n = static_cast<std::size_t>(draws), step = static_cast<std::size_t>(stride);
  bands.draws = draws;
  bands.stride = stride;
  bands.output_value = rows_of(table.answer, n, step);
  bands.limit_value = rows_of(table.limit, n, step);
  bands.run_status.clear();
  bands.run_cavity.clear();
  for (std::size_t draw = 0; draw < n; draw += step) {
    bands.run_status.push_back(table.status[draw]);
    if (bands.surged) bands.run_cavity.push_back(table.cavity[draw]);
  }
  bands.input_value = input_rows(inputs, sampler, ranges, n, step);
  bands.run_head_max.clear();
  bands.run_head_min.clear();
  bands.run_history_head.clear();
  if (with_envelopes) {
    bands.run_head_max = rows_of(table.head_max, n, 1);
    bands.run_head_min = rows_of(table.head_min, n, 1);
    bands.run_history_head = history_rows(table, table.histories_kept(n));
  }
}

long long take_up_runs(const answers::Bands& bands, DrawTable& table) {
  const std::size_t runs = bands.run_status.size();
  const auto fits = [&](const std::vector<double>& rows, const auto& columns) {
    return rows.size() == runs * columns.size();
  };
  if (bands.stride != 1 || !fits(bands.output_value, table.answer) || !fits(bands.limit_value, table.limit) ||
      !fits(bands.run_head_max, table.head_max) || !fits(bands.run_head_min, table.head_min) ||
      bands.run_history_head.size() != table.histories_kept(runs) * table.history_cells) {
    return 0;
  }
  const std::size_t whole = runs / 8 * 8;  // an odd end is computed again
  table.resize(static_cast<long long>(whole));
  columns_of(bands.output_value, table.answer, whole);
  columns_of(bands.limit_value, table.limit, whole);
  columns_of(bands.run_head_max, table.head_max, whole);
  columns_of(bands.run_head_min, table.head_min, whole);
  for (std::size_t draw = 0; draw < table.histories_kept(whole); ++draw)
    for (std::size_t cell = 0; cell < table.history_cells; ++cell)
      table.history[table.history_place(cell, draw)] = bands.run_history_head[draw * table.history_cells + cell];
  std::copy_n(bands.run_status.begin(), whole, table.status.begin());
  if (bands.run_cavity.size() == runs) std::copy_n(bands.run_cavity.begin(), whole, table.cavity.begin());
  return static_cast<long long>(whole);
}

}  // namespace headband::montecarlo
