#pragma once
// SPDX-License-Identifier: MIT
//
// Text files of core/report/assets, embedded at build time by assets/embed.cmake.

#include <string_view>

namespace headband::report {

struct Asset {
  std::string_view text;
  std::string_view sum;  ///< "sha256-…" as a Content-Security-Policy writes it
};

extern const Asset plot_script;  ///< the vendored plot library
extern const Asset plot_style;
extern const Asset page_script;  ///< our own
extern const Asset page_style;

}  // namespace headband::report
