// SPDX-License-Identifier: MIT
#include "core/base/units.hpp"
#include "core/base/version.hpp"
#include "core/liquid/water.hpp"
#include "core/show/show.hpp"
#include "montecarlo/program/arguments.hpp"
#include "montecarlo/program/output.hpp"
#include "montecarlo/program/verbs.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <charconv>
#include <cmath>

namespace headband::program {
namespace {

using base::Dimension;

[[noreturn]] void refuse(std::string_view option, const std::string& text, Dimension dimension, std::string_view why) {
  throw UsageError(fmt::format("{} '{}': {}; write it like \"{}\"", option, text, why, base::example_of(dimension)));
}

/// "15 degC" or "10 bar abs" in SI.
double value_of(std::string_view option, const std::string& text, Dimension dimension) {
  double number = 0.0;
  const auto [end, error] = std::from_chars(text.data(), text.data() + text.size(), number);
  if (error != std::errc() || !std::isfinite(number)) refuse(option, text, dimension, "no number stands there");
  std::string_view rest(end, static_cast<std::size_t>(text.data() + text.size() - end));
  while (!rest.empty() && rest.front() == ' ') rest.remove_prefix(1);
  while (!rest.empty() && rest.back() == ' ') rest.remove_suffix(1);
  if (rest.empty()) refuse(option, text, dimension, "a unit is missing");
  const auto found = base::find_unit(rest);
  if (!found || found->unit.kind != base::kind_of(dimension)) {
    refuse(option, text, dimension, fmt::format("'{}' is no unit of it", rest));
  }
  if (dimension == Dimension::pressure && found->reference != base::PressureReference::absolute) {
    throw UsageError(fmt::format("{} '{}': the pressure of a liquid is absolute; write it like \"10 bar abs\"", option, text));
  }
  return base::to_si(found->unit, number);
}

void check_range(std::string_view option, const std::string& text, double value, double low, double high, Dimension dimension,
                 const std::string& name) {
  if (value >= low && value <= high) return;
  throw UsageError(fmt::format("{} '{}': {} is known from {} to {}", option, text, name,
                               base::shown(low, dimension, base::UnitFamily::si, false),
                               base::shown(high, dimension, base::UnitFamily::si, false)));
}

struct Row {
  const char* what;
  double value;
  Dimension dimension;
};

std::string table(const answers::Study& study, double pressure) {
  const auto& liquid = *study.liquid;
  using base::UnitFamily;
  std::string text = fmt::format("{} at {} ({}), {}\n\n", liquid.name, base::shown(liquid.temperature, Dimension::temperature, UnitFamily::si),
                                 base::shown(liquid.temperature, Dimension::temperature, UnitFamily::us),
                                 base::shown(pressure, Dimension::pressure, UnitFamily::si, false));
  const Row rows[] = {{"density", liquid.density, Dimension::density},
                      {"kinematic viscosity", liquid.kinematic_viscosity, Dimension::kinematic_viscosity},
                      {"dynamic viscosity", liquid.dynamic_viscosity, Dimension::dynamic_viscosity},
                      {"bulk modulus, isentropic", liquid.bulk_modulus_isentropic, Dimension::modulus},
                      {"bulk modulus, isothermal", liquid.bulk_modulus_isothermal, Dimension::modulus},
                      {"speed of sound", liquid.sound_speed, Dimension::velocity},
                      {"vapour pressure", liquid.vapour_pressure, Dimension::pressure}};
  const bool us_first = study.units_shown == "us";
  for (const auto& row : rows) {
    const std::string si = base::shown(row.value, row.dimension, UnitFamily::si, false, 5);
    const std::string us = base::shown(row.value, row.dimension, UnitFamily::us, false, 5);
    text += fmt::format("  {:<26} {:<20} {}\n", row.what, us_first ? us : si, us_first ? si : us);
  }
  return text + fmt::format("\nSource: {}\n", liquid.source);
}

}  // namespace

ExitCode verb_liquid(const Options& options) {
  const std::string& name = options.words.front();
  const std::vector<std::string> known{"water", "seawater"};
  if (std::ranges::find(known, name) == known.end()) {
    const std::string near = nearest(name, known);
    throw UsageError(fmt::format("no liquid '{}' here; there are: {}{}. Others are given in the case", name,
                                 fmt::join(known, ", "), near.empty() ? "" : fmt::format("; did you mean {}?", near)));
  }
  const std::string temperature_text = options.temperature.empty() ? "20 degC" : options.temperature;
  const double temperature = value_of("--temperature", temperature_text, Dimension::temperature);
  const double pressure = options.pressure.empty() ? liquid::standard_pressure
                                                   : value_of("--pressure", options.pressure, Dimension::pressure);
  const bool sea = name == "seawater";
  check_range("--temperature", temperature_text, temperature, liquid::water_coldest, sea ? 313.15 : liquid::water_hottest,
              Dimension::temperature, name);
  if (sea && !options.pressure.empty()) throw UsageError("--pressure: seawater is known at atmospheric pressure only");
  check_range("--pressure", options.pressure, pressure, liquid::water_lowest_pressure, liquid::water_highest_pressure,
              Dimension::pressure, name);
  const liquid::Properties p = sea ? liquid::sea_water(temperature) : liquid::water(temperature, pressure);

  answers::Study study;
  study.verb = "liquid";
  study.provenance.version = base::version();
  study.units_shown = options.units.empty() ? "si" : options.units;
  study.liquid = answers::LiquidAnswer{.name = name,
                                       .source = std::string(sea ? liquid::sea_water_source : liquid::water_source),
                                       .temperature = temperature,
                                       .density = p.density,
                                       .kinematic_viscosity = p.dynamic_viscosity / p.density,
                                       .dynamic_viscosity = p.dynamic_viscosity,
                                       .bulk_modulus_isentropic = p.bulk_modulus_isentropic,
                                       .bulk_modulus_isothermal = p.bulk_modulus_isothermal,
                                       .sound_speed = p.speed_of_sound,
                                       .vapour_pressure = p.vapour_pressure};
  print(options.json ? show::json(study) : table(study, pressure));
  return ExitCode::done;
}

}  // namespace headband::program
