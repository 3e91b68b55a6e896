#pragma once
// SPDX-License-Identifier: MIT
//
// The doors of the transient room for the rest of the house: one full run with everything kept, and a batch of draws
// of which only the asked extremes are kept. Both march through the same templates.

#include "core/answers/study.hpp"
#include "core/network/values.hpp"
#include "core/steady/steady.hpp"

#include <array>
#include <memory>
#include <vector>

namespace headband::transient {

using base::Lanes;

/// What one marched run says: the blocks of a Study that verb `surge` fills.
struct SurgeRun {
  bool completed = false;  ///< false: see `transient.status`
  answers::Transient transient;
  answers::Extreme highest, lowest;
  std::vector<answers::PlaceAnswer> places;    ///< only the surge keys are filled; as Plan::places
  std::vector<answers::DeviceAnswer> devices;  ///< numbers of the run; as Plan::devices
  std::vector<answers::EventAnswer> events;
  answers::Audit audit;
  answers::GridAnswer grid;
  std::vector<double> answer_value;       ///< as Plan::answers [SI, pressures gauge]
  std::vector<double> limit_value;        ///< as Plan::limits
  std::vector<double> answer_grid_bound;  ///< >= 0 [the answer's unit]; NaN = not converging
  std::vector<double> limit_grid_bound;
  /// As limit_grid_bound, on the side of keeping the limit alone: at most the grid bound, and less where the extreme
  /// stood there already before any vapour formed. NaN = not known.
  std::vector<double> limit_bound_to_kept;
  std::vector<std::string> warnings;
  bool cavity = false;  ///< a cavity over 1e-6 of its section's volume formed
};

/// One run with histories, envelopes, events, audit, and the grid bound from finer grids where the case asks for it.
/// @throws base::InputError where the grid refuses a wave-speed change
[[nodiscard]] SurgeRun run_surge(const network::Case& c,
                                 const network::Plan& plan,
                                 const network::Values<1>& values,
                                 const steady::SteadyState<1>& steady);

/// Answers of W marched draws.
template <int W>
struct DrawAnswers {
  std::vector<Lanes<W>> answer;              ///< as Plan::answers
  std::vector<Lanes<W>> limit;               ///< as Plan::limits
  std::vector<Lanes<W>> head_max, head_min;  ///< envelopes at `profile stations` (see BatchMarcher::stations)
  bool keep_history = true;                  ///< asked for: false leaves `history` empty
  std::vector<Lanes<W>> history;             ///< heads, row-major (time, probe): BatchMarcher's times, Plan::probes [m]
  base::PerLane<std::int8_t, W> status{};    ///< 0 finished, 2 not finite, 3 boundary not converged, 4 grid refused
  base::PerLane<bool, W> cavity{};
};

/// A station of the whole-line bands: a share of a pipe's length, the same for every draw.
struct BatchStation {
  int pipe = 0;
  double share = 0.0;
};

/// Marches batches of draws of one plan; one per thread. Storage is kept between batches.
class BatchMarcher {
 public:
  /// @param history_times at which the heads of Plan::probes are kept [s], rising from 0; none: no histories, no cost.
  ///        Between two rows of a draw they lie on a straight line, past its last row they stay.
  BatchMarcher(const network::Case& c, const network::Plan& plan, std::vector<double> history_times = {});
  ~BatchMarcher();
  BatchMarcher(BatchMarcher&&) noexcept;
  BatchMarcher& operator=(BatchMarcher&&) noexcept;

  [[nodiscard]] const std::vector<BatchStation>& stations() const;

  /// Marches W draws from their steady states to the asked duration on the grid of each draw.
  template <int W>
  void march(const network::Values<W>& values, const steady::SteadyState<W>& steady, DrawAnswers<W>& out);

 private:
  struct Parts;
  std::unique_ptr<Parts> parts_;
};

}  // namespace headband::transient
