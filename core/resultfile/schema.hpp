#pragma once
// SPDX-License-Identifier: MIT
//
// The result file, described once: each function walks a block of a study in the order of the file. A Writer archive
// stores it, a Reader archive fills it, so that the two cannot drift apart. docs/result-file.md says the same in prose
// and is checked against a written file.

#include "core/resultfile/codes.hpp"
#include "core/resultfile/objects.hpp"

#include "core/answers/study.hpp"

#include <array>
#include <cstddef>
#include <cstdint>
#include <optional>
#include <string>
#include <vector>

namespace headband::resultfile {

inline constexpr const char* schema_name = "headband-results";
inline constexpr int schema_major = 1;  ///< a reader refuses another one
inline constexpr const char* schema_version = "1.0";

template <class Archive, class Provenance>
void exchange_provenance(Archive& a, Provenance& p) {
  a.text("case_file", p.case_file, "Name of the case file, without folder");
  a.text("case_text", p.case_text, "The case file as it was read");
  a.text("case_sha256", p.case_sha256, "SHA-256 of the case file");
  std::array<std::vector<std::string>, 3> parts;
  if constexpr (Archive::writing) {
    for (const auto& file : p.side_files) {
      for (std::size_t i = 0; i < parts.size(); ++i) parts[i].push_back(file[i]);
    }
  }
  a.text_scale("side_file_name", parts[0], "Name of a file the case reads");
  a.texts("side_file_sha256", "side_file_name", parts[1], "SHA-256 of a file the case reads");
  a.texts("side_file_text", "side_file_name", parts[2], "Text of a file the case reads");
  if constexpr (!Archive::writing) {
    for (const auto& part : parts) {
      if (part.size() != parts[0].size()) a.refuse("side_file_text", "is missing");
    }
    p.side_files.clear();
    for (std::size_t i = 0; i < parts[0].size(); ++i) p.side_files.push_back({parts[0][i], parts[1][i], parts[2][i]});
  }
  a.text("verb", p.verb, "Verb of the run");
  a.text("command", p.command, "Command line, without folders");
  a.whole("seed", p.seed, {.long_name = "Seed of the draws"});
  a.text("version", p.version, "Version of headband");
  a.text("commit", p.commit, "Revision of the source");
  a.text("build_kind", p.build_kind, "Kind of build");
  a.text("compiler", p.compiler, "Compiler");
  a.text("flags", p.flags, "Compiler flags that can change numbers");
  a.text("libraries", p.libraries, "Libraries and their versions");
  a.text("started", p.started, "Start of the run, UTC, ISO 8601");
  a.text("finished", p.finished, "End of the run, UTC, ISO 8601");
  a.number("wall_time", p.wall_time, {"s", "Time the run took"});
  a.whole("threads", p.threads, {.long_name = "Threads of each process"});
  a.whole("ranks", p.ranks, {.long_name = "Processes"});
}

template <class Archive, class Study>
void exchange_summary(Archive& a, Study& s) {
  a.text("title", s.title, "Title of the case");
  a.text("note", s.note, "Note of the case");
  a.text("verb", s.verb, "Verb of the run");
  a.text("units_shown", s.units_shown, "Unit family people are shown: si or us");
  a.code("verdict", s.verdict, verdict_codes, "Worst verdict of the limits");
  a.text("decision", s.decision, "The answer in one sentence");
  a.text_scale("warnings", s.warnings, "Warnings");
  a.text_scale("guesses", s.guesses, "Values nobody stated");
  a.text_scale("cautions", s.cautions, "Cautions");
  a.number("density", s.density, {"kg m-3", "Density of the liquid in the central run"});
  a.number("gravity", s.gravity, {"m s-2", "Gravity"});
  a.number("atmosphere", s.atmosphere, {"Pa", "Atmospheric pressure, absolute"});
  a.code("values_shown", s.values_shown, yes_codes, "The verb shows the values of /inputs");
  a.code("limits_shown", s.limits_shown, yes_codes, "The verb judges limits");
}

template <class Archive, class Rows>
void exchange_inputs(Archive& a, Rows& rows) {
  using Row = answers::ValueEcho;
  const char* d = "input";
  a.indexed_rows(d, rows, "Value of the case, in file order");
  a.column("input_path", d, rows, &Row::path, "Element and key");
  a.column("input_name", d, rows, &Row::name, "Name of the unknown");
  a.column("input_written", d, rows, &Row::written, "As written, or the default in the same words");
  a.column("input_value", d, rows, &Row::value, {"see input_units", "Central value"});
  a.column("input_units", d, rows, &Row::unit, "Unit of the central value");
  a.column("input_spread", d, rows, &Row::spread, "Spread as understood");
  a.column("input_source", d, rows, &Row::source, "Origin");
  a.column("input_grade", d, rows, &Row::grade, "Grade A to D");
  a.code_column("input_guess", d, rows, &Row::guess, yes_codes, "A default nobody stated");
  a.column("input_shown_si", d, rows, &Row::shown_si, "As shown in SI words");
  a.column("input_shown_us", d, rows, &Row::shown_us, "As shown in US words");
}

template <class Archive, class Liquid>
void exchange_liquid(Archive& a, Liquid& l) {
  a.text("name", l.name, "Liquid");
  a.text("source", l.source, "Where its numbers come from");
  a.number("temperature", l.temperature, {"K", "Temperature"});
  a.number("density", l.density, {"kg m-3", "Density"});
  a.number("kinematic_viscosity", l.kinematic_viscosity, {"m2 s-1", "Kinematic viscosity"});
  a.number("dynamic_viscosity", l.dynamic_viscosity, {"Pa s", "Dynamic viscosity"});
  a.number("bulk_modulus_isentropic", l.bulk_modulus_isentropic, {"Pa", "Isentropic bulk modulus"});
  a.number("bulk_modulus_isothermal", l.bulk_modulus_isothermal, {"Pa", "Isothermal bulk modulus"});
  a.number("sound_speed", l.sound_speed, {"m s-1", "Speed of sound in the liquid alone"});
  a.number("vapour_pressure", l.vapour_pressure, {"Pa", "Vapour pressure, absolute"});
}

/// Profile points of all pipes in one row, with the pipe each belongs to.
struct ProfilePoints {
  std::vector<std::int32_t> pipe;
  std::vector<double> chainage, elevation, steady_head;
};

[[nodiscard]] ProfilePoints profile_points(const std::vector<answers::PipeAnswer>& pipes);
/// Puts the points back to their pipes. @return false where a point names no pipe
[[nodiscard]] bool set_profile_points(const ProfilePoints& points, std::vector<answers::PipeAnswer>& pipes);

template <class Archive, class Rows>
void exchange_pipes(Archive& a, Rows& rows) {
  using Row = answers::PipeAnswer;
  const char* d = "pipe_name";
  a.named_rows(d, rows, &Row::name, "Pipe");
  a.column("pipe_from", d, rows, &Row::from, "Place where the pipe starts");
  a.column("pipe_to", d, rows, &Row::to, "Place where the pipe ends");
  a.column("length", d, rows, &Row::length, {"m", "Length"});
  a.column("bore", d, rows, &Row::bore, {"m", "Inner diameter"});
  a.column("roughness", d, rows, &Row::roughness, {"m", "Roughness"});
  a.column("restraint_factor", d, rows, &Row::restraint_factor, {"1", "Factor of the wall in the wave speed"});
  a.column("flow", d, rows, &Row::flow, {"m3 s-1", "Steady flow, positive from the start of the pipe to its end"});
  a.column("velocity", d, rows, &Row::velocity, {"m s-1", "Steady mean velocity"});
  a.column("reynolds", d, rows, &Row::reynolds, {"1", "Steady Reynolds number"});
  a.column("friction_factor", d, rows, &Row::friction_factor, {"1", "Steady Darcy friction factor"});
  a.column("head_loss", d, rows, &Row::head_loss, {"m", "Steady loss by friction and fittings"});
  a.column("pressure_drop", d, rows, &Row::pressure_drop, {"Pa", "Steady pressure at the start minus at the end"});
  a.column("wave_speed", d, rows, &Row::wave_speed, {"m s-1", "Wave speed"});
  a.column("rating", d, rows, &Row::rating, {"Pa", "Rating, gauge"});
  a.column("joukowsky_head", d, rows, &Row::joukowsky_head, {"m", "Hand check: wave speed x velocity / gravity"});

  ProfilePoints points;
  if constexpr (Archive::writing) points = profile_points(rows);
  const char* p = "profile_point";
  a.index_scale(p, points.pipe.size(), "Profile point, pipe after pipe");
  a.array("profile_pipe", {p}, points.pipe, {.long_name = "Pipe of the point, index into pipe_name from 0"});
  a.array("profile_chainage", {p}, points.chainage, {"m", "Chainage along the pipe"});
  a.array("profile_elevation", {p}, points.elevation, {"m", "Elevation of the pipe"});
  a.array("profile_steady_head", {p}, points.steady_head, {"m", "Steady head"});
  if constexpr (!Archive::writing) {
    if (!set_profile_points(points, rows)) a.refuse("profile_pipe", "does not name a pipe at each point");
  }
}

template <class Archive, class Study>
void exchange_steady(Archive& a, Study& s) {
  exchange_pipes(a, s.pipes);
  using Row = answers::PlaceAnswer;
  const char* d = "place_name";
  a.named_rows(d, s.places, &Row::name, "Place");
  a.column("elevation", d, s.places, &Row::elevation, {"m", "Elevation"});
  a.column("piezometric_head", d, s.places, &Row::head, {"m", "Steady head"});
  a.column("pressure", d, s.places, &Row::pressure, {"Pa", "Steady pressure, gauge"});
  a.text("status", s.steady_status, "How the steady calculation ended");
  a.number("residual", s.steady_residual, {"1", "Largest relative residual of the steady state"});
  a.whole("iterations", s.steady_iterations, {.long_name = "Iterations of the steady state"});
}

/// Highest and lowest: `side` is "highest" or "lowest".
template <class Archive, class Extreme>
void exchange_extreme(Archive& a, Extreme& e) {
  a.number("pressure", e.pressure, {"Pa", "Extreme pressure, gauge"});
  a.number("piezometric_head", e.head, {"m", "Head there and then"});
  a.text("pipe_name", e.pipe, "Pipe of the extreme");
  a.number("chainage", e.chainage, {"m", "Chainage of the extreme"});
  a.number("time", e.time, {"s", "Time of the extreme"});
  a.number("grid_bound", e.grid_bound, {"Pa", "Bound of the error by the grid"});
  a.code("grid_converging", e.grid_converging, yes_codes, "Finer grids approach one value");
}

template <class Archive, class Study>
void exchange_extremes(Archive& a, Study& s) {
  using Row = answers::PlaceAnswer;
  auto& rows = s.places;
  std::size_t places = rows.size();
  a.group("places", [&] {
    const char* d = "place";
    if (a.index_scale(d, places, "Place, index into /steady/place_name from 0") != places) {
      if constexpr (!Archive::writing) a.refuse(d, "has another length than /steady/place_name");
    }
    const auto extreme = [](std::string_view unit, std::string_view name, std::string_view method) {
      return About{.units = unit, .long_name = name, .cell_methods = method};
    };
    a.code_column("surged", d, rows, &Row::surged, yes_codes, "The run has extremes for the place");
    a.column("piezometric_head_max", d, rows, &Row::max_head, extreme("m", "Highest head", "time: maximum"));
    a.column("pressure_max", d, rows, &Row::max_pressure, extreme("Pa", "Highest pressure, gauge", "time: maximum"));
    a.column("time_of_max", d, rows, &Row::time_of_max, {"s", "Time of the highest head"});
    a.column("piezometric_head_min", d, rows, &Row::min_head, extreme("m", "Lowest head", "time: minimum"));
    a.column("pressure_min", d, rows, &Row::min_pressure, extreme("Pa", "Lowest pressure, gauge", "time: minimum"));
    a.column("time_of_min", d, rows, &Row::time_of_min, {"s", "Time of the lowest head"});
  });
  a.optional_group("highest", s.highest, [&](auto& e) { exchange_extreme(a, e); });
  a.optional_group("lowest", s.lowest, [&](auto& e) { exchange_extreme(a, e); });
}

/// The numbers of all devices in one row: device, key, value.
struct DeviceNumbers {
  std::vector<std::int32_t> device;
  std::vector<std::string> key;
  std::vector<double> value;
};

[[nodiscard]] DeviceNumbers device_numbers(const std::vector<answers::DeviceAnswer>& devices);
[[nodiscard]] bool set_device_numbers(const DeviceNumbers& numbers, std::vector<answers::DeviceAnswer>& devices);

template <class Archive, class Rows>
void exchange_devices(Archive& a, Rows& rows) {
  using Row = answers::DeviceAnswer;
  const char* d = "device_name";
  a.named_rows(d, rows, &Row::name, "Device");
  a.column("device_kind", d, rows, &Row::kind, "Kind of device");
  DeviceNumbers numbers;
  if constexpr (Archive::writing) numbers = device_numbers(rows);
  const char* n = "number";
  a.index_scale(n, numbers.device.size(), "Number of a device, device after device");
  a.array("number_device", {n}, numbers.device, {.long_name = "Device, index into device_name from 0"});
  a.texts("number_key", n, numbers.key, "What the number is; the end of the key is its unit");
  a.array("number_value", {n}, numbers.value, {"see number_key", "Value"});
  if constexpr (!Archive::writing) {
    if (!set_device_numbers(numbers, rows)) a.refuse("number_device", "does not name a device for each number");
  }
}

template <class Archive, class Rows>
void exchange_events(Archive& a, Rows& rows) {
  using Row = answers::EventAnswer;
  const char* d = "event";
  a.indexed_rows(d, rows, "Event, in order of time");
  a.column("event_time", d, rows, &Row::time, {"s", "Time of the event"});
  a.column("event_subject", d, rows, &Row::subject, "Place, pipe or device");
  a.column("event_kind", d, rows, &Row::kind, "Kind of event");
  a.column("event_text", d, rows, &Row::what, "What happened");
}

template <class Archive, class Audit>
void exchange_audit(Archive& a, Audit& audit) {
  a.number("volume_residual", audit.volume_residual, {"m3", "Volume that is not accounted for"});
  a.number(
      "volume_residual_relative", audit.volume_residual_relative, {"1", "The same as a share of the volume passed"});
  a.number("volume_passed", audit.volume_passed, {"m3", "Volume passed"});
  a.number("cavity_allowance", audit.cavity_allowance, {"m3", "Sum of flow jump x time step where cavities closed"});
  a.number("cavity_reset_volume",
           audit.cavity_reset_volume,
           {"m3", "Negative cavity volumes set to zero; always 0: a cavity is filled by just what is left of it"});
}

template <class Archive, class Grid>
void exchange_grid(Archive& a, Grid& g) {
  a.number("time_step", g.time_step, {"s", "Time step"});
  a.number("worst_wave_speed_change", g.worst_wave_speed_change, {"1", "Largest change of a wave speed, as a share"});
  a.text("worst_pipe", g.worst_pipe, "Pipe of the largest change");
  a.text_scale("rigid_pipes", g.rigid_pipes, "Pipes marched as rigid columns");
  std::size_t pipes = g.reaches.size();
  if constexpr (Archive::writing) {
    pipes = g.reaches.empty() ? g.marched_wave_speed.size() : g.reaches.size();
  }
  a.index_scale("grid_pipe", pipes, "Pipe, index into /steady/pipe_name from 0");
  a.array("reaches", {"grid_pipe"}, g.reaches, {.long_name = "Reaches of the pipe, 0 = rigid column"});
  a.array("marched_wave_speed", {"grid_pipe"}, g.marched_wave_speed, {"m s-1", "Wave speed on the grid"});
  a.whole("grids", g.grids, {.long_name = "Grids marched for the bounds"});
  a.code("converging", g.converging, yes_codes, "Finer grids approach one value");
}

template <class Archive, class Transient, class Pipes>
void exchange_transient(Archive& a, Transient& t, Pipes& pipe_names) {
  const auto highest = [](std::string_view unit, std::string_view name) {
    return About{.units = unit, .long_name = name, .cell_methods = "time: maximum"};
  };
  a.number_scale("time", t.time, {"s", "Time; row 0 is the first steady state"});
  a.text_scale("probe_name", t.probe_name, "Place of a history");
  a.array("probe_head", {"time", "probe_name"}, t.probe_head, {"m", "Head"});
  a.array("probe_pressure", {"time", "probe_name"}, t.probe_pressure, {"Pa", "Pressure, gauge"});
  a.array("probe_flow",
          {"time", "probe_name"},
          t.probe_flow,
          {"m3 s-1", "Flow, positive from the start of the pipe to its end"});
  a.array("probe_elevation", {"probe_name"}, t.probe_elevation, {"m", "Elevation of the place"});
  a.text_scale("device_series_name", t.series_name, "Device and quantity");
  a.texts("device_series_units", "device_series_name", t.series_units, "Unit of the series");
  a.array("device_series",
          {"time", "device_series_name"},
          t.series,
          {"see device_series_units", "History of a device's quantity"});

  a.text_scale("pipe_name", pipe_names, "Pipe");
  const char* d = "station";
  a.index_scale(d, t.station_pipe.size(), "Computed section, pipe after pipe");
  a.array("station_pipe", {d}, t.station_pipe, {.long_name = "Pipe of the section, index into pipe_name from 0"});
  a.array("chainage", {d}, t.chainage, {"m", "Chainage along the pipe"});
  a.array("elevation", {d}, t.elevation, {"m", "Elevation of the pipe"});
  a.array("steady_head", {d}, t.steady_head, {"m", "Head of the first steady state"});
  a.array("piezometric_head_max", {d}, t.head_max, highest("m", "Highest head"));
  a.array("piezometric_head_min",
          {d},
          t.head_min,
          {.units = "m", .long_name = "Lowest head", .cell_methods = "time: minimum"});
  a.array("time_of_max", {d}, t.time_of_max, {"s", "Time of the highest head"});
  a.array("time_of_min", {d}, t.time_of_min, {"s", "Time of the lowest head"});
  a.array("pressure_max", {d}, t.pressure_max, highest("Pa", "Highest pressure, gauge"));
  a.array("pressure_min",
          {d},
          t.pressure_min,
          {.units = "Pa", .long_name = "Lowest pressure, gauge", .cell_methods = "time: minimum"});
  a.array("cavity_volume_max", {d}, t.cavity_volume_max, highest("m3", "Largest cavity"));
  a.array("time_with_cavity", {d}, t.time_with_cavity, {"s", "Time with a cavity, summed"});
  a.array("vapour_head", {d}, t.vapour_head, {"m", "Head at which the liquid boils"});
  if constexpr (!Archive::writing) {
    for (const std::int32_t pipe : t.station_pipe) {
      if (pipe < 0 || static_cast<std::size_t>(pipe) >= pipe_names.size()) {
        a.refuse("station_pipe", "does not name a pipe at each section");
      }
    }
  }

  using Row = answers::CavityAnswer;
  const char* c = "cavity";
  a.indexed_rows(c, t.cavities, "Cavity");
  a.column("cavity_pipe", c, t.cavities, &Row::pipe, "Pipe of the cavity");
  a.column("cavity_chainage", c, t.cavities, &Row::chainage, {"m", "Chainage of the cavity"});
  a.column("cavity_opens", c, t.cavities, &Row::opens, {"s", "Time of opening"});
  a.column("cavity_closes", c, t.cavities, &Row::closes, {"s", "Time of closing; missing: open at the end"});
  a.column("cavity_volume", c, t.cavities, &Row::max_volume, highest("m3", "Largest volume of the cavity"));
  a.number("last_good_time", t.last_good_time, {"s", "Last time the run holds good"});
  a.text("status", t.status, "How the march ended");
}

/// Optional pairs [least, most] of a column of rows, with a mark for those that are there.
struct Pairs {
  std::vector<double> bound;       ///< (row, side)
  std::vector<std::int8_t> given;  ///< (row)
};

template <class Row>
[[nodiscard]] Pairs gather_pairs(const std::vector<Row>& rows, std::optional<std::array<double, 2>> Row::* member) {
  Pairs pairs;
  for (const auto& row : rows) {
    const auto& pair = row.*member;
    pairs.given.push_back(pair ? std::int8_t{1} : std::int8_t{0});
    for (std::size_t side = 0; side < 2; ++side) pairs.bound.push_back(pair ? (*pair)[side] : answers::missing);
  }
  return pairs;
}

/// A column of optional pairs: NAME (dimension, side) and NAME_given (dimension). The scale `side` must be there.
template <class Archive, class Rows, class Row>
void exchange_pairs(Archive& a,
                    const char* name,
                    const char* dimension,
                    Rows& rows,
                    std::optional<std::array<double, 2>> Row::* member,
                    const About& about) {
  Pairs pairs;
  const std::string given = std::string(name) + "_given";
  if constexpr (Archive::writing) pairs = gather_pairs(rows, member);
  a.array(name, {dimension, "side"}, pairs.bound, about);
  a.codes(given.c_str(), dimension, pairs.given, yes_codes, "The range is there: the case holds a not-random range");
  if constexpr (!Archive::writing) {
    if (pairs.given.size() != rows.size() || pairs.bound.size() != 2 * rows.size()) a.refuse(name, "is missing");
    for (std::size_t i = 0; i < rows.size(); ++i) {
      if (pairs.given[i] == 1) rows[i].*member = std::array<double, 2>{pairs.bound[2 * i], pairs.bound[2 * i + 1]};
    }
  }
}

template <class Archive, class Rows>
void exchange_limits(Archive& a, Rows& rows) {
  using Row = answers::LimitAnswer;
  const char* d = "limit_name";
  a.named_rows(d, rows, &Row::name, "Limit");
  a.index_scale("side", 2, "0 least, 1 most");
  a.column("limit_kind", d, rows, &Row::kind, "What is limited");
  a.column("limit_where", d, rows, &Row::where, "Where it holds; empty: everywhere");
  a.column("limit_units", d, rows, &Row::unit, "Unit of limit, value and margin");
  a.column("limit", d, rows, &Row::limit, {"see limit_units", "The limit"});
  a.column("value", d, rows, &Row::value, {"see limit_units", "Value of the central run"});
  a.column("margin", d, rows, &Row::margin, {"see limit_units", "Margin, positive when kept"});
  a.column("probability", d, rows, &Row::probability, {"1", "Share of finished draws that do not keep the limit"});
  a.column("probability_lower", d, rows, &Row::probability_lower, {"1", "Lower bound of the probability"});
  a.column("probability_upper", d, rows, &Row::probability_upper, {"1", "Upper bound of the probability"});
  exchange_pairs(a,
                 "probability_range",
                 d,
                 rows,
                 &Row::probability_range,
                 {"1", "Probability, least and most over the not-random ranges"});
  exchange_pairs(a,
                 "probability_lower_range",
                 d,
                 rows,
                 &Row::probability_lower_range,
                 {"1", "Lower bound, least and most over the not-random ranges"});
  exchange_pairs(a,
                 "probability_upper_range",
                 d,
                 rows,
                 &Row::probability_upper_range,
                 {"1", "Upper bound, least and most over the not-random ranges"});
  a.column("worst_corner", d, rows, &Row::worst_corner, "Not-random ranges at their worst");
  a.column("at_most", d, rows, &Row::at_most, {"1", "Probability allowed"});
  a.column("confidence", d, rows, &Row::confidence, {"1", "Confidence of each bound"});
  a.code_column("verdict", d, rows, &Row::verdict, verdict_codes, "Verdict");
  a.column("reason", d, rows, &Row::reason, "Why, or what is missing");
}

/// Quantiles of all answers over the union of their probabilities.
struct QuantileTable {
  std::vector<double> probability;
  std::vector<double> value, bound;  ///< (output, probability), (output, probability, side)
  std::vector<std::int8_t> given;    ///< (output, probability)
};

[[nodiscard]] QuantileTable quantile_table(const std::vector<answers::BandAnswer>& rows);
void set_quantiles(const QuantileTable& table, std::vector<answers::BandAnswer>& rows);

/// Variance shares of all answers in one row.
struct SensitivityTable {
  std::vector<std::int32_t> output;
  std::vector<std::string> input;
  std::vector<double> first, total;
};

[[nodiscard]] SensitivityTable sensitivity_table(const std::vector<answers::BandAnswer>& rows);
[[nodiscard]] bool set_sensitivity(const SensitivityTable& table, std::vector<answers::BandAnswer>& rows);

template <class Archive, class Rows>
void exchange_answers(Archive& a, Rows& rows) {
  using Row = answers::BandAnswer;
  const char* d = "output_name";
  a.named_rows(d, rows, &Row::name, "Answer");
  a.index_scale("side", 2, "0 lower or least, 1 upper or most");
  a.column("output_kind", d, rows, &Row::kind, "What is asked");
  a.column("output_where", d, rows, &Row::where, "Where; empty: everywhere");
  a.column("output_units", d, rows, &Row::unit, "Unit of the answer");
  a.column("output_central", d, rows, &Row::central, {"see output_units", "Answer of the central run"});
  a.column("output_mean", d, rows, &Row::mean, {"see output_units", "Mean of the finished draws"});
  a.column("output_standard_deviation", d, rows, &Row::standard_deviation, {"see output_units", "Standard deviation"});
  a.whole_column("output_modes", d, rows, &Row::modes, {.long_name = "Humps of the density"});
  a.whole_column("output_draws", d, rows, &Row::draws, {.long_name = "Draws"});
  a.whole_column("output_failed", d, rows, &Row::failed, {.long_name = "Draws without an answer"});
  exchange_pairs(a,
                 "output_range",
                 d,
                 rows,
                 &Row::range,
                 {"see output_units", "Median, least and most over the not-random ranges"});

  QuantileTable table;
  if constexpr (Archive::writing) table = quantile_table(rows);
  a.number_scale("probability", table.probability, {"1", "Probability of a quantile"});
  a.array("output_quantile", {d, "probability"}, table.value, {"see output_units", "Quantile"});
  a.array("output_quantile_bound",
          {d, "probability", "side"},
          table.bound,
          {"see output_units", "Bounds of the quantile at the confidence"});
  a.array("output_quantile_given", {d, "probability"}, table.given, {.long_name = "1: the quantile is reported"});
  if constexpr (!Archive::writing) {
    const std::size_t cells = rows.size() * table.probability.size();
    if (table.value.size() != cells || table.bound.size() != 2 * cells || table.given.size() != cells) {
      a.refuse("output_quantile", "is missing");
    }
    set_quantiles(table, rows);
  }

  SensitivityTable shares;
  if constexpr (Archive::writing) shares = sensitivity_table(rows);
  const char* s = "sensitivity";
  a.index_scale(s, shares.output.size(), "Pair of answer and unknown");
  a.array("sensitivity_output", {s}, shares.output, {.long_name = "Answer, index into output_name from 0"});
  a.texts("sensitivity_input", s, shares.input, "Unknown");
  a.array("sensitivity_first", {s}, shares.first, {"1", "Share of the variance by the unknown alone"});
  a.array("sensitivity_total", {s}, shares.total, {"1", "Share of the variance by the unknown with others"});
  if constexpr (!Archive::writing) {
    if (!set_sensitivity(shares, rows)) a.refuse("sensitivity_output", "does not name an answer for each pair");
  }
}

/// Bands of the heads over time, and what a stopped band keeps of each draw for them.
template <class Archive, class Bands>
void exchange_band_histories(Archive& a, Bands& b) {
  a.whole("history_draws", b.history_draws, {.long_name = "First draws that the bands over time rest on"});
  a.number_scale("history_probability", b.history_probability, {"1", "Probability of a history"});
  a.number_scale("history_time", b.history_time, {"s", "Time of a history"});
  a.text_scale("history_probe_name", b.history_probe_name, "Place whose history is kept");
  a.array("history_head",
          {"history_probability", "history_time", "history_probe_name"},
          b.history_head,
          {"m", "Quantile of the head over the draws at this time"});
  const std::size_t cells = b.history_time.size() * b.history_probe_name.size();
  const std::size_t runs = cells == 0 ? 0 : b.run_history_head.size() / cells;
  a.index_scale("history_run", runs, "Draw whose histories are kept, the first ones; none unless the band was stopped");
  a.array("run_history_head",
          {"history_run", "history_time", "history_probe_name"},
          b.run_history_head,
          {"m", "Head of the draw"});
}

/// Statements on the line as a whole.
template <class Archive, class Rows>
void exchange_whole_line(Archive& a, Rows& rows) {
  using Row = answers::LimitAnswer;
  const char* d = "whole_line_name";
  a.named_rows(d, rows, &Row::name, "Statement on the line as a whole, no limit of its own");
  a.column("whole_line_kind", d, rows, &Row::kind, "What must not be exceeded anywhere");
  a.column("whole_line_units", d, rows, &Row::unit, "Unit of the margin");
  a.column("whole_line_margin", d, rows, &Row::margin, {"see whole_line_units", "Least margin of the central run"});
  a.column(
      "whole_line_probability", d, rows, &Row::probability, {"1", "Share of finished draws that exceed it anywhere"});
  a.column("whole_line_probability_lower", d, rows, &Row::probability_lower, {"1", "Lower bound of the probability"});
  a.column("whole_line_probability_upper", d, rows, &Row::probability_upper, {"1", "Upper bound of the probability"});
  exchange_pairs(a,
                 "whole_line_probability_range",
                 d,
                 rows,
                 &Row::probability_range,
                 {"1", "Probability, least and most over the not-random ranges"});
  exchange_pairs(a,
                 "whole_line_probability_lower_range",
                 d,
                 rows,
                 &Row::probability_lower_range,
                 {"1", "Lower bound, least and most over the not-random ranges"});
  exchange_pairs(a,
                 "whole_line_probability_upper_range",
                 d,
                 rows,
                 &Row::probability_upper_range,
                 {"1", "Upper bound, least and most over the not-random ranges"});
  a.column("whole_line_worst_corner", d, rows, &Row::worst_corner, "Not-random ranges at their worst");
  a.column("whole_line_confidence", d, rows, &Row::confidence, {"1", "Confidence of each bound"});
  a.column("whole_line_reason", d, rows, &Row::reason, "What is missing");
}

template <class Archive, class Bands, class Pipes>
void exchange_bands(Archive& a, Bands& b, Pipes& pipe_names) {
  a.number("coverage", b.coverage, {"1", "Share covered by a band"});
  a.number("confidence", b.confidence, {"1", "Confidence of each bound"});
  a.text("design", b.design, "How the draws are laid out");
  a.whole("seed", b.seed, {.long_name = "Seed of the draws"});
  a.whole("draws_asked", b.draws_asked, {.long_name = "Draws asked for"});
  a.whole("draws", b.draws, {.long_name = "Draws made"});
  a.whole("failed", b.failed, {.long_name = "Draws without an answer"});
  a.whole("with_cavity", b.with_cavity, {.long_name = "Draws in which a cavity formed"});
  a.whole("stride", b.stride, {.long_name = "Every how many draws one is kept in this file"});
  a.code("surged", b.surged, yes_codes, "Each draw was marched");
  exchange_answers(a, b.answers);

  a.text_scale("input_name", b.input_name, "Unknown");
  a.texts("input_units", "input_name", b.input_units, "Unit of the unknown");
  a.texts("input_distribution", "input_name", b.input_distribution, "Distribution of the unknown");
  std::size_t runs = b.run_status.size();
  a.index_scale("run", runs, "Draw kept, in order");
  a.codes("run_status", "run", b.run_status, run_codes, "How the draw ended");
  a.array("input_value",
          {"run", "input_name"},
          b.input_value,
          {.units = "see input_units", .long_name = "Value drawn", .stride = b.stride});
  a.array("output_value",
          {"run", "output_name"},
          b.output_value,
          {.units = "see output_units", .long_name = "Answer of the draw", .stride = b.stride});

  a.codes("run_cavity", "run", b.run_cavity, yes_codes, "A cavity formed in the draw");
  a.text_scale("limit_name", b.limit_name, "Limit, as in /limits");
  a.array("limit_value",
          {"run", "limit_name"},
          b.limit_value,
          {.units = "see /limits/limit_units",
           .long_name = "Value of the draw the limit is judged by",
           .stride = b.stride});
  const std::size_t stations = b.run_status.empty() ? 0 : b.run_head_max.size() / b.run_status.size();
  a.index_scale("run_station", stations, "Station of a draw's envelope; none unless the band was stopped");
  a.array("run_head_max",
          {"run", "run_station"},
          b.run_head_max,
          {.units = "m", .long_name = "Highest head of the draw", .cell_methods = "time: maximum"});
  a.array("run_head_min",
          {"run", "run_station"},
          b.run_head_min,
          {.units = "m", .long_name = "Lowest head of the draw", .cell_methods = "time: minimum"});

  a.text_scale("pipe_name", pipe_names, "Pipe");
  a.number_scale("profile_probability", b.profile_probability, {"1", "Probability of a profile"});
  const char* d = "profile_station";
  a.index_scale(d, b.profile_station_pipe.size(), "Station of the profile, pipe after pipe");
  a.array("profile_station_pipe",
          {d},
          b.profile_station_pipe,
          {.long_name = "Pipe of the station, index into pipe_name from 0"});
  a.array("profile_share", {d}, b.profile_share, {"1", "Share of the pipe's length"});
  a.array("profile_head_max",
          {"profile_probability", d},
          b.profile_head_max,
          {.units = "m", .long_name = "Quantile of the highest head", .cell_methods = "time: maximum"});
  a.array("profile_head_min",
          {"profile_probability", d},
          b.profile_head_min,
          {.units = "m", .long_name = "Quantile of the lowest head", .cell_methods = "time: minimum"});
  exchange_band_histories(a, b);
  exchange_whole_line(a, b.whole_line);
  if constexpr (!Archive::writing) {
    for (const std::int32_t pipe : b.profile_station_pipe) {
      if (pipe < 0 || static_cast<std::size_t>(pipe) >= pipe_names.size()) {
        a.refuse("profile_station_pipe", "does not name a pipe at each station");
      }
    }
  }
}

template <class Archive, class Rows>
void exchange_budget(Archive& a, Rows& rows) {
  using Row = answers::BandAnswer;
  const char* d = "output";
  if (a.index_scale(d, rows.size(), "Answer, index into /bands/output_name from 0") != rows.size()) {
    if constexpr (!Archive::writing) a.refuse(d, "has another length than /bands/output_name");
  }
  const std::string_view unit = "see /bands/output_units";
  a.column("inputs", d, rows, &Row::budget_inputs, {unit, "Standard deviation by the inputs"});
  a.column("friction_law", d, rows, &Row::budget_friction_law, {unit, "Standard deviation by the friction law"});
  a.column("grid", d, rows, &Row::budget_grid, {unit, "Bound of the error by the grid"});
  a.column("sampling", d, rows, &Row::budget_sampling, {unit, "Half-width of the interval of the median"});
  a.whole_column("budget_draws", d, rows, &Row::budget_draws, {.long_name = "Draws used for the budget"});
}

/// The whole study; root attributes are the caller's.
template <class Archive, class Study>
void exchange(Archive& a, Study& s) {
  a.group("provenance", [&] { exchange_provenance(a, s.provenance); });
  a.group("summary", [&] { exchange_summary(a, s); });
  a.group("inputs", [&] { exchange_inputs(a, s.values); });
  a.optional_group("liquid", s.liquid, [&](auto& liquid) { exchange_liquid(a, liquid); });
  a.group("steady", [&] { exchange_steady(a, s); });
  a.group("extremes", [&] { exchange_extremes(a, s); });
  a.group("devices", [&] { exchange_devices(a, s.devices); });
  std::vector<std::string> pipe_names;
  for (const auto& pipe : s.pipes) pipe_names.push_back(pipe.name);
  a.optional_group("transient", s.transient, [&](auto& t) { exchange_transient(a, t, pipe_names); });
  a.group("events", [&] { exchange_events(a, s.events); });
  a.optional_group("audit", s.audit, [&](auto& audit) { exchange_audit(a, audit); });
  a.optional_group("grid", s.grid, [&](auto& grid) { exchange_grid(a, grid); });
  a.group("limits", [&] { exchange_limits(a, s.limits); });
  a.optional_group("bands", s.bands, [&](auto& b) { exchange_bands(a, b, pipe_names); });
  if (s.bands) a.group("budget", [&] { exchange_budget(a, s.bands->answers); });
}

}  // namespace headband::resultfile
