#pragma once
// SPDX-License-Identifier: MIT
//
// Rows of one run in the lanes: what stands two rows earlier, and the quotients of neighbouring rows.

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

/// Share of the difference of heads that becomes flow, for eight rows: each pair of neighbours by one quotient.
[[nodiscard]] HEADBAND_INLINE Lanes<8> shares(const Lanes<8>& sum) {
  // rows 0 4 2 6 and 1 5 3 7: the same shuffle leads there and back
  const Quad even = __builtin_shufflevector(sum.part[0], sum.part[1], 0, 4, 2, 6);
  const Quad odd = __builtin_shufflevector(sum.part[0], sum.part[1], 1, 5, 3, 7);
  const Quad inverse = 1.0 / (even * odd);
  const Quad for_even = odd * inverse, for_odd = even * inverse;
  Lanes<8> share;
  share.part[0] = __builtin_shufflevector(for_even, for_odd, 0, 4, 2, 6);
  share.part[1] = __builtin_shufflevector(for_even, for_odd, 1, 5, 3, 7);
  return share;
}
[[nodiscard]] HEADBAND_INLINE Lanes<16> shares(const Lanes<16>& sum) {
  return side_by_side(shares(first_eight(sum)), shares(last_eight(sum)));
}

}  // namespace headband::transient
