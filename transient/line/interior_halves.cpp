// SPDX-License-Identifier: MIT
#include "transient/line/interior_halves.hpp"

namespace headband::transient {
namespace {

using base::Quad;
using base::QuadBits;
using base::detail::fused;
using base::detail::fused_less;

HEADBAND_INLINE Quad size_of(const Quad& x) {
  return __builtin_bit_cast(Quad, __builtin_bit_cast(QuadBits, x) & INT64_MAX);
}

// As base::max and base::min of the older and the newer: the older where they are equal or one is not a number.
HEADBAND_INLINE Quad larger(const Quad& older, const Quad& newer) {
#if defined(__AVX__)
  return _mm256_max_pd(newer, older);
#else
  return newer > older ? newer : older;
#endif
}
HEADBAND_INLINE Quad smaller(const Quad& older, const Quad& newer) {
#if defined(__AVX__)
  return _mm256_min_pd(newer, older);
#else
  return newer < older ? newer : older;
#endif
}

/// What leaves a row towards the next one.
struct Wave {
  Quad head, damp;
};

template <int half, bool envelope>
void march_half(const Resistance<8>& r, const PipeRows<8>& rows) {
  const int last = rows.rows - 1;
  Lanes<8>* const heads = rows.head;
  Lanes<8>* const flows = rows.flow;
  Lanes<8>* const highest = rows.head_max;
  Lanes<8>* const lowest = rows.head_min;
  const Quad carry = r.carry.part[half], damp = r.damp.part[half], quadratic = r.quadratic.part[half];
  const auto keep = [&](int i, const Quad& head, const Quad& flow) __attribute__((always_inline)) {
    heads[i].part[half] = head;
    flows[i].part[half] = flow;
    if constexpr (envelope) {
      highest[i].part[half] = larger(highest[i].part[half], head);
      lowest[i].part[half] = smaller(lowest[i].part[half], head);
    }
  };
  const auto damp_at = [&](const Quad& flow)
                           __attribute__((always_inline)) { return fused(quadratic, size_of(flow), damp); };
  const auto on_from = [&](int i) __attribute__((always_inline)) {
    const Quad flow = flows[i].part[half];
    return Wave{heads[i].part[half] + carry * flow, damp_at(flow)};
  };
  // row i from what rows i - 1 and i + 1 send; `on` becomes what row i + 1 sends on
  const auto march_row = [&](int i, Wave& on) __attribute__((always_inline)) {
    const Quad next_head = heads[i + 1].part[half], next_flow = flows[i + 1].part[half];
    const Quad next_damp = damp_at(next_flow), carried = carry * next_flow;
    const Quad flow = (on.head - (next_head - carried)) / (on.damp + next_damp);
    keep(i, fused_less(on.head, on.damp, flow), flow);
    on = {next_head + carried, next_damp};
  };
  Wave on_odd = on_from(0), on_even = on_from(1);
  int i = 1;
  for (; i + 1 < last; i += 2) {
    march_row(i, on_odd);
    march_row(i + 1, on_even);
  }
  if (i < last) march_row(i, on_odd);
}

}  // namespace

void march_halves(const Resistance<8>& resistance, const PipeRows<8>& rows) {
  if (rows.head_max != nullptr) {
    march_half<0, true>(resistance, rows);
    march_half<1, true>(resistance, rows);
  } else {
    march_half<0, false>(resistance, rows);
    march_half<1, false>(resistance, rows);
  }
}

}  // namespace headband::transient
