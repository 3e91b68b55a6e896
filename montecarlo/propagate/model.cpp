// SPDX-License-Identifier: MIT
#include "montecarlo/propagate/model.hpp"

#include "core/steady/evaluate.hpp"

#include <algorithm>
#include <array>
#include <memory>
#include <optional>
#include <span>
#include <vector>

namespace headband::montecarlo {

namespace {

/// Solvers and storage of one thread.
class PipelineModel {
 public:
  PipelineModel(const network::Case& c, const network::Plan& plan, bool surge, const std::vector<double>& history_times)
      : case_(&c),
        plan_(&plan),
        answers_(answers_computed(c, plan, surge)),
        realiser_(c, plan, surge),
        solver_(c, plan),
        values_(realiser_.prepare<8>()) {
    if (surge) {
      marcher_.emplace(c, plan, history_times);
    } else {
      two_values_.fill(values_);
    }
  }

  /// Values of the unknowns of the blocks that come next, and without a march their answers: two blocks at a time.
  void expect(std::span<const network::Scores<8>> blocks) {
    answered_ = 0;
    realiser_.look_ahead(blocks, ahead_);
    expected_ = blocks;
    next_ = 0;
    if (marcher_) return;
    if (answers_ahead_.size() < blocks.size()) answers_ahead_.resize(blocks.size());
    for (std::size_t k = 0; k + 2 <= blocks.size(); k += 2) {
      for (std::size_t i = 0; i < 2; ++i) realiser_.draw(blocks[k + i], ahead_[k + i], two_values_[i]);
      solver_.solve(two_values_, two_states_);
      for (std::size_t i = 0; i < 2; ++i) evaluate(two_values_[i], two_states_[i], answers_ahead_[k + i]);
      answered_ = k + 2;
    }
  }

  void answer(const network::Scores<8>& scores, BlockAnswers& out) {
    if (next_ < answered_ && &scores == &expected_[next_]) {
      const BlockAnswers& known = answers_ahead_[next_++];
      out.answer = known.answer;
      out.limit = known.limit;
      out.status = known.status;
      out.cavity = known.cavity;
      return;
    }
    solve(scores);
    if (marcher_) {
      march(scores, statuses(values_, state_), out);
    } else {
      evaluate(values_, state_, out);
    }
  }

 private:
  using Statuses = base::PerLane<std::int8_t, 8>;

  void march(const network::Scores<8>& scores, const Statuses& status, BlockAnswers& out) {
    const auto good = std::ranges::find(status, 0);
    if (good == status.end()) {
      out.answer.resize(answers_.size());
      out.limit.resize(plan_->limits.size());
      out.status = status;
      return;
    }
    if (std::ranges::count(status, 0) != 8) {
      const int lent = static_cast<int>(good - status.begin());
      spare_ = scores;
      for (auto& score : spare_)
        for (int lane = 0; lane < 8; ++lane)
          if (status[static_cast<std::size_t>(lane)] != 0) score.set(lane, score[lent]);
      solve(spare_);
    }
    marcher_->march<8>(values_, state_, out);
    count_ratings(values_, out);
    for (std::size_t lane = 0; lane < 8; ++lane)
      if (status[lane] != 0) out.status[lane] = status[lane];
  }

  void solve(const network::Scores<8>& scores) {
    if (next_ < expected_.size() && &scores == &expected_[next_]) {
      realiser_.draw(scores, ahead_[next_++], values_);
    } else {
      realiser_.draw<8>(scores, values_);
    }
    solver_.solve<8>(values_, state_);
  }

  [[nodiscard]] Statuses statuses(const network::Values<8>& values, const steady::SteadyState<8>& state) const {
    Statuses status{};
    int odd = 0;  // the usual block has none
    for (const auto steady : state.status) odd |= static_cast<int>(steady);
    for (std::size_t lane = 0; odd != 0 && lane < 8; ++lane) {
      const auto steady = state.status[lane];
      if (!steady::is_usable(steady)) status[lane] = steady == steady::SteadyStatus::not_finite ? 2 : 1;
    }
    if (case_->surge.cavities == network::Cavities::off) return status;
    if (steady::clears_vapour<8>(*plan_, values, state)) return status;
    const steady::VapourCheck<8> below = steady::check_vapour<8>(*plan_, values, state);
    for (std::size_t lane = 0; lane < 8; ++lane)
      if (below.pipe[lane] >= 0 && status[lane] == 0) status[lane] = 1;
    return status;
  }

  /// Limits are judged against one number each. What a drawn rating is over its central value is therefore taken off
  /// the pressure: the distance between the two is that of the draw.
  void count_ratings(const network::Values<8>& values, BlockAnswers& out) const {
    for (std::size_t i = 0; i < plan_->limits.size(); ++i) {
      const network::LimitPlan& limit = plan_->limits[i];
      if (limit.rating_of_pipe < 0) continue;
      out.limit[i] -= values.pipes[static_cast<std::size_t>(limit.rating_of_pipe)].rating - limit.bound;
    }
  }

  /// Answers and limits of the steady state.
  void evaluate(const network::Values<8>& values, const steady::SteadyState<8>& state, BlockAnswers& out) const {
    out.answer.resize(answers_.size());
    out.limit.resize(plan_->limits.size());
    out.cavity.fill(false);
    out.status = statuses(values, state);
    for (std::size_t i = 0; i < answers_.size(); ++i) {
      out.answer[i] = steady::answer<8>(*plan_, values, state, plan_->answers[answers_[i]]);
    }
    for (std::size_t i = 0; i < plan_->limits.size(); ++i) {
      out.limit[i] = steady::answer<8>(*plan_, values, state, plan_->limits[i].subject);
    }
    count_ratings(values, out);
  }

  const network::Case* case_;
  const network::Plan* plan_;
  std::vector<std::size_t> answers_;
  network::Realiser realiser_;  // what no draw changes is realised once
  steady::SteadySolver solver_;
  std::optional<transient::BatchMarcher> marcher_;
  network::Values<8> values_;
  steady::SteadyState<8> state_;
  network::Scores<8> spare_;
  std::span<const network::Scores<8>> expected_;
  std::vector<std::vector<base::Lanes<8>>> ahead_;  ///< as `expected_`: values of the unknowns
  std::size_t next_ = 0, answered_ = 0;  ///< of the expected blocks: the next one; how many are answered already
  std::vector<BlockAnswers> answers_ahead_;
  std::array<network::Values<8>, 2> two_values_;
  std::array<steady::SteadyState<8>, 2> two_states_;
};

}  // namespace

std::vector<std::size_t> answers_computed(const network::Case& c, const network::Plan& plan, bool surge) {
  std::vector<std::size_t> computed;
  for (std::size_t i = 0; i < plan.answers.size(); ++i) {
    if (surge || c.events.empty() || !plan.answers[i].needs_surge()) computed.push_back(i);
  }
  return computed;
}

BlockModel make_model(const network::Case& c,
                      const network::Plan& plan,
                      bool surge,
                      const std::vector<double>& history_times) {
  const auto model = std::make_shared<PipelineModel>(c, plan, surge, history_times);
  return BlockModel([model](const network::Scores<8>& scores, BlockAnswers& out) { model->answer(scores, out); },
                    [model](std::span<const network::Scores<8>> blocks) { model->expect(blocks); });
}

std::vector<transient::BatchStation> model_stations(const network::Case& c, const network::Plan& plan, bool surge) {
  if (!surge) return {};
  return transient::BatchMarcher(c, plan).stations();
}

}  // namespace headband::montecarlo
