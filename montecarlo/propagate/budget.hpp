#pragma once
// SPDX-License-Identifier: MIT
//
// Where the width of a band comes from: the same draws again with one group of unknowns frozen, and shares of the
// variance per unknown.

#include "core/answers/study.hpp"
#include "montecarlo/propagate/draws.hpp"
#include "montecarlo/propagate/inputs.hpp"
#include "montecarlo/sampling/sampler.hpp"

#include <string>
#include <vector>

namespace headband::montecarlo {

inline constexpr long long budget_draws = 4096;  ///< the first ones serve the budget

struct AnswerBudget {
  double inputs = answers::missing, friction_law = answers::missing;  ///< standard deviations that vanish when frozen
  std::vector<answers::SensitivityAnswer> shares;
  double explained = 1.0;  ///< of the variance, by the fit the shares come from; 1 where inputs were exchanged
};

struct Budget {
  std::vector<AnswerBudget> answers;  ///< as DrawTable::answer
  long long draws = 0;                ///< that the budget rests on
  bool stopped = false;
  std::vector<std::string> warnings;
};

struct BudgetRequest {
  const std::vector<Input>* inputs = nullptr;
  const Ranges* ranges = nullptr;
  const Sampler* sampler = nullptr;
  std::vector<std::string> names;  ///< of the answers, for remarks
  bool surge = false;
  DrawOptions draw_options = {};
};

/// Draws that `find_budget` will compute, for the progress line.
[[nodiscard]] long long budget_work(const std::vector<Input>& inputs, long long draws, bool surge);

/// @param table the band's own draws at the middle of the ranges
[[nodiscard]] Budget find_budget(const BudgetRequest& request, const DrawTable& table, std::vector<BlockModel>& models);

}  // namespace headband::montecarlo
