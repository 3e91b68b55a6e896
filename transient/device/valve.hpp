#pragma once
// SPDX-License-Identifier: MIT
//
// The flow a valve passes between two places.

#include "core/base/lanes.hpp"

namespace headband::transient {

using base::Lanes;

/// Flow through Q = coefficient sqrt(dH) between two sides that give way: dH = head - impedance Q [m3/s].
///
/// Written so that a shut valve passes exactly nothing and nothing cancels at small heads.
/// @param head      head difference at no flow [m], @param impedance of both sides together [s/m2], >= 0
/// @param coefficient [m^2.5/s], >= 0
template <int W>
[[nodiscard]] HEADBAND_INLINE Lanes<W> valve_flow(const Lanes<W>& head,
                                                  const Lanes<W>& impedance,
                                                  const Lanes<W>& coefficient) {
  const Lanes<W> size = abs(head);
  const Lanes<W> stiff = impedance * coefficient;
  const Lanes<W> root = stiff + sqrt(stiff * stiff + 4.0 * size);
  const Lanes<W> flow = (2.0 * size) * coefficient / max(root, Lanes<W>(1e-300));
  return select(head < Lanes<W>(0.0), -flow, flow);
}

}  // namespace headband::transient
