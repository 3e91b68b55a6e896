// SPDX-License-Identifier: MIT
#include "transient/line/interior_512.hpp"

#if defined(__x86_64__) && defined(__AVX__)
#define HEADBAND_HAS_512 1
#define HEADBAND_512 [[gnu::target("avx512f,avx512dq,avx512vl")]]
#endif

namespace headband::transient {

#ifdef HEADBAND_HAS_512
namespace {

// Masked forms with every lane on: the plain intrinsics of g++ 12 warn of a value they leave open.
constexpr __mmask8 all = 0xff;

HEADBAND_512 inline __m512d load(const Lanes<8>& x) {
  static_assert(sizeof(Lanes<8>) == 64 && alignof(Lanes<8>) == 64);
  return _mm512_load_pd(&x);
}
HEADBAND_512 inline void store(Lanes<8>& x, __m512d v) { _mm512_store_pd(&x, v); }

template <bool limited>
HEADBAND_512 int march_pairs(const Resistance<8>& r, const PipeRows<8>& rows, Arriving<8>& on1, Arriving<8>& on2) {
  const int last = rows.rows - 1;
  Lanes<8>* const head = rows.head;
  Lanes<8>* const flow = rows.flow;
  Lanes<8>* const head_max = rows.head_max;
  Lanes<8>* const head_min = rows.head_min;
  const __m512d carry = load(r.carry), damp = load(r.damp), quadratic = load(r.quadratic);
  __m512d h = load(head[0]), q = load(flow[0]);
  __m512d on1_head = _mm512_add_pd(h, _mm512_mul_pd(carry, q));
  __m512d on1_damp = _mm512_fmadd_pd(quadratic, _mm512_abs_pd(q), damp);
  h = load(head[1]);
  q = load(flow[1]);
  __m512d on2_head = _mm512_add_pd(h, _mm512_mul_pd(carry, q));
  __m512d on2_damp = _mm512_fmadd_pd(quadratic, _mm512_abs_pd(q), damp);
  int i = 1;
  bool stopped = false;
  for (; i + 1 < last; i += 2) {
    const __m512d a_head = load(head[i + 1]), a_flow = load(flow[i + 1]);
    const __m512d b_head = load(head[i + 2]), b_flow = load(flow[i + 2]);
    const __m512d a_damp = _mm512_fmadd_pd(quadratic, _mm512_abs_pd(a_flow), damp);
    const __m512d b_damp = _mm512_fmadd_pd(quadratic, _mm512_abs_pd(b_flow), damp);
    const __m512d a_carried = _mm512_mul_pd(carry, a_flow), b_carried = _mm512_mul_pd(carry, b_flow);
    const __m512d q1 =
        _mm512_div_pd(_mm512_sub_pd(on1_head, _mm512_sub_pd(a_head, a_carried)), _mm512_add_pd(on1_damp, a_damp));
    const __m512d q2 =
        _mm512_div_pd(_mm512_sub_pd(on2_head, _mm512_sub_pd(b_head, b_carried)), _mm512_add_pd(on2_damp, b_damp));
    const __m512d h1 = _mm512_fnmadd_pd(on1_damp, q1, on1_head);
    const __m512d h2 = _mm512_fnmadd_pd(on2_damp, q2, on2_head);
    if constexpr (limited) {
      const __mmask8 low = _mm512_cmp_pd_mask(h1, load(rows.vapour[i]), _CMP_LT_OQ);
      const __mmask8 next_low = _mm512_cmp_pd_mask(h2, load(rows.vapour[i + 1]), _CMP_LT_OQ);
      stopped = (low | next_low) != 0;
      if (stopped) break;
    }
    store(head[i], h1);
    store(flow[i], q1);
    store(head[i + 1], h2);
    store(flow[i + 1], q2);
    // max and min as base::max, base::min: the older where they are equal or one is not a number
    store(head_max[i], _mm512_maskz_max_pd(all, h1, load(head_max[i])));
    store(head_min[i], _mm512_maskz_min_pd(all, h1, load(head_min[i])));
    store(head_max[i + 1], _mm512_maskz_max_pd(all, h2, load(head_max[i + 1])));
    store(head_min[i + 1], _mm512_maskz_min_pd(all, h2, load(head_min[i + 1])));
    on1_head = _mm512_add_pd(a_head, a_carried);
    on1_damp = a_damp;
    on2_head = _mm512_add_pd(b_head, b_carried);
    on2_damp = b_damp;
  }
  if (!stopped && i < last) {  // a row without a neighbour
    const __m512d a_head = load(head[last]), a_flow = load(flow[last]);
    const __m512d a_damp = _mm512_fmadd_pd(quadratic, _mm512_abs_pd(a_flow), damp);
    const __m512d back = _mm512_sub_pd(a_head, _mm512_mul_pd(carry, a_flow));
    const __m512d q1 = _mm512_div_pd(_mm512_sub_pd(on1_head, back), _mm512_add_pd(on1_damp, a_damp));
    const __m512d h1 = _mm512_fnmadd_pd(on1_damp, q1, on1_head);
    if constexpr (limited) stopped = _mm512_cmp_pd_mask(h1, load(rows.vapour[i]), _CMP_LT_OQ) != 0;
    if (!stopped) {
      store(head[i], h1);
      store(flow[i], q1);
      store(head_max[i], _mm512_maskz_max_pd(all, h1, load(head_max[i])));
      store(head_min[i], _mm512_maskz_min_pd(all, h1, load(head_min[i])));
      ++i;
    }
  }
  if (!stopped) return last;
  store(on1.head, on1_head);
  store(on1.impedance, on1_damp);
  store(on2.head, on2_head);
  store(on2.impedance, on2_damp);
  return i;
}

}  // namespace

bool has_512() {
  // NOLINTBEGIN(readability-implicit-bool-conversion): an int for one compiler, a bool for the other
  static const bool has = __builtin_cpu_supports("avx512f") != 0 && __builtin_cpu_supports("avx512dq") != 0 &&
                          __builtin_cpu_supports("avx512vl") != 0;
  // NOLINTEND(readability-implicit-bool-conversion)
  return has;
}

int march_pairs_512(const Resistance<8>& r, const PipeRows<8>& rows, bool limited, Arriving<8>& on1, Arriving<8>& on2) {
  return limited ? march_pairs<true>(r, rows, on1, on2) : march_pairs<false>(r, rows, on1, on2);
}
#else
bool has_512() { return false; }
int march_pairs_512(const Resistance<8>&, const PipeRows<8>&, bool, Arriving<8>&, Arriving<8>&) { return 1; }
#endif

}  // namespace headband::transient
