#pragma once
// SPDX-License-Identifier: MIT

#include <string>
#include <vector>

namespace headband::base {

/// Where something stands in a case file; 0 = not known. Columns count code points from 1.
struct SourcePlace {
  int line = 0;
  int column = 0;
  friend auto operator<=>(const SourcePlace&, const SourcePlace&) = default;
};

/// One thing that is wrong with the input, in the user's words.
struct Problem {
  SourcePlace place;
  std::string path;   ///< element and key, `pipe/main/wall`
  std::string what;   ///< what is wrong, one sentence without a full stop
  std::string value;  ///< the value seen, with its unit, as written; may be empty
  std::string bound;  ///< the bound broken or the right form, with unit; may be empty
  std::string hint;   ///< one thing to do about it; may be empty
};

using Problems = std::vector<Problem>;

}  // namespace headband::base
