#pragma once
// SPDX-License-Identifier: MIT

#include "core/answers/study.hpp"
#include "core/network/case.hpp"
#include "montecarlo/program/options.hpp"

namespace headband::program {

/// Where the numbers come from: case, side files, seed, version, build; `started` is now.
[[nodiscard]] answers::Provenance begin_provenance(const network::Case& c, const Options& options, const std::string& verb);

/// Sets `finished` and the wall time.
void end_provenance(answers::Provenance& provenance);

}  // namespace headband::program
