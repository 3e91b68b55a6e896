#pragma once
// SPDX-License-Identifier: MIT
//
// One run alone: no other draws fill a register, so eight of its rows stand in the lanes instead. The same operations
// on the same numbers as row by row (interior.cpp), so the same bits.

#include "transient/line/interior.hpp"

namespace headband::transient {

/// Fewest rows of a pipe, ends included, at which a block of eight is marched.
inline constexpr int least_rows_in_blocks = 10;

/// Rows without cavities from row 1 on, in blocks of eight; no fittings with a place.
/// @param limited    whether the limits are looked at
/// @param on1, on2   in: heads and damps of the waves that leave rows 0 and 1; out: the row before the returned one,
/// and
///                   that row itself
/// @param root_before  in and out: root of the friction law at the later of these rows before this step
/// @return first row not marched (odd): a block further on holds a row below its limit (nothing stored there), or the
///         rest is no block
[[nodiscard]] int march_blocks(const Resistance<1>& r,
                               const PipeRows<1>& rows,
                               bool limited,
                               Arriving<1>& on1,
                               Arriving<1>& on2,
                               Lanes<1>& root_before);

}  // namespace headband::transient
