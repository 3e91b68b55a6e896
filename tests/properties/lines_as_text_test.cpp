// SPDX-License-Identifier: MIT
//
// One generated line at a time, as a case file: what the loss does when one number grows, and what the laws become at
// their limits and joins.

#include "tests/properties/solved_text.hpp"
#include "tests/support/generated_text.hpp"

#include <gtest/gtest.h>

#include <cmath>
#include <string>
#include <vector>

namespace headband {
namespace {

using test::Dice;

constexpr double pi = 3.14159265358979323846;

/// A level line with everything stated.
struct Line {
  std::string law = "colebrook-white", transition = "blend 2100 4000";
  double flow = 0.1, bore = 0.3, roughness = 1e-4, viscosity = 1e-6, length = 1000.0, density = 950.0;
  double own_number = 0.0;  ///< Hazen-Williams or Manning

  [[nodiscard]] double reynolds() const { return 4.0 * flow / (pi * bore * viscosity); }
  void set_reynolds(double re) { flow = re * pi * bore * viscosity / 4.0; }
  [[nodiscard]] std::string text() const {
    const std::string rough = law == "hazen-williams" ? fmt::format("hazen_williams = {}", own_number)
                              : law == "manning"      ? fmt::format("manning = {}", own_number)
                                                      : fmt::format("roughness = \"{} m\"", roughness);
    return fmt::format(
        "[liquid]\nname = \"generated liquid\"\ndensity = \"{} kg/m3\"\nviscosity = \"{} m2/s\"\n"
        "[[basin]]\nname = \"tank\"\nlevel = \"0 m\"\n"
        "[[pipe]]\nname = \"line\"\nfrom = \"tank\"\nto = \"end\"\nlength = \"{} m\"\n"
        "profile = [[\"0 m\", \"0 m\"], [\"{} m\", \"0 m\"]]\nbore = \"{} m\"\n{}\n"
        "[[draw_off]]\nname = \"out\"\nat = \"end\"\nflow = \"{} m3/s\"\n"
        "[friction]\nlaw = \"{}\"\ntransition = \"{}\"\nscatter = \"none\"\n",
        density,
        viscosity,
        length,
        length,
        bore,
        rough,
        flow,
        law,
        transition);
  }
  [[nodiscard]] double drop() const {
    const test::Solved s = test::solved(text());
    if (!steady::is_usable(s.state.status[0])) throw std::runtime_error("no steady state\n" + text());
    return -s.state.place_head[static_cast<std::size_t>(s.plan.place_named("end"))][0] * density * 9.80665;
  }
  [[nodiscard]] double factor() const { return test::solved(text()).state.friction_factor[0][0]; }
};

Line roll_line(Dice& dice, const std::string& law) {
  Line line;
  line.law = law;
  line.bore = dice.between(0.05, 1.2);
  line.roughness = line.bore * dice.about(1e-6, 2e-2);
  line.viscosity = dice.about(5e-7, 1e-4);
  line.length = dice.about(10.0, 1e5);
  line.density = dice.between(700.0, 1100.0);
  line.own_number = law == "manning" ? dice.between(0.009, 0.016) : dice.between(70.0, 150.0);
  line.set_reynolds(dice.chance(0.2) ? dice.about(1.0, 1500.0) : dice.about(6e3, 5e7));
  return line;
}

/// What the law says of a grown number.
enum class Says { rises, nothing };

TEST(LinesAsText, DropRisesWithFlowRoughnessAndViscosityWhereTheLawSaysSo) {
  Dice dice(20261201);
  const std::vector<std::string> laws{"colebrook-white",
                                      "haaland",
                                      "swamee-jain",
                                      "serghides",
                                      "zigrang-sylvester",
                                      "churchill",
                                      "smooth",
                                      "hazen-williams",
                                      "manning"};
  int rises = 0;
  for (int trial = 0; trial < 10000; ++trial) {
    const std::string& law = laws[static_cast<std::size_t>(trial) % laws.size()];
    const Line line = roll_line(dice, law);
    const double drop = line.drop(), more = dice.between(1.01, 1.3);
    const bool own = law == "hazen-williams" || law == "manning", laminar = line.reynolds() < 2100.0;
    Line grown = line;
    grown.flow *= more;
    // at least as the flow (laminar), most laws more
    EXPECT_GT(grown.drop(), drop * more * (1.0 - 1e-9)) << trial << line.text();
    const auto expect = [&](const Line& other, Says says, const char* what) {
      const double ratio = other.drop() / drop;
      if (says == Says::nothing) {
        EXPECT_NEAR(ratio, 1.0, 1e-12) << what << trial << line.text();
      } else {
        EXPECT_GT(ratio, 1.0 - 1e-12) << what << trial << line.text();
        rises += ratio > 1.0 ? 1 : 0;
      }
    };
    grown = line;
    grown.roughness *= more;
    expect(grown, own || law == "smooth" || laminar ? Says::nothing : Says::rises, "roughness ");
    grown = line;
    grown.viscosity *= more;
    // a laminar line stays laminar: up to 1500 x 1 only falls
    expect(grown, own ? Says::nothing : Says::rises, "viscosity ");
    if (law == "manning") {
      grown = line;
      grown.own_number *= more;
      EXPECT_NEAR(grown.drop() / drop, more * more, 1e-9) << trial;
    }
  }
  EXPECT_GT(rises, 10000);  // most of them strictly
}

TEST(LinesAsText, LawsMeetTheirLimits) {
  Dice dice(20261202);
  const std::vector<std::string> laws{"colebrook-white", "haaland", "swamee-jain", "serghides", "zigrang-sylvester"};
  for (int trial = 0; trial < 2000; ++trial) {
    Line line = roll_line(dice, laws[static_cast<std::size_t>(trial) % laws.size()]);
    line.viscosity = 1e-9;
    // laminar: Hagen-Poiseuille, whatever the law: drop = 128 rho nu L Q / (pi D^4)
    line.set_reynolds(dice.about(1.0, 2090.0));
    const double poiseuille =
        128.0 * line.density * line.viscosity * line.length * line.flow / (pi * std::pow(line.bore, 4));
    EXPECT_NEAR(line.drop() / poiseuille, 1.0, 1e-9) << trial;
    // fully rough: the Reynolds number drops out, f = (2 log10(3.7 D/k))^-2 (Nikuradse 1933); Haaland (1983) has
    // 1.8 x 1.11 in place of 2
    line.roughness = line.bore * dice.about(1e-3, 3e-2);
    line.set_reynolds(1e12);
    const double before_log = line.law == "haaland" ? 1.8 * 1.11 : 2.0;
    const double rough = std::pow(before_log * std::log10(3.7 * line.bore / line.roughness), -2);
    EXPECT_NEAR(line.factor() / rough, 1.0, 1e-7) << trial << line.text();
    // smooth: without roughness the implicit law has -2 log10 2.51 where Prandtl's has -0.8: 6.6e-4 in 1/sqrt(f)
    line.roughness = 0.0;
    line.law = "colebrook-white";
    line.set_reynolds(dice.about(5e3, 1e8));
    const double without = line.factor();
    line.law = "smooth";
    const double smooth = line.factor();
    EXPECT_GT(smooth, without) << trial;
    EXPECT_LT(1.0 / std::sqrt(without) - 1.0 / std::sqrt(smooth), 0.8 - 2.0 * std::log10(2.51)) << trial;
  }
}

TEST(LinesAsText, LawsMeetAtTheirJoins) {
  Dice dice(20261203);
  const std::vector<std::string> laws{
      "colebrook-white", "haaland", "swamee-jain", "serghides", "zigrang-sylvester", "churchill", "smooth"};
  for (int trial = 0; trial < 2000; ++trial) {
    Line line = roll_line(dice, laws[static_cast<std::size_t>(trial) % laws.size()]);
    const auto step_at = [&](double reynolds) {
      line.set_reynolds(reynolds * (1.0 - 1e-7));
      const double before = line.factor();
      line.set_reynolds(reynolds * (1.0 + 1e-7));
      return std::abs(line.factor() / before - 1.0);
    };
    EXPECT_LT(step_at(2100.0), 1e-6) << trial << line.text();
    EXPECT_LT(step_at(4000.0), 1e-6) << trial << line.text();
    EXPECT_LT(step_at(dice.between(2150.0, 3950.0)), 1e-5) << trial << line.text();
    // a switch jumps at its own number and nowhere else: laminar under it, the law over it
    line.transition = "switch 2300";
    line.set_reynolds(2299.0);
    EXPECT_NEAR(line.factor(), 64.0 / 2299.0, 1e-9) << trial;
    line.set_reynolds(4000.1);
    const double switched = line.factor();
    line.transition = "blend 2100 4000";
    EXPECT_NEAR(line.factor() / switched, 1.0, 1e-9) << trial;
  }
}

}  // namespace
}  // namespace headband
