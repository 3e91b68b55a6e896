#pragma once
// SPDX-License-Identifier: MIT

#include "core/answers/study.hpp"
#include "montecarlo/program/central.hpp"

#include <vector>

namespace headband::program {

/// JSON words of an answer: kind ("highest_pressure"), unit ("Pa") and where ("A, B"; empty = everywhere).
[[nodiscard]] std::string kind_name(network::AnswerKind kind);
[[nodiscard]] std::string unit_name(network::AnswerKind kind);
[[nodiscard]] base::Dimension dimension_of(network::AnswerKind kind);
[[nodiscard]] std::string where_name(const network::AnswerPlan& answer);

/// The limits by the steady state. In a case with events, extremes of pressure and velocity can only be told NOT OK.
[[nodiscard]] std::vector<answers::LimitAnswer> judge_steady(const network::Case& c, const Central& central);

/// The limits by one run: its value, grid bound and bound on the side of keeping per limit, as Plan::limits.
[[nodiscard]] std::vector<answers::LimitAnswer> judge_run(const network::Plan& plan,
                                                          const std::vector<double>& value,
                                                          const std::vector<double>& grid_bound,
                                                          const std::vector<double>& bound_to_kept);

/// All limits CANNOT TELL, because of `reason`.
[[nodiscard]] std::vector<answers::LimitAnswer> judge_nothing(const network::Plan& plan, const std::string& reason);

/// The worst of the limits: NOT OK, CANNOT TELL, OK; none without limits.
[[nodiscard]] answers::Verdict worst(const std::vector<answers::LimitAnswer>& limits);

}  // namespace headband::program
