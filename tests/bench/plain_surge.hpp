#pragma once
// SPDX-License-Identifier: MIT
//
// The plain side of the surge benchmarks: one run at a time, one struct a section, library logarithms, envelopes by
// comparison. The same scheme as the product (a quotient a section), so that both must give the same peak.

#include <algorithm>
#include <cmath>
#include <vector>

namespace headband::bench {

/// A basin, one pipe, a valve into the air that closes along a straight line.
struct PlainRun {
  int reaches = 64;
  double length = 0.0, area = 0.0, bore = 0.0, gravity = 0.0, wave_speed = 0.0;
  double level = 0.0, flow = 0.0, closing = 0.0, duration = 0.0;
  double viscosity = 0.0;
};

struct PlainSection {
  double head, flow, next_head, next_flow, highest, lowest;
};

/// Highest head at the valve [m]. `loss` gives, for a flow, the Darcy factor and half its slope against Re.
struct PlainFriction {
  double factor, half_slope;
};

template <class Law>
[[nodiscard]] double plain_peak(const PlainRun& run, const Law& law, long long& sections_marched) {
  const int n = run.reaches;
  const double impedance = run.wave_speed / (run.gravity * run.area), reach = run.length / n;
  const double dt = reach / run.wave_speed;
  const double unit = reach / (2.0 * run.gravity * run.bore * run.area * run.area);
  const double loss = unit * law(run.flow).factor * run.flow * run.flow;
  std::vector<PlainSection> row(static_cast<std::size_t>(n) + 1);
  for (int i = 0; i <= n; ++i) {
    PlainSection& s = row[static_cast<std::size_t>(i)];
    s.head = s.highest = s.lowest = run.level - loss * i;
    s.flow = run.flow;
  }
  const double open = run.flow / std::sqrt(row.back().head);
  const auto sends = [&](const PlainSection& s, double way, double& head, double& damp) {
    const PlainFriction f = law(s.flow);
    const double g = unit * f.factor * std::fabs(s.flow);
    head = s.head + way * (impedance + g * f.half_slope) * s.flow;
    damp = impedance + g * (1.0 + f.half_slope);
  };
  const auto steps = static_cast<int>(std::floor(run.duration / dt + 1e-9));
  for (int k = 1; k <= steps; ++k) {
    const double time = k * dt;
    double on, on_damp, back, back_damp;
    for (std::size_t i = 1; i + 1 < row.size(); ++i) {
      sends(row[i - 1], 1.0, on, on_damp);
      sends(row[i + 1], -1.0, back, back_damp);
      row[i].next_flow = (on - back) / (on_damp + back_damp);
      row[i].next_head = on - on_damp * row[i].next_flow;
    }
    sends(row[1], -1.0, back, back_damp);
    row.front().next_head = run.level;
    row.front().next_flow = (run.level - back) / back_damp;
    sends(row[row.size() - 2], 1.0, on, on_damp);
    const double c = open * std::max(0.0, 1.0 - time / run.closing), z = on_damp * c * c;
    double q = 0.0;  // q^2 + z q - c^2 H = 0
    if (c > 0.0 && on > 0.0) q = 0.5 * (-z + std::sqrt(z * z + 4.0 * c * c * on));
    row.back().next_flow = q;
    row.back().next_head = on - on_damp * q;
    for (PlainSection& s : row) {
      s.head = s.next_head;
      s.flow = s.next_flow;
      if (s.head > s.highest) s.highest = s.head;
      if (s.head < s.lowest) s.lowest = s.lowest < s.head ? s.lowest : s.head;
    }
  }
  sections_marched += static_cast<long long>(steps) * (n + 1);
  return row.back().highest;
}

}  // namespace headband::bench
