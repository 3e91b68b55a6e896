// SPDX-License-Identifier: MIT
//
// at: everything a result says for one spot. PLACE is a place, a pipe, or "PIPE @ CHAINAGE" with a unit.
#include "core/answers/study.hpp"
#include "core/base/units.hpp"
#include "core/resultfile/result_file.hpp"
#include "core/show/amounts.hpp"
#include "core/show/json_text.hpp"
#include "core/show/reported.hpp"
#include "core/show/show.hpp"
#include "core/show/words.hpp"
#include "montecarlo/program/arguments.hpp"
#include "montecarlo/program/failure.hpp"
#include "montecarlo/program/guard.hpp"
#include "montecarlo/program/output.hpp"
#include "montecarlo/program/verbs.hpp"

#include <fmt/format.h>
#include <nlohmann/json.hpp>

#include <algorithm>
#include <charconv>
#include <cmath>
#include <string>
#include <vector>

namespace headband::program {
namespace {

/// What a result says for one spot: a place, a whole pipe, or a chainage along a pipe. SI; missing is NaN.
struct SpotAnswer {
  std::string name;
  double elevation = answers::missing, head = answers::missing, pressure = answers::missing;  ///< steady; gauge
  double max_head = answers::missing, max_pressure = answers::missing, time_of_max = answers::missing;
  double min_head = answers::missing, min_pressure = answers::missing, time_of_min = answers::missing;
  double flow = answers::missing, velocity = answers::missing;  ///< steady, of the pipe
  std::vector<const answers::LimitAnswer*> limits;              ///< that name this spot, or everywhere
  std::vector<const answers::BandAnswer*> bands;                ///< sampled answers of this spot
};

using base::Dimension;

/// Straight line through (x, y) at `at`; the end values outside. NaN where there is nothing.
double between(const std::vector<double>& x, const std::vector<double>& y, double at) {
  if (x.empty() || x.size() != y.size()) return answers::missing;
  const auto next = std::ranges::lower_bound(x, at);
  if (next == x.begin()) return y.front();
  if (next == x.end()) return y.back();
  const auto i = static_cast<std::size_t>(next - x.begin());
  const double share = (at - x[i - 1]) / (x[i] - x[i - 1]);
  return y[i - 1] + share * (y[i] - y[i - 1]);
}

/// Columns of the run's sections that belong to one pipe.
struct Sections {
  std::vector<double> chainage, elevation, head_max, head_min, pressure_max, pressure_min, time_of_max, time_of_min;
};

Sections sections_of(const answers::Transient& run, std::size_t pipe) {
  Sections s;
  for (std::size_t i = 0; i < run.station_pipe.size(); ++i) {
    if (run.station_pipe[i] != static_cast<std::int32_t>(pipe)) continue;
    s.chainage.push_back(run.chainage[i]);
    s.elevation.push_back(run.elevation[i]);
    s.head_max.push_back(run.head_max[i]);
    s.head_min.push_back(run.head_min[i]);
    s.pressure_max.push_back(run.pressure_max[i]);
    s.pressure_min.push_back(run.pressure_min[i]);
    s.time_of_max.push_back(run.time_of_max[i]);
    s.time_of_min.push_back(run.time_of_min[i]);
  }
  return s;
}

void fill_point(const answers::Study& study, std::size_t pipe, double at, SpotAnswer& spot) {
  const auto& p = study.pipes[pipe];
  const double weight = study.density * study.gravity;
  spot.elevation = between(p.chainage, p.elevation, at);
  spot.head = between(p.chainage, p.steady_head, at);
  spot.pressure = weight * (spot.head - spot.elevation);
  if (!study.transient) return;
  const Sections s = sections_of(*study.transient, pipe);
  if (s.chainage.empty()) return;
  spot.max_head = between(s.chainage, s.head_max, at);
  spot.min_head = between(s.chainage, s.head_min, at);
  spot.max_pressure = weight * (spot.max_head - spot.elevation);
  spot.min_pressure = weight * (spot.min_head - spot.elevation);
  const auto nearest =
      std::ranges::min_element(s.chainage, {}, [at](double x) { return std::abs(x - at); }) - s.chainage.begin();
  spot.time_of_max = s.time_of_max[static_cast<std::size_t>(nearest)];
  spot.time_of_min = s.time_of_min[static_cast<std::size_t>(nearest)];
}

/// The extremes of a whole pipe: highest and lowest pressure of its sections.
void fill_pipe(const answers::Study& study, std::size_t pipe, SpotAnswer& spot) {
  if (!study.transient) return;
  const Sections s = sections_of(*study.transient, pipe);
  if (s.chainage.empty()) return;
  const auto high = static_cast<std::size_t>(std::ranges::max_element(s.pressure_max) - s.pressure_max.begin());
  const auto low = static_cast<std::size_t>(std::ranges::min_element(s.pressure_min) - s.pressure_min.begin());
  spot.max_head = s.head_max[high];
  spot.max_pressure = s.pressure_max[high];
  spot.time_of_max = s.time_of_max[high];
  spot.min_head = s.head_min[low];
  spot.min_pressure = s.pressure_min[low];
  spot.time_of_min = s.time_of_min[low];
}

double chainage_of(const std::string& text, const answers::PipeAnswer& pipe) {
  double number = 0.0;
  const auto [end, error] = std::from_chars(text.data(), text.data() + text.size(), number);
  std::string_view rest(end, static_cast<std::size_t>(text.data() + text.size() - end));
  while (!rest.empty() && rest.front() == ' ') rest.remove_prefix(1);
  const auto unit = base::find_unit(rest);
  if (error != std::errc() || !unit || unit->unit.kind != base::UnitKind::length) {
    throw UsageError(fmt::format("'{}' is no chainage; write it like \"{} @ 900 m\"", text, pipe.name));
  }
  const double at = base::to_si(unit->unit, number);
  if (!(at >= 0.0 && at <= pipe.length)) {
    throw UsageError(fmt::format("{} ends at {}; {} is not on it",
                                 pipe.name,
                                 base::shown(pipe.length, Dimension::length, base::UnitFamily::si),
                                 text));
  }
  return at;
}

void fill(const answers::Study& study, const std::string& place, SpotAnswer& spot) {
  for (const auto& p : study.places) {
    if (p.name != place) continue;
    spot.elevation = p.elevation;
    spot.head = p.head;
    spot.pressure = p.pressure;
    spot.max_head = p.max_head;
    spot.max_pressure = p.max_pressure;
    spot.time_of_max = p.time_of_max;
    spot.min_head = p.min_head;
    spot.min_pressure = p.min_pressure;
    spot.time_of_min = p.time_of_min;
    return;
  }
  const auto sign = place.find(" @ ");
  const std::string name = place.substr(0, sign);
  std::vector<std::string> known;
  for (const auto& p : study.places) known.push_back(p.name);
  for (std::size_t i = 0; i < study.pipes.size(); ++i) {
    const auto& pipe = study.pipes[i];
    known.push_back(pipe.name);
    if (pipe.name != name) continue;
    spot.flow = pipe.flow;
    spot.velocity = pipe.velocity;
    if (sign == std::string::npos) {
      fill_pipe(study, i, spot);
    } else {
      fill_point(study, i, chainage_of(place.substr(sign + 3), pipe), spot);
    }
    return;
  }
  const std::string hint = did_you_mean(name, known);
  throw UsageError(fmt::format("the result knows no place or pipe '{}'{}",
                               name,
                               hint.empty() ? fmt::format("; there are: {}", fmt::join(known, ", ")) : hint));
}

std::string band_line(const answers::Study& study, const answers::BandAnswer& answer, const show::Amounts& amounts) {
  const Dimension dimension = show::dimension_of_kind(answer.kind);
  const double tail = (1.0 - study.bands->coverage) / 2.0;
  const auto at = [&](double probability) {
    const auto near = std::ranges::min_element(
        answer.quantiles, {}, [&](const answers::QuantileAnswer& q) { return std::abs(q.probability - probability); });
    return near == answer.quantiles.end() ? answers::missing : near->value;
  };
  return fmt::format("  {}: median {}, {} band {} to {} ({} draws, {} failed)\n",
                     answer.name,
                     amounts.of(at(0.5), dimension),
                     show::percent(study.bands->coverage),
                     amounts.of(at(tail), dimension),
                     amounts.of(at(1.0 - tail), dimension),
                     answer.draws,
                     answer.failed);
}

SpotAnswer spot_answer(const answers::Study& study, const std::string& place) {
  SpotAnswer spot;
  spot.name = place;
  fill(study, place, spot);
  for (const auto& limit : study.limits) {
    if (limit.where == place || limit.where.empty()) spot.limits.push_back(&limit);
  }
  if (study.bands) {
    for (const auto& answer : study.bands->answers) {
      if (answer.where == place) spot.bands.push_back(&answer);
    }
  }
  return spot;
}

std::string spot_text(const answers::Study& study, const SpotAnswer& spot, const std::string& units) {
  const show::Amounts amounts(study, units);
  std::string text = spot.name + "\n";
  if (std::isfinite(spot.head)) {
    text += fmt::format("  steady: {} (head {}, elevation {})\n",
                        amounts.of(spot.pressure, Dimension::pressure),
                        amounts.of(spot.head, Dimension::length),
                        amounts.of(spot.elevation, Dimension::length));
  }
  if (std::isfinite(spot.flow)) {
    text += fmt::format("  steady flow: {}, {}\n",
                        amounts.of(spot.flow, Dimension::flow),
                        amounts.of(spot.velocity, Dimension::velocity));
  }
  if (std::isfinite(spot.max_pressure)) {
    text += fmt::format("  highest: {} at {}\n  lowest:  {} at {}\n",
                        amounts.of(spot.max_pressure, Dimension::pressure),
                        amounts.of(spot.time_of_max, Dimension::time),
                        amounts.of(spot.min_pressure, Dimension::pressure),
                        amounts.of(spot.time_of_min, Dimension::time));
    const std::string vapour = show::vapour_remark(study);
    if (!vapour.empty()) text += fmt::format("  {}\n", vapour);
  }
  for (const auto* answer : spot.bands) text += band_line(study, *answer, amounts);
  for (const auto* limit : spot.limits) {
    const Dimension dimension = show::dimension_of_kind(limit->kind);
    const std::string chance = show::chance_words(*limit);
    text += fmt::format("  limit {} ({}): margin {}{}: {}\n",
                        limit->name,
                        amounts.of(limit->limit, dimension),
                        amounts.width(limit->margin, dimension, 3),
                        chance.empty() ? "" : ", not kept in " + chance,
                        show::words_of(limit->verdict));
  }
  return text;
}

std::string spot_json(const answers::Study& study, const SpotAnswer& spot) {
  using Json = nlohmann::ordered_json;
  const auto number = [](double value) { return std::isfinite(value) ? Json(value) : Json(nullptr); };
  Json object = {{"headband", study.provenance.version},
                 {"verb", "at"},
                 {"case", show::file_name_of(study.provenance.case_file)},
                 {"place", spot.name},
                 {"elevation_m", number(spot.elevation)},
                 {"head_m", number(spot.head)},
                 {"pressure_Pa", number(spot.pressure)},
                 {"flow_m3_per_s", number(spot.flow)},
                 {"velocity_m_per_s", number(spot.velocity)}};
  if (study.transient) {
    object["max_head_m"] = number(spot.max_head);
    object["max_pressure_Pa"] = number(spot.max_pressure);
    object["time_of_max_s"] = number(spot.time_of_max);
    object["min_head_m"] = number(spot.min_head);
    object["min_pressure_Pa"] = number(spot.min_pressure);
    object["time_of_min_s"] = number(spot.time_of_min);
  }
  Json limits = Json::array();
  for (const auto* limit : spot.limits) {
    limits.push_back(
        {{"name", limit->name},
         {"kind", limit->kind},
         {"unit", limit->unit},
         {"limit", number(limit->limit)},
         {"value", number(limit->value)},
         {"margin", number(limit->margin)},
         {"probability", number(limit->probability)},
         {"probability_lower", number(limit->probability_lower)},
         {"probability_upper", number(limit->probability_upper)},
         {"verdict", limit->verdict == answers::Verdict::none ? Json(nullptr) : Json(show::words_of(limit->verdict))}});
  }
  object["limits"] = std::move(limits);
  Json answers = Json::object();
  for (const auto* answer : spot.bands) {
    Json quantiles = Json::object();
    for (const auto& q : answer->quantiles) {
      quantiles[show::shortest_decimal(q.probability)] =
          Json::array({number(q.value), number(q.lower), number(q.upper)});
    }
    answers[answer->name] = {{"unit", answer->unit},
                             {"central", number(answer->central)},
                             {"mean", number(answer->mean)},
                             {"sd", number(answer->standard_deviation)},
                             {"quantiles", std::move(quantiles)}};
  }
  object["answers"] = std::move(answers);
  return show::json_text(object);
}

}  // namespace

ExitCode verb_at(const Options& options) {
  return guarded(options.words.front(), [&] {
    return told(options, [&] {
      const answers::Study study = resultfile::read(options.words.front());
      const SpotAnswer spot = spot_answer(study, options.words[1]);
      print(options.json ? spot_json(study, spot) : spot_text(study, spot, options.units));
      return ExitCode::done;
    });
  });
}

}  // namespace headband::program
