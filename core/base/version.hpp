#pragma once
// SPDX-License-Identifier: MIT
//
// Who made a result: the version (held by the top CMakeLists.txt alone), the commit, and how it was compiled.

#include <string>

namespace headband::base {

[[nodiscard]] std::string version();  ///< "0.1.0"
[[nodiscard]] std::string commit();   ///< abbreviated git commit, "+changes" where files differ; "unknown" outside git
[[nodiscard]] std::string build_kind();  ///< "Release", "Debug", …
[[nodiscard]] std::string compiler();    ///< "GNU 12.2.0"
[[nodiscard]] std::string flags();       ///< those that decide the numbers, without paths
[[nodiscard]] std::string libraries();   ///< "Boost 1.74.0, Eigen 3.4.0, …"

}  // namespace headband::base
