// SPDX-License-Identifier: MIT
//
// Complete characteristics of a pump of specific speed 25 (n sqrt(Q) / H^0.75 with rev/min, m3/s, m), 89 equally spaced
// points of x over 0 .. 2 pi.
// Source: published: Donsky (1961), Thomas (1972), tabulated in Wylie & Streeter, Fluid Transients, and in Chaudhry,
// Applied Hydraulic Transients; the numbers here are those of the outside reference file T07c_suter_Ns25.csv, whose own
// source line says: seen in a public plant-component documentation and recalled; WB of row 29 is 0.756 from memory
// where the page seen has 0.758.
#include "transient/device/four_quadrants.hpp"

#include <array>
#include <numbers>

namespace headband::transient {
namespace {

// clang-format off: ten numbers a row, as in the source
constexpr std::array<double, 89> head_curve = {
    0.634, 0.643, 0.646, 0.64, 0.629, 0.613, 0.595, 0.575, 0.552, 0.533,
    0.516, 0.505, 0.504, 0.51, 0.512, 0.522, 0.539, 0.559, 0.58, 0.601,
    0.63, 0.662, 0.692, 0.722, 0.753, 0.782, 0.808, 0.832, 0.857, 0.879,
    0.904, 0.93, 0.959, 0.996, 1.027, 1.06, 1.09, 1.124, 1.165, 1.204,
    1.238, 1.258, 1.271, 1.282, 1.288, 1.281, 1.26, 1.225, 1.172, 1.107,
    1.031, 0.942, 0.842, 0.733, 0.617, 0.5, 0.368, 0.24, 0.125, 0.011,
    -0.102, -0.168, -0.255, -0.342, -0.423, -0.494, -0.556, -0.62, -0.655, -0.67,
    -0.67, -0.66, -0.655, -0.64, -0.6, -0.57, -0.52, -0.47, -0.43, -0.36,
    -0.275, -0.16, -0.04, 0.13, 0.295, 0.43, 0.55, 0.62, 0.634,
};

constexpr std::array<double, 89> torque_curve = {
    -0.684, -0.547, -0.414, -0.292, -0.187, -0.105, -0.053, -0.012, 0.042, 0.097,
    0.156, 0.227, 0.3, 0.371, 0.444, 0.522, 0.596, 0.672, 0.738, 0.763,
    0.797, 0.837, 0.865, 0.883, 0.886, 0.877, 0.859, 0.838, 0.804, 0.756,
    0.703, 0.645, 0.583, 0.52, 0.454, 0.408, 0.37, 0.343, 0.331, 0.329,
    0.338, 0.354, 0.372, 0.405, 0.45, 0.486, 0.52, 0.552, 0.579, 0.603,
    0.616, 0.617, 0.606, 0.582, 0.546, 0.5, 0.432, 0.36, 0.288, 0.214,
    0.123, 0.037, -0.053, -0.161, -0.248, -0.314, -0.372, -0.58, -0.74, -0.88,
    -1, -1.12, -1.25, -1.37, -1.49, -1.59, -1.66, -1.69, -1.77, -1.65,
    -1.59, -1.52, -1.42, -1.32, -1.23, -1.1, -0.98, -0.82, -0.684,
};
// clang-format on

}  // namespace

const FourQuadrants& quadrants_ns25() {
  static const FourQuadrants table = [] {
    FourQuadrants t;
    for (std::size_t i = 0; i < head_curve.size(); ++i) {
      t.angle.push_back(2.0 * std::numbers::pi * static_cast<double>(i) / static_cast<double>(head_curve.size() - 1));
      t.head.push_back(head_curve[i]);
      t.torque.push_back(torque_curve[i]);
    }
    return t;
  }();
  return table;
}

}  // namespace headband::transient
