// SPDX-License-Identifier: MIT
#include "montecarlo/propagate/judge_limits.hpp"

#include "montecarlo/bands/verdict.hpp"

#include <fmt/format.h>
#include <algorithm>
#include <array>
#include <cmath>
#include <span>

namespace headband::montecarlo {

using answers::LimitAnswer;
using answers::Verdict;

namespace {

/// Allowed probability of a limit that names none (a guess, told to the user).
constexpr double usual_at_most = 0.05;
constexpr const char* rating_kind = "rating";

std::string reason_of(const Judged& j, double grid_bound) {
  if (!std::isfinite(grid_bound)) return "the grid is not converging";
  if (j.draws == j.failed) return "no draw finished";
  return "the allowed probability lies between the two bounds: more draws may tell";
}

/// What the grid leaves open about limit `i` in every draw: that of the central run.
GridRoom room_of(const CentralRun& central, std::size_t i) {
  const double bound = i < central.limit_grid_bound.size() ? central.limit_grid_bound[i] : 0.0;
  return {bound, i < central.limit_bound_to_kept.size() ? central.limit_bound_to_kept[i] : bound};
}

/// Mean distance over the bound of the finished draws, negative when kept.
double mean_excess(const Bound& bound, std::span<const double> values) {
  double sum = 0.0, n = 0.0;
  for (const double v : values) {
    if (std::isnan(v)) continue;
    sum -= margin(bound, v);
    n += 1.0;
  }
  return n > 0.0 ? sum / n : answers::missing;
}

/// The range whose two ends differ most in the probability, the other ranges as they are.
std::string deciding_range(const Ranges& ranges,
                           const network::Case& c,
                           const std::vector<PointJudgement>& points,
                           std::size_t limit) {
  double largest = -1.0;
  std::string name;
  for (std::size_t r = 0; r < ranges.unknown.size(); ++r) {
    std::array<double, 2> sum{}, count{};
    for (std::size_t p = 0; p < points.size(); ++p) {
      const double place = ranges.points[p].place[r];
      if (place == 0.5) continue;
      const std::size_t side = place > 0.5 ? 1 : 0;
      const LimitAnswer& answer = points[p].limits[limit];
      const double chance = std::isnan(answer.probability) ? 0.5 * (answer.probability_lower + answer.probability_upper)
                                                           : answer.probability;
      sum[side] += chance;
      count[side] += 1.0;
    }
    const double effect = std::fabs(sum[1] / count[1] - sum[0] / count[0]);
    if (effect > largest) {
      largest = effect;
      name = c.unknowns[ranges.unknown[r]].name;
    }
  }
  return name;
}

}  // namespace

std::string kind_word(network::AnswerKind kind) {
  switch (kind) {
    case network::AnswerKind::pressure_drop:
      return "pressure_drop";
    case network::AnswerKind::flow:
      return "flow";
    case network::AnswerKind::head:
      return "head";
    case network::AnswerKind::highest_pressure:
      return "highest_pressure";
    case network::AnswerKind::lowest_pressure:
      return "lowest_pressure";
    case network::AnswerKind::velocity:
      return "velocity";
  }
  return {};
}

std::string unit_word(network::AnswerKind kind) {
  switch (kind) {
    case network::AnswerKind::pressure_drop:
    case network::AnswerKind::highest_pressure:
    case network::AnswerKind::lowest_pressure:
      return "Pa";
    case network::AnswerKind::flow:
      return "m3/s";
    case network::AnswerKind::head:
      return "m";
    case network::AnswerKind::velocity:
      return "m/s";
  }
  return {};
}

std::string where_words(const network::AnswerPlan& answer) {
  const bool two = answer.other.place.exists() || answer.other.pipe.exists();
  return two ? answer.where.name + ", " + answer.other.name : answer.where.name;
}

namespace {

/// The chance that any pipe exceeds its own rating, from the judged ratings of the pipes.
void judge_whole_line(const network::Case& c,
                      const network::Plan& plan,
                      const CentralRun& central,
                      const DrawTable& table,
                      bool surge,
                      PointJudgement& point) {
  std::vector<Part> parts;
  LimitAnswer answer;
  answer.name = any_rated_pipe;
  answer.kind = rating_kind;
  answer.unit = "Pa";
  double worse_by = 0.0;
  for (std::size_t i = 0; i < plan.limits.size(); ++i) {
    const network::LimitPlan& limit = plan.limits[i];
    if (limit.rating_of_pipe < 0) continue;
    parts.push_back({{limit.bound, limit.not_over}, table.limit[i], room_of(central, i)});
    answer.margin = std::fmin(answer.margin, point.limits[i].margin);
    answer.confidence = std::fmax(answer.confidence, limit.confidence);
    worse_by = parts.size() == 1 ? point.worse_by[i] : std::fmax(worse_by, point.worse_by[i]);
  }
  if (parts.empty()) return;
  const Judged j = judge_any(parts, table.status, answer.confidence);
  answer.probability_lower = j.lower;
  if (surge || c.events.empty()) {
    answer.probability = j.probability;
    answer.probability_upper = j.upper;
  } else {
    answer.reason = "needs surge";
  }
  point.limits.push_back(std::move(answer));
  point.worse_by.push_back(worse_by);
}

}  // namespace

PointJudgement judge_limits(
    const network::Case& c, const network::Plan& plan, const CentralRun& central, const DrawTable& table, bool surge) {
  PointJudgement point;
  for (std::size_t i = 0; i < plan.limits.size(); ++i) {
    const network::LimitPlan& limit = plan.limits[i];
    const Bound bound{limit.bound, limit.not_over};
    LimitAnswer answer;
    answer.name = limit.name;
    answer.kind = kind_word(limit.subject.kind);
    answer.unit = unit_word(limit.subject.kind);
    answer.where = where_words(limit.subject);
    answer.limit = limit.bound;
    answer.at_most = limit.at_most < 0.0 ? usual_at_most : limit.at_most;
    answer.confidence = limit.confidence;
    if (i < central.limit_value.size()) answer.value = central.limit_value[i];
    answer.margin = margin(bound, answer.value);
    const GridRoom room = room_of(central, i);
    const Judged j = judge(bound, table.limit[i], table.status, room, answer.at_most, answer.confidence);
    answer.probability = j.probability;
    answer.probability_lower = j.lower;
    answer.probability_upper = j.upper;
    answer.verdict = j.verdict;
    if (j.verdict == Verdict::cannot_tell) answer.reason = reason_of(j, room.broken);
    if (j.verdict == Verdict::not_ok && !std::isfinite(room.broken))
      answer.reason = "not kept already before vapour formed";
    if (!surge && !c.events.empty() && limit.subject.needs_surge() && j.verdict != Verdict::not_ok) {
      // a surge can only add broken draws: what the steady state says is a lower bound and nothing more
      answer.probability = answers::missing;
      answer.probability_upper = answers::missing;
      answer.verdict = Verdict::cannot_tell;
      answer.reason = "needs surge";
    }
    point.limits.push_back(std::move(answer));
    point.worse_by.push_back(mean_excess(bound, table.limit[i]));
  }
  judge_whole_line(c, plan, central, table, surge, point);
  return point;
}

std::vector<LimitAnswer> over_ranges(const Ranges& ranges,
                                     const network::Case& c,
                                     const std::vector<PointJudgement>& points) {
  std::vector<LimitAnswer> limits = points.front().limits;
  if (points.size() < 2) return limits;
  for (std::size_t i = 0; i < limits.size(); ++i) {
    LimitAnswer& answer = limits[i];
    std::vector<Verdict> verdicts;
    std::size_t worst_point = 0;
    const auto key = [&](std::size_t p) {
      const auto& each = points[p].limits[i];
      return std::array{std::isnan(each.probability) ? each.probability_lower : each.probability,
                        points[p].worse_by[i]};
    };
    const auto span_of = [&](double LimitAnswer::* number) {
      std::array<double, 2> span{answers::missing, answers::missing};
      for (const auto& p : points) {
        const double x = p.limits[i].*number;
        if (std::isnan(x)) return std::array{answers::missing, answers::missing};
        span = {std::fmin(span[0], x), std::fmax(span[1], x)};
      }
      return span;
    };
    for (std::size_t p = 0; p < points.size(); ++p) {
      verdicts.push_back(points[p].limits[i].verdict);
      if (key(p) > key(worst_point)) worst_point = p;
    }
    answer.probability_range = span_of(&LimitAnswer::probability);
    answer.probability_lower_range = span_of(&LimitAnswer::probability_lower);
    answer.probability_upper_range = span_of(&LimitAnswer::probability_upper);
    answer.worst_corner = ranges.points[worst_point].name;
    if (answer.name == any_rated_pipe && answer.kind == rating_kind) continue;
    const bool needs_surge = answer.reason == "needs surge";
    answer.verdict = over_outer_points(verdicts);
    if (answer.verdict != Verdict::cannot_tell) {
      answer.reason.clear();
    } else if (!needs_surge) {
      const bool all = std::ranges::all_of(verdicts, [](Verdict v) { return v == Verdict::cannot_tell; });
      if (!all)
        answer.reason = fmt::format(
            "the range of {} decides; worst at {}", deciding_range(ranges, c, points, i), answer.worst_corner);
    }
  }
  return limits;
}

}  // namespace headband::montecarlo
