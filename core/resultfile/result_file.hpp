#pragma once
// SPDX-License-Identifier: MIT

#include "core/answers/study.hpp"

#include <string>

namespace headband::resultfile {

struct WriteOptions {
  bool replace = false;  ///< replace any existing file; otherwise only one that headband named and marked itself
  bool own_name = true;  ///< the name is headband's default, not the user's `--out`
};

/// Writes the whole study or nothing: temporary file beside the target, explicit closes, re-open and check, fsync,
/// rename.
/// @throws base::IoError (cannot_create, cannot_write)
void write(const answers::Study& study, const std::string& path, const WriteOptions& options);

/// Reads a result back. `show::json` of what comes back equals that of what was written, byte for byte.
/// @throws base::IoError (missing, damaged)
[[nodiscard]] answers::Study read(const std::string& path);

}  // namespace headband::resultfile
