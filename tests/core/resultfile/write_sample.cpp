// SPDX-License-Identifier: MIT
//
// Writes sample results into a folder, for readers that share no code with headband.
#include "core/resultfile/result_file.hpp"
#include "tests/support/sample_study.hpp"

#include <cstdio>
#include <exception>
#include <string>

int main(int count, char** words) {
  if (count != 2) {
    std::fputs("give a folder\n", stderr);
    return 64;
  }
  using namespace headband;
  const std::string folder = std::string(words[1]) + '/';
  try {
    const answers::Study study = support::sample_study();
    resultfile::write(study, folder + "sample.h5", {});
    answers::Study elsewhere = study;  // the same numbers from another run
    elsewhere.provenance.threads = 7;
    elsewhere.provenance.ranks = 3;
    elsewhere.provenance.command = "headband band hollowmere.toml --surge --threads 7";
    elsewhere.provenance.started = "2026-02-03T04:05:06Z";
    elsewhere.provenance.wall_time = 1.5;
    resultfile::write(elsewhere, folder + "elsewhere.h5", {});
    resultfile::write(support::sample_flow(), folder + "flow.h5", {});
    resultfile::write(answers::Study{}, folder + "empty.h5", {});
    answers::Study large = study;  // data in chunks
    auto& bands = *large.bands;
    constexpr std::size_t runs = 5000;
    bands.run_status.assign(runs, 0);
    bands.stride = 20;
    bands.input_value.resize(runs * bands.input_name.size());
    for (std::size_t i = 0; i < bands.input_value.size(); ++i) bands.input_value[i] = 0.5 * static_cast<double>(i);
    bands.run_cavity.clear();
    bands.limit_value.clear();
    bands.output_value.assign(runs * bands.answers.size(), 1.0);
    resultfile::write(large, folder + "large.h5", {});
  } catch (const std::exception& e) {
    std::fprintf(stderr, "%s\n", e.what());
    return 70;
  }
  return 0;
}
