// SPDX-License-Identifier: MIT
#include "core/casefile/csv.hpp"

#include <fmt/format.h>

#include <charconv>
#include <cmath>

namespace headband::casefile {
namespace {

struct Line {
  int number;
  std::string_view text;
};

std::string_view trimmed(std::string_view text) {
  while (!text.empty() && (text.front() == ' ' || text.front() == '\t')) text.remove_prefix(1);
  while (!text.empty() && (text.back() == ' ' || text.back() == '\t' || text.back() == '\r')) text.remove_suffix(1);
  return text;
}

std::vector<Line> lines_of(std::string_view text, bool& decimal_comma) {
  if (text.starts_with("\xEF\xBB\xBF")) text.remove_prefix(3);
  std::vector<Line> lines;
  int number = 0;
  while (!text.empty()) {
    const std::size_t end = text.find('\n');
    std::string_view line = text.substr(0, end);
    text.remove_prefix(end == std::string_view::npos ? text.size() : end + 1);
    ++number;
    if (line.ends_with('\r')) line.remove_suffix(1);
    const std::string_view bare = trimmed(line);
    if (bare.empty()) continue;
    if (bare.front() == '#') {
      if (bare.find("decimal comma") != std::string_view::npos) decimal_comma = true;
      continue;
    }
    lines.push_back({number, line});
  }
  return lines;
}

char separator_of(std::string_view header, bool decimal_comma) {
  if (header.find(';') != std::string_view::npos) return ';';
  if (header.find('\t') != std::string_view::npos) return '\t';
  return decimal_comma ? ';' : ',';
}

std::vector<std::string> cells_of(std::string_view line, char separator) {
  std::vector<std::string> cells;
  std::string cell;
  bool quoted = false;
  for (std::size_t i = 0; i < line.size(); ++i) {
    const char c = line[i];
    if (c == '"') {
      if (quoted && i + 1 < line.size() && line[i + 1] == '"') {
        cell += '"';
        ++i;
      } else {
        quoted = !quoted;
      }
    } else if (c == separator && !quoted) {
      cells.emplace_back(trimmed(cell));
      cell.clear();
    } else {
      cell += c;
    }
  }
  cells.emplace_back(trimmed(cell));
  return cells;
}

std::optional<double> number_in(std::string cell, bool decimal_comma) {
  if (decimal_comma)
    for (char& c : cell)
      if (c == ',') c = '.';
  if (cell.starts_with('+')) cell.erase(0, 1);
  double value = 0.0;
  const auto [end, error] = std::from_chars(cell.data(), cell.data() + cell.size(), value);
  if (error != std::errc() || end != cell.data() + cell.size() || !std::isfinite(value)) return std::nullopt;
  return value;
}

// "time [s]" or "time (s)" → name and unit
void split_header(const std::string& cell, CsvColumn& column) {
  for (const auto& [open, close] : {std::pair{'[', ']'}, {'(', ')'}}) {
    const std::size_t begin = cell.rfind(open);
    if (begin == std::string::npos || !cell.ends_with(close)) continue;
    column.name = trimmed(std::string_view(cell).substr(0, begin));
    column.unit = trimmed(std::string_view(cell).substr(begin + 1, cell.size() - begin - 2));
    return;
  }
  column.name = cell;
}

void read_row(const Line& line, const std::vector<std::string>& cells, bool decimal_comma, CsvReading& reading) {
  auto& columns = reading.table.columns;
  if (cells.size() != columns.size()) {
    reading.problems.push_back({line.number,
                                "",
                                fmt::format("the row has {} cells", cells.size()),
                                std::string(trimmed(line.text)),
                                fmt::format("{} cells, as the header", columns.size()),
                                "check the separator; a decimal comma is declared by a line \"# decimal comma\""});
    return;
  }
  std::vector<double> numbers;
  for (std::size_t i = 0; i < cells.size(); ++i) {
    const auto number = number_in(cells[i], decimal_comma);
    if (!number) {
      const bool comma = cells[i].find(',') != std::string::npos;
      reading.problems.push_back({line.number,
                                  columns[i].name,
                                  cells[i].empty() ? "the cell is empty" : "the cell is not a finite number",
                                  cells[i],
                                  "a number such as 12.5",
                                  comma ? "declare a decimal comma by a line \"# decimal comma\""
                                        : "write the number alone; units stand in the header"});
      return;
    }
    numbers.push_back(*number);
  }
  for (std::size_t i = 0; i < cells.size(); ++i) columns[i].numbers.push_back(numbers[i]);
  reading.table.row_line.push_back(line.number);
}

}  // namespace

CsvReading read_csv(std::string_view text) {
  CsvReading reading;
  bool decimal_comma = false;
  const std::vector<Line> lines = lines_of(text, decimal_comma);
  if (lines.empty()) {
    reading.problems.push_back({1,
                                "",
                                "the table is empty",
                                "",
                                "a header line and rows of numbers",
                                "write a header such as \"time [s], level [m]\""});
    return reading;
  }
  const char separator = separator_of(lines.front().text, decimal_comma);
  bool headless = true;
  for (const std::string& cell : cells_of(lines.front().text, separator)) {
    CsvColumn column;
    split_header(cell, column);
    if (!number_in(cell, decimal_comma)) headless = false;
    reading.table.columns.push_back(std::move(column));
  }
  if (headless) {
    reading.problems.push_back({lines.front().number,
                                "",
                                "the header is missing",
                                std::string(trimmed(lines.front().text)),
                                "names with units, \"time [s], level [m]\"",
                                "add a header line above the numbers"});
    return reading;
  }
  std::size_t first = 1;
  // A second row without any number holds the units.
  if (lines.size() > 1) {
    const auto cells = cells_of(lines[1].text, separator);
    bool units = cells.size() == reading.table.columns.size();
    for (const std::string& cell : cells) units = units && !number_in(cell, decimal_comma);
    if (units) {
      for (std::size_t i = 0; i < cells.size(); ++i) {
        std::string unit = cells[i];
        if (unit.size() > 1 && unit.front() == '[' && unit.back() == ']') unit = unit.substr(1, unit.size() - 2);
        if (!unit.empty()) reading.table.columns[i].unit = unit;
      }
      first = 2;
    }
  }
  for (std::size_t i = first; i < lines.size(); ++i)
    read_row(lines[i], cells_of(lines[i].text, separator), decimal_comma, reading);
  if (reading.problems.empty() && reading.table.row_line.empty())
    reading.problems.push_back(
        {lines.back().number, "", "the table has no rows", "", "at least two rows of numbers", "add the numbers"});
  return reading;
}

}  // namespace headband::casefile
