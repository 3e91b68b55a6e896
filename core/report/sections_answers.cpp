// SPDX-License-Identifier: MIT
#include "core/report/bars.hpp"
#include "core/report/figures.hpp"
#include "core/report/markup.hpp"
#include "core/report/sections.hpp"
#include "core/show/reported.hpp"
#include "core/show/words.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>
#include <tuple>

namespace headband::report {
namespace {

using answers::Study;
using answers::Verdict;

/// Share of the volume passed that may be unaccounted for before the page says so beside the verdict.
constexpr double doubtful_residual = 1e-2;

std::string paragraph(const std::string& html, const char* kind = "") {
  return html.empty() ? "" : fmt::format("<p{}{}{}>{}</p>\n", *kind ? " class=\"" : "", kind, *kind ? "\"" : "", html);
}

std::string word_of_verb(const std::string& verb) {
  if (verb == "flow") return "Steady flow";
  if (verb == "surge") return "Surge, one run";
  if (verb == "band") return "Sampled answers";
  if (verb == "fastest") return "Shortest closing time";
  if (verb == "age") return "Ageing";
  if (verb == "match") return "Match to a field log";
  return verb;
}

/// The decision as HTML, without the verdict that already stands over it.
std::string sentence(const Study& study, const char* units) {
  std::string text = show::decision(study, units);
  const std::string stamp = show::words_of(study.verdict) + ": ";
  if (study.verdict != Verdict::none && text.rfind(stamp, 0) == 0) {
    text.erase(0, stamp.size());
    if (!text.empty() && text[0] >= 'a' && text[0] <= 'z') text[0] = static_cast<char>(text[0] - 'a' + 'A');
  }
  // The first sentence is the answer; the others stand below it, smaller.
  const std::size_t end = text.find(". ");
  if (end == std::string::npos) return escaped(text);
  return escaped(text.substr(0, end + 1)) + "<span class=\"rest\">" + escaped(text.substr(end + 2)) + "</span>";
}

const char* class_of(Verdict verdict) {
  switch (verdict) {
    case Verdict::ok: return "ok";
    case Verdict::not_ok: return "not-ok";
    case Verdict::cannot_tell: return "cannot-tell";
    case Verdict::none: return "none";
  }
  return "none";
}

/// Disc, triangle, diamond: the shape tells the verdict without its colour.
const char* shape_of(Verdict verdict) {
  switch (verdict) {
    case Verdict::ok: return "<circle cx=\"10\" cy=\"10\" r=\"7.5\"/>";
    case Verdict::not_ok: return "<path d=\"M10 1.5L19 18H1Z\"/>";
    case Verdict::cannot_tell: return "<path d=\"M10 1L19 10L10 19L1 10Z\"/>";
    case Verdict::none: return "";
  }
  return "";
}

std::string place_of(const answers::Extreme& extreme) {
  if (extreme.pipe.empty()) return "–";
  return escaped(extreme.pipe) + " at " + both(extreme.chainage, Shown::chainage);
}

/// What has to be said of a pressure at this time in a run with vapour cavities.
std::string cavity_remark(const std::vector<answers::CavityAnswer>& cavities, double time) {
  if (cavities.empty()) return {};
  double opens = cavities.front().opens;
  double closes = -1.0;
  bool still_open = false;
  for (const auto& cavity : cavities) {
    opens = std::min(opens, cavity.opens);
    if (std::isnan(cavity.closes))
      still_open = true;
    else
      closes = std::max(closes, cavity.closes);
  }
  if (time < opens) return fmt::format("before vapour formed (from {} s)", figures(opens, 3));
  return fmt::format("<strong>order of size only</strong>: vapour formed from {} s {}", figures(opens, 3),
                     still_open ? std::string("on") : fmt::format("to {} s", figures(closes, 3)));
}

std::string extremes(const Study& study) {
  const auto cavities = show::reported_cavities(study);
  Table table{"Highest and lowest pressure of the run",
              {{"Extreme"}, {"pressure ± grid bound", true}, {"head", true}, {"where"}, {"when", true}, {"remark"}},
              {}};
  for (const auto& [name, extreme] : {std::pair{"Highest", &study.highest}, std::pair{"Lowest", &study.lowest}}) {
    if (!*extreme) continue;
    const auto& e = **extreme;
    std::string remark = cavity_remark(cavities, e.time);
    if (!e.grid_converging) remark += (remark.empty() ? "" : "; ") + std::string("<strong>grids not converging</strong>");
    if (std::isnan(e.grid_bound)) remark += (remark.empty() ? "" : "; ") + std::string("no grid bound");
    table.rows.push_back({name, both_with_bound(e.pressure, e.grid_bound, Shown::pressure, Shown::pressure_difference),
                          both(e.head, Shown::head), place_of(e), both(e.time, Shown::time), remark.empty() ? "–" : remark});
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
    table.rows.push_back({escaped(place.name), both(place.elevation, Shown::elevation), both(place.pressure, Shown::pressure),
                          both(place.max_pressure, Shown::pressure), both(place.time_of_max, Shown::time, 3),
                          both(place.min_pressure, Shown::pressure), both(place.time_of_min, Shown::time, 3)});
  }
  return folded(table, 24);
}

std::string probability_cell(const answers::LimitAnswer& limit) {
  const auto range = [](const std::array<double, 2>& r) { return percent(r[0]) + " … " + percent(r[1]); };
  if (limit.probability_range) {
    std::string out = range(*limit.probability_range);
    if (limit.probability_lower_range && limit.probability_upper_range)
      out += fmt::format("<br><small>at least {}, at most {}</small>", percent((*limit.probability_lower_range)[0]),
                         percent((*limit.probability_upper_range)[1]));
    return out;
  }
  if (std::isnan(limit.probability)) return "–";
  return fmt::format("{}<br><small>at least {}, at most {}</small>", percent(limit.probability), percent(limit.probability_lower),
                     percent(limit.probability_upper));
}

/// The margin with the decimals of the value it belongs to.
std::string margin_cell(const answers::LimitAnswer& limit, Shown shown, Shown difference) {
  const auto one = [&](Family family) {
    const double scale = measure(difference, family, limit.value).scale;
    const double value = measure(shown, family, limit.value)(limit.value);
    const std::string like = figures(std::isfinite(value) ? value : 1.0, 4);
    const std::size_t point = like.find('.');
    const int places = point == std::string::npos || like.find("×") != std::string::npos ? 0 : static_cast<int>(like.size() - point - 1);
    if (std::isnan(limit.margin)) return std::string("–");
    return decimals(limit.margin * scale, places) + behind_number(measure(difference, family, limit.value).unit);
  };
  return both(one(Family::si), one(Family::us));
}

/// Two ends of a band with the unit once.
std::string band_cell(double low, double high, Shown shown) {
  const auto one = [&](Family family) {
    const Measure in = measure(shown, family, std::max(std::abs(low), std::abs(high)));
    return figures(in(low)) + " … " + figures(in(high)) + behind_number(in.unit);
  };
  if (std::isnan(low) || std::isnan(high)) return "–";
  return both(one(Family::si), one(Family::us));
}

const answers::BandAnswer* answer_of(const Study& study, const answers::LimitAnswer& limit) {
  if (!study.bands) return nullptr;
  for (const auto& answer : study.bands->answers)
    if (limit_of(study, answer) == &limit) return &answer;
  return nullptr;
}

std::string limits(const Study& study) {
  Table table{"Limits: by how much they are kept, and how surely",
              {{"Limit"}, {"bound", true}, {"one run", true}, {"margin", true}, {"chance that it is not kept", true}, {"picture"}, {"verdict"}},
              {}};
  bool chances = false;
  for (std::size_t i = 0; i < study.limits.size(); ++i) {
    const auto& limit = study.limits[i];
    const Shown shown = shown_of_unit(limit.unit, limit.kind);
    const Shown difference = shown == Shown::pressure ? Shown::pressure_difference : shown;
    std::string kind = limit.kind;
    std::replace(kind.begin(), kind.end(), '_', ' ');
    std::string about = escaped(limit.where.empty() ? kind : kind + ", " + limit.where);
    const bool pressure = shown == Shown::pressure;
    const double bound = pressure && study.highest && limit.kind != "lowest_pressure" ? study.highest->grid_bound
                         : pressure && study.lowest                                     ? study.lowest->grid_bound
                                                                                        : answers::missing;
    std::string verdict = verdict_mark(limit.verdict);
    if (!limit.reason.empty()) verdict += "<br><small>" + escaped(limit.reason) + "</small>";
    if (!limit.worst_corner.empty()) verdict += "<br><small>worst corner: " + escaped(limit.worst_corner) + "</small>";
    std::string chance = probability_cell(limit);
    if (!std::isnan(limit.at_most)) chance += "<br><small>allowed " + percent(limit.at_most) + "</small>";
    chances = chances || limit.probability_range || !std::isnan(limit.probability);
    table.rows.push_back({escaped(limit.name) + "<br><small>" + about + "</small>",
                          (fails_over(limit) ? "not over " : "not under ") + both(limit.limit, shown), both(limit.value, shown),
                          margin_cell(limit, shown, difference), chance,
                          strip(limit, answer_of(study, limit), study.bands ? study.bands->coverage : 0.95, bound, std::to_string(i)),
                          verdict});
  }
  std::string out = html(table);
  if (out.empty()) return out;
  out += paragraph("Picture: dot = one run, thick line = " +
                       (study.bands ? percent(study.bands->coverage) + " band of the draws" : std::string("grid bound")) +
                       ", upright line = limit, hatched = the side that is not allowed. Limits were typed by the user.",
                   "key");
  if (chances && study.bands)
    out += paragraph(
        fmt::format("Chances come from {} draws ({} failed, counted against the limit); each bound holds with {} confidence, "
                    "grid error included. Not in them: moving structure, human error, a wrong drawing, a wrong valve.",
                    study.bands->draws, study.bands->failed, percent(study.bands->confidence)),
        "key");
  return out;
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
  Table table{fmt::format("Which unknowns move {}: shares of its variance", answer.name),
              {{"Unknown"}, {"alone", true}, {"with others", true}, {"alone (dark), with others (light)"}},
              {}};
  std::vector<answers::SensitivityAnswer> ranked = answer.sensitivity;
  std::sort(ranked.begin(), ranked.end(), [](const auto& a, const auto& b) {
    return std::tie(b.total, a.input) < std::tie(a.total, b.input);
  });
  for (const auto& s : ranked)
    table.rows.push_back({escaped(s.input), figures(s.first, 2), figures(s.total, 2),
                          bar_cell(std::max(s.first, s.total), s.first, 1.0)});
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
      table.rows.push_back({escaped(answer.name), percent(q.probability), both(q.value, shown), both(q.lower, shown), both(q.upper, shown)});
  }
  return folded(table, 0);
}

std::string bands(const Study& study) {
  const auto& b = *study.bands;
  Table table{"Sampled answers",
              {{"Answer"}, {"one run", true}, {"median", true}, {percent(b.coverage) + " band", true}, {"standard deviation", true}, {"failed draws", true}},
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
    table.rows.push_back({escaped(answer.name), both(answer.central, shown), middle, band_cell(low, high, shown),
                          both(answer.standard_deviation, difference, 3), fmt::format("{} of {}", answer.failed, answer.draws)});
  }
  std::string out = html(table);
  out += paragraph(fmt::format("{} draws asked, {} made ({}, seed {}); {} failed, {} with a vapour cavity. A band says how often, "
                               "confidence says how sure we are of the band.",
                               b.draws_asked, b.draws, escaped(b.design), b.seed, b.failed, b.with_cavity),
                   "key");
  out += quantile_table(study);
  for (std::size_t i = 0; i < b.answers.size(); ++i) {
    const Plot plot = density(study, i);
    if (!plot.abscissa.empty()) out += figure(plot);
    out += "<div class=\"pair\">\n" + budget(b.answers[i]) + sensitivity(b.answers[i]) + "</div>\n";
  }
  return out;
}

std::string figures_of(const std::vector<Plot>& plots) {
  std::string out;
  for (const Plot& plot : plots) out += figure(plot);
  return out;
}

}  // namespace

std::string verdict_mark(Verdict verdict) {
  if (verdict == Verdict::none) return "not judged";
  return fmt::format("<span class=\"mark {}\"><svg viewBox=\"0 0 20 20\" aria-hidden=\"true\">{}</svg>{}</span>", class_of(verdict),
                     shape_of(verdict), show::words_of(verdict));
}

std::string head_of_page(const Study& study) {
  const auto& p = study.provenance;
  std::string out = fmt::format("<header class=\"top\">\n<p class=\"kind\">{} · headband {} · {}</p>\n<h1>{}</h1>\n",
                                escaped(word_of_verb(study.verb)), escaped(p.version), escaped(show::file_name_of(p.case_file)),
                                escaped(study.title.empty() ? show::file_name_of(p.case_file) : study.title));
  if (!study.note.empty()) out += paragraph(escaped(study.note), "note");
  out += fmt::format("<section class=\"decision {}\" aria-label=\"Decision\">\n", class_of(study.verdict));
  if (study.verdict != Verdict::none) out += paragraph(verdict_mark(study.verdict), "stamp");
  out += paragraph(both(sentence(study, "si"), sentence(study, "us")), "sentence");
  if (study.audit && std::abs(study.audit->volume_residual_relative) > doubtful_residual)
    out += paragraph("<strong>Over 1\u00a0% of the volume passed is not accounted for: do not use these numbers.</strong>");
  const auto counted = [](std::size_t n, const char* one, const char* more) { return fmt::format("{} {}{}", n, one, n == 1 ? "" : more); };
  std::vector<std::string> open;
  if (!study.guesses.empty()) open.push_back(fmt::format("<a href=\"#open\">{}</a>", counted(study.guesses.size(), "guess", "es")));
  if (!study.warnings.empty()) open.push_back(fmt::format("<a href=\"#open\">{}</a>", counted(study.warnings.size(), "warning", "s")));
  std::string line;
  for (const auto& one : open) line += (line.empty() ? "" : " · ") + one;
  out += paragraph(line, "open");
  out += "</section>\n";
  out += "<p class=\"aid\">This is a calculation aid. The code in force and the licensed engineer decide. Ratings were typed by the user.</p>\n";
  return out + "</header>\n";
}

std::string figure(const Plot& plot) {
  const std::string id = slug(plot.id);
  std::string out = fmt::format("<figure class=\"figure\" id=\"{}\">\n<figcaption><h3>{}</h3><p>{}</p></figcaption>\n", id,
                                escaped(plot.title), escaped(plot.message));
  out += fmt::format("<div class=\"picture\">\n<div class=\"si\">{}</div>\n<div class=\"us\">{}</div>\n</div>\n", svg(plot, Family::si, "-si"),
                     svg(plot, Family::us, "-us"));
  out += fmt::format("<script type=\"application/json\" class=\"plot-data\">{}</script>\n", data_block(plot));
  Table table{plot.title + ": lowest and highest of each curve",
              {{"Curve"}, {"lowest", true}, {"at", true}, {"highest", true}, {"at", true}},
              {}};
  for (const Curve& curve : plot.curves) {
    if (curve.shape == Shape::step) continue;
    std::size_t low = curve.y.size(), high = curve.y.size();
    for (std::size_t i = 0; i < curve.y.size(); ++i) {
      if (!std::isfinite(curve.y[i])) continue;
      if (low == curve.y.size() || curve.y[i] < curve.y[low]) low = i;
      if (high == curve.y.size() || curve.y[i] > curve.y[high]) high = i;
    }
    if (low == curve.y.size()) continue;
    table.rows.push_back({escaped(curve.name), both(curve.y[low], plot.y.shown), both(plot.abscissa[low], plot.x.shown),
                          both(curve.y[high], plot.y.shown), both(plot.abscissa[high], plot.x.shown)});
  }
  const std::string body = html(table);
  if (!body.empty()) out += fmt::format("<details><summary>Lowest and highest as numbers</summary>\n{}</details>\n", body);
  return out + "</figure>\n";
}

std::vector<Section> answer_sections(const Study& study) {
  std::vector<Section> sections;
  const auto add = [&](const char* id, const char* title, std::string body) {
    if (!body.empty()) sections.push_back({id, title, std::move(body)});
  };
  add("extremes", "Extremes", extremes(study) + place_extremes(study));
  if (study.limits_shown || !study.limits.empty()) add("limits", "Limits", limits(study));
  constexpr std::size_t most = 24;
  std::string along = figures_of(profiles(study, most));
  if (study.pipes.size() > most)
    along += paragraph(fmt::format("{} of {} pipes are drawn: those with the extremes and the first of the case. The result file holds all.",
                                   most, study.pipes.size()),
                       "key");
  add("profile", "Along the line", along);
  add("history", "In time", figures_of(histories(study)));
  add("series", "Devices in time", figures_of(device_series(study)));
  if (study.bands) add("bands", "How sure", bands(study));
  return sections;
}

}  // namespace headband::report
