// SPDX-License-Identifier: MIT
#include "transient/line/interior.hpp"

namespace headband::transient {
namespace {

// What is under way at a row: the wave from the row before, and its damping.
template <int W>
struct Wave {
  Lanes<W> head, damp;
};

// What a node with flow `q` sends over the reach.
template <int W, Form form, bool placed>
HEADBAND_INLINE Sent<W> sent_over(const Resistance<W>& r, const PipeRows<W>& rows, int reach, const Lanes<W>& q) {
  if constexpr (placed) return sent_by<W, form>(r, q, rows.fitting[reach], rows.longer[reach]);
  return sent_by<W, form>(r, q, Lanes<W>(0.0), Lanes<W>(0.0));
}

template <int W>
HEADBAND_INLINE void keep_extremes(const PipeRows<W>& rows, int i, const Lanes<W>& h) {
  rows.head_max[i] = max(rows.head_max[i], h);
  rows.head_min[i] = min(rows.head_min[i], h);
}

// Rows without cavities from 1 on. Returns the first row that fell below its limit (nothing stored there), or the last
// row's index when all are done; `wave` is then the one on its way to that row.
template <int W, Form form, bool placed, bool limited, bool envelope>
int march_plain(const Resistance<W>& r, const PipeRows<W>& rows, Wave<W>& wave_out) {
  const int last = rows.rows - 1;
  // local names: the compiler must not fear that a stored row changes them
  Lanes<W>* const heads = rows.head;
  Lanes<W>* const flows = rows.flow;
  const Lanes<W>* const limits = rows.vapour;
  Lanes<W>* const highs = rows.head_max;
  Lanes<W>* const lows = rows.head_min;
  Sent<W> s = sent_over<W, form, placed>(r, rows, 0, flows[0]);
  Wave<W> wave{heads[0] + s.carry * flows[0], s.damp};
  wave_out = wave;
  if (last < 2) return last;
  Lanes<W> head = heads[1], flow = flows[1];
  s = sent_over<W, form, placed>(r, rows, placed ? 1 : 0, flow);
  Wave<W> next{head + s.carry * flow, s.damp};
  const Lanes<W> carry = r.carry, damp = r.damp, quadratic = r.quadratic;
  for (int i = 1; i < last; ++i) {
    head = heads[i + 1];
    flow = flows[i + 1];
    Sent<W> back{carry, damp};
    if constexpr (form == Form::quadratic && !placed) {
      back.damp = damp + quadratic * abs(flow);
    } else {
      back = sent_over<W, form, placed>(r, rows, placed ? i : 0, flow);
    }
    const Lanes<W> carried = back.carry * flow;
    const Lanes<W> q = (wave.head - (head - carried)) / (wave.damp + back.damp);
    const Lanes<W> h = wave.head - wave.damp * q;
    if constexpr (limited) {
      if (any(h < limits[i])) {
        wave_out = wave;
        return i;
      }
    }
    heads[i] = h;
    flows[i] = q;
    if constexpr (envelope) {
      highs[i] = max(highs[i], h);
      lows[i] = min(lows[i], h);
    }
    wave = next;
    if constexpr (placed) {
      // the reach after row i+1 is another one than the reach before it
      const Sent<W> on = sent_over<W, form, placed>(r, rows, i + 1 < last ? i + 1 : i, flow);
      next = {head + on.carry * flow, on.damp};
    } else {
      next = {head + carried, back.damp};
    }
  }
  return last;
}

// Rows with cavities from `first` on: two flows a row. Returns whether the pipe still holds a cavity.
template <int W, Form form, bool placed, bool envelope>
bool march_cavities(const Resistance<W>& r,
                    const PipeRows<W>& rows,
                    int first,
                    Wave<W> wave,
                    const Lanes<W>& dt,
                    const Lanes<W>& per_volume,
                    CavityTally<W>& tally) {
  const int last = rows.rows - 1;
  const Lanes<W> zero(0.0);
  bool left = false;
  for (int i = first; i < last; ++i) {
    const Sent<W> back = sent_over<W, form, placed>(r, rows, i, rows.flow_before[i + 1]);
    const Lanes<W> returned = rows.head[i + 1] - back.carry * rows.flow_before[i + 1];
    const Sent<W> on = sent_over<W, form, placed>(r, rows, i, rows.flow[i]);
    const Wave<W> next{rows.head[i] + on.carry * rows.flow[i], on.damp};
    Lanes<W> q = (wave.head - returned) / (wave.damp + back.damp);
    Lanes<W> h = wave.head - wave.damp * q;
    const Lanes<W> limit = rows.vapour[i];
    const auto low = h < limit;
    const auto held = rows.volume[i] > zero;
    Lanes<W> before = q;
    if (any(low | held)) {
      const Lanes<W> to_row = (wave.head - limit) / wave.damp;
      const Lanes<W> from_row = (limit - returned) / back.damp;
      const Lanes<W> was = rows.flow[i] - rows.flow_before[i];
      const Lanes<W> grows = from_row - to_row;
      const Lanes<W> volume = rows.volume[i] + 0.5 * dt * (grows + was);
      const auto shut = held & (volume <= zero);
      const auto pinned = low | (held & !shut);
      tally.reset = select(shut, tally.reset - volume, tally.reset);
      tally.allowance = select(shut, tally.allowance + max(abs(was), abs(grows)) * dt, tally.allowance);
      tally.closed = tally.closed | shut;
      h = select(pinned, limit, h);
      before = select(pinned, to_row, q);
      q = select(pinned, from_row, q);
      rows.volume[i] = select(pinned, max(volume, zero), zero);
      tally.share = max(tally.share, rows.volume[i] * per_volume);
      left = left || any(pinned);
    }
    rows.head[i] = h;
    rows.flow[i] = q;
    rows.flow_before[i] = before;
    if constexpr (envelope) keep_extremes(rows, i, h);
    wave = next;
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
  const Sent<W> s = sent_over<W, form, placed>(r, rows, 0, rows.flow[0]);
  wave = {rows.head[0] + s.carry * rows.flow[0], s.damp};
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
  return with_form(resistance, [&]<Form form>() {
    const Sent<W> s = sent_by<W, form>(resistance, q, fitting, longer);
    return Arriving<W>{rows.head[1] - s.carry * q, s.damp};
  });
}

template <int W>
Arriving<W> arriving_at_to(const Resistance<W>& resistance,
                           const PipeRows<W>& rows,
                           const base::PerLane<int, W>& reaches,
                           bool uniform) {
  Lanes<W> h(0.0), q(0.0), fitting(0.0), longer(0.0);
  if (uniform) {
    const int row = reaches[0] - 1;
    h = rows.head[row];
    q = rows.flow[row];
    if (rows.fitting != nullptr) {
      fitting = rows.fitting[row];
      longer = rows.longer[row];
    }
  } else {
    for (int lane = 0; lane < W; ++lane) {
      const int row = reaches[static_cast<std::size_t>(lane)] - 1;
      h.set(lane, rows.head[row][lane]);
      q.set(lane, rows.flow[row][lane]);
      if (rows.fitting != nullptr) {
        fitting.set(lane, rows.fitting[row][lane]);
        longer.set(lane, rows.longer[row][lane]);
      }
    }
  }
  return with_form(resistance, [&]<Form form>() {
    const Sent<W> s = sent_by<W, form>(resistance, q, fitting, longer);
    return Arriving<W>{h + s.carry * q, s.damp};
  });
}

#define HEADBAND_INTERIOR(W)                                                                                     \
  template void march_interior<W>(const Resistance<W>&, const PipeRows<W>&, const Lanes<W>&, const Lanes<W>&,    \
                                  bool, bool&, CavityTally<W>&);                                                 \
  template Arriving<W> arriving_at_from<W>(const Resistance<W>&, const PipeRows<W>&, bool);                      \
  template Arriving<W> arriving_at_to<W>(const Resistance<W>&, const PipeRows<W>&, const base::PerLane<int, W>&, \
                                         bool);
HEADBAND_INTERIOR(1)
HEADBAND_INTERIOR(8)
#undef HEADBAND_INTERIOR

}  // namespace headband::transient
