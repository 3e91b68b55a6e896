// SPDX-License-Identifier: MIT
#include "core/base/units.hpp"
#include "core/casefile/parts.hpp"
#include "core/casefile/tables.hpp"

#include <fmt/format.h>

#include <cmath>

namespace headband::casefile {
namespace {

using namespace network;

Fitting read_fitting(Context& context, const toml::table& table, const std::string& pipe, std::size_t index) {
  Fitting fitting;
  const auto* name = table.get_as<std::string>("name");
  fitting.name = name != nullptr ? name->get() : std::to_string(index + 1);
  fitting.place = place_of(table);
  Section section(context, table, "pipe", pipe, "pipe/" + pipe, "fitting ", "fitting " + fitting.name + " ");
  (void)section.ask("name");
  if (table.get("name") != nullptr && name == nullptr)
    section.report("name", "a text is expected here", "name = \"bend 90\"", "put the name in quotes");
  fitting.count = section.quantity_or("count", "1");
  fitting.k = section.quantity("k");
  fitting.equivalent_length = section.quantity("equivalent_length");
  fitting.at = section.quantity("at");
  if (!section.has("k") && !section.has("equivalent_length"))
    context.report(fitting.place,
                   section.path("k"),
                   fmt::format("the fitting \"{}\" has no loss", fitting.name),
                   "",
                   "k = 0.3 or equivalent_length = \"3 m\"",
                   "add one of them");
  section.finish();
  return fitting;
}

void read_fittings(Section& section, Pipe& pipe) {
  const toml::node* node = section.ask("fittings");
  if (node == nullptr) return;
  const auto* list = node->as_array();
  if (list == nullptr) {
    section.report("fittings",
                   "a list of fittings is expected here",
                   "[{ name = \"bend 90\", count = 4, k = 0.3 }]",
                   "put the fittings in square brackets");
    return;
  }
  for (std::size_t i = 0; i < list->size(); ++i) {
    const auto* table = (*list)[i].as_table();
    if (table == nullptr)
      section.context().report(place_of((*list)[i]),
                               section.path("fittings"),
                               "a fitting is a table",
                               written((*list)[i]),
                               "{ name = \"bend 90\", count = 4, k = 0.3 }",
                               "put its words in curly brackets");
    else
      pipe.fittings.push_back(read_fitting(section.context(), *table, pipe.name, i));
  }
}

void read_creep(Section& section, Pipe& pipe) {
  const toml::node* node = section.ask("creep");
  if (node == nullptr) return;
  const auto* list = node->as_array();
  if (list == nullptr || list->empty() || !list->is_homogeneous(toml::node_type::table)) {
    section.report("creep",
                   "a list of creep elements is expected here",
                   "[{ compliance = \"1.2e-10 1/Pa\", time = \"0.05 s\" }]",
                   "put each element in curly brackets");
    return;
  }
  for (std::size_t i = 0; i < list->size(); ++i) {
    Section inner(section.context(),
                  *(*list)[i].as_table(),
                  "pipe",
                  pipe.name,
                  section.path(),
                  "creep ",
                  fmt::format("creep {} ", i + 1));
    CreepElement element{inner.quantity("compliance"), inner.quantity("time")};
    if (!inner.has("compliance") || !inner.has("time"))
      section.context().report(inner.place(),
                               inner.path("compliance"),
                               "a creep element needs compliance and time",
                               "",
                               "{ compliance = \"1.2e-10 1/Pa\", time = \"0.05 s\" }",
                               "add the missing one");
    pipe.creep.push_back(std::move(element));
    inner.finish();
  }
}

void read_lining(Section& section, Pipe& pipe) {
  const toml::node* node = section.ask("lining");
  if (node == nullptr) return;
  const auto* table = node->as_table();
  if (table == nullptr) {
    section.report("lining",
                   "a lining is a table",
                   "{ thickness = \"6 mm\", modulus = \"25 GPa\" }",
                   "put its words in curly brackets");
    return;
  }
  Section inner(section.context(), *table, "pipe", pipe.name, section.path(), "lining ", "lining ");
  pipe.lining_thickness = inner.quantity("thickness");
  pipe.lining_modulus = inner.quantity("modulus");
  if (!inner.has("thickness"))
    section.context().report(inner.place(),
                             inner.path("thickness"),
                             "the lining has no thickness",
                             "",
                             "thickness = \"6 mm\"",
                             "add it; a lining narrows the bore");
  inner.finish();
}

void read_profile(Section& section, Pipe& pipe) {
  Table table = read_table(section, "profile", "profile chainage", "profile elevation");
  if (!table.given()) return;
  auto& rows = table.rows;
  const auto complain =
      [&](std::size_t row, const std::string& what, const std::string& bound, const std::string& hint) {
        section.context().report(
            rows[row].first.place, rows[row].first.path, what, rows[row].first.written, bound, hint);
      };
  if (rows.size() < 2) return complain(0, "the profile has one point", "at least the two ends", "add the other end");
  if (rows.front().first.value != 0.0)
    return complain(0,
                    "the profile does not begin at chainage 0",
                    "\"0 m\" at the pipe's `from` end",
                    "count the chainage from the beginning of this pipe");
  for (std::size_t i = 1; i < rows.size(); ++i)
    if (!(rows[i].first.value > rows[i - 1].first.value))
      return complain(
          i, "the chainage does not rise from point to point", "above " + rows[i - 1].first.written, "sort the points");
  const double end = rows.back().first.value;
  if (!pipe.length.given() && pipe.length.same_as.empty()) {
    pipe.length = rows.back().first;
    pipe.length.written = pipe.length.written + " (end of the profile)";
    pipe.length.name = pipe.name + " length";
    pipe.length.path = section.path("length");
  } else if (pipe.length.given() && std::abs(pipe.length.value - end) > 1e-6 * end) {
    return complain(rows.size() - 1,
                    "the profile does not end at the pipe's length",
                    "\"" + pipe.length.written + "\"",
                    "correct the length or the last point");
  }
  pipe.profile = rows;
  pipe.profile_table = std::move(table);
  pipe.profile_table.rows.clear();
}

void warn_of_outside_as_bore(Context& context, const Pipe& pipe) {
  // Outside diameters of steel pipe by ASME B36.10 and EN 10220 [mm]; from memory, used for a remark only.
  static constexpr double outside_mm[] = {168.3, 219.1, 273.0,  273.1,  323.8,  323.9, 355.6, 406.4,
                                          457.0, 508.0, 559.0,  610.0,  660.0,  711.0, 762.0, 813.0,
                                          864.0, 914.0, 1016.0, 1067.0, 1118.0, 1219.0};
  if (!pipe.bore.given() || !pipe.wall.given() || pipe.outside.given() || pipe.material != "steel") return;
  for (const double mm : outside_mm)
    if (std::abs(pipe.bore.value * 1000.0 - mm) < 0.06)
      context.warnings.push_back(
          fmt::format("pipe {}: the bore {} is also a standard outside diameter of steel pipe; if it is the outside, "
                      "write outside = \"{} mm\"",
                      pipe.name,
                      pipe.bore.written,
                      base::significant(mm, 5)));
}

Pipe read_pipe(Context& context, const toml::table& table, std::size_t index) {
  Pipe pipe;
  pipe.name = element_name(context, table, "pipe", index);
  Section section(context, table, "pipe", pipe.name, "pipe/" + pipe.name);
  pipe.place = section.place("name");
  (void)section.ask("name");
  pipe.from = section.needed_text("from", "name the place the pipe begins at");
  pipe.to = section.needed_text("to", "name the place the pipe ends at");
  pipe.length = section.quantity("length");
  read_profile(section, pipe);
  pipe.outside = section.quantity("outside");
  pipe.wall = section.quantity("wall");
  read_lining(section, pipe);
  pipe.bore = section.quantity("bore");
  pipe.material = section.text("material");
  pipe.modulus = section.quantity("modulus");
  pipe.poisson = section.quantity("poisson");
  pipe.joint_given = section.has("joint");
  pipe.joint = section.word<Joint>("joint",
                                   {{"anchored", Joint::anchored},
                                    {"upstream anchored", Joint::upstream_anchored},
                                    {"expansion joints", Joint::expansion_joints}},
                                   Joint::anchored);
  pipe.restraint_factor = section.quantity("restraint_factor");
  pipe.wall_formula = section.word<WallFormula>(
      "wall_formula", {{"thick", WallFormula::thick}, {"thin", WallFormula::thin}}, WallFormula::thick);
  pipe.wave_speed_change = section.quantity("wave_speed_change");
  pipe.wave_speed = section.quantity("wave_speed");
  pipe.wave_speed_scatter = section.quantity_or("wave_speed_scatter", "none");
  pipe.roughness = section.quantity("roughness");
  pipe.hazen_williams = section.quantity("hazen_williams");
  pipe.manning = section.quantity("manning");
  pipe.friction_factor = section.quantity("friction_factor");
  read_fittings(section, pipe);
  pipe.rating = section.quantity("rating");
  read_creep(section, pipe);
  (void)section.ask("friction_scatter");  // read with [friction]: it belongs to the scatter of all pipes
  section.finish();
  warn_of_outside_as_bore(context, pipe);
  return pipe;
}
}  // namespace

void read_pipes(Root& root, Case& c) {
  std::size_t index = 0;
  for (const toml::table* table : root.list("pipe")) c.pipes.push_back(read_pipe(root.context(), *table, index++));
}

}  // namespace headband::casefile
