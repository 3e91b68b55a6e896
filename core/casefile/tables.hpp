#pragma once
// SPDX-License-Identifier: MIT
//
// Tables of a case file: arrays of rows in place, or the name of a CSV file beside the case.

#include "core/casefile/section.hpp"

#include <string>
#include <string_view>
#include <vector>

namespace headband::casefile {

/// A table of two columns under `key`. @param first,second keys of the rules of its columns
/// Names of the second column's unknowns: `ELEMENT KEY n`. Problems are reported; not given where there are any.
[[nodiscard]] network::Table read_table(Section& section,
                                        std::string_view key,
                                        std::string_view first,
                                        std::string_view second);

/// Reports a table of one row, or whose first column does not rise, and empties it.
void check_rising(Section& section, std::string_view key, network::Table& table);

/// Three plain numbers a row (no units), for a four-quadrant table.
struct ThreeColumns {
  std::vector<double> first, second, third;
  std::string file, text;
};
[[nodiscard]] ThreeColumns read_three_columns(Section& section, std::string_view key);

}  // namespace headband::casefile
