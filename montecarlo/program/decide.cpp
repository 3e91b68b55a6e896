// SPDX-License-Identifier: MIT
#include "montecarlo/program/decide.hpp"

#include "core/base/units.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>

namespace headband::program {
namespace {

using answers::LimitAnswer;
using answers::Study;
using answers::Verdict;
using base::Dimension;

Dimension dimension_of_kind(const std::string& kind) {
  if (kind == "pressure_drop") return Dimension::pressure_difference;
  if (kind == "highest_pressure" || kind == "lowest_pressure") return Dimension::pressure;
  if (kind == "flow") return Dimension::flow;
  if (kind == "velocity") return Dimension::velocity;
  return Dimension::length;
}

class Words {
 public:
  explicit Words(const Study& study) : family_(study.units_shown == "us" ? base::UnitFamily::us : base::UnitFamily::si) {}
  [[nodiscard]] std::string of(double value, Dimension dimension) const { return base::shown(value, dimension, family_); }

 private:
  base::UnitFamily family_;
};

/// A probability as a share of draws: two digits, and words at the ends.
std::string percent(double share) {
  if (!std::isfinite(share)) return "-";
  return base::significant(100.0 * share, share < 0.1 ? 2 : 3) + " %";
}

const LimitAnswer* worst_limit(const Study& study) {
  const auto rank = [](Verdict v) { return v == Verdict::not_ok ? 0 : v == Verdict::cannot_tell ? 1 : v == Verdict::ok ? 2 : 3; };
  const auto worst = std::ranges::min_element(study.limits, {}, [&](const LimitAnswer& l) { return rank(l.verdict); });
  return worst == study.limits.end() ? nullptr : &*worst;
}

std::string verdict_words(Verdict verdict) {
  switch (verdict) {
    case Verdict::ok: return "OK";
    case Verdict::not_ok: return "NOT OK";
    case Verdict::cannot_tell: return "CANNOT TELL";
    case Verdict::none: return "";
  }
  return "";
}

std::string limit_words(const LimitAnswer& limit, const Words& words) {
  const Dimension dimension = dimension_of_kind(limit.kind);
  const std::string bound = words.of(limit.limit, dimension), value = words.of(limit.value, dimension);
  std::string text;
  if (std::isfinite(limit.probability)) {
    text = fmt::format("Limit {} ({}) is not kept in {} of the draws (between {} and {} at {} confidence", limit.name, bound,
                       percent(limit.probability), percent(limit.probability_lower), percent(limit.probability_upper),
                       percent(limit.confidence));
    if (std::isfinite(limit.at_most)) text += fmt::format("; {} allowed", percent(limit.at_most));
    text += fmt::format("); the single run gives {}", value);
  } else if (limit.probability_range) {
    const auto& range = *limit.probability_range;
    text = fmt::format("Limit {} ({}) is not kept in {} to {} of the draws, by a range that is not chance; the single run gives {}",
                       limit.name, bound, percent(range[0]), percent(range[1]), value);
  } else {
    text = fmt::format("Limit {} ({}): the run gives {}", limit.name, bound, value);
  }
  if (!limit.reason.empty()) text += fmt::format(" ({})", limit.reason);
  return text + ": " + verdict_words(limit.verdict) + ".";
}

std::string extreme_words(const Study& study, const Words& words) {
  const auto part = [&](const char* name, const answers::Extreme& e) {
    return fmt::format("{} pressure {} in {} at {}, {} s", name, words.of(e.pressure, Dimension::pressure), e.pipe,
                       words.of(e.chainage, Dimension::length), base::significant(e.time, 3));
  };
  return part("Highest", *study.highest) + "; " + part("lowest", *study.lowest) + ".";
}

std::string band_words(const Study& study, const Words& words) {
  const auto& bands = *study.bands;
  if (bands.answers.empty()) return "";
  const auto& a = bands.answers.front();
  if (a.quantiles.empty()) return "";
  const Dimension dimension = dimension_of_kind(a.kind);
  const double low = (1.0 - bands.coverage) / 2.0;
  const auto at = [&](double probability) {
    const auto nearest = std::ranges::min_element(
        a.quantiles, {}, [&](const answers::QuantileAnswer& q) { return std::abs(q.probability - probability); });
    return words.of(nearest->value, dimension);
  };
  return fmt::format("{}: median {}, {} band {} to {}, {} draws.", a.name, at(0.5), percent(bands.coverage), at(low),
                     at(1.0 - low), a.draws);
}

std::string steady_words(const Study& study, const Words& words) {
  const auto largest = std::ranges::max_element(
      study.pipes, {}, [](const answers::PipeAnswer& p) { return std::abs(p.pressure_drop); });
  if (largest == study.pipes.end()) return "";
  return fmt::format("Flow {} in {}; pressure drop {} from {} to {}.", words.of(largest->flow, Dimension::flow), largest->name,
                     words.of(largest->pressure_drop, Dimension::pressure_difference), largest->from, largest->to);
}

}  // namespace

std::string decision(const Study& study) {
  const Words words(study);
  std::vector<std::string> parts;
  if (study.state == answers::RunState::incomplete) parts.emplace_back("The calculation did not finish.");
  if (study.state == answers::RunState::partial) parts.emplace_back("Stopped by the user before the last draw.");
  if (const auto* limit = worst_limit(study)) parts.push_back(limit_words(*limit, words));
  if (study.bands) {
    parts.push_back(band_words(study, words));
  } else if (study.highest && study.lowest && std::isfinite(study.highest->pressure)) {
    parts.push_back(extreme_words(study, words));
  } else if (study.verb == "flow" && study.state == answers::RunState::complete) {
    parts.push_back(steady_words(study, words));
  }
  std::string text;
  for (const auto& part : parts) {
    if (part.empty()) continue;
    if (!text.empty()) text += ' ';
    text += part;
  }
  return text;
}

}  // namespace headband::program
