#pragma once
// SPDX-License-Identifier: MIT

#include "montecarlo/program/options.hpp"

#include <string>
#include <string_view>

namespace headband::program {

/// Prints a result on standard output. A reader that has gone away is no error: nothing more is printed.
/// @throws base::IoError (cannot_write) when the output exists but takes no more, as on a full disk
void print(std::string_view text);

/// Says something on standard error; failures are ignored, there is nowhere left to say them.
void say(std::string_view text);

/// A remark on standard error unless --quiet.
void remark(const Options& options, std::string_view text);

/// True when results may be coloured: a terminal, no --no-color, NO_COLOR empty, TERM not "dumb".
[[nodiscard]] bool colour_wanted(const Options& options);

/// True when the locale speaks UTF-8.
[[nodiscard]] bool unicode_wanted();

/// What may become of a file that already exists.
struct Replace {
  bool force = false;     ///< -f: replace whatever it is
  bool own_name = true;   ///< the name is headband's own; then a file that carries `mark` is replaced
  std::string_view mark;  ///< text in the first 256 KiB by which headband knows its own; empty: it knows none
};

/// How headband knows a page or a result file of its own.
inline constexpr std::string_view page_mark = " headband</title>";
inline constexpr std::string_view result_mark = "headband-results";

/// Looks whether `path` could be written later, before anything is computed.
/// @throws base::IoError (cannot_create)
void check_can_create(const std::string& path, const Replace& replace);

/// Writes a text file whole or not at all: temporary name beside it, fsync, rename.
/// @throws base::IoError (cannot_create, cannot_write)
void write_text(const std::string& path, std::string_view text, const Replace& replace);

/// Name without folder and without the last ending; "stdin" for "-".
[[nodiscard]] std::string stem(const std::string& path);

/// Name without folder.
[[nodiscard]] std::string file_name(const std::string& path);

}  // namespace headband::program
