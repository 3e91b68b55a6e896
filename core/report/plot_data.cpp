// SPDX-License-Identifier: MIT
#include "core/report/plot.hpp"

#include <nlohmann/json.hpp>

#include <algorithm>
#include <cmath>
#include <set>

namespace headband::report {
namespace {

using nlohmann::ordered_json;

/// Stretches whose peaks are kept of long curves: about two a pixel of a wide screen for one curve, one for several.
int stretches_kept(std::size_t curves) {
  const std::size_t share = rows_carried_whole / (4 * std::max<std::size_t>(1, curves));
  return static_cast<int>(std::max<std::size_t>(800, share));
}

ordered_json number(double value) { return std::isfinite(value) ? ordered_json(value) : ordered_json(nullptr); }

ordered_json numbers(const std::vector<double>& values, const std::vector<std::size_t>& rows) {
  ordered_json list = ordered_json::array();
  for (const std::size_t row : rows) list.push_back(row < values.size() ? number(values[row]) : ordered_json(nullptr));
  return list;
}

std::vector<std::size_t> rows_of(const Plot& plot) {
  std::vector<std::size_t> rows;
  if (plot.abscissa.size() <= rows_carried_whole) {
    for (std::size_t i = 0; i < plot.abscissa.size(); ++i) rows.push_back(i);
    return rows;
  }
  std::set<std::size_t> kept;
  for (const Curve& curve : plot.curves)
    for (const std::size_t row :
         thinned(plot.abscissa, curve.y, plot.x.low, plot.x.high, stretches_kept(plot.curves.size())))
      kept.insert(row);
  return {kept.begin(), kept.end()};
}

ordered_json axis_json(const PlotAxis& axis) {
  ordered_json units;
  for (const auto& [name, family] : {std::pair{"si", Family::si}, std::pair{"us", Family::us}}) {
    const Measure in = measure(axis.shown, family, largest(axis));
    units[name] = {{"unit", in.unit}, {"scale", in.scale}, {"offset", in.offset}};
  }
  return {{"label", axis.label}, {"low", number(axis.low)}, {"high", number(axis.high)}, {"units", units}};
}

const char* name_of(Ink ink) {
  switch (ink) {
    case Ink::black:
      return "black";
    case Ink::blue:
      return "blue";
    case Ink::vermilion:
      return "vermilion";
    case Ink::green:
      return "green";
    case Ink::purple:
      return "purple";
    case Ink::earth:
      return "earth";
  }
  return "black";
}

ordered_json dash_json(Dash dash) {
  switch (dash) {
    case Dash::solid:
      return ordered_json::array();
    case Dash::dashed:
      return {7, 4};
    case Dash::dotted:
      return {1.5, 3.5};
    case Dash::dash_dot:
      return {9, 3, 1.5, 3};
    case Dash::long_dashed:
      return {14, 5};
  }
  return ordered_json::array();
}

const char* name_of(Shape shape) {
  switch (shape) {
    case Shape::line:
      return "line";
    case Shape::step:
      return "step";
    case Shape::ground:
      return "ground";
    case Shape::dots:
      return "dots";
  }
  return "line";
}

}  // namespace

std::string data_block(const Plot& plot) {
  const std::vector<std::size_t> rows = rows_of(plot);
  ordered_json out;
  out["id"] = plot.id;
  out["title"] = plot.title;
  out["rows"] = plot.abscissa.size();
  out["x"] = axis_json(plot.x);
  out["y"] = axis_json(plot.y);
  out["abscissa"] = numbers(plot.abscissa, rows);
  out["curves"] = ordered_json::array();
  for (const Curve& curve : plot.curves)
    out["curves"].push_back({{"name", curve.name},
                             {"ink", name_of(curve.ink)},
                             {"dash", dash_json(curve.dash)},
                             {"shape", name_of(curve.shape)},
                             {"width", curve.width},
                             {"y", numbers(curve.y, rows)}});
  out["fills"] = ordered_json::array();
  for (const Fill& fill : plot.fills)
    out["fills"].push_back(
        {{"name", fill.name}, {"lower", fill.lower}, {"upper", fill.upper}, {"ink", name_of(fill.ink)}});
  out["levels"] = ordered_json::array();
  for (const Level& level : plot.levels)
    out["levels"].push_back({{"name", level.name},
                             {"value", number(level.value)},
                             {"upright", level.upright},
                             {"ink", name_of(level.ink)},
                             {"dash", dash_json(level.dash)}});
  out["stretches"] = ordered_json::array();
  for (const Stretch& stretch : plot.stretches)
    out["stretches"].push_back({{"name", stretch.name}, {"from", number(stretch.from)}, {"to", number(stretch.to)}});
  out["points"] = ordered_json::array();
  for (const Point& point : plot.points)
    out["points"].push_back(
        {{"name", point.name}, {"x", number(point.x)}, {"y", number(point.y)}, {"ink", name_of(point.ink)}});

  std::string text = out.dump(-1, ' ', true, ordered_json::error_handler_t::replace);
  std::string safe;
  safe.reserve(text.size());
  for (const char c : text) {
    if (c == '<')
      safe += "\\u003c";
    else
      safe += c;
  }
  return safe;
}

}  // namespace headband::report
