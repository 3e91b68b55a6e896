#pragma once
// SPDX-License-Identifier: MIT

#include "montecarlo/propagate/budget.hpp"

namespace headband::montecarlo {

/// Fills the shares of every answer from the draws at hand, by fitted polynomials: for marched draws, where exchanging
/// inputs one by one would cost the band many times over. Where unknowns are correlated, an unknown's first-order
/// share is that of a fit in which it comes first, its total share that of a fit in which it comes last.
void fit_inputs(const BudgetRequest& request, const DrawTable& table, Budget& budget);

}  // namespace headband::montecarlo
