#pragma once
// SPDX-License-Identifier: MIT
//
// Cases made in code, for tests that need a pipeline but no file. Quantities are named as the reader names them
// ("main wall", "liquid viscosity"), in the order of the case's lists.
//
//   CaseBuilder build;
//   build.basin("tank", 100.0);
//   build.pipe("main", "tank", "end", 1800.0, 0.492).roughness = lognormal(1e-4, 3.0, Dimension::length);
//   build.valve_by_flow("end valve", "end", "air", 0.1);
//   network::Case c = build.finish();

#include "core/base/error.hpp"
#include "core/network/case.hpp"
#include "core/network/each_quantity.hpp"

#include <cmath>
#include <stdexcept>
#include <string>
#include <utility>
#include <vector>

namespace headband::test {

using base::Dimension;
using base::Quantity;

/// 0.975 quantile of the standard normal: half-widths of 95 % intervals are this many standard deviations.
inline constexpr double half_width_95 = 1.959963984540054;

/// A value without spread [SI].
inline Quantity exact(double value, Dimension dimension = Dimension::number) {
  Quantity q;
  q.value = value;
  q.dimension = dimension;
  return q;
}

/// "value ± half_width" (95 %).
inline Quantity normal(double value, double half_width, Dimension dimension = Dimension::number) {
  Quantity q = exact(value, dimension);
  q.spread = base::Normal{half_width / half_width_95};
  return q;
}

/// "value x/ factor" (95 %).
inline Quantity lognormal(double value, double factor, Dimension dimension = Dimension::number) {
  Quantity q = exact(value, dimension);
  q.spread = base::LogNormal{std::log(factor) / half_width_95};
  return q;
}

/// "value between low and high".
inline Quantity even(double value, double low, double high, Dimension dimension = Dimension::number) {
  Quantity q = exact(value, dimension);
  q.spread = base::Even{low, high};
  return q;
}

/// "low .. high, not random"; the central run takes the middle.
inline Quantity not_random(double low, double high, Dimension dimension = Dimension::number) {
  Quantity q = exact(0.5 * (low + high), dimension);
  q.spread = base::NotRandom{low, high};
  return q;
}

/// "as NAME".
inline Quantity same_as(std::string name, Dimension dimension = Dimension::number) {
  Quantity q;
  q.same_as = std::move(name);
  q.dimension = dimension;
  return q;
}

/// Builds a Case element by element. References stay good up to `most_elements` of a kind.
class CaseBuilder {
 public:
  network::Case c;
  std::size_t most_elements = 256;  ///< of each kind; set before the first element

  /// Water-like liquid with fixed numbers, so that tests lean on no property formula.
  explicit CaseBuilder(double density = 1000.0, double kinematic_viscosity = 1e-6) {
    c.file_name = "built.toml";
    c.site.atmosphere = exact(101325.0, Dimension::pressure);
    c.site.gravity = exact(9.80665, Dimension::acceleration);
    c.liquid.name = "test liquid";
    c.liquid.temperature = exact(288.15, Dimension::temperature);
    c.liquid.density = exact(density, Dimension::density);
    c.liquid.viscosity = exact(kinematic_viscosity, Dimension::kinematic_viscosity);
    c.liquid.bulk_modulus = exact(2.14e9, Dimension::modulus);
    c.liquid.vapour_pressure = exact(1705.0, Dimension::pressure);
    c.friction.law.options = {{network::FrictionLaw::colebrook_white, 1.0}};
    c.friction.law.name = "friction law";
    c.friction.transition.options = {{network::Transition{}, 1.0}};
    c.friction.transition.name = "friction transition";
  }

  network::Basin& basin(const std::string& name, double level) {
    auto& b = add(c.basins, name);
    b.level = exact(level, Dimension::length);
    return b;
  }
  network::PlaceEntry& place(const std::string& name, double elevation) {
    auto& p = add(c.places, name);
    p.elevation = exact(elevation, Dimension::length);
    return p;
  }
  /// Pipe by length and bore [m]; roughness 0.1 mm, no wall, no wave speed, no profile.
  network::Pipe& pipe(
      const std::string& name, const std::string& from, const std::string& to, double length, double bore) {
    auto& p = add(c.pipes, name);
    p.from = from;
    p.to = to;
    p.length = exact(length, Dimension::length);
    p.bore = exact(bore, Dimension::length);
    p.roughness = exact(1e-4, Dimension::length);
    return p;
  }
  /// Adds a survey point (chainage, elevation) [m].
  static void profile_point(network::Pipe& pipe, double chainage, double elevation) {
    pipe.profile.emplace_back(exact(chainage, Dimension::length), exact(elevation, Dimension::length));
  }
  /// Adds `count` fittings of loss coefficient k each.
  static network::Fitting& fitting(network::Pipe& pipe, const std::string& name, double k, double count = 1.0) {
    auto& f = pipe.fittings.emplace_back();
    f.name = name;
    f.count = exact(count);
    f.k = exact(k);
    return f;
  }
  /// Valve without a size: the caller sets one of kv, k, area + discharge_coefficient, flow.
  network::Valve& valve(const std::string& name, const std::string& from, const std::string& to) {
    auto& v = add(c.valves, name);
    v.from = from;
    v.to = to;
    v.opening = exact(1.0, Dimension::share);
    return v;
  }
  network::Valve& valve_by_flow(const std::string& name, const std::string& from, const std::string& to, double flow) {
    auto& v = valve(name, from, to);
    v.flow = exact(flow, Dimension::flow);
    return v;
  }
  /// Valve by Cd·A [m2]: Q = CdA sqrt(2 g dH).
  network::Valve& valve_by_area(const std::string& name,
                                const std::string& from,
                                const std::string& to,
                                double area_times_cd) {
    auto& v = valve(name, from, to);
    v.area = exact(area_times_cd, Dimension::area);
    v.discharge_coefficient = exact(1.0);
    return v;
  }
  /// Pump by points (flow [m3/s], head [m]).
  network::Pump& pump(const std::string& name,
                      const std::string& from,
                      const std::string& to,
                      const std::vector<std::pair<double, double>>& curve) {
    auto& p = add(c.pumps, name);
    p.from = from;
    p.to = to;
    for (const auto& [flow, head] : curve)
      p.curve.rows.emplace_back(exact(flow, Dimension::flow), exact(head, Dimension::length));
    return p;
  }
  network::CheckValve& check_valve(const std::string& name, const std::string& from, const std::string& to) {
    auto& v = add(c.check_valves, name);
    v.from = from;
    v.to = to;
    return v;
  }
  network::DrawOff& draw_off(const std::string& name, const std::string& at, double flow) {
    auto& d = add(c.draw_offs, name);
    d.at = at;
    d.flow = exact(flow, Dimension::flow);
    return d;
  }

  /// Valve stroke to `to` [-] in `over` seconds from `at` [s]; over = 0 means "instant".
  network::Event& move_valve(const std::string& valve, double at, double to, double over) {
    auto& e = event(network::EventKind::move_valve, valve, at);
    e.to = exact(to, Dimension::share);
    set_duration(e, over);
    return e;
  }
  network::Event& trip_pump(const std::string& pump, double at) {
    return event(network::EventKind::trip_pump, pump, at);
  }
  network::Event& move_draw_off(const std::string& draw_off, double at, double to, double over) {
    auto& e = event(network::EventKind::move_draw_off, draw_off, at);
    e.to = exact(to, Dimension::flow);
    set_duration(e, over);
    return e;
  }
  network::Event& move_basin(const std::string& basin, double at, double to, double over) {
    auto& e = event(network::EventKind::move_basin, basin, at);
    e.to = exact(to, Dimension::length);
    set_duration(e, over);
    return e;
  }

  /// An answer or subject of a limit; none in `where`: everywhere.
  network::AnswerRequest& answer(network::AnswerKind kind, const std::string& name, std::vector<network::Spot> where) {
    auto& a = c.band.answers.emplace_back();
    a.kind = kind;
    a.name = name;
    a.where = std::move(where);
    c.band.given = true;
    return a;
  }
  static network::Spot at_place(const std::string& name) {
    network::Spot spot;
    spot.element = spot.written = name;
    return spot;
  }
  static network::Spot along_pipe(const std::string& name) {
    network::Spot spot = at_place(name);
    spot.on_pipe = true;
    return spot;
  }
  static network::Spot on_pipe(const std::string& name, double chainage) {
    network::Spot spot = along_pipe(name);
    spot.chainage = chainage;
    spot.written = name + " @ " + std::to_string(chainage) + " m";
    return spot;
  }
  /// Sets [surge] with everything at its defaults.
  network::SurgeRequest& surge(double duration, int reaches = 40) {
    c.surge.given = true;
    c.surge.duration = exact(duration, Dimension::time);
    c.surge.reaches = reaches;
    return c.surge;
  }

  /// Names every quantity, numbers the unknowns. @throws base::InputError when that finds a problem
  [[nodiscard]] network::Case finish() {
    network::for_each_quantity_in_words(c, [&](Quantity& q, const network::QuantityWords& words) {
      if (q.name.empty()) q.name = words.name();
      if (q.path.empty()) q.path = words.path();
      if (q.place.line == 0) q.place = {++line_, 1};
    });
    auto problems = network::number_unknowns(c);
    if (!problems.empty()) throw base::InputError(std::move(problems));
    return c;
  }

 private:
  template <class Element>
  Element& add(std::vector<Element>& list, const std::string& name) {
    list.reserve(most_elements);
    if (list.size() == most_elements) throw std::length_error("too many elements for a built case");
    auto& element = list.emplace_back();
    element.name = name;
    element.place = {++line_, 1};
    return element;
  }
  network::Event& event(network::EventKind kind, const std::string& subject, double at) {
    auto& e = add(c.events, "");
    e.kind = kind;
    e.subject = subject;
    e.at = exact(at, Dimension::time);
    return e;
  }
  static void set_duration(network::Event& e, double over) {
    e.instant = over == 0.0;
    if (!e.instant) e.over = exact(over, Dimension::time);
  }

  int line_ = 0;
};

}  // namespace headband::test
