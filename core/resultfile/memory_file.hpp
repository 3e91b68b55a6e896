#pragma once
// SPDX-License-Identifier: MIT

#include <H5Cpp.h>

#include <cstddef>
#include <span>

namespace headband::resultfile {

/// An HDF5 file that takes shape in memory and stays there, ready to be written by plain calls, when the library has
/// closed it.
///
/// A full disk then meets `write` calls whose errors are all seen. (The library, met by one at close, keeps a file it
/// can neither write nor close.) The image comes from the closed file, because the one asked of an open file carries a
/// superblock whose checksum does not hold (seen with 1.10.8).
class MemoryFile {
 public:
  MemoryFile() = default;
  ~MemoryFile();
  MemoryFile(const MemoryFile&) = delete;
  MemoryFile& operator=(const MemoryFile&) = delete;

  /// How to create the file; this object must outlive it.
  [[nodiscard]] H5::FileAccPropList access();

  /// The whole file; only after the library closed it. @throws H5::Exception where that did not go well
  [[nodiscard]] std::span<const std::byte> bytes() const;

 private:
  static void* allocate(std::size_t size, H5FD_file_image_op_t operation, void* self);
  static void* reallocate(void* memory, std::size_t size, H5FD_file_image_op_t operation, void* self);
  static herr_t release(void* memory, H5FD_file_image_op_t operation, void* self);
  static void* copy_self(void* self);
  static herr_t free_self(void* self);

  std::byte* memory_ = nullptr;
  std::size_t size_ = 0;
  bool closed_ = false;
};

}  // namespace headband::resultfile
