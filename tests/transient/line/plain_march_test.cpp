// SPDX-License-Identifier: MIT
//
// The oracle against closed forms, and the kernels against the oracle.
#include "transient/line/plain_march.hpp"

#include "tests/transient/line/pipe_state.hpp"

#include <gtest/gtest.h>

#include <cmath>

namespace {

using namespace headband;
using base::Lanes;
using transient::PlainNetwork;
using transient::PlainResult;

constexpr double impedance = 500.0, level = 80.0, flow = 0.12;

/// Basin, one pipe, a valve into the air; open for ever unless `coefficient` says otherwise.
PlainNetwork one_pipe(int reaches, double resistance, double linear, double time_step, int steps) {
  PlainNetwork n;
  n.pipes.push_back({0, 1, reaches, impedance, resistance, linear, flow});
  const double end = level - reaches * (resistance * flow + linear) * flow;
  n.places.push_back({level, level, 0.0});
  n.places.push_back({end, std::numeric_limits<double>::quiet_NaN(), 0.0});
  const double open = flow / std::sqrt(end);
  n.valves.push_back({0, -1, 0.0, [open](double) { return open; }});
  n.valves.back().from = 1;
  n.time_step = time_step;
  n.steps = steps;
  return n;
}

TEST(plain_march, a_steady_flow_stays) {
  const PlainResult r = plain_march(one_pipe(17, 2.0, 0.4, 0.01, 500));
  for (std::size_t i = 0; i < r.flow[0].size(); ++i) {
    EXPECT_NEAR(r.flow[0][i], flow, 1e-13);
    EXPECT_NEAR(r.head[0][i], level - static_cast<double>(i) * (2.0 * flow + 0.4) * flow, 1e-11);
  }
}

// Joukowsky 1898: a flow stopped at once raises the head by (a/gA) Q; without friction the wave returns for ever, up in
// the first half of 4L/a, down by as much in the second.
TEST(plain_march, a_flow_stopped_at_once_gives_joukowskys_head) {
  constexpr int reaches = 8;
  PlainNetwork n = one_pipe(reaches, 0.0, 0.0, 0.01, 0);
  n.valves[0].coefficient = [](double) { return 0.0; };
  for (int step = 1; step <= 16 * reaches; ++step) {
    n.steps = step;
    const PlainResult r = plain_march(n);
    const bool up = ((step - 1) / (2 * reaches)) % 2 == 0;
    EXPECT_NEAR(r.head[0].back(), level + (up ? 1.0 : -1.0) * impedance * flow, 1e-11) << step;
    EXPECT_NEAR(r.flow[0].back(), 0.0, 1e-13);
  }
}

TEST(plain_march, a_pipe_in_two_parts_is_the_pipe) {
  for (const double linear : {0.0, 0.3}) {
    PlainNetwork whole = one_pipe(20, 3.0, linear, 0.01, 300);
    const auto closing = [open = flow / std::sqrt(whole.places[1].first_head)](double t) {
      return open * std::max(0.0, 1.0 - t);
    };
    whole.valves[0].coefficient = closing;
    PlainNetwork parts = whole;
    parts.places.push_back({level - 7.0 * (3.0 * flow + linear) * flow, std::numeric_limits<double>::quiet_NaN(), 0.0});
    parts.pipes[0].to = 2;
    parts.pipes[0].reaches = 7;
    parts.pipes.push_back({2, 1, 13, impedance, 3.0, linear, flow});
    const PlainResult a = plain_march(whole), b = plain_march(parts);
    for (std::size_t i = 0; i <= 20; ++i) {
      const double head = i <= 7 ? b.head[0][i] : b.head[1][i - 7];
      EXPECT_NEAR(a.head[0][i], head, 1e-9) << i;
    }
  }
}

// Friction by halved reaches and steps: the change falls to a quarter. The stroke is over before the end, and smooth.
TEST(plain_march, is_of_second_order) {
  const auto head_at_valve = [](int split) {
    const int reaches = 8 * split;
    PlainNetwork n = one_pipe(reaches, 120.0 / reaches, 0.0, 0.08 / split, 40 * split);
    const double open = flow / std::sqrt(n.places[1].first_head);
    n.valves[0].coefficient = [open](double t) {
      const double s = std::min(1.0, t / 2.4);
      return open * (1.0 - 0.9 * s * s * s * (10.0 - 15.0 * s + 6.0 * s * s));
    };
    return plain_march(n).head[0].back();
  };
  const double a = head_at_valve(2), b = head_at_valve(4), c = head_at_valve(8);
  EXPECT_NEAR((a - b) / (b - c), 4.0, 0.3);
}

// The kernels against the oracle through 2000 steps: heads to 4000 units in the last place of the largest head (two a
// step), alone (blocks of rows) and as each of eight draws.
template <int W>
void expect_the_oracles_run(int reaches, int steps) {
  constexpr double resistance = 1.5, linear = 0.2, unit = std::numeric_limits<double>::epsilon();
  PlainNetwork net = one_pipe(reaches, resistance, linear, 0.01, steps);
  net.valves.clear();
  net.places[1].draw = 0.0;  // shut at once: a dead end
  const PlainResult exact = plain_march(net);
  test::PipeState<W> pipe(static_cast<std::size_t>(reaches) + 1);
  transient::Resistance<W> r;
  r.carry = impedance - 0.5 * linear;
  r.damp = impedance + 0.5 * linear;
  r.quadratic = resistance;
  base::PerLane<int, W> ends{};
  ends.fill(reaches);
  for (std::size_t i = 0; i < pipe.head.size(); ++i) {
    pipe.head[i] = i == 0 ? level : (pipe.head[i - 1] - (resistance * flow + linear) * flow);
    pipe.flow[i] = flow;
  }
  pipe.head_max = pipe.head_min = pipe.head;
  for (int step = 0; step < steps; ++step) {
    const auto from = transient::arriving_at_from<W>(r, pipe.rows(), false);
    const auto to = transient::arriving_at_to<W>(r, pipe.rows(), ends, true);
    if (reaches > 1) pipe.march(r, false);
    pipe.head.front() = level;
    pipe.flow.front() = (Lanes<W>(level) - from.head) / from.impedance;
    pipe.head.back() = to.head;
    pipe.flow.back() = 0.0;
  }
  for (std::size_t i = 0; i < pipe.head.size(); ++i)
    for (int lane = 0; lane < W; ++lane) {
      EXPECT_NEAR(pipe.head[i][lane], exact.head[0][i], 2.0 * steps * unit * 140.0) << reaches << ' ' << i;
      EXPECT_NEAR(pipe.flow[i][lane], exact.flow[0][i], 2.0 * steps * unit * 140.0 / impedance) << reaches << ' ' << i;
      if (i == 0 || i + 1 == pipe.head.size()) continue;
      EXPECT_NEAR(pipe.head_max[i][lane], exact.head_max[0][i], 2.0 * steps * unit * 140.0);
      EXPECT_NEAR(pipe.head_min[i][lane], exact.head_min[0][i], 2.0 * steps * unit * 140.0);
    }
}

TEST(plain_march, the_kernels_run_as_the_oracle_does) {
  for (const int reaches : {1, 2, 3, 4, 5, 6, 7, 8, 9, 10, 17, 18, 33, 64}) {
    expect_the_oracles_run<1>(reaches, 2000);
    expect_the_oracles_run<8>(reaches, 2000);
  }
}

}  // namespace
