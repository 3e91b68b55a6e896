// SPDX-License-Identifier: MIT
#include "transient/march/record.hpp"

#include <algorithm>
#include <cmath>

namespace headband::transient {
namespace {

constexpr double told_cavity = 1e-6;  // share of its section's volume below which a cavity is rounding

std::size_t at(int i) { return static_cast<std::size_t>(i); }

}  // namespace

void Record::add_event(double time, const std::string& subject, const std::string& kind, const std::string& what) {
  events_.push_back({time, subject, kind, what});
}

void Record::add_stations(const March<1>& march) {
  const auto& plan = march.plan();
  for (std::size_t i = 0; i < plan.pipes.size(); ++i) {
    const auto& p = march.numbers().pipes[i];
    const auto& v = values_->pipes[i];
    const int pipe = static_cast<int>(i);
    const int rows = std::max(1, p.most_reaches);
    for (int row = 0; row <= rows; ++row) {
      Station s;
      const double chainage = row == rows ? v.length.number : row * (p.most_reaches > 0 ? p.reach.number : 0.0);
      s.spot = make_spot<1>(march, *values_, pipe, chainage, 0);
      s.end = row == 0 || row == rows;
      s.head.begin(head_at<1>(march, s.spot, 0));
      stations_.push_back(s);
    }
  }
  const auto add_point = [&](int pipe, double chainage) {
    Station s;
    s.section = false;
    s.spot = make_spot<1>(march, *values_, pipe, chainage, 0);
    s.head.begin(head_at<1>(march, s.spot, 0));
    stations_.push_back(s);
  };
  for (std::size_t i = 0; i < plan.pipes.size(); ++i) {
    const auto& x = values_->pipes[i].chainage;
    for (std::size_t k = 1; k + 1 < x.size(); ++k) add_point(static_cast<int>(i), x[k].number);
  }
  const auto add_spot = [&](const network::SpotPlan& s) {
    if (s.pipe.exists() && s.chainage >= 0.0) add_point(s.pipe.index, s.chainage);
  };
  for (const auto& a : plan.answers) add_spot(a.where);
  for (const auto& l : plan.limits) add_spot(l.subject.where);
}

void Record::add_series(const March<1>& march) {
  const auto& plan = march.plan();
  using What = SeriesSource::What;
  for (std::size_t d = 0; d < plan.devices.size(); ++d) {
    const auto& device = plan.devices[d];
    const auto add = [&](What what, const char* name, const char* unit) {
      series_.push_back({what, static_cast<int>(d)});
      out_.series_name.push_back(device.name + " " + name);
      out_.series_units.emplace_back(unit);
    };
    add(What::flow, "flow", "m3/s");
    add(What::head, "head", "m");
    if (device.kind == network::DeviceKind::valve) add(What::opening, "opening", "1");
    if (device.kind == network::DeviceKind::pump) {
      add(What::speed, "speed", "rad/s");
      add(What::torque, "torque", "N m");
    }
  }
}

void Record::begin(March<1>& march) {
  const auto& plan = march.plan();
  const std::size_t places = plan.places.size(), rows = march.numbers().rows;
  add_stations(march);
  place_head_.resize(places);
  for (std::size_t k = 0; k < places; ++k) place_head_[k].begin(march.state().place_head[k].number);
  place_speed_.assign(places, 0.0);
  place_speed_time_.assign(places, 0.0);
  row_cavity_.assign(rows, {});
  place_cavity_.assign(places, {});
  limit_crossed_.assign(plan.limits.size(), 0);
  audit_.begin(march);
  watch_stations(march, 0, true);
  if (!histories_) return;
  for (const auto& probe : plan.probes) {
    Spot spot;
    spot.pipe = -1;
    if (probe.pipe.exists()) spot = make_spot<1>(march, *values_, probe.pipe.index, std::max(0.0, probe.chainage), 0);
    probe_spots_.push_back(spot);
    out_.probe_name.push_back(probe.name);
    out_.probe_elevation.push_back(probe.pipe.exists() ? spot.elevation
                                                       : march.numbers().place_elevation[probe.place.at()].number);
  }
  add_series(march);
  const auto total = static_cast<std::size_t>(march.numbers().last_step[0] + 1);
  out_.time.reserve(total);
  out_.probe_head.reserve(total * plan.probes.size());
  out_.probe_pressure.reserve(total * plan.probes.size());
  out_.probe_flow.reserve(total * plan.probes.size());
  out_.series.reserve(total * series_.size());
  const std::size_t branches = march.layout().branches.size();
  was_shut_.resize(branches);
  was_refused_.assign(branches, 0);
  was_forward_.resize(branches);
  for (std::size_t j = 0; j < branches; ++j) {
    was_shut_[j] = march.state().memory[j].shut ? 1 : 0;
    was_forward_[j] = march.state().branch_flow[j].number > 0.0 ? 1 : 0;
  }
  for (std::size_t d = 0; d < plan.devices.size(); ++d) {
    device_flow_.emplace_back().begin(device_flow(march, static_cast<int>(d)));
    device_speed_.emplace_back().begin(series_value(march, {SeriesSource::What::speed, static_cast<int>(d)}));
    first_flow_.push_back(device_flow_.back().last);
    first_speed_.push_back(device_speed_.back().last);
    first_head_.push_back(device_head(march, static_cast<int>(d)));
  }
  plan_events(march);
  keep_row(march);
  watch_limits(march);
}

void Record::plan_events(const March<1>& march) {
  const auto& plan = march.plan();
  for (const auto& event : plan.events) {
    const auto& e = march.the_case().events[at(event.index)];
    const auto& v = values_->events[at(event.index)];
    const double begin = v.at.number;
    const double dt = march.numbers().time_step.number;
    const double last = (static_cast<double>(march.numbers().last_step[0]) + 0.5) * dt;
    if (!(begin <= last)) continue;  // the run ends before
    const bool draw_off = event.kind == network::EventKind::move_draw_off;
    const std::string what = draw_off ? "flow " : event.kind == network::EventKind::move_basin ? "level " : "";
    switch (event.kind) {
      case network::EventKind::trip_pump:
        add_event(begin, event.name, "tripped", "power lost");
        continue;
      case network::EventKind::start_pump:
        add_event(begin, event.name, "starts", "started");
        break;
      case network::EventKind::swing_valve:
        add_event(begin, event.name, "starts", "begins to swing");
        continue;
      case network::EventKind::move_valve:
      case network::EventKind::move_draw_off:
      case network::EventKind::move_basin:
        add_event(begin,
                  event.name,
                  "starts",
                  what + (e.instant  ? draw_off ? "changes at once" : "moves at once"
                          : draw_off ? "begins to change"
                                     : "begins to move"));
        break;
    }
    double end = e.instant ? begin : begin + v.over.number;
    if (!v.travel_time.empty()) end = begin + v.travel_time.back().number;
    // a movement that another one takes over never ends
    const bool taken_over = std::any_of(plan.events.begin(), plan.events.end(), [&](const network::EventPlan& other) {
      const double at_other = values_->events[at(other.index)].at.number;
      return other.index != event.index && other.device == event.device && other.basin == event.basin &&
             at_other > begin && at_other < end;
    });
    if (!taken_over && end <= last) add_event(end, event.name, "ends", what + (draw_off ? "has changed" : "has moved"));
  }
}

void Record::watch_stations(const March<1>& march, long long row, bool instant) {
  const double time = march.time().number;
  const auto& state = march.state();
  for (Station& s : stations_) {
    const double h = head_at<1>(march, s.spot, 0);
    if (instant) {
      s.head.take_instant(h, time, row);
    } else {
      s.head.take(h, time, row);
    }
    if (!s.section) continue;
    const double area = values_->pipes[at(s.spot.pipe)].area.number;
    double flow = std::fabs(flow_at<1>(march, s.spot, 0));
    if (state.cavities[at(s.spot.pipe)] != 0 && s.spot.share == 0.0)
      flow = std::max(flow, std::fabs(state.flow[s.spot.row].number));
    if (flow / area > s.top_speed) {
      s.top_speed = flow / area;
      s.top_speed_time = time;
    }
  }
  for (std::size_t k = 0; k < place_head_.size(); ++k) {
    const double h = state.place_head[k].number;
    if (instant) {
      place_head_[k].take_instant(h, time, row);
    } else {
      place_head_[k].take(h, time, row);
    }
  }
}

void Record::before_jump(March<1>& march, long long row) {
  (void)row;
  audit_.before_jump(march);
}

void Record::after_jump(March<1>& march, long long row) {
  audit_.after_jump(march);
  watch_first_vapour(march);
  watch_stations(march, row, true);
  if (!histories_) return;
  watch_devices(march);
  watch_limits(march);
}

bool Record::finite(const March<1>& march) const {
  double sum = 0.0;
  for (const auto& h : march.state().place_head) sum += h.number;
  for (const auto& q : march.state().side_flow) sum += q.number;
  for (const auto& h : march.state().head) sum += h.number;
  return std::isfinite(sum);
}

bool Record::step(March<1>& march, long long row) {
  if (!finite(march)) {
    march.set_status(0, MarchStatus::not_finite);
    finished_ = false;
    return false;
  }
  if (march.status(0) == MarchStatus::completed) out_.last_good_time = march.time().number;
  watch_first_vapour(march);
  watch_stations(march, row, false);
  audit_.step(march);
  watch_cavities(march);
  if (!histories_) return true;
  watch_devices(march);
  keep_row(march);
  watch_limits(march);
  return true;
}

bool Record::cavity(const March<1>& march) const { return march.state().tally.share.number > told_cavity; }

}  // namespace headband::transient
