// SPDX-License-Identifier: MIT
#include "core/report/report.hpp"

#include "core/report/assets.hpp"
#include "core/report/bars.hpp"
#include "core/report/figures.hpp"
#include "core/report/markup.hpp"
#include "core/report/sections.hpp"

#include "core/show/reported.hpp"

#include <fmt/format.h>

#include <cmath>

namespace headband::report {
namespace {

Family family_for(const answers::Study& study, const std::string& units) {
  return family_of(units.empty() ? study.units_shown : units);
}

/// Nothing may be fetched, and only our own two scripts and two style sheets may act.
std::string policy() {
  return fmt::format(
      "default-src 'none'; script-src '{}' '{}'; style-src '{}' '{}'; base-uri 'none'; form-action 'none'",
      plot_script.sum,
      page_script.sum,
      plot_style.sum,
      page_style.sum);
}

std::string unit_switch(Family family) {
  const auto button = [&](const char* id, const char* name, bool chosen) {
    return fmt::format("<input type=\"radio\" name=\"units\" id=\"{0}\"{1}><label for=\"{0}\">{2}</label>\n",
                       id,
                       chosen ? " checked" : "",
                       name);
  };
  return "<fieldset class=\"units\"><legend>Units</legend>\n" + button("units-si", "SI", family == Family::si) +
         button("units-us", "US", family == Family::us) + "</fieldset>\n";
}

std::vector<Bar> budget_bars(const answers::BandAnswer& answer, Family family) {
  const Shown shown = shown_of_unit(answer.unit, answer.kind);
  const Shown difference = shown == Shown::pressure ? Shown::pressure_difference : shown;
  std::vector<Bar> bars;
  for (const auto& [name, value] : {std::pair{"inputs", answer.budget_inputs},
                                    std::pair{"friction law", answer.budget_friction_law},
                                    std::pair{"grid (a bound)", answer.budget_grid},
                                    std::pair{"sampling (a half-width)", answer.budget_sampling}})
    if (std::isfinite(value)) bars.push_back({name, value, 0.0, with_unit(value, difference, family, 3)});
  return bars;
}

}  // namespace

std::string page(const answers::Study& study, const std::string& units) {
  const Family family = family_for(study, units);
  std::vector<Section> sections = answer_sections(study);
  for (Section& section : basis_sections(study)) sections.push_back(std::move(section));

  const std::string title = study.title.empty() ? study.provenance.case_file : study.title;
  std::string out = "<!DOCTYPE html>\n<html lang=\"en\">\n<head>\n<meta charset=\"utf-8\">\n";
  out += fmt::format("<meta http-equiv=\"Content-Security-Policy\" content=\"{}\">\n", policy());
  out +=
      "<meta name=\"viewport\" content=\"width=device-width, initial-scale=1\">\n<meta name=\"color-scheme\" "
      "content=\"light dark\">\n";
  out += fmt::format("<title>{} · headband</title>\n", escaped(title));
  out += fmt::format("<style>{}</style>\n<style>{}</style>\n</head>\n<body>\n", plot_style.text, page_style.text);
  out += "<a class=\"skip\" href=\"#answers\">To the answers</a>\n";
  out += head_of_page(study);
  out += "<section class=\"tools\" aria-label=\"Tools of this page\">\n<nav aria-label=\"On this page\"><ul>\n";
  for (const Section& section : sections)
    out += fmt::format("<li><a href=\"#{}\">{}</a></li>\n", section.id, section.title);
  out += "</ul></nav>\n" + unit_switch(family) + "</section>\n<main id=\"answers\">\n";
  for (const Section& section : sections)
    out += fmt::format(
        "<section class=\"part\" id=\"{0}\" aria-labelledby=\"head-{0}\">\n<h2 id=\"head-{0}\">{1}</h2>\n<div "
        "class=\"body\">\n{2}</div>\n</section>\n",
        section.id,
        section.title,
        section.html);
  out += "</main>\n";
  out +=
      fmt::format("<script>{}</script>\n<script>{}</script>\n</body>\n</html>\n", plot_script.text, page_script.text);
  return out;
}

std::map<std::string, std::string> pictures(const answers::Study& study, const std::string& units) {
  const Family family = family_for(study, units);
  std::map<std::string, std::string> files;
  const auto add = [&](const Plot& plot) {
    if (!plot.abscissa.empty()) files[slug(plot.id) + ".svg"] = svg(plot, family);
  };
  for (const Plot& plot : profiles(study)) add(plot);
  for (const Plot& plot : histories(study)) add(plot);
  for (const Plot& plot : device_series(study)) add(plot);
  if (!study.bands) return files;
  for (std::size_t i = 0; i < study.bands->answers.size(); ++i) {
    add(density(study, i));
    for (const Plot& plot : scatters(study, i)) add(plot);
    const auto& answer = study.bands->answers[i];
    const std::vector<Bar> budget = budget_bars(answer, family);
    if (!budget.empty())
      files["budget-" + slug(answer.name) + ".svg"] =
          bars_svg("budget " + answer.name, "Where the width of " + answer.name + " comes from", budget);
    std::vector<Bar> ranking;
    for (const auto& s : show::ranked_unknowns(answer))
      ranking.push_back({s.input, std::max(s.first, s.total), s.first, figures(s.total, 2)});
    if (!ranking.empty())
      files["sensitivity-" + slug(answer.name) + ".svg"] =
          bars_svg("sensitivity " + answer.name, "Which unknowns move " + answer.name, ranking);
  }
  return files;
}

}  // namespace headband::report
