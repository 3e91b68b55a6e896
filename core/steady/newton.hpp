#pragma once
// SPDX-License-Identifier: MIT
//
// Steady flow of any network by damped Newton steps on flows and heads together.

#include "core/steady/explicit_flow.hpp"
#include "core/steady/steady.hpp"

#include <memory>

namespace headband::steady {

/// How one lane ended.
struct LaneOutcome {
  SteadyStatus status = SteadyStatus::converged;
  double residual = 0.0;  ///< worst head residual of a link [m]
  int iterations = 0;
};

/// Newton's method for one graph; the pattern of the matrix is analysed once. One draw at a time; every draw starts
/// from the same rule, so that a draw gives the same bits in whatever company it is solved.
///
/// Linear system in the heads, flows updated from it (global gradient form, Todini & Pilati 1988, from memory). Steps
/// are cut so that the content of the network falls (Birkhoff & Diaz 1956: the flows minimise a convex function where
/// losses rise with flow). One-way links and the jump of a `switch` are steep slopes at first and exact at the end.
class NewtonFlow {
 public:
  explicit NewtonFlow(const FlowGraph& graph);
  ~NewtonFlow();
  NewtonFlow(NewtonFlow&&) noexcept;
  NewtonFlow& operator=(NewtonFlow&&) noexcept;

  /// Solves lane `lane` of `numbers`; writes flows of all links and heads of all nodes of that lane.
  /// Graph and numbers must be those of one plan.
  template <int W>
  LaneOutcome solve(
      const FlowGraph& graph, const SteadyOptions& options, int lane, LinkNumbers<W>& numbers, LinkFlows<W>& flows);

 private:
  struct Parts;
  std::unique_ptr<Parts> parts_;
};

extern template LaneOutcome NewtonFlow::solve<1>(
    const FlowGraph&, const SteadyOptions&, int, LinkNumbers<1>&, LinkFlows<1>&);
extern template LaneOutcome NewtonFlow::solve<8>(
    const FlowGraph&, const SteadyOptions&, int, LinkNumbers<8>&, LinkFlows<8>&);

}  // namespace headband::steady
