// SPDX-License-Identifier: MIT
#include "transient/lumped/ode.hpp"

#include <boost/math/tools/toms748_solve.hpp>
#include <boost/numeric/odeint.hpp>

#include <algorithm>
#include <cmath>

namespace headband::transient {

namespace odeint = boost::numeric::odeint;

namespace {

bool finite(const OdeState& state) {
  return std::ranges::all_of(state, [](double x) { return std::isfinite(x); });
}

/// The first time in [from, to] at which the event's function is zero; both ends have different signs.
template <class Value>
double crossing(const Value& value, double from, double to, double at_from, double at_to) {
  std::uintmax_t evaluations = 60;
  const auto bracket = boost::math::tools::toms748_solve(
      value, from, to, at_from, at_to, boost::math::tools::eps_tolerance<double>(50), evaluations);
  return 0.5 * (bracket.first + bracket.second);
}

}  // namespace

OdeRun integrate(const OdeRates& rates,
                 const OdeState& start,
                 const std::vector<double>& times,
                 const OdeEvent& event,
                 const OdeOptions& options) {
  OdeRun run;
  bool rates_finite = true;
  // Odeint takes NaN rates for success (and never returns from a blow-up), so the rates are watched here.
  const auto watched = [&](const OdeState& state, OdeState& change, double time) {
    rates(state, change, time);
    rates_finite = rates_finite && finite(change);
  };
  auto stepper =
      odeint::make_dense_output(options.tolerance, options.tolerance, odeint::runge_kutta_dopri5<OdeState>());
  stepper.initialize(start, times.front(), options.first_step);
  run.end_time = times.front();
  run.end_state = start;
  std::size_t next = 0;
  OdeState at_time(start.size());
  double value_before = event ? event(start, times.front()) : 0.0;
  for (; next < times.size() && times[next] <= times.front(); ++next) {
    run.time.push_back(times[next]);
    run.state.push_back(start);
  }
  while (next < times.size()) {
    if (++run.steps > options.most_steps) {
      run.status = OdeStatus::too_many_steps;
      return run;
    }
    std::pair<double, double> step;
    try {
      step = stepper.do_step(watched);
    } catch (const odeint::odeint_error&) {  // it gives up after some hundred refused steps
      run.status = rates_finite ? OdeStatus::step_too_small : OdeStatus::not_finite;
      return run;
    }
    const auto [from, to] = step;
    if (!rates_finite || !finite(stepper.current_state())) {
      run.status = OdeStatus::not_finite;
      return run;
    }
    double reached = to;
    if (event) {
      const double value_after = event(stepper.current_state(), to);
      if (value_before != 0.0 && value_before * value_after <= 0.0) {
        const auto along = [&stepper, &at_time, &event](double time) {
          stepper.calc_state(time, at_time);
          return event(at_time, time);
        };
        reached = crossing(along, from, to, value_before, value_after);
        run.status = OdeStatus::event;
      }
      value_before = value_after;
    }
    for (; next < times.size() && times[next] <= reached; ++next) {
      stepper.calc_state(times[next], at_time);
      run.time.push_back(times[next]);
      run.state.push_back(at_time);
    }
    stepper.calc_state(reached, at_time);
    run.end_time = reached;
    run.end_state = at_time;
    if (run.status == OdeStatus::event) return run;
    if (to - from < options.smallest_step) {
      run.status = OdeStatus::step_too_small;
      return run;
    }
  }
  run.status = OdeStatus::reached_end;
  return run;
}

}  // namespace headband::transient
