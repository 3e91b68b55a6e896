#pragma once
// SPDX-License-Identifier: MIT
//
// Generated pipelines as case files. Invented numbers; one seed gives one pipeline, spelled in SI or in US units.

#include "tests/support/dice.hpp"

#include <fmt/format.h>

#include <string>
#include <vector>

namespace headband::test {

enum class Family { si, us };

/// Numbers with their units as people of one family write them, in the shortest digits that give the double back.
/// The factors are the exact definitions of NIST SP 811 (foot, pound, gallon, psi), stated here apart from the
/// reader's.
class Spelling {
 public:
  explicit Spelling(Family family) : us_(family == Family::us) {}

  [[nodiscard]] std::string length(double m) const { return us_ ? written(m / 0.3048, "ft") : written(m, "m"); }
  [[nodiscard]] std::string small_length(double m) const {
    return us_ ? written(m / 0.0254, "in") : written(m * 1e3, "mm");
  }
  [[nodiscard]] std::string flow(double m3_per_s) const {
    return us_ ? written(m3_per_s / (3.785411784e-3 / 60.0), "gpm") : written(m3_per_s * 1e3, "L/s");
  }
  [[nodiscard]] std::string gauge_pressure(double pa) const {
    return us_ ? written(pa / (4.4482216152605 / 6.4516e-4), "psi g") : written(pa * 1e-5, "bar g");
  }
  [[nodiscard]] std::string density(double kg_per_m3) const {
    return us_ ? written(kg_per_m3 / (0.45359237 / 0.028316846592), "lb/ft3") : written(kg_per_m3, "kg/m3");
  }
  [[nodiscard]] std::string viscosity(double m2_per_s, double density) const {
    return us_ ? written(m2_per_s * density * 1e3, "cP") : written(m2_per_s * 1e6, "cSt");
  }
  [[nodiscard]] std::string temperature(double celsius) const {
    return us_ ? written(celsius * 1.8 + 32.0, "degF") : written(celsius, "degC");
  }
  [[nodiscard]] std::string area(double m2) const { return us_ ? written(m2 / 6.4516e-4, "in2") : written(m2, "m2"); }
  /// Key and value: Kv in m3/h at 1 bar, Cv in gpm at 1 psi, each by water of 999 kg/m3.
  [[nodiscard]] std::string coefficient(double kv) const {
    if (!us_) return fmt::format("kv = {}", written(kv, "m3/h"));
    const double gpm = kv / 3600.0 / (3.785411784e-3 / 60.0);
    return fmt::format("cv = {}", written(gpm * std::sqrt(4.4482216152605 / 6.4516e-4 / 1e5), "gpm"));
  }

 private:
  [[nodiscard]] static std::string written(double number, const char* unit) {
    return fmt::format("\"{} {}\"", number, unit);
  }
  bool us_;
};

/// A connected network of 3 to 12 places: pipes of all friction laws, loops, basins, at times a pump, valves, a check
/// valve, draw-offs, dead legs.
class GeneratedNetwork {
 public:
  GeneratedNetwork(std::uint64_t seed, Family family) : dice_(seed), say_(family) { build(); }
  [[nodiscard]] const std::string& text() const { return text_; }

 private:
  void line(const std::string& words) { text_.append(words).append("\n"); }
  void line(const char* key, const std::string& value) { text_.append(key).append(" = ").append(value).append("\n"); }
  void element(const char* kind, const std::string& name) {
    text_.append("[[").append(kind).append("]]\nname = \"").append(name).append("\"\n");
  }
  void ends(const std::string& from, const std::string& to) {
    text_.append("from = \"").append(from).append("\"\nto = \"").append(to).append("\"\n");
  }
  [[nodiscard]] std::string place(int i) const {
    return i < basins_ ? fmt::format("basin {}", i) : fmt::format("place {}", i);
  }

  void liquid() {
    line("[liquid]");
    if (dice_.chance(0.3)) {
      line("name = \"water\"");
      line("temperature", say_.temperature(dice_.between(1.0, 90.0)));
      return;
    }
    const double density = dice_.between(700.0, 1100.0);
    line("name = \"generated liquid\"");
    line("density", say_.density(density));
    if (dice_.chance(0.3)) {
      const double thick = dice_.about(5e-5, 1e-3), cold = dice_.between(5.0, 20.0),
                   warm = cold + dice_.between(20.0, 60.0);
      line("temperature", say_.temperature(dice_.between(cold, warm)));
      line("viscosity_points",
           fmt::format("[[{}, {}], [{}, {}]]",
                       say_.temperature(cold),
                       kinematic(thick),
                       say_.temperature(warm),
                       kinematic(thick * dice_.between(0.1, 0.5))));
    } else {
      line("viscosity", say_.viscosity(dice_.about(5e-7, 2e-4), density));
    }
  }
  /// The two-point law takes kinematic viscosities in either family.
  [[nodiscard]] static std::string kinematic(double m2_per_s) { return fmt::format("\"{} cSt\"", m2_per_s * 1e6); }

  void friction_of(double bore) {
    switch (dice_.upto(5)) {
      case 0:
        line("hazen_williams", fmt::format("{}", dice_.between(70.0, 150.0)));
        break;
      case 1:
        line("manning", fmt::format("{}", dice_.between(0.009, 0.016)));
        break;
      case 2:
        line("friction_factor", fmt::format("{}", dice_.between(0.01, 0.04)));
        break;
      default:
        line("roughness", say_.small_length(bore * dice_.about(1e-6, 3e-2)));
        break;
    }
  }

  void pipe(const std::string& from, const std::string& to) {
    element("pipe", fmt::format("pipe {}", pipes_++));
    ends(from, to);
    const double length = dice_.about(5.0, 5000.0), bore = dice_.between(0.05, 0.6);
    line("length", say_.length(length));
    if (dice_.chance(0.3)) {
      const double wall = bore * dice_.between(0.01, 0.05), lining = bore * dice_.between(0.0, 0.02);
      line("outside", say_.small_length(bore + 2.0 * (wall + lining)));
      line("wall", say_.small_length(wall));
      line("lining", fmt::format("{{ thickness = {} }}", say_.small_length(lining)));
    } else {
      line("bore", say_.small_length(bore));
    }
    friction_of(bore);
    if (dice_.chance(0.3))
      line("fittings",
           fmt::format(
               "[{{ name = \"bends\", count = 3, k = {} }}, {{ name = \"gauze\", equivalent_length = {}, at = {} }}]",
               dice_.between(0.1, 2.0),
               say_.length(bore * dice_.between(5.0, 50.0)),
               say_.length(0.3 * length)));
  }

  void valve_between(const std::string& name, const std::string& from, const std::string& to, double kv) {
    element("valve", name);
    ends(from, to);
    switch (dice_.upto(2)) {
      case 0:
        line(say_.coefficient(kv));
        break;
      case 1:
        line("k", fmt::format("{}", dice_.about(1.0, 300.0)));
        line("bore", say_.small_length(dice_.between(0.05, 0.4)));
        break;
      default:
        line("area", say_.area(dice_.about(1e-5, 0.05)));
        line("discharge_coefficient", fmt::format("{}", dice_.between(0.5, 0.9)));
        break;
    }
    if (dice_.chance(0.5)) line("opening", fmt::format("\"{} %\"", dice_.between(20.0, 100.0)));
  }

  void devices(int places) {
    const std::string last = place(places - 1);
    if (dice_.chance(0.3)) {
      element("pump", "pump");
      ends(place(0), last);
      line("curve",
           fmt::format("[[{}, {}], [{}, {}]]",
                       say_.flow(0.0),
                       say_.length(dice_.between(10.0, 80.0)),
                       say_.flow(dice_.between(0.02, 0.2)),
                       say_.length(dice_.between(2.0, 9.0))));
    }
    if (dice_.chance(0.3)) valve_between("valve", place(dice_.upto(places - 2)), last, dice_.about(1.0, 3000.0));
    if (dice_.chance(0.2)) valve_between("vent", last, "air", dice_.about(1.0, 300.0));
    if (dice_.chance(0.3)) {
      element("check_valve", "check");
      ends(last, place(dice_.upto(places - 2)));
      line(say_.coefficient(dice_.about(4.0, 3600.0)));
    }
  }

  void build() {
    static constexpr const char* laws[] = {
        "colebrook-white", "haaland", "swamee-jain", "serghides", "zigrang-sylvester", "churchill"};
    liquid();
    const int places = 3 + dice_.upto(9);
    basins_ = 1 + dice_.upto(2);
    for (int i = 0; i < basins_; ++i) {
      element("basin", place(i));
      line("level", say_.length(dice_.between(20.0, 80.0)));
      if (dice_.chance(0.3)) line("surface_pressure", say_.gauge_pressure(dice_.between(-3e4, 4e5)));
    }
    for (int i = basins_; i < places; ++i) {
      if (!dice_.chance(0.3)) continue;
      element("place", place(i));
      line("elevation", say_.length(dice_.between(-5.0, 10.0)));
    }
    for (int i = 1; i < places; ++i) pipe(place(dice_.upto(i - 1)), place(i));
    for (int extra = dice_.upto(4); extra > 0; --extra) {
      const int a = dice_.upto(places - 1), b = dice_.upto(places - 1);
      if (a != b) pipe(place(a), place(b));
    }
    for (int i = basins_; i < places; ++i) {
      if (!dice_.chance(0.4)) continue;
      element("draw_off", fmt::format("out {}", i));
      line("at", fmt::format("\"{}\"", place(i)));
      line("flow", say_.flow(dice_.between(-0.01, 0.03)));
    }
    devices(places);
    line("[friction]");
    line("law", fmt::format("\"{}\"", laws[dice_.upto(5)]));
    line("transition", dice_.chance(0.7) ? "\"blend 2100 4000\"" : "\"churchill\"");
    line("scatter", fmt::format("{}", dice_.between(0.9, 1.1)));
  }

  Dice dice_;
  Spelling say_;
  std::string text_;
  int basins_ = 1, pipes_ = 0;
};

}  // namespace headband::test
