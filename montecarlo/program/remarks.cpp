// SPDX-License-Identifier: MIT
#include "montecarlo/program/remarks.hpp"

#include "core/friction/range.hpp"
#include "core/liquid/water.hpp"

#include <fmt/format.h>

#include <map>
#include <optional>
#include <string>
#include <vector>

namespace headband::program {
namespace {

/// The law a pipe's loss follows; none where no law is asked (friction off, a factor given outright).
std::optional<friction::FrictionLaw> law_of(const network::PipePlan& pipe, friction::FrictionLaw law) {
  switch (pipe.loss) {
    case network::LossKind::darcy: return law;
    case network::LossKind::hazen_williams: return friction::FrictionLaw::hazen_williams;
    case network::LossKind::manning: return friction::FrictionLaw::manning;
    case network::LossKind::fixed_factor:
    case network::LossKind::none: break;
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
    for (const auto& remark : friction::range_remarks(*law, flow)) pipes_by_remark[remark].push_back(central.plan.pipes[i].name);
  }
  for (const auto& [remark, pipes] : pipes_by_remark) {
    const std::string others = pipes.size() > 1 ? fmt::format(" and {} more", pipes.size() - 1) : "";
    out.push_back(fmt::format("pipe '{}'{}: {}", pipes.front(), others, remark));
  }
}

void add_misfits(const network::Liquid& liquid, std::vector<std::string>& out) {
  const auto& points = liquid.viscosity_points;
  if (points.size() < 3) return;
  const auto law = liquid::viscosity_law(points[0].first.value, points[0].second.value, points[1].first.value,
                                         points[1].second.value);
  for (std::size_t i = 2; i < points.size(); ++i) {
    const double miss = liquid::misfit(law, points[i].first.value, points[i].second.value);
    out.push_back(fmt::format("viscosity law through the first two points: {:+.1f} % at the point {}, {}", 100.0 * miss,
                              points[i].first.written, points[i].second.written));
  }
}

}  // namespace

std::vector<std::string> remarks(const network::Case& c, const Central& central) {
  std::vector<std::string> out;
  add_misfits(c.liquid, out);
  if (central.solved) add_range_remarks(central, out);
  return out;
}

}  // namespace headband::program
