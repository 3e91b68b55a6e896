// SPDX-License-Identifier: MIT
//
// A full disk must be told and leave nothing: by a limit on file sizes, which works everywhere, and on a small file
// system in memory, where one may be mounted.
#include "core/resultfile/safe_file.hpp"

#include "core/base/error.hpp"
#include "core/resultfile/result_file.hpp"
#include "tests/support/sample_study.hpp"
#include "tests/support/scratch_folder.hpp"

#include <gtest/gtest.h>
#include <sched.h>
#include <sys/mount.h>
#include <sys/resource.h>
#include <sys/wait.h>
#include <unistd.h>

#include <csignal>
#include <cstring>
#include <filesystem>
#include <fstream>
#include <functional>
#include <span>
#include <stdexcept>
#include <string>
#include <string_view>

namespace headband::resultfile {
namespace {

using base::IoError;
using base::IoFailure;
using support::bytes_of;
using support::ScratchFolder;

/// A text as one piece without a final zero byte.
Pieces bytes(std::string_view text) { return {std::as_bytes(std::span(text))}; }

void no_check(const std::string& /*temporary*/) {}

/// Runs `action` in a process of its own and returns its exit code.
int exit_code_of(const std::function<int()>& action) {
  const pid_t child = ::fork();
  if (child == 0) {
    int code = 99;
    try {
      code = action();
    } catch (...) {
      code = 98;
    }
    ::_exit(code);
  }
  int status = 0;
  ::waitpid(child, &status, 0);
  return WIFEXITED(status) ? WEXITSTATUS(status) : -1;
}

constexpr int told = 0, wrong_failure = 1, not_told = 2, not_possible = 3, something_left = 4;

/// Writes the sample study to `path` where there is no room; 0 when that is told as cannot_write and nothing is left.
int write_without_room(const std::string& path) {
  try {
    write(support::sample_study(), path, {});
  } catch (const IoError& e) {
    if (e.failure() != IoFailure::cannot_write) return wrong_failure;
    const auto folder = std::filesystem::path(path).parent_path();
    return std::filesystem::is_empty(folder) ? told : something_left;
  }
  return not_told;
}

TEST(SafeFile, WritesWholeFilesAndOnlyThem) {
  const ScratchFolder folder;
  const std::string text(300000, 'x');
  std::string seen;
  write_whole(folder / "a", bytes(text), false, [&](const std::string& temporary) { seen = bytes_of(temporary); });
  EXPECT_EQ(seen, text);
  EXPECT_EQ(bytes_of(folder / "a"), text);
  write_whole(folder / "a", bytes("short"), true, no_check);
  EXPECT_EQ(bytes_of(folder / "a"), "short");
  EXPECT_EQ(std::distance(std::filesystem::directory_iterator(folder.path()), {}), 1);
}

TEST(SafeFile, AFileThatAppearsMeanwhileIsNotReplaced) {
  const ScratchFolder folder;
  const std::string path = folder / "a";
  const auto another_process_writes = [&](const std::string&) { std::ofstream(path) << "theirs"; };
  EXPECT_THROW(write_whole(path, bytes("ours"), false, another_process_writes), IoError);
  EXPECT_EQ(bytes_of(path), "theirs");
  EXPECT_EQ(std::distance(std::filesystem::directory_iterator(folder.path()), {}), 1);
}

TEST(SafeFile, AFailedCheckLeavesTheOldFile) {
  const ScratchFolder folder;
  const std::string path = folder / "a";
  std::ofstream(path) << "old";
  const auto refuse = [](const std::string&) { throw std::runtime_error("not what was meant"); };
  EXPECT_THROW(write_whole(path, bytes("new"), true, refuse), std::runtime_error);
  EXPECT_EQ(bytes_of(path), "old");
  EXPECT_EQ(std::distance(std::filesystem::directory_iterator(folder.path()), {}), 1);
}

TEST(SafeFile, ALeftOverOfADeadProcessIsNoObstacle) {
  const ScratchFolder folder;
  std::ofstream(folder / ("a.tmp-" + std::to_string(::getpid()))) << "left over";
  write_whole(folder / "a", bytes("new"), false, no_check);
  EXPECT_EQ(std::distance(std::filesystem::directory_iterator(folder.path()), {}), 1);
}

TEST(SafeFile, TellsWhatStandsAtAPath) {
  const ScratchFolder folder;
  EXPECT_EQ(standing(folder / "none"), Standing::nothing);
  EXPECT_EQ(standing(folder.path()), Standing::something_else);
  std::ofstream(folder / "file") << "x";
  EXPECT_EQ(standing(folder / "file"), Standing::regular_file);
  std::filesystem::create_symlink("nowhere", folder / "dangling");
  EXPECT_EQ(standing(folder / "dangling"), Standing::something_else);
}

TEST(SafeFile, AFileThatMayNotGrowIsToldAndLeavesNothing) {
  const ScratchFolder folder;
  const int code = exit_code_of([&] {
    std::signal(SIGXFSZ, SIG_IGN);
    const rlimit size = {100000, 100000};
    if (::setrlimit(RLIMIT_FSIZE, &size) != 0) return not_possible;
    return write_without_room(folder / "a.h5");
  });
  EXPECT_EQ(code, told);
  EXPECT_TRUE(folder.empty());
}

TEST(SafeFile, AFullDiskIsToldAndLeavesNothing) {
  const ScratchFolder folder;
  const int code = exit_code_of([&] {
    // A mount that only this process sees and that goes with it.
    if (::unshare(CLONE_NEWNS) != 0 || ::mount(nullptr, "/", nullptr, MS_REC | MS_PRIVATE, nullptr) != 0 ||
        ::mount("tmpfs", folder.path().c_str(), "tmpfs", 0, "size=128k") != 0) {
      return not_possible;
    }
    return write_without_room(folder / "a.h5");
  });
  // Without the right to mount, the limit on file sizes above has shown the same way through the code.
  EXPECT_TRUE(code == told || code == not_possible) << code;
  RecordProperty("mounted", code == told ? "yes" : "no");
}

}  // namespace
}  // namespace headband::resultfile
