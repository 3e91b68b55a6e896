// SPDX-License-Identifier: MIT
#include "core/casefile/nearest.hpp"

#include <algorithm>
#include <array>

namespace headband::casefile {
namespace {

// Three rows suffice: a swap of neighbours looks two rows back.
std::size_t alignment_distance(std::string_view a, std::string_view b) {
  std::vector<std::size_t> before(b.size() + 1), row(b.size() + 1), next(b.size() + 1);
  for (std::size_t j = 0; j <= b.size(); ++j) row[j] = j;
  for (std::size_t i = 1; i <= a.size(); ++i) {
    next[0] = i;
    for (std::size_t j = 1; j <= b.size(); ++j) {
      next[j] = std::min({row[j] + 1, next[j - 1] + 1, row[j - 1] + (a[i - 1] == b[j - 1] ? 0U : 1U)});
      if (i > 1 && j > 1 && a[i - 1] == b[j - 2] && a[i - 2] == b[j - 1])
        next[j] = std::min(next[j], before[j - 2] + 1);
    }
    before.swap(row);
    row.swap(next);
  }
  return row[b.size()];
}

struct Question {
  std::string_view section;  ///< empty: any
  std::string_view key;
  std::string_view question;
};

constexpr std::string_view inertia =
    "which inertia is it? inertia_mr2 (I), inertia_gd2 (GD2 = 4 I) or inertia_wr2 (WR2 = I, in lb ft2): a wrong guess "
    "is a factor of 4";
constexpr std::string_view flow_coefficient =
    "is it a Kv (m3/h at 1 bar) or a Cv (gpm at 1 psi)? Write kv or cv; Cv = 1.156 Kv";
constexpr std::string_view diameter = "is it the outside or the inside? Write outside (with wall) or bore";
constexpr std::string_view stroke = "write `over` for the time a movement takes, `at` for when it begins";

constexpr std::array questions{
    Question{"pump", "inertia", inertia},
    Question{"pump", "moment_of_inertia", inertia},
    Question{"pump", "I", inertia},
    Question{"pump", "gd2", inertia},
    Question{"pump", "GD2", inertia},
    Question{"pump", "wr2", inertia},
    Question{"pump", "WR2", inertia},
    Question{"pump", "mr2", inertia},
    Question{"", "flow_coefficient", flow_coefficient},
    Question{"", "coefficient", flow_coefficient},
    Question{"", "capacity", flow_coefficient},
    Question{"", "kvs", "write kv: the coefficient fully open"},
    Question{"", "Kv", "write it small: kv"},
    Question{"", "Cv", "write it small: cv"},
    Question{"", "diameter", diameter},
    Question{"", "outer_diameter", "write outside"},
    Question{"", "outside_diameter", "write outside"},
    Question{"", "inner_diameter", "write bore"},
    Question{"", "inside_diameter", "write bore"},
    Question{"", "thickness", "write wall"},
    Question{"event", "time", stroke},
    Question{"event", "duration", stroke},
    Question{"event", "closing_time", stroke},
    Question{"event", "in", stroke},
    Question{"", "depth", "a depth counts downwards: write the elevation above the datum"},
    Question{"", "height", "write elevation, level or head"},
    Question{"liquid", "kinematic_viscosity", "write viscosity: the unit tells which one it is"},
    Question{"liquid", "dynamic_viscosity", "write viscosity: the unit tells which one it is"},
    Question{"liquid", "specific_gravity", "of which water? Write density in kg/m3"},
    Question{"liquid", "gas", "write free_gas: the volume fraction at 1 atm"},
    Question{"", "minor_loss", "write fittings = [{ name = \"…\", k = … }]"},
    Question{"surge", "time", "write duration"},
    Question{"band", "runs", "write draws"},
    Question{"band", "samples", "write draws"},
    Question{"limit", "probability", "write at_most: the allowed probability"},
    Question{"limit", "max_pressure", "write highest_pressure"},
    Question{"limit", "min_pressure", "write lowest_pressure"},
};

}  // namespace

std::string nearest(std::string_view word, const std::vector<std::string>& known) {
  const std::size_t most = std::max<std::size_t>(1, word.size() / 3);
  std::size_t fewest = most + 1;
  std::string best;
  for (const std::string& candidate : known) {
    const std::size_t distance = alignment_distance(word, candidate);
    if (distance < fewest) {
      fewest = distance;
      best = candidate;
    }
  }
  return best;
}

std::string question_for_key(std::string_view section, std::string_view key) {
  for (const Question& q : questions)
    if (q.key == key && (q.section.empty() || q.section == section)) return std::string(q.question);
  return {};
}

}  // namespace headband::casefile
