// SPDX-License-Identifier: MIT
#include "transient/line/interior_halves.hpp"

#include <algorithm>

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

// The second half of these rows finds them in the first-level cache, where a long pipe has not room: 16 KiB.
constexpr int rows_at_a_time = 64;

/// What leaves a row towards the next one.
struct Wave {
  Quad head, damp;
};

/// What the two rows before the next one to be marched send on: its neighbour and the one behind that.
struct Underway {
  Wave neighbour, second;
};

// Rows from `first` to before `end`, an even number of them unless they are the last.
template <int half, bool envelope>
[[gnu::always_inline]] inline void march_half(
    const Resistance<8>& r, const PipeRows<8>& rows, int first, int end, Underway& underway) {
  Lanes<8>* const heads = rows.head;
  Lanes<8>* const flows = rows.flow;
  Lanes<8>* const highest = rows.head_max;
  Lanes<8>* const lowest = rows.head_min;
  const Quad carry = r.carry.part[half], damp = r.damp.part[half], quadratic = r.quadratic.part[half];
  // row i from what rows i - 1 and i + 1 send; `on` becomes what row i + 1 sends on
  const auto march_row = [&](int i, Wave& on) __attribute__((always_inline)) {
    const Quad next_head = heads[i + 1].part[half], next_flow = flows[i + 1].part[half];
    const Quad next_damp = fused(quadratic, size_of(next_flow), damp), carried = carry * next_flow;
    const Quad flow = (on.head - (next_head - carried)) / (on.damp + next_damp);
    const Quad head = fused_less(on.head, on.damp, flow);
    heads[i].part[half] = head;
    flows[i].part[half] = flow;
    if constexpr (envelope) {
      highest[i].part[half] = larger(highest[i].part[half], head);
      lowest[i].part[half] = smaller(lowest[i].part[half], head);
    }
    on = {next_head + carried, next_damp};
  };
  Wave odd = underway.neighbour, even = underway.second;
  int i = first;
  for (; i + 1 < end; i += 2) {
    march_row(i, odd);
    march_row(i + 1, even);
  }
  if (i < end) march_row(i, odd);
  underway = {odd, even};
}

template <int half>
Wave sent_on(const Resistance<8>& r, const PipeRows<8>& rows, int i) {
  const Quad flow = rows.flow[i].part[half];
  return {rows.head[i].part[half] + r.carry.part[half] * flow,
          fused(r.quadratic.part[half], size_of(flow), r.damp.part[half])};
}

template <bool envelope>
void march_all(const Resistance<8>& r, const PipeRows<8>& rows) {
  const int last = rows.rows - 1;
  if (last < 2) return;
  Underway one{sent_on<0>(r, rows, 0), sent_on<0>(r, rows, 1)};
  Underway two{sent_on<1>(r, rows, 0), sent_on<1>(r, rows, 1)};
  for (int first = 1; first < last; first += rows_at_a_time) {
    const int end = std::min(first + rows_at_a_time, last);
    march_half<0, envelope>(r, rows, first, end, one);
    march_half<1, envelope>(r, rows, first, end, two);
  }
}

}  // namespace

void march_halves(const Resistance<8>& resistance, const PipeRows<8>& rows) {
  if (rows.head_max != nullptr) {
    march_all<true>(resistance, rows);
  } else {
    march_all<false>(resistance, rows);
  }
}

}  // namespace headband::transient
