// SPDX-License-Identifier: MIT
#include "montecarlo/program/worst_draws.hpp"

#include "montecarlo/program/arguments.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>
#include <vector>

namespace headband::program {

using answers::Verdict;

Ranking ranking_of(const answers::Study& study) {
  const auto badness = [](const answers::LimitAnswer& limit) {
    return limit.verdict == Verdict::not_ok ? 0 : limit.verdict == Verdict::cannot_tell ? 1 : 2;
  };
  std::vector<const answers::LimitAnswer*> limits;
  for (const auto& limit : study.limits) limits.push_back(&limit);
  std::ranges::stable_sort(limits, {}, [&](const auto* limit) { return badness(*limit); });
  const auto& asked = study.bands->answers;
  for (const auto* limit : limits) {
    for (std::size_t i = 0; i < asked.size(); ++i) {
      if (asked[i].kind != limit->kind || asked[i].where != limit->where) continue;
      // margin = ±(limit - value): its sign tells on which side the limit stands
      const bool over = std::isfinite(limit->value) ? (limit->margin > 0.0) == (limit->value < limit->limit)
                                                    : asked[i].kind != "lowest_pressure";
      return {i, over};
    }
  }
  return {0, asked.empty() || asked.front().kind != "lowest_pressure"};
}

long long worst_draw(const answers::Study& study, long long rank) {
  const auto& bands = *study.bands;
  const std::size_t columns = bands.answers.size();
  if (columns == 0) throw UsageError("the file holds no answers to rank draws by");
  const Ranking by = ranking_of(study);
  std::vector<std::pair<double, long long>> draws;
  for (std::size_t run = 0; run < bands.run_status.size(); ++run) {
    const double value = bands.output_value[run * columns + by.answer];
    if (bands.run_status[run] != 0 || !std::isfinite(value)) continue;
    draws.emplace_back(by.high_is_bad ? -value : value, static_cast<long long>(run) * bands.stride);
  }
  if (rank > static_cast<long long>(draws.size())) {
    throw UsageError(fmt::format("there are {} finished draws in the file, not {}", draws.size(), rank));
  }
  const auto at = draws.begin() + (rank - 1);
  std::ranges::nth_element(draws, at);
  return at->second;
}

}  // namespace headband::program
