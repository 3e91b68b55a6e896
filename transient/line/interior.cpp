// SPDX-License-Identifier: MIT
#include "transient/line/interior.hpp"

#include "transient/line/interior_512.hpp"
#include "transient/line/interior_alone.hpp"
#include "transient/line/interior_followed.hpp"
#include "transient/line/interior_halves.hpp"

#include <array>

namespace headband::transient {
namespace {

constexpr double cavity_rounding = 1e-12;  // of a volume

// What leaves a row: towards `to` (on) and towards `from` (back).
template <int W>
struct Wave {
  Lanes<W> head, damp;
};
template <int W>
struct Leaving {
  Wave<W> on, back;
};

template <int W, Form form, bool placed>
HEADBAND_INLINE Wave<W> on_over(const Resistance<W>& r,
                                const PipeRows<W>& rows,
                                int reach,
                                const Lanes<W>& head,
                                const Lanes<W>& flow,
                                const Cost<W>& cost) {
  const Sent<W> s = sent_over<W, form, placed>(r, cost, rows.fitting + reach, rows.longer + reach);
  return {head + s.carry * flow, s.damp};
}

template <int W, Form form, bool placed>
HEADBAND_INLINE Wave<W> back_over(const Resistance<W>& r,
                                  const PipeRows<W>& rows,
                                  int reach,
                                  const Lanes<W>& head,
                                  const Lanes<W>& flow,
                                  const Cost<W>& cost) {
  const Sent<W> s = sent_over<W, form, placed>(r, cost, rows.fitting + reach, rows.longer + reach);
  return {head - s.carry * flow, s.damp};
}

template <int W>
HEADBAND_INLINE Lanes<W>* root_at(Lanes<W>* roots, int row) {
  return roots != nullptr ? roots + row : nullptr;
}

// What leaves a row without cavity; nothing goes on from the last row, nothing comes back from row 0.
template <int W, Form form, bool placed>
HEADBAND_INLINE Leaving<W> leaving_at_cost(const Resistance<W>& r,
                                           const PipeRows<W>& rows,
                                           int i,
                                           const Cost<W>& cost) {
  const Lanes<W> head = rows.head[i], flow = rows.flow[i];
  if constexpr (placed) {
    return {on_over<W, form, placed>(r, rows, i + 1 < rows.rows ? i : i - 1, head, flow, cost),
            back_over<W, form, placed>(r, rows, i > 0 ? i - 1 : 0, head, flow, cost)};
  } else {
    const Sent<W> s = sent_over<W, form, placed>(r, cost, nullptr, nullptr);
    const Lanes<W> carried = s.carry * flow;
    return {{head + carried, s.damp}, {head - carried, s.damp}};
  }
}

template <int W, Form form, bool placed>
[[gnu::noinline]] Leaving<W> leaving(const Resistance<W>& r, const PipeRows<W>& rows, int i) {
  const Cost<W> cost = cost_of<W, form>(r, rows.flow[i], root_at(rows.root, i));
  return leaving_at_cost<W, form, placed>(r, rows, i, cost);
}

// What leaves two neighbouring rows, `root` being their roots.
template <int W, Form form, bool placed>
HEADBAND_INLINE void leaving_two(
    const Resistance<W>& r, const PipeRows<W>& rows, int i, Lanes<W>* roots, Leaving<W>& a, Leaving<W>& b) {
  if constexpr (W == 8 && form == Form::darcy) {  // both rows at once: one fills the waiting of the other
    Lanes<16> both;
    if (roots != nullptr) both = side_by_side(roots[0], roots[1]);
    const Cost<16> cost =
        cost_of<16, form>(r, side_by_side(rows.flow[i], rows.flow[i + 1]), roots != nullptr ? &both : nullptr);
    if (roots != nullptr) {
      roots[0] = first_eight(both);
      roots[1] = last_eight(both);
    }
    const Cost<8> first{first_eight(cost.size), first_eight(cost.loss), first_eight(cost.half)};
    const Cost<8> second{last_eight(cost.size), last_eight(cost.loss), last_eight(cost.half)};
    a = leaving_at_cost<W, form, placed>(r, rows, i, first);
    b = leaving_at_cost<W, form, placed>(r, rows, i + 1, second);
  } else {
    const Cost<W> first = cost_of<W, form>(r, rows.flow[i], roots);
    const Cost<W> second = cost_of<W, form>(r, rows.flow[i + 1], roots != nullptr ? roots + 1 : nullptr);
    a = leaving_at_cost<W, form, placed>(r, rows, i, first);
    b = leaving_at_cost<W, form, placed>(r, rows, i + 1, second);
  }
}

// The same where the row may hold a cavity: a flow on either side of it.
template <int W, Form form, bool placed>
HEADBAND_INLINE Leaving<W> leaving_cavity(const Resistance<W>& r, const PipeRows<W>& rows, int i) {
  const Lanes<W> head = rows.head[i], flow = rows.flow[i], before = rows.flow_before[i];
  const Cost<W> cost = cost_of<W, form>(r, before, root_at(rows.root, i));
  const int reach_on = i + 1 < rows.rows ? i : i - 1;
  const Wave<W> back = back_over<W, form, placed>(r, rows, i > 0 ? i - 1 : 0, head, before, cost);
  Wave<W> on = on_over<W, form, placed>(r, rows, reach_on, head, flow, cost);
  const auto same = flow == before;
  if (!all(same)) {  // else the wave is the one of a row without cavity, to the last bit
    Lanes<W>* kept = root_at(rows.root_on, i);
    Lanes<W> root = kept != nullptr ? *kept : Lanes<W>(0.0);
    const Cost<W> cost_on = cost_of<W, form>(r, flow, kept != nullptr ? &root : nullptr);
    const Wave<W> apart = on_over<W, form, placed>(r, rows, reach_on, head, flow, cost_on);
    on.head = select(same, on.head, apart.head);
    on.damp = select(same, on.damp, apart.damp);
    if (kept != nullptr) *kept = select(same, *kept, root);
  }
  return {on, back};
}

// Flow of a row where the waves meet.
template <int W>
HEADBAND_INLINE Lanes<W> meet(const Wave<W>& on, const Wave<W>& back) {
  return (on.head - back.head) / (on.damp + back.damp);
}

template <int W, bool ask>
HEADBAND_INLINE void keep_extremes(const PipeRows<W>& rows, int i, const Lanes<W>& h) {
  const Lanes<W> highest = rows.head_max[i], lowest = rows.head_min[i];
  if constexpr (W > 1 && ask) {  // most rows of most steps pass nothing that was: stores cost more than the question
    if (!any((h > highest) | (h < lowest))) return;
  }
  rows.head_max[i] = max(highest, h);
  rows.head_min[i] = min(lowest, h);
}

// The roots of three rows from `first` on, as they were: what is computed twice in a step starts from the same.
template <int W, Form form>
struct OldRoots {
  std::array<Lanes<W>, 3> root{Lanes<W>(0.0), Lanes<W>(0.0), Lanes<W>(0.0)};
  HEADBAND_INLINE void keep(const PipeRows<W>& rows, int first, int count) {
    if constexpr (form == Form::darcy)
      for (int k = 0; k < count && rows.root != nullptr; ++k) root[static_cast<std::size_t>(k)] = rows.root[first + k];
  }
  HEADBAND_INLINE void put_back(const PipeRows<W>& rows, int first, int count) const {
    if constexpr (form == Form::darcy)
      for (int k = 0; k < count && rows.root != nullptr; ++k) rows.root[first + k] = root[static_cast<std::size_t>(k)];
  }
};

template <int W, bool envelope, bool ask = true>
HEADBAND_INLINE void keep_row(const PipeRows<W>& rows, int i, const Lanes<W>& h, const Lanes<W>& q) {
  rows.head[i] = h;
  rows.flow[i] = q;
  if constexpr (envelope) keep_extremes<W, ask>(rows, i, h);
}

// Row i of quadratic friction from the wave `on` of row i - 1 and what row i + 1 sends; `on` becomes what row i + 1
// sends on. Returns false, with nothing stored, where the row falls below its limit.
template <int W, bool placed, bool limited, bool envelope>
HEADBAND_INLINE bool march_row(const Resistance<W>& r, const PipeRows<W>& rows, int i, Wave<W>& on) {
  const Cost<W> cost = cost_of<W, Form::quadratic>(r, rows.flow[i + 1], nullptr);
  const Leaving<W> next = leaving_at_cost<W, Form::quadratic, placed>(r, rows, i + 1, cost);
  const Lanes<W> q = meet(on, next.back), h = fused_less(on.head, on.damp, q);
  if constexpr (limited) {
    if (any(h < rows.vapour[i])) return false;
  }
  // these rows are done before a wrong guess of the question's answer is mended
  keep_row<W, envelope, false>(rows, i, h, q);
  on = next.on;
  return true;
}

// Rows without cavities from 1 on. Returns the first row not done, because it or its neighbour fell below its limit
// (nothing stored there), or the last row's index when all are done; `wave` is then the one on its way to that row.
template <int W, Form form, bool placed, bool limited, bool envelope>
int march_plain(const Resistance<W>& given, const PipeRows<W>& given_rows, Wave<W>& wave) {
  if constexpr (W == 8 && form == Form::quadratic && !placed && !limited) {
    if (given_rows.reaches == nullptr && !(envelope && has_512())) {
      march_halves(given, given_rows);
      return given_rows.rows - 1;
    }
  }
  const PipeRows<W> rows = given_rows;  // copies of our own, which no row can alias
  Resistance<W> own;
  if constexpr (form == Form::quadratic) {
    own.carry = given.carry;
    own.damp = given.damp;
    own.quadratic = given.quadratic;
  }
  const Resistance<W>& r = form == Form::quadratic ? own : given;
  const int last = rows.rows - 1;
  if (last < 2) return last;
  Wave<W> on1{0.0, 0.0}, on2{0.0, 0.0};
  OldRoots<W, form> old;
  int i = 0;
  if constexpr (W == 8 && form == Form::quadratic && !placed && envelope) {
    if (rows.reaches == nullptr && has_512()) {
      Arriving<8> row_before, row;
      i = march_pairs_512(r, rows, limited, row_before, row);
      if (i == last) return last;
      on1 = {row_before.head, row_before.impedance};
      on2 = {row.head, row.impedance};
    }
  }
  if (i == 0) {
    on1 = leaving<W, form, placed>(r, rows, 0).on;
    if constexpr (limited) old.keep(rows, 1, 1);
    on2 = leaving<W, form, placed>(r, rows, 1).on;
    i = 1;
  }
  if constexpr (W == 1 && !placed) {
    if (rows.reaches == nullptr && rows.rows >= least_rows_in_blocks) {
      Arriving<1> row_before{on1.head, on1.damp}, row{on2.head, on2.damp};
      i = march_blocks(given, rows, limited, row_before, row, old.root[0]);
      on1 = {row_before.head, row_before.impedance};
      on2 = {row.head, row.impedance};
    }
  }
  if constexpr (form == Form::quadratic) {
    for (; i < last; i += 2) {
      wave = on1;
      if (!march_row<W, placed, limited, envelope>(r, rows, i, on1)) return i;
      if (i + 1 == last) break;
      wave = on2;
      if (!march_row<W, placed, limited, envelope>(r, rows, i + 1, on2)) return i + 1;
    }
    return last;
  }
  if constexpr (W == 8 && form == Form::darcy && !placed) {
    if (rows.reaches == nullptr && followed_in_blocks(given, rows.root != nullptr)) {
      Arriving<8> row_before{on1.head, on1.damp}, row{on2.head, on2.damp};
      i = march_followed<8>(given, rows, limited, row_before, row, old.root[0]);
      on1 = {row_before.head, row_before.impedance};
      on2 = {row.head, row.impedance};
    }
  }
  // where a law of friction waits for its own results, two rows in one fill the waiting
  for (; i + 1 < last; i += 2) {
    OldRoots<W, form> ahead;
    if constexpr (limited) ahead.keep(rows, i + 1, 2);
    Leaving<W> a, b;
    leaving_two<W, form, placed>(r, rows, i + 1, root_at(rows.root, i + 1), a, b);
    const Lanes<W> q1 = meet(on1, a.back), q2 = meet(on2, b.back);
    const Lanes<W> h1 = fused_less(on1.head, on1.damp, q1);
    const Lanes<W> h2 = fused_less(on2.head, on2.damp, q2);
    if constexpr (limited) {
      if (any((h1 < rows.vapour[i]) | (h2 < rows.vapour[i + 1]))) {
        old.put_back(rows, i, 1);
        ahead.put_back(rows, i + 1, 2);
        wave = on1;
        return i;
      }
    }
    if constexpr (limited && form == Form::darcy) old.root[0] = ahead.root[1];
    keep_row<W, envelope>(rows, i, h1, q1);
    keep_row<W, envelope>(rows, i + 1, h2, q2);
    on1 = a.on;
    on2 = b.on;
  }
  if (i < last) {
    OldRoots<W, form> ahead;
    if constexpr (limited) ahead.keep(rows, last, 1);
    const Wave<W> back = leaving<W, form, placed>(r, rows, last).back;
    const Lanes<W> q = meet(on1, back);
    const Lanes<W> h = fused_less(on1.head, on1.damp, q);
    if constexpr (limited) {
      if (any(h < rows.vapour[i])) {
        old.put_back(rows, i, 1);
        ahead.put_back(rows, last, 1);
        wave = on1;
        return i;
      }
    }
    keep_row<W, envelope>(rows, i, h, q);
  }
  return last;
}

// One row that may hold a cavity, after the flow `q` it has without one. Returns whether it holds one in some lane.
//
// The flows on either side differ by the growth of the volume, which is integrated by the trapezoid rule. A volume that
// would be used up before the next row is filled by just the difference that uses it up: the head then stands between
// the vapour limit and that of a row without cavity, and no volume is lost or made.
template <int W, bool envelope>
HEADBAND_INLINE bool settle(const PipeRows<W>& rows,
                            int i,
                            const Wave<W>& on,
                            const Wave<W>& back,
                            Lanes<W> q,
                            const Lanes<W>& dt,
                            const Lanes<W>& per_volume,
                            CavityTally<W>& tally) {
  const Lanes<W> zero(0.0), limit = rows.vapour[i];
  Lanes<W> h = fused_less(on.head, on.damp, q);
  Lanes<W> before = q;
  const auto low = h < limit;
  const auto held = rows.volume[i] > zero;
  bool some = false;
  if (any(low | held)) {
    const Lanes<W> to_row = (on.head - limit) / on.damp;
    const Lanes<W> from_row = (limit - back.head) / back.damp;
    const Lanes<W> was = rows.flow[i] - rows.flow_before[i];
    const Lanes<W> grows = from_row - to_row;
    // what is left if nothing grows from this row on; less than rounding is nothing
    const Lanes<W> half = rows.volume[i] + 0.5 * dt * was;
    const Lanes<W> left = select(half > cavity_rounding * rows.volume[i], half, zero);
    const auto pinned = low | (held & (left + dt * grows > zero));
    const auto closing = held & !pinned & (left > zero);
    h = select(pinned, limit, h);
    before = select(pinned, to_row, before);
    q = select(pinned, from_row, q);
    if (any(closing)) {
      const Lanes<W> fills = -left / dt;
      const Lanes<W> head = limit + (fills - grows) * (on.damp * back.damp / (on.damp + back.damp));
      h = select(closing, head, h);
      before = select(closing, (on.head - head) / on.damp, before);
      q = select(closing, (head - back.head) / back.damp, q);
    }
    const Lanes<W> volume = select(pinned, max(left + 0.5 * dt * grows, zero), select(closing, 0.5 * left, zero));
    tally.allowance = select(closing, tally.allowance + max(abs(was), abs(grows)) * dt, tally.allowance);
    tally.closed = tally.closed | closing;
    rows.volume[i] = volume;
    tally.share = max(tally.share, volume * per_volume);
    some = any(volume > zero);
  }
  rows.flow_before[i] = before;
  keep_row<W, envelope>(rows, i, h, q);
  return some;
}

// Rows with cavities from `first` on. Returns whether the pipe still holds one.
template <int W, Form form, bool placed, bool envelope>
bool march_cavities(const Resistance<W>& r,
                    const PipeRows<W>& rows,
                    int first,
                    const Wave<W>& wave,
                    const Lanes<W>& dt,
                    const Lanes<W>& per_volume,
                    CavityTally<W>& tally) {
  const int last = rows.rows - 1;
  bool left = false;
  if (first >= last) return left;
  Wave<W> on = wave, on_next = leaving_cavity<W, form, placed>(r, rows, first).on;
  for (int i = first; i < last; ++i) {
    const Leaving<W> next = leaving_cavity<W, form, placed>(r, rows, i + 1);
    const bool holds = settle<W, envelope>(rows, i, on, next.back, meet(on, next.back), dt, per_volume, tally);
    left = left || holds;
    on = on_next;
    on_next = next.on;
  }
  return left;
}

template <int W, Form form, bool placed, bool envelope>
void march_form(const Resistance<W>& r,
                const PipeRows<W>& rows,
                const Lanes<W>& dt,
                const Lanes<W>& per_volume,
                bool limited,
                bool& cavities,
                CavityTally<W>& tally) {
  Wave<W> wave;
  const int last = rows.rows - 1;
  if (!cavities) {
    if (!limited) {
      march_plain<W, form, placed, false, envelope>(r, rows, wave);
      return;
    }
    const int stop = march_plain<W, form, placed, true, envelope>(r, rows, wave);
    if (stop >= last) return;
    for (int i = 0; i <= last; ++i) {
      rows.flow_before[i] = rows.flow[i];
      rows.volume[i] = Lanes<W>(0.0);
    }
    cavities = march_cavities<W, form, placed, envelope>(r, rows, stop, wave, dt, per_volume, tally);
    return;
  }
  wave = leaving_cavity<W, form, placed>(r, rows, 0).on;
  cavities = march_cavities<W, form, placed, envelope>(r, rows, 1, wave, dt, per_volume, tally);
}

// Calls `f` with the pipe's variant as compile-time constants.
template <int W, class F>
auto with_form(const Resistance<W>& r, F&& f) {
  switch (r.form) {
    case Form::darcy:
      return f.template operator()<Form::darcy>();
    case Form::power:
      return f.template operator()<Form::power>();
    case Form::quadratic:
      break;
  }
  return f.template operator()<Form::quadratic>();
}

}  // namespace

template <int W>
void march_interior(const Resistance<W>& resistance,
                    const PipeRows<W>& rows,
                    const Lanes<W>& time_step,
                    const Lanes<W>& per_section_volume,
                    bool limited,
                    bool& cavities,
                    CavityTally<W>& tally) {
  with_form(resistance, [&]<Form form>() {
    const bool envelope = rows.head_max != nullptr;
    if (rows.fitting != nullptr) {
      if (envelope) {
        march_form<W, form, true, true>(resistance, rows, time_step, per_section_volume, limited, cavities, tally);
      } else {
        march_form<W, form, true, false>(resistance, rows, time_step, per_section_volume, limited, cavities, tally);
      }
    } else if (envelope) {
      march_form<W, form, false, true>(resistance, rows, time_step, per_section_volume, limited, cavities, tally);
    } else {
      march_form<W, form, false, false>(resistance, rows, time_step, per_section_volume, limited, cavities, tally);
    }
  });
}

template <int W>
Arriving<W> arriving_at_from(const Resistance<W>& resistance, const PipeRows<W>& rows, bool cavities) {
  const Lanes<W> q = cavities ? rows.flow_before[1] : rows.flow[1];
  const Lanes<W> fitting = rows.fitting != nullptr ? rows.fitting[0] : Lanes<W>(0.0);
  const Lanes<W> longer = rows.fitting != nullptr ? rows.longer[0] : Lanes<W>(0.0);
  // from the root the row itself starts from in this step: one correction instead of a solve anew
  Lanes<W> root = rows.root != nullptr ? rows.root[1] : Lanes<W>(0.0);
  return with_form(resistance, [&]<Form form>() {
    const Sent<W> s = sent_by<W, form>(resistance, q, fitting, longer, rows.root != nullptr ? &root : nullptr);
    return Arriving<W>{rows.head[1] - s.carry * q, s.damp};
  });
}

template <int W>
Arriving<W> arriving_at_to(const Resistance<W>& resistance,
                           const PipeRows<W>& rows,
                           const base::PerLane<int, W>& reaches,
                           bool uniform) {
  Lanes<W> h(0.0), q(0.0), fitting(0.0), longer(0.0), root(0.0);
  if (uniform) {
    const int row = reaches[0] - 1;
    h = rows.head[row];
    q = rows.flow[row];
    if (rows.root != nullptr) root = rows.root[row];
    if (rows.fitting != nullptr) {
      fitting = rows.fitting[row];
      longer = rows.longer[row];
    }
  } else {
    for (int lane = 0; lane < W; ++lane) {
      const int row = reaches[static_cast<std::size_t>(lane)] - 1;
      h.set(lane, rows.head[row][lane]);
      q.set(lane, rows.flow[row][lane]);
      if (rows.root != nullptr) root.set(lane, rows.root[row][lane]);
      if (rows.fitting != nullptr) {
        fitting.set(lane, rows.fitting[row][lane]);
        longer.set(lane, rows.longer[row][lane]);
      }
    }
  }
  return with_form(resistance, [&]<Form form>() {
    const Sent<W> s = sent_by<W, form>(resistance, q, fitting, longer, rows.root != nullptr ? &root : nullptr);
    return Arriving<W>{h + s.carry * q, s.damp};
  });
}

#define HEADBAND_INTERIOR(W)                                                                                     \
  template void march_interior<W>(                                                                               \
      const Resistance<W>&, const PipeRows<W>&, const Lanes<W>&, const Lanes<W>&, bool, bool&, CavityTally<W>&); \
  template Arriving<W> arriving_at_from<W>(const Resistance<W>&, const PipeRows<W>&, bool);                      \
  template Arriving<W> arriving_at_to<W>(const Resistance<W>&, const PipeRows<W>&, const base::PerLane<int, W>&, bool);
HEADBAND_INTERIOR(1)
HEADBAND_INTERIOR(8)
#undef HEADBAND_INTERIOR

}  // namespace headband::transient
