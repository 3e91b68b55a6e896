// SPDX-License-Identifier: MIT
#include "core/report/bars.hpp"
#include "core/report/figures.hpp"
#include "core/report/markup.hpp"
#include "core/report/sections.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>

namespace headband::report {
namespace {

using answers::Study;

std::string probability_cell(const answers::LimitAnswer& limit) {
  const auto range = [](const std::array<double, 2>& r) { return percent(r[0]) + " … " + percent(r[1]); };
  if (limit.probability_range) {
    std::string out = range(*limit.probability_range);
    if (limit.probability_lower_range && limit.probability_upper_range)
      out += fmt::format("<br><small>at least {}, at most {}</small>",
                         percent((*limit.probability_lower_range)[0]),
                         percent((*limit.probability_upper_range)[1]));
    return out;
  }
  if (std::isnan(limit.probability)) return "–";
  return fmt::format("{}<br><small>at least {}, at most {}</small>",
                     percent(limit.probability),
                     percent(limit.probability_lower),
                     percent(limit.probability_upper));
}

/// The margin with the decimals of the value it belongs to.
std::string margin_cell(const answers::LimitAnswer& limit, Shown shown, Shown difference) {
  const auto one = [&](Family family) {
    const double scale = measure(difference, family, limit.value).scale;
    const double value = measure(shown, family, limit.value)(limit.value);
    const std::string like = figures(std::isfinite(value) ? value : 1.0, 4);
    const std::size_t point = like.find('.');
    const int places = point == std::string::npos || like.find("×") != std::string::npos
                           ? 0
                           : static_cast<int>(like.size() - point - 1);
    if (std::isnan(limit.margin)) return std::string("–");
    return decimals(limit.margin * scale, places) + behind_number(measure(difference, family, limit.value).unit);
  };
  return both(one(Family::si), one(Family::us));
}

const answers::BandAnswer* answer_of(const Study& study, const answers::LimitAnswer& limit) {
  if (!study.bands) return nullptr;
  for (const auto& answer : study.bands->answers)
    if (limit_of(study, answer) == &limit) return &answer;
  return nullptr;
}

}  // namespace

namespace {

/// A statement on the whole line stands under the limits, without a verdict of its own.
std::vector<std::string> whole_line_row(const answers::LimitAnswer& any) {
  std::string chance = probability_cell(any);
  if (std::isnan(any.probability) && !any.probability_range)
    chance = "at least " + percent(any.probability_lower) + "<br><small>" + escaped(any.reason) + "</small>";
  std::string about = "chance that some pipe exceeds its own rating";
  if (!any.worst_corner.empty()) about += "; worst corner: " + escaped(any.worst_corner);
  return {escaped(any.name) + "<br><small>" + about + "</small>",
          "statement",
          "each pipe its own",
          "–",
          both(any.margin, Shown::pressure_difference, 3),
          chance};
}

}  // namespace

std::string limits_block(const Study& study) {
  Table table{"Limits: by how much they are kept, and how surely",
              {{"Limit"},
               {"verdict"},
               {"bound", true},
               {"one run", true},
               {"margin", true},
               {"chance that it is not kept", true}},
              {}};
  bool chances = false, pictures = false;
  for (std::size_t i = 0; i < study.limits.size(); ++i) {
    const auto& limit = study.limits[i];
    const Shown shown = shown_of_unit(limit.unit, limit.kind);
    const Shown difference = shown == Shown::pressure ? Shown::pressure_difference : shown;
    std::string kind = limit.kind;
    std::replace(kind.begin(), kind.end(), '_', ' ');
    std::string about = escaped(limit.where.empty() ? kind : kind + ", " + limit.where);
    const bool pressure = shown == Shown::pressure;
    const double bound = pressure && study.highest && limit.kind != "lowest_pressure" ? study.highest->grid_bound
                         : pressure && study.lowest                                   ? study.lowest->grid_bound
                                                                                      : answers::missing;
    std::string verdict = verdict_mark(limit.verdict);
    if (!limit.reason.empty()) verdict += "<br><small>" + escaped(limit.reason) + "</small>";
    if (!limit.worst_corner.empty()) verdict += "<br><small>worst corner: " + escaped(limit.worst_corner) + "</small>";
    std::string chance = probability_cell(limit);
    if (!std::isnan(limit.at_most)) chance += "<br><small>allowed " + percent(limit.at_most) + "</small>";
    chances = chances || limit.probability_range || !std::isnan(limit.probability);
    const std::string picture =
        strip(limit, answer_of(study, limit), study.bands ? study.bands->coverage : 0.95, bound, std::to_string(i));
    pictures = pictures || !picture.empty();
    table.rows.push_back({escaped(limit.name) + "<br><small>" + about + "</small>" + picture,
                          verdict,
                          (fails_over(limit) ? "not over " : "not under ") + both(limit.limit, shown),
                          both(limit.value, shown),
                          margin_cell(limit, shown, difference),
                          chance});
  }
  if (study.bands)
    for (const auto& any : study.bands->whole_line) table.rows.push_back(whole_line_row(any));
  std::string out = html(table);
  if (out.empty()) return out;
  if (pictures)
    out += paragraph(
        "Picture: dot = one run, thick line = " +
            (study.bands ? percent(study.bands->coverage) + " band of the draws" : std::string("grid bound")) +
            ", upright line = limit, hatched = the side that is not allowed.",
        "key");
  out += paragraph("Limits and ratings were typed by the user.", "key");
  if (chances && study.bands)
    out += paragraph(
        fmt::format(
            "Chances come from {} draws ({} failed, counted against the limit); each bound holds with {} confidence, "
            "grid error included. Not in them: moving structure, human error, a wrong drawing, a wrong valve.",
            study.bands->draws,
            study.bands->failed,
            percent(study.bands->confidence)),
        "key");
  return out;
}

}  // namespace headband::report
