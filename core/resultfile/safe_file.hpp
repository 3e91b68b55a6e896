#pragma once
// SPDX-License-Identifier: MIT

#include <cstddef>
#include <functional>
#include <span>
#include <string>
#include <vector>

namespace headband::resultfile {

/// What stands at a path.
enum class Standing { nothing, regular_file, something_else };

[[nodiscard]] Standing standing(const std::string& path);

/// A file in pieces that follow each other.
using Pieces = std::vector<std::span<const std::byte>>;

/// Puts `pieces` at `path` whole or not at all: a temporary file beside the target, written, synced, read back and
/// compared, shown to `check`, renamed, folder synced. On any error the temporary is removed and the target untouched.
/// @param replace false: the target must not exist
/// @param check looks at the finished temporary file and throws where it is not what was meant
/// @throws base::IoError (cannot_create, cannot_write)
void write_whole(const std::string& path,
                 const Pieces& pieces,
                 bool replace,
                 const std::function<void(const std::string& temporary)>& check);

}  // namespace headband::resultfile
