#pragma once
// SPDX-License-Identifier: MIT

namespace headband::program {

/// How the program ends; the numbers of sysexits(3) where it has one. Part of the contract with scripts.
enum class ExitCode {
  done = 0,
  limit_not_kept = 1,   ///< with --gate
  cannot_tell = 2,      ///< with --gate
  not_finished = 3,     ///< the calculation did not finish; the file is written with state "incomplete"
  wrong_usage = 64,
  wrong_case = 65,      ///< wrong case, damaged file, or more memory or time than allowed
  input_missing = 66,
  internal_error = 70,  ///< a bug of ours
  cannot_create = 73,
  cannot_write = 74,
  interrupted = 130,    ///< SIGINT
  terminated = 143      ///< SIGTERM
};

}  // namespace headband::program
