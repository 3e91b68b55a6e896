// SPDX-License-Identifier: MIT
//
// What the record looks at in every row: devices, cavities, limits, histories.
#include "transient/march/record.hpp"

#include "core/base/units.hpp"

#include <algorithm>
#include <cmath>

namespace headband::transient {
namespace {

constexpr double told_cavity = 1e-6;  // share of its section's volume below which a cavity is rounding

std::size_t at(int i) { return static_cast<std::size_t>(i); }

std::string spot_words(const std::string& pipe, double chainage) {
  return pipe + " @ " + base::significant(chainage, 5) + " m";
}

std::string volume_words(double volume) {
  return "the cavity closes; its largest volume was " + base::significant(volume, 3) + " m3";
}

}  // namespace

double Record::device_flow(const March<1>& march, int device) const {
  double flow = 0.0;
  const auto& layout = march.layout();
  for (std::size_t j = 0; j < layout.branches.size(); ++j)
    if (layout.branches[j].device == device) flow += march.state().branch_flow[j].number;
  for (std::size_t j = 0; j < layout.draws.size(); ++j)
    if (layout.draws[j].device == device) flow += march.state().draw[j].number;
  return flow;
}

double Record::device_head(const March<1>& march, int device) const {
  const auto& d = march.plan().devices[at(device)];
  const double from = march.state().place_head[d.from.at()].number;
  if (d.kind == network::DeviceKind::draw_off) return from;
  const double to =
      d.to.exists() ? march.state().place_head[d.to.at()].number : march.numbers().place_elevation[d.from.at()].number;
  return d.kind == network::DeviceKind::pump ? to - from : from - to;
}

double Record::series_value(const March<1>& march, const SeriesSource& s) const {
  using What = SeriesSource::What;
  if (s.what == What::flow) return device_flow(march, s.device);
  if (s.what == What::head) return device_head(march, s.device);
  const auto& layout = march.layout();
  for (std::size_t j = 0; j < layout.branches.size(); ++j) {
    const Branch& b = layout.branches[j];
    if (b.device != s.device) continue;
    if (s.what == What::opening) return march.state().branch_opening[j].number;
    if (b.kind != BranchKind::pump) continue;
    // of a set that trips in part the pumps that lose their power are shown: they stand first
    const PumpModel& pump = march.numbers().pump[j];
    const BranchMemory& memory = march.state().memory[j];
    return s.what == What::speed ? memory.speed * pump.rated_speed : memory.torque * pump.rated_torque;
  }
  return 0.0;
}

double Record::probe_flow(const March<1>& march, std::size_t probe) const {
  if (probe_spots_[probe].pipe >= 0) return flow_at<1>(march, probe_spots_[probe], 0);
  const auto& place = march.plan().probes[probe].place;
  const auto& sides = march.layout().sides_at[place.at()];
  int ends = 0;
  double flow = answers::missing;
  for (const auto& b : march.layout().branches) {
    if (b.kind != BranchKind::rigid_pipe) continue;
    if (b.from != place.index && b.to != place.index) continue;
    ++ends;
    flow = march.state().branch_flow[static_cast<std::size_t>(&b - march.layout().branches.data())].number;
  }
  for (const int s : sides) {
    ++ends;
    const double in = march.state().side_flow[at(s)].number;
    flow = march.layout().sides[at(s)].far ? in : -in;
  }
  return ends == 1 ? flow : answers::missing;
}

void Record::keep_row(March<1>& march) {
  const double weight = march.numbers().density.number * march.numbers().gravity.number;
  out_.time.push_back(march.time().number);
  for (std::size_t k = 0; k < probe_spots_.size(); ++k) {
    const double h = probe_spots_[k].pipe >= 0 ? head_at<1>(march, probe_spots_[k], 0)
                                               : march.state().place_head[march.plan().probes[k].place.at()].number;
    out_.probe_head.push_back(h);
    out_.probe_pressure.push_back(weight * (h - out_.probe_elevation[k]));
    out_.probe_flow.push_back(probe_flow(march, k));
  }
  for (const auto& s : series_) out_.series.push_back(series_value(march, s));
}

void Record::close_cavity(OpenCavity& c, double scale, double closes, const std::string& pipe, double chainage) {
  c.open = false;
  if (c.volume * scale <= told_cavity) return;
  out_.cavities.push_back({pipe, chainage, c.opens, closes, c.volume});
  const std::string subject = spot_words(pipe, chainage);
  add_event(c.opens, subject, "cavity_opens", "the liquid boils");
  if (!std::isnan(closes)) add_event(closes, subject, "cavity_closes", volume_words(c.volume));
}

void Record::watch_cavity(
    OpenCavity& c, double volume, double scale, const March<1>& march, int pipe, double chainage) {
  const double time = march.time().number;
  if (volume > 0.0) {
    if (!c.open) {
      c.open = true;
      c.opens = time;
      c.volume = 0.0;
    }
    c.volume = std::max(c.volume, volume);
    c.largest = std::max(c.largest, volume);
    c.standing += march.numbers().time_step.number;
  } else if (c.open) {
    close_cavity(c, scale, time, march.plan().pipes[at(pipe)].name, chainage);
  }
}

void Record::watch_cavities(const March<1>& march) {
  if (!march.numbers().limited) return;
  const auto& state = march.state();
  for (std::size_t i = 0; i < march.plan().pipes.size(); ++i) {
    const auto& p = march.numbers().pipes[i];
    for (int row = 1; row < p.most_reaches; ++row) {
      const std::size_t r = p.first_row + at(row);
      if (state.volume[r].number > 0.0 || row_cavity_[r].open)
        watch_cavity(row_cavity_[r],
                     state.volume[r].number,
                     p.per_section_volume.number,
                     march,
                     static_cast<int>(i),
                     row * p.reach.number);
    }
  }
  for (std::size_t k = 0; k < place_cavity_.size(); ++k) {
    if (!(state.place_volume[k].number > 0.0) && !place_cavity_[k].open) continue;
    const auto& sides = march.layout().sides_at[k];
    if (sides.empty()) continue;
    const Side& side = march.layout().sides[at(sides.front())];
    watch_cavity(place_cavity_[k],
                 state.place_volume[k].number,
                 march.numbers().place_volume_scale[k].number,
                 march,
                 side.pipe,
                 side.far ? values_->pipes[at(side.pipe)].length.number : 0.0);
  }
}

// Cavities still open at the end.
void Record::finish_cavities(const March<1>& march) {
  for (std::size_t i = 0; i < march.plan().pipes.size(); ++i) {
    const auto& p = march.numbers().pipes[i];
    for (int row = 1; row < p.most_reaches; ++row) {
      const std::size_t r = p.first_row + at(row);
      if (row_cavity_[r].open)
        close_cavity(row_cavity_[r],
                     p.per_section_volume.number,
                     answers::missing,
                     march.plan().pipes[i].name,
                     row * p.reach.number);
    }
  }
  for (std::size_t k = 0; k < place_cavity_.size(); ++k) {
    if (!place_cavity_[k].open) continue;
    const Side& side = march.layout().sides[at(march.layout().sides_at[k].front())];
    close_cavity(place_cavity_[k],
                 march.numbers().place_volume_scale[k].number,
                 answers::missing,
                 march.plan().pipes[at(side.pipe)].name,
                 side.far ? values_->pipes[at(side.pipe)].length.number : 0.0);
  }
}

// The extremes the limits ask for, kept once before the first row with vapour: later peaks are of the right order only,
// these are as good as any of a run without cavities.
void Record::watch_first_vapour(const March<1>& march) {
  if (vapour_seen_ || !cavity(march)) return;
  vapour_seen_ = true;
  for (const auto& limit : march.plan().limits)
    before_vapour_.push_back(limit.subject.needs_surge() ? extreme_of(march, limit.subject) : AnswerPeak{});
}

std::optional<AnswerPeak> Record::extreme_before_vapour(std::size_t limit) const {
  if (before_vapour_.empty()) return std::nullopt;
  return before_vapour_[limit];
}

void Record::watch_devices(const March<1>& march) {
  const double time = march.time().number;
  const auto& layout = march.layout();
  const auto& state = march.state();
  for (std::size_t d = 0; d < device_flow_.size(); ++d) {
    device_flow_[d].take(device_flow(march, static_cast<int>(d)), time, 0);
    if (march.plan().devices[d].kind == network::DeviceKind::pump)
      device_speed_[d].take(series_value(march, {SeriesSource::What::speed, static_cast<int>(d)}), time, 0);
  }
  for (std::size_t j = 0; j < layout.branches.size(); ++j) {
    const Branch& b = layout.branches[j];
    if (b.kind == BranchKind::rigid_pipe) continue;
    const std::string& name = march.plan().devices[at(b.device)].name;
    const double flow = state.branch_flow[j].number;
    if (b.to < 0) {
      const double head = state.place_head[at(b.from)].number - march.numbers().place_elevation[at(b.from)].number;
      const char refused = head < 0.0 && state.branch_coefficient[j].number > 0.0 ? 1 : 0;
      if (refused != 0 && was_refused_[j] == 0)
        add_event(time, name, "air_refused", "air would be drawn in: not modelled, the flow stays zero");
      was_refused_[j] = refused;
    }
    if (b.kind != BranchKind::pump && b.kind != BranchKind::check_valve) continue;
    const char shut = state.memory[j].shut ? 1 : 0;
    if (shut != was_shut_[j])
      add_event(
          time, name, shut != 0 ? "check_shut" : "check_open", shut != 0 ? "check valve shuts" : "check valve opens");
    const char forward = flow > 0.0 ? 1 : 0;
    if (b.kind == BranchKind::pump && was_forward_[j] != 0 && forward == 0)
      add_event(time, name, "zero_flow", "the flow has come to rest");
    was_shut_[j] = shut;
    was_forward_[j] = forward;
  }
}

void Record::watch_limits(const March<1>& march) {
  const auto& plan = march.plan();
  const double weight = march.numbers().density.number * march.numbers().gravity.number;
  for (std::size_t k = 0; k < plan.limits.size(); ++k) {
    const auto& limit = plan.limits[k];
    const auto& where = limit.subject.where;
    const bool high = limit.subject.kind == network::AnswerKind::highest_pressure;
    if (limit_crossed_[k] != 0 || (!high && limit.subject.kind != network::AnswerKind::lowest_pressure)) continue;
    bool crossed = false;
    const auto judge = [&](double head, double elevation) {
      const double pressure = weight * (head - elevation);
      crossed = crossed || (limit.not_over ? pressure > limit.bound : pressure < limit.bound);
    };
    if (where.place.exists()) {
      judge(march.state().place_head[where.place.at()].number,
            march.numbers().place_elevation[where.place.at()].number);
    } else {
      for (const Station& s : stations_) {
        if (where.pipe.exists() && s.spot.pipe != where.pipe.index) continue;
        if (where.pipe.exists() && where.chainage >= 0.0 && std::fabs(s.spot.chainage - where.chainage) > 1e-9)
          continue;
        judge(head_at<1>(march, s.spot, 0), s.spot.elevation);
      }
    }
    if (!crossed) continue;
    limit_crossed_[k] = 1;
    add_event(march.time().number, limit.name, "limit_crossed", "the limit is not kept from here");
  }
}

}  // namespace headband::transient
