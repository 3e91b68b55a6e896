#pragma once
// SPDX-License-Identifier: MIT

#include "core/steady/explicit_flow.hpp"

#include <array>
#include <vector>

namespace headband::steady::detail {

/// All links of one draw as plain numbers: loss and slope at trial flows. Pipes are evaluated eight at a time.
class LaneLinks {
 public:
  explicit LaneLinks(const FlowGraph& graph);

  /// Takes the numbers of one lane.
  template <int W>
  void take(const FlowGraph& graph, const LinkNumbers<W>& numbers, int lane);

  /// Fills `loss` and `slope` at `flow`. One-way links rise steeply below zero flow, jumps of the law are steep ramps.
  void evaluate(const FlowGraph& graph, const std::vector<double>& flow);

  /// Where the law of a pipe jumps (transition `switch`).
  struct Jump {
    double flow = 0.0;                ///< [m3/s]; 0 = nowhere
    double below = 0.0, above = 0.0;  ///< loss on both sides [m]
    [[nodiscard]] double width() const { return ramp_share * flow; }
  };
  static constexpr double ramp_share = 1e-7;  ///< a ramp's width as a share of the flow where it stands

  std::vector<double> loss, slope;   ///< per link [m], [s/m2]
  std::vector<double> start_flow;    ///< per link, where Newton begins [m3/s]
  std::vector<double> loss_at_rest;  ///< per link, at zero flow: minus the shut-off head of pumps [m]
  std::vector<char> passable;        ///< per link: 0 = a valve that is shut in this draw
  std::vector<Jump> jumps;           ///< per link
  double head_scale = 0.0;           ///< size of the heads that drive the flow [m]
  double flow_scale = 0.0;           ///< size of a flow that counts [m3/s]
  double least_slope = 0.0;          ///< keeps the matrix from being singular [s/m2]

 private:
  struct Group {
    std::array<int, 8> link{};
    int used = 0;
    PipeFriction<8> friction;
  };
  [[nodiscard]] Group& group_for(network::LossKind kind);
  void evaluate_device(const Link& link, std::size_t l, double flow);
  void find_scales(const FlowGraph& graph, const std::vector<double>& held_heads, double known_flows);
  void find_jump(std::size_t l, const PipeFriction<1>& friction);
  void climb_the_jump(std::size_t l, double flow);

  std::vector<Group> groups_;  ///< pipes of one kind of law each
  std::size_t used_groups_ = 0;
  std::array<int, 5> open_group_{};            ///< per LossKind: the group with room
  std::vector<double> resistance_;             ///< per link: valves, check valves [s2/m5]
  std::vector<network::PumpCurve<1>> curves_;  ///< per link
  std::vector<double> count_;                  ///< per link: pumps in parallel
  std::vector<double> held_heads_;
  double back_slope_ = 0.0;  ///< of one-way links below zero flow [s/m2]
  bool has_jumps_ = false;
};

}  // namespace headband::steady::detail
