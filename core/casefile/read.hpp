#pragma once
// SPDX-License-Identifier: MIT

#include "core/answers/study.hpp"
#include "core/network/case.hpp"

#include <string>
#include <vector>

namespace headband::casefile {

/// What came of reading a case: the case, or everything that is wrong with it (sorted by place).
struct Reading {
  network::Case value;
  base::Problems problems;  ///< empty: `value` is usable and validated
};

/// Reads a case from TOML text.
/// @param file_name as shown in messages and kept in the case, without folder
/// @param folder where CSV files named by the case are looked for
[[nodiscard]] Reading read_text(const std::string& file_name, const std::string& text, const std::string& folder);

/// Reads `path` ("-" = standard input). @throws base::IoError when it cannot be opened
[[nodiscard]] Reading read_file(const std::string& path);

/// Every value as understood, in file order, in both unit families.
[[nodiscard]] std::vector<answers::ValueEcho> echo(const network::Case& c);

/// Problems as the user reads them: FILE:LINE:COLUMN: what, value, bound, the source line with a caret, hint.
[[nodiscard]] std::string problems_text(const std::string& file_name,
                                        const std::string& text,
                                        const base::Problems& problems);

/// What this version cannot compute for `verb` although the case asks for it ("not computed yet by this version").
/// @param verb "flow", "surge", "band", "band --surge"
[[nodiscard]] base::Problems refused_by_verb(const network::Case& c, const std::string& verb);

/// The case as a plain one: each uncertain value is the number it has at `scores` (one per unknown, empty = central
/// run), each choice settled, SI units, shortest digits that give the same bits when read again. Bands are left out.
/// @param note added to the note of the case ("draw 17 of …")
[[nodiscard]] std::string write_case(const network::Case& c,
                                     const std::vector<double>& scores,
                                     const std::string& note);

/// Starter case of `new KIND` (valve, trip, oil, ageing, ring); empty when the kind is unknown.
[[nodiscard]] std::string starter(const std::string& kind);
[[nodiscard]] std::vector<std::string> starter_kinds();

}  // namespace headband::casefile
