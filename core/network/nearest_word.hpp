#pragma once
// SPDX-License-Identifier: MIT

#include <string>
#include <vector>

namespace headband::network {

/// The word of `words` with the fewest single-character edits from `word`; empty where none is near
/// (more edits than a third of the word, at least 2).
[[nodiscard]] std::string nearest_word(const std::string& word, const std::vector<std::string>& words);

}  // namespace headband::network
