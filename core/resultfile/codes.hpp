#pragma once
// SPDX-License-Identifier: MIT

#include "core/answers/study.hpp"

#include <cstdint>
#include <span>
#include <string_view>

namespace headband::resultfile {

/// One status code of the file: number and word (words without spaces, as `flag_meanings` wants them).
struct Code {
  std::int8_t number;
  std::string_view word;
};

/// Codes of answers::Verdict: the numbers are those of the enumeration.
inline constexpr Code verdict_codes[] = {{0, "ok"}, {1, "not_ok"}, {2, "cannot_tell"}, {3, "none"}};
static_assert(static_cast<int>(answers::Verdict::ok) == 0 && static_cast<int>(answers::Verdict::not_ok) == 1 &&
              static_cast<int>(answers::Verdict::cannot_tell) == 2 && static_cast<int>(answers::Verdict::none) == 3);

inline constexpr Code yes_codes[] = {{0, "no"}, {1, "yes"}};

inline constexpr Code run_codes[] = {
    {0, "finished"}, {1, "no_steady_state"}, {2, "not_finite"}, {3, "boundary_not_converged"}, {4, "grid_refused"}};

}  // namespace headband::resultfile
