#pragma once
// SPDX-License-Identifier: MIT
//
// Bands over time: the head at each kept place, at times that all draws share.

#include "core/answers/study.hpp"
#include "core/network/plan.hpp"
#include "montecarlo/propagate/draws.hpp"

#include <string>
#include <vector>

namespace headband::montecarlo {

inline constexpr std::size_t most_history_times = 241, least_history_times = 61;

/// Times at which the heads of Plan::probes are kept [s].
///
/// Rows of the central run, every k-th and the last, so that its lines and the bands stand on the same times; without
/// a run evenly spaced over the duration. At most 241; fewer, down to 61, where `most_history_draws` (all when there
/// are fewer) would not fit `most_history_numbers`; none where not even 64 draws fit 61 times.
/// @param rows of the central run [s], rising from 0; may be empty
/// @param warning what was left out, in words; empty: nothing
[[nodiscard]] std::vector<double> history_times(
    const std::vector<double>& rows, double duration, std::size_t probes, long long draws, std::string& warning);

/// Fills the quantiles of histories from `table`, at the ends of the coverage and the middle.
void form_histories(const DrawTable& table, answers::Bands& bands);

}  // namespace headband::montecarlo
