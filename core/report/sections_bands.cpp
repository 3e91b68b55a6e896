// SPDX-License-Identifier: MIT
#include "core/report/bars.hpp"
#include "core/report/figures.hpp"
#include "core/report/markup.hpp"
#include "core/report/sections.hpp"

#include "core/show/reported.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>

namespace headband::report {
namespace {

using answers::Study;

/// Two ends of a band with the unit once.
std::string band_cell(double low, double high, Shown shown) {
  const auto one = [&](Family family) {
    const Measure in = measure(shown, family, std::max(std::abs(low), std::abs(high)));
    return figures(in(low)) + " … " + figures(in(high)) + behind_number(in.unit);
  };
  if (std::isnan(low) || std::isnan(high)) return "–";
  return both(one(Family::si), one(Family::us));
}

std::string budget(const answers::BandAnswer& answer) {
  const Shown shown = shown_of_unit(answer.unit, answer.kind);
  const Shown difference = shown == Shown::pressure ? Shown::pressure_difference : shown;
  const std::pair<const char*, double> groups[] = {{"inputs", answer.budget_inputs},
                                                   {"friction law", answer.budget_friction_law},
                                                   {"grid (a bound)", answer.budget_grid},
                                                   {"sampling (a half-width)", answer.budget_sampling}};
  double largest = 0.0;
  for (const auto& [name, value] : groups)
    if (std::isfinite(value)) largest = std::max(largest, value);
  Table table{fmt::format("Where the width of {} comes from (first {} draws)", answer.name, answer.budget_draws),
              {{"Group"}, {"standard deviation", true}, {"in proportion"}},
              {}};
  for (const auto& [name, value] : groups)
    if (std::isfinite(value)) table.rows.push_back({name, both(value, difference, 3), bar_cell(value, 0.0, largest)});
  return html(table);
}

std::string sensitivity(const answers::BandAnswer& answer) {
  Table table{fmt::format("Which unknowns move {}: shares of its variance{}",
                          answer.name,
                          show::overlapping_shares(answer) ? show::overlap_remark : ""),
              {{"Unknown"}, {"alone", true}, {"with others", true}, {"alone (dark), with others (light)"}},
              {}};
  if (show::stands_still(answer))
    return paragraph(
        fmt::format("{} is the same in every draw: no unknown has a share of its variance.", escaped(answer.name)));
  const auto share = [](double value) {
    return value < show::least_share ? std::string("under 0.0001") : figures(value, 2);
  };
  const auto ranked = show::ranked_unknowns(answer);
  for (const auto& s : ranked)
    table.rows.push_back(
        {escaped(s.input), share(s.first), share(s.total), bar_cell(std::max(s.first, s.total), s.first, 1.0)});
  return html(table);
}

std::string quantile_table(const Study& study) {
  const auto& bands = *study.bands;
  Table table{fmt::format("Sampled answers: quantiles, each with its own {} interval", percent(bands.confidence)),
              {{"Answer"}, {"quantile", true}, {"value", true}, {"between", true}, {"and", true}},
              {}};
  for (const auto& answer : bands.answers) {
    const Shown shown = shown_of_unit(answer.unit, answer.kind);
    for (const auto& q : answer.quantiles)
      table.rows.push_back({escaped(answer.name),
                            percent(q.probability),
                            both(q.value, shown),
                            both(q.lower, shown),
                            both(q.upper, shown)});
  }
  return folded(table, 0);
}

}  // namespace

std::string bands_block(const Study& study) {
  const auto& b = *study.bands;
  Table table{"Sampled answers",
              {{"Answer"},
               {"one run", true},
               {"median", true},
               {percent(b.coverage) + " band", true},
               {"standard deviation", true},
               {"failed draws", true}},
              {}};
  for (const auto& answer : b.answers) {
    const Shown shown = shown_of_unit(answer.unit, answer.kind);
    const Shown difference = shown == Shown::pressure ? Shown::pressure_difference : shown;
    double low = answers::missing, high = answers::missing, median = answers::missing;
    for (const auto& q : answer.quantiles) {
      if (std::abs(q.probability - 0.5 * (1.0 - b.coverage)) < 1e-9) low = q.value;
      if (std::abs(q.probability - 0.5 * (1.0 + b.coverage)) < 1e-9) high = q.value;
      if (std::abs(q.probability - 0.5) < 1e-9) median = q.value;
    }
    std::string middle = both(median, shown);
    if (answer.range) middle += "<br><small>" + band_cell((*answer.range)[0], (*answer.range)[1], shown) + "</small>";
    table.rows.push_back({escaped(answer.name),
                          both(answer.central, shown),
                          middle,
                          band_cell(low, high, shown),
                          both(answer.standard_deviation, difference, 3),
                          fmt::format("{} of {}", answer.failed, answer.draws)});
  }
  std::string out = html(table);
  out += paragraph(
      fmt::format("{} draws asked, {} made ({}, seed {}); {} failed, {} with a vapour cavity. A band says how often, "
                  "confidence says how sure we are of the band.",
                  b.draws_asked,
                  b.draws,
                  escaped(b.design),
                  b.seed,
                  b.failed,
                  b.with_cavity),
      "key");
  out += quantile_table(study);
  for (std::size_t i = 0; i < b.answers.size(); ++i) {
    const Plot plot = density(study, i);
    if (!plot.abscissa.empty()) out += figure(plot);
    out += "<div class=\"pair\">\n" + budget(b.answers[i]) + sensitivity(b.answers[i]) + "</div>\n";
    std::string dots;
    for (const Plot& one : scatters(study, i)) dots += figure(one);
    if (!dots.empty())
      out +=
          fmt::format("<details><summary>Draws of {} against the unknowns that move it most</summary>\n{}</details>\n",
                      escaped(b.answers[i].name),
                      dots);
  }
  return out;
}

}  // namespace headband::report
