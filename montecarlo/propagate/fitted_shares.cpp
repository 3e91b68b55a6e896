// SPDX-License-Identifier: MIT
#include "montecarlo/propagate/fitted_shares.hpp"

#include "core/base/spread.hpp"
#include "montecarlo/sensitivity/polynomial.hpp"

#include <fmt/format.h>
#include <algorithm>
#include <cmath>

namespace headband::montecarlo {

namespace {

constexpr double too_little = 0.5;  ///< explained less than this: no shares are stated
constexpr double remark_under = 0.9;

using Columns = std::vector<std::vector<double>>;  ///< [unknown][draw]

Columns scores_of(const Sampler& sampler, long long draws) {
  Columns columns(sampler.unknowns(), std::vector<double>(static_cast<std::size_t>(draws)));
  network::Scores<8> block;
  for (long long first = 0; first < draws; first += 8) {
    sampler.block(first, block);
    for (int lane = 0; lane < 8 && first + lane < draws; ++lane)
      for (std::size_t u = 0; u < columns.size(); ++u)
        columns[u][static_cast<std::size_t>(first + lane)] = block[u][lane];
  }
  return columns;
}

FitInput plain_input(const Input& input, const std::vector<double>& score) {
  FitInput fit{.score = score, .normal = false, .option_ends = {}};
  if (input.quantity == nullptr) {
    double sum = 0.0;
    for (const double weight : input.weights) fit.option_ends.push_back(sum += weight);
    if (!fit.option_ends.empty()) fit.option_ends.back() = 1.0;
  } else {
    const auto& spread = input.quantity->spread;
    fit.normal = std::holds_alternative<base::Normal>(spread) || std::holds_alternative<base::LogNormal>(spread);
  }
  return fit;
}

/// Independent scores of the correlated unknowns, taken in `order`: each is what the ones before it do not explain.
std::vector<FitInput> innovations(const Dependence& d, const std::vector<std::size_t>& order, const Columns& scores) {
  const std::size_t n = order.size(), draws = scores.front().size();
  CorrelationMatrix factor = d.correlation;  // Cholesky in that order; a pivot of zero is an unknown without own part
  for (std::size_t i = 0; i < n; ++i) {
    for (std::size_t j = 0; j <= i; ++j) {
      double left = d.correlation.at(order[i], order[j]);
      for (std::size_t k = 0; k < j; ++k) left -= factor.at(i, k) * factor.at(j, k);
      if (i == j) {
        factor.at(i, i) = left > 1e-10 ? std::sqrt(left) : 0.0;
      } else {
        factor.at(i, j) = factor.at(j, j) > 0.0 ? left / factor.at(j, j) : 0.0;
      }
    }
  }
  std::vector<FitInput> fits(n);
  for (std::size_t k = 0; k < n; ++k) {
    if (factor.at(k, k) == 0.0) {
      fits[k].option_ends = {1.0};  // one option: no function of it
    } else {
      fits[k].normal = true;
    }
    fits[k].score.resize(draws);
  }
  std::vector<double> own(n);
  for (std::size_t draw = 0; draw < draws; ++draw) {
    for (std::size_t i = 0; i < n; ++i) {
      const auto unknown = static_cast<std::size_t>(d.members[order[i]].unknown);
      double left = base::normal_quantile<1>(base::Lanes<1>(scores[unknown][draw])).number;
      for (std::size_t k = 0; k < i; ++k) left -= factor.at(i, k) * own[k];
      own[i] = factor.at(i, i) > 0.0 ? left / factor.at(i, i) : 0.0;
      fits[i].score[draw] = std::clamp(base::normal_probability(own[i]), 0x1p-53, 1.0 - 0x1p-53);
    }
  }
  return fits;
}

}  // namespace

void fit_inputs(const BudgetRequest& request, const DrawTable& table, Budget& budget) {
  const auto& inputs = *request.inputs;
  const Dependence& dependence = request.sampler->dependence();
  const Columns scores = scores_of(*request.sampler, budget.draws);
  std::vector<std::size_t> alone;  // unknowns without correlated company
  for (std::size_t u = 0; u < inputs.size(); ++u) {
    const bool member =
        std::ranges::any_of(dependence.members, [u](const auto& m) { return m.unknown == static_cast<int>(u); });
    const bool range = std::ranges::find(request.ranges->unknown, u) != request.ranges->unknown.end();
    if (!member && !range) alone.push_back(u);
  }
  // the fits: one for the unknowns that stand alone, two per correlated one (it first, it last)
  struct Order {
    std::vector<std::size_t> members;
    int first_of = -1, last_of = -1;
  };
  const std::size_t members = dependence.members.size();
  std::vector<Order> orders(1);
  for (std::size_t m = 0; m < members; ++m) orders.front().members.push_back(m);
  for (std::size_t m = 0; m < members; ++m) {
    Order first, last;
    first.members.push_back(m);
    for (std::size_t k = 0; k < members; ++k) {
      if (k == m) continue;
      first.members.push_back(k);
      last.members.push_back(k);
    }
    last.members.push_back(m);
    first.first_of = last.last_of = static_cast<int>(m);
    orders.push_back(first);
    orders.push_back(last);
  }
  std::vector<FitInput> stand_alone;
  for (const std::size_t u : alone) stand_alone.push_back(plain_input(inputs[u], scores[u]));

  std::vector<std::vector<answers::SensitivityAnswer>> shares(table.answer.size(),
                                                              std::vector<answers::SensitivityAnswer>(inputs.size()));
  std::vector<double> explained(table.answer.size(), 1.0);
  for (const Order& order : orders) {
    std::vector<FitInput> fits = stand_alone;
    if (members > 0) {
      for (auto& fit : innovations(dependence, order.members, scores)) fits.push_back(std::move(fit));
    }
    for (std::size_t a = 0; a < table.answer.size(); ++a) {
      const std::vector<double> answer(table.answer[a].begin(),
                                       table.answer[a].begin() + static_cast<std::ptrdiff_t>(budget.draws));
      const FittedShares fitted = fit_shares(fits, answer);
      explained[a] = std::min(explained[a], fitted.explained);
      if (order.first_of < 0 && order.last_of < 0) {
        for (std::size_t i = 0; i < alone.size(); ++i) {
          shares[a][alone[i]].first = fitted.first[i];
          shares[a][alone[i]].total = fitted.total[i];
        }
      } else if (order.first_of >= 0) {
        const auto unknown = dependence.members[static_cast<std::size_t>(order.first_of)].unknown;
        shares[a][static_cast<std::size_t>(unknown)].first = fitted.first[alone.size()];
      } else {
        const auto unknown = dependence.members[static_cast<std::size_t>(order.last_of)].unknown;
        shares[a][static_cast<std::size_t>(unknown)].total = fitted.total.back();
      }
    }
  }
  for (std::size_t a = 0; a < table.answer.size(); ++a) {
    AnswerBudget& answer = budget.answers[a];
    answer.explained = explained[a];
    for (std::size_t u = 0; u < inputs.size(); ++u) {
      if (std::ranges::find(request.ranges->unknown, u) != request.ranges->unknown.end()) continue;
      shares[a][u].input = inputs[u].name;
      answer.shares.push_back(shares[a][u]);
    }
  }
}

void judge_fits(const BudgetRequest& request, Budget& budget) {
  for (std::size_t a = 0; a < budget.answers.size(); ++a) {
    AnswerBudget& answer = budget.answers[a];
    const bool enough = answer.explained >= too_little;
    if (!enough)
      for (auto& share : answer.shares) share.first = share.total = answers::missing;
    if (!(answer.explained >= remark_under)) {
      budget.warnings.push_back(fmt::format("variance shares of {}: a smooth model explains {:.0f} % of its variance{}",
                                            a < request.names.size() ? request.names[a] : "",
                                            100.0 * std::max(0.0, answer.explained),
                                            enough ? "" : "; none are stated"));
    }
  }
}

}  // namespace headband::montecarlo
