// SPDX-License-Identifier: MIT
#include "core/pipe/handbook.hpp"

#include <array>
#include <cctype>
#include <string>

namespace headband::pipe {

namespace {

constexpr double gpa = 1e9, mm = 1e-3;

// Ranges of steel, copper, concrete: Gere, Mechanics of Materials (5th ed.); the rest by data sheets and common
// practice. All from memory except where the tests hold them against printed ranges.
constexpr std::array<Material, 12> table{{
    {"steel",
     207 * gpa,
     190 * gpa,
     210 * gpa,
     0.30,
     "Gere, Mechanics of Materials",
     "carbon steel, mild steel",
     0.27,
     0.30},
    {"stainless steel",
     193 * gpa,
     186 * gpa,
     200 * gpa,
     0.30,
     "data sheets of austenitic steel",
     "stainless",
     0.27,
     0.31},
    {"ductile iron",
     170 * gpa,
     162 * gpa,
     170 * gpa,
     0.28,
     "data sheets of ductile iron pipe",
     "di, spheroidal iron",
     0.27,
     0.28},
    {"cast iron",
     100 * gpa,
     80 * gpa,
     170 * gpa,
     0.25,
     "common practice, grey iron",
     "grey iron, gray iron",
     0.20,
     0.30},
    {"copper", 117 * gpa, 110 * gpa, 120 * gpa, 0.34, "Gere, Mechanics of Materials", "", 0.33, 0.36},
    {"concrete",
     30 * gpa,
     17 * gpa,
     31 * gpa,
     0.15,
     "Gere, Mechanics of Materials (compression)",
     "concrete (compression), reinforced concrete, prestressed concrete",
     0.10,
     0.20},
    {"asbestos cement", 24 * gpa, 23 * gpa, 25 * gpa, 0.20, "common practice", "fibre cement", 0.15, 0.30},
    {"grp",
     20 * gpa,
     10 * gpa,
     50 * gpa,
     0.30,
     "common practice, hoop direction; ask the maker",
     "fibreglass, frp, gfk",
     0.20,
     0.35},
    {"pvc",
     3.0 * gpa,
     2.4 * gpa,
     3.5 * gpa,
     0.45,
     "common practice, short term; AWWA takes 2.76 GPa (400 000 psi)",
     "pvc-u, upvc, pvc-u (short term)",
     0.38,
     0.45},
    {"hdpe",
     0.8 * gpa,
     0.6 * gpa,
     1.4 * gpa,
     0.46,
     "data sheets of PE 3408 and PE 100, short term",
     "pe, pe100, polyethylene, hdpe (short term)",
     0.40,
     0.46},
    {"mdpe", 0.7 * gpa, 0.5 * gpa, 0.9 * gpa, 0.45, "data sheets of PE 80, short term", "pe80", 0.40, 0.46},
    {"aluminium", 70 * gpa, 69 * gpa, 73 * gpa, 0.33, "Gere, Mechanics of Materials", "aluminum", 0.32, 0.34},
}};

// "White": Fluid Mechanics, Table 6.1, range = the stated uncertainty. "Binder 1973" and "Hydraulic Institute": as
// quoted on public reference pages; where they give no range, the x/ 2 of new pipe (common practice). Others: common
// practice.
constexpr std::array<RoughnessEntry, 19> roughness{{
    {"steel", "commercial, new", 0.046 * mm, 0.0322 * mm, 0.0598 * mm, "White, Fluid Mechanics, Table 6.1"},
    {"steel", "welded and seamless", 0.061 * mm, 0.03 * mm, 0.122 * mm, "Hydraulic Institute Engineering Data Book"},
    {"steel", "rusted slightly, general practice", 0.4 * mm, 0.15 * mm, 1.0 * mm, "handbook practice"},
    {"steel", "rusty", 1.5 * mm, 0.5 * mm, 3.0 * mm, "common practice"},
    {"steel", "riveted", 3.0 * mm, 0.9 * mm, 5.1 * mm, "White, Fluid Mechanics, Table 6.1"},
    {"stainless steel", "drawn, new", 0.002 * mm, 0.001 * mm, 0.004 * mm, "White, Fluid Mechanics, Table 6.1"},
    {"wrought iron", "new", 0.046 * mm, 0.0368 * mm, 0.0552 * mm, "White, Fluid Mechanics, Table 6.1"},
    {"cast iron", "new", 0.26 * mm, 0.13 * mm, 0.39 * mm, "White, Fluid Mechanics, Table 6.1"},
    {"cast iron", "tuberculated", 3.0 * mm, 1.0 * mm, 10.0 * mm, "common practice"},
    {"ductile iron", "as listed", 0.061 * mm, 0.03 * mm, 0.122 * mm, "Hydraulic Institute Engineering Data Book"},
    {"galvanised iron", "new", 0.15 * mm, 0.09 * mm, 0.21 * mm, "White, Fluid Mechanics, Table 6.1"},
    {"copper", "drawn, new", 0.0015 * mm, 0.00075 * mm, 0.003 * mm, "Binder 1973"},
    {"plastic", "drawn tubing", 0.0015 * mm, 0.0006 * mm, 0.0024 * mm, "White, Fluid Mechanics, Table 6.1"},
    {"plastic", "new, water supply", 0.0015 * mm, 0.0015 * mm, 0.03 * mm, "handbook practice"},
    {"concrete", "smoothed", 0.04 * mm, 0.016 * mm, 0.064 * mm, "White, Fluid Mechanics, Table 6.1"},
    {"concrete", "new", 1.0 * mm, 0.3 * mm, 3.0 * mm, "Binder 1973"},
    {"concrete", "rough", 2.0 * mm, 1.0 * mm, 3.0 * mm, "White, Fluid Mechanics, Table 6.1"},
    {"cement-mortar lining", "good, spun", 0.03 * mm, 0.03 * mm, 0.1 * mm, "handbook practice"},
    {"grp", "new", 0.01 * mm, 0.005 * mm, 0.03 * mm, "common practice"},
}};

/// Lower case, every separator one blank.
std::string plain(std::string_view text) {
  std::string s;
  for (const char c : text)
    s += c == '-' || c == '_' ? ' ' : static_cast<char>(std::tolower(static_cast<unsigned char>(c)));
  return s;
}

bool is_named(const Material& m, const std::string& wanted) {
  if (plain(m.name) == wanted) return true;
  std::string_view rest = m.other_names;
  while (!rest.empty()) {
    const std::size_t comma = rest.find(", ");
    if (plain(rest.substr(0, comma)) == wanted) return true;
    rest = comma == std::string_view::npos ? std::string_view{} : rest.substr(comma + 2);
  }
  return false;
}

}  // namespace

std::span<const Material> materials() { return table; }

std::optional<Material> material_named(std::string_view name) {
  const std::string wanted = plain(name);
  for (const Material& m : table)
    if (is_named(m, wanted)) return m;
  return std::nullopt;
}

std::span<const RoughnessEntry> roughness_table() { return roughness; }

}  // namespace headband::pipe
