// SPDX-License-Identifier: MIT
#include "core/casefile/read.hpp"

#include "core/base/error.hpp"
#include "core/casefile/parts.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <fstream>
#include <iostream>
#include <sstream>
#include <tuple>

namespace headband::casefile {
namespace {

constexpr std::size_t most_bytes = 16U << 20U;  // of a case file; larger tables go into CSV files

std::vector<std::string_view> lines_of(std::string_view text) {
  std::vector<std::string_view> lines;
  while (!text.empty()) {
    const std::size_t end = text.find('\n');
    std::string_view line = text.substr(0, end);
    if (line.ends_with('\r')) line.remove_suffix(1);
    lines.push_back(line);
    text.remove_prefix(end == std::string_view::npos ? text.size() : end + 1);
  }
  return lines;
}

base::Problem syntax_problem(const toml::parse_error& error) {
  std::string what(error.description());
  if (what.starts_with("Error while parsing ")) what = "while reading the " + what.substr(20);
  std::string hint = "check quotes, brackets and the equals sign on this line";
  if (what.find("redefine") != std::string::npos)
    hint = "the same key or section stands twice: leave one out, or use [[double brackets]] for a list";
  return {{static_cast<int>(error.source().begin.line), static_cast<int>(error.source().begin.column)},
          "",
          "the file is not TOML: " + what,
          "",
          "TOML 1.0",
          hint};
}

/// The place of a path, or of the nearest part of it that stands in the file.
SourcePlace place_of_path(const Context& context, std::string path) {
  while (!path.empty()) {
    const auto found = context.places.find(path);
    if (found != context.places.end()) return found->second;
    const std::size_t slash = path.rfind('/');
    if (slash == std::string::npos) break;
    path.resize(slash);
  }
  return {1, 1};
}

/// First two parts of a path: `pipe/main`.
std::string element_of(const std::string& path) {
  const std::size_t first = path.find('/');
  if (first == std::string::npos) return path;
  return path.substr(0, path.find('/', first + 1));
}

/// Problems of the pipeline, without those that only follow from a problem already told about the same element.
void add_network_problems(Context& context, base::Problems found) {
  std::set<std::string> told;
  for (const base::Problem& p : context.problems) told.insert(element_of(p.path));
  for (base::Problem& p : found) {
    if (told.contains(element_of(p.path)) || told.contains(p.path.substr(0, p.path.find('/')))) continue;
    const auto key = context.places.find(p.path);
    const bool names_a_key = std::count(p.path.begin(), p.path.end(), '/') >= 2 && key != context.places.end();
    if (names_a_key)
      p.place = key->second;
    else if (p.place.line == 0)
      p.place = place_of_path(context, p.path);
    if (p.bound.empty() && p.value.starts_with("as ")) p.bound = "the name of another value of the same kind";
    context.problems.push_back(std::move(p));
  }
}

void sort_and_thin(base::Problems& problems) {
  std::sort(problems.begin(), problems.end(), [](const base::Problem& a, const base::Problem& b) {
    return std::tie(a.place, a.path, a.what) < std::tie(b.place, b.path, b.what);
  });
  const auto same = [](const base::Problem& a, const base::Problem& b) {
    return a.place == b.place && a.what == b.what;
  };
  problems.erase(std::unique(problems.begin(), problems.end(), same), problems.end());
}

}  // namespace

Reading read_text(const std::string& file_name, const std::string& text, const std::string& folder) {
  Reading reading;
  Case& c = reading.value;
  c.file_name = file_name;
  c.text = text;
  Context context;
  context.file_name = file_name;
  context.folder = folder;
  context.lines = lines_of(text);
  if (text.size() > most_bytes) {
    reading.problems.push_back({{1, 1},
                                "",
                                "the case file is too large",
                                fmt::format("{} bytes", text.size()),
                                "at most 16 MB",
                                "put large tables into CSV files"});
    return reading;
  }
  toml::table table;
  try {
    table = toml::parse(std::string_view(text));
  } catch (const toml::parse_error& error) {
    reading.problems.push_back(syntax_problem(error));
    return reading;
  }
  Root root(context, table);
  read_frame(root, c);
  read_liquid(root, c);
  read_places(root, c);
  read_pipes(root, c);
  read_valves(root, c);
  read_pumps(root, c);
  read_protection(root, c);
  read_draw_offs(root, c);
  read_events(root, c);
  read_friction(root, c);
  read_surge(root, c);
  read_band(root, c);
  read_limits(root, c);
  read_other_verbs(root, c);
  root.finish();
  settle(context, c);
  add_network_problems(context, network::number_unknowns(c));
  if (!context.names_doubtful) add_network_problems(context, network::validate(c));
  reading.problems = std::move(context.problems);
  sort_and_thin(reading.problems);
  return reading;
}

Reading read_file(const std::string& path) {
  std::ostringstream bytes;
  if (path == "-") {
    bytes << std::cin.rdbuf();
    return read_text("standard input", bytes.str(), "");
  }
  std::ifstream in(path, std::ios::binary);
  if (!in || in.peek() == std::ifstream::traits_type::eof()) {
    if (!in || !in.eof())
      throw base::IoError(base::IoFailure::missing, fmt::format("the case file '{}' cannot be opened", path));
    in.clear();
  }
  bytes << in.rdbuf();
  const std::size_t slash = path.rfind('/');
  return read_text(slash == std::string::npos ? path : path.substr(slash + 1),
                   bytes.str(),
                   slash == std::string::npos ? "" : path.substr(0, slash));
}

std::string problems_text(const std::string& file_name, const std::string& text, const base::Problems& problems) {
  const auto lines = lines_of(text);
  std::string out;
  for (const base::Problem& p : problems) {
    out += fmt::format(
        "{}:{}:{}: {}{}{}\n", file_name, p.place.line, p.place.column, p.path, p.path.empty() ? "" : ": ", p.what);
    if (!p.value.empty()) out += fmt::format("  value: {}\n", p.value);
    if (!p.bound.empty()) out += fmt::format("  needs: {}\n", p.bound);
    if (p.place.line >= 1 && static_cast<std::size_t>(p.place.line) <= lines.size()) {
      const std::string_view line = lines[static_cast<std::size_t>(p.place.line) - 1];
      const std::string number = fmt::format("{:>5}", p.place.line);
      // The caret stands under its code point: tabs are copied, everything else becomes a space.
      std::string indent;
      int column = 1;
      for (const char c : line) {
        if ((static_cast<unsigned char>(c) & 0xC0U) == 0x80U) continue;
        if (column++ >= p.place.column) break;
        indent += c == '\t' ? '\t' : ' ';
      }
      out += fmt::format("{} | {}\n      | {}^\n", number, line, indent);
    }
    if (!p.hint.empty()) out += fmt::format("  hint: {}\n", p.hint);
  }
  return out;
}

}  // namespace headband::casefile
