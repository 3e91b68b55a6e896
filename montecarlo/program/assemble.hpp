#pragma once
// SPDX-License-Identifier: MIT

#include "core/answers/study.hpp"
#include "core/network/case.hpp"
#include "montecarlo/program/central.hpp"
#include "montecarlo/program/options.hpp"
#include "montecarlo/propagate/band.hpp"
#include "transient/march/surge.hpp"

#include <string>

namespace headband::program {

/// Where the numbers come from: case, side files, seed, version, build; `started` is now.
[[nodiscard]] answers::Provenance begin_provenance(const network::Case& c,
                                                   const Options& options,
                                                   const std::string& verb);

/// Sets `finished` and the wall time.
void end_provenance(answers::Provenance& provenance);

/// A study with what every verb says: provenance, title, values as understood, remarks and guesses of the reader.
/// @param verb "check", "flow", "surge", "band"
[[nodiscard]] answers::Study begin_study(const network::Case& c, const Options& options, const std::string& verb);

/// Adds a finished run: histories, extremes, places, devices, events, audit, grid.
void add_run(answers::Study& study, transient::SurgeRun run);

/// Adds what sampling says, and the guesses it rests on.
void add_band(answers::Study& study, const network::Case& c, montecarlo::BandOutcome outcome);

/// Verdict, cautions and the sentence on top of the page; the last step before a study is written.
void conclude(answers::Study& study, const network::Case& c, const network::Plan& plan);

}  // namespace headband::program
