#pragma once
// SPDX-License-Identifier: MIT
//
// A plot as plain data in SI. Two renderers read it: the SVG writer and the data block of the interactive plot, so that
// print and screen cannot disagree.

#include "core/report/measure.hpp"

#include <array>
#include <limits>
#include <string>
#include <vector>

namespace headband::report {

/// Colours by meaning; the values stand in the style sheet and in svg.cpp.
enum class Ink { black, blue, vermilion, green, purple, earth };

enum class Dash { solid, dashed, dotted, dash_dot, long_dashed };

enum class Shape {
  line,
  step,    ///< y[i] holds from x[i] to x[i+1]; filled down to zero
  ground,  ///< line, filled down to the bottom of the plot
  dots,    ///< points that are not joined
};

struct Curve {
  std::string name;
  std::vector<double> y;  ///< as Plot::x; NaN = no value here, the line goes straight on to the next
  Ink ink = Ink::blue;
  Dash dash = Dash::solid;
  Shape shape = Shape::line;
  double width = 1.6;  ///< [px]
};

/// The area between two curves.
struct Fill {
  std::string name;
  std::size_t lower = 0, upper = 0;  ///< indices into Plot::curves
  Ink ink = Ink::blue;
};

/// A straight line over the whole plot.
struct Level {
  std::string name;
  double value = 0.0;
  bool upright = false;  ///< true: at an x, false: at a y
  Ink ink = Ink::black;
  Dash dash = Dash::long_dashed;
};

/// A marked stretch of the x axis.
struct Stretch {
  std::string name;
  double from = 0.0, to = 0.0;
};

/// A marked point.
struct Point {
  std::string name;
  double x = 0.0, y = 0.0;
  Ink ink = Ink::black;
};

struct PlotAxis {
  std::string label;  ///< without unit
  Shown shown = Shown::number;
  double low = std::numeric_limits<double>::quiet_NaN();  ///< shown range [SI]
  double high = std::numeric_limits<double>::quiet_NaN();
};

struct Plot {
  std::string id;  ///< also the name of the picture file
  std::string title;
  std::string message;  ///< what to see in it, one sentence; also its description for screen readers
  PlotAxis x, y;
  std::vector<double> abscissa;  ///< [SI], ascending
  std::vector<Curve> curves;
  std::vector<Fill> fills;
  std::vector<Level> levels;
  std::vector<Stretch> stretches;
  std::vector<Point> points;
  int height = 330;  ///< of the picture, 720 wide [px]
};

/// Shortest reach of an axis as a share of its numbers. What differs by less is rounding, and marks closer than that
/// cannot be told apart, nor counted through, in double precision.
inline constexpr double least_reach = 1e-7;

/// Sets ranges that are not set: x to the abscissa, y to everything drawn with a little air.
void set_ranges(Plot& plot);

/// Largest magnitude of an axis, for the choice of its unit.
[[nodiscard]] double largest(const PlotAxis& axis);

/// Round numbers for an axis.
struct Ticks {
  std::vector<double> at;
  int places = 0;  ///< decimals of the labels
};
[[nodiscard]] Ticks ticks(double low, double high, int about);

/// Which rows of a curve to keep so that every peak of each of `buckets` stretches of [low, high] stays: first, lowest,
/// highest and last of each stretch, in order. Never an average. Rows where `y` is NaN are left out.
[[nodiscard]] std::vector<std::size_t> thinned(
    const std::vector<double>& x, const std::vector<double>& y, double low, double high, int buckets);

/// A picture, 720 px wide, the same bytes for the same plot.
/// @param suffix makes the ids inside the picture unique within a page
[[nodiscard]] std::string svg(const Plot& plot, Family family, const std::string& suffix = "");

/// Above this many rows a data block carries the rows that hold the peaks of each stretch, not all of them.
inline constexpr std::size_t rows_carried_whole = 8'000;

/// The data block of the interactive plot: JSON, SI numbers with shortest round-trip digits, every "<" as \u003c.
[[nodiscard]] std::string data_block(const Plot& plot);

}  // namespace headband::report
