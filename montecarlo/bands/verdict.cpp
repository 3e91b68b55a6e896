// SPDX-License-Identifier: MIT
#include "montecarlo/bands/verdict.hpp"

#include "montecarlo/bands/counts.hpp"

#include <algorithm>
#include <cmath>

namespace headband::montecarlo {

bool kept(const Bound& bound, double value) { return bound.not_over ? value <= bound.bound : value >= bound.bound; }

double moved_towards(const Bound& bound, double value, double by) { return bound.not_over ? value + by : value - by; }

double moved_away(const Bound& bound, double value, double by) { return moved_towards(bound, value, -by); }

double margin(const Bound& bound, double value) { return bound.not_over ? bound.bound - value : value - bound.bound; }

namespace {

bool may_be_broken(const Bound& bound, double value, const GridRoom& room) {
  return !std::isfinite(room.broken) || !kept(bound, moved_towards(bound, value, room.broken));
}

bool surely_broken(const Bound& bound, double value, const GridRoom& room) {
  return std::isfinite(room.kept) && !kept(bound, moved_away(bound, value, room.kept));
}

}  // namespace

Verdict verdict_of_run(const Bound& bound, double value, GridRoom room) {
  if (!std::isfinite(value)) return Verdict::cannot_tell;
  if (!may_be_broken(bound, value, room)) return Verdict::ok;
  return surely_broken(bound, value, room) ? Verdict::not_ok : Verdict::cannot_tell;
}

Verdict verdict_of_probability(double lower, double upper, double at_most) {
  if (upper <= at_most) return Verdict::ok;
  return lower > at_most ? Verdict::not_ok : Verdict::cannot_tell;
}

Verdict worst(std::span<const Verdict> verdicts) {
  const auto any = [&](Verdict v) { return std::ranges::find(verdicts, v) != verdicts.end(); };
  if (any(Verdict::not_ok)) return Verdict::not_ok;
  if (any(Verdict::cannot_tell)) return Verdict::cannot_tell;
  return any(Verdict::ok) ? Verdict::ok : Verdict::none;
}

Verdict over_outer_points(std::span<const Verdict> verdicts) {
  if (verdicts.empty()) return Verdict::none;
  for (const Verdict v : {Verdict::ok, Verdict::not_ok}) {
    if (std::ranges::all_of(verdicts, [v](Verdict each) { return each == v; })) return v;
  }
  return Verdict::cannot_tell;
}

namespace {

/// Probability and its bounds from the counts.
void count_up(Judged& j, double confidence) {
  if (j.draws > j.failed) j.probability = static_cast<double>(j.broken) / static_cast<double>(j.draws - j.failed);
  j.lower = probability_at_least(j.broken_away, j.draws, confidence);
  j.upper = probability_at_most(j.broken_towards + j.failed, j.draws, confidence);
}

}  // namespace

Judged judge(const Bound& bound,
             std::span<const double> values,
             std::span<const std::int8_t> status,
             GridRoom room,
             double at_most,
             double confidence) {
  Judged j;
  j.draws = static_cast<long long>(values.size());
  for (std::size_t i = 0; i < values.size(); ++i) {
    const double value = values[i];
    if (status[i] != 0 || std::isnan(value)) {
      ++j.failed;
      continue;
    }
    j.broken += kept(bound, value) ? 0 : 1;
    j.broken_towards += may_be_broken(bound, value, room) ? 1 : 0;
    j.broken_away += surely_broken(bound, value, room) ? 1 : 0;
  }
  if (j.draws == 0) return j;
  count_up(j, confidence);
  j.verdict = verdict_of_probability(j.lower, j.upper, at_most);
  return j;
}

Judged judge_any(std::span<const Part> parts, std::span<const std::int8_t> status, double confidence) {
  Judged j;
  j.verdict = Verdict::none;
  j.draws = static_cast<long long>(status.size());
  for (std::size_t i = 0; i < status.size(); ++i) {
    bool failed = status[i] != 0, broken = false, towards = false, away = false;
    for (const Part& p : parts) {
      const double value = p.values[i];
      failed = failed || std::isnan(value);
      broken = broken || !kept(p.bound, value);
      towards = towards || may_be_broken(p.bound, value, p.room);
      away = away || surely_broken(p.bound, value, p.room);
    }
    if (failed) {
      ++j.failed;
      continue;
    }
    j.broken += broken ? 1 : 0;
    j.broken_towards += towards ? 1 : 0;
    j.broken_away += away ? 1 : 0;
  }
  if (j.draws > 0) count_up(j, confidence);
  return j;
}

}  // namespace headband::montecarlo
