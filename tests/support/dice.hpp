#pragma once
// SPDX-License-Identifier: MIT

#include <cmath>
#include <cstdint>
#include <random>

namespace headband::test {

/// Random numbers for generated cases: a seed gives the same ones for ever (nothing of them is left to the library but
/// the generator, whose numbers the standard fixes).
class Dice {
 public:
  explicit Dice(std::uint64_t seed) : bits_(seed) {}
  /// In [0, 1).
  double unit() { return static_cast<double>(bits_() >> 11U) * 0x1p-53; }
  double between(double low, double high) { return low + (high - low) * unit(); }
  /// Even in the logarithm.
  double about(double low, double high) { return low * std::pow(high / low, unit()); }
  int upto(int most) { return static_cast<int>(unit() * (most + 1)); }
  bool chance(double p) { return unit() < p; }

 private:
  std::mt19937_64 bits_;
};

}  // namespace headband::test
