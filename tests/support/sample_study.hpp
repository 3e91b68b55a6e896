#pragma once
// SPDX-License-Identifier: MIT
//
// An invented study with every block filled, for tests of what is made of a study (file, JSON, text, page). The numbers
// are smooth made-up functions with the right signs and orders of size, not results of a calculation.

#include "core/answers/study.hpp"

#include <algorithm>
#include <cmath>
#include <cstddef>
#include <cstdint>
#include <string>
#include <vector>

namespace headband::support {

namespace sample {

inline constexpr double density = 999.1;  ///< [kg/m3]
inline constexpr double gravity = 9.80665;
inline constexpr double weight = density * gravity;  ///< pressure of one metre of the liquid [Pa]

/// Ground of the invented line at a share of its length [m].
inline double ground(double share) { return 90.0 - 50.0 * share + 6.0 * std::sin(9.0 * share); }

/// Head at a share of the length and a time: steady slope and a damped swing [m].
inline double head(double share, double time) {
  const double steady = 100.0 - 1.2 * share;
  return steady + 62.0 * share * std::exp(-0.02 * time) * std::sin(1.0101 * time);
}

/// Plain reproducible uniform numbers in (0, 1); only for made-up draws.
class Uniform {
 public:
  double operator()() {
    state_ = state_ * 6364136223846793005ULL + 1442695040888963407ULL;
    return (static_cast<double>(state_ >> 12U) + 0.5) / 4503599627370496.0;
  }
  /// About normal: the sum of twelve.
  double bell() {
    double sum = -6.0;
    for (int i = 0; i < 12; ++i) sum += (*this)();
    return sum;
  }

 private:
  std::uint64_t state_ = 20;
};

inline void provenance(answers::Study& s) {
  auto& p = s.provenance;
  p.case_file = "hollowmere.toml";
  p.case_text = "[about]\ntitle = \"Hollowmere gravity main\"\n# ü, ± and \"quotes\"\n";
  p.case_sha256 = "9f0c7f2d3a5b46c8a1e2d3f405162738495a6b7c8d9e0f1a2b3c4d5e6f708192";
  p.side_files = {{"ground.csv", "00aa11bb", "chainage [m],elevation [m]\n0,90\n1800,40\n"}};
  p.verb = "band";
  p.command = "headband band hollowmere.toml --surge";
  p.seed = 20;
  p.version = "0.1.0";
  p.commit = "0123abcd";
  p.build_kind = "release";
  p.compiler = "GNU 12.2.0";
  p.flags = "-O3 -march=x86-64-v3 -ffp-contract=off";
  p.libraries = "HDF5 1.10.8, Eigen 3.4.0";
  p.started = "2026-01-02T03:04:05Z";
  p.finished = "2026-01-02T03:04:09Z";
  p.wall_time = 4.25;
  p.threads = 2;
}

inline void steady(answers::Study& s) {
  answers::LiquidAnswer liquid;
  liquid.name = "water";
  liquid.source = "invented for tests";
  liquid.temperature = 288.15;
  liquid.density = density;
  liquid.kinematic_viscosity = 1.139e-6;
  liquid.dynamic_viscosity = 1.138e-3;
  liquid.bulk_modulus_isentropic = 2.148e9;
  liquid.bulk_modulus_isothermal = 2.14e9;
  liquid.sound_speed = 1466.0;
  liquid.vapour_pressure = 1705.8;
  s.liquid = liquid;
  s.density = density;
  s.gravity = gravity;
  s.atmosphere = 101325.0;

  answers::ValueEcho wall{"pipe/main/wall",
                          "main wall",
                          "8 mm between 7.2 mm and 8.4 mm",
                          0.008,
                          "m",
                          "even between 7.2 mm and 8.4 mm",
                          "mill sheet",
                          "B",
                          false,
                          "8 mm",
                          "0.315 in"};
  answers::ValueEcho scatter{"friction/scatter",
                             "friction scatter",
                             "± 10 %",
                             1.0,
                             "1",
                             "normal, 95 % within ± 10 %",
                             "default",
                             "",
                             true,
                             "1",
                             "1"};
  answers::ValueEcho sudden{"event/closing/over", "closing over", "1 s", 1.0, "s", "", "", "", false, "1 s", "1 s"};
  s.values = {wall, scatter, sudden};

  const std::vector<std::string> places = {"upper tank", "Süd-Schacht", "valve chamber"};
  for (int i = 0; i < 2; ++i) {
    answers::PipeAnswer p;
    p.name = i == 0 ? "upper main" : "lower main";
    p.from = places[static_cast<std::size_t>(i)];
    p.to = places[static_cast<std::size_t>(i) + 1];
    p.length = 900.0;
    p.bore = 0.492;
    p.roughness = 1e-4;
    p.restraint_factor = 1.0065;
    p.flow = 0.1;
    p.velocity = 0.526;
    p.reynolds = 227207.0;
    p.friction_factor = 0.01672 + 1e-5 * i;
    p.head_loss = 0.433;
    p.pressure_drop = -240e3 - 10.0 * i;
    p.wave_speed = 1157.9;
    p.rating = i == 0 ? 16e5 : answers::missing;
    p.joukowsky_head = 62.1;
    for (int j = 0; j <= 4; ++j) {
      const double share = 0.5 * i + 0.125 * j;
      p.chainage.push_back(225.0 * j);
      p.elevation.push_back(ground(share));
      p.steady_head.push_back(head(share, 0.0));
    }
    s.pipes.push_back(p);
  }
  for (std::size_t i = 0; i < places.size(); ++i) {
    const double share = 0.5 * static_cast<double>(i);
    answers::PlaceAnswer p;
    p.name = places[i];
    p.elevation = ground(share);
    p.head = head(share, 0.0);
    p.pressure = weight * (p.head - p.elevation);
    p.surged = true;
    p.max_head = p.head + 61.0 * share;
    p.max_pressure = weight * (p.max_head - p.elevation);
    p.time_of_max = 1.56;
    p.min_head = p.head - 58.0 * share;
    p.min_pressure = weight * (p.min_head - p.elevation);
    p.time_of_min = 4.67;
    s.places.push_back(p);
  }
  s.devices.push_back({"end valve", "valve", {{"flow_m3_per_s", 0.1}, {"head_m", 59.1}}});
  s.devices.push_back({"vessel",
                       "air_vessel",
                       {{"flow_m3_per_s", 0.0},
                        {"head_m", 81.0},
                        {"max_gas_volume_m3", 7.6},
                        {"min_gas_volume_m3", answers::missing}}});
  s.devices.push_back({"idle", "check_valve", {}});
  s.steady_status = "converged";
  s.steady_residual = 3.1e-13;
  s.steady_iterations = 6;
}

inline void transient(answers::Study& s) {
  answers::Transient t;
  constexpr int rows = 401;
  constexpr double step = 0.0194287;
  t.probe_name = {"valve chamber", "upper main @ 450 m", "Süd-Schacht"};
  const std::vector<double> shares = {1.0, 0.25, 0.5};
  t.series_name = {"end valve opening", "end valve flow", "vessel gas_volume"};
  t.series_units = {"1", "m3/s", "m3"};
  for (const double share : shares) t.probe_elevation.push_back(ground(share));
  for (int row = 0; row < rows; ++row) {
    const double time = step * row;
    t.time.push_back(time);
    for (std::size_t k = 0; k < shares.size(); ++k) {
      const double h = head(shares[k], time);
      t.probe_head.push_back(h);
      t.probe_pressure.push_back(weight * (h - t.probe_elevation[k]));
      t.probe_flow.push_back(k == 2 ? answers::missing : 0.1 * (1.0 - shares[k]) * std::cos(1.0101 * time));
    }
    t.series.push_back(std::max(0.0, 1.0 - time));
    t.series.push_back(0.1 * std::max(0.0, 1.0 - time));
    t.series.push_back(7.0 + 0.6 * std::sin(0.4 * time));
  }
  for (std::int32_t pipe = 0; pipe < 2; ++pipe) {
    for (int j = 0; j <= 20; ++j) {
      const double share = 0.5 * pipe + 0.025 * j;
      t.station_pipe.push_back(pipe);
      t.chainage.push_back(45.0 * j);
      t.elevation.push_back(ground(share));
      const double h = head(share, 0.0);
      t.steady_head.push_back(h);
      t.head_max.push_back(h + 61.0 * share);
      t.head_min.push_back(h - 58.0 * share);
      t.time_of_max.push_back(1.56);
      t.time_of_min.push_back(4.67);
      t.pressure_max.push_back(weight * (t.head_max.back() - t.elevation.back()));
      t.pressure_min.push_back(weight * (t.head_min.back() - t.elevation.back()));
      t.cavity_volume_max.push_back(j == 20 && pipe == 1 ? 0.012 : 0.0);
      t.time_with_cavity.push_back(j == 20 && pipe == 1 ? 1.4 : 0.0);
      t.vapour_head.push_back(t.elevation.back() - 10.17);
    }
  }
  t.cavities.push_back({"lower main", 900.0, 4.6, 6.0, 0.012});
  t.cavities.push_back({"lower main", 855.0, 7.5, answers::missing, 0.0004});
  t.cavities.push_back({"upper main", 450.0, 7.6, 7.7, 1e-9});
  t.last_good_time = t.time.back();
  t.status = "completed";

  s.highest = answers::Extreme{t.pressure_max.back(), t.head_max.back(), 900.0, 1.56, 4200.0, "lower main", true};
  s.lowest = answers::Extreme{t.pressure_min[4], t.head_min[4], 180.0, 4.67, answers::missing, "upper main", false};
  s.events = {{0.0, "end valve", "starts", "closing starts"},
              {1.0, "end valve", "ends", "closing ends, 0 % open"},
              {1.2, "valve chamber", "limit_crossed", "\"surge rating\" passed, 12.0 bar, then < 12.0 bar"},
              {4.6, "lower main", "cavity_opens", "cavity opens at 900 m"},
              {6.0, "lower main", "cavity_closes", "cavity closes at 900 m"}};
  s.audit = answers::Audit{2.1e-7, 8.8e-5, 0.0024, 1.1e-6, 0.0};
  answers::GridAnswer grid;
  grid.time_step = step;
  grid.worst_wave_speed_change = -0.0021;
  grid.worst_pipe = "upper main";
  grid.rigid_pipes = {"valve spool"};
  grid.reaches = {20, 20};
  grid.marched_wave_speed = {1155.5, 1157.9};
  grid.grids = 3;
  s.grid = grid;
  s.transient = std::move(t);
}

inline void bands(answers::Study& s) {
  constexpr int runs = 512;
  answers::Bands b;
  b.design = "sobol";
  b.seed = 20;
  b.draws_asked = 500;
  b.draws = runs;
  b.failed = 2;
  b.with_cavity = 61;
  b.surged = true;
  b.input_name = {"main wall", "main roughness", "main wave_speed_scatter", "friction scatter"};
  b.input_units = {"m", "m", "1", "1"};
  b.input_distribution = {"even between 7.2 mm and 8.4 mm",
                          "lognormal, 95 % within x/ 3",
                          "normal, 95 % within ± 3 %",
                          "normal, 95 % within ± 10 %"};
  b.limit_name = {"surge rating", "no vacuum", "flow lower main"};
  const std::vector<std::string> names = {"drop", "peak", "flow lower main"};
  const std::vector<std::string> where = {"upper tank, valve chamber", "valve chamber", "lower main"};
  const std::vector<std::string> kinds = {"pressure_drop", "highest_pressure", "flow"};
  const std::vector<std::string> units = {"Pa", "Pa", "m3/s"};
  Uniform u;
  std::vector<std::vector<double>> columns(names.size());
  for (int run = 0; run < runs; ++run) {
    const double wall = 0.0072 + 0.0012 * u();
    const double roughness = 1e-4 * std::exp(0.56 * u.bell());
    const double speed = 1.0 + 0.0153 * u.bell();
    const double friction = 1.0 + 0.051 * u.bell();
    b.input_value.insert(b.input_value.end(), {wall, roughness, speed, friction});
    const bool failed = run == 17 || run == 400;
    b.run_status.push_back(failed ? std::int8_t{1} : std::int8_t{0});
    b.run_cavity.push_back(run % 8 == 0 ? std::int8_t{1} : std::int8_t{0});
    const double drop = -480e3 + 8.0e3 * friction * (1.0 + 0.2 * std::log(roughness / 1e-4));
    const double peak = weight * (59.1 + 62.0 * speed * (0.85 + 18.75 * wall));
    const double flow = 0.1 * (1.0 - 0.01 * (friction - 1.0));
    const std::vector<double> out = {drop, peak, flow};
    for (std::size_t k = 0; k < out.size(); ++k) {
      b.output_value.push_back(failed ? answers::missing : out[k]);
      if (!failed) columns[k].push_back(out[k]);
    }
    for (const double value : {peak, peak - 12e5, flow}) b.limit_value.push_back(failed ? answers::missing : value);
  }
  for (std::size_t k = 0; k < names.size(); ++k) {
    auto& column = columns[k];
    std::sort(column.begin(), column.end());
    answers::BandAnswer a;
    a.name = names[k];
    a.kind = kinds[k];
    a.where = where[k];
    a.unit = units[k];
    a.central = column[column.size() / 2] * 1.0001;
    double sum = 0.0;
    for (const double x : column) sum += x;
    a.mean = sum / static_cast<double>(column.size());
    double squares = 0.0;
    for (const double x : column) squares += (x - a.mean) * (x - a.mean);
    a.standard_deviation = std::sqrt(squares / static_cast<double>(column.size() - 1));
    for (const double p : {0.025, 0.05, 0.5, 0.95, 0.975}) {
      const auto at = [&](double share) {
        const double rank = std::clamp(share, 0.0, 1.0) * static_cast<double>(column.size() - 1);
        return column[static_cast<std::size_t>(rank)];
      };
      a.quantiles.push_back({p, at(p), at(p - 0.01), at(p + 0.01)});
    }
    a.draws = runs;
    a.failed = 2;
    a.budget_inputs = 0.8 * a.standard_deviation;
    a.budget_friction_law = k == 0 ? 0.5 * a.standard_deviation : 0.0;
    a.budget_grid = k == 1 ? 4200.0 : answers::missing;
    a.budget_sampling = 0.04 * a.standard_deviation;
    a.budget_draws = runs;
    if (k == 1) a.sensitivity = {{"main wave_speed_scatter", 0.71, 0.72}, {"main wall", 0.27, 0.28}};
    if (k == 0) a.range = {{-475e3, -470e3}};
    b.answers.push_back(a);
  }
  b.profile_probability = {0.025, 0.5, 0.975};
  for (std::int32_t pipe = 0; pipe < 2; ++pipe) {
    for (int j = 0; j <= 10; ++j) {
      b.profile_station_pipe.push_back(pipe);
      b.profile_share.push_back(0.1 * j);
    }
  }
  for (const double shift : {-0.04, 0.0, 0.04}) {
    for (std::size_t j = 0; j < b.profile_share.size(); ++j) {
      const double share = 0.5 * (b.profile_station_pipe[j] + b.profile_share[j]);
      b.profile_head_max.push_back(head(share, 0.0) + 61.0 * share * (1.0 + shift));
      b.profile_head_min.push_back(head(share, 0.0) - 58.0 * share * (1.0 - shift));
    }
  }
  if (s.transient) {
    const auto& t = *s.transient;
    b.history_probability = b.profile_probability;
    b.history_draws = b.draws;
    b.history_probe_name = t.probe_name;
    for (std::size_t row = 0; row < t.time.size(); row += 4) b.history_time.push_back(t.time[row]);
    for (const double shift : {-3.0, 0.2, 3.5})
      for (std::size_t row = 0; row < t.time.size(); row += 4)
        for (std::size_t k = 0; k < t.probe_name.size(); ++k)
          b.history_head.push_back(t.probe_head[row * t.probe_name.size() + k] + shift * static_cast<double>(k + 1));
  }
  answers::LimitAnswer any;
  any.name = "any rated pipe";
  any.kind = "rating";
  any.unit = "Pa";
  any.margin = 0.04e5;
  any.probability = 0.28;
  any.probability_lower = 0.24;
  any.probability_upper = 0.32;
  any.probability_range = {{0.27, 0.29}};
  any.probability_lower_range = {{0.23, 0.25}};
  any.probability_upper_range = {{0.31, 0.33}};
  any.confidence = 0.95;
  b.whole_line.push_back(any);
  s.bands = std::move(b);
}

inline void limits(answers::Study& s) {
  answers::LimitAnswer surge;
  surge.name = "surge rating";
  surge.kind = "highest_pressure";
  surge.where = "valve chamber";
  surge.unit = "Pa";
  surge.limit = 12e5;
  surge.value = 11.95e5;
  surge.margin = 0.05e5;
  surge.probability = 0.26;
  surge.probability_lower = 0.22;
  surge.probability_upper = 0.30;
  surge.at_most = 0.05;
  surge.confidence = 0.95;
  surge.verdict = answers::Verdict::not_ok;
  surge.reason = "the lower bound of the probability is over 5 %";

  answers::LimitAnswer low = surge;
  low.name = "no vacuum";
  low.kind = "lowest_pressure";
  low.where = "";
  low.limit = 0.0;
  low.value = 1.2e4;
  low.margin = 1.2e4;
  low.probability = answers::missing;
  low.probability_lower = answers::missing;
  low.probability_upper = answers::missing;
  low.probability_range = {{0.0, 0.04}};
  low.probability_lower_range = {{0.0, 0.03}};
  low.probability_upper_range = {{0.0, 0.07}};
  low.worst_corner = "gas high";
  low.verdict = answers::Verdict::cannot_tell;
  low.reason = "decided by main free gas";

  answers::LimitAnswer flow;
  flow.name = "flow lower main";
  flow.kind = "flow";
  flow.where = "lower main";
  flow.unit = "m3/s";
  flow.limit = 0.09;
  flow.value = 0.1;
  flow.margin = 0.01;
  flow.probability = 0.0;
  flow.probability_lower = 0.0;
  flow.probability_upper = 0.012;
  flow.at_most = 0.05;
  flow.confidence = 0.95;
  flow.verdict = answers::Verdict::ok;
  s.limits = {surge, low, flow};
  s.limits_shown = true;
}

}  // namespace sample

/// The whole invented study: steady state, one run, bands, limits.
[[nodiscard]] inline answers::Study sample_study() {
  answers::Study s;
  s.title = "Hollowmere gravity main (invented, ± test)";
  s.note = "All numbers are invented for tests.\nSecond line.";
  s.verb = "band";
  s.verdict = answers::Verdict::not_ok;
  s.warnings = {"the wave speed of upper main is changed by -0.2 %"};
  s.guesses = {"friction scatter ± 10 %", "main joint anchored"};
  sample::provenance(s);
  sample::steady(s);
  sample::transient(s);
  sample::bands(s);
  sample::limits(s);
  return s;
}

/// The same case as verb `surge` leaves it: one run, limits judged by it, no bands.
[[nodiscard]] inline answers::Study sample_surge() {
  answers::Study s = sample_study();
  s.verb = "surge";
  s.provenance.verb = "surge";
  s.bands.reset();
  for (auto& limit : s.limits) {
    limit.probability = limit.probability_lower = limit.probability_upper = limit.at_most = answers::missing;
    limit.probability_range.reset();
    limit.probability_lower_range.reset();
    limit.probability_upper_range.reset();
    limit.verdict = answers::Verdict::ok;
    limit.reason.clear();
  }
  s.verdict = answers::Verdict::ok;
  return s;
}

/// The same case as verb `flow` leaves it: steady state only.
[[nodiscard]] inline answers::Study sample_flow() {
  answers::Study s = sample_surge();
  s.verb = "flow";
  s.provenance.verb = "flow";
  s.transient.reset();
  s.highest.reset();
  s.lowest.reset();
  s.audit.reset();
  s.grid.reset();
  s.events.clear();
  s.limits.clear();
  s.limits_shown = false;
  s.verdict = answers::Verdict::none;
  for (auto& place : s.places) {
    place.surged = false;
    place.max_head = place.max_pressure = place.time_of_max = answers::missing;
    place.min_head = place.min_pressure = place.time_of_min = answers::missing;
  }
  return s;
}

}  // namespace headband::support
