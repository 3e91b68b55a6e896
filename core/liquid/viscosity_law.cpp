// SPDX-License-Identifier: MIT
#include "core/liquid/water.hpp"

#include <cmath>

namespace headband::liquid {

namespace {

constexpr double centistokes = 1e-6;  // [m2/s]
constexpr double shift = 0.7;         // of ASTM D341, good above 2 cSt and close enough below (from memory)

double doubled_log(double viscosity) { return std::log10(std::log10(viscosity / centistokes + shift)); }

}  // namespace

ViscosityLaw viscosity_law(double temperature_1, double viscosity_1, double temperature_2, double viscosity_2) {
  const double y1 = doubled_log(viscosity_1), y2 = doubled_log(viscosity_2);
  const double x1 = std::log10(temperature_1), x2 = std::log10(temperature_2);
  ViscosityLaw law{};
  law.b = (y1 - y2) / (x2 - x1);
  law.a = y1 + law.b * x1;
  return law;
}

double viscosity_at(const ViscosityLaw& law, double temperature) {
  const double inner = std::pow(10.0, law.a - law.b * std::log10(temperature));
  return centistokes * (std::pow(10.0, inner) - shift);
}

double misfit(const ViscosityLaw& law, double temperature, double viscosity) {
  return viscosity_at(law, temperature) / viscosity - 1.0;
}

}  // namespace headband::liquid
