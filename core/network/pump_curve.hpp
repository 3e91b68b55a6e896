#pragma once
// SPDX-License-Identifier: MIT

#include "core/base/lanes.hpp"

#include <vector>

namespace headband::network {

using base::Lanes;

/// A value and its slope at one flow.
template <int W>
struct CurvePoint {
  Lanes<W> value, slope;
};

/// A pump curve (head, or share of torque, against the flow of one pump) in pieces of cubics.
///
/// 2 points: square law a - b Q^2; 3: the parabola through them; more: monotone cubic (Fritsch & Carlson 1980,
/// SIAM J. Numer. Anal. 17, 238). Beyond the last point: the parabola through the last three (two points: the square
/// law). Below zero flow, or below the first point of a monotone cubic: a straight line with the end slope.
template <int W>
class PumpCurve {
 public:
  /// Fits the pieces; storage is kept between calls.
  /// @param flow [m3/s], ascending, at least 2 points; @param value one per flow
  void fit(const std::vector<Lanes<W>>& flow, const std::vector<Lanes<W>>& value);

  /// Takes the forward quadrant of a four-quadrant table at rated speed in place of points: with v = flow / rated flow
  /// and x = pi + atan v, head = rated head (1 + v^2) WH(x), WH by straight lines.
  /// @param angle x [rad], rising from 0 to 2 pi, at least 2; @param head WH, one per angle
  void fit_quadrants(const std::vector<double>& angle,
                     const std::vector<double>& head,
                     const Lanes<W>& rated_flow,
                     const Lanes<W>& rated_head);

  /// Value and slope at `flow`. Fit first.
  [[nodiscard]] CurvePoint<W> at(const Lanes<W>& flow) const {
    if (!angle_.empty()) return at_quadrants(flow);
    const Lanes<W> t0 = flow - pieces_.front().from;
    CurvePoint<W> point{pieces_.front().c0 + pieces_.front().c1 * t0, pieces_.front().c1};
    for (std::size_t i = 1; i < pieces_.size(); ++i) {
      const Piece& piece = pieces_[i];
      const Lanes<W> t = flow - piece.from;
      const base::Mask<W> here = t >= Lanes<W>(0.0);
      point.value = base::select(here, piece.c0 + t * (piece.c1 + t * (piece.c2 + t * piece.c3)), point.value);
      point.slope = base::select(here, piece.c1 + t * (2.0 * piece.c2 + t * (3.0 * piece.c3)), point.slope);
    }
    return point;
  }

  /// Writes the curve of one lane into `out`; storage of `out` is kept.
  void copy_lane(int lane, PumpCurve<1>& out) const {
    out.pieces_.resize(pieces_.size());
    for (std::size_t i = 0; i < pieces_.size(); ++i)
      out.pieces_[i] = {
          pieces_[i].from[lane], pieces_[i].c0[lane], pieces_[i].c1[lane], pieces_[i].c2[lane], pieces_[i].c3[lane]};
    out.angle_ = angle_;
    out.head_ = head_;
    out.rated_flow_ = rated_flow_[lane];
    out.rated_head_ = rated_head_[lane];
  }
  [[nodiscard]] bool fitted() const { return !pieces_.empty() || !angle_.empty(); }

 private:
  template <int>
  friend class PumpCurve;
  /// c0 + c1 t + c2 t^2 + c3 t^3 with t = flow - from, for flows from `from` on. The first piece is a straight line.
  struct Piece {
    Lanes<W> from, c0, c1, c2, c3;
  };
  void fit_square_law(const std::vector<Lanes<W>>& flow, const std::vector<Lanes<W>>& value);
  void fit_parabola(const std::vector<Lanes<W>>& flow, const std::vector<Lanes<W>>& value);
  void fit_monotone_cubic(const std::vector<Lanes<W>>& flow, const std::vector<Lanes<W>>& value);

  [[nodiscard]] CurvePoint<W> at_quadrants(const Lanes<W>& flow) const;

  std::vector<Piece> pieces_;
  std::vector<double> angle_, head_;  ///< of a four-quadrant table; empty: points were given
  Lanes<W> rated_flow_ = 1.0, rated_head_ = 1.0;
  std::vector<Lanes<W>> slopes_;
};

extern template class PumpCurve<1>;
extern template class PumpCurve<8>;

}  // namespace headband::network
