#pragma once
// SPDX-License-Identifier: MIT

#include "montecarlo/propagate/budget.hpp"

namespace headband::montecarlo {

/// Fills the shares of every answer, and how much of its variance they rest on, from the draws at hand by fitted
/// polynomials. Where unknowns are correlated, an unknown's first-order share is that of a fit in which it comes first,
/// its total share that of a fit in which it comes last.
void fit_inputs(const BudgetRequest& request, const DrawTable& table, Budget& budget);

/// Takes back the shares of fits that explain too little, and says so; also where a fit leaves more than a tenth open.
void judge_fits(const BudgetRequest& request, Budget& budget);

}  // namespace headband::montecarlo
