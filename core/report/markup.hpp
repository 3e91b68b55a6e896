#pragma once
// SPDX-License-Identifier: MIT
//
// The few pieces of HTML the page is made of.

#include "core/report/measure.hpp"

#include <string>
#include <string_view>
#include <utility>
#include <vector>

namespace headband::report {

/// `text` safe inside elements and quoted attributes.
[[nodiscard]] std::string escaped(std::string_view text);

/// A name usable as an id and as part of a file name: letters and digits stay, a space becomes a dash, the rest "_" and
/// its code. Different texts give different names.
[[nodiscard]] std::string slug(std::string_view text);

/// Both families in one place, the style sheet shows the one that is chosen; once only when they are equal. HTML in,
/// HTML out.
[[nodiscard]] std::string both(const std::string& si, const std::string& us);

/// A paragraph of the given class; empty when there is nothing to say. HTML in, HTML out.
[[nodiscard]] std::string paragraph(const std::string& inside, std::string_view kind = {});

/// An SI number in both families.
[[nodiscard]] std::string both(double si, Shown shown, int significant = 4);

/// An SI value with its spread or bound, "11.95 ± 0.03 bar", rounded to two figures of the latter.
[[nodiscard]] std::string both_with_bound(double si, double bound, Shown shown, Shown bound_shown);

struct Column {
  std::string head;  ///< HTML
  bool number = false;
};

/// A table with caption; the first cell of each row is the row's heading. Cells are HTML. A column with nothing in it
/// but dashes is left out.
struct Table {
  std::string caption;  ///< plain text
  std::vector<Column> columns;
  std::vector<std::vector<std::string>> rows;
};

/// Empty when the table has no rows.
[[nodiscard]] std::string html(const Table& table);

/// The same, folded away behind its caption when it has more than `most` rows.
[[nodiscard]] std::string folded(const Table& table, std::size_t most);

/// Terms and their values, for identity and audit blocks. HTML values.
[[nodiscard]] std::string html(const std::vector<std::pair<std::string, std::string>>& terms);

}  // namespace headband::report
