#pragma once
// SPDX-License-Identifier: MIT
//
// The case as the user wrote it: every quantity with its spread, its words and its place in the file.
// Filled by core/casefile, read by `validate`, `make_plan` and `realise`. Plain data, SI.

#include "core/base/quantity.hpp"
#include "core/friction/law.hpp"

#include <array>
#include <functional>
#include <optional>
#include <string>
#include <utility>
#include <variant>
#include <vector>

namespace headband::network {

using base::Quantity;
using base::SourcePlace;
using base::UnitFamily;
using friction::FrictionLaw;
using friction::Transition;

/// One weighted alternative of a model choice.
template <class T>
struct Weighted {
  T choice;
  double weight = 1.0;
};

/// A choice between models, an unknown of its own where it has more than one alternative.
template <class T>
struct Choice {
  std::vector<Weighted<T>> options;  ///< in file order; weights need not sum to 1
  int unknown = -1;                  ///< index into Case::unknowns, -1 = settled
  std::string name;                  ///< `friction law`
  SourcePlace place;
  bool guess = false;

  /// The heaviest choice, the first on a tie: what a single run uses.
  [[nodiscard]] const T& central() const {
    std::size_t best = 0;
    for (std::size_t i = 1; i < options.size(); ++i)
      if (options[i].weight > options[best].weight) best = i;
    return options[best].choice;
  }
  /// The choice at a uniform score in (0, 1).
  [[nodiscard]] const T& at(double score) const {
    double total = 0.0;
    for (const auto& o : options) total += o.weight;
    double sum = 0.0;
    for (const auto& o : options) {
      sum += o.weight / total;
      if (score < sum) return o.choice;
    }
    return options.back().choice;
  }
};

/// Two columns of quantities, from the file or a CSV beside it.
struct Table {
  std::vector<std::pair<Quantity, Quantity>> rows;
  std::string file;  ///< CSV name where it came from one
  std::string text;  ///< its bytes, for provenance
  SourcePlace place;
  [[nodiscard]] bool given() const { return !rows.empty(); }
};

struct About {
  std::string title, note;
};

/// A spot of the network: a place, or a chainage along a pipe ("main @ 900 m").
struct Spot {
  std::string element;             ///< place (or basin) name, or pipe name
  bool on_pipe = false;            ///< true: `element` is a pipe
  std::optional<double> chainage;  ///< [m] from the pipe's `from` end; only with on_pipe
  std::string written;             ///< as the user named it
  SourcePlace place;
};

struct Show {
  UnitFamily units = UnitFamily::si;
  std::vector<Spot> places;  ///< empty: all places
};

struct Site {
  Quantity atmosphere, gravity;
};

struct Liquid {
  std::string name = "water";
  Quantity temperature, density;
  Quantity viscosity;                                           ///< dimension says kinematic or dynamic
  std::vector<std::pair<Quantity, Quantity>> viscosity_points;  ///< temperature, kinematic viscosity
  Quantity viscosity_scatter, bulk_modulus, vapour_pressure, free_gas;
  SourcePlace place;
};

struct Basin {
  std::string name;
  SourcePlace place;
  Quantity level;
  Table level_table;  ///< time, level
  Quantity surface_pressure;
};

struct PlaceEntry {
  std::string name;
  SourcePlace place;
  Quantity elevation, head;
};

struct Fitting {
  std::string name;
  SourcePlace place;
  Quantity count, k, equivalent_length, at;
  std::string same_count_as;
};

enum class Joint { anchored, upstream_anchored, expansion_joints };
enum class WallFormula { thick, thin };

struct CreepElement {
  Quantity compliance, time;
};

struct Pipe {
  std::string name, from, to;
  SourcePlace place;
  Quantity length;
  std::vector<std::pair<Quantity, Quantity>> profile;  ///< chainage, elevation
  Table profile_table;                                 ///< where it came from a CSV (rows are moved to `profile`)
  Quantity outside, wall, bore, lining_thickness, lining_modulus;
  std::string material;
  Quantity modulus, poisson;
  Joint joint = Joint::anchored;
  bool joint_given = false;
  Quantity restraint_factor;
  WallFormula wall_formula = WallFormula::thick;
  Quantity wave_speed_change;
  Quantity wave_speed, wave_speed_scatter;
  Quantity roughness, hazen_williams, manning, friction_factor;
  std::vector<Fitting> fittings;
  Quantity rating;
  std::vector<CreepElement> creep;
};

enum class ValveLawKind { linear, power, equal_percentage, quick_opening, table };
struct ValveLaw {
  ValveLawKind kind = ValveLawKind::linear;
  double parameter = 1.0;                         ///< exponent, or rangeability
  std::vector<std::pair<double, double>> points;  ///< travel [-], share of full coefficient [-]
};

struct Valve {
  std::string name, from, to;  ///< `to` = "air": free discharge
  SourcePlace place;
  Quantity kv;       ///< held as Kv/3600; `cv` arrives here converted
  Quantity k, bore;  ///< loss coefficient by stated bore
  Quantity area, discharge_coefficient;
  Quantity flow;  ///< sized to pass this at its starting opening
  ValveLaw law;
  Quantity near_seat;  ///< power on the share
  Quantity opening;
};

/// How a pump or check valve element stops reverse flow.
enum class CheckValveKind { ideal, none, reverse_velocity, delay };
struct CheckValveRule {
  CheckValveKind kind = CheckValveKind::ideal;
  Quantity reverse_velocity, bore, delay;
  bool guess = false;
};

enum class Characteristic { by_specific_speed, none, table };

struct Pump {
  std::string name, from, to;
  SourcePlace place;
  int count = 1;
  Table curve;  ///< flow, head
  Quantity head_scatter, efficiency, speed, inertia;
  std::string inertia_label;  ///< "mr2", "gd2", "wr2": as the user stated it
  Quantity shut_off_torque;
  Table torque;  ///< flow, share of rated torque
  CheckValveRule check_valve;
  Quantity rated_flow, rated_head;
  Characteristic characteristic = Characteristic::by_specific_speed;
  Table suter;  ///< user's own four-quadrant table: x (angle), WH, WB in three columns (third in `suter_torque`)
  std::vector<double> suter_torque;
};

struct CheckValve {
  std::string name, from, to;
  SourcePlace place;
  Quantity kv, k, bore;
  CheckValveRule rule;
};

struct AirVessel {
  std::string name, at;
  SourcePlace place;
  Quantity gas_volume, precharge, shell_volume, area, exponent, water_level, throttle_in, throttle_out, connection_bore;
};

struct SurgeTank {
  std::string name, at;
  SourcePlace place;
  Quantity area, throttle_bore, throttle_k, overflow_level, level;
  bool one_way = false;
};

struct Relief {
  std::string name, at, to;
  SourcePlace place;
  Quantity set_pressure, full_open_over, kv, area, discharge_coefficient, reset, back_pressure, lag;
};

struct AirValve {
  std::string name, at;
  SourcePlace place;
  Quantity in_bore, out_bore, discharge_coefficient;
};

struct DrawOff {
  std::string name, at;
  SourcePlace place;
  Quantity flow;
  bool pressure_dependent = false;
};

/// What a movement acts on.
enum class EventKind { move_valve, swing_valve, trip_pump, start_pump, move_draw_off, move_basin };

/// Condition that starts an event ("pressure at X above P for T").
struct Condition {
  enum class What { pressure, head, level, flow } what = What::pressure;
  std::string element;
  bool above = true;
  Quantity bound, lasting;
  std::string written;
};

struct Event {
  std::string name;  ///< may be empty
  SourcePlace place;
  EventKind kind = EventKind::move_valve;
  std::string subject;  ///< element name
  Quantity at;          ///< [s]
  std::optional<Condition> when;
  Quantity delay;
  Quantity to;           ///< opening, flow, or level
  bool instant = false;  ///< over = "instant"
  Quantity over;         ///< [s]
  Table travel;          ///< times or shares of `over`, opening
  bool travel_in_shares = false;
  Quantity swing, period;
  int tripping = 0;  ///< pumps of a set that trip; 0 = all
};

struct Friction {
  Choice<FrictionLaw> law;
  Choice<Transition> transition;
  Quantity scatter, laminar_scatter;
  bool scatter_per_pipe = false;  ///< then one unknown per pipe, `PIPE scatter`
  bool scatter_given = false;
  std::vector<Quantity> pipe_scatter;  ///< one per pipe when per pipe
  Quantity fixed_factor;
};

struct Correlation {
  std::string first, second;
  double rank_correlation = 0.0;
  SourcePlace place;
};

enum class Cavities { vapour, gas, both, off };
enum class FrictionInTime { reynolds, fixed, linear };

struct SurgeRequest {
  bool given = false;
  SourcePlace place;
  Quantity duration, time_step;
  int reaches = 40;
  bool reaches_given = false;
  Cavities cavities = Cavities::vapour;
  bool unsteady_friction = false;
  bool unsteady_each_step = true;
  FrictionInTime friction_in_time = FrictionInTime::reynolds;
  bool grid_check = true;
};

enum class Design { plain, latin_hypercube, sobol };

enum class AnswerKind { pressure_drop, flow, head, highest_pressure, lowest_pressure, velocity };

/// A quantity asked for: answer of a band or subject of a limit.
struct AnswerRequest {
  AnswerKind kind = AnswerKind::highest_pressure;
  std::string name;         ///< as given, or KIND PLACE
  std::vector<Spot> where;  ///< none = everywhere; two for pressure_drop between places
  SourcePlace place;
};

struct BandRequest {
  bool given = false;
  SourcePlace place;
  long long draws = 2000;
  double until_share = 0.0;  ///< stop rule, share of the band; 0 = none
  Design design = Design::sobol;
  unsigned long long seed = 1;
  double coverage = 0.95, confidence = 0.95;
  std::vector<AnswerRequest> answers;
};

struct Limit {
  std::string name;
  SourcePlace place;
  AnswerRequest subject;
  Quantity bound;         ///< pressures: gauge
  bool not_over = true;   ///< false: not under
  double at_most = -1.0;  ///< allowed probability; < 0 = left out
  double confidence = 0.95;
  bool confidence_given = false;
  std::string rule;  ///< named code rule; empty = plain bound
  std::vector<std::pair<std::string, Quantity>> rule_numbers;
  std::string edition;
};

/// A section of another verb, kept to say "not computed yet by this version" where the verb needs it.
struct OtherSection {
  std::string name;  ///< fastest, ageing, test, match
  SourcePlace place;
};

/// One sampled number: who it is and where it stands. Indexed by Quantity::unknown and Choice::unknown.
struct Unknown {
  std::string name;
  std::string path;
  SourcePlace place;
  bool random = true;  ///< false: "not random" range
};

struct Case {
  std::string file_name;  ///< without folder
  std::string text;       ///< verbatim
  About about;
  Show show;
  Site site;
  Liquid liquid;
  std::vector<Basin> basins;
  std::vector<PlaceEntry> places;
  std::vector<Pipe> pipes;
  std::vector<Valve> valves;
  std::vector<Pump> pumps;
  std::vector<CheckValve> check_valves;
  std::vector<AirVessel> air_vessels;
  std::vector<SurgeTank> surge_tanks;
  std::vector<Relief> reliefs;
  std::vector<AirValve> air_valves;
  std::vector<DrawOff> draw_offs;
  std::vector<Event> events;
  Friction friction;
  std::vector<Correlation> together;
  SurgeRequest surge;
  BandRequest band;
  std::vector<Limit> limits;
  std::vector<OtherSection> others;
  std::vector<Unknown> unknowns;      ///< in file order; set by number_unknowns
  std::vector<std::string> guesses;   ///< defaults nobody stated, in words
  std::vector<std::string> warnings;  ///< remarks of the reader, in words
};

/// Calls `visit(Quantity&)` for every quantity of the case that may be an unknown.
void for_each_quantity(Case& c, const std::function<void(Quantity&)>& visit);
void for_each_quantity(const Case& c, const std::function<void(const Quantity&)>& visit);

/// Numbers the unknowns in file order (line, column), follows `as` chains, fills Case::unknowns.
/// @return problems: unknown `as` target, rings, two unknowns of one name
[[nodiscard]] base::Problems number_unknowns(Case& c);

/// Everything wrong with the case as a pipeline (topology, sizes, missing numbers), by path.
[[nodiscard]] base::Problems validate(const Case& c);

/// What a verb needs beyond `validate` and the case does not give: numbers of the wave speed, duration, rotor …
/// @param verb "check", "flow", "surge", "band", "band --surge"
[[nodiscard]] base::Problems validate_for(const Case& c, const std::string& verb);

}  // namespace headband::network
