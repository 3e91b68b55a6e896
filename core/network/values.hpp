#pragma once
// SPDX-License-Identifier: MIT
//
// The numbers of W draws of one pipeline: what `realise` fills and the solvers read. SI, one lane per draw.

#include "core/base/lanes.hpp"
#include "core/network/plan.hpp"

#include <array>
#include <span>
#include <vector>

namespace headband::network {

using base::Lanes;

template <int W>
struct LiquidValues {
  Lanes<W> temperature;              ///< [K]
  Lanes<W> density;                  ///< [kg/m3]
  Lanes<W> kinematic_viscosity;      ///< [m2/s]
  Lanes<W> bulk_modulus;             ///< isentropic [Pa]
  Lanes<W> bulk_modulus_isothermal;  ///< [Pa]; NaN where only one modulus is known
  Lanes<W> vapour_pressure;          ///< absolute [Pa]
  Lanes<W> free_gas;                 ///< volume fraction at 101 325 Pa [-]
  /// Viscosity of the temperature alone: dynamic of water [Pa s], kinematic of a two-point law [m2/s].
  Lanes<W> viscosity_by_temperature;
};

template <int W>
struct FittingValues {
  Lanes<W> k;                  ///< loss coefficient by the pipe's bore, count included [-]
  Lanes<W> equivalent_length;  ///< count included [m]
  Lanes<W> at;                 ///< chainage [m]
};

template <int W>
struct PipeValues {
  Lanes<W> length, bore, area;                    ///< [m], [m], [m2]
  Lanes<W> wall;                                  ///< metal wall [m]; NaN = unknown
  Lanes<W> metal_inner_diameter;                  ///< inner diameter of the metal, D of the wall formula [m]
  Lanes<W> roughness;                             ///< [m]; NaN where another law is used
  Lanes<W> loss_number;                           ///< Hazen-Williams C, Manning n, or the fixed Darcy factor
  Lanes<W> friction_scatter;                      ///< factor on the turbulent Darcy factor [-]
  Lanes<W> laminar_scatter;                       ///< factor on the laminar one [-]
  Lanes<W> spread_k;                              ///< fittings without a place, summed [-]
  Lanes<W> spread_equivalent_length;              ///< the same [m]
  std::vector<FittingValues<W>> placed_fittings;  ///< those with a chainage of their own, in file order
  Lanes<W> restraint_factor;        ///< the wave-speed factor used [-]; NaN = wave speed given outright or unknown
  Lanes<W> wall_compliance;         ///< restraint_factor D/(E e) [1/Pa]; 0 when the wave speed is given outright
  Lanes<W> wave_speed_given;        ///< [m/s]; NaN = by formula
  Lanes<W> wave_speed_scatter;      ///< factor [-]
  Lanes<W> wave_speed_without_gas;  ///< [m/s]; NaN = unknown
  Lanes<W> rating;                  ///< gauge [Pa]; NaN = unrated
  std::vector<Lanes<W>> chainage;   ///< profile points [m], first 0, last = length
  std::vector<Lanes<W>> elevation;  ///< [m]
};

template <int W>
struct PlaceValues {
  Lanes<W> elevation;     ///< [m]
  Lanes<W> held_head;     ///< basins and `head`: [m]; NaN = free
  Lanes<W> surface_head;  ///< basins: head of the surface pressure, over the level [m]; 0 elsewhere
  Lanes<W> level_shift;   ///< basins: drawn level over the written one, which shifts a level table too [m]; 0 elsewhere
};

template <int W>
struct ValveValues {
  Lanes<W> coefficient;       ///< fully open: Q = coefficient sqrt(dH) [m^2.5/s]; NaN where `flow` sizes it
  Lanes<W> sizing_flow;       ///< [m3/s]; NaN = not sized by flow
  Lanes<W> seat_power;        ///< near_seat power on the share [-]
  Lanes<W> starting_opening;  ///< travel [-]
};

template <int W>
struct PumpValues {
  std::vector<Lanes<W>> curve_flow, curve_head;  ///< one pump, rated speed, head_scatter included
  Lanes<W> efficiency, speed, inertia;           ///< [-], [rad/s], m r2 of one pump [kg m2]
  Lanes<W> shut_off_torque;                      ///< share of rated torque [-]
  std::vector<Lanes<W>> torque_flow, torque_share;
  Lanes<W> rated_flow, rated_head;  ///< NaN: the first operating point
  Lanes<W> reverse_velocity, check_bore, check_delay;
};

template <int W>
struct CheckValveValues {
  Lanes<W> coefficient;  ///< Q = coefficient sqrt(dH); infinity = no loss
  Lanes<W> reverse_velocity, bore, delay;
};

template <int W>
struct DrawOffValues {
  Lanes<W> flow;  ///< [m3/s], positive out of the line
};

template <int W>
struct EventValues {
  Lanes<W> at, to, over, swing, period, delay;         ///< [s], [subject's SI], [s], [-], [s], [s]
  std::vector<Lanes<W>> travel_time, travel_position;  ///< seconds after `at`; the stroke's own table
};

/// Numbers of W draws. Vectors repeat the case's vectors index by index.
template <int W>
struct Values {
  Lanes<W> gravity;     ///< [m/s2]
  Lanes<W> atmosphere;  ///< absolute [Pa]
  LiquidValues<W> liquid;
  std::vector<PlaceValues<W>> places;  ///< as Plan::places
  std::vector<PipeValues<W>> pipes;
  std::vector<ValveValues<W>> valves;
  std::vector<PumpValues<W>> pumps;
  std::vector<CheckValveValues<W>> check_valves;
  std::vector<DrawOffValues<W>> draw_offs;
  std::vector<EventValues<W>> events;
  base::PerLane<FrictionLaw, W> law{};
  base::PerLane<Transition, W> transition{};
  std::vector<Lanes<W>> drawn;  ///< as Case::unknowns: values at the scores, a Realiser's own; choices unset
};

/// Scores of W draws: `score[unknown]`, uniform in (0, 1).
template <int W>
using Scores = std::vector<Lanes<W>>;

/// The central run: written values, heaviest choices, middles of not-random ranges.
[[nodiscard]] Values<1> realise(const Case& c, const Plan& plan);

/// Fills Values again and again for the draws of one case: what no draw changes is filled once.
/// Shared between threads; the case and the plan must outlive it.
class Realiser {
 public:
  /// @param waves false: steady answers alone are asked, and what only a wave speed needs stays the central run's
  Realiser(const Case& c, const Plan& plan, bool waves = true);

  /// The central run with its storage: where every Values handed to `draw` must come from.
  template <int W>
  [[nodiscard]] Values<W> prepare() const;

  /// Overwrites what the scores of W draws change. No allocation. The same bits as `realise`.
  template <int W>
  void draw(const Scores<W>& scores, Values<W>& values) const;

  /// Values of the unknowns at the scores of several blocks of eight draws, and a block with its values known: the
  /// same bits as block by block, in less time.
  void look_ahead(std::span<const Scores<8>> scores, std::vector<std::vector<Lanes<8>>>& drawn) const;
  void draw(const Scores<8>& scores, const std::vector<Lanes<8>>& drawn, Values<8>& values) const;

 private:
  /// Which groups of a pipe's numbers some draw changes.
  struct PipeChanges {
    bool length = false, section = false, wave = false, friction = false, fittings = false, profile = false,
         rating = false;
  };
  template <int W>
  void overwrite(const Scores<W>& scores, const std::vector<Lanes<W>>& drawn, Values<W>& values) const;

  const Case* case_;
  const Plan* plan_;
  std::vector<base::ReadySpread> spreads_;  ///< as Case::unknowns
  bool site_ = false, liquid_ = false, viscosity_ = false, temperature_ = false, places_ = false, choices_ = false;
  std::vector<PipeChanges> pipes_;
  std::vector<bool> valves_, pumps_, check_valves_, draw_offs_, events_;
};

/// W draws. `values` keeps its storage between calls: nothing is allocated after the first one.
template <int W>
void realise(const Case& c, const Plan& plan, const Scores<W>& scores, Values<W>& values);

extern template Values<1> Realiser::prepare<1>() const;
extern template Values<8> Realiser::prepare<8>() const;
extern template void Realiser::draw<1>(const Scores<1>&, Values<1>&) const;
extern template void Realiser::draw<8>(const Scores<8>&, Values<8>&) const;
extern template void realise<1>(const Case&, const Plan&, const Scores<1>&, Values<1>&);
extern template void realise<8>(const Case&, const Plan&, const Scores<8>&, Values<8>&);

}  // namespace headband::network
