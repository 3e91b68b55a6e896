// SPDX-License-Identifier: MIT
//
// Many draws, of which only the asked extremes are kept.
#include "core/pipe/profile.hpp"
#include "core/steady/evaluate.hpp"
#include "transient/march/grid_request.hpp"
#include "transient/march/spots.hpp"
#include "transient/march/surge.hpp"

#include <algorithm>
#include <cmath>
#include <limits>
#include <span>
#include <utility>

namespace headband::transient {
namespace {

constexpr double told_cavity = 1e-6;   // share of its section's volume below which a cavity is rounding
constexpr int station_intervals = 40;  // of each pipe, for the whole-line bands

std::size_t at(int i) { return static_cast<std::size_t>(i); }

using network::AnswerKind;
using network::AnswerPlan;

/// Points between rows that some answer looks at, and pipes whose velocity is asked.
struct Watch {
  struct Point {
    int pipe = 0;
    int profile = -1;        ///< profile point, or
    double chainage = -1.0;  ///< a point of an answer [m]
  };
  std::vector<Point> points;
  std::vector<bool> velocity;     ///< per pipe
  std::vector<std::size_t> fast;  ///< pipes whose velocity is asked
  bool whole_pipes = false;       ///< some answer is the extreme of a whole pipe
};

Watch make_watch(const network::Plan& plan) {
  Watch w;
  w.velocity.assign(plan.pipes.size(), false);
  std::vector<bool> profile(plan.pipes.size(), false);
  const auto look = [&](const AnswerPlan& a) {
    if (!a.needs_surge()) return;
    for (std::size_t i = 0; i < plan.pipes.size(); ++i) {
      const bool whole =
          !a.where.place.exists() && (!a.where.pipe.exists() || (a.where.pipe.at() == i && a.where.chainage < 0.0));
      if (a.kind == AnswerKind::velocity) {
        const bool touches =
            a.where.place.exists() && (plan.pipes[i].from == a.where.place || plan.pipes[i].to == a.where.place);
        if (whole || touches || (a.where.pipe.exists() && a.where.pipe.at() == i)) w.velocity[i] = true;
      } else if (whole) {
        profile[i] = w.whole_pipes = true;
      }
    }
    if (a.kind != AnswerKind::velocity && a.where.pipe.exists() && a.where.chainage >= 0.0)
      w.points.push_back({a.where.pipe.index, -1, a.where.chainage});
  };
  for (const auto& a : plan.answers) look(a);
  for (const auto& l : plan.limits) look(l.subject);
  for (std::size_t i = 0; i < plan.pipes.size(); ++i)
    if (w.velocity[i]) w.fast.push_back(i);
  for (std::size_t i = 0; i < plan.pipes.size(); ++i)
    if (profile[i])
      for (int k = 1; k + 1 < plan.pipes[i].profile_points; ++k) w.points.push_back({static_cast<int>(i), k, -1.0});
  return w;
}

/// Heads of the probes at times that all lanes share, each lane on rows of its own.
template <int W>
class HistoryTrack {
 public:
  HistoryTrack(const std::vector<double>& times, const base::PerLane<bool, W>& take, std::vector<Lanes<W>>& out)
      : times_(&times), take_(take), out_(&out) {}

  void begin(const March<W>& march, const network::Values<W>& values) {
    if (times_->empty()) return;
    const auto& probes = march.plan().probes;
    spots_.resize(probes.size());
    now_.resize(probes.size());
    last_.resize(probes.size());
    for (std::size_t k = 0; k < probes.size(); ++k) {
      if (!probes[k].pipe.exists()) continue;
      for (int lane = 0; lane < W; ++lane)
        spots_[k][at(lane)] =
            make_spot<W>(march, values, probes[k].pipe.index, std::max(0.0, probes[k].chainage), lane);
    }
    for (int lane = 0; lane < W; ++lane) await(march, lane);
    step(march, 0);
  }

  void step(const March<W>& march, long long row) {
    if (row + 1 < soonest_) return;  // neither this row nor the next one ends a line that holds an asked time
    look(march);
    if (row >= soonest_) {
      for (int lane = 0; lane < W; ++lane) {
        while (due_[at(lane)] == row) {
          keep(march, row, lane);
          ++next_[at(lane)];
          await(march, lane);
        }
      }
      soonest_ = *std::min_element(due_.begin(), due_.end());
    }
    std::swap(now_, last_);
  }

 private:
  static constexpr long long never = std::numeric_limits<long long>::max();

  /// Row that ends the line on which the lane's next time lies.
  void await(const March<W>& march, int lane) {
    const auto l = at(lane);
    due_[l] = never;
    if (!take_[l] || next_[l] >= times_->size()) return;
    const double time = (*times_)[next_[l]], dt = march.numbers().time_step[lane];
    auto row = static_cast<long long>(time / dt);
    while (dt * static_cast<double>(row) < time) ++row;
    due_[l] = std::min(row, march.numbers().last_step[l]);
    soonest_ = std::min(soonest_, due_[l]);
  }

  void look(const March<W>& march) {
    const auto& probes = march.plan().probes;
    for (std::size_t k = 0; k < probes.size(); ++k) {
      if (probes[k].pipe.exists()) {
        for (int lane = 0; lane < W; ++lane) now_[k].set(lane, head_at<W>(march, spots_[k][at(lane)], lane));
      } else {
        now_[k] = march.state().place_head[probes[k].place.at()];
      }
    }
  }

  void keep(const March<W>& march, long long row, int lane) {
    const std::size_t first = next_[at(lane)] * now_.size();
    const double dt = march.numbers().time_step[lane];
    // a time on a row takes the row's own bits
    const double after = dt * static_cast<double>(row) - (*times_)[next_[at(lane)]];
    const double back = row == 0 || after <= 0.0 ? 0.0 : after / dt;
    for (std::size_t k = 0; k < now_.size(); ++k) {
      const double b = now_[k][lane];
      (*out_)[first + k].set(lane, back == 0.0 ? b : b + back * (last_[k][lane] - b));
    }
  }

  const std::vector<double>* times_;
  base::PerLane<bool, W> take_;
  std::vector<Lanes<W>>* out_;
  std::vector<base::PerLane<Spot, W>> spots_;
  std::vector<Lanes<W>> now_, last_;  ///< heads of the probes in this row and the one before
  base::PerLane<std::size_t, W> next_{};
  base::PerLane<long long, W> due_{};
  long long soonest_ = never;
};

/// Observer of a batch: extremes beside those the rows keep, answers of each lane when its time is over.
template <int W>
class BatchRecord {
 public:
  BatchRecord(const Watch& watch,
              const std::vector<BatchStation>& stations,
              const std::vector<double>& times,
              const network::Values<W>& values,
              const base::PerLane<bool, W>& take,
              DrawAnswers<W>& out)
      : watch_(&watch),
        stations_(&stations),
        values_(&values),
        take_(take),
        out_(&out),
        history_(times, take, out.history) {}

  void begin(March<W>& march) {
    const std::size_t count = watch_->points.size();
    spots_.resize(count);
    for (std::size_t k = 0; k < count; ++k) {
      const auto& point = watch_->points[k];
      SpotTrack& t = spots_[k];
      for (int lane = 0; lane < W; ++lane) {
        const auto& v = values_->pipes[at(point.pipe)];
        const double x = point.profile >= 0 ? v.chainage[at(point.profile)][lane] : point.chainage;
        t.spot[at(lane)] = make_spot<W>(march, *values_, point.pipe, x, lane);
        t.elevation.set(lane, t.spot[at(lane)].elevation);
        t.high.set(lane, head_at<W>(march, t.spot[at(lane)], lane));
      }
      t.low = t.high;
    }
    if (!watch_->fast.empty()) top_flow_.assign(march.numbers().rows, Lanes<W>(0.0));
    find_rigid(march);
    if (watch_->whole_pipes) find_elevations(march);
    next_end_ = 0;
    find_next_end(march);
    watch_velocity(march);
    history_.begin(march, *values_);
  }

  bool step(March<W>& march, long long row) {
    watch_spots(march);
    watch_velocity(march);
    history_.step(march, row);
    if (row == next_end_) {
      for (int lane = 0; lane < W; ++lane)
        if (march.numbers().last_step[at(lane)] == row && take_[at(lane)]) collect(march, lane);
      find_next_end(march);
    }
    return true;
  }
  void before_jump(March<W>&, long long) {}
  void after_jump(March<W>& march, long long row) {
    (void)row;
    watch_spots(march);
    watch_velocity(march);
  }

 private:
  struct SpotTrack {
    base::PerLane<Spot, W> spot;
    Lanes<W> elevation, high, low;
  };

  /// The next row at which some lane's time is over.
  void find_next_end(const March<W>& march) {
    long long next = std::numeric_limits<long long>::max();
    for (const long long end : march.numbers().last_step)
      if (end > next_end_) next = std::min(next, end);
    next_end_ = next;
  }

  void find_elevations(const March<W>& march) {
    const auto& pipes = march.numbers().pipes;
    row_elevation_.resize(march.numbers().rows);
    for (std::size_t i = 0; i < pipes.size(); ++i) {
      const auto& v = values_->pipes[i];
      const std::span<const Lanes<W>> x(v.chainage), z(v.elevation);
      for (int row = 0; row <= pipes[i].most_reaches; ++row) {
        const Lanes<W> chainage = min(pipes[i].reach * static_cast<double>(row), v.length);
        row_elevation_[pipes[i].first_row + at(row)] = pipe::elevation_at<W>(x, z, chainage);
      }
    }
  }

  /// The branches of rigid pipes whose velocity is asked.
  void find_rigid(const March<W>& march) {
    const auto& branches = march.layout().branches;
    rigid_branch_.assign(march.numbers().pipes.size(), 0);
    for (std::size_t j = 0; j < branches.size(); ++j)
      if (branches[j].kind == BranchKind::rigid_pipe) rigid_branch_[at(branches[j].index)] = j;
  }

  void watch_spots(const March<W>& march) {
    for (SpotTrack& t : spots_) {
      for (int lane = 0; lane < W; ++lane) {
        const double h = head_at<W>(march, t.spot[at(lane)], lane);
        if (h > t.high[lane]) t.high.set(lane, h);
        if (h < t.low[lane]) t.low.set(lane, h);
      }
    }
  }

  void watch_velocity(const March<W>& march) {
    const auto& state = march.state();
    for (const std::size_t i : watch_->fast) {
      const auto& p = march.numbers().pipes[i];
      if (p.most_reaches == 0) {  // a rigid pipe has one flow, and one row to keep it
        top_flow_[p.first_row] = max(top_flow_[p.first_row], abs(state.branch_flow[rigid_branch_[i]]));
        continue;
      }
      for (int row = 0; row <= p.most_reaches; ++row) {
        const std::size_t r = p.first_row + at(row);
        Lanes<W> q = abs(state.flow[r]);
        if (state.cavities[i] != 0) q = max(q, abs(state.flow_before[r]));
        top_flow_[r] = max(top_flow_[r], q);
      }
    }
  }

  // The extreme of an answer in one lane; sections between the ends, ends by their places, points between rows.
  double extreme(const March<W>& march, const AnswerPlan& a, int lane) const {
    const auto& plan = march.plan();
    const auto& n = march.numbers();
    const bool highest = a.kind == AnswerKind::highest_pressure;
    const double weight = n.density[lane] * n.gravity[lane];
    bool any = false;
    double best = 0.0;
    const auto take = [&](double value) {
      if (!any || (a.kind == AnswerKind::lowest_pressure ? value < best : value > best)) best = value;
      any = true;
    };
    const auto place_head = [&](std::size_t place) {
      return highest ? march.state().place_max[place][lane] : march.state().place_min[place][lane];
    };
    if (a.where.place.exists() && a.kind != AnswerKind::velocity)
      return weight * (place_head(a.where.place.at()) - n.place_elevation[a.where.place.at()][lane]);
    for (std::size_t i = 0; i < plan.pipes.size(); ++i) {
      if (a.where.pipe.exists() && a.where.pipe.at() != i) continue;
      const auto& p = n.pipes[i];
      const int reaches = p.reaches[at(lane)];
      if (a.kind == AnswerKind::velocity) {
        const double area = values_->pipes[i].area[lane];
        if (a.where.place.exists()) {
          if (plan.pipes[i].from == a.where.place) take(top_flow_[p.first_row][lane] / area);
          if (plan.pipes[i].to == a.where.place) take(top_flow_[p.first_row + at(reaches)][lane] / area);
          continue;
        }
        for (int row = 0; row <= reaches; ++row) take(top_flow_[p.first_row + at(row)][lane] / area);
        continue;
      }
      if (a.where.pipe.exists() && a.where.chainage >= 0.0) continue;
      take(weight * (place_head(plan.pipes[i].from.at()) - row_elevation_[p.first_row][lane]));
      for (int row = 1; row < reaches; ++row) {
        const std::size_t r = p.first_row + at(row);
        const double h = highest ? march.state().head_max[r][lane] : march.state().head_min[r][lane];
        take(weight * (h - row_elevation_[r][lane]));
      }
      const double end_z =
          reaches > 0 ? row_elevation_[p.first_row + at(reaches)][lane] : values_->pipes[i].elevation.back()[lane];
      take(weight * (place_head(plan.pipes[i].to.at()) - end_z));
    }
    if (a.kind != AnswerKind::velocity) {
      for (std::size_t k = 0; k < spots_.size(); ++k) {
        const auto& point = watch_->points[k];
        if (a.where.pipe.exists() && a.where.pipe.index != point.pipe) continue;
        const bool one = a.where.pipe.exists() && a.where.chainage >= 0.0;
        if (one ? point.chainage != a.where.chainage : point.profile < 0) continue;
        const double h = highest ? spots_[k].high[lane] : spots_[k].low[lane];
        take(weight * (h - spots_[k].elevation[lane]));
      }
    }
    return any ? best : answers::missing;
  }

  void collect(March<W>& march, int lane) {
    const auto& plan = march.plan();
    double sum = 0.0;
    for (const auto& h : march.state().place_head) sum += h[lane];
    for (const auto& q : march.state().side_flow) sum += q[lane];
    if (!std::isfinite(sum)) {
      out_->status[at(lane)] = 2;
      return;
    }
    out_->status[at(lane)] = march.status(lane) == MarchStatus::completed ? 0 : 3;
    out_->cavity[at(lane)] = march.state().tally.share[lane] > told_cavity;
    for (std::size_t k = 0; k < plan.answers.size(); ++k)
      if (plan.answers[k].needs_surge()) out_->answer[k].set(lane, extreme(march, plan.answers[k], lane));
    for (std::size_t k = 0; k < plan.limits.size(); ++k)
      if (plan.limits[k].subject.needs_surge()) out_->limit[k].set(lane, extreme(march, plan.limits[k].subject, lane));
    keep_envelopes(march, lane);
  }

  // Envelopes at shares of the pipes' lengths: straight lines between the sections beside them.
  void keep_envelopes(March<W>& march, int lane) {
    const auto& pipes = march.numbers().pipes;
    const auto& ends = march.plan().pipes;
    auto& state = march.state();
    for (std::size_t i = 0; i < pipes.size(); ++i) {  // the ends are their places'
      if (pipes[i].most_reaches == 0) continue;
      const std::size_t first = pipes[i].first_row, last = first + at(pipes[i].reaches[at(lane)]);
      state.head_max[first].set(lane, state.place_max[ends[i].from.at()][lane]);
      state.head_min[first].set(lane, state.place_min[ends[i].from.at()][lane]);
      state.head_max[last].set(lane, state.place_max[ends[i].to.at()][lane]);
      state.head_min[last].set(lane, state.place_min[ends[i].to.at()][lane]);
    }
    for (std::size_t k = 0; k < stations_->size(); ++k) {
      const BatchStation& s = (*stations_)[k];
      const auto& p = pipes[at(s.pipe)];
      const int reaches = p.reaches[at(lane)];
      if (reaches > 0) {
        const double x = s.share * reaches;
        const int row = std::clamp(static_cast<int>(x), 0, reaches - 1);
        const std::size_t r = p.first_row + at(row);
        const auto between = [&](const Lanes<W>& a, const Lanes<W>& b) {
          return a[lane] + (x - row) * (b[lane] - a[lane]);
        };
        out_->head_max[k].set(lane, between(state.head_max[r], state.head_max[r + 1]));
        out_->head_min[k].set(lane, between(state.head_min[r], state.head_min[r + 1]));
      } else {
        const std::size_t from = ends[at(s.pipe)].from.at(), to = ends[at(s.pipe)].to.at();
        const auto between = [&](const Lanes<W>& a, const Lanes<W>& b) {
          return a[lane] + s.share * (b[lane] - a[lane]);
        };
        out_->head_max[k].set(lane, between(state.place_max[from], state.place_max[to]));
        out_->head_min[k].set(lane, between(state.place_min[from], state.place_min[to]));
      }
    }
  }

  const Watch* watch_;
  const std::vector<BatchStation>* stations_;
  const network::Values<W>* values_;
  base::PerLane<bool, W> take_;
  DrawAnswers<W>* out_;
  HistoryTrack<W> history_;
  std::vector<SpotTrack> spots_;
  std::vector<Lanes<W>> top_flow_, row_elevation_;
  std::vector<std::size_t> rigid_branch_;  ///< per pipe; of rigid ones
  long long next_end_ = 0;
};

/// The marches of one lane width, one per set of rigid pipes.
template <int W>
struct Width {
  std::vector<March<W>> marches;
  std::vector<std::vector<bool>> rigid;
  base::PerLane<Grid, W> grids;
};

}  // namespace

struct BatchMarcher::Parts {
  const network::Case* c;
  const network::Plan* plan;
  Watch watch;
  std::vector<BatchStation> stations;
  std::vector<double> history_times, no_times;
  Width<1> one;
  Width<8> eight;

  template <int W>
  Width<W>& width() {
    if constexpr (W == 1) {
      return one;
    } else {
      return eight;
    }
  }

  template <int W>
  March<W>& march_for(const std::vector<bool>& rigid) {
    Width<W>& w = width<W>();
    for (std::size_t k = 0; k < w.rigid.size(); ++k)
      if (w.rigid[k] == rigid) return w.marches[k];
    w.rigid.push_back(rigid);
    return w.marches.emplace_back(*c, *plan, make_layout(*c, *plan, rigid));
  }
};

BatchMarcher::BatchMarcher(const network::Case& c, const network::Plan& plan, std::vector<double> history_times)
    : parts_(std::make_unique<Parts>(Parts{&c, &plan, make_watch(plan), {}, std::move(history_times), {}, {}, {}})) {
  for (std::size_t i = 0; i < plan.pipes.size(); ++i)
    for (int k = 0; k <= station_intervals; ++k)
      parts_->stations.push_back({static_cast<int>(i), static_cast<double>(k) / station_intervals});
}
BatchMarcher::~BatchMarcher() = default;
BatchMarcher::BatchMarcher(BatchMarcher&&) noexcept = default;
BatchMarcher& BatchMarcher::operator=(BatchMarcher&&) noexcept = default;

const std::vector<BatchStation>& BatchMarcher::stations() const { return parts_->stations; }

template <int W>
void BatchMarcher::march(const network::Values<W>& values, const steady::SteadyState<W>& steady, DrawAnswers<W>& out) {
  const network::Plan& plan = *parts_->plan;
  const Lanes<W> none(answers::missing);
  out.answer.assign(plan.answers.size(), none);
  out.limit.assign(plan.limits.size(), none);
  out.head_max.assign(parts_->stations.size(), none);
  out.head_min.assign(parts_->stations.size(), none);
  const std::vector<double>& times = out.keep_history ? parts_->history_times : parts_->no_times;
  out.history.assign(times.size() * plan.probes.size(), none);
  out.cavity = {};
  for (std::size_t k = 0; k < plan.answers.size(); ++k)
    if (!plan.answers[k].needs_surge()) out.answer[k] = steady::answer<W>(plan, values, steady, plan.answers[k]);
  for (std::size_t k = 0; k < plan.limits.size(); ++k)
    if (!plan.limits[k].subject.needs_surge())
      out.limit[k] = steady::answer<W>(plan, values, steady, plan.limits[k].subject);

  Width<W>& width = parts_->template width<W>();
  base::PerLane<bool, W> waiting{};
  for (int lane = 0; lane < W; ++lane) {
    Grid& grid = width.grids[at(lane)];
    out.status[at(lane)] = 2;
    if (!steady::is_usable(steady.status[at(lane)])) continue;
    choose_grid(grid_request(*parts_->c, plan, values, steady, lane), grid);
    if (grid.status == GridStatus::good) {
      waiting[at(lane)] = true;
    } else if (grid.status != GridStatus::not_finite) {
      out.status[at(lane)] = 4;
    }
  }
  Grid idle;
  std::vector<bool> rigid(plan.pipes.size());
  for (int first = 0; first < W; ++first) {
    if (!waiting[at(first)]) continue;
    const Grid& lead = width.grids[at(first)];
    for (std::size_t i = 0; i < rigid.size(); ++i) rigid[i] = lead.reaches[i] == 0;
    idle = lead;
    idle.status = GridStatus::not_finite;  // lanes of another kind rest in this march
    base::PerLane<bool, W> take{};
    base::PerLane<const Grid*, W> grids{};
    for (int lane = 0; lane < W; ++lane) {
      bool same = waiting[at(lane)];
      for (std::size_t i = 0; same && i < rigid.size(); ++i) same = (width.grids[at(lane)].reaches[i] == 0) == rigid[i];
      take[at(lane)] = same;
      grids[at(lane)] = same ? &width.grids[at(lane)] : &idle;
      if (same) waiting[at(lane)] = false;
    }
    March<W>& m = parts_->template march_for<W>(rigid);
    BatchRecord<W> record(parts_->watch, parts_->stations, times, values, take, out);
    m.prepare(values, steady, grids, true);
    m.run(record);
  }
}

template void BatchMarcher::march<1>(const network::Values<1>&, const steady::SteadyState<1>&, DrawAnswers<1>&);
template void BatchMarcher::march<8>(const network::Values<8>&, const steady::SteadyState<8>&, DrawAnswers<8>&);

}  // namespace headband::transient
