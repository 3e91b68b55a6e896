#pragma once
// SPDX-License-Identifier: MIT
//
// From a built case to a marched run.

#include "core/steady/steady.hpp"
#include "tests/support/case_builder.hpp"
#include "transient/march/surge.hpp"

#include <cmath>
#include <stdexcept>
#include <string>

namespace headband::test {

/// A case marched once.
struct Marched {
  network::Case c;
  network::Plan plan;
  network::Values<1> values;
  steady::SteadyState<1> steady;
  transient::SurgeRun run;

  explicit Marched(CaseBuilder& builder) : c(builder.finish()), plan(network::make_plan(c)) {
    values = network::realise(c, plan);
    steady::SteadySolver solver(c, plan);
    solver.solve<1>(values, steady);
    if (!steady::is_usable(steady.status[0])) throw std::runtime_error("no steady state");
    run = transient::run_surge(c, plan, values, steady);
  }
  /// The same from a steady state found elsewhere.
  template <class FindSteady>
  Marched(CaseBuilder& builder, const FindSteady& find) : c(builder.finish()), plan(network::make_plan(c)) {
    values = network::realise(c, plan);
    steady = find(c, plan, values);
    run = transient::run_surge(c, plan, values, steady);
  }
  [[nodiscard]] std::size_t rows() const { return run.transient.time.size(); }
  [[nodiscard]] double time(std::size_t row) const { return run.transient.time[row]; }
  [[nodiscard]] std::size_t row_at(double time) const {
    return static_cast<std::size_t>(std::llround(time / run.grid.time_step));
  }
  [[nodiscard]] double head(std::size_t row, const std::string& probe) const {
    return run.transient.probe_head[row * run.transient.probe_name.size() + index(run.transient.probe_name, probe)];
  }
  [[nodiscard]] double flow(std::size_t row, const std::string& probe) const {
    return run.transient.probe_flow[row * run.transient.probe_name.size() + index(run.transient.probe_name, probe)];
  }
  [[nodiscard]] double series(std::size_t row, const std::string& name) const {
    return run.transient.series[row * run.transient.series_name.size() + index(run.transient.series_name, name)];
  }
  [[nodiscard]] const answers::PlaceAnswer& place(const std::string& name) const {
    return run.places.at(static_cast<std::size_t>(plan.place_named(name)));
  }
  [[nodiscard]] int events_of(const std::string& kind) const {
    int n = 0;
    for (const auto& e : run.events) n += e.kind == kind ? 1 : 0;
    return n;
  }

 private:
  static std::size_t index(const std::vector<std::string>& names, const std::string& name) {
    for (std::size_t i = 0; i < names.size(); ++i)
      if (names[i] == name) return i;
    throw std::out_of_range("no history of " + name);
  }
};

/// One pipe from a reservoir to a valve in the air, level at datum.
struct ValveLine {
  CaseBuilder b;
  network::Pipe* pipe = nullptr;
  network::Valve* valve = nullptr;

  struct Numbers {
    double length = 600.0, wave_speed = 1200.0, bore = 0.5, level = 80.0, flow = 0.1, factor = 0.0;
    double kinematic_viscosity = 1e-6;
  };
  explicit ValveLine(const Numbers& n) : b(1000.0, n.kinematic_viscosity) {
    b.basin("reservoir", n.level);
    pipe = &b.pipe("line", "reservoir", "end", n.length, n.bore);
    CaseBuilder::profile_point(*pipe, 0.0, 0.0);
    CaseBuilder::profile_point(*pipe, n.length, 0.0);
    pipe->wave_speed = exact(n.wave_speed, Dimension::velocity);
    if (n.factor > 0.0) {
      pipe->roughness = {};
      pipe->friction_factor = exact(n.factor);
    } else if (n.factor == 0.0) {
      b.c.friction.law.options = {{network::FrictionLaw::none, 1.0}};
    }
    if (n.flow > 0.0) {
      valve = &b.valve_by_flow("valve", "end", "air", n.flow);
    } else {
      valve = &b.valve("valve", "end", "air");
    }
  }
};

}  // namespace headband::test
