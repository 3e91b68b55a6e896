// SPDX-License-Identifier: MIT
#include "core/friction/range.hpp"

#include <fmt/format.h>

#include <array>
#include <cmath>

namespace headband::friction {

namespace {

/// Hazen-Williams was fitted to water near 15 degC in mains: viscosity 0.8 .. 1.6 mm2/s, Re from 1e5, bore from 50 mm,
/// up to 3 m/s (common practice).
constexpr double water_least = 0.8e-6, water_most = 1.6e-6, hazen_least_reynolds = 1e5, hazen_least_bore = 0.05,
                 hazen_most_velocity = 3.0;
/// Manning: fully rough water flow (common practice).
constexpr double manning_least_reynolds = 1e5;
/// Swamee & Jain 1976.
constexpr double swamee_low = 5e3, swamee_high = 1e8, swamee_smooth = 1e-6, swamee_rough = 1e-2;

void remark_water(std::vector<std::string>& remarks, const char* law, double viscosity) {
  if (viscosity < water_least || viscosity > water_most)
    remarks.push_back(
        fmt::format("{}: made for water near 15 degC; the liquid here has {:.3g} mm2/s", law, viscosity * 1e6));
}

void remark_least_reynolds(std::vector<std::string>& remarks, const char* law, double reynolds, double least) {
  if (reynolds < least)
    remarks.push_back(fmt::format("{}: Reynolds number {:.3g} is below {:g}", law, reynolds, least));
}

}  // namespace

const char* name_of(FrictionLaw law) {
  constexpr std::array names{"colebrook-white",
                             "haaland",
                             "swamee-jain",
                             "serghides",
                             "zigrang-sylvester",
                             "churchill",
                             "smooth",
                             "hazen-williams",
                             "manning",
                             "none"};
  return names[static_cast<std::size_t>(law)];
}

std::vector<std::string> range_remarks(FrictionLaw law, const FlowState& flow) {
  std::vector<std::string> remarks;
  if (!(std::abs(flow.velocity) > 0.0)) return remarks;
  const char* name = name_of(law);
  switch (law) {
    case FrictionLaw::hazen_williams:
      remark_water(remarks, name, flow.kinematic_viscosity);
      remark_least_reynolds(remarks, name, flow.reynolds, hazen_least_reynolds);
      if (flow.bore < hazen_least_bore)
        remarks.push_back(
            fmt::format("{}: bore {:.3g} mm is below {:g} mm", name, flow.bore * 1e3, hazen_least_bore * 1e3));
      if (std::abs(flow.velocity) > hazen_most_velocity)
        remarks.push_back(fmt::format(
            "{}: velocity {:.3g} m/s is over {:g} m/s", name, std::abs(flow.velocity), hazen_most_velocity));
      break;
    case FrictionLaw::manning:
      remark_water(remarks, name, flow.kinematic_viscosity);
      remark_least_reynolds(remarks, name, flow.reynolds, manning_least_reynolds);
      break;
    case FrictionLaw::swamee_jain:
      // below 4000 another law holds or blends in
      if (flow.reynolds >= 4000.0 && (flow.reynolds < swamee_low || flow.reynolds > swamee_high))
        remarks.push_back(fmt::format(
            "{}: Reynolds number {:.3g} is outside {:g} .. {:g}", name, flow.reynolds, swamee_low, swamee_high));
      if (flow.relative_roughness < swamee_smooth || flow.relative_roughness > swamee_rough)
        remarks.push_back(fmt::format("{}: roughness/bore {:.3g} is outside {:g} .. {:g}",
                                      name,
                                      flow.relative_roughness,
                                      swamee_smooth,
                                      swamee_rough));
      break;
    case FrictionLaw::smooth:
    case FrictionLaw::colebrook_white:
    case FrictionLaw::haaland:
    case FrictionLaw::serghides:
    case FrictionLaw::zigrang_sylvester:
    case FrictionLaw::churchill:
      if (law != FrictionLaw::smooth && flow.relative_roughness > 0.05)
        remarks.push_back(fmt::format("{}: roughness/bore {:.3g} is over 0.05", name, flow.relative_roughness));
      break;
    case FrictionLaw::none:
      break;
  }
  return remarks;
}

}  // namespace headband::friction
