#pragma once
// SPDX-License-Identifier: MIT
//
// Rows of one run in the lanes: what stands two rows earlier.

#include "core/base/lanes.hpp"

namespace headband::transient {

using base::Lanes;
using base::Quad;

/// What left the two rows before (the upper half of `before`), then what leaves all but the last two of these.
template <int B>
[[nodiscard]] HEADBAND_INLINE Lanes<B> two_rows_earlier(const Quad& before, const Lanes<B>& now) {
  Lanes<B> r;
  r.part[0] = __builtin_shufflevector(before, now.part[0], 2, 3, 4, 5);
  r.part[1] = __builtin_shufflevector(now.part[0], now.part[1], 2, 3, 4, 5);
  if constexpr (B == 16) {
    r.part[2] = __builtin_shufflevector(now.part[1], now.part[2], 2, 3, 4, 5);
    r.part[3] = __builtin_shufflevector(now.part[2], now.part[3], 2, 3, 4, 5);
  }
  return r;
}

}  // namespace headband::transient
