#pragma once
// SPDX-License-Identifier: MIT

#include "core/base/problem.hpp"

#include <stdexcept>
#include <string>
#include <utility>

namespace headband::base {

/// Root of everything headband throws.
class Error : public std::runtime_error {
 public:
  using std::runtime_error::runtime_error;
};

/// The input is wrong; carries every problem found (exit code 65).
class InputError final : public Error {
 public:
  explicit InputError(Problems problems)
      : Error(problems.empty() ? "input error" : problems.front().what), problems_(std::move(problems)) {}
  [[nodiscard]] const Problems& problems() const noexcept { return problems_; }

 private:
  Problems problems_;
};

/// What went wrong with a file; decides the exit code (66, 73, 74, 65).
enum class IoFailure { missing, cannot_create, cannot_write, damaged };

/// A file cannot be read or written.
class IoError final : public Error {
 public:
  IoError(IoFailure failure, const std::string& what) : Error(what), failure_(failure) {}
  [[nodiscard]] IoFailure failure() const noexcept { return failure_; }

 private:
  IoFailure failure_;
};

/// Arithmetic that cannot go on and is not a status of a solver (exit code 70: our bug).
class NumericalError final : public Error {
 public:
  using Error::Error;
};

}  // namespace headband::base
