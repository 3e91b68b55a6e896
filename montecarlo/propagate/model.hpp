#pragma once
// SPDX-License-Identifier: MIT
//
// Binds the block loop to the pipeline: scores → numbers of eight draws → steady states → marches → answers.

#include "core/network/values.hpp"
#include "montecarlo/propagate/draws.hpp"

#include <vector>

namespace headband::montecarlo {

/// Answers that a band without surge computes: indices into Plan::answers. With surge, or without events, all.
[[nodiscard]] std::vector<std::size_t> answers_computed(const network::Case& c, const network::Plan& plan, bool surge);

/// A model of the case for one thread. Its answers are `answers_computed`, its limits Plan::limits.
/// Statuses: 0 finished, 1 no steady state (or one below the vapour limit), 2 not finite, 3 boundary not converged,
/// 4 grid refused. Heads of the probes are kept at `history_times` [s], see BatchMarcher. A draw without a steady state
/// is replaced by one that has it before the march, and stays failed.
[[nodiscard]] BlockModel make_model(const network::Case& c,
                                    const network::Plan& plan,
                                    bool surge,
                                    const std::vector<double>& history_times = {});

/// Stations of the whole-line bands (empty without surge).
[[nodiscard]] std::vector<transient::BatchStation> model_stations(const network::Case& c,
                                                                  const network::Plan& plan,
                                                                  bool surge);

}  // namespace headband::montecarlo
