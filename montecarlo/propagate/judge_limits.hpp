#pragma once
// SPDX-License-Identifier: MIT

#include "core/answers/study.hpp"
#include "montecarlo/propagate/band.hpp"
#include "montecarlo/propagate/draws.hpp"
#include "montecarlo/propagate/inputs.hpp"

#include <vector>

namespace headband::montecarlo {

/// Words of an answer: "pressure_drop", its SI unit, and where ("A, B", PLACE, empty = everywhere).
[[nodiscard]] std::string kind_word(network::AnswerKind kind);
[[nodiscard]] std::string unit_word(network::AnswerKind kind);
[[nodiscard]] std::string where_words(const network::AnswerPlan& answer);

/// What one outer point says of every limit.
struct PointJudgement {
  std::vector<answers::LimitAnswer> limits;  ///< as Plan::limits; where pipes are rated, "any rated pipe" behind them
  std::vector<double>
      worse_by;  ///< per limit: mean distance over the bound [SI], to tell corners of equal probability apart
};

inline constexpr const char* any_rated_pipe = "any rated pipe";

/// Judges all limits on the draws of one outer point. `surge` false: a limit that needs the surge, in a case with
/// events, can only turn out NOT OK.
[[nodiscard]] PointJudgement judge_limits(
    const network::Case& c, const network::Plan& plan, const CentralRun& central, const DrawTable& table, bool surge);

/// One answer per limit from all outer points: the middle's numbers, the ranges of its probabilities, the worst corner,
/// and the verdict on which all points agree ("any rated pipe" has none).
[[nodiscard]] std::vector<answers::LimitAnswer> over_ranges(const Ranges& ranges,
                                                            const network::Case& c,
                                                            const std::vector<PointJudgement>& points);

}  // namespace headband::montecarlo
