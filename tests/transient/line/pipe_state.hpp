#pragma once
// SPDX-License-Identifier: MIT
//
// The rows of one pipe for the tests of its interior: arrays of their own, laws of friction, pipes taken out of a
// batch.

#include "transient/line/interior.hpp"

#include <cmath>
#include <limits>
#include <random>
#include <vector>

namespace headband::test {

using base::Lanes;
using transient::Form;
using transient::Resistance;

/// Everything that moves in one pipe of W draws, and the view of it that march_interior takes.
template <int W>
struct PipeState {
  std::vector<Lanes<W>> head, flow, flow_before, volume, vapour, fitting, longer, root, root_on, head_max, head_min;
  Lanes<W> reaches = 0.0;
  bool placed = false, envelopes = true, roots = false, uneven = false;
  bool cavities = false;
  transient::CavityTally<W> tally;

  explicit PipeState(std::size_t rows = 0)
      : head(rows, Lanes<W>(0.0)),
        flow(head),
        flow_before(head),
        volume(head),
        vapour(rows, Lanes<W>(-std::numeric_limits<double>::infinity())),
        fitting(head),
        longer(head),
        root(head),
        root_on(head),
        head_max(rows, Lanes<W>(-1e9)),
        head_min(rows, Lanes<W>(1e9)) {}

  [[nodiscard]] transient::PipeRows<W> rows() {
    transient::PipeRows<W> r;
    r.rows = static_cast<int>(head.size());
    r.head = head.data();
    r.flow = flow.data();
    r.flow_before = flow_before.data();
    r.volume = volume.data();
    r.vapour = vapour.data();
    if (placed) {
      r.fitting = fitting.data();
      r.longer = longer.data();
    }
    if (roots) {
      r.root = root.data();
      r.root_on = root_on.data();
    }
    if (uneven) r.reaches = &reaches;
    if (envelopes) {
      r.head_max = head_max.data();
      r.head_min = head_min.data();
    }
    return r;
  }

  /// One step of the interior. @param limited the vapour limits are looked at
  void march(const Resistance<W>& resistance, bool limited, double time_step = 0.01) {
    transient::march_interior<W>(
        resistance, rows(), Lanes<W>(time_step), Lanes<W>(1.0 / 3.0), limited, cavities, tally);
  }
};

/// Friction in each of the forms, of a pipe with impedance about `impedance`. Varies with `draw` by some per cent.
inline Resistance<1> resistance_of(
    Form form, friction::FrictionLaw law, friction::Transition::Kind transition, double impedance, int draw) {
  Resistance<1> r;
  r.form = form;
  const double vary = 1.0 + 0.031 * draw;
  r.carry = impedance * vary - 0.3;
  r.damp = impedance * vary + 0.3;
  r.quadratic = form == Form::quadratic ? 1.7 * vary : 0.2 * vary;
  if (form == Form::darcy) {
    friction::FactorRule<1> rule;
    rule.law[0] = law;
    rule.transition[0] = {transition, 2100.0, 4000.0};
    rule.relative_roughness = 1e-4 * vary;
    rule.scatter = 1.0 + 0.02 * draw;
    r.rule = friction::prepare<1>(rule);
    r.darcy = 40.0 * vary;
    r.reynolds = 3e5 * vary;
  }
  if (form == Form::power) r.power = 1.1 * vary;
  return r;
}

/// One draw of a batch's friction. Only what differs between draws is taken over.
inline Resistance<8> together(const std::vector<Resistance<1>>& alone,
                              friction::FrictionLaw law,
                              friction::Transition::Kind transition) {
  Resistance<8> r;
  r.form = alone.front().form;
  friction::FactorRule<8> rule;
  for (int lane = 0; lane < 8; ++lane) {
    const Resistance<1>& one = alone[static_cast<std::size_t>(lane)];
    r.carry.set(lane, one.carry.number);
    r.damp.set(lane, one.damp.number);
    r.quadratic.set(lane, one.quadratic.number);
    r.darcy.set(lane, one.darcy.number);
    r.reynolds.set(lane, one.reynolds.number);
    r.power.set(lane, one.power.number);
    const auto at = static_cast<std::size_t>(lane);
    rule.law[at] = law;
    rule.transition[at] = {transition, 2100.0, 4000.0};
    if (r.form == Form::darcy) {
      rule.relative_roughness.set(lane, one.rule.relative_roughness.number);
      rule.scatter.set(lane, one.rule.scatter.number);
    }
  }
  if (r.form == Form::darcy) r.rule = friction::prepare<8>(rule);
  return r;
}

}  // namespace headband::test
