#pragma once
// SPDX-License-Identifier: MIT
//
// Eight draws in one register of 512 bits, for processors that have them: the interior of a pipe with quadratic
// friction. The same operations in the same order as interior.cpp, so the same bits.

#include "transient/line/interior.hpp"

namespace headband::transient {

/// Whether this processor can run the forms below.
[[nodiscard]] bool has_512();

/// Rows without cavities from 1 on, two by two, with envelopes; quadratic friction, no fittings with a place, all lanes
/// of the same reach count. Returns the last row's index when all are done, else the first row of a pair in which a row
/// fell below its limit (nothing stored there).
/// @param limited   whether the limits are looked at
/// @param on1, on2  out: heads and damps of the waves that leave the row before the returned one, and that row itself
[[nodiscard]] int march_pairs_512(
    const Resistance<8>& r, const PipeRows<8>& rows, bool limited, Arriving<8>& on1, Arriving<8>& on2);

}  // namespace headband::transient
