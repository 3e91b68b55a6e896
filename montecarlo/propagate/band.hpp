#pragma once
// SPDX-License-Identifier: MIT

#include "core/answers/study.hpp"
#include "core/network/values.hpp"

#include <atomic>
#include <functional>
#include <optional>
#include <string>
#include <vector>

namespace headband::montecarlo {

/// What the verb `band` asks beyond the case.
struct BandOptions {
  bool surge = false;                           ///< march every draw
  int threads = 1;                              ///< >= 1
  std::optional<unsigned long long> seed = {};  ///< overrides the case's
  const std::atomic<bool>* stop = nullptr;      ///< set by Ctrl-C: finish the block, keep what is done
  std::function<void(long long done, long long all)> progress = {};  ///< called from the calling thread
  /// Draws of a stopped band of the same case, seed and verb, as `checkpoint` or a stopped BandOutcome gave them.
  std::optional<answers::Bands> resumed = {};
  /// Called from the calling thread, `checkpoint_seconds` apart, with all draws done so far (stride 1); the answers
  /// have names and no numbers yet.
  std::function<void(const answers::Bands&)> checkpoint = {};
  double checkpoint_seconds = 60.0;  ///< >= 0
};

/// What the band of a case says: blocks of a Study.
struct BandOutcome {
  answers::Bands bands;
  std::vector<answers::LimitAnswer> limits;
  std::vector<std::string> warnings;
  std::vector<std::string> left_out;  ///< answers that this verb does not compute, in words (for standard error)
  bool stopped = false;               ///< by the user; `bands` holds the draws done
  bool all_failed = false;
};

/// The central run's numbers the bands lean on.
struct CentralRun {
  std::vector<double> answer_value, limit_value;            ///< as Plan::answers, Plan::limits
  std::vector<double> answer_grid_bound, limit_grid_bound;  ///< zero for steady answers; NaN = not converging
  std::vector<double> limit_bound_to_kept = {};             ///< as SurgeRun's; none: limit_grid_bound
  bool cavity = false;
  std::vector<double> time = {};  ///< its rows [s]; none: the bands of histories stand at even times
};

/// Samples the case: draws, propagates, forms quantiles, probabilities, verdicts, budget.
[[nodiscard]] BandOutcome run_band(const network::Case& c,
                                   const network::Plan& plan,
                                   const CentralRun& central,
                                   const BandOptions& options);

/// Scores of draw `draw` of the case's design: one uniform number per unknown, correlated as the case says.
[[nodiscard]] std::vector<double> scores_of_draw(const network::Case& c,
                                                 unsigned long long seed,
                                                 long long draws,
                                                 long long draw);

}  // namespace headband::montecarlo
