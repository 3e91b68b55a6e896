// SPDX-License-Identifier: MIT

#include "core/network/pump_curve.hpp"

#include <algorithm>
#include <cmath>
#include <numbers>

namespace headband::network {
namespace {

/// c0 + c1 t + c2 t^2 about t = 0 at `about`, through three points.
template <int W>
struct Parabola {
  Lanes<W> c0, c1, c2;
};

template <int W>
Parabola<W> parabola_through(const Lanes<W>* flow, const Lanes<W>* value, const Lanes<W>& about) {
  // Newton's divided differences, then shifted to `about`.
  const Lanes<W> first = (value[1] - value[0]) / (flow[1] - flow[0]);
  const Lanes<W> second = (value[2] - value[1]) / (flow[2] - flow[1]);
  const Lanes<W> curvature = (second - first) / (flow[2] - flow[0]);
  const Lanes<W> a = about - flow[0], b = about - flow[1];
  return {value[0] + a * (first + b * curvature), first + (a + b) * curvature, curvature};
}

/// Slope at an end of a monotone cubic: three-point formula, kept from turning the curve round.
/// h0, d0: width and mean slope of the end interval; h1, d1: of its neighbour.
template <int W>
Lanes<W> end_slope(const Lanes<W>& h0, const Lanes<W>& h1, const Lanes<W>& d0, const Lanes<W>& d1) {
  const Lanes<W> zero(0.0);
  Lanes<W> slope = ((2.0 * h0 + h1) * d0 - h0 * d1) / (h0 + h1);
  slope = base::select(slope * d0 <= zero, zero, slope);
  const base::Mask<W> too_steep = (d0 * d1 < zero) & (base::abs(slope) > 3.0 * base::abs(d0));
  return base::select(too_steep, 3.0 * d0, slope);
}

}  // namespace

template <int W>
void PumpCurve<W>::fit_square_law(const std::vector<Lanes<W>>& flow, const std::vector<Lanes<W>>& value) {
  const Lanes<W> zero(0.0);
  const Lanes<W> b = (value[0] - value[1]) / (flow[1] * flow[1] - flow[0] * flow[0]);
  const Lanes<W> a = value[0] + b * flow[0] * flow[0];
  pieces_.resize(2);
  pieces_[0] = {zero, a, zero, zero, zero};
  pieces_[1] = {zero, a, zero, -b, zero};
}

template <int W>
void PumpCurve<W>::fit_parabola(const std::vector<Lanes<W>>& flow, const std::vector<Lanes<W>>& value) {
  const Lanes<W> zero(0.0);
  const Parabola<W> p = parabola_through<W>(flow.data(), value.data(), zero);
  pieces_.resize(2);
  pieces_[0] = {zero, p.c0, p.c1, zero, zero};
  pieces_[1] = {zero, p.c0, p.c1, p.c2, zero};
}

template <int W>
void PumpCurve<W>::fit_monotone_cubic(const std::vector<Lanes<W>>& flow, const std::vector<Lanes<W>>& value) {
  const std::size_t n = flow.size();
  const Lanes<W> zero(0.0);
  const auto width = [&](std::size_t i) { return flow[i + 1] - flow[i]; };
  const auto mean_slope = [&](std::size_t i) { return (value[i + 1] - value[i]) / width(i); };

  slopes_.resize(n);
  slopes_[0] = end_slope<W>(width(0), width(1), mean_slope(0), mean_slope(1));
  slopes_[n - 1] = end_slope<W>(width(n - 2), width(n - 3), mean_slope(n - 2), mean_slope(n - 3));
  for (std::size_t i = 1; i + 1 < n; ++i) {
    // Weighted harmonic mean of the neighbours' slopes (Fritsch & Butland 1984), 0 at an extreme.
    const Lanes<W> left = mean_slope(i - 1), right = mean_slope(i);
    const Lanes<W> w1 = 2.0 * width(i) + width(i - 1), w2 = width(i) + 2.0 * width(i - 1);
    const base::Mask<W> same_sign = left * right > zero;
    const Lanes<W> l = base::select(same_sign, left, Lanes<W>(1.0)), r = base::select(same_sign, right, Lanes<W>(1.0));
    slopes_[i] = base::select(same_sign, (w1 + w2) / (w1 / l + w2 / r), zero);
  }

  pieces_.resize(n + 1);
  pieces_[0] = {flow[0], value[0], slopes_[0], zero, zero};
  for (std::size_t i = 0; i + 1 < n; ++i) {
    const Lanes<W> h = width(i), d = mean_slope(i);
    pieces_[i + 1] = {flow[i],
                      value[i],
                      slopes_[i],
                      (3.0 * d - 2.0 * slopes_[i] - slopes_[i + 1]) / h,
                      (slopes_[i] + slopes_[i + 1] - 2.0 * d) / (h * h)};
  }
  const Parabola<W> last = parabola_through<W>(&flow[n - 3], &value[n - 3], flow[n - 1]);
  pieces_[n] = {flow[n - 1], last.c0, last.c1, last.c2, zero};
}

template <int W>
void PumpCurve<W>::fit(const std::vector<Lanes<W>>& flow, const std::vector<Lanes<W>>& value) {
  angle_.clear();
  if (flow.size() == 2) {
    fit_square_law(flow, value);
  } else if (flow.size() == 3) {
    fit_parabola(flow, value);
  } else {
    fit_monotone_cubic(flow, value);
  }
}

template <int W>
void PumpCurve<W>::fit_quadrants(const std::vector<double>& angle,
                                 const std::vector<double>& head,
                                 const Lanes<W>& rated_flow,
                                 const Lanes<W>& rated_head) {
  pieces_.clear();
  angle_ = angle;
  head_ = head;
  rated_flow_ = rated_flow;
  rated_head_ = rated_head;
}

// Lane by lane with the library's atan: the same bits for any W.
template <int W>
CurvePoint<W> PumpCurve<W>::at_quadrants(const Lanes<W>& flow) const {
  CurvePoint<W> point{Lanes<W>(0.0), Lanes<W>(0.0)};
  for (int lane = 0; lane < W; ++lane) {
    const double v = flow[lane] / rated_flow_[lane];
    const double x = std::numbers::pi + std::atan(v);
    const auto above = std::upper_bound(angle_.begin() + 1, angle_.end() - 1, x);
    const auto k = static_cast<std::size_t>(above - angle_.begin());
    const double slope = (head_[k] - head_[k - 1]) / (angle_[k] - angle_[k - 1]);
    const double share = head_[k - 1] + slope * (x - angle_[k - 1]);
    // d/dv of (1 + v^2) W(x), dx/dv = 1 / (1 + v^2)
    point.value.set(lane, rated_head_[lane] * (1.0 + v * v) * share);
    point.slope.set(lane, rated_head_[lane] / rated_flow_[lane] * (slope + 2.0 * v * share));
  }
  return point;
}

template class PumpCurve<1>;
template class PumpCurve<8>;

}  // namespace headband::network
