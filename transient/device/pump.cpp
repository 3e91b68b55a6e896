// SPDX-License-Identifier: MIT
#include "transient/device/pump.hpp"

#include <algorithm>
#include <cmath>
#include <numbers>

namespace headband::transient {
namespace {

/// Below this ratio of speed to flow (both as shares) the curve is followed as that of no speed: q/speed stays finite.
constexpr double least_speed = 1e-4;
/// The jump between curve and table is faded out over this angle of the (flow, speed) plane: own choice.
constexpr double fade = 0.25 * std::numbers::pi;

struct Value {
  double value = 0.0, by_flow = 0.0, by_speed = 0.0;  // by flow as a share of the rated one
};

// value(v, alpha) = alpha^2 curve(q / alpha), by the affinity laws; v = q / rated flow.
Value by_affinity(const network::PumpCurve<1>& curve, double v, double speed, double rated_flow) {
  const double least = least_speed * std::fabs(v);
  if (speed <= least) {  // no speed to speak of: the square of the flow alone
    const double value =
        least * least * curve.at(base::Lanes<1>(std::copysign(rated_flow / least_speed, v))).value.number;
    return {value, v == 0.0 ? 0.0 : 2.0 * value / v, 0.0};
  }
  const double flow = v * rated_flow;
  const auto p = curve.at(base::Lanes<1>(flow / speed));
  const double value = p.value.number, slope = p.slope.number;
  return {speed * speed * value, speed * slope * rated_flow, 2.0 * speed * value - flow * slope};
}

// What the laws of forward running say at (v, alpha), v a share of the rated flow.
struct Forward {
  const PumpModel& pump;
  bool torque;

  [[nodiscard]] bool known() const {
    return torque ? pump.has_torque_table || !std::isnan(pump.shut_off_torque) : pump.has_curve;
  }
  [[nodiscard]] Value at(double v, double alpha) const {
    if (!torque) return by_affinity(pump.curve, v, alpha, pump.rated_flow);
    if (pump.has_torque_table) return by_affinity(pump.torque_curve, v, alpha, pump.rated_flow);
    const double s = pump.shut_off_torque;
    return {s * alpha * alpha + (1.0 - s) * alpha * v, (1.0 - s) * alpha, 2.0 * s * alpha + (1.0 - s) * v};
  }
};

Value from_table(const PumpModel& pump, bool torque, double v, double alpha) {
  const double unit = torque ? 1.0 : pump.rated_head;
  const auto& curve = torque ? pump.quadrants->torque : pump.quadrants->head;
  const QuadrantPoint p = read_quadrants(*pump.quadrants, curve, v, alpha);
  return {unit * p.value, unit * p.by_flow, unit * p.by_speed};
}

// Adds gap (alpha^2 + v^2) (1 - angle/fade): the table then starts where the forward laws end.
void add_faded(Value& out, double gap, double angle, double angle_by_v, double angle_by_alpha, double v, double alpha) {
  const double weight = 1.0 - angle / fade;
  if (!(weight > 0.0)) return;
  const double size = v * v + alpha * alpha;
  out.value += gap * size * weight;
  out.by_flow += gap * (2.0 * v * weight - size * angle_by_v / fade);
  out.by_speed += gap * (2.0 * alpha * weight - size * angle_by_alpha / fade);
}

Value evaluate(const PumpModel& pump, bool torque, double v, double alpha) {
  const Forward forward{pump, torque};
  if (pump.quadrants == nullptr || (forward.known() && v >= 0.0 && alpha >= 0.0)) return forward.at(v, alpha);
  Value out = from_table(pump, torque, v, alpha);
  const double size = v * v + alpha * alpha;
  if (!forward.known() || !(size > 0.0)) return out;
  if (alpha > 0.0) {  // v < 0: past the line of no flow
    const double gap = forward.at(0.0, 1.0).value - from_table(pump, torque, 0.0, 1.0).value;
    add_faded(out, gap, std::atan2(-v, alpha), -alpha / size, v / size, v, alpha);
  } else if (v > 0.0) {  // alpha < 0: past the line of no speed
    const double gap = forward.at(1.0, 0.0).value - from_table(pump, torque, 1.0, 0.0).value;
    add_faded(out, gap, std::atan2(-alpha, v), alpha / size, -v / size, v, alpha);
  }
  return out;
}

}  // namespace

PumpPoint PumpModel::at(double flow, double speed) const {
  const double v = flow / rated_flow;
  const Value h = evaluate(*this, false, v, speed);
  const Value t = evaluate(*this, true, v, speed);
  return {h.value, h.by_flow / rated_flow, h.by_speed, t.value, t.by_flow / rated_flow, t.by_speed};
}

}  // namespace headband::transient
