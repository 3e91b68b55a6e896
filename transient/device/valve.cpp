// SPDX-License-Identifier: MIT
#include "transient/device/valve.hpp"

#include "core/base/elementary.hpp"

#include <algorithm>

namespace headband::transient {
namespace {

template <int W>
Lanes<W> table_share(const network::ValveLaw& law, const Lanes<W>& travel) {
  const auto& p = law.points;
  Lanes<W> share(p.empty() ? 1.0 : p.front().second);
  for (std::size_t i = 1; i < p.size(); ++i) {
    const auto [x0, y0] = p[i - 1];
    const auto [x1, y1] = p[i];
    if (!(x1 > x0)) continue;
    const Lanes<W> line = y0 + (travel - Lanes<W>(x0)) * ((y1 - y0) / (x1 - x0));
    share = select(travel >= Lanes<W>(x1), Lanes<W>(y1), select(travel >= Lanes<W>(x0), line, share));
  }
  return share;
}

// base^exponent for base >= 0, exactly 0 at 0 and 1 at 1.
template <int W>
Lanes<W> raised(const Lanes<W>& base, const Lanes<W>& exponent) {
  const Lanes<W> safe = max(base, Lanes<W>(1e-300));
  return select(base > Lanes<W>(0.0), exp(exponent * log(safe)), Lanes<W>(0.0));
}

}  // namespace

template <int W>
Lanes<W> valve_share(const network::ValveLaw& law, const Lanes<W>& travel, const Lanes<W>& seat_power) {
  using Kind = network::ValveLawKind;
  Lanes<W> share = travel;
  switch (law.kind) {
    case Kind::linear:
      break;
    case Kind::power:
      if (law.parameter != 1.0) share = raised(travel, Lanes<W>(law.parameter));
      break;
    case Kind::equal_percentage:  // R^(travel - 1), shut at 0 %
      share = select(travel > Lanes<W>(0.0),
                     exp((travel - Lanes<W>(1.0)) * log(Lanes<W>(law.parameter))),
                     Lanes<W>(0.0));
      break;
    case Kind::quick_opening:
      share = sqrt(max(travel, Lanes<W>(0.0)));
      break;
    case Kind::table:
      share = table_share<W>(law, travel);
      break;
  }
  if (all(seat_power == Lanes<W>(1.0))) return share;
  return select(seat_power == Lanes<W>(1.0), share, raised(share, seat_power));
}

template Lanes<1> valve_share<1>(const network::ValveLaw&, const Lanes<1>&, const Lanes<1>&);
template Lanes<8> valve_share<8>(const network::ValveLaw&, const Lanes<8>&, const Lanes<8>&);

}  // namespace headband::transient
