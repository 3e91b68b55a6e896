#pragma once
// SPDX-License-Identifier: MIT

#include "core/answers/study.hpp"
#include "core/base/problem.hpp"

#include <map>
#include <string>

namespace headband::show {

/// The one JSON object of `--json`, SI, a newline at the end. A pure function of the study.
[[nodiscard]] std::string json(const answers::Study& study);

/// The JSON object in place of answers when the case is wrong (exit code 65); a place that is not known is null.
[[nodiscard]] std::string problems_json(const base::Problems& problems);

struct TerminalOptions {
  bool colour = false;
  bool unicode = true;
  std::string units;  ///< "si" or "us"; empty = the study's own
};

/// The terminal summary: decision, extremes (never a maximum without the minimum), limits, bands, audit, cautions.
[[nodiscard]] std::string summary(const answers::Study& study, const TerminalOptions& options);

/// CSV tables by file name ("histories.csv", "envelope.csv", "bands.csv", …): RFC 4180, SI units in the header, text
/// that a spreadsheet would take for a formula starts with a quote sign.
[[nodiscard]] std::map<std::string, std::string> csv(const answers::Study& study);

}  // namespace headband::show
