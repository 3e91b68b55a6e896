// SPDX-License-Identifier: MIT
#include "core/resultfile/seal.hpp"

#include "core/base/hash.hpp"

#include <fcntl.h>
#include <sys/mman.h>
#include <sys/stat.h>
#include <unistd.h>

#include <string_view>

namespace headband::resultfile {

namespace {

constexpr std::string_view start = "\nheadband seal sha256 ";
constexpr std::size_t line_size = start.size() + 64 + 1;

/// The bytes of a file, mapped rather than copied: it may be large, and only its last line may be wanted.
class MappedFile {
 public:
  explicit MappedFile(const std::string& path) {
    const int file = ::open(path.c_str(), O_RDONLY | O_CLOEXEC);
    if (file < 0) return;
    struct stat info{};
    if (::fstat(file, &info) == 0 && S_ISREG(info.st_mode) && info.st_size > 0) {
      const auto size = static_cast<std::size_t>(info.st_size);
      void* memory = ::mmap(nullptr, size, PROT_READ, MAP_PRIVATE, file, 0);
      if (memory != MAP_FAILED) {
        memory_ = memory;
        size_ = size;
      }
    }
    ::close(file);
  }
  ~MappedFile() {
    if (memory_ != nullptr) ::munmap(memory_, size_);
  }
  MappedFile(const MappedFile&) = delete;
  MappedFile& operator=(const MappedFile&) = delete;

  [[nodiscard]] std::string_view bytes() const { return {static_cast<const char*>(memory_), size_}; }

 private:
  void* memory_ = nullptr;
  std::size_t size_ = 0;
};

std::string line_for(std::string_view bytes) {
  std::string line(start);
  return line.append(base::sha256_hex(bytes)).append("\n");
}

}  // namespace

std::string seal_line(std::span<const std::byte> bytes) {
  return line_for({reinterpret_cast<const char*>(bytes.data()), bytes.size()});
}

Seal check_seal(const std::string& path) {
  const MappedFile file(path);
  const std::string_view bytes = file.bytes();
  if (bytes.size() < line_size) return Seal::none;
  const std::string_view line = bytes.substr(bytes.size() - line_size);
  if (line.substr(0, start.size()) != start) return Seal::none;
  return line == line_for(bytes.substr(0, bytes.size() - line_size)) ? Seal::holds : Seal::broken;
}

}  // namespace headband::resultfile
