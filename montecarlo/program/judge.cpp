// SPDX-License-Identifier: MIT
#include "montecarlo/program/judge.hpp"

#include "montecarlo/bands/verdict.hpp"

#include <cmath>

namespace headband::program {

using answers::LimitAnswer;
using answers::Verdict;
using network::AnswerKind;

std::string kind_name(AnswerKind kind) {
  switch (kind) {
    case AnswerKind::pressure_drop:
      return "pressure_drop";
    case AnswerKind::flow:
      return "flow";
    case AnswerKind::head:
      return "head";
    case AnswerKind::highest_pressure:
      return "highest_pressure";
    case AnswerKind::lowest_pressure:
      return "lowest_pressure";
    case AnswerKind::velocity:
      return "velocity";
  }
  return "";
}

std::string unit_name(AnswerKind kind) {
  switch (kind) {
    case AnswerKind::pressure_drop:
    case AnswerKind::highest_pressure:
    case AnswerKind::lowest_pressure:
      return "Pa";
    case AnswerKind::flow:
      return "m3/s";
    case AnswerKind::head:
      return "m";
    case AnswerKind::velocity:
      return "m/s";
  }
  return "";
}

base::Dimension dimension_of(AnswerKind kind) {
  switch (kind) {
    case AnswerKind::pressure_drop:
      return base::Dimension::pressure_difference;
    case AnswerKind::highest_pressure:
    case AnswerKind::lowest_pressure:
      return base::Dimension::pressure;
    case AnswerKind::flow:
      return base::Dimension::flow;
    case AnswerKind::head:
      return base::Dimension::length;
    case AnswerKind::velocity:
      return base::Dimension::velocity;
  }
  return base::Dimension::number;
}

std::string where_name(const network::AnswerPlan& answer) {
  const bool two = answer.other.place.exists() || answer.other.pipe.exists();
  return two ? answer.where.name + ", " + answer.other.name : answer.where.name;
}

namespace {

LimitAnswer blank(const network::LimitPlan& limit) {
  LimitAnswer answer;
  answer.name = limit.name;
  answer.kind = kind_name(limit.subject.kind);
  answer.unit = unit_name(limit.subject.kind);
  answer.where = where_name(limit.subject);
  answer.limit = limit.bound;
  answer.verdict = Verdict::cannot_tell;
  return answer;
}

void set_value(LimitAnswer& answer, const network::LimitPlan& limit, double value) {
  answer.value = value;
  answer.margin = montecarlo::margin({limit.bound, limit.not_over}, value);
}

}  // namespace

std::vector<LimitAnswer> judge_steady(const network::Case& c, const Central& central) {
  std::vector<LimitAnswer> answers;
  for (const auto& limit : central.plan.limits) {
    LimitAnswer answer = blank(limit);
    set_value(answer, limit, steady::answer<1>(central.plan, central.values, central.state, limit.subject).number);
    answer.verdict = montecarlo::verdict_of_run({limit.bound, limit.not_over}, answer.value, 0.0);
    if (!c.events.empty() && limit.subject.needs_surge() && answer.verdict == Verdict::ok) {
      answer.verdict = Verdict::cannot_tell;
      answer.reason = "needs surge";
    }
    if (answer.reason.empty() && answer.verdict == Verdict::cannot_tell) answer.reason = "the value is not known";
    answers.push_back(std::move(answer));
  }
  return answers;
}

std::vector<LimitAnswer> judge_run(const network::Plan& plan,
                                   const std::vector<double>& value,
                                   const std::vector<double>& grid_bound,
                                   const std::vector<double>& bound_to_kept) {
  std::vector<LimitAnswer> answers;
  for (std::size_t i = 0; i < plan.limits.size(); ++i) {
    const auto& limit = plan.limits[i];
    LimitAnswer answer = blank(limit);
    set_value(answer, limit, value.at(i));
    answer.verdict =
        montecarlo::verdict_of_run({limit.bound, limit.not_over}, value[i], {grid_bound.at(i), bound_to_kept.at(i)});
    const bool by_the_grid_alone =
        montecarlo::verdict_of_run({limit.bound, limit.not_over}, value[i], grid_bound[i]) == answer.verdict;
    if (!by_the_grid_alone) answer.reason = "not kept already before vapour formed";
    if (answer.verdict == Verdict::cannot_tell) {
      answer.reason = !std::isfinite(value[i])        ? "the value is not known"
                      : !std::isfinite(grid_bound[i]) ? "the grid is not converging"
                                                      : "the limit lies within the grid bound of the value";
    }
    answers.push_back(std::move(answer));
  }
  return answers;
}

std::vector<LimitAnswer> judge_nothing(const network::Plan& plan, const std::string& reason) {
  std::vector<LimitAnswer> answers;
  for (const auto& limit : plan.limits) {
    answers.push_back(blank(limit));
    answers.back().reason = reason;
  }
  return answers;
}

Verdict worst(const std::vector<LimitAnswer>& limits) {
  std::vector<Verdict> verdicts;
  for (const auto& limit : limits) verdicts.push_back(limit.verdict);
  return montecarlo::worst(verdicts);
}

}  // namespace headband::program
