// SPDX-License-Identifier: MIT
#include "montecarlo/propagate/draws.hpp"

#include <algorithm>
#include <array>
#include <chrono>
#include <cmath>
#include <condition_variable>
#include <cstring>
#include <exception>
#include <limits>
#include <mutex>
#include <thread>

namespace headband::montecarlo {

namespace {

using base::Lanes;

constexpr double nothing = std::numeric_limits<double>::quiet_NaN();
constexpr std::int8_t not_finite = 2;
/// Envelopes kept: 512 MB of them.
constexpr std::size_t most_envelope_numbers = std::size_t{64} << 20;

/// Deals blocks out in draw order and knows up to where all are done.
class Dealer {
 public:
  Dealer(long long first, long long last, long long width, std::size_t threads)
      : next_(first), last_(last), width_(width), held_(threads, nobody) {}

  /// The next range for `thread`, after what it held is done; empty at the end.
  std::pair<long long, long long> take(std::size_t thread, bool stop) {
    const std::lock_guard lock(mutex_);
    if (stop || next_ >= last_) {
      held_[thread] = nobody;
      return {last_, last_};
    }
    const long long from = next_;
    next_ = std::min(last_, next_ + width_);
    held_[thread] = from;
    return {from, next_};
  }

  [[nodiscard]] long long done() {
    const std::lock_guard lock(mutex_);
    long long least = next_;
    for (const long long from : held_) least = std::min(least, from);
    return least;
  }

  void complain(long long draw, const std::string& what) {
    const std::lock_guard lock(mutex_);
    if (draw >= complaint_draw_) return;
    complaint_draw_ = draw;
    complaint_ = what;
  }
  [[nodiscard]] const std::string& complaint() const { return complaint_; }

 private:
  static constexpr long long nobody = std::numeric_limits<long long>::max();
  std::mutex mutex_;
  long long next_, last_, width_;
  std::vector<long long> held_;
  long long complaint_draw_ = nobody;
  std::string complaint_;
};

/// Draws that broke off: nothing but failed ones.
void fail(const DrawTable& table, BlockAnswers& block) {
  block.answer.assign(table.answer.size(), Lanes<8>(nothing));
  block.limit.assign(table.limit.size(), Lanes<8>(nothing));
  block.head_max.clear();
  block.head_min.clear();
  block.history.clear();
  block.status.fill(not_finite);
}

/// One thread's work: blocks until the dealer has none, several at a time.
class Worker {
 public:
  Worker(Dealer& dealer, std::size_t thread, const ScoreSource& scores, BlockModel& model, DrawTable& table)
      : dealer_(dealer), thread_(thread), source_(scores), model_(model), table_(table) {}

  void work(const std::atomic<bool>* stop) {
    for (;;) {
      const auto [from, to] = dealer_.take(thread_, stop != nullptr && stop->load(std::memory_order_relaxed));
      if (from == to) return;
      for (long long first = from; first < to; first += 8 * static_cast<long long>(at_once)) answer(first, to);
    }
  }

 private:
  static constexpr std::size_t at_once = 16;

  /// Calls `step`; false with a complaint about the draws from `first` on where it throws.
  template <class Step>
  bool tried(long long first, const Step& step) {
    try {
      step();
      return true;
    } catch (const std::exception& error) {
      dealer_.complain(first, error.what());
      return false;
    }
  }

  /// Scores of the next blocks; `drawn`: of which of them there are any.
  bool draw_scores(long long first, std::span<network::Scores<8>> blocks, std::array<bool, at_once>& drawn) {
    try {
      source_(first, blocks);
      drawn.fill(true);
      return true;
    } catch (const std::exception&) {  // one by one: which of them is it?
      for (std::size_t k = 0; k < blocks.size(); ++k) {
        const long long draw = first + 8 * static_cast<long long>(k);
        drawn[k] = tried(draw, [&] { source_(draw, blocks.subspan(k, 1)); });
      }
      return std::all_of(
          drawn.begin(), drawn.begin() + static_cast<std::ptrdiff_t>(blocks.size()), [](bool d) { return d; });
    }
  }

  void answer(long long first, long long to) {
    const auto blocks = std::min(at_once, static_cast<std::size_t>((to - first + 7) / 8));
    std::array<bool, at_once> drawn{};
    const bool all_drawn = draw_scores(first, {scores_.data(), blocks}, drawn);
    if (all_drawn) tried(first, [&] { model_.expect({scores_.data(), blocks}); });
    for (std::size_t k = 0; k < blocks; ++k) {
      const long long draw = first + 8 * static_cast<long long>(k);
      block_.keep_history = static_cast<std::size_t>(draw) < table_.histories_kept(table_.status.size());
      if (!drawn[k] || !tried(draw, [&] { model_(scores_[k], block_); })) fail(table_, block_);
      table_.store(static_cast<std::size_t>(draw), static_cast<int>(std::min(8LL, to - draw)), block_);
    }
  }

  Dealer& dealer_;
  std::size_t thread_;
  const ScoreSource& source_;
  BlockModel& model_;
  DrawTable& table_;
  std::array<network::Scores<8>, at_once> scores_;
  BlockAnswers block_;
};

}  // namespace

void DrawTable::resize(long long draws) {
  const auto n = static_cast<std::size_t>(draws);
  for (auto* columns : {&answer, &limit})
    for (auto& column : *columns) column.resize(n);
  const std::size_t envelopes = head_max.empty() ? 0 : std::min(n, most_envelope_numbers / (2 * head_max.size()));
  for (auto* columns : {&head_max, &head_min})
    for (auto& column : *columns) column.resize(envelopes, nothing);
  history.resize((histories_kept(n) + 7) / 8 * 8 * history_cells, nothing);
  status.resize(n, not_finite);
  cavity.resize(n, 0);
}

std::size_t DrawTable::histories_kept(std::size_t draws) const {
  if (history_cells == 0) return 0;
  return std::min({draws, most_history_draws, most_history_numbers / history_cells / 8 * 8});
}

bool DrawTable::all_finished(const BlockAnswers& block) {
  if (std::ranges::any_of(block.status, [](std::int8_t s) { return s != 0; })) return false;
  Lanes<8> sum = 0.0;  // stays zero only where each number is finite
  for (const auto* numbers : {&block.answer, &block.limit})
    for (const auto& number : *numbers) sum += 0.0 * number;
  return base::all(sum == Lanes<8>(0.0));
}

void DrawTable::store(std::size_t first, int lanes, const BlockAnswers& block) {
  // the usual block: eight finished draws, whole columns at once
  if (lanes == 8 && head_max.empty() && history_cells == 0 && all_finished(block)) {
    const auto put = [first](const std::vector<Lanes<8>>& from, std::vector<Column>& to) {
      for (std::size_t i = 0; i < to.size(); ++i) {
        std::memcpy(to[i].data() + first, &from[i].part[0], sizeof(base::Quad));
        std::memcpy(to[i].data() + first + 4, &from[i].part[1], sizeof(base::Quad));
      }
    };
    put(block.answer, answer);
    put(block.limit, limit);
    std::fill_n(status.begin() + static_cast<std::ptrdiff_t>(first), 8, std::int8_t{0});
    for (std::size_t lane = 0; lane < 8; ++lane) cavity[first + lane] = block.cavity[lane] ? 1 : 0;
    return;
  }
  for (int lane = 0; lane < lanes; ++lane) store_lane(first + static_cast<std::size_t>(lane), lane, block);
  store_histories(first, static_cast<std::size_t>(lanes), block);
}

void DrawTable::store_histories(std::size_t first, std::size_t lanes, const BlockAnswers& block) {
  if (first >= histories_kept(status.size())) return;
  double* to = history.data() + history_place(0, first);
  const bool there = block.history.size() >= history_cells;
  const auto good = [&](std::size_t lane) { return there && status[first + lane] == 0; };
  bool all_good = lanes == 8;
  for (std::size_t lane = 0; lane < lanes; ++lane) all_good = all_good && good(lane);
  for (std::size_t cell = 0; cell < history_cells; ++cell, to += 8) {
    for (std::size_t lane = 0; lane < lanes; ++lane)
      to[lane] = all_good || good(lane) ? block.history[cell][static_cast<int>(lane)] : nothing;
  }
}

void DrawTable::store_lane(std::size_t draw, int lane, const BlockAnswers& block) {
  std::int8_t outcome = block.status[static_cast<std::size_t>(lane)];
  double sum = 0.0;  // stays finite only where each number is
  for (const auto* numbers : {&block.answer, &block.limit})
    for (const auto& number : *numbers) sum += 0.0 * number[lane];
  if (outcome == 0 && sum != 0.0) outcome = not_finite;
  const bool good = outcome == 0;
  status[draw] = outcome;
  cavity[draw] = good && block.cavity[static_cast<std::size_t>(lane)] ? 1 : 0;
  for (std::size_t i = 0; i < answer.size(); ++i) answer[i][draw] = good ? block.answer[i][lane] : nothing;
  for (std::size_t i = 0; i < limit.size(); ++i) limit[i][draw] = good ? block.limit[i][lane] : nothing;
  const bool envelopes = good && block.head_max.size() >= head_max.size();
  for (std::size_t i = 0; i < head_max.size() && draw < head_max[i].size(); ++i) {
    head_max[i][draw] = envelopes ? block.head_max[i][lane] : nothing;
    head_min[i][draw] = envelopes ? block.head_min[i][lane] : nothing;
  }
}

DrawSummary run_draws(long long first,
                      long long last,
                      const ScoreSource& scores,
                      std::vector<BlockModel>& models,
                      DrawTable& table,
                      const DrawOptions& options) {
  Dealer dealer(first, last, 8LL * std::max(1, options.blocks_at_once), models.size());
  std::mutex mutex;
  std::condition_variable ended;
  std::size_t running = models.size();
  {
    std::vector<std::jthread> threads;
    threads.reserve(models.size());
    for (std::size_t t = 0; t < models.size(); ++t) {
      threads.emplace_back([&, t] {
        Worker(dealer, t, scores, models[t], table).work(options.stop);
        const std::lock_guard lock(mutex);
        --running;
        ended.notify_one();
      });
    }
    auto saved = std::chrono::steady_clock::now();
    std::unique_lock lock(mutex);
    const std::chrono::duration<double> glance(std::clamp(options.checkpoint_seconds, 1e-3, 0.2));
    while (!ended.wait_for(lock, glance, [&] { return running == 0; })) {
      lock.unlock();
      const long long done = dealer.done();
      if (options.progress) options.progress(done);
      const auto now = std::chrono::steady_clock::now();
      if (options.checkpoint && std::chrono::duration<double>(now - saved).count() >= options.checkpoint_seconds) {
        options.checkpoint(done);
        saved = std::chrono::steady_clock::now();
      }
      lock.lock();
    }
  }
  DrawSummary summary;
  summary.done = std::min(last, dealer.done());
  summary.stopped = summary.done < last;
  summary.complaint = dealer.complaint();
  if (options.progress) options.progress(summary.done);
  return summary;
}

}  // namespace headband::montecarlo
