#pragma once
// SPDX-License-Identifier: MIT
//
// The march: W draws of one network along the characteristics, step by step.

#include "transient/march/cluster.hpp"
#include "transient/march/numbers.hpp"

#include <vector>

namespace headband::transient {

enum class MarchStatus : std::int8_t { completed, not_finite, boundary_not_converged };

/// A pump set's or check valve's own memory, one draw.
struct BranchMemory {
  bool shut = false;
  bool may_reverse = false;   ///< a check valve that has not shut yet
  double reversed_at = -1.0;  ///< time the flow turned [s]; < 0: forward
  double speed = 1.0;         ///< share of rated
  double torque = 0.0;        ///< share of rated
  double flow = 0.0;          ///< of the set [m3/s]
};

/// Everything that moves; contiguous rows.
template <int W>
struct State {
  std::vector<Lanes<W>> head, flow, flow_before, volume;   ///< per row
  std::vector<Lanes<W>> head_max, head_min;                ///< per row; empty = no envelopes
  std::vector<Lanes<W>> root, root_on;                     ///< per row: friction::darcy_factor_near; empty = not needed
  std::vector<char> cavities;                              ///< per pipe: its rows hold cavities
  std::vector<Arriving<W>> wave;                           ///< per side
  std::vector<Lanes<W>> per_impedance;                     ///< per side: 1 / wave.impedance
  std::vector<Lanes<W>> side_flow;                         ///< per side, into the place [m3/s]
  std::vector<Lanes<W>> place_head, place_max, place_min;  ///< per place [m]
  std::vector<Lanes<W>> place_volume, place_growth;        ///< cavity at a place [m3], [m3/s]
  std::vector<Lanes<W>> branch_flow;                       ///< from -> to [m3/s]
  std::vector<Lanes<W>> branch_coefficient;                ///< now [m^2.5/s]
  std::vector<Lanes<W>> branch_opening;                    ///< travel, or share of the starting flow
  std::vector<Lanes<W>> draw;                              ///< fixed draw-offs now [m3/s]
  std::vector<BranchMemory> memory;                        ///< [branch * W + lane]
  CavityTally<W> tally;
};

/// An end of a pipe without fittings at a place, with fixed or linear friction: what it receives and where it sends.
template <int W>
struct PipeEnd {
  const Lanes<W>*carry = nullptr, *damp = nullptr, *quadratic = nullptr;  ///< of the pipe's friction
  const Lanes<W>*head = nullptr, *flow = nullptr;                         ///< of the row beside the end
  Lanes<W>*end_head = nullptr, *end_flow = nullptr;                       ///< of the end's own row
  int place = 0;
  bool far = false;
  bool shared = false;  ///< its place is a basin or joins several ends: 1 / impedance is needed
};

/// Marches W draws. Prepare, then run with an observer:
///   begin(march) · step(march, k) -> bool go on · before_jump(march, k), after_jump(march, k)
template <int W>
class March {
 public:
  March(const network::Case& c, const network::Plan& plan, Layout layout);

  /// Sets the first steady state on the grids. @param envelopes kept per row (places always are)
  void prepare(const network::Values<W>& values,
               const steady::SteadyState<W>& steady,
               const base::PerLane<const Grid*, W>& grids,
               bool envelopes);

  template <class Observer>
  void run(Observer& observe);

  [[nodiscard]] const Layout& layout() const { return layout_; }
  [[nodiscard]] const Numbers<W>& numbers() const { return numbers_; }
  [[nodiscard]] const State<W>& state() const { return state_; }
  [[nodiscard]] State<W>& state() { return state_; }
  [[nodiscard]] const std::vector<Jump>& jumps() const { return jumps_; }
  [[nodiscard]] const Lanes<W>& time() const { return time_; }
  [[nodiscard]] MarchStatus status(int lane) const { return status_[static_cast<std::size_t>(lane)]; }
  void set_status(int lane, MarchStatus s) { status_[static_cast<std::size_t>(lane)] = s; }
  [[nodiscard]] const PipeRows<W>& rows_of(std::size_t pipe) const { return rows_[pipe]; }
  /// Sum of the outflows of a place's branches now [m3/s].
  [[nodiscard]] Lanes<W> branch_outflow(int place) const;
  [[nodiscard]] Lanes<W> draw_outflow(int place) const;
  [[nodiscard]] const network::Plan& plan() const { return *plan_; }
  [[nodiscard]] const network::Case& the_case() const { return *case_; }

 private:
  void set_initial_pipes(const network::Values<W>& values, const steady::SteadyState<W>& steady);
  void set_initial_places(const steady::SteadyState<W>& steady);
  void set_initial_branches(const steady::SteadyState<W>& steady);
  void point_rows();
  void find_simple();
  void step_simply();
  void solve_simply();
  void open_branch(std::size_t j, const Lanes<W>& opening);
  void move_devices();
  void receive_waves();
  void march_pipes();
  void solve_places();
  void solve_place(int place);
  void solve_valve(const Cluster& cluster);
  void solve_lane(const Cluster& cluster, int lane, double time_step);
  void load_branch(const Branch& b, std::size_t j, int lane, double time_step, ClusterBranch& out);
  void load_pump(const Branch& b, std::size_t k, int lane, double time_step, ClusterBranch& out);
  void store_lane(const Cluster& cluster, int lane, double time_step);
  void remember(std::size_t j, int lane, const ClusterBranch& b, double time_step);
  void give_head(int place, const Lanes<W>& head);
  void send_ends();
  void jump(long long step);
  [[nodiscard]] bool is_over(const Jump& j) const;
  void move_subject(const Jump& j);
  void solve_around(const Jump& j);
  void rigid_losses();

  const network::Case* case_;
  const network::Plan* plan_;
  Layout layout_;
  Numbers<W> numbers_;
  State<W> state_;
  std::vector<Jump> jumps_;
  std::size_t next_jump_ = 0;
  Lanes<W> time_;
  base::PerLane<MarchStatus, W> status_{};
  ClusterSolver solver_;
  bool simple_ = false;                                  ///< each step by step_simply
  std::vector<PipeEnd<W>> ends_;                         ///< per side, while `simple_`
  std::vector<int> outlets_;                             ///< per cluster, while `simple_`: its valve to the air, or -1
  std::vector<PipeRows<W>> rows_;                        ///< per pipe, into the state
  std::vector<int> local_place_;                         ///< place -> index in the cluster being solved
  std::vector<Lanes<W>> rigid_offset_, rigid_slope_;     ///< per branch
  std::vector<Lanes<W>> place_head_free_, place_gives_;  ///< Thevenin: head without outflow, impedance
};

/// The time loop: interior, places, observers.
template <int W>
template <class Observer>
void March<W>::run(Observer& observe) {
  long long last = 0;
  for (const long long n : numbers_.last_step) last = n > last ? n : last;
  next_jump_ = 0;
  time_ = Lanes<W>(0.0);
  observe.begin(*this);
  const auto jump_if_due = [&](long long step) {
    if (next_jump_ >= jumps_.size() || jumps_[next_jump_].step != step) return;
    observe.before_jump(*this, step);
    jump(step);
    observe.after_jump(*this, step);
  };
  jump_if_due(0);
  for (long long step = 1; step <= last; ++step) {
    time_ = numbers_.time_step * static_cast<double>(step);
    if (simple_) {
      step_simply();
    } else {
      move_devices();
      receive_waves();
      march_pipes();
      solve_places();
      send_ends();
    }
    if (!observe.step(*this, step)) return;
    jump_if_due(step);
  }
}

}  // namespace headband::transient
