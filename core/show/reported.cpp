// SPDX-License-Identifier: MIT
#include "core/show/reported.hpp"

#include <algorithm>
#include <cmath>
#include <cstddef>
#include <cstdlib>
#include <map>
#include <numbers>
#include <numeric>

namespace headband::show {

namespace {

/// Volume of one reach of the pipe called `name` [m3]; NaN where bore, length or reaches are not known.
double section_volume(const answers::Study& study, const std::string& name) {
  if (!study.grid || study.grid->reaches.size() != study.pipes.size()) return answers::missing;
  for (std::size_t i = 0; i < study.pipes.size(); ++i) {
    const auto& pipe = study.pipes[i];
    if (pipe.name != name) continue;
    const int reaches = std::max(1, study.grid->reaches[i]);
    return 0.25 * std::numbers::pi * pipe.bore * pipe.bore * pipe.length / reaches;
  }
  return answers::missing;
}

/// Not "volume > share": an unknown section volume (NaN) must not hide a cavity.
bool worth_telling(const answers::Study& study, const answers::CavityAnswer& cavity) {
  return !(cavity.max_volume <= reported_cavity_share * section_volume(study, cavity.pipe));
}

}  // namespace

std::string words_of(answers::Verdict verdict) {
  switch (verdict) {
    case answers::Verdict::ok:
      return "OK";
    case answers::Verdict::not_ok:
      return "NOT OK";
    case answers::Verdict::cannot_tell:
      return "CANNOT TELL";
    case answers::Verdict::none:
      break;
  }
  return {};
}

std::string file_name_of(const std::string& path) {
  const auto cut = path.find_last_of('/');
  return cut == std::string::npos ? path : path.substr(cut + 1);
}

std::vector<answers::CavityAnswer> reported_cavities(const answers::Study& study) {
  std::vector<answers::CavityAnswer> told;
  if (!study.transient) return told;
  for (const auto& cavity : study.transient->cavities)
    if (worth_telling(study, cavity)) told.push_back(cavity);
  if (told.size() <= reported_cavities_at_most) return told;
  std::vector<std::size_t> order(told.size());
  std::iota(order.begin(), order.end(), std::size_t{0});
  std::sort(order.begin(), order.end(), [&](std::size_t a, std::size_t b) {
    return told[a].max_volume != told[b].max_volume ? told[a].max_volume > told[b].max_volume : a < b;
  });
  order.resize(reported_cavities_at_most);
  std::sort(order.begin(), order.end());
  std::vector<answers::CavityAnswer> largest;
  largest.reserve(order.size());
  for (const std::size_t i : order) largest.push_back(told[i]);
  return largest;
}

std::vector<answers::EventAnswer> told_events(const answers::Study& study) {
  const auto pipe_of = [](const answers::EventAnswer& e) { return e.subject.substr(0, e.subject.rfind(" @ ")); };
  std::map<std::string, std::size_t> first_open, last_close;
  for (std::size_t i = 0; i < study.events.size(); ++i) {
    const auto& event = study.events[i];
    if (event.kind == "cavity_opens") first_open.try_emplace(pipe_of(event), i);
    if (event.kind == "cavity_closes") last_close[pipe_of(event)] = i;
  }
  std::vector<answers::EventAnswer> told;
  for (std::size_t i = 0; i < study.events.size(); ++i) {
    const auto& event = study.events[i];
    const bool hidden = (event.kind == "cavity_opens" && first_open.at(pipe_of(event)) != i) ||
                        (event.kind == "cavity_closes" && last_close.at(pipe_of(event)) != i);
    if (!hidden) told.push_back(event);
  }
  return told;
}

const answers::CavityAnswer* cavity_of(const answers::Study& study, const answers::EventAnswer& event) {
  const bool opens = event.kind == "cavity_opens";
  if (!study.transient || (!opens && event.kind != "cavity_closes")) return nullptr;
  const std::size_t cut = event.subject.rfind(" @ ");
  if (cut == std::string::npos) return nullptr;
  const std::string pipe = event.subject.substr(0, cut);
  const double chainage = std::strtod(event.subject.c_str() + cut + 3, nullptr);
  const answers::CavityAnswer* nearest = nullptr;
  for (const auto& c : study.transient->cavities) {
    if (c.pipe != pipe || (opens ? c.opens : c.closes) != event.time) continue;
    if (nearest == nullptr || std::abs(c.chainage - chainage) < std::abs(nearest->chainage - chainage)) nearest = &c;
  }
  return nearest;
}

const answers::CavityAnswer* first_cavity(const answers::Study& study) {
  const answers::CavityAnswer* first = nullptr;
  if (!study.transient) return first;
  for (const auto& c : study.transient->cavities)
    if (worth_telling(study, c) && (first == nullptr || c.opens < first->opens)) first = &c;
  return first;
}

bool stands_still(const answers::BandAnswer& answer) {
  constexpr double rounding = 1e-9;  // of the value
  return answer.standard_deviation <= rounding * std::abs(answer.mean);
}

bool overlapping_shares(const answers::BandAnswer& answer) {
  constexpr double sampled = 0.05;  // what the noise of the shares may add
  double sum = 0.0;
  for (const auto& s : answer.sensitivity)
    if (!std::isnan(s.first)) sum += s.first;
  return sum > 1.0 + sampled;
}

std::vector<answers::SensitivityAnswer> ranked_unknowns(const answers::BandAnswer& answer) {
  const auto weight = [](double share) { return std::isnan(share) ? -1.0 : share; };
  std::vector<answers::SensitivityAnswer> ranked = answer.sensitivity;
  std::sort(ranked.begin(), ranked.end(), [&](const auto& a, const auto& b) {
    return weight(a.total) != weight(b.total) ? weight(a.total) > weight(b.total) : a.input < b.input;
  });
  return ranked;
}

}  // namespace headband::show
