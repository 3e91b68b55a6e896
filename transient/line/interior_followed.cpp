// SPDX-License-Identifier: MIT
#include "transient/line/interior_followed.hpp"

#include "transient/line/neighbours.hpp"

#include <algorithm>
#include <array>
#include <bit>

namespace headband::transient {
namespace {

/// Most eights of a block: rows of eight draws, or eights of one run's rows. What the pieces hand on to each other
/// stays close to the processor.
constexpr int most = 8;
/// Eights that hold the waves of the two rows before a block: a row each, or the end of one eight.
template <int V>
constexpr int front = V == 8 ? 2 : 1;

template <int V>
HEADBAND_INLINE Lanes<8> load(const Lanes<V>* row, int k) {
  if constexpr (V == 8) {
    return row[k];
  } else {
    return base::load_eight(static_cast<const double*>(static_cast<const void*>(row)) + 8 * k);
  }
}
template <int V>
HEADBAND_INLINE void store(const Lanes<8>& x, Lanes<V>* row, int k) {
  if constexpr (V == 8) {
    row[k] = x;
  } else {
    base::store_eight(x, static_cast<double*>(static_cast<void*>(row)) + 8 * k);
  }
}

/// Heads, flows and roots of a block before this step.
template <int V>
struct Before {
  const Lanes<V>*head, *flow, *root;
  int eights;
};

/// What the pieces hand on to each other, per eight.
template <int V>
struct Block {
  std::array<base::LogBegun<8>, most> log;
  std::array<Lanes<8>, most> root, rough, factor, half_slope, back_head;
  std::array<Lanes<8>, most> new_head, new_flow;        ///< till it is known whether a row is below its limit
  std::array<Lanes<8>, most + front<V>> on_head, damp;  ///< those of the rows before in front

  HEADBAND_INLINE void leave(int k, const Resistance<8>& r, const Cost<8>& cost, const Before<V>& was) {
    const auto at = static_cast<std::size_t>(k), behind = at + front<V>;
    const Sent<8> s = sent_over<8, Form::darcy, false>(r, cost, nullptr, nullptr);
    const Lanes<8> head = load(was.head, k), carried = s.carry * load(was.flow, k);
    on_head[behind] = head + carried;
    back_head[at] = head - carried;
    damp[behind] = s.damp;
  }
};

/// What leaves one eight by the general rule: not all turbulent, or a root too far from the last one.
template <int V>
[[gnu::noinline]] void leave_again(int k, const Resistance<8>& r, const Before<V>& was, Block<V>& b) {
  Lanes<8>& root = b.root[static_cast<std::size_t>(k)];
  if (was.root != nullptr) root = load(was.root, k);
  b.leave(k, r, cost_of<8, Form::darcy>(r, load(was.flow, k), was.root != nullptr ? &root : nullptr), was);
}

/// What leaves the eights of a block, piece by piece.
template <bool root_law, int V>
HEADBAND_INLINE void leave_block(const Resistance<8>& r, const Before<V>& was, Block<V>& b) {
  const Lanes<8> from = r.rule.all_turbulent_from;
  unsigned rare = 0;  // a bit for each eight that the pieces do not give
  for (int k = 0; k < was.eights; ++k) {
    const auto at = static_cast<std::size_t>(k);
    const Lanes<8> reynolds = abs(load(was.flow, k)) * r.reynolds;
    rare |= static_cast<unsigned>(!all(reynolds >= from)) << at;
    if constexpr (root_law) {
      const Lanes<8> rough = r.rule.rough_by_reynolds * reynolds;
      const auto begun = friction::begin_correction<8>(rough, reynolds, load(was.root, k));
      b.rough[at] = rough;
      b.root[at] = begun.x;
      b.log[at] = begun.log;
    } else {
      b.log[at] = friction::begin_haaland<8>(r.rule.rough_term, reynolds);
    }
  }
  for (int k = 0; k < was.eights; ++k) {
    const auto at = static_cast<std::size_t>(k);
    if constexpr (root_law) {
      b.log[at].s = friction::first_of_correction<8>({b.root[at], b.log[at]}, r.rule.root_shift);
    } else {
      b.log[at].s = base::finish_log(b.log[at]);
    }
  }
  if constexpr (root_law) {
    for (int k = 0; k < was.eights; ++k) {
      const auto at = static_cast<std::size_t>(k);
      const auto corrected = friction::finish_correction<8>(b.rough[at], b.root[at], b.log[at].inverse, b.log[at].s);
      b.root[at] = corrected.x;
      rare |= static_cast<unsigned>(!all(corrected.enough)) << at;
    }
    for (int k = 0; k < was.eights; ++k) {
      const auto at = static_cast<std::size_t>(k);
      const auto side = friction::colebrook_side<8>(b.rough[at], b.root[at]);
      b.factor[at] = side.factor;
      b.half_slope[at] = side.half_slope;
    }
  }
  for (int k = 0; k < was.eights; ++k) {
    const auto at = static_cast<std::size_t>(k);
    const Lanes<8> size = abs(load(was.flow, k));
    friction::Turbulent<8> side;
    if constexpr (root_law) {
      side.factor = b.factor[at];
      side.half_slope = b.half_slope[at];
    } else {
      side = friction::finish_haaland<8>(b.log[at].s, b.log[at].inverse);
    }
    b.leave(k, r, turbulent_cost<8>(r, size, side), was);
  }
  for (; rare != 0; rare &= rare - 1) leave_again(std::countr_zero(rare), r, was, b);
}

/// The wave from two rows before the one that comes back into eight `k` of a block.
struct Coming {
  Lanes<8> head, damp;
};
HEADBAND_INLINE Coming coming(const Block<8>& b, std::size_t k) { return {b.on_head[k], b.damp[k]}; }
HEADBAND_INLINE Coming coming(const Block<1>& b, std::size_t k) {
  return {two_rows_earlier(b.on_head[k].part[1], b.on_head[k + 1]), two_rows_earlier(b.damp[k].part[1], b.damp[k + 1])};
}

/// Flows and heads where the waves of a block meet; `keep` gets them eight by eight.
template <int V, class Keep>
HEADBAND_INLINE void meet_block(const Block<V>& b, int eights, Keep keep) {
  for (int k = 0; k < eights; ++k) {
    const auto at = static_cast<std::size_t>(k);
    const Coming on = coming(b, at);
    const Lanes<8> flow = (on.head - b.back_head[at]) / (on.damp + b.damp[at + front<V>]);
    keep(k, fused_less(on.head, on.damp, flow), flow);
  }
}

/// The waves that leave the two rows before a block.
HEADBAND_INLINE void put(std::array<Lanes<8>, most + 2>& to, const Lanes<8>& one, const Lanes<8>& two) {
  to[0] = one;
  to[1] = two;
}
HEADBAND_INLINE void put(std::array<Lanes<8>, most + 1>& to, const Lanes<1>& one, const Lanes<1>& two) {
  to[0] = Lanes<8>(0.0);
  to[0].part[1] = base::Quad{0.0, 0.0, one.number, two.number};
}
HEADBAND_INLINE void take(const std::array<Lanes<8>, most + 2>& from, Lanes<8>& one, Lanes<8>& two) {
  one = from[0];
  two = from[1];
}
HEADBAND_INLINE void take(const std::array<Lanes<8>, most + 1>& from, Lanes<1>& one, Lanes<1>& two) {
  one = from[0].part[1][2];
  two = from[0].part[1][3];
}

template <int V, bool root_law, bool limited, bool envelope>
int march(const Resistance<8>& given, const PipeRows<V>& rows, Arriving<V>& on1, Arriving<V>& on2, Lanes<V>& root) {
  constexpr int rows_of_eight = V == 8 ? 1 : 8;
  const Resistance<8> r = given;  // a copy of our own, which no row can alias
  const int last = rows.rows - 1;
  Block<V> b;
  put(b.on_head, on1.head, on2.head);
  put(b.damp, on1.impedance, on2.impedance);
  int i = 1;
  while (true) {
    const int eights = std::min(most, (last - i) / rows_of_eight), ahead = i + 1;
    if (eights <= 0) break;
    leave_block<root_law, V>(
        r, {rows.head + ahead, rows.flow + ahead, root_law ? rows.root + ahead : nullptr, eights}, b);
    const auto keep_row = [&](int k, const Lanes<8>& head, const Lanes<8>& flow) __attribute__((always_inline)) {
      store(head, rows.head + i, k);
      store(flow, rows.flow + i, k);
      if constexpr (envelope) {
        store(max(load(rows.head_max + i, k), head), rows.head_max + i, k);
        store(min(load(rows.head_min + i, k), head), rows.head_min + i, k);
      }
    };
    if constexpr (limited) {
      auto low = Lanes<8>(1.0) < Lanes<8>(0.0);
      meet_block(b, eights, [&](int k, const Lanes<8>& head, const Lanes<8>& flow) __attribute__((always_inline)) {
        low = low | (head < load(rows.vapour + i, k));
        b.new_head[static_cast<std::size_t>(k)] = head;
        b.new_flow[static_cast<std::size_t>(k)] = flow;
      });
      if (any(low)) break;
      for (int k = 0; k < eights; ++k)
        keep_row(k, b.new_head[static_cast<std::size_t>(k)], b.new_flow[static_cast<std::size_t>(k)]);
    } else {
      meet_block(b, eights, keep_row);
    }
    if constexpr (root_law) {
      root = rows.root[ahead + rows_of_eight * eights - 1];
      for (int k = 0; k < eights; ++k) store(b.root[static_cast<std::size_t>(k)], rows.root + ahead, k);
    }
    for (std::size_t k = 0; k < front<V>; ++k) {
      b.on_head[k] = b.on_head[k + static_cast<std::size_t>(eights)];
      b.damp[k] = b.damp[k + static_cast<std::size_t>(eights)];
    }
    i += rows_of_eight * eights;
  }
  take(b.on_head, on1.head, on2.head);
  take(b.damp, on1.impedance, on2.impedance);
  return i;
}

template <int V, bool root_law>
int march(
    const Resistance<8>& r, const PipeRows<V>& rows, bool limited, Arriving<V>& on1, Arriving<V>& on2, Lanes<V>& root) {
  const bool envelope = rows.head_max != nullptr;
  if (limited)
    return envelope ? march<V, root_law, true, true>(r, rows, on1, on2, root)
                    : march<V, root_law, true, false>(r, rows, on1, on2, root);
  return envelope ? march<V, root_law, false, true>(r, rows, on1, on2, root)
                  : march<V, root_law, false, false>(r, rows, on1, on2, root);
}

}  // namespace

template <int V>
int march_followed(const Resistance<8>& r,
                   const PipeRows<V>& rows,
                   bool limited,
                   Arriving<V>& on1,
                   Arriving<V>& on2,
                   Lanes<V>& root_before) {
  return r.rule.law == friction::FrictionLaw::haaland ? march<V, false>(r, rows, limited, on1, on2, root_before)
                                                      : march<V, true>(r, rows, limited, on1, on2, root_before);
}

template int march_followed<1>(const Resistance<8>&, const PipeRows<1>&, bool, Arriving<1>&, Arriving<1>&, Lanes<1>&);
template int march_followed<8>(const Resistance<8>&, const PipeRows<8>&, bool, Arriving<8>&, Arriving<8>&, Lanes<8>&);

}  // namespace headband::transient
