// SPDX-License-Identifier: MIT
#include "core/report/bars.hpp"

#include "core/report/markup.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>

namespace headband::report {

bool fails_over(const answers::LimitAnswer& limit) {
  if (limit.kind == "lowest_pressure") return false;
  if (limit.kind == "highest_pressure" || limit.kind == "velocity" || limit.kind == "rating") return true;
  // The margin is positive when the limit is kept, so its sign against the distance tells the side.
  return !(limit.margin * (limit.limit - limit.value) < 0.0);
}

std::string bar_cell(double value, double inner, double largest) {
  if (!(largest > 0.0) || !std::isfinite(value)) return "";
  const auto length = [&](double v) { return std::clamp(100.0 * v / largest, 0.0, 100.0); };
  std::string out = fmt::format(
      "<svg class=\"bar\" viewBox=\"0 0 100 10\" preserveAspectRatio=\"none\" aria-hidden=\"true\">"
      "<rect class=\"bar-outer\" width=\"{:.2f}\" height=\"10\"/>",
      length(value));
  if (std::isfinite(inner) && inner > 0.0)
    out += fmt::format("<rect class=\"bar-inner\" width=\"{:.2f}\" height=\"10\"/>", length(inner));
  return out + "</svg>";
}

std::string bars_svg(const std::string& id, const std::string& title, const std::vector<Bar>& bars) {
  constexpr double row = 26.0, name_width = 210.0, bar_width = 360.0;
  double largest = 0.0;
  for (const Bar& bar : bars)
    if (std::isfinite(bar.value)) largest = std::max(largest, bar.value);
  const double height = 16.0 + row * static_cast<double>(bars.size());
  std::string out = fmt::format(
      "<svg xmlns=\"http://www.w3.org/2000/svg\" class=\"plot\" width=\"720\" height=\"{0}\" viewBox=\"0 0 720 {0}\" "
      "role=\"img\" "
      "aria-labelledby=\"title-{1}\" font-family=\"system-ui, 'Segoe UI', 'DejaVu Sans', sans-serif\" "
      "font-size=\"12\">\n"
      "<title id=\"title-{1}\">{2}</title>\n",
      height,
      slug(id),
      escaped(title));
  double y = 8.0;
  for (const Bar& bar : bars) {
    const auto length = [&](double v) {
      return largest > 0.0 && std::isfinite(v) ? bar_width * std::clamp(v / largest, 0.0, 1.0) : 0.0;
    };
    out += fmt::format("<text x=\"{}\" y=\"{}\" text-anchor=\"end\" fill=\"#22303c\">{}</text>\n",
                       name_width,
                       y + 15.0,
                       escaped(bar.name));
    out +=
        fmt::format("<rect x=\"{}\" y=\"{}\" width=\"{:.2f}\" height=\"14\" fill=\"#0072b2\" fill-opacity=\"0.45\"/>\n",
                    name_width + 10.0,
                    y + 4.0,
                    length(bar.value));
    if (bar.inner > 0.0)
      out += fmt::format("<rect x=\"{}\" y=\"{}\" width=\"{:.2f}\" height=\"14\" fill=\"#0072b2\"/>\n",
                         name_width + 10.0,
                         y + 4.0,
                         length(bar.inner));
    out += fmt::format("<text x=\"{:.2f}\" y=\"{}\" fill=\"#22303c\">{}</text>\n",
                       name_width + 18.0 + length(bar.value),
                       y + 15.0,
                       escaped(bar.text));
    y += row;
  }
  return out + "</svg>\n";
}

std::string strip(const answers::LimitAnswer& limit,
                  const answers::BandAnswer* answer,
                  double coverage,
                  double grid_bound,
                  const std::string& id) {
  double low = limit.value, high = limit.value, median = answers::missing;
  if (answer != nullptr) {
    for (const auto& q : answer->quantiles) {
      if (std::abs(q.probability - 0.5 * (1.0 - coverage)) < 1e-9) low = q.value;
      if (std::abs(q.probability - 0.5 * (1.0 + coverage)) < 1e-9) high = q.value;
      if (std::abs(q.probability - 0.5) < 1e-9) median = q.value;
    }
  } else if (std::isfinite(grid_bound)) {
    low -= grid_bound;
    high += grid_bound;
  }
  if (!std::isfinite(limit.limit) || !std::isfinite(low) || !std::isfinite(high)) return {};
  double left = std::min(low, limit.limit), right = std::max(high, limit.limit);
  if (std::isfinite(limit.value)) left = std::min(left, limit.value), right = std::max(right, limit.value);
  const double air = right > left ? 0.12 * (right - left) : 1.0;
  left -= air;
  right += air;
  const auto x = [&](double v) { return 150.0 * (v - left) / (right - left); };
  const double at = x(limit.limit);
  const bool over = fails_over(limit);
  std::string out = fmt::format(
      "<svg class=\"strip\" viewBox=\"0 0 150 24\" width=\"150\" height=\"24\" aria-hidden=\"true\">"
      "<pattern id=\"strip-{0}\" width=\"6\" height=\"6\" patternUnits=\"userSpaceOnUse\" "
      "patternTransform=\"rotate(45)\">"
      "<path class=\"hatch\" d=\"M0 0V6\"/></pattern>"
      "<rect x=\"{1:.1f}\" y=\"3\" width=\"{2:.1f}\" height=\"18\" fill=\"url(#strip-{0})\"/>"
      "<path class=\"base\" d=\"M0 12H150\"/>",
      id,
      over ? at : 0.0,
      over ? 150.0 - at : at);
  if (high > low)
    out += fmt::format("<path class=\"span\" d=\"M{:.1f} 12H{:.1f}\"/>", x(low), std::max(x(high), x(low) + 1.0));
  if (std::isfinite(median)) out += fmt::format("<path class=\"middle\" d=\"M{:.1f} 7v10\"/>", x(median));
  if (std::isfinite(limit.value))
    out += fmt::format("<circle class=\"value\" cx=\"{:.1f}\" cy=\"12\" r=\"4\"/>", x(limit.value));
  return out + fmt::format("<path class=\"limit\" d=\"M{:.1f} 1v22\"/></svg>", at);
}

}  // namespace headband::report
