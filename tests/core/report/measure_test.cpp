// SPDX-License-Identifier: MIT
#include "core/report/measure.hpp"

#include <gtest/gtest.h>

#include <cmath>
#include <limits>

namespace headband::report {
namespace {

TEST(Measure, units_by_their_exact_definitions) {
  const double psi = 0.45359237 * 9.80665 / (0.0254 * 0.0254);
  EXPECT_DOUBLE_EQ(measure(Shown::pressure, Family::si)(12e5), 12.0);
  EXPECT_NEAR(measure(Shown::pressure, Family::us)(12e5), 12e5 / psi, 1e-12 * 174);
  EXPECT_NEAR(measure(Shown::head, Family::us)(30.48), 100.0, 1e-12);
  EXPECT_NEAR(measure(Shown::flow, Family::us)(3785.411784e-6 / 60.0), 1.0, 1e-14);
  EXPECT_DOUBLE_EQ(measure(Shown::flow, Family::si, 0.1)(0.1), 100.0);
  EXPECT_DOUBLE_EQ(measure(Shown::temperature, Family::si)(288.15), 15.0);
  EXPECT_NEAR(measure(Shown::temperature, Family::us)(288.15), 59.0, 1e-12);
  EXPECT_NEAR(measure(Shown::speed, Family::si)(2.0 * 3.14159265358979323846 * 10.0), 600.0, 1e-10);
  EXPECT_NEAR(measure(Shown::torque, Family::us)(0.45359237 * 9.80665 * 0.3048), 1.0, 1e-15);
}

TEST(Measure, every_quantity_has_a_unit_in_both_families) {
  for (int i = 0; i <= static_cast<int>(Shown::torque); ++i) {
    const auto shown = static_cast<Shown>(i);
    for (const Family family : {Family::si, Family::us}) {
      EXPECT_GT(measure(shown, family).scale, 0.0) << i;
      EXPECT_EQ(measure(shown, family).unit.empty(), shown == Shown::number) << i;
    }
  }
}

TEST(Measure, large_values_take_the_larger_unit) {
  EXPECT_EQ(measure(Shown::chainage, Family::si, 1800.0).unit, "m");
  EXPECT_EQ(measure(Shown::chainage, Family::si, 45e3).unit, "km");
  EXPECT_EQ(measure(Shown::chainage, Family::us, 45e3).unit, "miles");
  EXPECT_EQ(measure(Shown::flow, Family::si, 3.2).unit, "m³/s");
  EXPECT_EQ(measure(Shown::volume, Family::si, 0.02).unit, "L");
}

TEST(Measure, gauge_pressures_and_differences_are_told_apart) {
  EXPECT_EQ(shown_of_unit("Pa", "highest_pressure"), Shown::pressure);
  EXPECT_EQ(shown_of_unit("Pa", "lowest_pressure"), Shown::pressure);
  EXPECT_EQ(shown_of_unit("Pa", "pressure_drop"), Shown::pressure_difference);
  EXPECT_EQ(shown_of_unit("m3 s-1"), Shown::flow);
  EXPECT_EQ(shown_of_unit("m3/s"), Shown::flow);
  EXPECT_EQ(shown_of_unit("1", "opening"), Shown::share);
  EXPECT_EQ(shown_of_unit("1"), Shown::number);
  EXPECT_EQ(shown_of_unit("something else"), Shown::number);
}

TEST(Measure, keys_of_devices_become_words) {
  EXPECT_EQ(words_of_key("max_gas_volume_m3").words, "max gas volume");
  EXPECT_EQ(words_of_key("max_gas_volume_m3").shown, Shown::volume);
  EXPECT_EQ(words_of_key("flow_m3_per_s").words, "flow");
  EXPECT_EQ(words_of_key("flow_m3_per_s").shown, Shown::flow);
  EXPECT_EQ(words_of_key("speed_rad_per_s").shown, Shown::speed);
  EXPECT_EQ(words_of_key("head_m").shown, Shown::head);
  EXPECT_EQ(words_of_key("opening").words, "opening");
  EXPECT_EQ(words_of_key("opening").shown, Shown::share);
}

TEST(Figures, keep_the_asked_number) {
  EXPECT_EQ(figures(11.9496), "11.95");
  EXPECT_EQ(figures(-0.0123456, 3), "−0.0123");
  EXPECT_EQ(figures(0.0), "0");
  EXPECT_EQ(figures(99.996), "100.0");
  EXPECT_EQ(figures(123456.0), "123\u202f456");
  EXPECT_EQ(figures(1.25e-9, 3), "1.25 × 10⁻⁹");
  EXPECT_EQ(figures(std::numeric_limits<double>::quiet_NaN()), "–");
  EXPECT_EQ(figures(std::numeric_limits<double>::infinity()), "∞");
}

TEST(Figures, decimals_part_thousands_and_know_no_minus_zero) {
  EXPECT_EQ(decimals(227207.4, 0), "227\u202f207");
  EXPECT_EQ(decimals(1234.5, 1), "1234.5");
  EXPECT_EQ(decimals(-12345678.25, 2), "−12\u202f345\u202f678.25");
  EXPECT_EQ(decimals(-0.001, 2), "0.00");
}

TEST(Figures, a_spread_is_told_to_two_figures) {
  EXPECT_EQ(places_for(0.0421), 3);
  EXPECT_EQ(places_for(4.2), 1);
  EXPECT_EQ(places_for(420.0), 0);
  EXPECT_EQ(places_for(0.0996), 2);  // rounds to 0.10
}

TEST(Figures, percent_without_idle_zeros) {
  EXPECT_EQ(percent(0.95), "95\u00a0%");
  EXPECT_EQ(percent(0.975), "97.5\u00a0%");
  EXPECT_EQ(percent(0.0), "0\u00a0%");
  EXPECT_EQ(percent(1.0), "100\u00a0%");
  EXPECT_EQ(percent(0.0026), "0.26\u00a0%");
  EXPECT_EQ(percent(std::numeric_limits<double>::quiet_NaN()), "–");
}

}  // namespace
}  // namespace headband::report
