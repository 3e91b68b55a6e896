#pragma once
// SPDX-License-Identifier: MIT

#include <optional>
#include <string>
#include <vector>

namespace headband::program {

/// One call of the program, understood: the verb, its words and its options.
struct Options {
  std::string verb;
  std::vector<std::string> words;  ///< what stands after the verb without dashes
  std::string command;             ///< the call for provenance, without folders

  std::string out;                 ///< --out FILE.h5; empty = CASE-VERB.h5 in the current folder
  std::string report;              ///< --report FILE.html; empty = none (verb report: STEM.html)
  std::string svg_folder, csv_folder;
  std::string units;               ///< "si", "us" or empty = the case's
  std::string temperature, pressure;  ///< verb liquid, as written
  std::optional<int> threads;      ///< >= 1; left out: the machine's
  std::optional<unsigned long long> seed;
  bool surge = false;              ///< band: march every draw
  bool quiet = false, json = false, no_colour = false, force = false, gate = false, resume = false, card = false;
  bool help = false;
};

}  // namespace headband::program
