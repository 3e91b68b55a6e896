// SPDX-License-Identifier: MIT

#include "core/network/valve_law.hpp"

#include <gtest/gtest.h>

#include <cmath>

namespace headband {
namespace {

using network::ValveLaw;
using network::ValveLawKind;

double share(const ValveLaw& law, double travel, double power = 1.0) {
  return network::share_of_full<1>(law, travel, power)[0];
}

TEST(ValveLaw, NamedLawsFollowTheirFormulas) {
  ValveLaw law;
  for (const double x : {0.0, 0.05, 0.3, 0.77, 1.0}) {
    law = {ValveLawKind::linear, 1.0, {}};
    EXPECT_EQ(share(law, x), x);
    law = {ValveLawKind::power, 1.5, {}};
    EXPECT_NEAR(share(law, x), std::pow(x, 1.5), 1e-15);
    law = {ValveLawKind::quick_opening, 1.0, {}};
    EXPECT_NEAR(share(law, x), std::sqrt(x), 1e-15);
    law = {ValveLawKind::equal_percentage, 50.0, {}};
    EXPECT_NEAR(share(law, x), x == 0.0 ? 0.0 : std::pow(50.0, x - 1.0), 1e-15);
  }
}

TEST(ValveLaw, TablesRunInStraightLinesAndStopAtTheirEnds) {
  const ValveLaw law{ValveLawKind::table, 1.0, {{0.0, 0.0}, {0.5, 0.28}, {1.0, 1.0}}};
  EXPECT_EQ(share(law, 0.0), 0.0);
  EXPECT_NEAR(share(law, 0.25), 0.14, 1e-15);
  EXPECT_NEAR(share(law, 0.5), 0.28, 1e-15);
  EXPECT_NEAR(share(law, 0.75), 0.64, 1e-15);
  EXPECT_EQ(share(law, 1.0), 1.0);
  EXPECT_EQ(share(law, 1.7), 1.0);
  EXPECT_EQ(share(law, -0.2), 0.0);
  const ValveLaw partial{ValveLawKind::table, 1.0, {{0.2, 0.1}, {0.9, 0.8}}};
  EXPECT_EQ(share(partial, 0.1), 0.1);
  EXPECT_EQ(share(partial, 0.95), 0.8);
}

TEST(ValveLaw, SeatPowerRaisesTheShare) {
  const ValveLaw law{ValveLawKind::table, 1.0, {{0.0, 0.0}, {0.5, 0.28}, {1.0, 1.0}}};
  EXPECT_NEAR(share(law, 0.25, 1.08), std::pow(0.14, 1.08), 1e-15);
  EXPECT_EQ(share(law, 0.0, 1.08), 0.0);
  EXPECT_EQ(share(law, 1.0, 0.92), 1.0);
}

TEST(ValveLaw, LanesEqualSingles) {
  const ValveLaw law{ValveLawKind::equal_percentage, 40.0, {}};
  base::Lanes<8> travel, power;
  for (int lane = 0; lane < 8; ++lane) {
    travel.set(lane, lane / 7.0);
    power.set(lane, lane % 2 == 0 ? 1.0 : 1.05);
  }
  const auto eight = network::share_of_full<8>(law, travel, power);
  for (int lane = 0; lane < 8; ++lane) EXPECT_EQ(eight[lane], share(law, travel[lane], power[lane]));
}

}  // namespace
}  // namespace headband
