#pragma once
// SPDX-License-Identifier: MIT
//
// What of a study is reported, the same for JSON, terminal and page.

#include "core/answers/study.hpp"

#include <string>
#include <vector>

namespace headband::show {

/// "OK", "NOT OK", "CANNOT TELL"; empty for Verdict::none.
[[nodiscard]] std::string words_of(answers::Verdict verdict);

/// The last part of a path: what is shown of a case file's name.
[[nodiscard]] std::string file_name_of(const std::string& path);

/// Share of its section's volume a cavity must pass to be reported [-].
inline constexpr double reported_cavity_share = 1e-6;
inline constexpr std::size_t reported_cavities_at_most = 200;

/// Cavities worth telling: over 1e-6 of the volume of their section (one reach), the largest 200, in file order.
/// Where the section's volume is not known the cavity is told.
[[nodiscard]] std::vector<answers::CavityAnswer> reported_cavities(const answers::Study& study);

/// What people are told of the events, in time order: of a pipe's cavities only the first that opens and the last that
/// closes. JSON and result file hold them all.
[[nodiscard]] std::vector<answers::EventAnswer> told_events(const answers::Study& study);

/// The cavity whose opening or closing an event tells of; null for other events. The event's own words are SI.
[[nodiscard]] const answers::CavityAnswer* cavity_of(const answers::Study& study, const answers::EventAnswer& event);

/// When the first cavity worth telling formed, and where; null where none did. Not among the largest alone: what comes
/// before it is free of vapour.
[[nodiscard]] const answers::CavityAnswer* first_cavity(const answers::Study& study);

/// Shares of an answer's variance, those that move it most first (with others, then by name); without a number last.
[[nodiscard]] std::vector<answers::SensitivityAnswer> ranked_unknowns(const answers::BandAnswer& answer);

/// Whether an answer is the same in every draw but for rounding (a pressure held at that of vapour): shares of such a
/// variance mean nothing.
[[nodiscard]] bool stands_still(const answers::BandAnswer& answer);

/// Whether the shares of the unknowns alone sum to clearly over one: unknowns that go together carry each other's part.
[[nodiscard]] bool overlapping_shares(const answers::BandAnswer& answer);
inline constexpr const char* overlap_remark =
    "; unknowns that go together carry each other's part, so these do not sum to 100 %";

/// A share of the variance under this is told as "under 0.01 %" [-].
inline constexpr double least_share = 1e-4;

}  // namespace headband::show
