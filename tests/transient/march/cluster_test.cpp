// SPDX-License-Identifier: MIT
//
// Places solved together: which of them stand at the vapour limit.
#include "transient/march/cluster.hpp"

#include <gtest/gtest.h>

namespace headband::transient {
namespace {

/// Two pipe ends joined by an open valve; no cavity yet.
ClusterSolver two_places(double first_free_head, double second_free_head, double vapour, double coefficient) {
  Layout layout;
  layout.most_places = 2;
  layout.most_branches = 1;
  ClusterSolver solver(layout);
  solver.place_count = 2;
  solver.branch_count = 1;
  const double gives = 0.01;
  for (std::size_t i = 0; i < 2; ++i) {
    ClusterPlace& p = solver.places[i];
    p = ClusterPlace{};
    p.gives = gives;
    p.waves = gives * (i == 0 ? first_free_head : second_free_head);
    p.vapour = vapour;
  }
  ClusterBranch& b = solver.branches[0];
  b = ClusterBranch{};
  b.from = 0;
  b.to = 1;
  b.resistance = 1.0 / (coefficient * coefficient);
  return solver;
}

TEST(Cluster, APlaceThatAnotherOnesCavityRelievesHoldsNone) {
  // alone the second place would stand above the limit; the first one pulls it below until its own cavity gives way
  ClusterSolver solver = two_places(-30.0, -9.0, -10.0, 0.5);
  ASSERT_TRUE(solver.solve(0.01));
  const ClusterPlace &low = solver.places[0], &high = solver.places[1];
  EXPECT_EQ(low.head, -10.0);
  EXPECT_GT(low.volume, 0.0);
  EXPECT_GT(high.head, -10.0);
  EXPECT_LT(high.head, -9.0);
  EXPECT_EQ(high.volume, 0.0);
  // what arrives at a place leaves it, or its cavity grows
  const double flow = solver.branches[0].flow;
  EXPECT_NEAR(high.waves - high.gives * high.head + flow, 0.0, 1e-12);
  EXPECT_NEAR(flow - (low.waves - low.gives * low.head), low.growth, 1e-12);
}

TEST(Cluster, BothHoldCavitiesWhereBothWouldAlone) {
  ClusterSolver solver = two_places(-30.0, -12.0, -10.0, 0.5);
  ASSERT_TRUE(solver.solve(0.01));
  for (const ClusterPlace* p : {&solver.places[0], &solver.places[1]}) {
    EXPECT_EQ(p->head, -10.0);
    EXPECT_GT(p->volume, 0.0);
  }
}

}  // namespace
}  // namespace headband::transient
