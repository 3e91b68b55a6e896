// SPDX-License-Identifier: MIT
#include "montecarlo/propagate/histories.hpp"

#include "montecarlo/bands/sample.hpp"

#include <fmt/format.h>
#include <algorithm>

namespace headband::montecarlo {

namespace {

constexpr std::size_t worth_a_band = 64;  ///< draws under which a band of histories says nothing

}  // namespace

std::vector<double> history_times(
    const std::vector<double>& rows, double duration, std::size_t probes, long long draws, std::string& warning) {
  warning.clear();
  if (probes == 0 || draws <= 0) return {};
  const auto all = static_cast<std::size_t>(draws);
  const std::size_t fit = most_history_numbers / probes;
  if (fit / least_history_times < std::min(all, worth_a_band)) {
    warning = fmt::format(
        "histories carry no bands: {} places times the draws are too many; name fewer with show places", probes);
    return {};
  }
  const std::size_t most = std::clamp(fit / std::min(all, most_history_draws), least_history_times, most_history_times);
  std::vector<double> times;
  if (rows.size() < 2) {
    for (std::size_t i = 0; i < most; ++i)
      times.push_back(duration * static_cast<double>(i) / static_cast<double>(most - 1));
  } else {
    // draws march to the duration; the last row of the central run may lie a little behind it
    std::size_t count = rows.size();
    while (count > 2 && rows[count - 1] > duration * (1.0 + 1e-9)) --count;
    const std::size_t stride = (count - 1 + most - 2) / (most - 1);
    for (std::size_t row = 0; row + 1 < count; row += stride) times.push_back(rows[row]);
    times.push_back(rows[count - 1]);
  }
  if (most < most_history_times && times.size() < rows.size()) {
    warning = fmt::format(
        "bands of histories stand at {} times: {} places times the draws leave no room for more", times.size(), probes);
  }
  return times;
}

void form_histories(const DrawTable& table, answers::Bands& bands) {
  const std::size_t cells = table.history_cells, draws = table.histories_kept(table.status.size());
  if (draws == 0) return;
  bands.history_draws = static_cast<long long>(draws);
  bands.history_probability = band_probabilities(bands.coverage);
  bands.history_head.assign(3 * cells, answers::missing);
  std::vector<double> column(draws);
  for (std::size_t i = 0; i < cells; ++i) {
    for (std::size_t draw = 0; draw < draws; ++draw) column[draw] = table.history[table.history_place(i, draw)];
    const auto quantiles = plain_quantiles(column, {table.status.data(), draws}, bands.history_probability);
    for (std::size_t p = 0; p < 3; ++p) bands.history_head[p * cells + i] = quantiles[p];
  }
}

}  // namespace headband::montecarlo
