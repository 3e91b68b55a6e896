// SPDX-License-Identifier: MIT
#include "core/casefile/unit_hints.hpp"

#include "core/network/nearest_word.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <array>
#include <cctype>
#include <vector>

namespace headband::casefile {
namespace {

using base::Dimension;
using base::UnitKind;

std::string lower(std::string_view text) {
  std::string result(text);
  std::transform(
      result.begin(), result.end(), result.begin(), [](unsigned char c) { return static_cast<char>(std::tolower(c)); });
  return result;
}

struct Question {
  std::string_view name, question;
};

// Names that two people read differently; compared without regard to capitals.
constexpr std::array questions{
    Question{"gal", "is it the US gallon (3.785 L) or the imperial one (4.546 L)? Write \"US gal\" or \"imp gal\""},
    Question{"gallon", "is it the US gallon (3.785 L) or the imperial one (4.546 L)? Write \"US gal\" or \"imp gal\""},
    Question{"gallons", "is it the US gallon (3.785 L) or the imperial one (4.546 L)? Write \"US gal\" or \"imp gal\""},
    Question{"gal/min", "is it the US gallon or the imperial one? Write \"gpm\" (US) or \"imp gpm\""},
    Question{"gal/h", "is it the US gallon or the imperial one? Write the flow in \"gpm\" (US) or \"imp gpm\""},
    Question{"igpm", "write \"imp gpm\" for imperial gallons per minute"},
    Question{"c", "write \"degC\" for degrees Celsius"},
    Question{"f", "write \"degF\" for degrees Fahrenheit"},
    Question{"celsius", "write \"degC\""},
    Question{"fahrenheit", "write \"degF\""},
    Question{"ton", "write the mass in kg or lb"},
    Question{"hp", "power is not asked for here"},
    Question{"r/min", "write \"rpm\""},
    Question{"u/min", "write \"rpm\""},
    Question{"\"", "write \"in\" for inches"},
    Question{"''", "write \"in\" for inches"},
    Question{"'", "write \"ft\" for feet, \"min\" for minutes"},
    Question{"mins", "write \"min\" for minutes"},
    Question{"hrs", "write \"h\" for hours"},
    Question{"seconds", "write \"s\" for seconds"},
    Question{"secs", "write \"s\" for seconds"},
    Question{"metres", "write \"m\""},
    Question{"meters", "write \"m\""},
    Question{"feet", "write \"ft\""},
    Question{"inches", "write \"in\""},
    Question{"lb", "a mass alone is not asked for here"},
    Question{"psf", "write the pressure in \"psi\""},
    Question{"m h2o", "write \"mH2O\""},
    Question{"mwc", "write \"mH2O\" for metres of water"},
    Question{"mwg", "write \"mH2O g\" for metres of water above the atmosphere"},
    Question{"ssu", "Saybolt seconds are not a unit: convert to \"cSt\" by the maker's table"},
    Question{"api", "convert the gravity to a density in \"kg/m3\""},
    Question{"sg", "a specific gravity needs its water: write the density in \"kg/m3\""},
};

}  // namespace

UnitHint hint_for_unit(std::string_view name, Dimension dimension) {
  const std::string small = lower(name);
  for (const Question& q : questions)
    if (q.name == small) return {fmt::format("the unit '{}' is not clear", name), std::string(q.question)};
  for (const base::Unit& unit : base::unit_table())
    if (lower(unit.name) == small)
      return {fmt::format("the unit '{}' is not known", name), fmt::format("capitals matter: write \"{}\"", unit.name)};
  std::vector<std::string> names;
  const auto kind = base::kind_of(dimension);
  for (const base::Unit& unit : base::unit_table())
    if (kind && unit.kind == *kind) names.emplace_back(unit.name);
  const std::string nearest = network::nearest_word(std::string(name), names);
  if (!nearest.empty())
    return {fmt::format("the unit '{}' is not known", name), fmt::format("did you mean \"{}\"?", nearest)};
  if (names.empty()) return {fmt::format("'{}' is not understood after the number", name), "write the number alone"};
  std::string list;
  for (std::size_t i = 0; i < std::min<std::size_t>(names.size(), 8); ++i) list += (i == 0 ? "" : ", ") + names[i];
  return {fmt::format("the unit '{}' is not known", name),
          fmt::format("units of {} are {}", base::words_of(*kind), list)};
}

UnitHint hint_for_kind(const base::Unit& unit, const KeyRule& rule) {
  const auto kind = base::kind_of(rule.dimension);
  std::string what =
      fmt::format("'{}' is {}, {} is needed", unit.name, base::words_of(unit.kind), base::words_of(*kind));
  if (*kind == UnitKind::time && unit.name == "m")
    return {std::move(what), "are these minutes? \"m\" is the metre: write \"min\" for minutes"};
  if (*kind == UnitKind::kinematic_viscosity && unit.kind == UnitKind::dynamic_viscosity)
    return {std::move(what),
            "is this dynamic (cP)? Divide by the density to get cSt; a law in temperature is kinematic"};
  if (*kind == UnitKind::length && unit.kind == UnitKind::pressure)
    return {std::move(what), "a head is a length of the case's liquid: pressure / (density x gravity)"};
  if (*kind == UnitKind::pressure && unit.kind == UnitKind::length)
    return {std::move(what), "for metres of water write \"mH2O\"; a head of the case's liquid is another key"};
  if (*kind == UnitKind::growth_rate && unit.kind == UnitKind::length)
    return {std::move(what), "write it per year, \"mm/year\""};
  return {std::move(what),
          fmt::format("write {} such as \"{}\"",
                      base::words_of(*kind),
                      rule.example.empty() ? base::example_of(rule.dimension) : rule.example)};
}

std::optional<UnitHint> hint_for_coefficient(const base::Unit& unit, const KeyRule& rule) {
  const bool metric = unit.name == "m3/h" || unit.name == "m3/s";
  const bool us = unit.name == "gpm" || unit.name == "US gpm" || unit.name == "US gal/min";
  if (rule.form == Form::kv && !metric)
    return UnitHint{fmt::format("a Kv is counted in m3/h at 1 bar, not in {}", unit.name),
                    us ? "is this a Cv (gpm at 1 psi)? Then write cv; Cv = 1.156 Kv" : "convert it to m3/h"};
  if (rule.form == Form::cv && !us)
    return UnitHint{fmt::format("a Cv is counted in gpm at 1 psi, not in {}", unit.name),
                    metric ? "is this a Kv (m3/h at 1 bar)? Then write kv; Cv = 1.156 Kv" : "convert it to US gpm"};
  return std::nullopt;
}

std::string missing_unit_hint(double number, const KeyRule& rule) {
  const std::string n = fmt::format("{}", number);
  switch (rule.dimension) {
    case Dimension::time:
      return fmt::format("are these seconds or minutes? Write \"{0} s\" or \"{0} min\"", n);
    case Dimension::pressure:
      return fmt::format("write the unit and g or abs, as in \"{} bar g\"", n);
    case Dimension::temperature:
      return fmt::format("write \"{0} degC\", \"{0} degF\" or \"{0} K\"", n);
    case Dimension::kv:
      return fmt::format("is this a Kv or a Cv (Cv = 1.156 Kv)? Write kv = \"{0} m3/h\" or cv = \"{0} gpm\"", n);
    case Dimension::kinematic_viscosity:
      return fmt::format("kinematic or dynamic? Write \"{0} cSt\" or \"{0} cP\"", n);
    default:
      break;
  }
  const std::string_view example = rule.example.empty() ? base::example_of(rule.dimension) : rule.example;
  const std::size_t space = example.find(' ');
  if (space == std::string_view::npos) return fmt::format("write a value such as \"{}\"", example);
  return fmt::format("if it is in {1}, write \"{0} {1}\"", n, example.substr(space + 1));
}

}  // namespace headband::casefile
