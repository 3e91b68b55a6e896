// SPDX-License-Identifier: MIT
#include "core/casefile/read.hpp"
#include "core/pipe/wave_speed.hpp"

#include <cstdio>

// Uses one inline-free function of the library and one that pulls the reader in.
int main() {
  namespace hp = headband::pipe;
  const auto factor = hp::restraint_factor<1>(hp::Restraint::anchored, false, {0.3}, {0.492}, {0.008});
  const auto reading = headband::casefile::read_text("empty.toml", "", ".");
  std::printf("restraint factor %.4f, problems in an empty case: %d\n",
              factor.number,
              static_cast<int>(reading.problems.size()));
  return reading.problems.empty() ? 1 : 0;
}
