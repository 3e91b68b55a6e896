// SPDX-License-Identifier: MIT
//
// Ten thousand generated networks, each written twice as a case file, in SI and in US units, read and solved.

#include "tests/properties/solved_text.hpp"
#include "tests/support/generated_text.hpp"

#include <gtest/gtest.h>

#include <algorithm>
#include <cmath>
#include <deque>
#include <vector>

namespace headband {
namespace {

using test::Family;
using test::Solved;

/// Sizes the numbers of a solution are measured by; at least a draw-off of the generator, for networks at rest.
struct Scale {
  double flow = 0.03, head = 1.0;
};

Scale scale_of(const Solved& s) {
  Scale scale;
  for (const auto& q : s.state.pipe_flow) scale.flow += std::abs(q[0]);
  for (const auto& q : s.state.device_flow) scale.flow += std::abs(q[0]);
  for (const auto& h : s.state.place_head) scale.head = std::max(scale.head, std::abs(h[0]));
  return scale;
}

/// Largest gap [m] met where head losses summed along the pipes reach a place a second time: loops, and ways between
/// basins, whose heads are held. Devices part the network: each part starts anew.
double worst_loop(const Solved& s) {
  const std::size_t places = s.plan.places.size();
  std::vector<double> head(places, 0.0);
  std::vector<bool> reached(places, false);
  double worst = 0.0;
  const auto walk = [&](std::size_t start) {
    std::deque<std::size_t> open{start};
    reached[start] = true;
    head[start] = s.state.place_head[start][0];
    while (!open.empty()) {
      const std::size_t here = open.front();
      open.pop_front();
      for (std::size_t i = 0; i < s.plan.pipes.size(); ++i) {
        const std::size_t from = s.plan.pipes[i].from.at(), to = s.plan.pipes[i].to.at();
        if (from != here && to != here) continue;
        const std::size_t there = from == here ? to : from;
        const double loss = s.state.head_loss[i][0];
        const double there_head = from == here ? head[here] - loss : head[here] + loss;
        if (!reached[there]) {
          reached[there] = true;
          head[there] = there_head;
          open.push_back(there);
        }
        worst = std::max(worst, std::abs(there_head - head[there]));
        if (s.plan.places[there].basin >= 0)
          worst = std::max(worst, std::abs(there_head - s.values.places[there].held_head[0]));
      }
    }
  };
  for (std::size_t i = 0; i < places; ++i)
    if (!reached[i]) walk(i);
  return worst;
}

/// Largest sum of flows at a place whose head is free [m3/s].
double worst_balance(const Solved& s) {
  std::vector<double> sum(s.plan.places.size(), 0.0);
  for (std::size_t i = 0; i < s.plan.pipes.size(); ++i) {
    sum[s.plan.pipes[i].from.at()] -= s.state.pipe_flow[i][0];
    sum[s.plan.pipes[i].to.at()] += s.state.pipe_flow[i][0];
  }
  for (std::size_t d = 0; d < s.plan.devices.size(); ++d) {
    sum[s.plan.devices[d].from.at()] -= s.state.device_flow[d][0];
    if (s.plan.devices[d].to.exists()) sum[s.plan.devices[d].to.at()] += s.state.device_flow[d][0];
  }
  double worst = 0.0;
  for (std::size_t i = 0; i < sum.size(); ++i)
    if (s.plan.places[i].basin < 0) worst = std::max(worst, std::abs(sum[i]));
  return worst;
}

double worst_gap(const std::vector<base::Lanes<1>>& a, const std::vector<base::Lanes<1>>& b) {
  double worst = 0.0;
  for (std::size_t i = 0; i < a.size(); ++i) worst = std::max(worst, std::abs(a[i][0] - b[i][0]));
  return worst;
}

TEST(NetworksAsText, SpelledInEitherFamilyAreOneNetworkThatBalances) {
  int explicit_ones = 0, with_devices = 0, with_loops = 0;
  for (std::uint64_t seed = 1; seed <= 10000; ++seed) {
    const Solved si = test::solved(test::GeneratedNetwork(seed, Family::si).text());
    const Solved us = test::solved(test::GeneratedNetwork(seed, Family::us).text());
    ASSERT_TRUE(steady::is_usable(si.state.status[0])) << seed;
    ASSERT_EQ(si.state.status[0], us.state.status[0]) << seed;
    const Scale scale = scale_of(si);
    ASSERT_LE(si.state.residual[0], 1e-9 * std::max(scale.head, 100.0)) << seed;
    ASSERT_LE(worst_loop(si), 1e-3) << seed;
    ASSERT_LE(worst_balance(si), 1e-9 * scale.flow) << seed;
    ASSERT_LE(worst_gap(si.state.pipe_flow, us.state.pipe_flow), 1e-9 * scale.flow) << seed;
    ASSERT_LE(worst_gap(si.state.device_flow, us.state.device_flow), 1e-9 * scale.flow) << seed;
    ASSERT_LE(worst_gap(si.state.place_head, us.state.place_head), 1e-9 * scale.head) << seed;
    ASSERT_LE(worst_gap(si.state.head_loss, us.state.head_loss), 1e-9 * scale.head) << seed;
    explicit_ones += si.is_explicit ? 1 : 0;
    with_devices += si.plan.devices.size() > si.c.draw_offs.size() ? 1 : 0;
    with_loops += si.plan.pipes.size() >= si.plan.places.size() ? 1 : 0;
  }
  // every kind was met often
  EXPECT_GT(explicit_ones, 150);
  EXPECT_GT(with_devices, 3000);
  EXPECT_GT(with_loops, 3000);
}

}  // namespace
}  // namespace headband
