#pragma once
// SPDX-License-Identifier: MIT
//
// Many draws over threads. A model answers eight draws at a time; what it says is stored by draw number, so nothing
// depends on which thread took which block, or in what order.

#include "core/network/values.hpp"
#include "montecarlo/propagate/column.hpp"
#include "transient/march/surge.hpp"

#include <atomic>
#include <concepts>
#include <functional>
#include <span>
#include <string>
#include <utility>
#include <vector>

namespace headband::montecarlo {

/// What a model says of eight draws.
using BlockAnswers = transient::DrawAnswers<8>;

/// Answers eight draws from their scores. Keeps its storage; used by one thread at a time.
class BlockModel {
 public:
  using Answer = std::function<void(const network::Scores<8>&, BlockAnswers&)>;
  using Expect = std::function<void(std::span<const network::Scores<8>>)>;

  /// @param expect told the blocks that will be asked next, in their order, before they are: a model may do at once for
  /// all of them what pays; its answers must not hang on it
  BlockModel(Answer answer, Expect expect) : answer_(std::move(answer)), expect_(std::move(expect)) {}
  template <std::invocable<const network::Scores<8>&, BlockAnswers&> F>
  BlockModel(F answer) : answer_(std::move(answer)) {}  // NOLINT(google-explicit-constructor)

  void operator()(const network::Scores<8>& scores, BlockAnswers& out) const { answer_(scores, out); }
  void expect(std::span<const network::Scores<8>> blocks) const {
    if (expect_) expect_(blocks);
  }

 private:
  Answer answer_;
  Expect expect_;
};

/// Fills the scores of the draws from `first` on, eight a block. Used by all threads at once.
using ScoreSource = std::function<void(long long first, std::span<network::Scores<8>> blocks)>;

/// Histories are kept of the first draws, and of so many that draws times times times probes fit 256 MB.
inline constexpr std::size_t most_history_draws = 4096, most_history_numbers = std::size_t{32} << 20;

/// Every number of every draw; failed draws hold not-a-number, draws not yet run anything.
struct DrawTable {
  std::vector<Column> answer, limit;                    ///< [which][draw]
  std::vector<std::vector<double>> head_max, head_min;  ///< [station][draw], at most 512 MB of them
  std::size_t history_cells = 0;                        ///< times times probes
  std::vector<double> history;                          ///< of the draws kept, see `history_place`
  std::vector<std::int8_t> status, cavity;              ///< [draw]

  DrawTable(std::size_t answers, std::size_t limits, std::size_t stations, std::size_t histories = 0)
      : answer(answers), limit(limits), head_max(stations), head_min(stations), history_cells(histories) {}
  [[nodiscard]] long long draws() const { return static_cast<long long>(status.size()); }
  /// Makes room, or cuts off; new draws have the status of failed ones.
  void resize(long long draws);
  /// Of so many draws, how many first ones keep their histories.
  [[nodiscard]] std::size_t histories_kept(std::size_t draws) const;
  /// Where `history` holds a cell (time times probes + probe) of a draw: blocks of eight draws, so that a block is
  /// stored in one go.
  [[nodiscard]] std::size_t history_place(std::size_t cell, std::size_t draw) const {
    return (draw / 8 * history_cells + cell) * 8 + draw % 8;
  }
  /// Stores the first `lanes` lanes of a block as the draws from `first` on; an answer or limit that is not finite
  /// makes its draw a failed one (status 2).
  void store(std::size_t first, int lanes, const BlockAnswers& block);

 private:
  void store_histories(std::size_t first, std::size_t lanes, const BlockAnswers& block);
  void store_lane(std::size_t draw, int lane, const BlockAnswers& block);
  [[nodiscard]] static bool all_finished(const BlockAnswers& block);
};

struct DrawOptions {
  int blocks_at_once = 1;                               ///< how many blocks a thread takes at a time, >= 1
  const std::atomic<bool>* stop = nullptr;              ///< set: threads finish the blocks they hold
  std::function<void(long long done)> progress = {};    ///< calling thread, about five times a second
  std::function<void(long long done)> checkpoint = {};  ///< calling thread: draws `first` … `done - 1` are stored
  double checkpoint_seconds = 60.0;
};

/// How a run of draws ended.
struct DrawSummary {
  long long done = 0;  ///< draws up to this one are stored, whatever stopped the run
  bool stopped = false;
  std::string complaint;  ///< of an exception in a model, the first in draw order; its draws are failed ones
};

/// Computes the draws `first` … `last - 1` into `table`, which holds at least `last`.
/// @param first a multiple of 8
/// @param models one per thread
[[nodiscard]] DrawSummary run_draws(long long first,
                                    long long last,
                                    const ScoreSource& scores,
                                    std::vector<BlockModel>& models,
                                    DrawTable& table,
                                    const DrawOptions& options);

}  // namespace headband::montecarlo
