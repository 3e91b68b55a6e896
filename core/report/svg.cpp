// SPDX-License-Identifier: MIT
//
// The picture of a plot. Colours: Okabe & Ito (2008), values from memory; the style sheet of the page overrides them in
// dark mode, so every element carries a class beside its plain attributes.

#include "core/report/markup.hpp"
#include "core/report/plot.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>
#include <ranges>
#include <tuple>

namespace headband::report {
namespace {

constexpr double width = 720.0;
constexpr double left = 66.0;
constexpr double bottom_margin = 46.0;
constexpr double line_height = 15.0;
constexpr std::size_t longest_label = 30;
/// Edges of bands are thinner than this and carry no label: the line they surround does.
constexpr double labelled_width = 1.0;

bool labelled(const Curve& curve) {
  return (curve.shape == Shape::line || curve.shape == Shape::ground) && !curve.name.empty() &&
         curve.width >= labelled_width;
}

struct InkNames {
  const char* name;
  const char* colour;
};

InkNames ink_names(Ink ink) {
  switch (ink) {
    case Ink::black:
      return {"black", "#22303c"};
    case Ink::blue:
      return {"blue", "#0072b2"};
    case Ink::vermilion:
      return {"vermilion", "#d55e00"};
    case Ink::green:
      return {"green", "#00805c"};
    case Ink::purple:
      return {"purple", "#a2487f"};
    case Ink::earth:
      return {"earth", "#7d6a4f"};
  }
  return {"black", "#22303c"};
}

std::string dash_attribute(Dash dash) {
  switch (dash) {
    case Dash::solid:
      return "";
    case Dash::dashed:
      return " stroke-dasharray=\"7 4\"";
    case Dash::dotted:
      return " stroke-dasharray=\"1.5 3.5\"";
    case Dash::dash_dot:
      return " stroke-dasharray=\"9 3 1.5 3\"";
    case Dash::long_dashed:
      return " stroke-dasharray=\"14 5\"";
  }
  return "";
}

/// A coordinate with at most two decimals and no idle zeros.
std::string at(double value) {
  std::string text = fmt::format("{:.2f}", value);
  text.erase(text.find_last_not_of('0') + 1);
  if (text.back() == '.') text.pop_back();
  return text == "-0" ? "0" : text;
}

/// First characters of a UTF-8 name, an ellipsis where it is cut.
std::string shortened(const std::string& name) {
  std::size_t letters = 0;
  for (std::size_t i = 0; i < name.size(); ++i) {
    if ((static_cast<unsigned char>(name[i]) & 0xC0U) == 0x80U) continue;
    if (++letters > longest_label) return name.substr(0, i) + "…";
  }
  return name;
}

double text_width(const std::string& text) {
  double letters = 0.0;
  for (const char c : text)
    if ((static_cast<unsigned char>(c) & 0xC0U) != 0x80U) letters += 1.0;
  return 6.3 * letters;
}

/// Where the plot stands on the picture.
struct Frame {
  double right, top, bottom;
  double x_low, x_high, y_low, y_high;
  [[nodiscard]] double x(double value) const { return left + (value - x_low) / (x_high - x_low) * (right - left); }
  [[nodiscard]] double y(double value) const {
    const double share = (value - y_low) / (y_high - y_low);
    return bottom - std::clamp(share, -3.0, 4.0) * (bottom - top);
  }
};

struct SideLabel {
  std::string text;
  Ink ink;
  double wanted = 0.0, placed = 0.0;
};

/// Pushes labels apart, keeping their order, and the stack inside the frame.
void part(std::vector<SideLabel>& labels, double top, double bottom) {
  std::sort(labels.begin(), labels.end(), [](const auto& a, const auto& b) {
    return std::tie(a.wanted, a.text) < std::tie(b.wanted, b.text);
  });
  double next = top;
  for (SideLabel& label : labels) {
    label.placed = std::max(label.wanted, next);
    next = label.placed + line_height;
  }
  double limit = bottom;
  for (auto& label : std::views::reverse(labels)) {
    label.placed = std::min(label.placed, limit);
    limit = label.placed - line_height;
  }
}

std::vector<SideLabel> side_labels(const Plot& plot, const Frame& frame) {
  std::vector<SideLabel> labels;
  for (const Curve& curve : plot.curves) {
    if (!labelled(curve)) continue;
    for (std::size_t i = std::min(curve.y.size(), plot.abscissa.size()); i-- > 0;) {
      if (!std::isfinite(curve.y[i]) || plot.abscissa[i] > plot.x.high) continue;
      labels.push_back({shortened(curve.name), curve.ink, frame.y(curve.y[i]), 0.0});
      break;
    }
  }
  for (const Level& level : plot.levels)
    if (!level.upright) labels.push_back({shortened(level.name), level.ink, frame.y(level.value), 0.0});
  for (SideLabel& label : labels) label.wanted = std::clamp(label.wanted, frame.top, frame.bottom);
  part(labels, frame.top + 4.0, frame.bottom);
  return labels;
}

double right_margin(const Plot& plot) {
  double widest = 0.0;
  for (const Curve& curve : plot.curves)
    if (labelled(curve)) widest = std::max(widest, text_width(shortened(curve.name)));
  for (const Level& level : plot.levels)
    if (!level.upright) widest = std::max(widest, text_width(shortened(level.name)));
  return std::clamp(widest + 14.0, 22.0, 200.0);
}

/// Labels of upright levels, in as many rows above the plot as they need.
struct TopLabel {
  const Level* level;
  double x = 0.0;
  int row = 0;
};

std::vector<TopLabel> top_labels(const Plot& plot, double right, int& rows) {
  std::vector<TopLabel> labels;
  for (const Level& level : plot.levels)
    if (level.upright && level.value >= plot.x.low && level.value <= plot.x.high)
      labels.push_back({&level, left + (level.value - plot.x.low) / (plot.x.high - plot.x.low) * (right - left), 0});
  std::sort(labels.begin(), labels.end(), [](const auto& a, const auto& b) {
    return std::tie(a.x, a.level->name) < std::tie(b.x, b.level->name);
  });
  std::vector<double> taken;
  for (TopLabel& label : labels) {
    const double half = 0.5 * text_width(shortened(label.level->name)) + 5.0;
    std::size_t row = 0;
    while (row < taken.size() && taken[row] > label.x - half) ++row;
    if (row == taken.size()) taken.push_back(0.0);
    taken[row] = label.x + half;
    label.row = static_cast<int>(row);
  }
  rows = static_cast<int>(taken.size());
  return labels;
}

std::string axes(const Plot& plot, const Frame& frame, Family family) {
  std::string out = "<g class=\"axes\">\n";
  const Measure x_in = measure(plot.x.shown, family, largest(plot.x));
  const Measure y_in = measure(plot.y.shown, family, largest(plot.y));
  const Ticks y_ticks = ticks(y_in(plot.y.low), y_in(plot.y.high), 6);
  for (const double tick : y_ticks.at) {
    const double y = frame.y((tick - y_in.offset) / y_in.scale);
    out += fmt::format("<path class=\"grid\" d=\"M{} {}H{}\" stroke=\"#dfe3e2\"/>\n", at(left), at(y), at(frame.right));
    out += fmt::format("<text class=\"tick\" x=\"{}\" y=\"{}\" text-anchor=\"end\" fill=\"#4c5a66\">{}</text>\n",
                       at(left - 8.0),
                       at(y + 4.0),
                       decimals(tick, y_ticks.places));
  }
  const Ticks x_ticks = ticks(x_in(plot.x.low), x_in(plot.x.high), static_cast<int>((frame.right - left) / 80.0));
  for (const double tick : x_ticks.at) {
    const double x = frame.x((tick - x_in.offset) / x_in.scale);
    out += fmt::format("<path class=\"tickline\" d=\"M{} {}v5\" stroke=\"#4c5a66\"/>\n", at(x), at(frame.bottom));
    out += fmt::format("<text class=\"tick\" x=\"{}\" y=\"{}\" text-anchor=\"middle\" fill=\"#4c5a66\">{}</text>\n",
                       at(x),
                       at(frame.bottom + 18.0),
                       decimals(tick, x_ticks.places));
  }
  out += fmt::format("<path class=\"axis\" d=\"M{} {}H{}\" stroke=\"#4c5a66\" fill=\"none\"/>\n",
                     at(left),
                     at(frame.bottom),
                     at(frame.right));
  const auto titled = [](const PlotAxis& axis, const Measure& in) {
    return escaped(in.unit.empty() ? axis.label : axis.label + ", " + in.unit);
  };
  out += fmt::format("<text class=\"label\" x=\"{}\" y=\"{}\" text-anchor=\"middle\" fill=\"#22303c\">{}</text>\n",
                     at(0.5 * (left + frame.right)),
                     at(frame.bottom + 38.0),
                     titled(plot.x, x_in));
  const double middle = 0.5 * (frame.top + frame.bottom);
  out += fmt::format(
      "<text class=\"label\" x=\"14\" y=\"{0}\" text-anchor=\"middle\" fill=\"#22303c\" transform=\"rotate(-90 14 "
      "{0})\">{1}</text>\n",
      at(middle),
      titled(plot.y, y_in));
  return out + "</g>\n";
}

/// The way of a curve through its kept rows; `joined` starts with L instead of M.
std::string way(const Plot& plot,
                const Curve& curve,
                const Frame& frame,
                const std::vector<std::size_t>& rows,
                bool joined = false) {
  std::string d;
  for (const std::size_t row : rows) {
    d += d.empty() && !joined ? 'M' : 'L';
    d += at(frame.x(plot.abscissa[row])) + " " + at(frame.y(curve.y[row]));
  }
  return d;
}

std::string step_way(const Plot& plot, const Curve& curve, const Frame& frame) {
  std::string d = fmt::format("M{} {}", at(frame.x(plot.abscissa.front())), at(frame.bottom));
  for (std::size_t i = 0; i + 1 < plot.abscissa.size() && i < curve.y.size(); ++i)
    d += fmt::format(
        "V{}H{}", at(frame.y(std::isfinite(curve.y[i]) ? curve.y[i] : 0.0)), at(frame.x(plot.abscissa[i + 1])));
  return d + fmt::format("V{}", at(frame.bottom));
}

std::string curves(const Plot& plot, const Frame& frame) {
  std::string out;
  const int buckets = static_cast<int>(frame.right - left);
  std::vector<std::vector<std::size_t>> rows;
  for (const Curve& curve : plot.curves)
    rows.push_back(thinned(plot.abscissa, curve.y, plot.x.low, plot.x.high, buckets));

  for (std::size_t i = 0; i < plot.curves.size(); ++i) {
    if (plot.curves[i].shape != Shape::ground || rows[i].empty()) continue;
    out += fmt::format("<path class=\"soil\" d=\"{}L{} {}L{} {}Z\" fill=\"#efe9dc\"/>\n",
                       way(plot, plot.curves[i], frame, rows[i]),
                       at(frame.x(plot.abscissa[rows[i].back()])),
                       at(frame.bottom),
                       at(frame.x(plot.abscissa[rows[i].front()])),
                       at(frame.bottom));
  }
  for (const Fill& fill : plot.fills) {
    if (rows[fill.lower].empty() || rows[fill.upper].empty()) continue;
    const InkNames ink = ink_names(fill.ink);
    std::vector<std::size_t> back(rows[fill.upper].rbegin(), rows[fill.upper].rend());
    out += fmt::format("<path class=\"fill {}\" d=\"{}{}Z\" fill=\"{}\" fill-opacity=\"0.18\"/>\n",
                       ink.name,
                       way(plot, plot.curves[fill.lower], frame, rows[fill.lower]),
                       way(plot, plot.curves[fill.upper], frame, back, true),
                       ink.colour);
  }
  for (std::size_t i = 0; i < plot.curves.size(); ++i) {
    const Curve& curve = plot.curves[i];
    if (rows[i].empty() || curve.width <= 0.0) continue;
    const InkNames ink = ink_names(curve.ink);
    if (curve.shape == Shape::dots) {
      std::string d;
      for (std::size_t row = 0; row < curve.y.size() && row < plot.abscissa.size(); ++row)
        if (std::isfinite(curve.y[row]))
          d += fmt::format("M{} {}h0", at(frame.x(plot.abscissa[row])), at(frame.y(curve.y[row])));
      out += fmt::format(
          "<path class=\"curve {}\" data-name=\"{}\" d=\"{}\" stroke=\"{}\" stroke-width=\"3.2\" "
          "stroke-opacity=\"0.5\" "
          "stroke-linecap=\"round\"/>\n",
          ink.name,
          escaped(curve.name),
          d,
          ink.colour);
      continue;
    }
    if (curve.shape == Shape::step) {
      const std::string d = step_way(plot, curve, frame);
      out += fmt::format(
          "<path class=\"fill {}\" d=\"{}Z\" fill=\"{}\" fill-opacity=\"0.18\"/>\n", ink.name, d, ink.colour);
      out += fmt::format("<path class=\"curve {}\" d=\"{}\" fill=\"none\" stroke=\"{}\" stroke-width=\"{}\"/>\n",
                         ink.name,
                         d,
                         ink.colour,
                         at(curve.width));
      continue;
    }
    out += fmt::format(
        "<path class=\"curve {}\" data-name=\"{}\" d=\"{}\" fill=\"none\" stroke=\"{}\" stroke-width=\"{}\" "
        "stroke-linejoin=\"round\"{}/>\n",
        ink.name,
        escaped(curve.name),
        way(plot, curve, frame, rows[i]),
        ink.colour,
        at(curve.width),
        dash_attribute(curve.dash));
  }
  return out;
}

std::string stretches(const Plot& plot, const Frame& frame, const std::string& id) {
  if (plot.stretches.empty()) return {};
  std::string out = fmt::format(
      "<pattern id=\"hatch-{0}\" width=\"7\" height=\"7\" patternUnits=\"userSpaceOnUse\" "
      "patternTransform=\"rotate(45)\">"
      "<path class=\"hatch\" d=\"M0 0V7\" stroke=\"#d55e00\" stroke-width=\"1.6\" "
      "stroke-opacity=\"0.45\"/></pattern>\n",
      id);
  for (const Stretch& stretch : plot.stretches) {
    const double from = std::clamp(frame.x(stretch.from), left, frame.right);
    const double to = std::clamp(frame.x(stretch.to), left, frame.right);
    if (!(to > from)) continue;
    out += fmt::format("<rect x=\"{}\" y=\"{}\" width=\"{}\" height=\"{}\" fill=\"url(#hatch-{})\"/>\n",
                       at(from),
                       at(frame.top),
                       at(to - from),
                       at(frame.bottom - frame.top),
                       id);
    const std::string name = shortened(stretch.name);
    if (!name.empty() && to - from > text_width(name) + 8.0)
      out += fmt::format(
          "<text class=\"halo\" x=\"{}\" y=\"{}\" text-anchor=\"middle\" fill=\"#22303c\" stroke=\"#ffffff\" "
          "stroke-width=\"4\" paint-order=\"stroke\">{}</text>\n",
          at(0.5 * (from + to)),
          at(frame.top + 16.0),
          escaped(name));
  }
  return out;
}

/// Where a name stands: middle and half its width.
struct Named {
  double x, y, half;
};

/// Height of a name near a point: above it, else below it, else further away, where no other name stands.
double height_near(double y, const Named& name, const Frame& frame, const std::vector<Named>& taken) {
  for (const double away : {-9.0, 20.0, -24.0, 35.0, -39.0, 50.0}) {
    const double here = y + away;
    const auto meets = [&](const Named& t) {
      return std::abs(t.y - here) < 14.0 && std::abs(t.x - name.x) < t.half + name.half + 8.0;
    };
    if (here > frame.top + 10.0 && here < frame.bottom && std::none_of(taken.begin(), taken.end(), meets)) return here;
  }
  return y - 9.0;
}

std::string points(const Plot& plot, const Frame& frame) {
  std::string out;
  std::vector<Named> taken;
  for (const Point& point : plot.points) {
    if (!std::isfinite(point.x) || !std::isfinite(point.y)) continue;
    const double x = frame.x(point.x), y = frame.y(point.y);
    const InkNames ink = ink_names(point.ink);
    const std::string name = shortened(point.name);
    const double half = 0.5 * text_width(name);
    const double text_x = std::clamp(x, left + half + 4.0, std::max(left + half + 4.0, frame.right - half - 4.0));
    const double text_y = height_near(y, {text_x, y, half}, frame, taken);
    taken.push_back({text_x, text_y, half});
    out += fmt::format(
        "<circle class=\"point {}\" cx=\"{}\" cy=\"{}\" r=\"4\" fill=\"#ffffff\" stroke=\"{}\" stroke-width=\"2\"/>\n",
        ink.name,
        at(x),
        at(y),
        ink.colour);
    out += fmt::format(
        "<text class=\"halo\" x=\"{}\" y=\"{}\" text-anchor=\"middle\" fill=\"#22303c\" stroke=\"#ffffff\" "
        "stroke-width=\"4\" paint-order=\"stroke\">{}</text>\n",
        at(text_x),
        at(text_y),
        escaped(name));
  }
  return out;
}

std::string levels(const Plot& plot, const Frame& frame, const std::vector<TopLabel>& tops, int top_rows) {
  std::string out;
  for (const Level& level : plot.levels) {
    const InkNames ink = ink_names(level.ink);
    if (level.upright) continue;
    out += fmt::format(
        "<path class=\"curve {}\" data-name=\"{}\" d=\"M{} {}H{}\" fill=\"none\" stroke=\"{}\" "
        "stroke-width=\"1.4\"{}/>\n",
        ink.name,
        escaped(level.name),
        at(left),
        at(frame.y(level.value)),
        at(frame.right),
        ink.colour,
        dash_attribute(level.dash));
  }
  const auto height_of = [&](const TopLabel& label) {
    return frame.top - 6.0 - line_height * (top_rows - 1 - label.row);
  };
  for (const TopLabel& label : tops) {
    const InkNames ink = ink_names(label.level->ink);
    out += fmt::format(
        "<path class=\"curve {}\" data-name=\"{}\" d=\"M{} {}V{}\" fill=\"none\" stroke=\"{}\" "
        "stroke-width=\"1.4\"{}/>\n",
        ink.name,
        escaped(label.level->name),
        at(label.x),
        at(height_of(label) + 3.0),
        at(frame.bottom),
        ink.colour,
        dash_attribute(label.level->dash));
  }
  // Names last, so that no line runs over one.
  for (const TopLabel& label : tops) {
    const InkNames ink = ink_names(label.level->ink);
    const double half = 0.5 * text_width(shortened(label.level->name));
    const double x = std::clamp(label.x, half + 2.0, width - half - 2.0);
    out += fmt::format(
        "<text class=\"name {0}\" x=\"{1}\" y=\"{2}\" text-anchor=\"middle\" fill=\"{3}\" stroke=\"#ffffff\" "
        "stroke-width=\"4\" paint-order=\"stroke\">{4}</text>\n",
        ink.name,
        at(x),
        at(height_of(label)),
        ink.colour,
        escaped(shortened(label.level->name)));
  }
  return out;
}

}  // namespace

std::string svg(const Plot& given, Family family, const std::string& suffix) {
  Plot plot = given;
  set_ranges(plot);
  const std::string id = slug(plot.id) + suffix;
  const double right = width - right_margin(plot);
  int top_rows = 0;
  const std::vector<TopLabel> tops = top_labels(plot, right, top_rows);
  const double top = 14.0 + line_height * top_rows;
  const double height = plot.height + line_height * std::max(0, top_rows - 1);
  const Frame frame{right, top, height - bottom_margin, plot.x.low, plot.x.high, plot.y.low, plot.y.high};

  std::string out = fmt::format(
      "<svg xmlns=\"http://www.w3.org/2000/svg\" class=\"plot\" width=\"{0}\" height=\"{1}\" viewBox=\"0 0 {0} {1}\" "
      "role=\"img\" "
      "aria-labelledby=\"title-{2} about-{2}\" font-family=\"system-ui, 'Segoe UI', 'DejaVu Sans', sans-serif\" "
      "font-size=\"12\">\n",
      at(width),
      at(height),
      id);
  out += fmt::format("<title id=\"title-{0}\">{1}</title>\n<desc id=\"about-{0}\">{2}</desc>\n",
                     id,
                     escaped(plot.title),
                     escaped(plot.message));
  out += axes(plot, frame, family);
  out += fmt::format("<clipPath id=\"clip-{}\"><rect x=\"{}\" y=\"{}\" width=\"{}\" height=\"{}\"/></clipPath>\n",
                     id,
                     at(left),
                     at(frame.top - 1.0),
                     at(frame.right - left),
                     at(frame.bottom - frame.top + 2.0));
  out += fmt::format("<g clip-path=\"url(#clip-{})\">\n{}</g>\n", id, curves(plot, frame));
  out += stretches(plot, frame, id);
  out += levels(plot, frame, tops, top_rows);
  for (const SideLabel& label : side_labels(plot, frame)) {
    const InkNames ink = ink_names(label.ink);
    out += fmt::format("<text class=\"name {}\" x=\"{}\" y=\"{}\" fill=\"{}\">{}</text>\n",
                       ink.name,
                       at(frame.right + 7.0),
                       at(label.placed + 4.0),
                       ink.colour,
                       escaped(label.text));
  }
  out += points(plot, frame);
  return out + "</svg>\n";
}

}  // namespace headband::report
