// SPDX-License-Identifier: MIT
#include "core/report/figures.hpp"
#include "core/report/markup.hpp"
#include "core/report/sections.hpp"
#include "core/show/reported.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>
#include <limits>

namespace headband::report {
namespace {

using answers::Study;

std::string place_of(const answers::Extreme& extreme) {
  if (extreme.pipe.empty()) return "–";
  return escaped(extreme.pipe) + " at " + both(extreme.chainage, Shown::chainage);
}

/// What has to be said of a pressure at this time in a run with vapour cavities.
std::string cavity_remark(const Study& study, double time) {
  const auto* first = show::first_cavity(study);
  if (first == nullptr) return {};
  const double opens = first->opens;
  double closes = -1.0;
  bool still_open = false;
  for (const auto& cavity : show::reported_cavities(study)) {
    if (std::isnan(cavity.closes))
      still_open = true;
    else
      closes = std::max(closes, cavity.closes);
  }
  if (time < opens) return fmt::format("before vapour formed (from {} s)", figures(opens, 3));
  return fmt::format("<strong>order of size only</strong>: vapour formed from {} s {}",
                     figures(opens, 3),
                     still_open ? std::string("on") : fmt::format("to {} s", figures(closes, 3)));
}

/// The swing of an extreme from its steady head, beside the one-formula rise a V / g (Joukowsky) of its pipe.
std::string hand_check(const Study& study, const answers::Extreme& extreme) {
  const auto pipe = std::find_if(
      study.pipes.begin(), study.pipes.end(), [&](const answers::PipeAnswer& p) { return p.name == extreme.pipe; });
  if (pipe == study.pipes.end() || !study.transient) return "–";
  const auto& t = *study.transient;
  const auto index = static_cast<std::int32_t>(pipe - study.pipes.begin());
  double steady = answers::missing, nearest = std::numeric_limits<double>::infinity();
  for (std::size_t i = 0; i < t.station_pipe.size() && i < t.steady_head.size() && i < t.chainage.size(); ++i) {
    const double away = std::abs(t.chainage[i] - extreme.chainage);
    if (t.station_pipe[i] != index || !(away < nearest)) continue;
    nearest = away;
    steady = t.steady_head[i];
  }
  const double swing = std::abs(extreme.head - steady);
  if (std::isnan(swing) || !(pipe->joukowsky_head > 0.0)) return "–";
  return fmt::format("{} times<br><small>swing {} against a\u00a0V\u00a0/\u00a0g = {}</small>",
                     figures(swing / pipe->joukowsky_head, 2),
                     both(swing, Shown::head, 3),
                     both(pipe->joukowsky_head, Shown::head, 3));
}

std::string extremes(const Study& study) {
  Table table{"Highest and lowest pressure of the run",
              {{"Extreme"},
               {"pressure ± grid bound", true},
               {"head", true},
               {"where"},
               {"when", true},
               {"hand check"},
               {"remark"}},
              {}};
  for (const auto& [name, extreme] : {std::pair{"Highest", &study.highest}, std::pair{"Lowest", &study.lowest}}) {
    if (!*extreme) continue;
    const auto& e = **extreme;
    std::string remark = cavity_remark(study, e.time);
    if (!e.grid_converging)
      remark += (remark.empty() ? "" : "; ") + std::string("<strong>grids not converging</strong>");
    if (std::isnan(e.grid_bound)) remark += (remark.empty() ? "" : "; ") + std::string("no grid bound");
    table.rows.push_back({name,
                          both_with_bound(e.pressure, e.grid_bound, Shown::pressure, Shown::pressure_difference),
                          both(e.head, Shown::head),
                          place_of(e),
                          both(e.time, Shown::time),
                          hand_check(study, e),
                          remark.empty() ? "–" : remark});
  }
  return html(table);
}

std::string place_extremes(const Study& study) {
  Table table{"Highest and lowest at each place",
              {{"Place"},
               {"elevation", true},
               {"steady", true},
               {"highest", true},
               {"at", true},
               {"lowest", true},
               {"at", true}},
              {}};
  for (const auto& place : study.places) {
    if (!place.surged) continue;
    table.rows.push_back({escaped(place.name),
                          both(place.elevation, Shown::elevation),
                          both(place.pressure, Shown::pressure),
                          both(place.max_pressure, Shown::pressure),
                          both(place.time_of_max, Shown::time, 3),
                          both(place.min_pressure, Shown::pressure),
                          both(place.time_of_min, Shown::time, 3)});
  }
  return folded(table, 24);
}

std::string figures_of(const std::vector<Plot>& plots) {
  std::string out;
  for (const Plot& plot : plots) out += figure(plot);
  return out;
}

}  // namespace

std::string figure(const Plot& plot) {
  const std::string id = slug(plot.id);
  std::string out = fmt::format("<figure class=\"figure\" id=\"{}\">\n<figcaption><h3>{}</h3><p>{}</p></figcaption>\n",
                                id,
                                escaped(plot.title),
                                escaped(plot.message));
  out += fmt::format("<div class=\"picture\">\n<div class=\"si\">{}</div>\n<div class=\"us\">{}</div>\n</div>\n",
                     svg(plot, Family::si, "-si"),
                     svg(plot, Family::us, "-us"));
  out += fmt::format("<script type=\"application/json\" class=\"plot-data\">{}</script>\n", data_block(plot));
  Table table{plot.title + ": lowest and highest of each curve",
              {{"Curve"}, {"lowest", true}, {"at", true}, {"highest", true}, {"at", true}},
              {}};
  for (const Curve& curve : plot.curves) {
    if (curve.shape == Shape::step || curve.shape == Shape::dots) continue;
    std::size_t low = curve.y.size(), high = curve.y.size();
    for (std::size_t i = 0; i < curve.y.size(); ++i) {
      if (!std::isfinite(curve.y[i])) continue;
      if (low == curve.y.size() || curve.y[i] < curve.y[low]) low = i;
      if (high == curve.y.size() || curve.y[i] > curve.y[high]) high = i;
    }
    if (low == curve.y.size()) continue;
    table.rows.push_back({escaped(curve.name),
                          both(curve.y[low], plot.y.shown),
                          both(plot.abscissa[low], plot.x.shown),
                          both(curve.y[high], plot.y.shown),
                          both(plot.abscissa[high], plot.x.shown)});
  }
  const std::string body = html(table);
  if (!body.empty())
    out += fmt::format("<details><summary>Lowest and highest as numbers</summary>\n{}</details>\n", body);
  return out + "</figure>\n";
}

std::vector<Section> answer_sections(const Study& study) {
  std::vector<Section> sections;
  const auto add = [&](const char* id, const char* title, std::string body) {
    if (!body.empty()) sections.push_back({id, title, std::move(body)});
  };
  add("extremes", "Extremes", extremes(study) + place_extremes(study));
  if (study.limits_shown || !study.limits.empty()) add("limits", "Limits", limits_block(study));
  constexpr std::size_t most = 24;
  std::string along = figures_of(profiles(study, most));
  if (study.pipes.size() > most)
    along += paragraph(
        fmt::format(
            "{} of {} pipes are drawn: those with the extremes and the first of the case. The result file holds all.",
            most,
            study.pipes.size()),
        "key");
  add("profile", "Along the line", along);
  add("history", "In time", figures_of(histories(study)));
  add("series", "Devices in time", figures_of(device_series(study)));
  if (study.bands) add("bands", "How sure", bands_block(study));
  return sections;
}

}  // namespace headband::report
