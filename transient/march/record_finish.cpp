// SPDX-License-Identifier: MIT
//
// From the record of a run to the blocks of a study.
#include "transient/march/record.hpp"

#include <algorithm>
#include <cmath>
#include <tuple>

namespace headband::transient {
namespace {

std::size_t at(int i) { return static_cast<std::size_t>(i); }

// At one time what is done comes before what follows from it.
int rank_of(const std::string& kind) {
  static constexpr const char* order[] = {
      "zero_flow", "check_shut", "check_open", "air_refused", "cavity_opens", "cavity_closes", "limit_crossed"};
  int rank = 1;
  for (const char* each : order) {
    if (kind == each) return rank;
    ++rank;
  }
  return 0;  // movements and trips, in the order of the case
}

}  // namespace

void Record::take_extreme(const March<1>& march, const Station& s, bool highest, AnswerPeak& best) const {
  const double weight = march.numbers().density.number * march.numbers().gravity.number;
  const Peak& peak = highest ? s.head.high : s.head.low;
  const double pressure = weight * (peak.value - s.spot.elevation);
  if (best.pipe >= 0 && !(highest ? pressure > best.value : pressure < best.value)) return;
  best = {pressure,
          peak.time,
          weight * peak.beside,
          peak.value,
          s.spot.pipe,
          s.spot.chainage,
          weight * peak.missed(highest ? 1.0 : -1.0)};
}

AnswerPeak Record::extreme_everywhere(const March<1>& march, bool highest) const {
  AnswerPeak best;
  for (const Station& s : stations_) take_extreme(march, s, highest, best);
  return best;
}

AnswerPeak Record::extreme_of(const March<1>& march, const network::AnswerPlan& what) const {
  AnswerPeak best;
  const auto& where = what.where;
  const bool highest = what.kind == network::AnswerKind::highest_pressure;
  const double weight = march.numbers().density.number * march.numbers().gravity.number;
  if (where.place.exists() && what.kind != network::AnswerKind::velocity) {
    const Extremes& e = place_head_[where.place.at()];
    const Peak& peak = highest ? e.high : e.low;
    const double z = march.numbers().place_elevation[where.place.at()].number;
    return {weight * (peak.value - z),
            peak.time,
            weight * peak.beside,
            peak.value,
            -1,
            answers::missing,
            weight * peak.missed(highest ? 1.0 : -1.0)};
  }
  for (const Station& s : stations_) {
    if (where.pipe.exists() && s.spot.pipe != where.pipe.index) continue;
    if (where.pipe.exists() && where.chainage >= 0.0 && what.kind != network::AnswerKind::velocity &&
        std::fabs(s.spot.chainage - std::clamp(where.chainage, 0.0, values_->pipes[where.pipe.at()].length.number)) >
            1e-9)
      continue;
    if (where.place.exists()) {  // velocity at a place: of the pipe ends that meet there
      const auto& p = march.plan().pipes[at(s.spot.pipe)];
      const bool at_from = s.end && s.spot.chainage == 0.0 && p.from == where.place;
      const bool at_to = s.end && s.spot.chainage > 0.0 && p.to == where.place;
      if (!at_from && !at_to) continue;
    }
    if (what.kind == network::AnswerKind::velocity) {
      if (s.section && (best.pipe < 0 || s.top_speed > best.value))
        best = {s.top_speed, s.top_speed_time, 0.0, answers::missing, s.spot.pipe, s.spot.chainage, 0.0};
    } else {
      take_extreme(march, s, highest, best);
    }
  }
  return best;
}

void Record::finish_stations(const March<1>& march, SurgeRun& run) const {
  answers::Transient& t = run.transient;
  const double weight = march.numbers().density.number * march.numbers().gravity.number;
  for (const Station& s : stations_) {
    if (!s.section) continue;
    const auto& pipe = march.plan().pipes[at(s.spot.pipe)];
    const auto& p = march.numbers().pipes[at(s.spot.pipe)];
    t.station_pipe.push_back(s.spot.pipe);
    t.chainage.push_back(s.spot.chainage);
    t.elevation.push_back(s.spot.elevation);
    t.steady_head.push_back(s.head.first);
    t.head_max.push_back(s.head.high.value);
    t.head_min.push_back(s.head.low.value);
    t.time_of_max.push_back(s.head.high.time);
    t.time_of_min.push_back(s.head.low.time);
    t.pressure_max.push_back(weight * (s.head.high.value - s.spot.elevation));
    t.pressure_min.push_back(weight * (s.head.low.value - s.spot.elevation));
    const std::size_t place = s.spot.chainage > 0.0 ? pipe.to.at() : pipe.from.at();
    const std::size_t row = s.spot.row + (s.spot.share > 0.5 ? 1 : 0);
    const OpenCavity& c = s.end ? place_cavity_[place] : row_cavity_[row];
    t.cavity_volume_max.push_back(c.largest);
    t.time_with_cavity.push_back(c.standing);
    const double limit =
        s.end || p.most_reaches == 0 ? march.numbers().place_vapour[place].number : march.numbers().vapour[row].number;
    t.vapour_head.push_back(std::isfinite(limit) ? limit : answers::missing);
  }
}

void Record::finish_devices(const March<1>& march, SurgeRun& run) const {
  const auto& plan = march.plan();
  for (std::size_t d = 0; d < plan.devices.size(); ++d) {
    answers::DeviceAnswer a;
    a.name = plan.devices[d].name;
    const auto add = [&a](const char* key, double value) { a.numbers.emplace_back(key, value); };
    add("flow_m3_per_s", first_flow_[d]);
    add("head_m", first_head_[d]);
    add("max_flow_m3_per_s", device_flow_[d].high.value);
    add("time_of_max_flow_s", device_flow_[d].high.time);
    add("min_flow_m3_per_s", device_flow_[d].low.value);
    add("time_of_min_flow_s", device_flow_[d].low.time);
    if (plan.devices[d].kind == network::DeviceKind::pump) {
      a.kind = "pump";
      add("speed_rad_per_s", first_speed_[d]);
      add("max_speed_rad_per_s", device_speed_[d].high.value);
      add("min_speed_rad_per_s", device_speed_[d].low.value);
    }
    run.devices.push_back(std::move(a));
  }
}

void Record::finish(March<1>& march, SurgeRun& run) {
  const auto& plan = march.plan();
  const double weight = march.numbers().density.number * march.numbers().gravity.number;
  finish_cavities(march);
  std::sort(out_.cavities.begin(), out_.cavities.end(), [](const auto& a, const auto& b) {
    return std::tie(a.opens, a.pipe, a.chainage) < std::tie(b.opens, b.pipe, b.chainage);
  });
  std::stable_sort(events_.begin(), events_.end(), [](const auto& a, const auto& b) {
    if (a.time != b.time) return a.time < b.time;
    const int first = rank_of(a.kind), second = rank_of(b.kind);
    if (first != second) return first < second;
    return first > 0 && std::tie(a.subject, a.what) < std::tie(b.subject, b.what);
  });
  if (std::isnan(out_.last_good_time)) out_.last_good_time = 0.0;
  run.transient = std::move(out_);
  finish_stations(march, run);
  finish_devices(march, run);
  for (std::size_t k = 0; k < plan.places.size(); ++k) {
    answers::PlaceAnswer a;
    a.name = plan.places[k].name;
    a.surged = true;
    const double z = march.numbers().place_elevation[k].number;
    const Extremes& e = place_head_[k];
    a.max_head = e.high.value;
    a.max_pressure = weight * (e.high.value - z);
    a.time_of_max = e.high.time;
    a.min_head = e.low.value;
    a.min_pressure = weight * (e.low.value - z);
    a.time_of_min = e.low.time;
    run.places.push_back(std::move(a));
  }
  run.events = std::move(events_);
  run.audit = audit_.result(march);
  run.cavity = cavity(march);
  switch (march.status(0)) {
    case MarchStatus::completed:
      run.completed = true;
      run.transient.status = "completed";
      break;
    case MarchStatus::not_finite:
      run.transient.status = "not finite";
      break;
    case MarchStatus::boundary_not_converged:
      run.transient.status = "boundary not converged";
      break;
  }
}

}  // namespace headband::transient
