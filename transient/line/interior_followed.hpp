#pragma once
// SPDX-License-Identifier: MIT
//
// The interior of a pipe whose friction follows the Reynolds number, where it is turbulent: for eight draws, or for one
// run with eight of its rows in the lanes. A law of friction is one long chain of results that wait for each other,
// quotients among them: longer than what a processor looks ahead. So a block of rows goes through the chain piece by
// piece, each piece for all rows of the block before the next. The same operations on the same numbers as in
// interior.cpp, so the same bits.

#include "transient/line/interior.hpp"

namespace headband::transient {

/// Whether the friction of a pipe is one that the blocks know. @param roots whether last roots are kept
template <int W>
[[nodiscard]] inline bool followed_in_blocks(const Resistance<W>& r, bool roots) {
  return r.form == Form::darcy && r.rule.swift && (roots || !r.rule.root_kept);
}

/// Rows without cavities from row 1 on, in blocks; no fittings with a place, all lanes of the same reach count.
/// V = 8: eight draws; V = 1: one run, whose friction stands in every lane of `r`.
/// @param limited   whether the limits are looked at
/// @param on1, on2  in: heads and damps of the waves that leave rows 0 and 1; out: the row before the returned one, and
///                  that row itself
/// @param root_before  in and out: root of the friction law at the later of these rows before this step
/// @return first row not marched: a block further on holds a row below its limit (nothing stored there), or the rest of
///         one run is less than eight rows; the last row's index when all are done
template <int V>
[[nodiscard]] int march_followed(const Resistance<8>& r,
                                 const PipeRows<V>& rows,
                                 bool limited,
                                 Arriving<V>& on1,
                                 Arriving<V>& on2,
                                 Lanes<V>& root_before);

}  // namespace headband::transient
