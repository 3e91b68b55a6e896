// SPDX-License-Identifier: MIT

#include "core/network/valve_law.hpp"

#include "core/base/elementary.hpp"

namespace headband::network {
namespace {

/// Straight lines between the points of a table.
template <int W>
Lanes<W> share_by_table(const std::vector<std::pair<double, double>>& points, const Lanes<W>& travel) {
  Lanes<W> share = points.front().second;
  for (std::size_t i = 1; i < points.size(); ++i) {
    const auto [x0, y0] = points[i - 1];
    const auto [x1, y1] = points[i];
    const Lanes<W> inside = y0 + (y1 - y0) * ((travel - x0) / Lanes<W>(x1 - x0));
    share = base::select(travel > Lanes<W>(x0), inside, share);
  }
  return base::select(travel >= Lanes<W>(points.back().first), Lanes<W>(points.back().second), share);
}

template <int W>
Lanes<W> inherent_share(const ValveLaw& law, const Lanes<W>& travel) {
  switch (law.kind) {
    case ValveLawKind::linear:
      return travel;
    case ValveLawKind::power:
      return base::pow(travel, law.parameter);
    case ValveLawKind::equal_percentage:
      return base::select(travel > Lanes<W>(0.0), base::pow(Lanes<W>(law.parameter), travel - 1.0), Lanes<W>(0.0));
    case ValveLawKind::quick_opening:
      return base::sqrt(travel);
    case ValveLawKind::table:
      return law.points.empty() ? travel : share_by_table(law.points, travel);
  }
  return travel;
}

}  // namespace

template <int W>
Lanes<W> share_of_full(const ValveLaw& law, const Lanes<W>& travel, const Lanes<W>& seat_power) {
  const Lanes<W> inside = base::min(base::max(travel, Lanes<W>(0.0)), Lanes<W>(1.0));
  const Lanes<W> share = inherent_share(law, inside);
  const base::Mask<W> plain = seat_power == Lanes<W>(1.0);
  if (base::all(plain)) return share;
  return base::select(plain, share, base::pow(share, seat_power));
}

template Lanes<1> share_of_full<1>(const ValveLaw&, const Lanes<1>&, const Lanes<1>&);
template Lanes<8> share_of_full<8>(const ValveLaw&, const Lanes<8>&, const Lanes<8>&);

}  // namespace headband::network
