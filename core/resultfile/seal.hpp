#pragma once
// SPDX-License-Identifier: MIT

#include <cstddef>
#include <span>
#include <string>

namespace headband::resultfile {

/// What the last bytes of a file say about the bytes before them.
enum class Seal { none, holds, broken };

/// Last line of a result file, after the end that HDF5 knows of: SHA-256 of all bytes before it.
///
/// HDF5's own checksums cover its tables and large data, not texts, attributes and small data, and its reader can be
/// taken down by a flipped bit; the seal shows such damage before the library sees the file. A program that changes the
/// file through HDF5 drops the line, and the file is read without it.
[[nodiscard]] std::string seal_line(std::span<const std::byte> bytes);

/// Checks the seal of the file at `path`; `none` where it has no such line or cannot be read.
[[nodiscard]] Seal check_seal(const std::string& path);

}  // namespace headband::resultfile
