#pragma once
// SPDX-License-Identifier: MIT

#include "core/network/values.hpp"

#include <array>
#include <memory>
#include <string>
#include <vector>

namespace headband::steady {

using base::Lanes;

enum class SteadyStatus {
  converged,
  not_converged,
  not_finite,
  on_jump,            ///< converged, with a pipe held at the Reynolds number where a `switch` jumps
  valve_without_head  ///< a valve sized by `flow` has no head difference in the direction of that flow
};

/// True where the numbers of the draw can be used.
[[nodiscard]] constexpr bool is_usable(SteadyStatus status) {
  return status == SteadyStatus::converged || status == SteadyStatus::on_jump;
}

/// Steady flow of W draws. Vectors repeat those of the Plan.
template <int W>
struct SteadyState {
  std::vector<Lanes<W>> pipe_flow;          ///< [m3/s], positive from -> to
  std::vector<Lanes<W>> place_head;         ///< [m of the liquid]
  std::vector<Lanes<W>> device_flow;        ///< as Plan::devices: from -> to, or out of the line [m3/s]
  std::vector<Lanes<W>> valve_coefficient;  ///< as Case::valves: fully open Q = c sqrt(dH) [m^2.5/s]
  std::vector<Lanes<W>> friction_factor;    ///< per pipe, Darcy, scatter included [-]
  std::vector<Lanes<W>> reynolds;           ///< per pipe [-]
  std::vector<Lanes<W>> head_loss;          ///< per pipe: friction and fittings [m], signed with the flow
  std::vector<Lanes<W>> wave_speed;         ///< per pipe, free gas at the mean steady pressure [m/s]; NaN unknown
  std::vector<Lanes<W>> pump_speed;         ///< as Case::pumps, share of rated speed [-]
  base::PerLane<SteadyStatus, W> status{};
  Lanes<W> residual;  ///< worst head residual of a loop or device [m]
  int iterations = 0;
};

struct SteadyOptions {
  int most_iterations = 100;  ///< Newton steps, >= 1
  double tolerance = 1e-9;    ///< relative on flow changes, and head residual as a share of the head range
};

/// Steady flow of one plan: built once (pattern analysed once), then solved for many draws. Not shared between threads.
class SteadySolver {
 public:
  SteadySolver(const network::Case& c, const network::Plan& plan, SteadyOptions options = {});
  ~SteadySolver();
  SteadySolver(SteadySolver&&) noexcept;
  SteadySolver& operator=(SteadySolver&&) noexcept;

  /// True where continuity alone fixes every flow: a tree, one basin, fixed draw-offs or `flow` valves.
  [[nodiscard]] bool is_explicit() const;

  /// Solves W draws; `state` keeps its storage. A draw that does not converge is a status, not a throw.
  template <int W>
  void solve(const network::Values<W>& values, SteadyState<W>& state);

  /// Solves two blocks of eight draws: the bits of one after the other, in less time where continuity gives the flows.
  void solve(const std::array<network::Values<8>, 2>& values, std::array<SteadyState<8>, 2>& states);

 private:
  struct Parts;
  std::unique_ptr<Parts> parts_;
};

extern template void SteadySolver::solve<1>(const network::Values<1>&, SteadyState<1>&);
extern template void SteadySolver::solve<8>(const network::Values<8>&, SteadyState<8>&);

}  // namespace headband::steady
