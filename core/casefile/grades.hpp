#pragma once
// SPDX-License-Identifier: MIT

#include "core/base/quantity.hpp"
#include "core/casefile/keys.hpp"

namespace headband::casefile {

/// Gives an exact value with a grade the default spread of that grade, where one is agreed for its key; its source then
/// says "default for grade B".
void apply_default_spread(base::Quantity& quantity, const KeyRule& rule);

}  // namespace headband::casefile
