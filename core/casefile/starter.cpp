// SPDX-License-Identifier: MIT
//
// Starter cases of `headband new`: invented scenarios, ready to be changed.

#include "core/casefile/read.hpp"

#include <array>
#include <string_view>

namespace headband::casefile {
namespace {

struct Starter {
  std::string_view kind, text;
};

constexpr std::string_view valve =
    R"(# Starter: a valve at the end of a gravity main closes. An invented scenario: put your own numbers in.
#   headband check valve.toml     every value as understood
#   headband surge valve.toml     one run
#   headband band valve.toml --surge

[about]
title = "Gravity main, end valve closes"
note = "Invented scenario: replace every number."

[show]
units = "si"                       # si | us
places = ["valve chamber"]

[liquid]
name = "water"
temperature = "12 degC ± 3 K"      # ± is the half-width of the 95 % interval

[[basin]]
name = "upper tank"
level = "86 m ± 0.2 m"

[[pipe]]
name = "main"
from = "upper tank"
to = "valve chamber"
profile = [["0 m", "81 m"], ["700 m", "55 m"], ["1500 m", "30 m"]]   # chainage, elevation
outside = "406.4 mm"
wall = "6.3 mm between 5.7 mm and 6.6 mm"     # even between the bounds
material = "steel"
joint = "anchored"
roughness = "0.1 mm x/ 2"          # 95 % between half and twice the value

[[valve]]
name = "end valve"
from = "valve chamber"
to = "air"                         # free discharge
flow = "120 L/s"                   # sized to pass this flow when open
law = "linear"

[[event]]
name = "closing"
at = "0 s"
valve = "end valve"
to = "0 %"
over = "20 s ± 10 %"

[friction]
law = "colebrook-white"
scatter = "± 10 %"

[surge]
duration = "60 s"

[band]
draws = 2000
seed = 1
answers = [
  { highest_pressure = "valve chamber", name = "peak at the valve" },
  { lowest_pressure = "main", name = "lowest in the main" },
  { pressure_drop = ["upper tank", "valve chamber"], name = "drop" },
]

[[limit]]
name = "rating of the valve"
highest_pressure = "10 bar g"
where = "valve chamber"
at_most = "5 %"
)";

constexpr std::string_view trip = R"(# Starter: two pumps lose power. An invented scenario: put your own numbers in.

[about]
title = "Pumped main, both pumps trip"
note = "Invented scenario: replace every number."

[liquid]
name = "water"
temperature = "15 degC"

[[basin]]
name = "sump"
level = "2 m"

[[basin]]
name = "hill tank"
level = "45 m"

[[pipe]]
name = "rising main"
from = "pump header"
to = "hill tank"
profile = [["0 m", "2 m"], ["900 m", "14 m"], ["1600 m", "40 m"]]
outside = "508 mm"
wall = "8 mm"
material = "steel"
joint = "anchored"
roughness = "0.1 mm x/ 2"

[[pump]]
name = "pumps"
from = "sump"
to = "pump header"
count = 2
curve = [["0 L/s", "66 m"], ["150 L/s", "52 m"], ["220 L/s", "38 m"]]   # of one pump
efficiency = "81 %"
speed = "1480 rpm"
inertia_mr2 = "6 kg m2 ± 25 %"     # or inertia_gd2 (= 4 I), inertia_wr2
shut_off_torque = "45 %"
check_valve = "ideal"
rated = { flow = "150 L/s", head = "52 m" }

[[event]]
name = "power fails"
at = "1 s"
trip = "pumps"

[friction]
law = "colebrook-white"
scatter = "± 10 %"

[surge]
duration = "40 s"

[band]
draws = 500
seed = 1
answers = [
  { highest_pressure = "rising main", name = "highest in the main" },
  { lowest_pressure = "rising main", name = "lowest in the main" },
]

[[limit]]
name = "no vacuum in the main"
lowest_pressure = "-0.5 bar g"
where = "rising main"
at_most = "5 %"
)";

constexpr std::string_view oil =
    R"(# Starter: pressure drop of an oil line with error bars. An invented scenario: put your own numbers in.

[about]
title = "Oil line, is the pump enough?"
note = "Invented scenario: replace every number."

[show]
units = "us"

[liquid]
name = "diesel"                    # any word but water and seawater: your own liquid
density = "840 kg/m3 ± 0.5 %"
viscosity = "3.8 cSt ± 10 %"
bulk_modulus = "1.45 GPa"
vapour_pressure = "1 psi abs"

[[basin]]
name = "depot"
level = "0 ft"
surface_pressure = "420 psi g"     # what the pump holds at the line's beginning

[[pipe]]
name = "line"
from = "depot"
to = "terminal"
length = "12 mile"
profile = [["0 mile", "0 ft"], ["12 mile", "85 ft"]]
bore = "10.02 in ± 0.5 %"
roughness = "0.0018 in x/ 2"

[[draw_off]]
name = "delivery"
at = "terminal"
flow = "2000 bbl/h"

[friction]
law = "colebrook-white"
scatter = "± 10 %"                 # of the correlation itself, shared by the whole line

[band]
draws = 4096
seed = 1
answers = [{ pressure_drop = ["depot", "terminal"], name = "drop" }]

[[limit]]
name = "available pressure"
pressure_drop = ["depot", "terminal"]
not_over = "320 psi"
at_most = "5 %"
)";

constexpr std::string_view ageing =
    R"(# Starter: an unlined main grows rough. An invented scenario: put your own numbers in.

[about]
title = "Old main, how long will it do?"
note = "Invented scenario: replace every number."

[liquid]
name = "water"
temperature = "10 degC"

[[basin]]
name = "works"
level = "70 m"

[[pipe]]
name = "main"
from = "works"
to = "town"
length = "6000 m"
profile = [["0 m", "40 m"], ["6000 m", "20 m"]]
bore = "450 mm"
roughness = "0.3 mm x/ 2"          # when it was laid

[[draw_off]]
name = "town demand"
at = "town"
flow = "150 L/s"

[friction]
law = "colebrook-white"
scatter = "± 10 %"

[band]
draws = 2000
seed = 1
answers = [{ pressure_drop = ["works", "town"], name = "drop" }]

[[limit]]
name = "pressure in town"
head = "town"
not_under = "45 m"
at_most = "5 %"

[ageing]
from_year = 1985
to_year = 2060
now = 2026
pipes = ["main"]
growth = "0.05 mm/year x/ 3"
law = "straight"
keep = { flow = "150 L/s", head_available = "24 m" }
energy = { price = "0.15 /kWh", hours = "6000 h/year", efficiency = "72 %", discount = "4 %" }

[[ageing.option]]
name = "reline"
year = 2032
cost = "220 /m"
bore = "438 mm"
roughness = "0.1 mm"
growth = "none"
)";

constexpr std::string_view ring =
    R"(# Starter: a ring main with a hydrant. An invented scenario: put your own numbers in.

[about]
title = "Ring main, hydrant shuts"
note = "Invented scenario: replace every number."

[show]
units = "us"
places = ["hydrant tee", "far corner"]

[liquid]
name = "water"
temperature = "60 degF"

[[basin]]
name = "supply"
level = "200 ft"

[[pipe]]
name = "feed"
from = "supply"
to = "near corner"
profile = [["0 ft", "0 ft"], ["1200 ft", "0 ft"]]
bore = "12 in"
wave_speed = "4000 ft/s ± 5 %"
roughness = "0.006 in x/ 2"

[[pipe]]
name = "north side"
from = "near corner"
to = "hydrant tee"
profile = [["0 ft", "0 ft"], ["1200 ft", "0 ft"]]
bore = "8 in"
wave_speed = "4000 ft/s ± 5 %"
roughness = "0.006 in x/ 2"

[[pipe]]
name = "south side"
from = "near corner"
to = "far corner"
profile = [["0 ft", "0 ft"], ["600 ft", "0 ft"]]
bore = "8 in"
wave_speed = "4000 ft/s ± 5 %"
roughness = "0.006 in x/ 2"

[[pipe]]
name = "east side"
from = "far corner"
to = "hydrant tee"
profile = [["0 ft", "0 ft"], ["600 ft", "0 ft"]]
bore = "8 in"
wave_speed = "4000 ft/s ± 5 %"
roughness = "0.006 in x/ 2"

[[draw_off]]
name = "hydrant"
at = "hydrant tee"
flow = "1000 gpm"
pressure_dependent = true

[[event]]
name = "hydrant shuts"
at = "0 s"
draw_off = "hydrant"
to = "0 gpm"
over = "5 s ± 20 %"

[friction]
law = "colebrook-white"
scatter = "± 10 %"

[surge]
duration = "20 s"
reaches = 20

[band]
draws = 500
seed = 1
answers = [
  { highest_pressure = "hydrant tee", name = "peak at the hydrant" },
  { flow = "north side" },
]

[[limit]]
name = "pipe rating"
highest_pressure = "200 psi g"
at_most = "5 %"
)";

constexpr std::array starters{Starter{"valve", valve},
                              Starter{"trip", trip},
                              Starter{"oil", oil},
                              Starter{"ageing", ageing},
                              Starter{"ring", ring}};

}  // namespace

std::string starter(const std::string& kind) {
  for (const Starter& s : starters)
    if (s.kind == kind) return std::string(s.text);
  return {};
}

std::vector<std::string> starter_kinds() {
  std::vector<std::string> kinds;
  for (const Starter& s : starters) kinds.emplace_back(s.kind);
  return kinds;
}

}  // namespace headband::casefile
