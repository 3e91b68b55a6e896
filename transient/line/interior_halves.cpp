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
  const Quad one{1.0, 1.0, 1.0, 1.0};
  const auto keep = [&](int i, const Quad& head, const Quad& flow) __attribute__((always_inline)) {
    heads[i].part[half] = head;
    flows[i].part[half] = flow;
    if constexpr (envelope) {
      highest[i].part[half] = larger(highest[i].part[half], head);
      lowest[i].part[half] = smaller(lowest[i].part[half], head);
    }
  };
  const auto on_from = [&](int i) __attribute__((always_inline)) {
    const Quad flow = flows[i].part[half];
    return Wave{heads[i].part[half] + carry * flow, fused(quadratic, size_of(flow), damp)};
  };
  Wave on1 = on_from(0), on2 = on_from(1);
  int i = 1;
  for (; i + 1 < last; i += 2) {
    const Quad head_a = heads[i + 1].part[half], flow_a = flows[i + 1].part[half];
    const Quad head_b = heads[i + 2].part[half], flow_b = flows[i + 2].part[half];
    const Quad damp_a = fused(quadratic, size_of(flow_a), damp), damp_b = fused(quadratic, size_of(flow_b), damp);
    const Quad carried_a = carry * flow_a, carried_b = carry * flow_b;
    const Quad sum1 = on1.damp + damp_a, sum2 = on2.damp + damp_b;
    const Quad inverse = one / (sum1 * sum2);
    const Quad flow1 = (on1.head - (head_a - carried_a)) * (sum2 * inverse);
    const Quad flow2 = (on2.head - (head_b - carried_b)) * (sum1 * inverse);
    keep(i, fused_less(on1.head, on1.damp, flow1), flow1);
    keep(i + 1, fused_less(on2.head, on2.damp, flow2), flow2);
    on1 = {head_a + carried_a, damp_a};
    on2 = {head_b + carried_b, damp_b};
  }
  if (i < last) {  // a row without a neighbour
    const Quad flow_a = flows[last].part[half];
    const Quad inverse = one / (on1.damp + fused(quadratic, size_of(flow_a), damp));
    const Quad flow = (on1.head - (heads[last].part[half] - carry * flow_a)) * inverse;
    keep(i, fused_less(on1.head, on1.damp, flow), flow);
  }
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
