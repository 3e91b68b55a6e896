#pragma once
// SPDX-License-Identifier: MIT
//
// Runs as the result file holds them: inputs, outputs and statuses by draw, all or every k-th.

#include "core/answers/study.hpp"
#include "montecarlo/propagate/draws.hpp"
#include "montecarlo/propagate/inputs.hpp"
#include "montecarlo/sampling/sampler.hpp"

#include <vector>

namespace headband::montecarlo {

/// 1 up to 100 000 draws; beyond that every k-th run is stored.
[[nodiscard]] long long stride_of(long long draws);

/// Names, units and distributions of inputs, names of limits.
void name_runs(answers::Bands& bands,
               const std::vector<Input>& inputs,
               const network::Plan& plan,
               const std::vector<std::size_t>& answers);

/// Fills the runs of the first `draws` draws, every `stride`-th of them.
/// @param with_envelopes each draw's envelopes and histories too, so that the band can be taken up again (needs stride
/// 1)
void keep_runs(answers::Bands& bands,
               const DrawTable& table,
               long long draws,
               const std::vector<Input>& inputs,
               const Sampler& sampler,
               const Ranges& ranges,
               long long stride,
               bool with_envelopes);

/// Puts the runs of a stopped band back into `table`.
/// @return draws taken up, a multiple of 8; 0 when they do not fit
[[nodiscard]] long long take_up_runs(const answers::Bands& bands, DrawTable& table);

}  // namespace headband::montecarlo
