// SPDX-License-Identifier: MIT
#include "core/casefile/tables.hpp"

#include "core/base/units.hpp"
#include "core/casefile/csv.hpp"
#include "core/casefile/quantity_text.hpp"

#include <fmt/format.h>

#include <fstream>
#include <sstream>

namespace headband::casefile {
namespace {

constexpr std::size_t most_bytes = 64U << 20U;  // of one CSV file
constexpr std::size_t most_rows = 1000000;

/// The bytes of a CSV beside the case; nothing with a problem reported.
std::optional<std::string> file_beside(Section& section, std::string_view key, const std::string& name) {
  if (name.empty() || name.front() == '/' || name.find("..") != std::string::npos) {
    section.report(key,
                   "a table file stands beside the case file",
                   "a file name such as \"profile.csv\"",
                   "put the file into the case's folder");
    return std::nullopt;
  }
  const std::string folder = section.context().folder;
  std::ifstream in(folder.empty() ? name : folder + "/" + name, std::ios::binary);
  if (!in) {
    section.report(key,
                   fmt::format("the table file '{}' cannot be opened", name),
                   "a CSV file beside the case file",
                   "check the name and the folder");
    return std::nullopt;
  }
  std::ostringstream bytes;
  bytes << in.rdbuf();
  std::string text = bytes.str();
  if (text.size() > most_bytes) {
    section.report(key, fmt::format("the table file '{}' is too large", name), "at most 64 MB", "thin it out");
    return std::nullopt;
  }
  return text;
}

void report_csv(Section& section, std::string_view key, const std::string& file, const CsvProblem& p) {
  const std::string where = fmt::format("{}:{}{}{}", file, p.line, p.column.empty() ? "" : ": column ", p.column);
  section.context().report(
      section.place(key), section.path(key), fmt::format("{}: {}", where, p.what), p.value, p.bound, p.hint);
}

/// Columns of the file in the order of the rules: as they stand, swapped where the units say so.
std::vector<const CsvColumn*> columns_in_order(const CsvTable& table, const std::vector<const KeyRule*>& rules) {
  std::vector<const CsvColumn*> order;
  for (const CsvColumn& column : table.columns) order.push_back(&column);
  if (order.size() < 2 || rules.size() < 2) return order;
  const auto fits = [](const CsvColumn& column, const KeyRule& rule) {
    const auto unit = base::find_unit(column.unit);
    const auto kind = base::kind_of(rule.dimension);
    return unit && kind && unit->unit.kind == *kind;
  };
  if (!fits(*order[0], *rules[0]) && fits(*order[0], *rules[1]) && fits(*order[1], *rules[0]))
    std::swap(order[0], order[1]);
  return order;
}

Quantity cell_quantity(double number, const CsvColumn& column, const KeyRule& rule, std::string& problem) {
  ParsedQuantity parsed;
  if (column.unit.empty())
    parsed = parse_number(number, fmt::format("{}", number), rule);
  else
    parsed = parse_quantity(fmt::format("{} {}", number, column.unit), rule);
  if (parsed.problem) problem = parsed.problem->what;
  return std::move(parsed.quantity);
}

void table_from_csv(Section& section,
                    std::string_view key,
                    const std::string& file,
                    const KeyRule& first,
                    const KeyRule& second,
                    network::Table& table) {
  const auto text = file_beside(section, key, file);
  if (!text) return;
  table.file = file;
  table.text = *text;
  const CsvReading reading = read_csv(*text);
  for (const CsvProblem& p : reading.problems) report_csv(section, key, file, p);
  if (!reading.problems.empty()) return;
  if (reading.table.columns.size() < 2) {
    report_csv(section, key, file, {1, "", "the table has one column", "", "two columns", "add the second column"});
    return;
  }
  const auto columns = columns_in_order(reading.table, {&first, &second});
  for (std::size_t i = 0; i < reading.table.row_line.size(); ++i) {
    std::pair<Quantity, Quantity> row;
    std::string problem;
    row.first = cell_quantity(columns[0]->numbers[i], *columns[0], first, problem);
    if (problem.empty()) row.second = cell_quantity(columns[1]->numbers[i], *columns[1], second, problem);
    const CsvColumn& column = row.first.given() ? *columns[1] : *columns[0];
    if (!problem.empty()) {
      report_csv(section,
                 key,
                 file,
                 {reading.table.row_line[i],
                  column.name,
                  problem,
                  fmt::format("{}{}{}", column.numbers[i], column.unit.empty() ? "" : " ", column.unit),
                  fmt::format("units in the header, \"{} [{}]\"",
                              column.name,
                              base::si_name(row.first.given() ? second.dimension : first.dimension)),
                  "correct the header or the row"});
      table.rows.clear();
      return;
    }
    for (Quantity* q : {&row.first, &row.second}) q->source = fmt::format("{}:{}", file, reading.table.row_line[i]);
    table.rows.push_back(std::move(row));
  }
}

void table_from_rows(Section& section,
                     std::string_view key,
                     const toml::array& rows,
                     const KeyRule& first,
                     const KeyRule& second,
                     network::Table& table) {
  if (rows.size() > most_rows) {
    section.report(key, "the table has too many rows", "at most a million", "thin it out");
    return;
  }
  bool sound = true;
  for (std::size_t i = 0; i < rows.size(); ++i) {
    const toml::array* row = rows[i].as_array();
    if (row == nullptr || row->size() != 2) {
      section.context().report(place_of(rows[i]),
                               section.path(key),
                               fmt::format("row {} of `{}` is not a pair", i + 1, key),
                               written(rows[i]),
                               fmt::format("[\"{}\", \"{}\"]", first.example, second.example),
                               "write two values in square brackets");
      sound = false;
      continue;
    }
    const std::string path = fmt::format("{} {}", section.path(key), i + 1);
    std::pair<Quantity, Quantity> values;
    values.first = read_quantity(
        section.context(), (*row)[0], first, "", path + " " + std::string(first.key.substr(first.key.find(' ') + 1)));
    values.second = read_quantity(section.context(), (*row)[1], second, "", path);
    sound = sound && (values.first.given() || !values.first.same_as.empty()) &&
            (values.second.given() || !values.second.same_as.empty());
    table.rows.push_back(std::move(values));
  }
  if (!sound) table.rows.clear();
  if (sound && rows.empty()) section.report(key, "the table has no rows", "at least two rows", "add the points");
}

}  // namespace

network::Table read_table(Section& section,
                          std::string_view key,
                          std::string_view first_key,
                          std::string_view second_key) {
  network::Table table;
  const toml::node* node = section.ask(key);
  if (node == nullptr) return table;
  table.place = place_of(*node);
  const std::string rule_section = section.rule_section();
  const KeyRule& first = key_rule(rule_section, first_key);
  const KeyRule& second = key_rule(rule_section, second_key);
  if (const auto* name = node->as_string())
    table_from_csv(section, key, name->get(), first, second, table);
  else if (const auto* rows = node->as_array())
    table_from_rows(section, key, *rows, first, second, table);
  else
    section.report(key,
                   "a table is expected here",
                   fmt::format("[[\"{}\", \"{}\"], …] or \"FILE.csv\"", first.example, second.example),
                   "write rows in square brackets, or a file name");
  int row = 0;
  for (auto& [left, right] : table.rows) {
    ++row;
    for (Quantity* q : {&left, &right}) {
      if (q->path.empty()) q->path = fmt::format("{} {}", section.path(key), row);
      if (q->place.line == 0) q->place = table.place;
    }
    right.name = fmt::format("{} {} {}", section.element(), key, row);
    left.name = fmt::format("{} {}", right.name, first_key.substr(first_key.find(' ') + 1));
  }
  return table;
}

void check_rising(Section& section, std::string_view key, network::Table& table) {
  for (std::size_t i = 1; i < table.rows.size(); ++i) {
    const auto& [left, right] = table.rows[i];
    if (left.value > table.rows[i - 1].first.value) continue;
    section.context().report(left.place,
                             left.path,
                             fmt::format("the first column of `{}` does not rise from row to row", key),
                             left.written,
                             "above " + table.rows[i - 1].first.written,
                             "sort the rows");
    table.rows.clear();
    return;
  }
  if (table.rows.size() == 1) section.report(key, "the table has one row", "at least two points", "add the others");
}

ThreeColumns read_three_columns(Section& section, std::string_view key) {
  ThreeColumns table;
  const toml::node* node = section.ask(key);
  if (node == nullptr) return table;
  if (const auto* rows = node->as_array()) {
    for (const auto& item : *rows) {
      const toml::array* row = item.as_array();
      std::vector<double> numbers;
      if (row != nullptr)
        for (const auto& cell : *row)
          if (const auto number = cell.value<double>(); number && !cell.is_string()) numbers.push_back(*number);
      if (row == nullptr || row->size() != 3 || numbers.size() != 3) {
        section.context().report(place_of(item),
                                 section.path(key),
                                 "a row of the table is not three numbers",
                                 written(item),
                                 "[angle, head, torque]",
                                 "write three numbers in square brackets");
        return {};
      }
      table.first.push_back(numbers[0]);
      table.second.push_back(numbers[1]);
      table.third.push_back(numbers[2]);
    }
    return table;
  }
  const std::string file = section.text(key);
  const auto text = file_beside(section, key, file);
  if (!text) return {};
  const CsvReading reading = read_csv(*text);
  for (const CsvProblem& p : reading.problems) report_csv(section, key, file, p);
  if (!reading.problems.empty()) return {};
  const std::size_t columns = reading.table.columns.size();
  if (columns < 3) {
    report_csv(section,
               key,
               file,
               {1,
                "",
                fmt::format("the table has {} columns", columns),
                "",
                "three columns: angle, head, torque",
                "add the missing columns"});
    return {};
  }
  const std::size_t skip = columns - 3;  // a row number may stand in front
  table.first = reading.table.columns[skip].numbers;
  table.second = reading.table.columns[skip + 1].numbers;
  table.third = reading.table.columns[skip + 2].numbers;
  table.file = file;
  table.text = *text;
  return table;
}

}  // namespace headband::casefile
