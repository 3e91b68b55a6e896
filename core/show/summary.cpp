// SPDX-License-Identifier: MIT
#include "core/show/amounts.hpp"
#include "core/show/reported.hpp"
#include "core/show/show.hpp"
#include "core/show/text_table.hpp"
#include "core/show/words.hpp"

#include "core/base/units.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>
#include <string>
#include <utility>
#include <vector>

namespace headband::show {

namespace {

using answers::Study;
using answers::Verdict;
using base::Dimension;

constexpr std::size_t most_rows = 20;  ///< a terminal is no place for a thousand pipes; the file holds all

/// Everything the sections share.
struct Frame {
  const Study& study;
  const TerminalOptions& options;
  Amounts amounts;
  std::string out;

  /// Text as this terminal can show it; before any width is measured.
  [[nodiscard]] std::string plain(const std::string& text) const { return options.unicode ? text : ascii(text); }
  [[nodiscard]] TextTable table(const std::vector<std::string>& headings) const {
    return TextTable(headings, !options.unicode);
  }
  void heading(const std::string& words) {
    out += '\n';
    if (options.colour) out += "\x1b[1m";
    out += shortened(plain(words), terminal_width);
    if (options.colour) out += "\x1b[0m";
    out += '\n';
  }
  void line(const std::string& text) {
    out.append("  ").append(wrapped(plain(text), terminal_width - 2, "  ")).append("\n");
  }
  void item(const std::string& text) {
    out.append("  - ").append(wrapped(plain(text), terminal_width - 4, "    ")).append("\n");
  }
  void more(std::size_t all) {
    if (all > most_rows) line(fmt::format("... and {} more in the result file", all - most_rows));
  }
};

/// The verdict's words, coloured where asked: the words alone say it all.
std::string stamp(Verdict verdict, bool colour) {
  std::string words = words_of(verdict);
  if (!colour || words.empty()) return words;
  const char* start = verdict == Verdict::ok ? "\x1b[1;32m" : verdict == Verdict::not_ok ? "\x1b[1;31m" : "\x1b[1;33m";
  return start + words + "\x1b[0m";
}

void title(Frame& f) {
  const Study& s = f.study;
  const std::string file = file_name_of(s.provenance.case_file);
  std::string line = s.title.empty() ? file : s.title;
  if (!file.empty() && line != file) line.append(" (").append(file).append(")");
  f.out += shortened(f.plain(line.append(", ").append(s.verb)), terminal_width) + '\n';
}

void decide(Frame& f) {
  const bool own = f.options.units.empty() || f.options.units == f.study.units_shown;
  const std::string sentence = own && !f.study.decision.empty() ? f.study.decision : decision(f.study, f.options.units);
  const std::string verdict = words_of(f.study.verdict);
  std::string text = wrapped(f.plain(sentence), terminal_width, "");
  // The stamp stands first; where the sentence starts with it, it is that start.
  if (!verdict.empty() && text.starts_with(verdict)) {
    text.replace(0, verdict.size(), stamp(f.study.verdict, f.options.colour));
  } else if (!verdict.empty()) {
    text = stamp(f.study.verdict, f.options.colour) + "\n" + text;
  }
  if (!text.empty()) f.out.append(text).append("\n");
}

void liquid(Frame& f) {
  if (!f.study.liquid) return;
  const auto& l = *f.study.liquid;
  f.heading("Liquid");
  std::string text = l.name.empty() ? "liquid" : l.name;
  const auto add = [&](const char* word, double value, Dimension dimension) {
    if (!std::isnan(value)) text += fmt::format(", {}{}", word, f.amounts.of(value, dimension));
  };
  add("", l.temperature, Dimension::temperature);
  add("", l.density, Dimension::density);
  add("", l.kinematic_viscosity, Dimension::kinematic_viscosity);
  add("bulk modulus ", l.bulk_modulus_isentropic, Dimension::modulus);
  if (!std::isnan(l.vapour_pressure)) {
    text += fmt::format(", boils at {} abs", f.amounts.of(l.vapour_pressure, Dimension::pressure_difference));
  }
  f.line(text);
  if (!l.source.empty()) f.line(l.source);
}

/// One value as understood: its name, what it was read as in both families, and below where it came from.
void value_echo(Frame& f, const answers::ValueEcho& v) {
  constexpr std::size_t name_width = 30;
  constexpr std::size_t room = terminal_width - name_width - 2;
  const std::string indent(name_width + 2, ' ');
  const auto beside = [&](const std::string& text) {  // wrapped in the right-hand column
    std::string out;
    for (const char c : wrapped(f.plain(text), room, "")) out.append(c == '\n' ? "\n" + indent : std::string(1, c));
    return out + '\n';
  };
  std::string first = v.shown_si.empty() ? v.written : v.shown_si;
  if (!v.shown_si.empty() && !v.spread.empty() && first.find(v.spread) == std::string::npos)
    first.append(", ").append(v.spread);
  std::string second = v.shown_us;
  if ((f.options.units.empty() ? f.study.units_shown : f.options.units) == "us" && !second.empty())
    std::swap(first, second);
  if (second.starts_with(first)) first = second;  // a bare number is the same in both families
  if (first.starts_with(second)) second.clear();
  if (v.guess) first += " *";
  std::string name = f.plain(v.name.empty() ? v.path : v.name);
  const std::size_t width = width_of(name);
  if (width < name_width) name.append(name_width - width, ' ');
  f.out.append("  ").append(name);
  if (width >= name_width) f.out.append("\n").append(indent);
  std::string origin = v.source;
  if (!v.grade.empty()) origin.append(origin.empty() ? "" : ", ").append("grade ").append(v.grade);
  const bool together = !second.empty() && width_of(first) + width_of(second) + 5 <= room;
  if (together) first.append("  =  ").append(second);
  if (origin == "default" && width_of(first) + 11 <= room)
    first.append("  (").append(std::exchange(origin, {})).append(")");
  f.out += beside(first);
  if (!second.empty() && !together) f.out += indent + beside("= " + second);
  if (!origin.empty()) f.out += indent + beside("from: " + origin);
}

void values(Frame& f) {
  if (!f.study.values_shown || f.study.values.empty()) return;
  f.heading("Values as understood, in both unit families (* nobody stated it)");
  for (const auto& v : f.study.values) value_echo(f, v);
}

void pipes(Frame& f) {
  const auto& all = f.study.pipes;
  if (all.empty()) return;
  f.heading("Steady state: pipes");
  const auto in = [&](const char* word, Dimension d) { return fmt::format("{} {}", word, f.amounts.unit(d)); };
  TextTable table = f.table({"pipe",
                             in("flow", Dimension::flow),
                             in("velocity", Dimension::velocity),
                             "Reynolds",
                             "factor",
                             in("loss", Dimension::length),
                             in("drop", Dimension::pressure_difference),
                             in("wave speed", Dimension::velocity)});
  for (std::size_t i = 0; i < std::min(most_rows, all.size()); ++i) {
    const auto& p = all[i];
    table.add({p.name,
               f.amounts.number(p.flow, Dimension::flow),
               f.amounts.number(p.velocity, Dimension::velocity, 3),
               base::significant(p.reynolds, 3),
               base::significant(p.friction_factor, 4),
               f.amounts.number(p.head_loss, Dimension::length, 4),
               f.amounts.number(p.pressure_drop, Dimension::pressure_difference, 4),
               f.amounts.number(p.wave_speed, Dimension::velocity, 4)});
  }
  f.out += table.text(2);
  f.more(all.size());
}

/// Below the pipes: how the steady state was found.
void steady_end(Frame& f) {
  const Study& s = f.study;
  if (s.steady_status.empty()) return;
  std::string text = "Steady state: " + s.steady_status;
  if (!std::isnan(s.steady_residual)) text += ", residual " + base::significant(s.steady_residual, 2);
  if (s.steady_iterations > 0) text += fmt::format(", {} iterations", s.steady_iterations);
  f.line(text + ".");
}

void devices(Frame& f) {
  const auto& all = f.study.devices;
  if (all.empty()) return;
  f.heading("Devices");
  for (std::size_t i = 0; i < std::min(most_rows, all.size()); ++i) {
    std::string text = all[i].name;
    const char* comma = ": ";
    for (const auto& [key, value] : all[i].numbers) {
      if (std::isnan(value)) continue;
      const KeyWords words = words_of_key(key);
      text += fmt::format("{}{} {}", comma, words.words, f.amounts.of(value, words.dimension));
      comma = ", ";
    }
    f.item(text);
  }
  f.more(all.size());
}

void places(Frame& f) {
  const auto& all = f.study.places;
  if (all.empty()) return;
  const bool surged = std::any_of(all.begin(), all.end(), [](const auto& p) { return p.surged; });
  f.heading(fmt::format("Places: pressure {}{}",
                        f.amounts.unit(Dimension::pressure),
                        surged ? ", highest and lowest of the run with their times" : ""));
  std::vector<std::string> headings = {"place",
                                       "elevation " + f.amounts.unit(Dimension::length),
                                       "head " + f.amounts.unit(Dimension::length),
                                       "pressure"};
  if (surged) headings.insert(headings.end(), {"highest", "at s", "lowest", "at s"});
  TextTable table = f.table(headings);
  for (std::size_t i = 0; i < std::min(most_rows, all.size()); ++i) {
    const auto& p = all[i];
    std::vector<std::string> row = {p.name,
                                    f.amounts.number(p.elevation, Dimension::length),
                                    f.amounts.number(p.head, Dimension::length),
                                    f.amounts.number(p.pressure, Dimension::pressure)};
    if (surged) {
      row.insert(row.end(),
                 {f.amounts.number(p.max_pressure, Dimension::pressure),
                  base::significant(p.time_of_max, 3),
                  f.amounts.number(p.min_pressure, Dimension::pressure),
                  base::significant(p.time_of_min, 3)});
    }
    table.add(std::move(row));
  }
  f.out += table.text(2);
  f.more(all.size());
}

void extremes(Frame& f) {
  if (!f.study.highest || !f.study.lowest) return;
  const auto& grid = f.study.grid;
  f.heading("Extremes of the run");
  TextTable table = f.table({"", "pressure", "+/- by the grid", "head", "where", "at"});
  table.left(4);
  const auto row = [&](const char* name, const answers::Extreme& e) {
    const std::string bound =
        std::isnan(e.grid_bound) ? "not known" : f.amounts.width(e.grid_bound, Dimension::pressure);
    const std::string where =
        e.pipe.empty() ? "-" : fmt::format("{} @ {}", e.pipe, f.amounts.of(e.chainage, Dimension::length));
    table.add({name,
               f.amounts.of(e.pressure, Dimension::pressure),
               e.grid_converging ? bound : "not converging",
               f.amounts.of(e.head, Dimension::length),
               where,
               f.amounts.of(e.time, Dimension::time)});
  };
  row("highest", *f.study.highest);
  row("lowest", *f.study.lowest);
  f.out += table.text(2);
  const std::string remark = vapour_remark(f.study);
  if (!remark.empty()) f.line("Pressures: " + remark + ".");
  // of the pipe of the highest pressure, as on the page: a short narrow spool elsewhere says nothing of it
  const auto its_pipe = std::ranges::find(f.study.pipes, f.study.highest->pipe, &answers::PipeAnswer::name);
  if (its_pipe != f.study.pipes.end() && its_pipe->joukowsky_head > 0.0) {
    f.line(fmt::format("Hand check, wave speed x velocity / gravity: {} in {}.",
                       f.amounts.of(its_pipe->joukowsky_head, Dimension::length, 3),
                       its_pipe->name));
  }
  if (grid) {
    std::string text = fmt::format("Grid: step {}, {} marched",
                                   f.amounts.of(grid->time_step, Dimension::time),
                                   grid->grids == 1 ? "one grid" : fmt::format("{} grids", grid->grids));
    if (!grid->worst_pipe.empty()) {
      text += fmt::format(
          ", wave speed changed by {} in {} at most", percent(grid->worst_wave_speed_change), grid->worst_pipe);
    }
    if (!grid->rigid_pipes.empty()) text += fmt::format(", rigid: {}", fmt::join(grid->rigid_pipes, ", "));
    f.line(text + (grid->converging ? "." : "; not converging."));
  }
  if (f.study.audit) {
    const auto& audit = *f.study.audit;
    const std::string share = std::isnan(audit.volume_residual_relative)
                                  ? "nothing passed"
                                  : base::significant(audit.volume_residual_relative, 2) + " of what passed";
    f.line(fmt::format(
        "Volume not accounted for: {} ({}).", f.amounts.of(audit.volume_residual, Dimension::volume, 2), share));
  }
}

void cavities(Frame& f) {
  auto all = reported_cavities(f.study);
  if (all.empty()) return;
  std::ranges::stable_sort(all, std::ranges::greater{}, &answers::CavityAnswer::max_volume);
  f.heading("Vapour cavities, the largest first");
  TextTable table = f.table({"pipe", "chainage", "opens", "closes", "largest"});
  for (std::size_t i = 0; i < std::min(most_rows, all.size()); ++i) {
    const auto& c = all[i];
    table.add({c.pipe,
               f.amounts.of(c.chainage, Dimension::length),
               f.amounts.of(c.opens, Dimension::time),
               std::isnan(c.closes) ? "open at the end" : f.amounts.of(c.closes, Dimension::time),
               f.amounts.of(c.max_volume, Dimension::volume, 3)});
  }
  f.out += table.text(2);
  f.more(all.size());
}

void events(Frame& f) {
  const auto all = told_events(f.study);
  if (all.empty()) return;
  f.heading("Events");
  TextTable table = f.table({"time", "", "what"});
  table.left(1);
  table.left(2);
  for (std::size_t i = 0; i < std::min(most_rows, all.size()); ++i) {
    const auto [subject, what] = event_words(f.study, all[i], f.amounts);
    table.add({f.amounts.of(all[i].time, Dimension::time), subject, what});
  }
  f.out += table.text(2);
  f.more(all.size());
  if (all.size() < f.study.events.size()) {
    f.line("Of the cavities of a pipe the first that opens and the last that closes; all of them in the result file.");
  }
}

/// Chance of not keeping a limit, with its bounds.
std::string chance_of(const answers::LimitAnswer& l) {
  if (l.probability_range) {
    const std::string least = percent((*l.probability_range)[0]), most = percent((*l.probability_range)[1]);
    std::string chance = least == most ? least : least + " .. " + most;
    if (l.probability_upper_range) chance += fmt::format(" (<= {})", percent((*l.probability_upper_range)[1]));
    return chance;
  }
  if (std::isnan(l.probability)) return "-";
  return fmt::format(
      "{} ({} .. {})", percent(l.probability), percent(l.probability_lower), percent(l.probability_upper));
}

void limits(Frame& f) {
  const auto& all = f.study.limits;
  if (all.empty()) return;
  f.heading("Limits");
  TextTable table = f.table({"verdict", "limit", "bound", "run", "margin", "not kept in", "allowed"});
  table.left(1);
  for (const auto& l : all) {
    const Dimension dimension = dimension_of_kind(l.kind);
    table.add({words_of(l.verdict),
               l.name,
               f.amounts.of(l.limit, dimension),
               f.amounts.of(l.value, dimension),
               f.amounts.width(l.margin, dimension, 3),
               chance_of(l),
               std::isnan(l.at_most) ? "-" : percent(l.at_most)});
  }
  f.out += table.text(2);
  const bool first_state = f.study.transient && std::ranges::any_of(all, [](const answers::LimitAnswer& l) {
                             return l.kind == "flow" || l.kind == "head" || l.kind == "pressure_drop";
                           });
  if (first_state) f.line("Limits of flow, head and pressure drop are judged by the first steady state.");
  for (const auto& l : all) {
    std::string reason = l.reason;
    if (!l.worst_corner.empty()) reason += (reason.empty() ? "worst at " : "; worst at ") + l.worst_corner;
    if (!reason.empty()) f.item(l.name + ": " + reason);
  }
  if (!f.study.bands) return;
  for (const auto& l : f.study.bands->whole_line) {
    std::string words = fmt::format("{} over its own rating: {}", l.name, chance_of(l));
    if (std::isnan(l.probability))
      words = fmt::format("{} over its own rating: at least {}", l.name, percent(l.probability_lower));
    if (!l.reason.empty()) words += "; " + l.reason;
    f.item(words);
  }
}

void bands(Frame& f) {
  if (!f.study.bands) return;
  const auto& b = *f.study.bands;
  f.heading(fmt::format("Bands: {} of {} draws, {} covered, each bound {} sure",
                        b.draws - b.failed,
                        b.draws,
                        percent(b.coverage),
                        percent(b.confidence)));
  const double tail = 0.5 * (1.0 - b.coverage);
  TextTable table = f.table({"answer", "run", "from", "median", "to", "ends sure within", "sd"});
  for (const auto& a : b.answers) {
    const Dimension d = dimension_of_kind(a.kind);
    const auto near = [&](double probability) -> const answers::QuantileAnswer* {
      for (const auto& q : a.quantiles) {
        if (std::abs(q.probability - probability) < 1e-12) return &q;
      }
      return nullptr;
    };
    const auto at = [&](double probability) {
      const auto* q = near(probability);
      return q == nullptr ? std::string("-") : f.amounts.number(q->value, d);
    };
    const auto* low = near(tail);
    const auto* high = near(1.0 - tail);
    const std::string sure =
        low == nullptr || high == nullptr
            ? "-"
            : fmt::format("{} .. {}", f.amounts.number(low->lower, d), f.amounts.of(high->upper, d));
    table.add({a.name,
               f.amounts.number(a.central, d),
               at(tail),
               at(0.5),
               at(1.0 - tail),
               sure,
               f.amounts.width(a.standard_deviation, d)});
  }
  f.out += table.text(2);
  TextTable budget = f.table({"where the width comes from", "inputs", "friction law", "grid", "sampling", "draws"});
  for (const auto& a : b.answers) {
    const Dimension d = dimension_of_kind(a.kind);
    budget.add({a.name,
                f.amounts.width(a.budget_inputs, d),
                f.amounts.width(a.budget_friction_law, d),
                f.amounts.width(a.budget_grid, d),
                f.amounts.width(a.budget_sampling, d),
                std::to_string(a.budget_draws)});
  }
  f.out.append("\n").append(budget.text(2));
  for (const auto& a : b.answers) {
    if (a.range) {
      const Dimension d = dimension_of_kind(a.kind);
      const std::string least = f.amounts.of((*a.range)[0], d), most = f.amounts.of((*a.range)[1], d);
      f.item(least == most ? fmt::format("{}: no range that is not chance moves its median", a.name)
                           : fmt::format("{}: median {} to {} by a range that is not chance", a.name, least, most));
    }
    if (a.modes > 1) f.item(fmt::format("{}: the density has {} humps; mean and band hide that", a.name, a.modes));
    if (stands_still(a)) {
      f.item(fmt::format("{}: the same in every draw, so no unknown has a share", a.name));
      continue;
    }
    const auto stated = [](const answers::SensitivityAnswer& s) { return !std::isnan(s.first); };
    if (std::ranges::none_of(a.sensitivity, stated)) continue;
    std::string ranks;
    for (const auto& s : ranked_unknowns(a))
      ranks += fmt::format(
          "{}{} ({})", ranks.empty() ? "" : ", ", s.input, s.first < least_share ? "under 0.01 %" : percent(s.first));
    f.item(
        fmt::format("{}: share of the variance by {}{}", a.name, ranks, overlapping_shares(a) ? overlap_remark : ""));
  }
}

void list(Frame& f, const std::string& heading, const std::vector<std::string>& items) {
  if (items.empty()) return;
  f.heading(heading);
  for (const auto& text : items) f.item(text);
}

}  // namespace

std::string summary(const Study& study, const TerminalOptions& options) {
  Frame f{study, options, Amounts(study, options.units), {}};
  title(f);
  decide(f);
  liquid(f);
  values(f);
  pipes(f);
  steady_end(f);
  places(f);
  devices(f);
  extremes(f);
  cavities(f);
  events(f);
  limits(f);
  bands(f);
  list(f, "Warnings", study.warnings);
  const std::size_t guesses = study.guesses.size();
  list(f, fmt::format("Guesses: {} {} nobody stated", guesses, guesses == 1 ? "value" : "values"), study.guesses);
  list(f, "Cautions", cautions(study));
  return f.plain(f.out);  // once more for the marks of shortened text
}

}  // namespace headband::show
