#pragma once
// SPDX-License-Identifier: MIT

#include "core/answers/study.hpp"

#include <map>
#include <string>

namespace headband::report {

/// The whole page: one self-contained HTML file, no request, readable without scripts. A pure function of the study.
/// @param units "si" or "us"; empty = the study's own
[[nodiscard]] std::string page(const answers::Study& study, const std::string& units = "");

/// Pictures by file name ("profile.svg", "history.svg", "density-drop.svg", …).
[[nodiscard]] std::map<std::string, std::string> pictures(const answers::Study& study, const std::string& units = "");

}  // namespace headband::report
