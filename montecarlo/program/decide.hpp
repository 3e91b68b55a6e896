#pragma once
// SPDX-License-Identifier: MIT

#include "core/answers/study.hpp"

#include <string>

namespace headband::program {

/// The sentence on top of summary and page: what was found, against which limit, and the verdict. Never a maximum
/// without the minimum, never a probability without its bound.
[[nodiscard]] std::string decision(const answers::Study& study);

}  // namespace headband::program
