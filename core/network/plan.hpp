#pragma once
// SPDX-License-Identifier: MIT
//
// The pipeline as the solvers see it: topology and names, built once per case and shared by all draws.

#include "core/network/case.hpp"

#include <string>
#include <vector>

namespace headband::network {

/// Strong index; `none` where there is no element.
template <class Tag>
struct Id {
  int index = -1;
  [[nodiscard]] bool exists() const { return index >= 0; }
  [[nodiscard]] std::size_t at() const { return static_cast<std::size_t>(index); }
  friend bool operator==(const Id&, const Id&) = default;
};
using PlaceId = Id<struct PlaceTag>;
using PipeId = Id<struct PipeTag>;

/// Where the elevation of a place comes from (convention e).
enum class ElevationSource {
  entry,       ///< `[[place]] elevation`, index into Case::places
  pipe_start,  ///< first profile point of a pipe, index into Plan::pipes
  pipe_end,    ///< last profile point of a pipe
  level,       ///< the basin's own level, index into Case::basins
  nowhere      ///< stated nowhere: 0 m, a guess
};

/// A point where things meet. Basins are places too (their head is held).
struct PlacePlan {
  std::string name;
  int basin = -1;           ///< index into Case::basins, -1 = ordinary place
  bool head_given = false;  ///< `[[place]] head`: part cut off from every basin
  ElevationSource elevation = ElevationSource::nowhere;
  int elevation_index = -1;
};

/// Which loss law a pipe follows.
enum class LossKind { darcy, hazen_williams, manning, fixed_factor, none };

struct PipePlan {
  std::string name;
  PlaceId from, to;
  LossKind loss = LossKind::darcy;
  int profile_points = 2;               ///< at least the two ends
  bool wave_speed_known = false;        ///< false: not enough numbers for a wave speed (flow only)
  std::vector<bool> fitting_has_place;  ///< one per fitting: true = acts at its own chainage
};

/// A device with a flow: between two places, or from a place to the air (`to` does not exist), or at one place.
enum class DeviceKind { valve, pump, check_valve, draw_off, air_vessel, surge_tank, relief, air_valve };
struct DevicePlan {
  DeviceKind kind = DeviceKind::valve;
  std::string name;
  int index = -1;        ///< into the case's vector of its kind
  PlaceId from{}, to{};  ///< `to` not existing: air, or a device at one place
  PipeId adjoining{};    ///< first pipe that ends at `from`, else at `to`
};

struct EventPlan {
  int index = -1;  ///< into Case::events
  EventKind kind = EventKind::move_valve;
  int device = -1;   ///< into Plan::devices; basins: -1
  int basin = -1;    ///< into Case::basins
  std::string name;  ///< as shown: name, else SUBJECT
};

/// A Spot resolved to ids.
struct SpotPlan {
  std::string name;
  PlaceId place;           ///< exists for a place
  PipeId pipe;             ///< exists for a pipe or a point on it
  double chainage = -1.0;  ///< [m], < 0 = the whole pipe
};

struct AnswerPlan {
  std::string name;
  AnswerKind kind = AnswerKind::highest_pressure;
  SpotPlan where;  ///< neither exists = everywhere
  SpotPlan other;  ///< second place of a pressure drop
  bool needs_surge() const {
    return kind == AnswerKind::highest_pressure || kind == AnswerKind::lowest_pressure || kind == AnswerKind::velocity;
  }
};

struct LimitPlan {
  std::string name;
  AnswerPlan subject;
  double bound = 0.0;  ///< [SI of the answer], pressures gauge
  bool not_over = true;
  double at_most = -1.0;  ///< < 0: left out
  double confidence = 0.95;
  int rating_of_pipe = -1;  ///< the limit is a pipe's `rating`
};

/// Topology and names of a case; const and shared by every draw.
struct Plan {
  std::vector<PlacePlan> places;
  std::vector<PipePlan> pipes;
  std::vector<DevicePlan> devices;  ///< in file order
  std::vector<EventPlan> events;
  std::vector<SpotPlan> probes;  ///< histories kept: `show places`, all places when left out
  std::vector<AnswerPlan> answers;
  std::vector<LimitPlan> limits;  ///< the user's, then one per rated pipe

  [[nodiscard]] int place_named(const std::string& name) const;   ///< -1 = none
  [[nodiscard]] int pipe_named(const std::string& name) const;    ///< -1 = none
  [[nodiscard]] int device_named(const std::string& name) const;  ///< -1 = none
};

/// Builds the plan of a case that `validate` found nothing wrong with.
[[nodiscard]] Plan make_plan(const Case& c);

/// The loss law a pipe follows: its own number before the one of `[friction]`; `law = "none"` before all.
[[nodiscard]] LossKind loss_kind(const Case& c, const Pipe& pipe);

/// True for a valve that is shut at the start in every draw.
[[nodiscard]] bool starts_shut(const Valve& valve);

/// True for a pump that stands still at the start: its first event is a start.
[[nodiscard]] bool starts_at_rest(const Case& c, const Pump& pump);

}  // namespace headband::network
