// SPDX-License-Identifier: MIT
#include "transient/device/movement.hpp"

#include <algorithm>
#include <cmath>
#include <numbers>

namespace headband::transient {
namespace {

double position_of(const Segment& s, double time) {
  const double swing = s.swing == 0.0 ? 0.0 : s.swing * std::sin(2.0 * std::numbers::pi * (time - s.start) / s.period);
  return s.position + s.slope * (time - s.start) + swing;
}

}  // namespace

double position_at(const std::vector<Segment>& chain, double time, double low, double high) {
  std::size_t i = 0;
  while (i + 1 < chain.size() && chain[i + 1].start <= time) ++i;
  const double position = position_of(chain[i], time);
  return chain[i].swing == 0.0 ? position : std::clamp(position, low, high);
}

void add_stroke(std::vector<Segment>& chain, const Stroke& stroke, double grid_step, double low, double high) {
  const bool instant = !(stroke.over > 0.0) && stroke.travel_time.empty() && stroke.swing == 0.0;
  const double begin = instant ? stroke.at + 0.5 * grid_step : stroke.at;
  double held = position_at(chain, stroke.at, low, high);
  while (chain.size() > 1 && chain.back().start >= begin && (instant || !chain.back().instant)) chain.pop_back();
  if (instant) {
    chain.push_back({.start = begin, .position = stroke.to, .instant = true});
    return;
  }
  // an instant that came first acts half a step after its row: this stroke, on its own clock, is seen from then on
  double earliest = begin;
  if (chain.back().instant && chain.back().start >= begin) {
    held = chain.back().position;
    earliest = chain.back().start + 1e-9 * grid_step;
  }
  const auto add = [&](double start, double position, double slope) {
    const double from = std::max(start, earliest);
    while (chain.back().start >= from) chain.pop_back();
    chain.push_back({.start = from, .position = position + slope * (from - start), .slope = slope});
  };
  if (stroke.swing != 0.0) {
    chain.push_back({.start = earliest, .position = held, .swing = stroke.swing, .period = stroke.period});
  } else if (!stroke.travel_time.empty()) {
    const auto& t = stroke.travel_time;
    const auto& x = stroke.travel_position;
    if (t.front() > 0.0) add(begin, held, (x.front() - held) / t.front());
    for (std::size_t i = 0; i < t.size(); ++i) {
      const bool last = i + 1 == t.size();
      const double slope = last || !(t[i + 1] > t[i]) ? 0.0 : (x[i + 1] - x[i]) / (t[i + 1] - t[i]);
      add(stroke.at + t[i], x[i], slope);
    }
  } else {
    add(begin, held, (stroke.to - held) / stroke.over);
    add(stroke.at + stroke.over, stroke.to, 0.0);
  }
}

template <int W>
void Movement<W>::rewind() {
  constexpr double never = std::numeric_limits<double>::infinity();
  still_ = true;
  swings_ = false;
  at_ = {};
  for (int lane = 0; lane < W; ++lane) {
    const auto& c = chain(lane);
    start_.set(lane, 0.0);
    from_.set(lane, c.front().position);
    slope_.set(lane, 0.0);
    position_.set(lane, c.front().position);
    next_.set(lane, c.size() > 1 ? c[1].start : never);
    if (c.size() > 1 || c.front().slope != 0.0) still_ = false;
    for (const Segment& s : c) swings_ = swings_ || s.swing != 0.0;
  }
}

template <int W>
void Movement<W>::begin_segments(const Lanes<W>& time) {
  constexpr double never = std::numeric_limits<double>::infinity();
  bool moving = false;
  for (int lane = 0; lane < W; ++lane) {
    const auto& c = chain(lane);
    std::size_t& i = at_[static_cast<std::size_t>(lane)];
    while (i + 1 < c.size() && c[i + 1].start <= time[lane]) ++i;
    start_.set(lane, c[i].start);
    from_.set(lane, c[i].position);
    slope_.set(lane, c[i].slope);
    next_.set(lane, i + 1 < c.size() ? c[i + 1].start : never);
    moving = moving || i + 1 < c.size() || c[i].slope != 0.0 || c[i].swing != 0.0;
  }
  if (!moving) {
    position_ = from_;
    still_ = true;
  }
}

template <int W>
void Movement<W>::swing(const Lanes<W>& time) {
  for (int lane = 0; lane < W; ++lane) {
    const Segment& s = chain(lane)[at_[static_cast<std::size_t>(lane)]];
    if (s.swing != 0.0) position_.set(lane, std::clamp(position_of(s, time[lane]), low_, high_));
  }
}

template class Movement<1>;
template class Movement<8>;

}  // namespace headband::transient
