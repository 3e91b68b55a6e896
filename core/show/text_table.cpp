// SPDX-License-Identifier: MIT
#include "core/show/text_table.hpp"

#include <algorithm>
#include <array>
#include <numeric>
#include <string_view>
#include <utility>

namespace headband::show {

namespace {

constexpr std::size_t gap = 2;             ///< blanks between columns
constexpr std::size_t narrowest_name = 8;  ///< a name keeps at least this many characters

bool continues(char c) { return (static_cast<unsigned char>(c) & 0xC0U) == 0x80U; }

/// Bytes of the first `count` characters.
std::size_t bytes_of(const std::string& text, std::size_t count) {
  std::size_t at = 0;
  for (; at < text.size(); ++at) {
    if (continues(text[at])) continue;
    if (count == 0) break;
    --count;
  }
  return at;
}

constexpr std::array<std::pair<std::string_view, std::string_view>, 14> plain_forms = {{{"±", "+/-"},
                                                                                        {"…", "~"},
                                                                                        {"─", "-"},
                                                                                        {"–", "-"},
                                                                                        {"—", "-"},
                                                                                        {"×", "x"},
                                                                                        {"·", "."},
                                                                                        {"²", "2"},
                                                                                        {"³", "3"},
                                                                                        {"°", "deg "},
                                                                                        {"“", "\""},
                                                                                        {"”", "\""},
                                                                                        {"’", "'"},
                                                                                        {"→", "->"}}};

}  // namespace

std::size_t width_of(const std::string& text) {
  return static_cast<std::size_t>(std::count_if(text.begin(), text.end(), [](char c) { return !continues(c); }));
}

std::string shortened(const std::string& text, std::size_t width) {
  if (width_of(text) <= width || width == 0) return text;
  return text.substr(0, bytes_of(text, width - 1)).append("…");
}

std::string wrapped(const std::string& text, std::size_t width, const std::string& indent) {
  std::string out;
  std::size_t line = 0;
  const auto put = [&](std::string word) {
    // A word longer than a line is cut: nothing may run out of the terminal.
    word = shortened(word, width - width_of(indent));
    const std::size_t length = width_of(word);
    if (line > 0 && line + 1 + length > width) {
      out.append("\n").append(indent);
      line = width_of(indent);
    } else if (line > 0) {
      out += ' ';
      ++line;
    }
    out += word;
    line += length;
  };
  std::string word;
  for (const char c : text) {
    if (c != ' ' && c != '\n' && c != '\t') {
      word += c;
    } else if (!word.empty()) {
      put(std::exchange(word, {}));
    }
  }
  if (!word.empty()) put(word);
  return out;
}

std::string ascii(const std::string& text) {
  std::string out;
  for (std::size_t i = 0; i < text.size();) {
    if (static_cast<unsigned char>(text[i]) < 0x80U) {
      out += text[i++];
      continue;
    }
    const std::string_view rest = std::string_view(text).substr(i);
    const auto known = std::find_if(plain_forms.begin(), plain_forms.end(), [&](const auto& form) {
      return rest.substr(0, form.first.size()) == form.first;
    });
    out += known == plain_forms.end() ? std::string_view("?") : known->second;
    do {
      ++i;
    } while (i < text.size() && continues(text[i]));
  }
  return out;
}

void TextTable::add(std::vector<std::string> cells) {
  cells.resize(headings_.size());
  if (plain_) std::transform(cells.begin(), cells.end(), cells.begin(), ascii);
  rows_.push_back(std::move(cells));
}

std::vector<std::size_t> TextTable::widths(std::size_t indent) const {
  std::vector<std::size_t> widths;
  for (std::size_t j = 0; j < headings_.size(); ++j) {
    std::size_t width = width_of(headings_[j]);
    for (const auto& row : rows_) width = std::max(width, width_of(row[j]));
    widths.push_back(width);
  }
  std::size_t total = std::accumulate(widths.begin(), widths.end(), indent + gap * (widths.size() - 1));
  while (total > terminal_width) {
    std::size_t longest = widths.size();
    for (std::size_t j = 0; j < widths.size(); ++j) {
      if (left_[j] && widths[j] > narrowest_name && (longest == widths.size() || widths[j] > widths[longest]))
        longest = j;
    }
    if (longest == widths.size()) break;
    --widths[longest];
    --total;
  }
  return widths;
}

std::string TextTable::text(std::size_t indent) const {
  const std::vector<std::size_t> room = widths(indent);
  std::string out;
  const auto line = [&](const std::vector<std::string>& cells) {
    std::string built(indent, ' ');
    for (std::size_t j = 0; j < cells.size(); ++j) {
      const std::string cell = left_[j] ? shortened(cells[j], room[j]) : cells[j];
      const std::string blanks(room[j] - std::min(room[j], width_of(cell)), ' ');
      if (j > 0) built.append(gap, ' ');
      built += left_[j] ? cell + blanks : blanks + cell;
    }
    built.erase(built.find_last_not_of(' ') + 1);
    out += shortened(built, terminal_width) + '\n';
  };
  line(headings_);
  for (const auto& row : rows_) line(row);
  return out;
}

}  // namespace headband::show
