// SPDX-License-Identifier: MIT
#include "core/report/figures.hpp"

#include "core/report/bars.hpp"
#include "core/report/markup.hpp"

#include "core/show/reported.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <array>
#include <cmath>
#include <map>
#include <set>
#include <tuple>

namespace headband::report {
namespace {

using answers::Study;

constexpr std::array<Ink, 6> inks{Ink::blue, Ink::vermilion, Ink::green, Ink::purple, Ink::black, Ink::earth};
constexpr std::array<Dash, 5> dashes{Dash::solid, Dash::dashed, Dash::dash_dot, Dash::long_dashed, Dash::dotted};

bool any_finite(const std::vector<double>& values) {
  return std::any_of(values.begin(), values.end(), [](double v) { return std::isfinite(v); });
}

/// Curves of one abscissa gathered from points that stand at different places of it.
class Gathering {
 public:
  void put(const std::string& name, double x, double y) {
    if (!std::isfinite(x) || !std::isfinite(y)) return;
    const auto near = at_.lower_bound(x - same_place);
    const double place = near != at_.end() && *near <= x + same_place ? *near : *at_.insert(x).first;
    points_[name][place] = y;
  }
  [[nodiscard]] std::vector<double> abscissa() const { return {at_.begin(), at_.end()}; }
  [[nodiscard]] bool has(const std::string& name) const { return points_.contains(name); }
  [[nodiscard]] std::vector<double> column(const std::string& name) const {
    std::vector<double> y;
    const auto& points = points_.at(name);
    for (const double x : at_) {
      const auto found = points.find(x);
      y.push_back(found == points.end() ? answers::missing : found->second);
    }
    return y;
  }

 private:
  /// Chainages nearer than this are one place: a share of a length times the length is off by a rounding [m].
  static constexpr double same_place = 1e-6;
  std::map<std::string, std::map<double, double>> points_;
  std::set<double> at_;
};

/// Height of a gauge pressure in metres of the liquid.
double height(const Study& study, double pressure) { return pressure / (study.density * study.gravity); }

void put_stations(const Study& study, std::size_t pipe, Gathering& points) {
  if (!study.transient) return;
  const auto& t = *study.transient;
  const auto row = [](const std::vector<double>& values, std::size_t i) {
    return i < values.size() ? values[i] : answers::missing;
  };
  for (std::size_t i = 0; i < t.station_pipe.size(); ++i) {
    if (t.station_pipe[i] != static_cast<std::int32_t>(pipe)) continue;
    const double x = row(t.chainage, i);
    points.put("steady", x, row(t.steady_head, i));
    points.put("highest", x, row(t.head_max, i));
    points.put("lowest", x, row(t.head_min, i));
    points.put("vapour line", x, row(t.vapour_head, i));
  }
}

void put_bands(const Study& study, std::size_t pipe, Gathering& points) {
  if (!study.bands || study.bands->profile_probability.size() < 2) return;
  const auto& b = *study.bands;
  const std::size_t stations = b.profile_station_pipe.size();
  const std::size_t last = b.profile_probability.size() - 1;
  for (std::size_t i = 0; i < stations; ++i) {
    if (b.profile_station_pipe[i] != static_cast<std::int32_t>(pipe)) continue;
    const double x = b.profile_share[i] * study.pipes[pipe].length;
    for (const auto& [name, rank] : {std::pair{"low", std::size_t{0}}, std::pair{"high", last}}) {
      if (rank * stations + i < b.profile_head_max.size())
        points.put(std::string("highest ") + name, x, b.profile_head_max[rank * stations + i]);
      if (rank * stations + i < b.profile_head_min.size())
        points.put(std::string("lowest ") + name, x, b.profile_head_min[rank * stations + i]);
    }
  }
}

/// Limits that hold along the whole pipe become lines over its profile; at one place, marked points.
void add_limits(const Study& study, std::size_t pipe, Gathering& points, std::vector<Curve>& lines, Plot& plot) {
  const auto& p = study.pipes[pipe];
  for (const auto& limit : study.limits) {
    const bool pressure = limit.unit == "Pa" && (limit.kind == "highest_pressure" || limit.kind == "lowest_pressure");
    if (!std::isfinite(limit.limit) || limit.name == p.name + " rating") continue;
    const bool whole = limit.where.empty() || limit.where == p.name;
    if (limit.kind == "head" && limit.where == p.name) plot.levels.push_back({limit.name, limit.limit});
    if (!pressure || p.chainage.empty()) continue;
    if (whole) {
      const std::string name = limit.name;
      for (std::size_t i = 0; i < p.chainage.size(); ++i)
        points.put(name, p.chainage[i], p.elevation[i] + height(study, limit.limit));
      if (points.has(name)) lines.push_back({name, {}, Ink::black, Dash::dash_dot, Shape::line, 1.3});
    } else if (limit.where == p.from || limit.where == p.to) {
      const std::size_t end = limit.where == p.from ? 0 : p.chainage.size() - 1;
      plot.points.push_back({limit.name, p.chainage[end], p.elevation[end] + height(study, limit.limit), Ink::black});
    }
  }
}

Plot profile(const Study& study, std::size_t pipe) {
  const auto& p = study.pipes[pipe];
  Plot plot;
  plot.id = "profile " + p.name;
  plot.title = "Heads along " + p.name;
  plot.x = {"chainage from " + p.from, Shown::chainage};
  plot.y = {"head", Shown::head};
  plot.height = 380;

  Gathering points;
  for (std::size_t i = 0; i < p.chainage.size(); ++i) {
    if (i < p.elevation.size()) points.put("ground", p.chainage[i], p.elevation[i]);
    if (i < p.elevation.size()) points.put("rating", p.chainage[i], p.elevation[i] + height(study, p.rating));
    if (!study.transient && i < p.steady_head.size()) points.put("steady", p.chainage[i], p.steady_head[i]);
  }
  put_stations(study, pipe, points);
  put_bands(study, pipe, points);
  std::vector<Curve> lines;
  add_limits(study, pipe, points, lines, plot);

  std::vector<Curve> wanted{{"ground", {}, Ink::earth, Dash::solid, Shape::ground, 1.4},
                            {"vapour line", {}, Ink::purple, Dash::dotted, Shape::line, 1.6},
                            {"rating", {}, Ink::black, Dash::long_dashed, Shape::line, 1.4},
                            {"highest low", {}, Ink::vermilion, Dash::dotted, Shape::line, 0.8},
                            {"highest high", {}, Ink::vermilion, Dash::dotted, Shape::line, 0.8},
                            {"lowest low", {}, Ink::blue, Dash::dotted, Shape::line, 0.8},
                            {"lowest high", {}, Ink::blue, Dash::dotted, Shape::line, 0.8},
                            {"steady", {}, Ink::green, Dash::dash_dot, Shape::line, 1.6},
                            {"highest", {}, Ink::vermilion, Dash::solid, Shape::line, 2.0},
                            {"lowest", {}, Ink::blue, Dash::dashed, Shape::line, 2.0}};
  wanted.insert(wanted.end(), lines.begin(), lines.end());
  plot.abscissa = points.abscissa();
  std::map<std::string, std::size_t> index;
  for (Curve& curve : wanted) {
    if (!points.has(curve.name)) continue;
    index[curve.name] = plot.curves.size();
    curve.y = points.column(curve.name);
    plot.curves.push_back(curve);
  }
  if (study.bands && study.bands->profile_probability.size() >= 2) {
    const std::string low = percent(study.bands->profile_probability.front());
    const std::string high = percent(study.bands->profile_probability.back());
    for (const auto& [name, ink] :
         {std::pair{std::string("highest"), Ink::vermilion}, std::pair{std::string("lowest"), Ink::blue}}) {
      if (!index.contains(name + " low") || !index.contains(name + " high")) continue;
      plot.fills.push_back({"band of the " + name, index[name + " low"], index[name + " high"], ink});
      plot.curves[index[name + " low"]].name = name + ", " + low;
      plot.curves[index[name + " high"]].name = name + ", " + high;
    }
    plot.message =
        fmt::format("Shaded: {} to {} of the draws at each section. Look where a band touches a line.", low, high);
  } else if (study.transient) {
    plot.message =
        "Highest and lowest head at each computed section, each at its own time. Look where they touch a line.";
  } else {
    plot.message = "Ground and steady head.";
  }
  for (const auto& [name, extreme, ink] : {std::tuple{"highest pressure", &study.highest, Ink::vermilion},
                                           std::tuple{"lowest pressure", &study.lowest, Ink::blue}})
    if (*extreme && (*extreme)->pipe == p.name)
      plot.points.push_back({name, (*extreme)->chainage, (*extreme)->head, ink});
  set_ranges(plot);
  return plot;
}

std::string history_message(std::size_t rows) {
  return rows <= rows_carried_whole
             ? "One run at the written values; every computed step."
             : "One run at the written values; thinned so that every peak stays. The result file holds every step.";
}

/// Six curves a plot, no two alike in colour and dash.
void dress(Curve& curve, std::size_t i) {
  curve.ink = inks[i % inks.size()];
  curve.dash = dashes[i % dashes.size()];
}

/// One column of a row-major table.
std::vector<double> column_of(const std::vector<double>& table,
                              std::size_t rows,
                              std::size_t columns,
                              std::size_t column) {
  std::vector<double> values;
  values.reserve(rows);
  for (std::size_t row = 0; row < rows; ++row) {
    const std::size_t cell = row * columns + column;
    values.push_back(cell < table.size() ? table[cell] : answers::missing);
  }
  return values;
}

/// Deals curves out to plots of `most` (six at most).
std::vector<Plot> dealt(const Plot& pattern, std::vector<Curve> curves, std::size_t most = inks.size()) {
  std::vector<Plot> plots;
  for (std::size_t i = 0; i < curves.size(); ++i) {
    if (i % most == 0) {
      plots.push_back(pattern);
      if (i > 0) {
        const std::string part = std::to_string(plots.size());
        plots.back().id += " " + part;
        plots.back().title += ", part " + part;
      }
    }
    dress(curves[i], i % most);
    plots.back().curves.push_back(std::move(curves[i]));
  }
  return plots;
}

/// Bands over time of one study, by the name of a place.
class HistoryBands {
 public:
  /// Shaded bands hide each other: no more curves than these share a plot.
  static constexpr std::size_t most_curves = 3;

  explicit HistoryBands(const Study& study) {
    if (!study.bands || study.bands->history_probability.size() < 2) return;
    const auto& b = *study.bands;
    if (b.history_head.size() != b.history_probability.size() * b.history_time.size() * b.history_probe_name.size())
      return;
    bands_ = &b;
  }
  [[nodiscard]] bool any() const { return bands_ != nullptr; }
  [[nodiscard]] std::string words() const {
    return fmt::format(
        " Shaded: {} to {} of the {}, at each of {} times by itself.",
        percent(bands_->history_probability.front()),
        percent(bands_->history_probability.back()),
        bands_->history_draws < bands_->draws ? fmt::format("first {} draws", bands_->history_draws) : "draws",
        bands_->history_time.size());
  }

  /// Puts the bands of the plot's curves behind them. Their times are some of the plot's.
  void shade(Plot& plot) const {
    std::vector<Curve> lines;
    lines.swap(plot.curves);
    for (const Curve& line : lines) {
      const auto found = std::find(bands_->history_probe_name.begin(), bands_->history_probe_name.end(), line.name);
      if (found == bands_->history_probe_name.end()) continue;
      const auto probe = static_cast<std::size_t>(found - bands_->history_probe_name.begin());
      const std::size_t lower = plot.curves.size();
      for (const std::size_t rank : {std::size_t{0}, bands_->history_probability.size() - 1})
        plot.curves.push_back({line.name + ", " + percent(bands_->history_probability[rank]),
                               edge(plot.abscissa, rank, probe),
                               line.ink,
                               Dash::dotted,
                               Shape::line,
                               0.8});
      if (any_finite(plot.curves[lower].y))
        plot.fills.push_back({"band of " + line.name, lower, lower + 1, line.ink});
      else
        plot.curves.resize(lower);
    }
    plot.curves.insert(plot.curves.end(), lines.begin(), lines.end());
  }

 private:
  /// One quantile of a place at the times of the plot, missing at the times between.
  [[nodiscard]] std::vector<double> edge(const std::vector<double>& abscissa,
                                         std::size_t rank,
                                         std::size_t probe) const {
    const auto& times = bands_->history_time;
    std::vector<double> y(abscissa.size(), answers::missing);
    for (std::size_t row = 0, i = 0; row < abscissa.size() && i < times.size(); ++row) {
      while (i < times.size() && times[i] < abscissa[row]) ++i;
      if (i < times.size() && times[i] == abscissa[row])
        y[row] = bands_->history_head[(rank * times.size() + i) * bands_->history_probe_name.size() + probe];
    }
    return y;
  }

  const answers::Bands* bands_ = nullptr;
};

void add_limit_levels(const Study& study, Plot& plot) {
  for (const auto& limit : study.limits) {
    if (limit.kind != "highest_pressure" && limit.kind != "lowest_pressure") continue;
    const auto at_probe = [&](const Curve& curve) { return limit.where.empty() || curve.name == limit.where; };
    if (std::any_of(plot.curves.begin(), plot.curves.end(), at_probe))
      plot.levels.push_back({limit.name,
                             limit.limit,
                             false,
                             Ink::black,
                             plot.levels.size() % 2 == 0 ? Dash::long_dashed : Dash::dash_dot});
  }
}

}  // namespace

std::vector<Plot> profiles(const Study& study, std::size_t most) {
  std::vector<std::size_t> order;
  const auto add = [&](std::size_t i) {
    if (order.size() < most && std::find(order.begin(), order.end(), i) == order.end()) order.push_back(i);
  };
  for (const auto* extreme : {&study.highest, &study.lowest})
    for (std::size_t i = 0; i < study.pipes.size(); ++i)
      if (*extreme && (*extreme)->pipe == study.pipes[i].name) add(i);
  for (std::size_t i = 0; i < study.pipes.size(); ++i) add(i);
  std::sort(order.begin(), order.end());
  std::vector<Plot> plots;
  for (const std::size_t i : order) {
    plots.push_back(profile(study, i));
    if (plots.back().abscissa.size() < 2) plots.pop_back();
  }
  return plots;
}

std::vector<Plot> histories(const Study& study) {
  std::vector<Plot> plots;
  if (!study.transient || study.transient->time.size() < 2) return plots;
  const auto& t = *study.transient;
  const HistoryBands bands(study);
  const auto kind = [&](const char* id, const char* title, PlotAxis axis, const std::vector<double>& table) {
    Plot pattern;
    pattern.id = id;
    pattern.title = title;
    pattern.x = {"time", Shown::time};
    pattern.y = std::move(axis);
    pattern.abscissa = t.time;
    pattern.message = history_message(t.time.size());
    std::vector<Curve> curves;
    for (std::size_t i = 0; i < t.probe_name.size(); ++i) {
      std::vector<double> y = column_of(table, t.time.size(), t.probe_name.size(), i);
      if (any_finite(y)) curves.push_back({t.probe_name[i], std::move(y)});
    }
    const bool shaded = bands.any() && pattern.y.shown == Shown::head;
    if (shaded) pattern.message += bands.words();
    for (Plot& plot : dealt(pattern, std::move(curves), shaded ? HistoryBands::most_curves : inks.size())) {
      if (plot.y.shown == Shown::pressure) add_limit_levels(study, plot);
      if (shaded) bands.shade(plot);
      set_ranges(plot);
      plots.push_back(std::move(plot));
    }
  };
  kind("history pressure", "Pressure in time", {"pressure", Shown::pressure}, t.probe_pressure);
  kind("history head", "Head in time", {"head", Shown::head}, t.probe_head);
  kind("history flow", "Flow in time", {"flow", Shown::flow}, t.probe_flow);
  return plots;
}

std::vector<Plot> device_series(const Study& study) {
  std::vector<Plot> plots;
  if (!study.transient || study.transient->time.size() < 2) return plots;
  const auto& t = *study.transient;
  std::vector<std::string> quantities;
  std::map<std::string, std::vector<Curve>> curves;
  std::map<std::string, std::string> units;
  for (std::size_t i = 0; i < t.series_name.size(); ++i) {
    const std::size_t space = t.series_name[i].rfind(' ');
    const std::string quantity = space == std::string::npos ? t.series_name[i] : t.series_name[i].substr(space + 1);
    const std::string device = space == std::string::npos ? t.series_name[i] : t.series_name[i].substr(0, space);
    std::vector<double> y = column_of(t.series, t.time.size(), t.series_name.size(), i);
    if (!any_finite(y)) continue;
    if (!curves.contains(quantity)) quantities.push_back(quantity);
    curves[quantity].push_back({device, std::move(y)});
    units[quantity] = i < t.series_units.size() ? t.series_units[i] : "";
  }
  for (const std::string& quantity : quantities) {
    Plot pattern;
    std::string words = quantity;
    std::replace(words.begin(), words.end(), '_', ' ');
    pattern.id = "device " + words;
    pattern.title = "Devices: " + words;
    pattern.x = {"time", Shown::time};
    pattern.y = {words, shown_of_unit(units[quantity], quantity)};
    pattern.abscissa = t.time;
    pattern.message = history_message(t.time.size());
    pattern.height = 250;
    for (Plot& plot : dealt(pattern, std::move(curves[quantity]))) {
      set_ranges(plot);
      plots.push_back(std::move(plot));
    }
  }
  return plots;
}

const answers::LimitAnswer* limit_of(const Study& study, const answers::BandAnswer& answer) {
  for (const auto& limit : study.limits)
    if (limit.name == answer.name && limit.unit == answer.unit) return &limit;
  for (const auto& limit : study.limits)
    if (limit.kind == answer.kind && limit.unit == answer.unit && limit.where == answer.where) return &limit;
  return nullptr;
}

Plot density(const Study& study, std::size_t index) {
  Plot plot;
  if (!study.bands || index >= study.bands->answers.size()) return plot;
  const auto& bands = *study.bands;
  const auto& answer = bands.answers[index];
  const std::size_t columns = bands.answers.size();
  std::vector<double> draws;
  for (std::size_t cell = index; cell < bands.output_value.size(); cell += columns)
    if (std::isfinite(bands.output_value[cell])) draws.push_back(bands.output_value[cell]);
  if (draws.size() < 20) return plot;
  std::sort(draws.begin(), draws.end());

  plot.id = "density " + answer.name;
  plot.title = "How " + answer.name + " spreads";
  const auto count = static_cast<double>(draws.size());
  const auto quartile = [&](double share) { return draws[static_cast<std::size_t>(share * (count - 1.0))]; };
  const double low = draws.front(), high = draws.back();
  const double reach = std::max({high - low, least_reach * std::abs(high), 1e-9});
  // Step of the histogram: Freedman & Diaconis (1981), 2 IQR n^(-1/3), from memory; kept between 8 and 72 steps.
  const double rule = 2.0 * (quartile(0.75) - quartile(0.25)) / std::cbrt(count);
  const int steps = std::clamp(rule > 0.0 ? static_cast<int>(std::ceil(reach / rule)) : 8, 8, 72);
  std::vector<double> shares(static_cast<std::size_t>(steps) + 1, 0.0);
  for (const double draw : draws) {
    const int step = std::min(steps - 1, static_cast<int>((draw - low) / reach * steps));
    shares[static_cast<std::size_t>(step)] += 1.0 / count;
  }
  shares.back() = shares[shares.size() - 2];
  for (int i = 0; i <= steps; ++i) plot.abscissa.push_back(low + reach * i / steps);
  std::string words = answer.kind.empty() ? answer.name : answer.kind;
  std::replace(words.begin(), words.end(), '_', ' ');
  plot.x = {words, shown_of_unit(answer.unit, answer.kind)};
  plot.y = {"share of the draws in each step", Shown::share};
  plot.curves.push_back({"draws", std::move(shares), Ink::blue, Dash::solid, Shape::step, 1.2});

  const double end = 0.5 * (1.0 - bands.coverage);
  for (const auto& q : answer.quantiles) {
    const bool middle = std::abs(q.probability - 0.5) < 1e-9;
    const bool ends = std::abs(q.probability - end) < 1e-9 || std::abs(q.probability - (1.0 - end)) < 1e-9;
    if (middle || ends)
      plot.levels.push_back(
          {middle ? "median" : percent(q.probability), q.value, true, Ink::blue, middle ? Dash::solid : Dash::dashed});
  }
  if (std::isfinite(answer.central))
    plot.levels.push_back({"one run", answer.central, true, Ink::green, Dash::dash_dot});
  plot.x.low = low;
  plot.x.high = low + reach;
  if (const auto* limit = limit_of(study, answer); limit != nullptr && std::isfinite(limit->limit)) {
    const bool over_fails = fails_over(*limit);
    // A limit far outside the draws would squeeze them to a line; it is told in the table instead.
    if (limit->limit > low - reach && limit->limit < high + reach) {
      plot.x.low = std::min(plot.x.low, limit->limit - 0.05 * reach);
      plot.x.high = std::max(plot.x.high, limit->limit + 0.05 * reach);
      plot.levels.push_back({"limit", limit->limit, true, Ink::vermilion, Dash::long_dashed});
      plot.stretches.push_back({over_fails ? "over the limit" : "under the limit",
                                over_fails ? limit->limit : plot.x.low,
                                over_fails ? plot.x.high : limit->limit});
    }
  }
  plot.message = fmt::format("{} finished draws{}.{}",
                             draws.size(),
                             bands.stride > 1 ? fmt::format(" (every {}th is drawn)", bands.stride) : "",
                             answer.modes > 1 ? fmt::format(" {} humps: read them apart.", answer.modes) : "");
  plot.height = 270;
  set_ranges(plot);
  return plot;
}

std::vector<Plot> scatters(const Study& study, std::size_t index, std::size_t most) {
  std::vector<Plot> plots;
  if (!study.bands || index >= study.bands->answers.size()) return plots;
  const auto& bands = *study.bands;
  const auto& answer = bands.answers[index];
  constexpr std::size_t dots = 2'000;
  const std::size_t inputs = bands.input_name.size(), outputs = bands.answers.size();
  const std::size_t rows =
      inputs == 0 ? 0 : std::min(bands.input_value.size() / inputs, bands.output_value.size() / outputs);
  const auto ranked = show::ranked_unknowns(answer);
  for (const auto& unknown : ranked) {
    const auto found = std::find(bands.input_name.begin(), bands.input_name.end(), unknown.input);
    if (found == bands.input_name.end() || plots.size() == most) continue;
    const auto column = static_cast<std::size_t>(found - bands.input_name.begin());
    std::vector<std::pair<double, double>> pairs;
    for (std::size_t row = 0; row < rows && pairs.size() < dots; ++row) {
      const std::pair pair{bands.input_value[row * inputs + column], bands.output_value[row * outputs + index]};
      if (std::isfinite(pair.first) && std::isfinite(pair.second)) pairs.push_back(pair);
    }
    if (pairs.size() < 20) continue;
    std::sort(pairs.begin(), pairs.end());
    Plot plot;
    plot.id = "scatter " + answer.name + " by " + unknown.input;
    plot.title = answer.name + " against " + unknown.input;
    plot.message = fmt::format("The first {} finished draws; share of the variance alone {}, with others {}.",
                               pairs.size(),
                               figures(unknown.first, 2),
                               figures(unknown.total, 2));
    const std::string unit = column < bands.input_units.size() ? bands.input_units[column] : "";
    Shown shown = shown_of_unit(unit, unknown.input);
    if (shown == Shown::head && std::abs(pairs.back().first) < 1.0) shown = Shown::diameter;
    const bool bare = shown == Shown::number && !unit.empty() && unit != "1";
    plot.x = {bare ? unknown.input + ", " + unit : unknown.input, shown};
    std::string words = answer.kind.empty() ? answer.name : answer.kind;
    std::replace(words.begin(), words.end(), '_', ' ');
    plot.y = {words, shown_of_unit(answer.unit, answer.kind)};
    Curve curve{"draws", {}, Ink::blue, Dash::solid, Shape::dots, 1.6};
    for (const auto& [x, y] : pairs) {
      plot.abscissa.push_back(x);
      curve.y.push_back(y);
    }
    plot.curves.push_back(std::move(curve));
    if (const auto* limit = limit_of(study, answer); limit != nullptr && std::isfinite(limit->limit)) {
      const auto [low, high] = std::minmax_element(plot.curves[0].y.begin(), plot.curves[0].y.end());
      const double reach = *high - *low;
      if (limit->limit > *low - reach && limit->limit < *high + reach)
        plot.levels.push_back({"limit", limit->limit, false, Ink::vermilion, Dash::long_dashed});
    }
    plot.height = 270;
    set_ranges(plot);
    plots.push_back(std::move(plot));
  }
  return plots;
}

}  // namespace headband::report
