#pragma once
// SPDX-License-Identifier: MIT
//
// The interior of a pipe for eight draws with fixed or linear friction and no vapour limit, four draws at a time: what
// two neighbouring rows need then fits the sixteen registers of 256 bits. The same operations on the same numbers as in
// interior.cpp, so the same bits.

#include "transient/line/interior.hpp"

namespace headband::transient {

/// Marches all rows between the ends; quadratic form, no fittings with a place, all lanes with `rows - 1` reaches.
void march_halves(const Resistance<8>& resistance, const PipeRows<8>& rows);

}  // namespace headband::transient
