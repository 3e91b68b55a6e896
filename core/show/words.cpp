// SPDX-License-Identifier: MIT
#include "core/show/words.hpp"

#include "core/show/amounts.hpp"
#include "core/show/reported.hpp"

#include "core/base/dimension.hpp"
#include "core/base/units.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>
#include <limits>
#include <tuple>

namespace headband::show {

namespace {

using answers::LimitAnswer;
using answers::Study;
using answers::Verdict;
using base::Dimension;

int badness(Verdict verdict) {
  switch (verdict) {
    case Verdict::not_ok:
      return 3;
    case Verdict::cannot_tell:
      return 2;
    case Verdict::ok:
      return 1;
    case Verdict::none:
      break;
  }
  return 0;
}

/// Likeliest to fail, by the probability's upper bound; 0 without one.
double likelihood(const LimitAnswer& limit) {
  if (limit.probability_upper_range) return (*limit.probability_upper_range)[1];
  return std::isnan(limit.probability_upper) ? 0.0 : limit.probability_upper;
}

/// Closest to its limit in the single run, as a share of the larger of both: tells limits of one probability apart.
double closeness(const LimitAnswer& limit) {
  if (std::isnan(limit.margin)) return std::numeric_limits<double>::lowest();
  return -limit.margin / std::max({std::abs(limit.limit), std::abs(limit.value), 1e-300});
}

auto weight(const LimitAnswer& limit) {
  return std::make_tuple(badness(limit.verdict), likelihood(limit), closeness(limit));
}

std::string limit_sentence(const Study& study, const LimitAnswer& limit, const Amounts& amounts) {
  const Dimension dimension = dimension_of_kind(limit.kind);
  std::string text = fmt::format("{}: limit {} ({} {})",
                                 words_of(limit.verdict),
                                 limit.name,
                                 words_of_kind(limit.kind),
                                 amounts.of(limit.limit, dimension));
  const std::string chance = chance_words(limit);
  if (!chance.empty()) {
    text += fmt::format(" is not kept in {}", chance);
    if (!std::isnan(limit.at_most)) text += fmt::format(", {} allowed", percent(limit.at_most));
    if (!std::isnan(limit.value)) {
      text += fmt::format("; the single run gives {}", amounts.of(limit.value, dimension));
    }
  } else if (!std::isnan(limit.value)) {
    text += fmt::format(", the run gives {}", amounts.of(limit.value, dimension));
    if (!std::isnan(limit.margin)) {
      text += limit.margin >= 0.0 ? fmt::format(", {} to spare", amounts.width(limit.margin, dimension, 3))
                                  : fmt::format(", {} beyond", amounts.width(-limit.margin, dimension, 3));
    }
  }
  if (!limit.reason.empty()) text += fmt::format(" ({})", limit.reason);
  text += '.';
  const auto others = [&](Verdict verdict) {
    const auto same = [&](const LimitAnswer& l) { return &l != &limit && l.verdict == verdict; };
    return std::count_if(study.limits.begin(), study.limits.end(), same);
  };
  if (study.limits.size() > 1) {
    text += " Other limits:";
    const char* comma = "";
    for (const Verdict verdict : {Verdict::not_ok, Verdict::cannot_tell, Verdict::ok, Verdict::none}) {
      const auto count = others(verdict);
      if (count == 0) continue;
      text += fmt::format("{} {} {}", comma, count, verdict == Verdict::none ? "not judged" : words_of(verdict));
      comma = ",";
    }
    text += '.';
  }
  return text;
}

std::string extreme_words(const answers::Extreme& e, const Amounts& amounts) {
  std::string text = amounts.of(e.pressure, Dimension::pressure);
  if (e.pipe.empty()) return text;
  return text.append(fmt::format(
      " in {} at {}, {}", e.pipe, amounts.of(e.chainage, Dimension::length), amounts.of(e.time, Dimension::time)));
}

std::string extremes_sentence(const Study& study, const Amounts& amounts) {
  const std::string remark = vapour_remark(study);
  return fmt::format("Highest pressure {}; lowest {}{}.",
                     extreme_words(*study.highest, amounts),
                     extreme_words(*study.lowest, amounts),
                     remark.empty() ? "" : "; " + remark);
}

std::string band_sentence(const answers::Bands& bands, const Amounts& amounts) {
  constexpr std::size_t most = 2;  // the rest stand in the table
  std::string text;
  for (std::size_t i = 0; i < std::min(most, bands.answers.size()); ++i) {
    const auto& a = bands.answers[i];
    const double tail = 0.5 * (1.0 - bands.coverage);
    const auto at = [&](double probability) {
      const auto near = std::min_element(a.quantiles.begin(), a.quantiles.end(), [&](const auto& x, const auto& y) {
        return std::abs(x.probability - probability) < std::abs(y.probability - probability);
      });
      return near == a.quantiles.end() ? answers::missing : near->value;
    };
    const Dimension dimension = dimension_of_kind(a.kind);
    text += fmt::format("{}{}: median {}, {} between {} and {}.",
                        i == 0 ? "" : " ",
                        a.name,
                        amounts.of(at(0.5), dimension),
                        percent(bands.coverage),
                        amounts.of(at(tail), dimension),
                        amounts.of(at(1.0 - tail), dimension));
  }
  text += fmt::format(" {} draws", bands.draws);
  if (bands.failed > 0) text += fmt::format(", {} of them failed", bands.failed);
  return text += '.';
}

std::string steady_sentence(const Study& study, const Amounts& amounts) {
  const auto fastest = std::max_element(study.pipes.begin(), study.pipes.end(), [](const auto& a, const auto& b) {
    return std::abs(a.velocity) < std::abs(b.velocity);
  });
  if (fastest == study.pipes.end() || std::isnan(fastest->flow)) return {};
  return fmt::format("Steady flow in {}: {}, {}; pressure drop from {} to {}: {}.",
                     fastest->name,
                     amounts.of(fastest->flow, Dimension::flow),
                     amounts.of(fastest->velocity, Dimension::velocity),
                     fastest->from,
                     fastest->to,
                     amounts.of(fastest->pressure_drop, Dimension::pressure_difference));
}

void add_once(std::vector<std::string>& list, std::string text) {
  if (std::find(list.begin(), list.end(), text) == list.end()) list.push_back(std::move(text));
}

void append(std::string& text, const std::string& sentence) {
  if (sentence.empty()) return;
  if (!text.empty()) text += ' ';
  text += sentence;
}

}  // namespace

const answers::LimitAnswer* deciding_limit(const Study& study) {
  const auto worst = std::max_element(study.limits.begin(),
                                      study.limits.end(),
                                      [](const LimitAnswer& a, const LimitAnswer& b) { return weight(a) < weight(b); });
  return worst == study.limits.end() ? nullptr : &*worst;
}

std::string chance_words(const LimitAnswer& limit) {
  const std::string sure = std::isnan(limit.confidence) ? "" : percent(limit.confidence) + " sure: ";
  if (limit.probability_range) {
    const auto& range = *limit.probability_range;
    const std::string least = percent(range[0]), most = percent(range[1]);
    std::string text = least == most ? least + " of the draws" : fmt::format("{} to {} of the draws", least, most);
    if (limit.probability_upper_range) {
      text += fmt::format(" ({}at most {})", sure, percent((*limit.probability_upper_range)[1]));
    }
    return text.append(least == most ? " wherever the range that is not chance lies"
                                     : " by a range that is not chance");
  }
  if (std::isnan(limit.probability)) return {};
  return fmt::format("{} of the draws ({}{} to {})",
                     percent(limit.probability),
                     sure,
                     percent(limit.probability_lower),
                     percent(limit.probability_upper));
}

std::string vapour_remark(const Study& study) {
  const auto* first = first_cavity(study);
  if (first == nullptr) return {};
  return fmt::format(
      "order of size only after {} s, where vapour formed in {}", base::significant(first->opens, 3), first->pipe);
}

EventWords event_words(const Study& study, const answers::EventAnswer& event, const Amounts& amounts) {
  const auto* cavity = cavity_of(study, event);
  if (cavity == nullptr) return {event.subject, event.what};
  const std::string spot = fmt::format("{} @ {}", cavity->pipe, amounts.of(cavity->chainage, Dimension::length, 5));
  if (event.kind == "cavity_opens") return {spot, event.what};
  return {spot,
          fmt::format("the cavity closes; its largest volume was {}",
                      amounts.of(cavity->max_volume, Dimension::volume, 3))};
}

std::string decision(const Study& study, const std::string& units) {
  const Amounts amounts(study, units);
  std::string text;
  if (study.state == answers::RunState::incomplete) {
    append(text, "The calculation did not finish.");
    if (study.transient && !std::isnan(study.transient->last_good_time)) {
      append(text,
             fmt::format("It holds good up to {}.", amounts.of(study.transient->last_good_time, Dimension::time)));
    }
  }
  if (study.state == answers::RunState::partial) append(text, "Stopped by the user before the last draw.");
  if (const auto* limit = deciding_limit(study)) append(text, limit_sentence(study, *limit, amounts));
  if (study.bands) append(text, band_sentence(*study.bands, amounts));
  if (study.highest && study.lowest && !std::isnan(study.highest->pressure)) {
    append(text, extremes_sentence(study, amounts));
  } else if (!study.bands && study.state == answers::RunState::complete) {
    append(text, steady_sentence(study, amounts));
  }
  if (study.limits_shown && study.limits.empty()) append(text, "No limit was given.");
  return text;
}

std::vector<std::string> cautions(const Study& study) {
  std::vector<std::string> list;
  add_once(
      list,
      "This is a calculation aid. The code in force and a licensed engineer decide. Ratings were typed by the user.");
  add_once(
      list,
      "Not covered: slam of check valves, structures that move with the liquid, human error, wrong drawings, a wrong "
      "valve.");
  for (const auto& caution : study.cautions) add_once(list, caution);
  if (!reported_cavities(study).empty()) {
    add_once(list, "Vapour formed in this run; pressures after a cavity rejoins are of the right order of size only.");
  }
  const auto stands_open = [](const answers::CavityAnswer& c) { return std::isnan(c.closes); };
  if (std::ranges::any_of(reported_cavities(study), stands_open)) {
    add_once(list,
             "A vapour cavity stood open when the run ended: the pressure at its rejoining is not in these numbers; "
             "give the run a longer duration.");
  }
  if (study.bands) {
    const auto& b = *study.bands;
    if (b.surged && b.with_cavity > 0) {
      add_once(list,
               fmt::format("Vapour formed in {} of {} draws; pressures after a cavity rejoins are of the right order "
                           "of size only.",
                           b.with_cavity,
                           b.draws));
    }
    if (b.failed > 0) {
      add_once(list, fmt::format("{} of {} draws failed; they count against every limit.", b.failed, b.draws));
    }
    add_once(list, "A band holds for the spreads that were stated; what is not in the case is not in the band.");
  }
  if (study.transient || (study.bands && study.bands->surged)) {
    add_once(list, "A smooth pipe is worse for surge and better for pressure drop.");
  }
  const auto unsettled = [](const auto& extreme) { return extreme && !extreme->grid_converging; };
  if (unsettled(study.highest) || unsettled(study.lowest)) {
    add_once(list, "Finer grids do not approach one value of an extreme: take it as an order of size.");
  }
  if (study.audit && std::abs(study.audit->volume_residual_relative) > 1e-2) {
    add_once(list, "Over 1 % of the volume passed is not accounted for: do not use these numbers.");
  }
  return list;
}

}  // namespace headband::show
