// SPDX-License-Identifier: MIT
#include "core/report/plot.hpp"

#include <nlohmann/json.hpp>

#include <gtest/gtest.h>

#include <algorithm>
#include <cmath>
#include <random>
#include <sstream>

namespace headband::report {
namespace {

constexpr double missing = std::numeric_limits<double>::quiet_NaN();

TEST(Thinned, keeps_every_peak_of_every_stretch_and_averages_nothing) {
  std::mt19937 bits(7);
  std::vector<double> x, y;
  for (int i = 0; i < 50'000; ++i) {
    x.push_back(1e-3 * i);
    y.push_back(std::sin(0.01 * i) + 1e-3 * static_cast<double>(bits() % 1000));
  }
  y[31'234] = 99.0;
  y[40'001] = -99.0;
  const int buckets = 500;
  const auto rows = thinned(x, y, x.front(), x.back(), buckets);
  EXPECT_LE(rows.size(), 4u * (buckets + 1));
  EXPECT_TRUE(std::is_sorted(rows.begin(), rows.end()));
  EXPECT_EQ(std::adjacent_find(rows.begin(), rows.end()), rows.end());
  const double step = (x.back() - x.front()) / buckets;
  for (int b = 0; b < buckets; ++b) {
    double low = 1e300, high = -1e300, kept_low = 1e300, kept_high = -1e300;
    for (std::size_t i = 0; i < x.size(); ++i)
      if (static_cast<int>(std::floor((x[i] - x.front()) / step)) == b)
        low = std::min(low, y[i]), high = std::max(high, y[i]);
    for (const std::size_t i : rows)
      if (static_cast<int>(std::floor((x[i] - x.front()) / step)) == b)
        kept_low = std::min(kept_low, y[i]), kept_high = std::max(kept_high, y[i]);
    ASSERT_EQ(low, kept_low) << b;
    ASSERT_EQ(high, kept_high) << b;
  }
}

TEST(Thinned, short_curves_are_kept_whole_and_missing_values_left_out) {
  const std::vector<double> x{0, 1, 2, 3, 4}, y{5, missing, 7, 6, missing};
  EXPECT_EQ(thinned(x, y, 0, 4, 600), (std::vector<std::size_t>{0, 2, 3}));
  EXPECT_TRUE(thinned({}, {}, 0, 1, 10).empty());
}

TEST(Ranges, rounding_is_no_reach) {
  Plot plot;
  plot.abscissa = {0.0, 1.0, 2.0};
  plot.curves.push_back({"still", {22.0, 22.0 + 1e-14, 22.0 - 1e-14}, Ink::blue});
  set_ranges(plot);
  EXPECT_LE(plot.y.low, 22.0 - 0.02);
  EXPECT_GE(plot.y.high, 22.0 + 0.02);

  Plot upright;
  upright.abscissa = {1e5, 1e5 + 2e-11};
  set_ranges(upright);
  EXPECT_GE(upright.x.high - upright.x.low, 1.0);

  Plot slow;  // small, but real
  slow.abscissa = {0.0, 1.0};
  slow.curves.push_back({"creeping", {22.0, 22.001}, Ink::blue});
  set_ranges(slow);
  EXPECT_NEAR(slow.y.high - slow.y.low, 1.12e-3, 1e-9);
}

TEST(Ticks, are_round_and_inside) {
  for (const auto& [low, high] : {std::pair{0.0, 1.0},
                                  std::pair{-13.2, 987.0},
                                  std::pair{11.64, 12.02},
                                  std::pair{-4.746, -4.686},
                                  std::pair{1e-7, 3e-7},
                                  std::pair{1e6, 1.001e6}}) {
    const Ticks marks = ticks(low, high, 6);
    ASSERT_GE(marks.at.size(), 2u) << low << " " << high;
    EXPECT_LE(marks.at.size(), 13u);
    const double step = marks.at[1] - marks.at[0];
    EXPECT_GE(marks.at.front(), low - 1e-9 * step);
    EXPECT_LE(marks.at.back(), high + 1e-9 * step);
    const double lead = step / std::pow(10.0, std::floor(std::log10(step * (1 + 1e-9))));
    EXPECT_LT(std::min({std::abs(lead - 1), std::abs(lead - 2), std::abs(lead - 5)}), 1e-6) << lead;
    // The labels tell neighbours apart.
    EXPECT_NE(decimals(marks.at[0], marks.places), decimals(marks.at[1], marks.places));
  }
  EXPECT_TRUE(ticks(1.0, 1.0, 5).at.empty());
  EXPECT_TRUE(ticks(missing, 1.0, 5).at.empty());
}

Plot wave() {
  Plot plot;
  plot.id = "wave";
  plot.title = "A wave <1>";
  plot.message = "Up & down";
  plot.x = {"time", Shown::time};
  plot.y = {"pressure", Shown::pressure};
  for (int i = 0; i <= 100; ++i) plot.abscissa.push_back(0.1 * i);
  Curve a{"near", {}, Ink::blue, Dash::solid}, b{"far", {}, Ink::vermilion, Dash::dashed};
  for (const double t : plot.abscissa) {
    a.y.push_back(5e5 + 4e5 * std::sin(t));
    b.y.push_back(3e5 + 2e5 * std::sin(t));
  }
  plot.curves = {a, b};
  plot.levels.push_back({"limit", 10e5});
  set_ranges(plot);
  return plot;
}

/// Points of a path "M1 2L3 4…".
std::vector<std::pair<double, double>> points_of(const std::string& picture, const std::string& name) {
  const std::size_t at = picture.find("data-name=\"" + name + "\"");
  std::size_t from = picture.find(" d=\"", at) + 4;
  std::string d = picture.substr(from, picture.find('"', from) - from);
  std::replace_if(d.begin(), d.end(), [](char c) { return c == 'M' || c == 'L'; }, ' ');
  std::istringstream in(d);
  std::vector<std::pair<double, double>> points;
  for (double x = 0, y = 0; in >> x >> y;) points.emplace_back(x, y);
  return points;
}

/// Positions and numbers of the tick labels that stand at the left (true) or below the plot.
std::vector<std::pair<double, double>> labels_of(const std::string& picture, bool left) {
  std::vector<std::pair<double, double>> found;
  std::size_t at = 0;
  while ((at = picture.find("<text class=\"tick\"", at)) != std::string::npos) {
    const std::string text = picture.substr(at, picture.find("</text>", at) - at);
    at += 10;
    if ((text.find("text-anchor=\"end\"") != std::string::npos) != left) continue;
    const std::string key = left ? " y=\"" : " x=\"";
    const double position = std::stod(text.substr(text.find(key) + 4)) - (left ? 4.0 : 0.0);
    found.emplace_back(position, std::stod(text.substr(text.find('>') + 1)));
  }
  return found;
}

TEST(Svg, curves_stand_where_the_axes_say) {
  const Plot plot = wave();
  for (const Family family : {Family::si, Family::us}) {
    const std::string picture = svg(plot, family);
    const auto across = labels_of(picture, false), up = labels_of(picture, true);
    ASSERT_GE(across.size(), 3u);
    ASSERT_GE(up.size(), 3u);
    const auto read = [](const std::vector<std::pair<double, double>>& axis, double position) {
      const auto& [p0, v0] = axis.front();
      const auto& [p1, v1] = axis.back();
      return v0 + (position - p0) / (p1 - p0) * (v1 - v0);
    };
    const Measure in = measure(Shown::pressure, family);
    const auto points = points_of(picture, "near");
    ASSERT_EQ(points.size(), plot.abscissa.size());
    for (std::size_t i = 0; i < points.size(); ++i) {
      EXPECT_NEAR(read(across, points[i].first), plot.abscissa[i], 2e-3);
      EXPECT_NEAR(read(up, points[i].second), in(plot.curves[0].y[i]), 2e-3 * in(10e5)) << i;
    }
  }
}

TEST(Svg, has_words_for_everything_and_the_same_bytes_each_time) {
  const std::string picture = svg(wave(), Family::us, "-us");
  EXPECT_EQ(picture, svg(wave(), Family::us, "-us"));
  EXPECT_NE(picture.find("<title id=\"title-wave-us\">A wave &lt;1&gt;</title>"), std::string::npos);
  EXPECT_NE(picture.find("aria-labelledby=\"title-wave-us about-wave-us\""), std::string::npos);
  EXPECT_NE(picture.find(">pressure, psi g</text>"), std::string::npos);
  EXPECT_NE(picture.find(">time, s</text>"), std::string::npos);
  for (const char* name : {">near<", ">far<", ">limit<"}) EXPECT_NE(picture.find(name), std::string::npos) << name;
  EXPECT_NE(picture.find("stroke-dasharray=\"7 4\""), std::string::npos);
  EXPECT_EQ(picture.find("style="), std::string::npos);  // the page's policy would refuse it
}

TEST(Svg, labels_at_one_height_are_pushed_apart) {
  Plot plot = wave();
  plot.curves[1].y = plot.curves[0].y;
  plot.levels[0].value = plot.curves[0].y.back();
  const std::string picture = svg(plot, Family::si);
  std::vector<double> heights;
  std::size_t at = 0;
  while ((at = picture.find("<text class=\"name", at)) != std::string::npos) {
    heights.push_back(std::stod(picture.substr(picture.find(" y=\"", at) + 4)));
    at += 10;
  }
  ASSERT_EQ(heights.size(), 3u);
  std::sort(heights.begin(), heights.end());
  EXPECT_GE(heights[1] - heights[0], 14.0);
  EXPECT_GE(heights[2] - heights[1], 14.0);
}

TEST(Svg, names_of_points_at_one_spot_do_not_overlap) {
  Plot plot = wave();
  for (const char* name : {"highest pressure", "pump discharge", "third"}) plot.points.push_back({name, 5.0, 6e5});
  const std::string picture = svg(plot, Family::si);
  std::vector<double> heights;
  std::size_t at = 0;
  while ((at = picture.find("<text class=\"halo", at)) != std::string::npos) {
    heights.push_back(std::stod(picture.substr(picture.find(" y=\"", at) + 4)));
    at += 10;
  }
  ASSERT_EQ(heights.size(), 3u);
  std::sort(heights.begin(), heights.end());
  EXPECT_GE(heights[1] - heights[0], 14.0);
  EXPECT_GE(heights[2] - heights[1], 14.0);
}

TEST(Svg, survives_a_plot_with_nothing_in_it) {
  Plot plot;
  plot.id = "empty";
  const std::string picture = svg(plot, Family::si);
  EXPECT_EQ(picture.find("nan"), std::string::npos);
  EXPECT_EQ(picture.find("inf"), std::string::npos);
  EXPECT_NE(picture.find("</svg>"), std::string::npos);
}

TEST(DataBlock, carries_the_exact_numbers_and_no_less_than_sign) {
  Plot plot = wave();
  plot.curves[0].y[17] = missing;
  plot.title = "</script><script>alert(1)</script>";
  const std::string text = data_block(plot);
  EXPECT_EQ(text.find('<'), std::string::npos);
  const auto block = nlohmann::json::parse(text);
  EXPECT_EQ(block["title"], plot.title);
  ASSERT_EQ(block["abscissa"].size(), plot.abscissa.size());
  for (std::size_t i = 0; i < plot.abscissa.size(); ++i) {
    EXPECT_EQ(block["abscissa"][i].get<double>(), plot.abscissa[i]);
    EXPECT_EQ(block["curves"][1]["y"][i].get<double>(), plot.curves[1].y[i]);
  }
  EXPECT_TRUE(block["curves"][0]["y"][17].is_null());
  EXPECT_EQ(block["y"]["units"]["us"]["unit"], "psi g");
}

TEST(DataBlock, long_curves_are_thinned_to_exact_rows_with_all_extremes) {
  Plot plot;
  plot.id = "long";
  plot.x = {"time", Shown::time};
  plot.y = {"head", Shown::head};
  Curve a, b;
  for (int i = 0; i < 200'000; ++i) {
    plot.abscissa.push_back(1e-3 * i);
    a.y.push_back(std::sin(1e-2 * i) * std::exp(-1e-5 * i));
    b.y.push_back(std::cos(3e-2 * i));
  }
  plot.curves = {a, b};
  set_ranges(plot);
  const auto block = nlohmann::json::parse(data_block(plot));
  EXPECT_LE(block["abscissa"].size(), 2u * rows_carried_whole);
  EXPECT_EQ(block["rows"], 200'000);
  for (std::size_t c = 0; c < 2; ++c) {
    const auto& full = plot.curves[c].y;
    const auto kept = block["curves"][c]["y"].get<std::vector<double>>();
    EXPECT_EQ(*std::max_element(kept.begin(), kept.end()), *std::max_element(full.begin(), full.end()));
    EXPECT_EQ(*std::min_element(kept.begin(), kept.end()), *std::min_element(full.begin(), full.end()));
    for (std::size_t i = 0; i < kept.size(); i += 97) {
      const auto row = static_cast<std::size_t>(std::lround(block["abscissa"][i].get<double>() * 1e3));
      EXPECT_EQ(kept[i], full[row]);
    }
  }
}

}  // namespace
}  // namespace headband::report
