// SPDX-License-Identifier: MIT
#include "core/base/units.hpp"

#include <gtest/gtest.h>

#include <cmath>
#include <limits>
#include <set>
#include <string>

namespace headband::base {
namespace {

double si(double number, std::string_view unit) {
  const auto found = find_unit(unit);
  EXPECT_TRUE(found.has_value()) << unit;
  return found ? to_si(found->unit, number) : std::numeric_limits<double>::quiet_NaN();
}

TEST(Units, ExactDefinitions) {
  EXPECT_EQ(si(508, "mm"), 0.508);
  EXPECT_DOUBLE_EQ(si(12, "in"), 12 * 0.0254);
  EXPECT_EQ(si(28.5, "mile"), 28.5 * 1609.344);
  EXPECT_EQ(si(100, "L/s"), 0.1);
  EXPECT_EQ(si(3600, "m3/h"), 1.0);
  EXPECT_DOUBLE_EQ(si(1, "gpm"), 6.30901964e-5);
  EXPECT_DOUBLE_EQ(si(1, "imp gpm"), 4.54609e-3 / 60);
  EXPECT_DOUBLE_EQ(si(1, "bbl/h"), 0.158987294928 / 3600);
  EXPECT_DOUBLE_EQ(si(1, "MGD"), 3785.411784 / 86400);
  EXPECT_DOUBLE_EQ(si(1, "cfs"), 0.028316846592);
  EXPECT_NEAR(si(1, "psi"), 6894.757293168361, 1e-9);
  EXPECT_EQ(si(12, "bar"), 1.2e6);
  EXPECT_EQ(si(1, "ftH2O"), 2989.06692);
  EXPECT_EQ(si(1, "mH2O"), 9806.65);
  EXPECT_EQ(si(15, "degC"), 288.15);
  EXPECT_NEAR(si(60, "degF"), 288.70555555555555, 1e-12);
  EXPECT_DOUBLE_EQ(si(212, "degF"), 373.15);
  EXPECT_NEAR(si(1, "lb/ft3"), 16.018463373960142, 1e-13);
  EXPECT_NEAR(si(1480, "rpm"), 1480 * 2 * 3.14159265358979323846 / 60, 1e-12);
  EXPECT_NEAR(si(1, "lb ft2"), 0.04214011009380480, 1e-16);
  EXPECT_DOUBLE_EQ(si(3.6, "cSt"), 3.6e-6);
  EXPECT_DOUBLE_EQ(si(1, "ft2/s"), 0.09290304);
  EXPECT_DOUBLE_EQ(si(0.14, "/kWh"), 0.14 / 3.6e6);
  EXPECT_DOUBLE_EQ(si(8766, "h/year"), 1.0);
}

TEST(Units, ManySpellingsOfOneUnit) {
  for (const char* text : {"m3/h", "m^3/h", "m\u00b3/h", "m3 / h"}) EXPECT_EQ(si(7200, text), 2.0) << text;
  for (const char* text : {"mPa s", "mPa\u00b7s", "mPa*s", "cP"}) EXPECT_EQ(si(1, text), 0.001) << text;
  for (const char* text : {"degC", "\u00b0C", "deg C"}) EXPECT_EQ(si(0, text), 273.15) << text;
}

TEST(Units, PressuresSayWhatTheyAreCountedFrom) {
  for (const char* text : {"bar g", "barg", "psi g", "psig", "kPa gauge"})
    EXPECT_EQ(find_unit(text)->reference, PressureReference::gauge) << text;
  for (const char* text : {"bar abs", "bara", "psi abs", "psia", "kPa absolute"})
    EXPECT_EQ(find_unit(text)->reference, PressureReference::absolute) << text;
  EXPECT_EQ(find_unit("bar")->reference, PressureReference::unnamed);
  EXPECT_FALSE(find_unit("m g").has_value());
  EXPECT_FALSE(find_unit("furlong").has_value());
  EXPECT_FALSE(find_unit("gal").has_value());  // US or imperial: the reader asks
}

TEST(Units, EveryNameIsUniqueAndFinite) {
  std::set<std::string_view> seen;
  for (const Unit& unit : unit_table()) {
    EXPECT_TRUE(seen.insert(unit.name).second) << unit.name;
    EXPECT_GT(to_si(unit, 1.0, true), 0.0) << unit.name;
    EXPECT_FALSE(unit.definition.empty()) << unit.name;
  }
}

TEST(Units, ShownWithSensibleDigits) {
  EXPECT_EQ(shown(11.95e5, Dimension::pressure, UnitFamily::si, true), "11.95 bar g");
  EXPECT_EQ(shown(6894.757293168361 * 641, Dimension::pressure_difference, UnitFamily::us), "641 psi");
  EXPECT_EQ(shown(0.1, Dimension::flow, UnitFamily::si), "100 L/s");
  EXPECT_EQ(shown(288.15, Dimension::temperature, UnitFamily::si), "15 degC");
  EXPECT_EQ(shown(0.0001, Dimension::length, UnitFamily::si), "0.1 mm");
  EXPECT_EQ(shown(0.3048, Dimension::length, UnitFamily::us), "12 in");
  EXPECT_EQ(shown(1158.3, Dimension::velocity, UnitFamily::si), "1158 m/s");
  EXPECT_EQ(shown(std::numeric_limits<double>::quiet_NaN(), Dimension::length, UnitFamily::si), "-");
  EXPECT_EQ(significant(123456.7), "123457");
  EXPECT_EQ(significant(-0.00001), "-1.000e-05");
  EXPECT_EQ(significant(0.0), "0");
}

TEST(Units, DisplayUndoesReading) {
  for (const UnitFamily family : {UnitFamily::si, UnitFamily::us})
    for (int d = 0; d <= static_cast<int>(Dimension::year); ++d)
      for (const double value : {1e-6, 0.5, 3.0, 4e4, 2e9}) {
        const DisplayUnit unit = display_unit(static_cast<Dimension>(d), family, value);
        const double back = (to_display(unit, value) + unit.offset) * unit.times / unit.by;
        EXPECT_NEAR(back, value, 1e-9 * std::abs(value) + 1e-12) << d;
      }
}

}  // namespace
}  // namespace headband::base
