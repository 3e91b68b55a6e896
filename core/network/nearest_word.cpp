// SPDX-License-Identifier: MIT

#include "core/network/nearest_word.hpp"

#include <algorithm>
#include <numeric>

namespace headband::network {
namespace {

/// Levenshtein distance (published 1966): inserted, removed and replaced characters.
std::size_t edits_between(const std::string& a, const std::string& b) {
  std::vector<std::size_t> row(b.size() + 1);
  std::iota(row.begin(), row.end(), std::size_t{0});
  for (std::size_t i = 1; i <= a.size(); ++i) {
    std::size_t diagonal = row[0];
    row[0] = i;
    for (std::size_t j = 1; j <= b.size(); ++j) {
      const std::size_t replaced = diagonal + (a[i - 1] == b[j - 1] ? 0 : 1);
      diagonal = row[j];
      row[j] = std::min({replaced, row[j] + 1, row[j - 1] + 1});
    }
  }
  return row.back();
}

}  // namespace

std::string nearest_word(const std::string& word, const std::vector<std::string>& words) {
  const std::size_t most = std::max<std::size_t>(2, word.size() / 3);
  std::string best;
  std::size_t fewest = most + 1;
  for (const auto& candidate : words) {
    const std::size_t edits = edits_between(word, candidate);
    if (edits < fewest) {
      fewest = edits;
      best = candidate;
    }
  }
  return best;
}

}  // namespace headband::network
