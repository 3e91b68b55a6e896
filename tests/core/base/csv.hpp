#pragma once
// SPDX-License-Identifier: MIT
//
// Reference files as rows of words: comma-separated, words in double quotes may hold commas.

#include <fstream>
#include <stdexcept>
#include <string>
#include <vector>

namespace headband::test {

using Row = std::vector<std::string>;

/// Rows of a file of tests/reference/data, the heading left out.
inline std::vector<Row> reference_rows(const std::string& file) {
  std::ifstream in(std::string(HEADBAND_REFERENCE_DATA) + "/" + file);
  if (!in) throw std::runtime_error("reference file missing: " + file);
  std::vector<Row> rows;
  std::string line;
  while (std::getline(in, line)) {
    if (line.empty()) continue;
    Row row(1);
    bool quoted = false;
    for (const char c : line) {
      if (c == '"') {
        quoted = !quoted;
      } else if (c == ',' && !quoted) {
        row.emplace_back();
      } else if (c != '\r') {
        row.back() += c;
      }
    }
    rows.push_back(row);
  }
  rows.erase(rows.begin());
  return rows;
}

}  // namespace headband::test
