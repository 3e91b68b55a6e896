#pragma once
// SPDX-License-Identifier: MIT

#include "core/network/case.hpp"

namespace headband::network {

using base::Lanes;

/// Share of the fully open flow coefficient at a travel.
///
/// linear: travel; power p: travel^p; equal percentage R: R^(travel - 1), shut at 0; quick opening: sqrt(travel);
/// table: straight lines between its points, the end values beyond them. The share is then raised to `seat_power`.
/// @param travel [-], cut to 0 .. 1
/// @param seat_power near_seat power [-], > 0; 1 leaves the share as it is
/// @return share [-], 0 .. 1 for the named laws; the same bits for every W
template <int W>
[[nodiscard]] Lanes<W> share_of_full(const ValveLaw& law, const Lanes<W>& travel, const Lanes<W>& seat_power);

extern template Lanes<1> share_of_full<1>(const ValveLaw&, const Lanes<1>&, const Lanes<1>&);
extern template Lanes<8> share_of_full<8>(const ValveLaw&, const Lanes<8>&, const Lanes<8>&);

}  // namespace headband::network
