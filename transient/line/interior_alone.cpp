// SPDX-License-Identifier: MIT
#include "transient/line/interior_alone.hpp"

#include "transient/line/interior_followed.hpp"
#include "transient/line/neighbours.hpp"

namespace headband::transient {
namespace {

using base::load_eight;
using base::store_eight;

template <int B>
HEADBAND_INLINE Lanes<B> load(const double* from) {
  if constexpr (B == 8) {
    return load_eight(from);
  } else {
    return side_by_side(load_eight(from), load_eight(from + 8));
  }
}
template <int B>
HEADBAND_INLINE void store(const Lanes<B>& x, double* to) {
  if constexpr (B == 8) {
    store_eight(x, to);
  } else {
    store_eight(first_eight(x), to);
    store_eight(last_eight(x), to + 8);
  }
}

// Heads and damps of the waves that leave B rows one way.
template <int B>
struct Waves {
  Lanes<B> head, damp;
};

// Blocks of B rows from row `i` on.
template <int B, Form form, bool limited, bool envelope>
int march(const Resistance<8>& r, const PipeRows<1>& rows, int i, Arriving<1>& on1, Arriving<1>& on2, Lanes<1>& root) {
  const int last = rows.rows - 1;
  double* const head = &rows.head->number;
  double* const flow = &rows.flow->number;
  double* const roots = form == Form::darcy && rows.root != nullptr ? &rows.root->number : nullptr;
  const double* const vapour = limited ? &rows.vapour->number : nullptr;
  double* const head_max = envelope ? &rows.head_max->number : nullptr;
  double* const head_min = envelope ? &rows.head_min->number : nullptr;
  Quad before_head{0.0, 0.0, on1.head.number, on2.head.number};
  Quad before_damp{0.0, 0.0, on1.impedance.number, on2.impedance.number};
  for (; i + B <= last; i += B) {
    const int ahead = i + 1;
    const Lanes<B> h = load<B>(head + ahead), q = load<B>(flow + ahead);
    Lanes<B> new_roots(0.0);
    if (roots != nullptr) new_roots = load<B>(roots + ahead);
    const Cost<B> cost = cost_of<B, form>(r, q, roots != nullptr ? &new_roots : nullptr);
    const Sent<B> sent = sent_over<B, form, false>(r, cost, nullptr, nullptr);
    const Lanes<B> carried = sent.carry * q;
    const Waves<B> leaving{h + carried, sent.damp}, back{h - carried, sent.damp};
    const Waves<B> on{two_rows_earlier(before_head, leaving.head), two_rows_earlier(before_damp, leaving.damp)};
    const Lanes<B> new_flow = (on.head - back.head) / (on.damp + back.damp);
    const Lanes<B> new_head = fused_less(on.head, on.damp, new_flow);
    if constexpr (limited) {
      if (any(new_head < load<B>(vapour + i))) break;
    }
    store(new_head, head + i);
    store(new_flow, flow + i);
    if constexpr (envelope) {
      // most rows of most steps pass nothing that was; where a law is followed the question costs less than the stores
      constexpr bool ask = form == Form::darcy;
      const Lanes<B> highest = load<B>(head_max + i), lowest = load<B>(head_min + i);
      if (!ask || any((new_head > highest) | (new_head < lowest))) {
        store(max(highest, new_head), head_max + i);
        store(min(lowest, new_head), head_min + i);
      }
    }
    if (roots != nullptr) {
      root = roots[ahead + B - 1];
      store(new_roots, roots + ahead);
    }
    before_head = leaving.head.part[Lanes<B>::parts - 1];
    before_damp = leaving.damp.part[Lanes<B>::parts - 1];
  }
  on1 = {before_head[2], before_damp[2]};
  on2 = {before_head[3], before_damp[3]};
  return i;
}

template <Form form, bool limited, bool envelope>
int march(const Resistance<1>& given, const PipeRows<1>& rows, Arriving<1>& on1, Arriving<1>& on2, Lanes<1>& root) {
  const Resistance<8> r = in_every_lane(given);
  int i = 1;
  if constexpr (form == Form::darcy) {
    if (followed_in_blocks(r, rows.root != nullptr)) return march_followed<1>(r, rows, limited, on1, on2, root);
    // a law of friction waits for its own results: sixteen rows fill the waiting
    i = march<16, form, limited, envelope>(r, rows, i, on1, on2, root);
  }
  return march<8, form, limited, envelope>(r, rows, i, on1, on2, root);
}

template <Form form>
int march(
    const Resistance<1>& r, const PipeRows<1>& rows, bool limited, Arriving<1>& on1, Arriving<1>& on2, Lanes<1>& root) {
  const bool envelope = rows.head_max != nullptr;
  if (limited)
    return envelope ? march<form, true, true>(r, rows, on1, on2, root)
                    : march<form, true, false>(r, rows, on1, on2, root);
  return envelope ? march<form, false, true>(r, rows, on1, on2, root)
                  : march<form, false, false>(r, rows, on1, on2, root);
}

}  // namespace

int march_blocks(const Resistance<1>& r,
                 const PipeRows<1>& rows,
                 bool limited,
                 Arriving<1>& on1,
                 Arriving<1>& on2,
                 Lanes<1>& root_before) {
  switch (r.form) {
    case Form::darcy:
      return march<Form::darcy>(r, rows, limited, on1, on2, root_before);
    case Form::power:
      return march<Form::power>(r, rows, limited, on1, on2, root_before);
    case Form::quadratic:
      break;
  }
  return march<Form::quadratic>(r, rows, limited, on1, on2, root_before);
}

}  // namespace headband::transient
