// SPDX-License-Identifier: MIT
#include "core/show/json_text.hpp"
#include "core/show/reported.hpp"
#include "core/show/show.hpp"

#include <fmt/format.h>

#include <cmath>
#include <cstddef>
#include <initializer_list>
#include <string>
#include <utility>
#include <vector>

namespace headband::show {

namespace {

using answers::Study;

/// A text cell by RFC 4180, harmless to spreadsheets: text that would start a formula gets a quote sign in front.
std::string text_cell(const std::string& text) {
  std::string cell;
  if (!text.empty() && std::string("=+-@\t\r").find(text.front()) != std::string::npos) cell += '\'';
  cell += text;
  if (cell.find_first_of(",\"\r\n") == std::string::npos) return cell;
  std::string quoted = "\"";
  for (const char c : cell) {
    if (c == '"') quoted += '"';
    quoted += c;
  }
  return quoted += '"';
}

/// A number with all its digits; nothing where it is missing.
std::string number_cell(double value) { return std::isfinite(value) ? shortest(value) : std::string(); }

/// Lines of cells, each ended by CR LF as RFC 4180 asks.
class Sheet {
 public:
  Sheet& text(const std::string& cell) { return put(text_cell(cell)); }
  Sheet& number(double value) { return put(number_cell(value)); }
  Sheet& whole(long long value) { return put(std::to_string(value)); }
  void numbers(std::initializer_list<double> values) {
    for (const double value : values) number(value);
  }
  void end() {
    out_ += "\r\n";
    first_ = true;
  }
  void header(std::initializer_list<const char*> names) {
    for (const char* name : names) text(name);
    end();
  }
  [[nodiscard]] std::string take() { return std::move(out_); }

 private:
  Sheet& put(const std::string& cell) {
    if (!first_) out_ += ',';
    first_ = false;
    out_ += cell;
    return *this;
  }

  std::string out_;
  bool first_ = true;
};

std::string with_unit(const std::string& name, const std::string& unit) { return name + " [" + unit + "]"; }

double at_or_missing(const std::vector<double>& values, std::size_t i) {
  return i < values.size() ? values[i] : answers::missing;
}

std::string pipe_name(const Study& study, std::int32_t index) {
  const auto i = static_cast<std::size_t>(index);
  return index >= 0 && i < study.pipes.size() ? study.pipes[i].name : std::string();
}

std::string pipes(const Study& study) {
  Sheet sheet;
  sheet.header({"pipe",
                "from",
                "to",
                "length [m]",
                "bore [m]",
                "roughness [m]",
                "flow [m3/s]",
                "velocity [m/s]",
                "Reynolds number [1]",
                "friction factor [1]",
                "head loss [m]",
                "pressure drop [Pa]",
                "wave speed [m/s]"});
  for (const auto& p : study.pipes) {
    sheet.text(p.name).text(p.from).text(p.to);
    sheet.numbers({p.length,
                   p.bore,
                   p.roughness,
                   p.flow,
                   p.velocity,
                   p.reynolds,
                   p.friction_factor,
                   p.head_loss,
                   p.pressure_drop,
                   p.wave_speed});
    sheet.end();
  }
  return sheet.take();
}

std::string places(const Study& study) {
  Sheet sheet;
  sheet.header({"place",
                "elevation [m]",
                "head [m]",
                "pressure gauge [Pa]",
                "highest head [m]",
                "highest pressure gauge [Pa]",
                "at [s]",
                "lowest head [m]",
                "lowest pressure gauge [Pa]",
                "at [s]"});
  for (const auto& p : study.places) {
    sheet.text(p.name);
    sheet.numbers({p.elevation,
                   p.head,
                   p.pressure,
                   p.max_head,
                   p.max_pressure,
                   p.time_of_max,
                   p.min_head,
                   p.min_pressure,
                   p.time_of_min});
    sheet.end();
  }
  return sheet.take();
}

std::string histories(const answers::Transient& t) {
  Sheet sheet;
  sheet.text("time [s]");
  for (const auto& name : t.probe_name) {
    sheet.text(with_unit(name + " head", "m")).text(with_unit(name + " pressure gauge", "Pa"));
    sheet.text(with_unit(name + " flow", "m3/s"));
  }
  for (std::size_t k = 0; k < t.series_name.size(); ++k) {
    sheet.text(with_unit(t.series_name[k], k < t.series_units.size() ? t.series_units[k] : "1"));
  }
  sheet.end();
  for (std::size_t row = 0; row < t.time.size(); ++row) {
    sheet.number(t.time[row]);
    for (std::size_t k = 0; k < t.probe_name.size(); ++k) {
      const std::size_t cell = row * t.probe_name.size() + k;
      sheet.numbers({at_or_missing(t.probe_head, cell),
                     at_or_missing(t.probe_pressure, cell),
                     at_or_missing(t.probe_flow, cell)});
    }
    for (std::size_t k = 0; k < t.series_name.size(); ++k) {
      sheet.number(at_or_missing(t.series, row * t.series_name.size() + k));
    }
    sheet.end();
  }
  return sheet.take();
}

std::string envelope(const Study& study, const answers::Transient& t) {
  Sheet sheet;
  sheet.header({"pipe",
                "chainage [m]",
                "elevation [m]",
                "steady head [m]",
                "highest head [m]",
                "highest pressure gauge [Pa]",
                "at [s]",
                "lowest head [m]",
                "lowest pressure gauge [Pa]",
                "at [s]",
                "vapour head [m]",
                "largest cavity [m3]",
                "time with cavity [s]"});
  for (std::size_t i = 0; i < t.station_pipe.size(); ++i) {
    sheet.text(pipe_name(study, t.station_pipe[i]));
    for (const auto* column : {&t.chainage,
                               &t.elevation,
                               &t.steady_head,
                               &t.head_max,
                               &t.pressure_max,
                               &t.time_of_max,
                               &t.head_min,
                               &t.pressure_min,
                               &t.time_of_min,
                               &t.vapour_head,
                               &t.cavity_volume_max,
                               &t.time_with_cavity}) {
      sheet.number(at_or_missing(*column, i));
    }
    sheet.end();
  }
  return sheet.take();
}

std::string events(const Study& study) {
  Sheet sheet;
  sheet.header({"time [s]", "subject", "kind", "what"});
  for (const auto& e : study.events) {
    sheet.number(e.time).text(e.subject).text(e.kind).text(e.what);
    sheet.end();
  }
  return sheet.take();
}

std::string cavities(const answers::Transient& t) {
  Sheet sheet;
  sheet.header({"pipe", "chainage [m]", "opens [s]", "closes [s]", "largest volume [m3]"});
  for (const auto& c : t.cavities) {
    sheet.text(c.pipe);
    sheet.numbers({c.chainage, c.opens, c.closes, c.max_volume});
    sheet.end();
  }
  return sheet.take();
}

std::string limits(const Study& study) {
  Sheet sheet;
  sheet.header({"limit",
                "kind",
                "unit",
                "bound",
                "value",
                "margin",
                "probability least",
                "probability most",
                "probability lower bound",
                "probability upper bound",
                "allowed",
                "confidence",
                "verdict",
                "reason"});
  std::vector<answers::LimitAnswer> rows = study.limits;
  if (study.bands) rows.insert(rows.end(), study.bands->whole_line.begin(), study.bands->whole_line.end());
  for (const auto& l : rows) {
    using Range = std::optional<std::array<double, 2>>;
    const auto side = [](double value, const Range& range, std::size_t i) { return range ? (*range)[i] : value; };
    sheet.text(l.name).text(l.kind).text(l.unit);
    sheet.numbers({l.limit,
                   l.value,
                   l.margin,
                   side(l.probability, l.probability_range, 0),
                   side(l.probability, l.probability_range, 1),
                   side(l.probability_lower, l.probability_lower_range, 0),
                   side(l.probability_upper, l.probability_upper_range, 1),
                   l.at_most,
                   l.confidence});
    sheet.text(l.verdict == answers::Verdict::none ? "" : words_of(l.verdict)).text(l.reason);
    sheet.end();
  }
  return sheet.take();
}

std::string bands(const answers::Bands& b) {
  Sheet sheet;
  sheet.header({"answer",
                "kind",
                "unit",
                "probability",
                "quantile",
                "lower bound",
                "upper bound",
                "central",
                "mean",
                "standard deviation",
                "draws",
                "failed"});
  for (const auto& a : b.answers) {
    for (const auto& q : a.quantiles) {
      sheet.text(a.name).text(a.kind).text(a.unit);
      sheet.numbers({q.probability, q.value, q.lower, q.upper, a.central, a.mean, a.standard_deviation});
      sheet.whole(a.draws).whole(a.failed);
      sheet.end();
    }
  }
  return sheet.take();
}

std::string history_bands(const answers::Bands& b) {
  Sheet sheet;
  sheet.text("place").text("time [s]");
  for (const double p : b.history_probability) sheet.text(fmt::format("head, quantile {} [m]", p));
  sheet.end();
  const std::size_t probes = b.history_probe_name.size(), times = b.history_time.size();
  for (std::size_t k = 0; k < probes; ++k) {
    for (std::size_t i = 0; i < times; ++i) {
      sheet.text(b.history_probe_name[k]).number(b.history_time[i]);
      for (std::size_t p = 0; p < b.history_probability.size(); ++p) {
        sheet.number(at_or_missing(b.history_head, (p * times + i) * probes + k));
      }
      sheet.end();
    }
  }
  return sheet.take();
}

std::string draws(const answers::Bands& b) {
  Sheet sheet;
  sheet.text("draw").text("status");
  for (std::size_t j = 0; j < b.input_name.size(); ++j) {
    sheet.text(with_unit(b.input_name[j], j < b.input_units.size() ? b.input_units[j] : "1"));
  }
  for (const auto& a : b.answers) sheet.text(with_unit(a.name, a.unit));
  sheet.end();
  for (std::size_t run = 0; run < b.run_status.size(); ++run) {
    sheet.whole(static_cast<long long>(run) * b.stride).whole(b.run_status[run]);
    for (std::size_t j = 0; j < b.input_name.size(); ++j) {
      sheet.number(at_or_missing(b.input_value, run * b.input_name.size() + j));
    }
    for (std::size_t k = 0; k < b.answers.size(); ++k) {
      sheet.number(at_or_missing(b.output_value, run * b.answers.size() + k));
    }
    sheet.end();
  }
  return sheet.take();
}

}  // namespace

std::map<std::string, std::string> csv(const Study& study) {
  std::map<std::string, std::string> files;
  if (!study.pipes.empty()) files["pipes.csv"] = pipes(study);
  if (!study.places.empty()) files["places.csv"] = places(study);
  if (study.transient) {
    files["histories.csv"] = histories(*study.transient);
    files["envelope.csv"] = envelope(study, *study.transient);
    files["cavities.csv"] = cavities(*study.transient);
    files["events.csv"] = events(study);
  }
  if (study.limits_shown) files["limits.csv"] = limits(study);
  if (study.bands) {
    files["bands.csv"] = bands(*study.bands);
    if (!study.bands->history_head.empty()) files["history-bands.csv"] = history_bands(*study.bands);
    files["draws.csv"] = draws(*study.bands);
  }
  return files;
}

}  // namespace headband::show
