// SPDX-License-Identifier: MIT
#include "core/report/markup.hpp"

#include <fmt/format.h>

#include <cctype>
#include <cmath>

namespace headband::report {

std::string escaped(std::string_view text) {
  std::string out;
  out.reserve(text.size());
  for (const char c : text) {
    switch (c) {
      case '&':
        out += "&amp;";
        break;
      case '<':
        out += "&lt;";
        break;
      case '>':
        out += "&gt;";
        break;
      case '"':
        out += "&quot;";
        break;
      case '\'':
        out += "&#39;";
        break;
      default:
        // Control characters are not allowed in a page; a visible box takes their place.
        if (static_cast<unsigned char>(c) < 0x20 && c != '\n' && c != '\t' && c != '\r')
          out += "\u25a1";
        else
          out += c;
    }
  }
  return out;
}

std::string slug(std::string_view text) {
  std::string out;
  for (const char c : text) {
    const auto letter = static_cast<unsigned char>(c);
    if (letter < 0x80 && std::isalnum(letter) != 0)
      out += c;
    else if (c == ' ')
      out += '-';
    else if (c == '-' || c == '_')
      out += fmt::format("_{}", c);
    else
      out += fmt::format("_{:02x}", letter);
  }
  return out.empty() ? "_" : out;
}

std::string paragraph(const std::string& inside, std::string_view kind) {
  if (inside.empty()) return {};
  return kind.empty() ? fmt::format("<p>{}</p>\n", inside) : fmt::format("<p class=\"{}\">{}</p>\n", kind, inside);
}

std::string both(const std::string& si, const std::string& us) {
  if (si == us) return si;
  return fmt::format(R"(<span class="si">{}</span><span class="us">{}</span>)", si, us);
}

std::string both(double si, Shown shown, int significant) {
  return both(with_unit(si, shown, Family::si, significant), with_unit(si, shown, Family::us, significant));
}

std::string both_with_bound(double si, double bound, Shown shown, Shown bound_shown) {
  const auto one = [&](Family family) {
    const Measure in = measure(shown, family, si);
    const Measure of_bound = measure(bound_shown, family, si);
    if (std::isnan(bound)) return with_unit(si, shown, family);
    const double width = bound * of_bound.scale;
    // A bound far below the last useful figure is told as such instead of adding digits to the value.
    const double least = 5e-4 * std::abs(in(si));
    if (width < least)
      return fmt::format("{} ± under {}{}",
                         figures(in(si)),
                         figures(std::pow(10.0, std::floor(std::log10(least)) + 1), 1),
                         behind_number(in.unit));
    const int places = places_for(width);
    return fmt::format("{} ± {}{}", decimals(in(si), places), decimals(width, places), behind_number(in.unit));
  };
  return both(one(Family::si), one(Family::us));
}

std::string html(const Table& table) {
  if (table.rows.empty()) return {};
  std::vector<bool> idle(table.columns.size(), true);
  for (const auto& row : table.rows)
    for (std::size_t i = 0; i < row.size() && i < idle.size(); ++i)
      idle[i] = idle[i] && i > 0 && (row[i].empty() || row[i] == "–");
  std::string out = fmt::format(
      "<div class=\"scroll\" tabindex=\"0\" role=\"region\" aria-label=\"Table: {0}\">\n"
      "<table>\n<caption>{0}</caption>\n<thead><tr>",
      escaped(table.caption));
  const auto shape = [&](std::size_t column) { return table.columns[column].number ? " class=\"number\"" : ""; };
  for (std::size_t i = 0; i < table.columns.size(); ++i)
    if (!idle[i]) out += fmt::format("<th scope=\"col\"{}>{}</th>", shape(i), table.columns[i].head);
  out += "</tr></thead>\n<tbody>\n";
  for (const auto& row : table.rows) {
    out += "<tr>";
    for (std::size_t i = 0; i < row.size() && i < table.columns.size(); ++i) {
      if (idle[i]) continue;
      out += i == 0 ? fmt::format("<th scope=\"row\"{}>{}</th>", shape(i), row[i])
                    : fmt::format("<td{}>{}</td>", shape(i), row[i]);
    }
    out += "</tr>\n";
  }
  return out + "</tbody>\n</table>\n</div>\n";
}

std::string folded(const Table& table, std::size_t most) {
  if (table.rows.size() <= most) return html(table);
  return fmt::format("<details><summary>{} ({} rows)</summary>\n{}</details>\n",
                     escaped(table.caption),
                     table.rows.size(),
                     html(table));
}

std::string html(const std::vector<std::pair<std::string, std::string>>& terms) {
  if (terms.empty()) return {};
  std::string out = "<dl class=\"terms\">\n";
  for (const auto& [term, value] : terms)
    out += fmt::format("<div><dt>{}</dt><dd>{}</dd></div>\n", escaped(term), value);
  return out + "</dl>\n";
}

}  // namespace headband::report
