// SPDX-License-Identifier: MIT
#include "montecarlo/program/central.hpp"

#include "core/base/error.hpp"
#include "core/base/units.hpp"
#include "core/friction/range.hpp"
#include "core/liquid/water.hpp"

#include <fmt/format.h>

#include <cmath>
#include <map>
#include <optional>
#include <utility>

namespace headband::program {
namespace {

using answers::missing;

double head_of(const Central& central, network::PlaceId place) {
  return place.exists() ? central.state.place_head[place.at()].number : missing;
}

answers::LiquidAnswer liquid_answer(const network::Case& c, const network::LiquidValues<1>& liquid) {
  answers::LiquidAnswer answer;
  answer.name = c.liquid.name;
  answer.source = c.liquid.density.source;
  answer.temperature = liquid.temperature.number;
  answer.density = liquid.density.number;
  answer.kinematic_viscosity = liquid.kinematic_viscosity.number;
  answer.dynamic_viscosity = answer.kinematic_viscosity * answer.density;
  answer.bulk_modulus_isentropic = liquid.bulk_modulus.number;
  answer.bulk_modulus_isothermal = liquid.bulk_modulus_isothermal.number;
  answer.sound_speed = std::sqrt(answer.bulk_modulus_isentropic / answer.density);
  answer.vapour_pressure = liquid.vapour_pressure.number;
  return answer;
}

answers::PipeAnswer pipe_answer(const Central& central, std::size_t i) {
  const auto& plan = central.plan.pipes[i];
  const auto& values = central.values.pipes[i];
  const auto& state = central.state;
  const double weight = central.values.liquid.density.number * central.values.gravity.number;
  answers::PipeAnswer answer;
  answer.name = plan.name;
  answer.from = central.plan.places[plan.from.at()].name;
  answer.to = central.plan.places[plan.to.at()].name;
  answer.length = values.length.number;
  answer.bore = values.bore.number;
  answer.roughness = values.roughness.number;
  answer.restraint_factor = values.restraint_factor.number;
  answer.flow = state.pipe_flow[i].number;
  answer.velocity = answer.flow / values.area.number;
  answer.reynolds = state.reynolds[i].number;
  // where nothing flows there is no factor: 64/Re would only tell of the guard against a division by zero
  constexpr double still = 1e-12;  // [m/s]
  if (std::abs(answer.velocity) > still) answer.friction_factor = state.friction_factor[i].number;
  answer.head_loss = state.head_loss[i].number;
  answer.wave_speed = state.wave_speed[i].number;
  answer.rating = values.rating.number;
  answer.joukowsky_head = answer.wave_speed * std::abs(answer.velocity) / central.values.gravity.number;
  for (std::size_t k = 0; k < values.chainage.size(); ++k) {
    answer.chainage.push_back(values.chainage[k].number);
    answer.elevation.push_back(values.elevation[k].number);
    answer.steady_head.push_back(
        steady::head_at<1>(central.plan, central.values, state, {static_cast<int>(i)}, values.chainage[k]).number);
  }
  // Gauge pressure at one end minus that at the other (convention d).
  answer.pressure_drop = weight * ((head_of(central, plan.from) - values.elevation.front().number) -
                                   (head_of(central, plan.to) - values.elevation.back().number));
  return answer;
}

answers::PlaceAnswer place_answer(const Central& central, std::size_t i) {
  const double weight = central.values.liquid.density.number * central.values.gravity.number;
  answers::PlaceAnswer answer;
  answer.name = central.plan.places[i].name;
  answer.elevation = central.values.places[i].elevation.number;
  answer.head = central.state.place_head[i].number;
  answer.pressure = weight * (answer.head - answer.elevation);
  return answer;
}

std::string kind_words(network::DeviceKind kind) {
  using enum network::DeviceKind;
  switch (kind) {
    case valve:
      return "valve";
    case pump:
      return "pump";
    case check_valve:
      return "check valve";
    case draw_off:
      return "draw-off";
    case air_vessel:
      return "air vessel";
    case surge_tank:
      return "surge tank";
    case relief:
      return "relief";
    case air_valve:
      return "air valve";
  }
  return "device";
}

answers::DeviceAnswer device_answer(const Central& central, std::size_t i) {
  using enum network::DeviceKind;
  const auto& device = central.plan.devices[i];
  answers::DeviceAnswer answer;
  answer.name = device.name;
  answer.kind = kind_words(device.kind);
  answer.numbers.emplace_back("flow_m3_per_s", central.state.device_flow[i].number);
  const double before = head_of(central, device.from);
  // A valve to air discharges at the elevation of its `from` place (convention f).
  const double after =
      device.to.exists() ? head_of(central, device.to) : central.values.places[device.from.at()].elevation.number;
  const double head = device.kind == pump                                  ? after - before
                      : device.kind == valve || device.kind == check_valve ? before - after
                                                                           : before;
  answer.numbers.emplace_back("head_m", head);
  const auto at = static_cast<std::size_t>(device.index);
  if (device.kind == valve) answer.numbers.emplace_back("opening", central.values.valves[at].starting_opening.number);
  if (device.kind == pump) {
    const double speed = central.values.pumps[at].speed.number * central.state.pump_speed[at].number;
    if (std::isfinite(speed)) answer.numbers.emplace_back("speed_rad_per_s", speed);
  }
  return answer;
}

void judge_vapour(const network::Case& c, Central& central) {
  const auto found = steady::check_vapour<1>(central.plan, central.values, central.state);
  if (found.pipe[0] < 0) return;
  const auto& pipe = central.plan.pipes[static_cast<std::size_t>(found.pipe[0])].name;
  const auto units = c.show.units;
  const std::string words = fmt::format("the steady state is below the vapour limit in {} at {}, by {} of head",
                                        pipe,
                                        base::shown(found.chainage.number, base::Dimension::length, units),
                                        base::shown(found.shortfall.number, base::Dimension::length, units));
  if (c.surge.cavities == network::Cavities::off) {
    central.warning = words;
  } else {
    central.solved = false;
    central.failure = words;
  }
}

/// A valve sized by its flow needs head in the direction of that flow (convention n): the case is wrong.
[[noreturn]] void refuse_valve(const network::Case& c, const Central& central) {
  base::Problems problems;
  for (const auto& device : central.plan.devices) {
    if (device.kind != network::DeviceKind::valve) continue;
    const auto at = static_cast<std::size_t>(device.index);
    const auto& valve = c.valves[at];
    const double flow = central.values.valves[at].sizing_flow.number;
    if (!valve.flow.given() || std::isnan(flow)) continue;
    const double before = head_of(central, device.from);
    const double after =
        device.to.exists() ? head_of(central, device.to) : central.values.places[device.from.at()].elevation.number;
    if (flow * (before - after) > 0.0) continue;
    const auto words = [&](double head) { return base::shown(head, base::Dimension::length, c.show.units); };
    problems.push_back({.place = valve.flow.place,
                        .path = "valve/" + valve.name + "/flow",
                        .what = fmt::format("no head drives this flow through valve {}: {} before it, {} behind it",
                                            valve.name,
                                            words(before),
                                            words(after)),
                        .value = valve.flow.written,
                        .bound = "a flow that the heads of the basins allow",
                        .hint = "state a smaller flow, or check levels and elevations"});
  }
  if (problems.empty())
    problems.push_back(
        {{}, "valve", "no head drives the flow a valve is sized by", "", "", "check levels and elevations"});
  throw base::InputError(problems);
}

/// The law a pipe's loss follows; none where no law is asked (friction off, a factor given outright).
std::optional<friction::FrictionLaw> law_of(const network::PipePlan& pipe, friction::FrictionLaw law) {
  switch (pipe.loss) {
    case network::LossKind::darcy:
      return law;
    case network::LossKind::hazen_williams:
      return friction::FrictionLaw::hazen_williams;
    case network::LossKind::manning:
      return friction::FrictionLaw::manning;
    case network::LossKind::fixed_factor:
    case network::LossKind::none:
      break;
  }
  return std::nullopt;
}

void add_range_remarks(const Central& central, std::vector<std::string>& out) {
  std::map<std::string, std::vector<std::string>> pipes_by_remark;
  for (std::size_t i = 0; i < central.plan.pipes.size(); ++i) {
    const auto law = law_of(central.plan.pipes[i], central.values.law[0]);
    if (!law) continue;
    const auto& pipe = central.values.pipes[i];
    const friction::FlowState flow{.reynolds = central.state.reynolds[i].number,
                                   .relative_roughness = pipe.roughness.number / pipe.bore.number,
                                   .bore = pipe.bore.number,
                                   .velocity = central.state.pipe_flow[i].number / pipe.area.number,
                                   .kinematic_viscosity = central.values.liquid.kinematic_viscosity.number};
    for (const auto& remark : friction::range_remarks(*law, flow))
      pipes_by_remark[remark].push_back(central.plan.pipes[i].name);
  }
  for (const auto& [remark, pipes] : pipes_by_remark) {
    const std::string others = pipes.size() > 1 ? fmt::format(" and {} more", pipes.size() - 1) : "";
    out.push_back(fmt::format("pipe '{}'{}: {}", pipes.front(), others, remark));
  }
}

void add_misfits(const network::Liquid& liquid, std::vector<std::string>& out) {
  const auto& points = liquid.viscosity_points;
  if (points.size() < 3) return;
  const auto law = liquid::viscosity_law(
      points[0].first.value, points[0].second.value, points[1].first.value, points[1].second.value);
  for (std::size_t i = 2; i < points.size(); ++i) {
    const double miss = liquid::misfit(law, points[i].first.value, points[i].second.value);
    out.push_back(fmt::format("viscosity law through the first two points: {:+.1f} % at the point {}, {}",
                              100.0 * miss,
                              points[i].first.written,
                              points[i].second.written));
  }
}

}  // namespace

Central central_run(const network::Case& c) {
  Central central{.plan = network::make_plan(c), .values = {}, .state = {}, .failure = {}, .warning = {}};
  central.values = network::realise(c, central.plan);
  steady::SteadySolver solver(c, central.plan);
  central.is_explicit = solver.is_explicit();
  solver.solve<1>(central.values, central.state);
  switch (central.state.status[0]) {
    case steady::SteadyStatus::converged:
      central.solved = true;
      break;
    case steady::SteadyStatus::on_jump:
      central.solved = true;
      central.warning = "the steady flow stands on the jump between laminar and turbulent friction";
      break;
    case steady::SteadyStatus::not_converged:
      central.failure = fmt::format("no steady state: not converged after {} steps", central.state.iterations);
      break;
    case steady::SteadyStatus::valve_without_head:
      refuse_valve(c, central);
    case steady::SteadyStatus::not_finite:
      central.failure = "no steady state: the numbers became not finite";
      break;
  }
  if (central.solved) judge_vapour(c, central);
  return central;
}

std::vector<std::string> remarks(const network::Case& c, const Central& central) {
  std::vector<std::string> out;
  add_misfits(c.liquid, out);
  if (central.solved) add_range_remarks(central, out);
  return out;
}

void add_steady(answers::Study& study, const network::Case& c, const Central& central) {
  study.liquid = liquid_answer(c, central.values.liquid);
  study.density = central.values.liquid.density.number;
  study.gravity = central.values.gravity.number;
  study.atmosphere = central.values.atmosphere.number;
  for (std::size_t i = 0; i < central.plan.pipes.size(); ++i) study.pipes.push_back(pipe_answer(central, i));
  for (std::size_t i = 0; i < central.plan.places.size(); ++i) study.places.push_back(place_answer(central, i));
  for (std::size_t i = 0; i < central.plan.devices.size(); ++i) study.devices.push_back(device_answer(central, i));
  study.steady_residual = central.state.residual.number;
  study.steady_iterations = central.state.iterations;
  study.steady_status = !central.failure.empty() ? central.failure
                        : central.is_explicit    ? "explicit: flows follow from continuity"
                                                 : "converged";
  if (!central.warning.empty()) study.warnings.push_back(central.warning);
  for (auto& remark : remarks(c, central)) study.warnings.push_back(std::move(remark));
  if (!central.failure.empty()) {
    study.warnings.push_back(central.failure);
    study.state = answers::RunState::incomplete;
  }
}

}  // namespace headband::program
