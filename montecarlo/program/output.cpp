// SPDX-License-Identifier: MIT
#include "montecarlo/program/output.hpp"

#include "core/base/error.hpp"
#include "montecarlo/program/signals.hpp"

#include <fmt/format.h>

#include <fcntl.h>
#include <sys/stat.h>
#include <unistd.h>
#include <array>
#include <cerrno>
#include <cstdlib>
#include <cstring>
#include <filesystem>
#include <fstream>

namespace headband::program {
namespace {

/// Writes all of `text`; 0 or the errno of the write that failed.
int write_all(int descriptor, std::string_view text) {
  while (!text.empty()) {
    const ssize_t n = ::write(descriptor, text.data(), text.size());
    if (n < 0) {
      if (errno == EINTR) continue;
      return errno;
    }
    text.remove_prefix(static_cast<std::size_t>(n));
  }
  return 0;
}

std::string variable(const char* name) {
  const char* text = std::getenv(name);  // NOLINT(concurrency-mt-unsafe): read before any thread starts
  return text == nullptr ? "" : text;
}

std::string folder_of(const std::string& path) {
  const auto folder = std::filesystem::path(path).parent_path().string();
  return folder.empty() ? "." : folder;
}

bool carries(const std::string& path, std::string_view mark) {
  std::ifstream file(path, std::ios::binary);
  std::string head(262144, '\0');
  file.read(head.data(), static_cast<std::streamsize>(head.size()));
  head.resize(static_cast<std::size_t>(file.gcount()));
  return !mark.empty() && head.find(mark) != std::string::npos;
}

[[noreturn]] void cannot_create(const std::string& path, const std::string& why) {
  throw base::IoError(base::IoFailure::cannot_create, fmt::format("cannot create {}: {}", path, why));
}

}  // namespace

void print(std::string_view text) {
  const int error = write_all(STDOUT_FILENO, text);
  if (error != 0 && error != EPIPE && error != EBADF) {
    throw base::IoError(base::IoFailure::cannot_write,
                        fmt::format("cannot write to standard output: {}", std::strerror(error)));
  }
}

void say(std::string_view text) { static_cast<void>(write_all(STDERR_FILENO, text)); }

void remark(const Options& options, std::string_view text) {
  if (!options.quiet) say(text);
}

bool colour_wanted(const Options& options) {
  return !options.no_colour && ::isatty(STDOUT_FILENO) != 0 && variable("NO_COLOR").empty() &&
         variable("TERM") != "dumb";
}

bool unicode_wanted() {
  for (const char* name : {"LC_ALL", "LC_CTYPE", "LANG"}) {
    const std::string locale = variable(name);
    if (!locale.empty()) {
      return locale.find("UTF-8") != std::string::npos || locale.find("utf8") != std::string::npos ||
             locale.find("UTF8") != std::string::npos || locale.find("utf-8") != std::string::npos;
    }
  }
  return false;
}

void check_can_create(const std::string& path, const Replace& replace) {
  struct stat status{};
  if (::stat(path.c_str(), &status) == 0) {
    if (S_ISDIR(status.st_mode)) cannot_create(path, "it is a folder");
    if (!S_ISREG(status.st_mode) && !replace.force) cannot_create(path, "it is not an ordinary file");
    if (!replace.force) {
      if (!replace.own_name) cannot_create(path, "it exists; give -f to replace it, or another name");
      if (!carries(path, replace.mark)) {
        cannot_create(path, "it exists and is not headband's own; give -f to replace it, or --out with another name");
      }
    }
  } else if (errno != ENOENT) {
    cannot_create(path, std::strerror(errno));
  }
  const std::string folder = folder_of(path);
  if (::stat(folder.c_str(), &status) != 0)
    cannot_create(path, fmt::format("folder {}: {}", folder, std::strerror(errno)));
  if (!S_ISDIR(status.st_mode)) cannot_create(path, fmt::format("{} is not a folder", folder));
  if (::access(folder.c_str(), W_OK | X_OK) != 0)
    cannot_create(path, fmt::format("folder {}: {}", folder, std::strerror(errno)));
}

void write_text(const std::string& path, std::string_view text, const Replace& replace) {
  check_can_create(path, replace);
  const HoldSignals hold;  // no half-written file is left behind by Ctrl-C
  const std::string temporary = fmt::format("{}.tmp-{}", path, ::getpid());
  const int descriptor = ::open(temporary.c_str(), O_WRONLY | O_CREAT | O_TRUNC | O_CLOEXEC, 0666);
  if (descriptor < 0) cannot_create(path, std::strerror(errno));
  int error = write_all(descriptor, text);
  if (error == 0 && ::fsync(descriptor) != 0 && errno != EINVAL) error = errno;
  if (::close(descriptor) != 0 && error == 0) error = errno;
  if (error == 0 && ::rename(temporary.c_str(), path.c_str()) != 0) error = errno;
  if (error != 0) {
    ::unlink(temporary.c_str());
    throw base::IoError(base::IoFailure::cannot_write, fmt::format("cannot write {}: {}", path, std::strerror(error)));
  }
  const int folder = ::open(folder_of(path).c_str(), O_RDONLY | O_DIRECTORY | O_CLOEXEC);
  if (folder >= 0) {
    static_cast<void>(::fsync(folder));
    ::close(folder);
  }
}

std::string stem(const std::string& path) {
  if (path == "-") return "stdin";
  const auto name = std::filesystem::path(path).stem().string();
  return name.empty() ? "case" : name;
}

std::string file_name(const std::string& path) { return std::filesystem::path(path).filename().string(); }

}  // namespace headband::program
