#pragma once
// SPDX-License-Identifier: MIT
//
// Tables beside a case file: separators , ; TAB, a byte-order mark, CRLF, lines that begin with #, units in the header
// ("time [s]") or in the row under it, a decimal comma where a comment line says "# decimal comma".

#include <optional>
#include <string>
#include <string_view>
#include <vector>

namespace headband::casefile {

struct CsvColumn {
  std::string name;
  std::string unit;  ///< empty where none is stated
  std::vector<double> numbers;
};

struct CsvTable {
  std::vector<CsvColumn> columns;
  std::vector<int> row_line;  ///< line of the file each row stands in
};

/// What is wrong with a CSV text.
struct CsvProblem {
  int line = 0;        ///< of the CSV file, from 1
  std::string column;  ///< name, may be empty
  std::string what, value, bound, hint;
};

struct CsvReading {
  CsvTable table;
  std::vector<CsvProblem> problems;
};

/// Reads a table of numbers under one header.
[[nodiscard]] CsvReading read_csv(std::string_view text);

}  // namespace headband::casefile
