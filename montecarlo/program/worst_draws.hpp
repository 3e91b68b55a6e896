#pragma once
// SPDX-License-Identifier: MIT

#include "core/answers/study.hpp"

namespace headband::program {

/// Number of the `rank`-th worst draw (1 = worst) among those stored: by the answer that the worst limit is about, else
/// by the first answer. Failed draws are no draws to replay and are left out. Ties: the earlier draw.
/// @throws UsageError where nothing can be ranked
[[nodiscard]] long long worst_draw(const answers::Study& study, long long rank);

/// The answer ranked by, and whether its large values are the bad ones.
struct Ranking {
  std::size_t answer = 0;
  bool high_is_bad = true;
};
[[nodiscard]] Ranking ranking_of(const answers::Study& study);

}  // namespace headband::program
