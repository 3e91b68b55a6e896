#pragma once
// SPDX-License-Identifier: MIT

#include <string>

namespace headband::program {

/// The cautions of --help, lines of at most 80 columns.
[[nodiscard]] inline std::string caution_text() {
  return "A calculation aid: the code in force and a licensed engineer decide. Ratings are\n"
         "the user's. Not modelled: slam of check valves, structures that move with the\n"
         "liquid, column filling, human error.\n";
}

}  // namespace headband::program
