#pragma once
// SPDX-License-Identifier: MIT

#include <algorithm>
#include <optional>
#include <string>
#include <thread>
#include <vector>

namespace headband::program {

/// How the program ends; the numbers of sysexits(3) where it has one. Part of the contract with scripts.
enum class ExitCode {
  done = 0,
  limit_not_kept = 1,  ///< with --gate
  cannot_tell = 2,     ///< with --gate
  not_finished = 3,    ///< the calculation did not finish; the file is written with state "incomplete"
  wrong_usage = 64,
  wrong_case = 65,  ///< wrong case, damaged file, or more memory or time than allowed
  input_missing = 66,
  internal_error = 70,  ///< a bug of ours
  cannot_create = 73,
  cannot_write = 74,
  interrupted = 130,  ///< SIGINT
  terminated = 143    ///< SIGTERM
};

/// One call of the program, understood: the verb, its words and its options.
struct Options {
  std::string verb;
  std::vector<std::string> words;  ///< what stands after the verb without dashes
  std::string command;             ///< the call for provenance, without folders

  std::string out;     ///< --out FILE.h5; empty = CASE-VERB.h5 in the current folder
  std::string report;  ///< --report FILE.html; empty = none (verb report: STEM.html)
  std::string svg_folder, csv_folder;
  std::string units;                  ///< "si", "us" or empty = the case's
  std::string temperature, pressure;  ///< verb liquid, as written
  std::optional<int> threads;         ///< >= 1; left out: the machine's
  std::optional<unsigned long long> seed;
  bool surge = false;  ///< band: march every draw
  bool quiet = false, json = false, no_colour = false, force = false, gate = false, resume = false, card = false;
  bool help = false;
};

/// Threads to use: as asked, else all the machine has.
[[nodiscard]] inline int threads_for(const Options& options) {
  return options.threads.value_or(std::max(1, static_cast<int>(std::thread::hardware_concurrency())));
}

}  // namespace headband::program
