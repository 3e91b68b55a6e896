#pragma once
// SPDX-License-Identifier: MIT
//
// What a study says in sentences, the same on the terminal and on the page.

#include "core/answers/study.hpp"
#include "core/show/amounts.hpp"

#include <string>
#include <vector>

namespace headband::show {

/// The answer on top: verdict and the limit that decides it, extremes or bands. Never a maximum without the minimum, a
/// probability without its bound, or a pressure after vapour without "order of size only".
/// @param units "si" or "us"; empty = the study's own
[[nodiscard]] std::string decision(const answers::Study& study, const std::string& units = "");

/// Cautions that belong beside the numbers: those the study carries, and those its numbers ask for; none twice.
[[nodiscard]] std::vector<std::string> cautions(const answers::Study& study);

/// "order of size only" with the reason where vapour formed in the run; empty otherwise.
[[nodiscard]] std::string vapour_remark(const answers::Study& study);

/// Who and what of an event, in the units people are shown; the study itself tells it in SI.
struct EventWords {
  std::string subject, what;
};
[[nodiscard]] EventWords event_words(const answers::Study& study,
                                     const answers::EventAnswer& event,
                                     const Amounts& amounts);

/// The limit that decides the verdict: the worst verdict, among those the likeliest or closest. Null without limits.
[[nodiscard]] const answers::LimitAnswer* deciding_limit(const answers::Study& study);

/// "26 % of the draws (95 % sure: 22 % to 30 %)", or [least, most] in words where a range is not random; empty for a
/// limit without a probability.
[[nodiscard]] std::string chance_words(const answers::LimitAnswer& limit);

}  // namespace headband::show
