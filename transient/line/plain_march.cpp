// SPDX-License-Identifier: MIT
#include "transient/line/plain_march.hpp"

#include <algorithm>
#include <cmath>

namespace headband::transient {
namespace {

struct Meeting {
  double waves = 0.0, gives = 0.0;  // sum of arriving head / impedance, of 1 / impedance
};

// H_P = waves.head - waves.impedance Q_P along a characteristic from flow q at head h; `way` +1 downstream.
struct Characteristic {
  double head, impedance;
};
Characteristic from_foot(const PlainPipe& p, double h, double q, double way) {
  return {h + way * (p.impedance - 0.5 * p.linear) * q, p.impedance + 0.5 * p.linear + p.resistance * std::fabs(q)};
}

}  // namespace

PlainResult plain_march(const PlainNetwork& net) {
  PlainResult now;
  for (const PlainPipe& p : net.pipes) {
    std::vector<double> h(static_cast<std::size_t>(p.reaches + 1)), q(h.size(), p.first_flow);
    h[0] = net.places[static_cast<std::size_t>(p.from)].first_head;
    for (std::size_t i = 1; i < h.size(); ++i)
      h[i] = h[i - 1] - (p.resistance * std::fabs(p.first_flow) + p.linear) * p.first_flow;
    now.head.push_back(h);
    now.flow.push_back(q);
  }
  now.head_max = now.head_min = now.head;
  for (int step = 1; step <= net.steps; ++step) {
    const double time = step * net.time_step;
    PlainResult next = now;
    std::vector<Meeting> meet(net.places.size());
    for (std::size_t k = 0; k < net.pipes.size(); ++k) {
      const PlainPipe& p = net.pipes[k];
      const auto n = static_cast<std::size_t>(p.reaches);
      for (std::size_t i = 1; i < n; ++i) {
        const auto down = from_foot(p, now.head[k][i - 1], now.flow[k][i - 1], 1.0);
        const auto up = from_foot(p, now.head[k][i + 1], now.flow[k][i + 1], -1.0);
        next.flow[k][i] = (down.head - up.head) / (down.impedance + up.impedance);
        next.head[k][i] = down.head - down.impedance * next.flow[k][i];
      }
      const auto up = from_foot(p, now.head[k][1], now.flow[k][1], -1.0);
      const auto down = from_foot(p, now.head[k][n - 1], now.flow[k][n - 1], 1.0);
      meet[static_cast<std::size_t>(p.from)].waves += up.head / up.impedance;
      meet[static_cast<std::size_t>(p.from)].gives += 1.0 / up.impedance;
      meet[static_cast<std::size_t>(p.to)].waves += down.head / down.impedance;
      meet[static_cast<std::size_t>(p.to)].gives += 1.0 / down.impedance;
    }
    std::vector<double> head(net.places.size());
    const auto solve = [&](std::size_t i, double outflow) {
      head[i] = !std::isnan(net.places[i].held) ? net.places[i].held
                                                : (meet[i].waves - net.places[i].draw - outflow) / meet[i].gives;
    };
    for (std::size_t i = 0; i < head.size(); ++i) solve(i, 0.0);
    for (const PlainValve& v : net.valves) {
      const auto from = static_cast<std::size_t>(v.from);
      const double c = v.coefficient(time);
      const double other = v.to < 0 ? v.air_head : head[static_cast<std::size_t>(v.to)];
      const auto gives = [&](int place) {
        if (place < 0 || !std::isnan(net.places[static_cast<std::size_t>(place)].held)) return 0.0;
        return 1.0 / meet[static_cast<std::size_t>(place)].gives;
      };
      const double z = gives(v.from) + gives(v.to), e = head[from] - other;
      // q^2 + z c^2 q - c^2 |e| = 0
      double q = 0.5 * (-z * c * c + std::sqrt(z * z * c * c * c * c + 4.0 * c * c * std::fabs(e)));
      if (e < 0.0) q = v.to < 0 ? 0.0 : -q;
      solve(from, q);
      if (v.to >= 0) solve(static_cast<std::size_t>(v.to), -q);
    }
    for (std::size_t k = 0; k < net.pipes.size(); ++k) {
      const PlainPipe& p = net.pipes[k];
      const auto n = static_cast<std::size_t>(p.reaches);
      const auto up = from_foot(p, now.head[k][1], now.flow[k][1], -1.0);
      const auto down = from_foot(p, now.head[k][n - 1], now.flow[k][n - 1], 1.0);
      next.head[k][0] = head[static_cast<std::size_t>(p.from)];
      next.flow[k][0] = (next.head[k][0] - up.head) / up.impedance;
      next.head[k][n] = head[static_cast<std::size_t>(p.to)];
      next.flow[k][n] = (down.head - next.head[k][n]) / down.impedance;
      for (std::size_t i = 0; i <= n; ++i) {
        next.head_max[k][i] = std::max(next.head_max[k][i], next.head[k][i]);
        next.head_min[k][i] = std::min(next.head_min[k][i], next.head[k][i]);
      }
    }
    now = std::move(next);
  }
  return now;
}

}  // namespace headband::transient
