#pragma once
// SPDX-License-Identifier: MIT
//
// The blocks of the page, in the order they stand there. A block without content is left out.

#include "core/answers/study.hpp"
#include "core/report/plot.hpp"

#include <string>
#include <vector>

namespace headband::report {

struct Section {
  std::string id, title;
  std::string html;
};

/// Title, verdict, decision, what is open, and what the page is not.
[[nodiscard]] std::string head_of_page(const answers::Study& study);

/// Extremes, limits, profile, histories, devices in time, draws with budget and sensitivity.
[[nodiscard]] std::vector<Section> answer_sections(const answers::Study& study);

/// Limits: bound, value, margin, chance with its bounds, picture, verdict with its reason.
[[nodiscard]] std::string limits_block(const answers::Study& study);

/// Sampled answers: quantiles, draws, budget, sensitivity.
[[nodiscard]] std::string bands_block(const answers::Study& study);

/// Events, cavities, devices, checks, steady flow, inputs, open points, identity, case text.
[[nodiscard]] std::vector<Section> basis_sections(const answers::Study& study);

/// A plot as a figure: picture in both families, data block for the interactive one, its peaks as a table.
[[nodiscard]] std::string figure(const Plot& plot);

/// A verdict with its sign, never colour alone.
[[nodiscard]] std::string verdict_mark(answers::Verdict verdict);

}  // namespace headband::report
