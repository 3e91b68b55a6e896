#pragma once
// SPDX-License-Identifier: MIT
//
// Everything a run answers, as plain data in SI. run.h5 holds a Study and nothing else; terminal, JSON, CSV, SVG and
// HTML are pure functions of it. A number that is missing is NaN; a block the verb does not compute is std::nullopt.

#include <array>
#include <cstdint>
#include <limits>
#include <optional>
#include <string>
#include <utility>
#include <vector>

namespace headband::answers {

inline constexpr double missing = std::numeric_limits<double>::quiet_NaN();

enum class Verdict { ok, not_ok, cannot_tell, none };

/// How the calculation ended: `incomplete` (exit code 3) could not finish, `partial` was stopped by the user (130, 143)
/// and can be taken up again.
enum class RunState { complete, incomplete, partial };

/// Where the numbers came from. Times, commands and threads live here and nowhere else.
struct Provenance {
  std::string case_file, case_text, case_sha256;
  std::vector<std::array<std::string, 3>> side_files;  ///< name, sha256, text
  std::string verb, command;
  std::uint64_t seed = 0;
  std::string version, commit, build_kind, compiler, flags, libraries;
  std::string started, finished;  ///< ISO 8601 UTC
  double wall_time = missing;     ///< [s]
  int threads = 1, ranks = 1;
};

struct LiquidAnswer {
  std::string name, source;
  double temperature = missing, density = missing, kinematic_viscosity = missing, dynamic_viscosity = missing;
  double bulk_modulus_isentropic = missing, bulk_modulus_isothermal = missing, sound_speed = missing;
  double vapour_pressure = missing;  ///< absolute [Pa]
};

/// One value as understood (verb check; kept in every file for the report's input sheet).
struct ValueEcho {
  std::string path, name, written;
  double value = missing;  ///< [SI]
  std::string unit, spread, source, grade;
  bool guess = false;
  std::string shown_si, shown_us;  ///< in words of both families
};

struct PipeAnswer {
  std::string name, from, to;
  double length = missing, bore = missing, roughness = missing, restraint_factor = missing;
  double flow = missing, velocity = missing, reynolds = missing, friction_factor = missing;
  double head_loss = missing, pressure_drop = missing, wave_speed = missing, rating = missing;
  double joukowsky_head = missing;                       ///< a |V| / g, hand check [m]
  std::vector<double> chainage, elevation, steady_head;  ///< profile points
};

struct PlaceAnswer {
  std::string name;
  double elevation = missing, head = missing, pressure = missing;  ///< pressure gauge
  bool surged = false;
  double max_head = missing, max_pressure = missing, time_of_max = missing;
  double min_head = missing, min_pressure = missing, time_of_min = missing;
};

/// What a device has to say: key as in the JSON (`flow_m3_per_s`, `speed_rad_per_s`, …) and value.
struct DeviceAnswer {
  std::string name, kind;
  std::vector<std::pair<std::string, double>> numbers;
};

struct Extreme {
  double pressure = missing, head = missing, chainage = missing, time = missing, grid_bound = missing;  ///< bound [Pa]
  std::string pipe;
  bool grid_converging = true;
};

struct CavityAnswer {
  std::string pipe;
  double chainage = missing, opens = missing, closes = missing, max_volume = missing;  ///< closes NaN: still open
};

struct EventAnswer {
  double time = missing;
  std::string subject, kind, what;
};

struct Audit {
  double volume_residual = missing;           ///< [m3]
  double volume_residual_relative = missing;  ///< share of the volume passed; NaN: nothing passed
  double volume_passed = missing;             ///< [m3]
  double cavity_allowance = missing;          ///< summed |flow jump| dt of closings [m3]
  double cavity_reset_volume = missing;       ///< always 0, see docs/result-file.md [m3]
};

struct GridAnswer {
  double time_step = missing, worst_wave_speed_change = missing;
  std::string worst_pipe;
  std::vector<std::string> rigid_pipes;
  std::vector<int> reaches;                ///< per pipe, 0 = rigid
  std::vector<double> marched_wave_speed;  ///< per pipe [m/s]
  int grids = 1;                           ///< grids marched for the bound
  bool converging = true;
};

/// Histories, envelopes and series of the one run (verb surge).
struct Transient {
  std::vector<double> time;  ///< [s], row 0 = first steady state
  std::vector<std::string> probe_name;
  std::vector<double> probe_head, probe_pressure, probe_flow;  ///< row-major (time, probe)
  std::vector<double> probe_elevation;                         ///< [m]
  std::vector<std::string> series_name, series_units;
  std::vector<double> series;  ///< row-major (time, series)
  // station = every computed section, pipes one after another
  std::vector<std::int32_t> station_pipe;
  std::vector<double> chainage, elevation, steady_head, head_max, head_min, time_of_max, time_of_min;
  std::vector<double> pressure_max, pressure_min;  ///< at the section's own elevation, gauge [Pa]
  std::vector<double> cavity_volume_max, time_with_cavity, vapour_head;
  std::vector<CavityAnswer> cavities;  ///< all of them
  double last_good_time = missing;
  std::string status;  ///< "completed", "boundary not converged", …
};

struct LimitAnswer {
  std::string name, kind, unit;  ///< unit of limit, value, margin: "Pa", "m", "m3/s", "m/s"
  double limit = missing, value = missing, margin = missing;
  double probability = missing, probability_lower = missing, probability_upper = missing;
  std::optional<std::array<double, 2>> probability_range, probability_lower_range,
      probability_upper_range;  ///< not-random ranges
  std::string worst_corner;
  double at_most = missing, confidence = missing;
  Verdict verdict = Verdict::none;
  std::string reason;  ///< in words: why, or what is missing ("needs surge")
  std::string where;   ///< PLACE, PIPE, PIPE @ CHAINAGE; "A, B" for a difference; empty = everywhere
};

struct QuantileAnswer {
  double probability = missing, value = missing, lower = missing, upper = missing;
};

struct SensitivityAnswer {
  std::string input;
  double first = missing, total = missing;
};

/// One sampled answer.
struct BandAnswer {
  std::string name, kind, unit;
  double central = missing, mean = missing, standard_deviation = missing;
  std::vector<QuantileAnswer> quantiles;       ///< ascending probability
  std::optional<std::array<double, 2>> range;  ///< not-random: [least, most] of the median
  int modes = 1;
  long long draws = 0, failed = 0;
  double budget_inputs = missing, budget_friction_law = missing, budget_grid = missing, budget_sampling = missing;
  long long budget_draws = 0;
  std::vector<SensitivityAnswer> sensitivity;
  std::string where;  ///< as LimitAnswer::where; tells which limit belongs to the answer
};

/// All sampled answers and their draws.
struct Bands {
  std::vector<BandAnswer> answers;
  double coverage = 0.95, confidence = 0.95;
  std::string design;
  std::uint64_t seed = 1;
  long long draws_asked = 0, draws = 0, failed = 0, with_cavity = 0;
  long long stride = 1;  ///< every k-th run is stored
  std::vector<std::string> input_name, input_units, input_distribution;
  std::vector<double> input_value;      ///< row-major (run, input)
  std::vector<double> output_value;     ///< row-major (run, answer)
  std::vector<std::int8_t> run_status;  ///< 0 finished, 1 no steady state, 2 not finite, 3 boundary, 4 grid refused
  std::vector<std::int8_t> run_cavity;  ///< 1: a cavity formed; empty without surge
  std::vector<std::string> limit_name;  ///< as Study::limits
  std::vector<double> limit_value;      ///< row-major (run, limit): the numbers the limits are judged by
  // only in the file of a stopped band (stride 1), for taking it up: the envelopes of each draw
  std::vector<double> run_head_max, run_head_min;  ///< row-major (run, station) [m]
  // bands over the profile (sampled surge): per station quantiles of the envelope
  std::vector<double> profile_probability;  ///< e.g. 0.025, 0.5, 0.975
  std::vector<std::int32_t> profile_station_pipe;
  std::vector<double> profile_share;                       ///< station's share of its pipe's length
  std::vector<double> profile_head_max, profile_head_min;  ///< row-major (probability, station)
  // bands over time (sampled surge): quantiles of the head at each kept place
  std::vector<double> history_probability;      ///< as profile_probability
  std::vector<double> history_time;             ///< [s], rows of the central run, at most 241
  std::vector<std::string> history_probe_name;  ///< as Transient::probe_name
  long long history_draws = 0;                  ///< the bands over time rest on so many first draws, at most 4 096
  std::vector<double> history_head;             ///< row-major (probability, time, probe) [m]
  std::vector<double>
      run_history_head;  ///< as run_head_max: row-major (run, time, probe), perhaps the first runs alone [m]
  /// What holds for the line as a whole: statements, not limits, without a verdict. "any rated pipe": the chance that
  /// some pipe exceeds its own rating; `margin` is the least one of the central run.
  std::vector<LimitAnswer> whole_line;
  bool surged = false;
};

/// The whole answer of one verb on one case.
struct Study {
  Provenance provenance;
  std::string title, note, verb, units_shown = "si";
  Verdict verdict = Verdict::none;
  RunState state = RunState::complete;
  std::vector<std::string> warnings, guesses, cautions;
  std::string decision;                                               ///< the sentence on top of the page
  double density = missing, gravity = missing, atmosphere = missing;  ///< of the central run
  std::optional<LiquidAnswer> liquid;
  std::vector<ValueEcho> values;
  bool values_shown = false;  ///< verb check: `values` is part of the JSON
  std::vector<PipeAnswer> pipes;
  std::vector<PlaceAnswer> places;
  std::vector<DeviceAnswer> devices;
  std::string steady_status;
  double steady_residual = missing;
  int steady_iterations = 0;
  std::optional<Extreme> highest, lowest;
  std::optional<Transient> transient;
  std::vector<EventAnswer> events;
  std::optional<Audit> audit;
  std::optional<GridAnswer> grid;
  std::vector<LimitAnswer> limits;
  bool limits_shown = false;  ///< the verb judges limits (flow, surge, band)
  std::optional<Bands> bands;
};

}  // namespace headband::answers
