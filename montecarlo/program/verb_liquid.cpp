// SPDX-License-Identifier: MIT
#include "core/base/units.hpp"
#include "core/base/version.hpp"
#include "core/liquid/words.hpp"
#include "core/show/show.hpp"
#include "montecarlo/program/arguments.hpp"
#include "montecarlo/program/output.hpp"
#include "montecarlo/program/verbs.hpp"

#include <fmt/format.h>

#include <charconv>
#include <cmath>
#include <utility>

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
    throw UsageError(
        fmt::format("{} '{}': the pressure of a liquid is absolute; write it like \"10 bar abs\"", option, text));
  }
  return base::to_si(found->unit, number);
}

Dimension dimension_of(liquid::Property property) {
  switch (property) {
    case liquid::Property::density:
      return Dimension::density;
    case liquid::Property::kinematic_viscosity:
      return Dimension::kinematic_viscosity;
    case liquid::Property::dynamic_viscosity:
      return Dimension::dynamic_viscosity;
    case liquid::Property::bulk_modulus_isentropic:
    case liquid::Property::bulk_modulus_isothermal:
      return Dimension::modulus;
    case liquid::Property::sound_speed:
      return Dimension::velocity;
    case liquid::Property::vapour_pressure:
      return Dimension::pressure;
  }
  return Dimension::number;
}

std::string table(const liquid::LiquidSheet& sheet, base::UnitFamily first) {
  using base::UnitFamily;
  const UnitFamily second = first == UnitFamily::si ? UnitFamily::us : UnitFamily::si;
  const auto both = [&](double value, Dimension dimension, int digits) {
    return std::pair{base::shown(value, dimension, first, false, digits),
                     base::shown(value, dimension, second, false, digits)};
  };
  const auto [here, there] = both(sheet.temperature, Dimension::temperature, 4);
  std::string text = fmt::format(
      "{} at {} ({}), {}\n\n", sheet.name, here, there, base::shown(sheet.pressure, Dimension::pressure, first, false));
  for (const auto& row : sheet.rows) {
    const auto [one, other] = both(row.value, dimension_of(row.property), 5);
    text += fmt::format("  {:<25} {:<18} {:<18} {:<10} {}\n", row.words, one, other, row.spread, row.source);
  }
  for (const auto& remark : sheet.remarks) text += fmt::format("\n  {}\n", remark);
  return text;
}

}  // namespace

ExitCode verb_liquid(const Options& options) {
  const std::string& name = options.words.front();
  const double temperature =
      value_of("--temperature", options.temperature.empty() ? "20 degC" : options.temperature, Dimension::temperature);
  const double pressure = options.pressure.empty() ? liquid::standard_pressure
                                                   : value_of("--pressure", options.pressure, Dimension::pressure);
  if (!(temperature > 0.0 && pressure > 0.0))
    throw UsageError("temperature and pressure of a liquid are above absolute zero");
  const auto sheet = liquid::sheet(name, temperature, pressure);
  if (!sheet) {
    std::vector<std::string> known;
    for (const auto word : liquid::known_names()) known.emplace_back(word);
    throw UsageError(fmt::format("no liquid '{}' here (any other is described in its case); there are: {}{}",
                                 name,
                                 fmt::join(known, ", "),
                                 did_you_mean(name, known)));
  }
  const auto& p = sheet->properties;
  answers::Study study;
  study.verb = "liquid";
  study.provenance.version = base::version();
  study.warnings = sheet->remarks;
  study.liquid = answers::LiquidAnswer{.name = sheet->name,
                                       .source = sheet->rows.empty() ? "" : sheet->rows.front().source,
                                       .temperature = temperature,
                                       .density = p.density,
                                       .kinematic_viscosity = p.dynamic_viscosity / p.density,
                                       .dynamic_viscosity = p.dynamic_viscosity,
                                       .bulk_modulus_isentropic = p.bulk_modulus_isentropic,
                                       .bulk_modulus_isothermal = p.bulk_modulus_isothermal,
                                       .sound_speed = p.speed_of_sound,
                                       .vapour_pressure = p.vapour_pressure};
  print(options.json ? show::json(study)
                     : table(*sheet, options.units == "us" ? base::UnitFamily::us : base::UnitFamily::si));
  return ExitCode::done;
}

}  // namespace headband::program
