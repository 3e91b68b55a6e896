// SPDX-License-Identifier: MIT
#include "core/report/bars.hpp"
#include "core/report/markup.hpp"
#include "core/report/sections.hpp"
#include "core/show/reported.hpp"
#include "core/show/words.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>

namespace headband::report {
namespace {

using answers::Study;

std::string list_of(const std::vector<std::string>& items) {
  if (items.empty()) return {};
  std::string out = "<ul>\n";
  for (const auto& item : items) out += "<li>" + escaped(item) + "</li>\n";
  return out + "</ul>\n";
}

std::string events(const Study& study) {
  Table table{"What happened, in order", {{"time", true}, {"what"}, {"event"}, {"in words"}}, {}};
  const auto told = show::told_events(study);
  if (told.size() < study.events.size())
    table.caption += "; of the cavities of a pipe the first that opens and the last that closes";
  for (const auto& event : told) {
    std::string kind = event.kind;
    std::replace(kind.begin(), kind.end(), '_', ' ');
    std::string subject = escaped(event.subject), what = escaped(event.what);
    if (const auto* cavity = show::cavity_of(study, event)) {
      subject = escaped(cavity->pipe) + " at " + both(cavity->chainage, Shown::chainage);
      if (kind == "cavity closes") what = "largest volume " + both(cavity->max_volume, Shown::volume, 3);
    }
    table.rows.push_back({both(event.time, Shown::time), subject, escaped(kind), what});
  }
  return folded(table, 60);
}

std::string cavities(const Study& study) {
  Table table{"Vapour cavities",
              {{"pipe"}, {"chainage", true}, {"opens", true}, {"closes", true}, {"largest volume", true}},
              {}};
  for (const auto& cavity : show::reported_cavities(study))
    table.rows.push_back({escaped(cavity.pipe),
                          both(cavity.chainage, Shown::chainage),
                          both(cavity.opens, Shown::time),
                          std::isnan(cavity.closes) ? "open at the end" : both(cavity.closes, Shown::time),
                          both(cavity.max_volume, Shown::volume, 3)});
  std::string body = html(table);
  if (body.empty()) return body;
  return body + "<p class=\"key\">Pressures after a cavity has closed are of the right order of size only.</p>\n";
}

std::string devices(const Study& study) {
  Table table{"Devices", {{"Device"}, {"kind"}, {"quantity"}, {"value", true}}, {}};
  for (const auto& device : study.devices) {
    std::string kind = device.kind;
    std::replace(kind.begin(), kind.end(), '_', ' ');
    for (const auto& [key, value] : device.numbers) {
      const KeyWords words = words_of_key(key);
      table.rows.push_back({escaped(device.name), escaped(kind), escaped(words.words), both(value, words.shown)});
    }
  }
  return folded(table, 60);
}

std::string checks(const Study& study) {
  std::string out;
  if (study.grid) {
    const auto& grid = *study.grid;
    std::vector<std::pair<std::string, std::string>> terms{
        {"Time step", figures(1e3 * grid.time_step, 4) + "\u00a0ms"},
        {"Worst change of a wave speed",
         fmt::format("{}\u00a0%{}",
                     figures(100.0 * grid.worst_wave_speed_change, 2),
                     grid.worst_pipe.empty() ? "" : " in " + escaped(grid.worst_pipe))},
        {"Grids marched", fmt::format("{}{}", grid.grids, grid.converging ? "" : ", <strong>not converging</strong>")}};
    std::string rigid;
    for (const auto& name : grid.rigid_pipes) rigid += (rigid.empty() ? "" : ", ") + escaped(name);
    if (!rigid.empty()) terms.emplace_back("Marched as rigid columns", rigid);
    for (const auto& [name, extreme] : {std::pair{"highest", &study.highest}, std::pair{"lowest", &study.lowest}})
      if (*extreme)
        terms.emplace_back(fmt::format("Grid bound of the {} pressure", name),
                           std::isnan((*extreme)->grid_bound)
                               ? "none"
                               : "± " + both((*extreme)->grid_bound, Shown::pressure_difference, 2));
    out += "<h3>Grid</h3>\n" + html(terms);
    Table table{"Grid of each pipe", {{"Pipe"}, {"reaches", true}, {"wave speed", true}, {"marched with", true}}, {}};
    for (std::size_t i = 0; i < study.pipes.size() && i < grid.reaches.size() && i < grid.marched_wave_speed.size();
         ++i)
      table.rows.push_back({escaped(study.pipes[i].name),
                            grid.reaches[i] == 0 ? "rigid" : std::to_string(grid.reaches[i]),
                            both(study.pipes[i].wave_speed, Shown::velocity, 5),
                            both(grid.marched_wave_speed[i], Shown::velocity, 5)});
    out += folded(table, 60);
  }
  if (study.audit) {
    const auto& audit = *study.audit;
    out += "<h3>Volume audit</h3>\n";
    out += html(std::vector<std::pair<std::string, std::string>>{
        {"Left over", both(audit.volume_residual, Shown::volume, 3)},
        {"Volume passed", both(audit.volume_passed, Shown::volume, 3)},
        {"Left over, as a share of it",
         std::isnan(audit.volume_residual_relative) ? "nothing passed" : figures(audit.volume_residual_relative, 2)},
        {"Allowed for closing cavities", both(audit.cavity_allowance, Shown::volume, 3)}});
  }
  if (study.transient && !study.transient->status.empty())
    out += html(std::vector<std::pair<std::string, std::string>>{
        {"March", escaped(study.transient->status)},
        {"Last good time", both(study.transient->last_good_time, Shown::time)}});
  return out;
}

std::string liquid(const Study& study) {
  if (!study.liquid) return {};
  const auto& l = *study.liquid;
  std::vector<std::pair<std::string, std::string>> terms{{"Liquid", escaped(l.name)}};
  const auto add = [&](const char* name, double value, Shown shown) {
    if (!std::isnan(value)) terms.emplace_back(name, both(value, shown));
  };
  add("Temperature", l.temperature, Shown::temperature);
  add("Density", l.density, Shown::density);
  add("Kinematic viscosity", l.kinematic_viscosity, Shown::kinematic_viscosity);
  add("Dynamic viscosity", l.dynamic_viscosity, Shown::dynamic_viscosity);
  add("Bulk modulus, isentropic", l.bulk_modulus_isentropic, Shown::modulus);
  add("Bulk modulus, isothermal", l.bulk_modulus_isothermal, Shown::modulus);
  add("Speed of sound", l.sound_speed, Shown::velocity);
  add("Vapour pressure", l.vapour_pressure, Shown::absolute_pressure);
  if (!l.source.empty()) terms.emplace_back("Source", escaped(l.source));
  return html(terms);
}

std::string steady(const Study& study) {
  std::string out;
  if (!study.steady_status.empty())
    out += fmt::format("<p class=\"key\">Steady state: {}, {} iterations, residual {}.</p>\n",
                       escaped(study.steady_status),
                       study.steady_iterations,
                       figures(study.steady_residual, 2));
  Table pipes{"Pipes in the first steady state",
              {{"Pipe"},
               {"length", true},
               {"bore", true},
               {"flow", true},
               {"velocity", true},
               {"Reynolds", true},
               {"friction factor", true},
               {"head loss", true},
               {"pressure drop", true},
               {"wave speed", true},
               {"hand check: a V / g", true}},
              {}};
  for (const auto& p : study.pipes)
    pipes.rows.push_back({escaped(p.name) + "<br><small>" + escaped(p.from) + " → " + escaped(p.to) + "</small>",
                          both(p.length, Shown::chainage),
                          both(p.bore, Shown::diameter),
                          both(p.flow, Shown::flow),
                          both(p.velocity, Shown::velocity, 3),
                          decimals(p.reynolds, 0),
                          figures(p.friction_factor, 4),
                          both(p.head_loss, Shown::head, 3),
                          both(p.pressure_drop, Shown::pressure_difference),
                          both(p.wave_speed, Shown::velocity),
                          both(p.joukowsky_head, Shown::head, 3)});
  out += folded(pipes, 60);
  Table places{
      "Places in the first steady state", {{"Place"}, {"elevation", true}, {"head", true}, {"pressure", true}}, {}};
  for (const auto& p : study.places)
    places.rows.push_back({escaped(p.name),
                           both(p.elevation, Shown::elevation),
                           both(p.head, Shown::head),
                           both(p.pressure, Shown::pressure)});
  return out + folded(places, 60) + liquid(study);
}

/// A value in words, its spread smaller below it.
std::string value_cell(const std::string& shown) {
  const std::size_t comma = shown.find(", ");
  if (comma == std::string::npos) return escaped(shown);
  return escaped(shown.substr(0, comma)) + "<br><small>" + escaped(shown.substr(comma + 2)) + "</small>";
}

std::string inputs(const Study& study) {
  Table table{
      "Inputs as understood", {{"Input"}, {"as written"}, {"SI"}, {"US"}, {"spread"}, {"source"}, {"grade"}}, {}};
  const auto or_dash = [](const std::string& text) { return text.empty() ? std::string("–") : escaped(text); };
  for (const auto& v : study.values) {
    // The words of the value tell its spread already where they can.
    const bool told = v.spread.empty() || v.shown_si.find(v.spread) != std::string::npos;
    table.rows.push_back({escaped(v.name.empty() ? v.path : v.name),
                          escaped(v.written) + (v.guess ? " <span class=\"guess\">guess</span>" : ""),
                          value_cell(v.shown_si),
                          value_cell(v.shown_us),
                          told ? "–" : escaped(v.spread),
                          or_dash(v.source),
                          or_dash(v.grade)});
  }
  return folded(table, 120);
}

std::string open_points(const Study& study) {
  std::string out;
  const std::size_t n = study.guesses.size();
  out += fmt::format("<h3>{} guess{}</h3>\n", n, n == 1 ? "" : "es");
  out += n == 0 ? "<p>Every value was stated.</p>\n" : list_of(study.guesses);
  if (!study.warnings.empty()) out += "<h3>Warnings</h3>\n" + list_of(study.warnings);
  return out;
}

std::string identity(const Study& study) {
  const auto& p = study.provenance;
  std::vector<std::pair<std::string, std::string>> terms{
      {"Case file", escaped(show::file_name_of(p.case_file))},
      {"SHA-256 of the case", "<code>" + escaped(p.case_sha256) + "</code>"},
      {"Program", "headband " + escaped(p.version) + ", commit " + escaped(p.commit)},
      {"Seed", std::to_string(p.seed)}};
  const auto add = [&](const char* name, const std::string& value) {
    if (!value.empty()) terms.emplace_back(name, escaped(value));
  };
  for (const auto& side : p.side_files)
    terms.emplace_back("Side file", escaped(side[0]) + ", SHA-256 <code>" + escaped(side[1]) + "</code>");
  add("Command", p.command);
  add("Build", p.build_kind);
  add("Compiler", p.compiler);
  add("Flags that change numbers", p.flags);
  add("Libraries", p.libraries);
  add("Started", p.started);
  add("Finished", p.finished);
  if (!std::isnan(p.wall_time)) terms.emplace_back("Time taken", figures(p.wall_time, 3) + "\u00a0s");
  terms.emplace_back("Threads, ranks", fmt::format("{}, {}", p.threads, p.ranks));
  std::string out = html(terms);
  out +=
      "<table class=\"signatures\">\n<caption>For signature</caption>\n<thead><tr><th scope=\"col\">Role</th><th "
      "scope=\"col\">Name</th>"
      "<th scope=\"col\">Date</th><th scope=\"col\">Signature</th></tr></thead>\n<tbody>\n";
  for (const char* role : {"Author", "Checker"})
    out += fmt::format("<tr><th scope=\"row\">{}</th><td></td><td></td><td></td></tr>\n", role);
  return out + "</tbody>\n</table>\n";
}

std::string case_text(const Study& study) {
  const auto& p = study.provenance;
  std::string out;
  const auto add = [&](const std::string& name, const std::string& text) {
    if (text.empty()) return;
    // A line break right after <pre> is dropped by the reader of a page; one more keeps the text verbatim.
    out += fmt::format(
        "<details><summary>{}</summary>\n<pre tabindex=\"0\">\n{}</pre>\n</details>\n", escaped(name), escaped(text));
  };
  add(show::file_name_of(p.case_file), p.case_text);
  for (const auto& side : p.side_files) add(side[0], side[2]);
  return out;
}

}  // namespace

std::vector<Section> basis_sections(const Study& study) {
  std::vector<Section> sections;
  const auto add = [&](const char* id, const char* title, std::string body) {
    if (!body.empty()) sections.push_back({id, title, std::move(body)});
  };
  add("events", "Events", events(study));
  add("cavities", "Cavities", cavities(study));
  add("devices", "Devices", devices(study));
  add("checks", "Checks", checks(study));
  add("steady", "Steady flow", steady(study));
  add("inputs", "Inputs", inputs(study));
  add("open", "Open points", open_points(study));
  add("cautions", "Cautions", list_of(show::cautions(study)));
  add("identity", "Identity", identity(study));
  add("case", "Case text", case_text(study));
  return sections;
}

}  // namespace headband::report
