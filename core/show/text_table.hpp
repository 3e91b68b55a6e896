#pragma once
// SPDX-License-Identifier: MIT

#include <cstddef>
#include <string>
#include <vector>

namespace headband::show {

/// Columns of the terminal: nothing is wider.
inline constexpr std::size_t terminal_width = 100;

/// Number of characters (code points) of UTF-8 text.
[[nodiscard]] std::size_t width_of(const std::string& text);

/// `text` cut to `width` characters, the cut marked by "…".
[[nodiscard]] std::string shortened(const std::string& text, std::size_t width);

/// Text broken at blanks into lines of at most `width` characters; every line after the first starts with `indent`.
[[nodiscard]] std::string wrapped(const std::string& text, std::size_t width, const std::string& indent);

/// Plain ASCII for terminals without more: "±" as "+/-", "…" as "~", what has no such form as "?".
[[nodiscard]] std::string ascii(const std::string& text);

/// Rows of cells set under headings: the first column and those marked left run left, the rest right.
class TextTable {
 public:
  /// @param plain every cell is made ASCII before widths are measured
  explicit TextTable(std::vector<std::string> headings, bool plain = false)
      : headings_(std::move(headings)), plain_(plain) {
    left_.resize(headings_.size());
    if (!left_.empty()) left_[0] = true;
  }
  void left(std::size_t column) { left_.at(column) = true; }
  void add(std::vector<std::string> cells);
  [[nodiscard]] bool empty() const { return rows_.empty(); }
  /// Lines with a newline each, `indent` blanks in front, never over the terminal's width: the longest left columns are
  /// shortened first.
  [[nodiscard]] std::string text(std::size_t indent) const;

 private:
  [[nodiscard]] std::vector<std::size_t> widths(std::size_t indent) const;

  std::vector<std::string> headings_;
  bool plain_ = false;
  std::vector<bool> left_;
  std::vector<std::vector<std::string>> rows_;
};

}  // namespace headband::show
