// SPDX-License-Identifier: MIT
#include "montecarlo/program/guard.hpp"

#include "montecarlo/program/output.hpp"

#include <fmt/format.h>

#include <sys/prctl.h>
#include <sys/resource.h>
#include <sys/stat.h>
#include <sys/wait.h>
#include <unistd.h>
#include <algorithm>
#include <cerrno>
#include <cstdint>
#include <cstring>

// The checkers of addresses and threads reserve terabytes of address space for themselves.
#if defined(__SANITIZE_ADDRESS__) || defined(__SANITIZE_THREAD__)
#define HEADBAND_SANITIZED 1
#elif defined(__has_feature)
#if __has_feature(address_sanitizer) || __has_feature(thread_sanitizer)
#define HEADBAND_SANITIZED 1
#endif
#endif
#ifndef HEADBAND_SANITIZED
#define HEADBAND_SANITIZED 0
#endif

namespace headband::program {
namespace {

void limit(__rlimit_resource_t what, std::uint64_t most) {
  struct rlimit bound{};
  ::getrlimit(what, &bound);
  bound.rlim_cur = std::min<rlim_t>(most, bound.rlim_max);
  ::setrlimit(what, &bound);
}

}  // namespace

ExitCode guarded(const std::string& file, const std::function<ExitCode()>& work) {
  struct stat status{};
  const std::uint64_t size = ::stat(file.c_str(), &status) == 0 ? static_cast<std::uint64_t>(status.st_size) : 0;
  const pid_t parent = ::getpid();
  const pid_t child = ::fork();
  if (child < 0) {
    say(fmt::format("headband: cannot start the reader of {}: {}\n", file, std::strerror(errno)));
    return ExitCode::internal_error;
  }
  if (child == 0) {
    ::prctl(PR_SET_PDEATHSIG, SIGKILL);  // the reader does not outlive the program
    if (::getppid() != parent) ::_exit(static_cast<int>(ExitCode::internal_error));
    // Reading inflates, and the page holds text of the numbers: 40 times the file and 2 GiB; 60 s and 1 s per 4 MB.
    if (HEADBAND_SANITIZED == 0) limit(RLIMIT_AS, (std::uint64_t{2} << 30U) + 40 * size);
    limit(RLIMIT_CPU, 60 + size / 4'000'000);
    limit(RLIMIT_CORE, 0);
    ::_exit(static_cast<int>(work()));
  }
  int ended = 0;
  while (::waitpid(child, &ended, 0) < 0 && errno == EINTR) {
  }
  if (WIFEXITED(ended)) return static_cast<ExitCode>(WEXITSTATUS(ended));
  if (WTERMSIG(ended) == SIGINT) return ExitCode::interrupted;
  if (WTERMSIG(ended) == SIGTERM) return ExitCode::terminated;
  say(fmt::format(
      "headband: {} is damaged: reading it {}\n",
      file,
      WTERMSIG(ended) == SIGXCPU || WTERMSIG(ended) == SIGKILL ? "took more time than allowed" : "broke off"));
  return ExitCode::wrong_case;
}

void limit_memory() {
  if (HEADBAND_SANITIZED != 0) return;
  const long pages = ::sysconf(_SC_PHYS_PAGES), page = ::sysconf(_SC_PAGESIZE);
  if (pages > 0 && page > 0)
    limit(RLIMIT_AS, static_cast<std::uint64_t>(pages) * static_cast<std::uint64_t>(page) / 10 * 9);
}

}  // namespace headband::program
