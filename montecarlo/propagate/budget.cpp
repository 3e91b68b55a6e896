// SPDX-License-Identifier: MIT
#include "montecarlo/propagate/budget.hpp"

#include "montecarlo/propagate/fitted_shares.hpp"
#include "montecarlo/sensitivity/exchange.hpp"
#include "montecarlo/sensitivity/shares.hpp"

#include <algorithm>
#include <cmath>
#include <optional>
#include <span>

namespace headband::montecarlo {

namespace {

/// With more inputs than this, or with a march in each draw, inputs are not exchanged: it would cost the band many
/// times.
constexpr std::size_t most_exchanged = 64;
/// A fit that explains this much is nearer than exchanged inputs, whose shares carry the noise of 4 096 draws (0.01 ..
/// 0.02).
constexpr double well_explained = 0.999;

/// Runs extra passes over the budget's draws.
class Passes {
 public:
  Passes(const BudgetRequest& request, const DrawTable& table, std::vector<BlockModel>& models, long long draws)
      : request_(request), table_(table), models_(models), draws_(draws) {}

  [[nodiscard]] bool stopped() const { return stopped_; }

  /// Answers of one pass; scores of the ranges are set to the middle.
  DrawTable run(const ScoreSource& scores) {
    DrawTable out(table_.answer.size(), table_.limit.size(), 0);
    out.resize(draws_);
    const auto& ranges = *request_.ranges;
    const ScoreSource with_ranges = [&](long long first, std::span<network::Scores<8>> blocks) {
      scores(first, blocks);
      for (auto& block : blocks)
        for (const std::size_t unknown : ranges.unknown) block[unknown] = 0.5;
    };
    DrawOptions options = request_.draw_options;
    if (options.progress) {
      options.progress = [this, before = done_](long long done) { request_.draw_options.progress(before + done); };
    }
    const DrawSummary summary = run_draws(0, draws_, with_ranges, models_, out, options);
    done_ += draws_;
    stopped_ = stopped_ || summary.stopped;
    return out;
  }

  /// The band's own draws with every unknown for which `frozen` holds at its central value.
  template <class Frozen>
  DrawTable run_frozen(const Frozen& frozen) {
    const auto& inputs = *request_.inputs;
    return run([&](long long first, std::span<network::Scores<8>> blocks) {
      request_.sampler->blocks(first, blocks);
      for (auto& block : blocks)
        for (std::size_t u = 0; u < inputs.size(); ++u)
          if (frozen(inputs[u])) block[u] = inputs[u].central_score;
    });
  }

 private:
  const BudgetRequest& request_;
  const DrawTable& table_;
  std::vector<BlockModel>& models_;
  long long draws_, done_ = 0;
  bool stopped_ = false;
};

[[nodiscard]] std::span<const double> first_draws(const Column& column, long long draws) {
  return {column.data(), static_cast<std::size_t>(draws)};
}

/// Unknowns that chance moves.
std::vector<std::size_t> random_unknowns(const std::vector<Input>& inputs, const Ranges& ranges) {
  std::vector<std::size_t> random;
  for (std::size_t u = 0; u < inputs.size(); ++u)
    if (std::ranges::find(ranges.unknown, u) == ranges.unknown.end()) random.push_back(u);
  return random;
}

void freeze_groups(Passes& passes,
                   const std::vector<Input>& inputs,
                   const std::vector<std::size_t>& random,
                   const DrawTable& table,
                   Budget& budget) {
  const auto is_law = [&](std::size_t u) { return inputs[u].friction_law; };
  const auto laws = std::ranges::count_if(random, is_law);
  const bool any_law = laws > 0, any_input = static_cast<std::size_t>(laws) < random.size();
  std::optional<DrawTable> without_inputs, without_law;
  if (any_law && any_input) {  // else one group is everything, and nothing is left when it is frozen
    without_inputs = passes.run_frozen([](const Input& i) { return !i.friction_law; });
    without_law = passes.run_frozen([](const Input& i) { return i.friction_law; });
  }
  for (std::size_t a = 0; a < budget.answers.size(); ++a) {
    const double all = variance_of(first_draws(table.answer[a], budget.draws));
    const auto vanishing = [&](bool any, const std::optional<DrawTable>& frozen) {
      if (!any) return 0.0;
      return std::sqrt(std::max(0.0, all - (frozen ? variance_of(frozen->answer[a]) : 0.0)));
    };
    budget.answers[a].inputs = vanishing(any_input, without_inputs);
    budget.answers[a].friction_law = vanishing(any_law, without_law);
  }
}

/// Shares by exchanged inputs, of the answers that the fits do not explain.
void exchange_inputs(Passes& passes,
                     const BudgetRequest& request,
                     const std::vector<std::size_t>& random,
                     const DrawTable& table,
                     Budget& budget) {
  const Sampler twin = request.sampler->twin();
  const Exchanger exchanger(*request.sampler, twin);
  std::vector<std::size_t> open;
  for (std::size_t a = 0; a < budget.answers.size(); ++a)
    if (!(budget.answers[a].explained >= well_explained)) open.push_back(a);
  if (open.empty()) return;
  for (const std::size_t a : open) budget.answers[a] = {budget.answers[a].inputs, budget.answers[a].friction_law, {}};
  const DrawTable other =
      passes.run([&](long long first, std::span<network::Scores<8>> blocks) { twin.blocks(first, blocks); });
  for (const std::size_t u : random) {
    if (passes.stopped()) return;
    const auto mixed = [&](Exchange way) {
      return passes.run([&](long long first, std::span<network::Scores<8>> blocks) {
        for (auto& block : blocks) {
          exchanger.block(first, u, way, block);
          first += 8;
        }
      });
    };
    const DrawTable company = mixed(Exchange::with_its_company);
    std::optional<DrawTable> alone;
    if (exchanger.correlated(u)) alone = mixed(Exchange::alone);
    const DrawTable& changed = alone ? *alone : company;
    for (const std::size_t a : open) {
      budget.answers[a].shares.push_back(
          {.input = (*request.inputs)[u].name,
           .first = first_share(other.answer[a], company.answer[a]),
           .total = total_share(first_draws(table.answer[a], budget.draws), changed.answer[a])});
    }
  }
}

}  // namespace

long long budget_work(const std::vector<Input>& inputs, long long draws, bool surge) {
  const bool exchanged = !surge && inputs.size() <= most_exchanged && !inputs.empty();
  return draws * (2 + (exchanged ? static_cast<long long>(inputs.size()) + 1 : 0));
}

Budget find_budget(const BudgetRequest& request, const DrawTable& table, std::vector<BlockModel>& models) {
  Budget budget;
  budget.draws = std::min(budget_draws, table.draws());
  budget.answers.resize(table.answer.size());
  if (table.answer.empty()) return budget;
  Passes passes(request, table, models, budget.draws);
  const auto random = random_unknowns(*request.inputs, *request.ranges);
  freeze_groups(passes, *request.inputs, random, table, budget);
  if (!passes.stopped() && !random.empty()) {
    fit_inputs(request, table, budget);
    if (!request.surge && random.size() <= most_exchanged) exchange_inputs(passes, request, random, table, budget);
    judge_fits(request, budget);
  }
  budget.stopped = passes.stopped();
  return budget;
}

}  // namespace headband::montecarlo
