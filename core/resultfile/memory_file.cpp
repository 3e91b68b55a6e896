// SPDX-License-Identifier: MIT
#include "core/resultfile/memory_file.hpp"

#include <cstdint>
#include <cstdlib>

namespace headband::resultfile {

namespace {

/// Bytes by which the file grows while it is written.
constexpr std::size_t growth = 4UL << 20U;

/// Superblock, HDF5 file format specification 3.0, section II.A, version 2: version at byte 8, size of offsets at byte
/// 9, end-of-file address (8 bytes, little-endian) at byte 28.
constexpr std::size_t version_at = 8, offset_size_at = 9, end_at = 28, superblock_size = 48;

}  // namespace

MemoryFile::~MemoryFile() { std::free(memory_); }

void* MemoryFile::allocate(std::size_t size, H5FD_file_image_op_t operation, void* self) {
  return reallocate(nullptr, size, operation, self);
}

void* MemoryFile::reallocate(void* memory, std::size_t size, H5FD_file_image_op_t /*operation*/, void* self) {
  auto* file = static_cast<MemoryFile*>(self);
  void* grown = std::realloc(memory, size);
  if (grown != nullptr) {
    file->memory_ = static_cast<std::byte*>(grown);
    file->size_ = size;
  }
  return grown;
}

herr_t MemoryFile::release(void* memory, H5FD_file_image_op_t operation, void* self) {
  auto* file = static_cast<MemoryFile*>(self);
  if (memory != file->memory_) {
    std::free(memory);
  } else {
    file->closed_ = operation == H5FD_FILE_IMAGE_OP_FILE_CLOSE;  // kept: this object frees it
  }
  return 0;
}

void* MemoryFile::copy_self(void* self) { return self; }

herr_t MemoryFile::free_self(void* /*self*/) { return 0; }

H5::FileAccPropList MemoryFile::access() {
  H5::FileAccPropList properties;
  properties.setCore(growth, false);
  H5FD_file_image_callbacks_t callbacks{};
  callbacks.image_malloc = allocate;
  callbacks.image_realloc = reallocate;
  callbacks.image_free = release;
  callbacks.udata_copy = copy_self;
  callbacks.udata_free = free_self;
  callbacks.udata = this;
  if (H5Pset_file_image_callbacks(properties.getId(), &callbacks) < 0) {
    throw H5::Exception("headband", "callbacks of a file in memory");
  }
  return properties;
}

std::span<const std::byte> MemoryFile::bytes() const {
  const auto byte = [&](std::size_t at) { return std::to_integer<std::uint64_t>(memory_[at]); };
  if (!closed_ || size_ < superblock_size || byte(offset_size_at) != 8 ||
      (byte(version_at) != 2 && byte(version_at) != 3)) {
    throw H5::Exception("headband", "no file in memory");
  }
  std::uint64_t end = 0;
  for (std::size_t i = 8; i > 0; --i) end = end << 8U | byte(end_at + i - 1);
  if (end > size_) throw H5::Exception("headband", "the file in memory is cut");
  return {memory_, static_cast<std::size_t>(end)};
}

}  // namespace headband::resultfile
