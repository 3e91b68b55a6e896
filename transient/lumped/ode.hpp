#pragma once
// SPDX-License-Identifier: MIT

#include <functional>
#include <vector>

namespace headband::transient {

using OdeState = std::vector<double>;
/// Rates of change of a state: (state, rates, time [s]).
using OdeRates = std::function<void(const OdeState&, OdeState&, double)>;
/// A scalar whose first zero ends the run; empty = none.
using OdeEvent = std::function<double(const OdeState&, double)>;

enum class OdeStatus { reached_end, event, not_finite, too_many_steps, step_too_small };

struct OdeOptions {
  double tolerance = 1e-10;        ///< relative and absolute, of each component
  double first_step = 1e-3;        ///< [s], > 0
  double smallest_step = 1e-12;    ///< [s]; below it the run ends with step_too_small
  long long most_steps = 1000000;  ///< bound of the loop
};

/// What came of a run: the state at each asked time that was reached, and how it ended.
struct OdeRun {
  OdeStatus status = OdeStatus::reached_end;
  std::vector<double> time;     ///< [s], the asked times reached
  std::vector<OdeState> state;  ///< as `time`
  double end_time = 0.0;        ///< [s], the event's time where one ended the run
  OdeState end_state;
  long long steps = 0;
};

/// Integrates an ordinary differential equation by Dormand and Prince's fifth-order method with dense output
/// (Boost.Odeint), giving the state at the asked times.
/// @param times ascending, from the start time on [s]
/// A rate that is not finite, a step that vanishes or too many steps are a status, not a throw.
[[nodiscard]] OdeRun integrate(const OdeRates& rates,
                               const OdeState& start,
                               const std::vector<double>& times,
                               const OdeEvent& event = {},
                               const OdeOptions& options = {});

}  // namespace headband::transient
