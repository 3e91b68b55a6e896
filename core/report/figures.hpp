#pragma once
// SPDX-License-Identifier: MIT
//
// Which plots a study has.

#include "core/answers/study.hpp"
#include "core/report/plot.hpp"

#include <vector>

namespace headband::report {

/// Head over chainage, one plot a pipe: ground, steady line, envelope with its bands, rating, vapour line, limits.
/// The most telling `most` pipes when there are more: those with extremes, then in file order.
[[nodiscard]] std::vector<Plot> profiles(const answers::Study& study, std::size_t most = 24);

/// Pressure, then flow, over time at the probes; six curves a plot.
[[nodiscard]] std::vector<Plot> histories(const answers::Study& study);

/// What devices did over time, one plot a quantity.
[[nodiscard]] std::vector<Plot> device_series(const answers::Study& study);

/// How the draws of answer `index` spread: histogram, quantiles, limit, the part that fails hatched.
/// An empty abscissa when fewer than 20 draws finished.
[[nodiscard]] Plot density(const answers::Study& study, std::size_t index);

/// Answer `index` against the unknowns that move it most by its sensitivity, one plot an unknown, `most` at most.
[[nodiscard]] std::vector<Plot> scatters(const answers::Study& study, std::size_t index, std::size_t most = 3);

/// The limit judged on this answer, if any: same name, else same kind and unit and name of the place.
[[nodiscard]] const answers::LimitAnswer* limit_of(const answers::Study& study, const answers::BandAnswer& answer);

}  // namespace headband::report
