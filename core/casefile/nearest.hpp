#pragma once
// SPDX-License-Identifier: MIT

#include <string>
#include <string_view>
#include <vector>

namespace headband::casefile {

/// The known word nearest to `word` by optimal string alignment (insert, remove, replace, swap neighbours), at most
/// max(1, length/3) edits away; empty when there is none.
[[nodiscard]] std::string nearest(std::string_view word, const std::vector<std::string>& known);

/// The question for a key that is refused because it can be read in two ways (`inertia`, `diameter`); empty for others.
[[nodiscard]] std::string question_for_key(std::string_view section, std::string_view key);

}  // namespace headband::casefile
