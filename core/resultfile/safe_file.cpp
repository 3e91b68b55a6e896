// SPDX-License-Identifier: MIT
#include "core/resultfile/safe_file.hpp"

#include "core/base/error.hpp"

#include <fcntl.h>
#include <sys/stat.h>
#include <unistd.h>

#include <algorithm>
#include <array>
#include <cerrno>
#include <cstdio>
#include <cstring>

namespace headband::resultfile {

namespace {

using base::IoError;
using base::IoFailure;

/// A file descriptor that is closed on every way out.
class Descriptor {
 public:
  explicit Descriptor(int number) : number_(number) {}
  ~Descriptor() {
    if (number_ >= 0) ::close(number_);
  }
  Descriptor(const Descriptor&) = delete;
  Descriptor& operator=(const Descriptor&) = delete;
  [[nodiscard]] int number() const { return number_; }
  /// Closes now, because a full disk may only show here.
  [[nodiscard]] bool close() {
    const int result = ::close(number_);
    number_ = -1;
    return result == 0;
  }

 private:
  int number_;
};

/// Removes a file unless told to keep it.
class Temporary {
 public:
  explicit Temporary(std::string path) : path_(std::move(path)) {}
  ~Temporary() {
    if (!path_.empty()) ::unlink(path_.c_str());
  }
  Temporary(const Temporary&) = delete;
  Temporary& operator=(const Temporary&) = delete;
  [[nodiscard]] const std::string& path() const { return path_; }
  void keep() { path_.clear(); }

 private:
  std::string path_;
};

[[noreturn]] void fail(IoFailure failure, const std::string& path, const std::string& doing, int error) {
  const bool create = failure == IoFailure::cannot_create;
  throw IoError(
      failure,
      path + ": cannot be " + (create ? "created" : "written") + " (" + doing + ": " + std::strerror(error) + ")");
}

std::string folder_of(const std::string& path) {
  const auto cut = path.find_last_of('/');
  if (cut == std::string::npos) return ".";
  return cut == 0 ? "/" : path.substr(0, cut);
}

int create(const std::string& path) { return ::open(path.c_str(), O_WRONLY | O_CREAT | O_EXCL | O_CLOEXEC, 0666); }

void write_all(int file, std::span<const std::byte> bytes, const std::string& target) {
  while (!bytes.empty()) {
    const ssize_t written = ::write(file, bytes.data(), bytes.size());
    if (written < 0 && errno == EINTR) continue;
    if (written < 0) fail(IoFailure::cannot_write, target, "write", errno);
    bytes = bytes.subspan(static_cast<std::size_t>(written));
  }
}

/// True where the next bytes of `file` are `bytes`.
bool next_are(int file, std::span<const std::byte> bytes) {
  std::array<std::byte, 65536> piece{};
  while (!bytes.empty()) {
    const ssize_t got = ::read(file, piece.data(), std::min(piece.size(), bytes.size()));
    if (got < 0 && errno == EINTR) continue;
    if (got <= 0 || !std::equal(piece.begin(), piece.begin() + got, bytes.begin())) return false;
    bytes = bytes.subspan(static_cast<std::size_t>(got));
  }
  return true;
}

/// True where the file holds exactly `pieces`.
bool holds(const std::string& path, const Pieces& pieces) {
  const Descriptor file(::open(path.c_str(), O_RDONLY | O_CLOEXEC));
  if (file.number() < 0) return false;
  for (const auto& piece : pieces) {
    if (!next_are(file.number(), piece)) return false;
  }
  std::byte more{};
  return ::read(file.number(), &more, 1) == 0;
}

/// Renames; without `replace` in one step that refuses an existing target, where the file system can do that.
int put_in_place(const std::string& from, const std::string& to, bool replace) {
  if (replace) return ::rename(from.c_str(), to.c_str());
  if (::renameat2(AT_FDCWD, from.c_str(), AT_FDCWD, to.c_str(), RENAME_NOREPLACE) == 0) return 0;
  return errno == EINVAL || errno == ENOSYS ? ::rename(from.c_str(), to.c_str()) : -1;
}

/// The new name must survive a power cut; file systems that cannot sync a folder say EINVAL.
void sync_folder(const std::string& path) {
  Descriptor folder(::open(folder_of(path).c_str(), O_RDONLY | O_DIRECTORY | O_CLOEXEC));
  if (folder.number() >= 0 && ::fsync(folder.number()) != 0 && errno != EINVAL) {
    fail(IoFailure::cannot_write, path, "sync of the folder", errno);
  }
}

}  // namespace

Standing standing(const std::string& path) {
  struct stat info{};
  if (::lstat(path.c_str(), &info) != 0) return Standing::nothing;
  if (S_ISLNK(info.st_mode) && ::stat(path.c_str(), &info) != 0) return Standing::something_else;
  return S_ISREG(info.st_mode) ? Standing::regular_file : Standing::something_else;
}

void write_whole(const std::string& path,
                 const Pieces& pieces,
                 bool replace,
                 const std::function<void(const std::string& temporary)>& check) {
  const std::string name = path + ".tmp-" + std::to_string(::getpid());
  int number = create(name);
  if (number < 0 && errno == EEXIST) {  // left by an earlier process of the same number that was killed
    ::unlink(name.c_str());
    number = create(name);
  }
  if (number < 0) fail(IoFailure::cannot_create, path, "temporary file beside it", errno);
  Temporary temporary(name);
  Descriptor file(number);
  for (const auto& piece : pieces) write_all(file.number(), piece, path);
  if (::fsync(file.number()) != 0) fail(IoFailure::cannot_write, path, "sync", errno);
  if (!file.close()) fail(IoFailure::cannot_write, path, "close", errno);
  if (!holds(name, pieces)) throw IoError(IoFailure::cannot_write, path + ": the disk does not hold what was written");
  check(name);
  if (put_in_place(name, path, replace) != 0) {
    fail(errno == EEXIST ? IoFailure::cannot_create : IoFailure::cannot_write, path, "rename", errno);
  }
  temporary.keep();
  sync_folder(path);
}

}  // namespace headband::resultfile
