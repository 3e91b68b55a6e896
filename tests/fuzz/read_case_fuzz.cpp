// SPDX-License-Identifier: MIT
//
// Any bytes read as a case file: problems or a case, never a crash, a hang or a throw. Built by the kind `fuzz`;
// the gallery is a good set of seeds:
//   read_case_fuzz -max_total_time=60 -max_len=8192 CORPUS tests/core/casefile/gallery

#include "core/casefile/read.hpp"

#include <cstddef>
#include <cstdint>
#include <cstdlib>
#include <string>

extern "C" int LLVMFuzzerTestOneInput(const std::uint8_t* data, std::size_t size) {
  std::string text;
  text.reserve(size);
  for (std::size_t i = 0; i < size; ++i) text.push_back(static_cast<char>(data[i]));
  const headband::casefile::Reading reading = headband::casefile::read_text("fuzz.toml", text, "/nonexistent");
  const std::string told = headband::casefile::problems_text("fuzz.toml", text, reading.problems);
  if (told.empty() != reading.problems.empty()) std::abort();
  if (!reading.problems.empty()) return 0;
  // A sound case can be echoed and written back, and what is written is sound again.
  (void)headband::casefile::echo(reading.value);
  const std::string written = headband::casefile::write_case(reading.value, {}, "");
  if (!headband::casefile::read_text("written.toml", written, "/nonexistent").problems.empty()) std::abort();
  return 0;
}
