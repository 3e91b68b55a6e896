// SPDX-License-Identifier: MIT
#include "transient/march/spots.hpp"

#include "core/pipe/profile.hpp"

#include <algorithm>
#include <cmath>

namespace headband::transient {

template <int W>
double elevation_of(const network::PipeValues<W>& pipe, double chainage, int lane) {
  return pipe::elevation_at<W>(pipe.chainage, pipe.elevation, Lanes<W>(chainage))[lane];
}

template <int W>
Spot make_spot(const March<W>& march, const network::Values<W>& values, int pipe, double chainage, int lane) {
  const auto i = static_cast<std::size_t>(pipe);
  const PipeNumbers<W>& p = march.numbers().pipes[i];
  const int reaches = p.reaches[static_cast<std::size_t>(lane)];
  Spot spot;
  spot.pipe = pipe;
  spot.chainage = std::clamp(chainage, 0.0, values.pipes[i].length[lane]);
  spot.elevation = elevation_of<W>(values.pipes[i], spot.chainage, lane);
  if (reaches == 0) {
    spot.row = p.first_row;
    spot.share = spot.chainage / values.pipes[i].length[lane];
    return spot;
  }
  const double at = spot.chainage / p.reach[lane];
  // a chainage written in round numbers shall meet its row in spite of rounding
  const double nearest = std::round(at);
  const double exact = std::fabs(at - nearest) < 1e-9 * std::max(1.0, nearest) ? nearest : at;
  const int row = std::clamp(static_cast<int>(std::floor(exact)), 0, reaches - 1);
  spot.row = p.first_row + static_cast<std::size_t>(row);
  spot.share = std::clamp(exact - row, 0.0, 1.0);
  return spot;
}

template <int W>
double head_at(const March<W>& march, const Spot& spot, int lane) {
  const auto& p = march.numbers().pipes[static_cast<std::size_t>(spot.pipe)];
  double a = 0.0, b = 0.0;
  if (p.reaches[static_cast<std::size_t>(lane)] == 0) {
    const auto& plan = march.plan().pipes[static_cast<std::size_t>(spot.pipe)];
    a = march.state().place_head[plan.from.at()][lane];
    b = march.state().place_head[plan.to.at()][lane];
  } else {
    a = march.state().head[spot.row][lane];
    b = march.state().head[spot.row + 1][lane];
  }
  if (spot.share == 0.0) return a;
  return spot.share == 1.0 ? b : a + spot.share * (b - a);
}

template <int W>
double flow_at(const March<W>& march, const Spot& spot, int lane) {
  const auto i = static_cast<std::size_t>(spot.pipe);
  const auto& state = march.state();
  if (march.numbers().pipes[i].reaches[static_cast<std::size_t>(lane)] == 0) {
    const auto& branches = march.layout().branches;
    for (std::size_t j = 0; j < branches.size(); ++j)
      if (branches[j].kind == BranchKind::rigid_pipe && branches[j].index == spot.pipe)
        return state.branch_flow[j][lane];
    return 0.0;
  }
  const bool cavities = state.cavities[i] != 0;
  const double before = cavities ? state.flow_before[spot.row][lane] : state.flow[spot.row][lane];
  const double after = cavities ? state.flow_before[spot.row + 1][lane] : state.flow[spot.row + 1][lane];
  if (spot.share == 0.0) return before;
  if (spot.share == 1.0) return after;
  const double leaving = state.flow[spot.row][lane];
  return leaving + spot.share * (after - leaving);
}

#define HEADBAND_SPOTS(W)                                                                   \
  template double elevation_of<W>(const network::PipeValues<W>&, double, int);              \
  template Spot make_spot<W>(const March<W>&, const network::Values<W>&, int, double, int); \
  template double head_at<W>(const March<W>&, const Spot&, int);                            \
  template double flow_at<W>(const March<W>&, const Spot&, int);
HEADBAND_SPOTS(1)
HEADBAND_SPOTS(8)
#undef HEADBAND_SPOTS

}  // namespace headband::transient
