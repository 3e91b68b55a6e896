#pragma once
// SPDX-License-Identifier: MIT
//
// The steady half of the cases that hold every key of the reader's table: see spread_cases.hpp.

#include <string_view>
#include <vector>

namespace headband::test {

struct SpreadCase {
  std::string_view verb;  ///< "band", "band --surge"
  std::string_view text;
};

inline std::vector<SpreadCase> steady_spread_cases() {
  return {
      // ---------------------------------------------------------------- steady: liquid, site, places, sizes of a line
      {"band", R"(
[site]
atmosphere = <<site atmosphere|101.325 kPa abs>>
gravity = <<site gravity|9.80665 m/s2>>
[liquid]
name = "oil"
density = <<liquid density|850 kg/m3>>
viscosity = <<liquid viscosity|20 cSt>>
[[basin]]
name = "tank"
level = <<basin level|30 m>>
surface_pressure = "2 bar abs"
[[place]]
name = "end"
elevation = <<place elevation|10 m>>
[[pipe]]
name = "line"
from = "tank"
to = "end"
length = <<pipe length|900 m>>
bore = <<pipe bore|300 mm>>
roughness = <<pipe roughness|0.5 mm>>
fittings = [{ name = "bend", count = <<pipe fitting count|4>>, k = <<pipe fitting k|0.5>>, at = <<pipe fitting at|320 m>> },
            { name = "gauze", equivalent_length = <<pipe fitting equivalent_length|20 m>> }]
[[valve]]
name = "outlet"
from = "end"
to = "air"
kv = <<valve kv|800 m3/h>>
[friction]
scatter = <<friction scatter|none>>
[band]
draws = 16
answers = [{ flow = "line" }]
)"},
      {"band", R"(
[liquid]
name = "oil"
density = "850 kg/m3"
temperature = <<liquid temperature|30 degC|± 2 K>>
viscosity_points = [[<<liquid viscosity_points temperature|25 degC|± 2 K>>, <<liquid viscosity_points viscosity|900 cSt>>], ["50 degC", "250 cSt"]]
viscosity_scatter = <<liquid viscosity_scatter|none>>
[[basin]]
name = "tank"
level = "30 m"
surface_pressure = <<basin surface_pressure|1 bar g>>
[[pipe]]
name = "line"
from = "tank"
to = "end"
profile = [[<<pipe profile chainage|0 m|± 1 m>>, "12 m"], ["900 m", <<pipe profile elevation|10 m>>]]
bore = "300 mm"
roughness = "0.5 mm"
[[draw_off]]
name = "out"
at = "end"
flow = <<draw_off flow|20 L/s>>
[friction]
scatter = "none"
laminar_scatter = <<friction laminar_scatter|none>>
[band]
draws = 16
coverage = <<band coverage|95 %|± 1 %>>
confidence = <<band confidence|95 %|± 1 %>>
answers = [{ highest_pressure = "end" }]
[[limit]]
name = "peak"
highest_pressure = <<limit highest_pressure|20 bar g>>
where = <<spot chainage|line @ 100 m>>
at_most = <<limit at_most|5 %|± 1 %>>
confidence = <<limit confidence|95 %|± 1 %>>
[[limit]]
name = "least"
lowest_pressure = <<limit lowest_pressure|-0.5 bar g>>
[[limit]]
name = "speed"
velocity = <<limit velocity|2.5 m/s>>
[[limit]]
name = "drop"
pressure_drop = ["tank", "end"]
not_over = <<limit bound pressure_drop|4 bar>>
[[limit]]
name = "delivery"
flow = "line"
not_under = <<limit bound flow|10 L/s>>
[[limit]]
name = "grade line"
head = "end"
not_under = <<limit bound head|5 m>>
)"},
      {"band", R"(
[liquid]
name = "water"
temperature = <<liquid temperature|15 degC|± 3 K>>
[[place]]
name = "source"
head = <<place head|60 m>>
[[pipe]]
name = "smooth line"
from = "source"
to = "end"
length = "900 m"
bore = "300 mm"
roughness = "0.01 mm"
friction_scatter = <<pipe friction_scatter|none>>
[[draw_off]]
name = "out"
at = "end"
flow = "80 L/s"
[friction]
scatter = "none"
[band]
draws = 16
answers = [{ head = "end" }]
)"},
      {"band", R"(
[liquid]
name = "water"
temperature = "15 degC"
[[basin]]
name = "tank"
level = "60 m"
[[pipe]]
name = "a"
from = "tank"
to = "b"
length = "900 m"
bore = "300 mm"
hazen_williams = <<pipe hazen_williams|130>>
[[pipe]]
name = "b c"
from = "b"
to = "c"
length = "900 m"
bore = "300 mm"
manning = <<pipe manning|0.012>>
[[pipe]]
name = "c d"
from = "c"
to = "d"
length = "900 m"
bore = "300 mm"
friction_factor = <<pipe friction_factor|0.02>>
[[draw_off]]
name = "out"
at = "d"
flow = "80 L/s"
[friction]
scatter = "none"
[band]
draws = 16
answers = [{ head = "d" }]
)"},
      {"band", R"(
[liquid]
name = "water"
temperature = "15 degC"
[[basin]]
name = "tank"
level = "60 m"
[[pipe]]
name = "main"
from = "tank"
to = "end"
length = "900 m"
outside = <<pipe outside|320 mm>>
wall = <<pipe wall|8 mm>>
lining = { thickness = <<pipe lining thickness|6 mm>> }
rating = <<pipe rating|5.5 bar g>>
[[draw_off]]
name = "out"
at = "end"
flow = "80 L/s"
[friction]
fixed_factor = <<friction fixed_factor|0.02>>
scatter = "none"
[band]
draws = 16
answers = [{ head = "end" }]
)"},
      // ---------------------------------------------------------------------------------- steady: valves, pumps,
      // checks
      {"band", R"(
[liquid]
name = "water"
temperature = "15 degC"
[[basin]]
name = "tank"
level = "60 m"
[[pipe]]
name = "main"
from = "tank"
to = "a"
length = "400 m"
bore = "300 mm"
friction_factor = 0.02
[[valve]]
name = "first"
from = "a"
to = "b"
cv = <<valve cv|900 gpm>>
opening = <<valve opening|60 %|± 5 %>>
near_seat = <<valve near_seat|none>>
law = [[<<valve law travel|0 %|± 1 %>>, <<valve law share|0|± 0.01>>], ["100 %", 1]]
[[valve]]
name = "second"
from = "b"
to = "c"
k = <<valve k|50>>
bore = <<valve bore|200 mm>>
[[valve]]
name = "third"
from = "c"
to = "air"
area = <<valve area|0.02 m2>>
discharge_coefficient = <<valve discharge_coefficient|0.6>>
[friction]
scatter = "none"
[band]
draws = 16
answers = [{ flow = "main" }]
)"},
      {"band", R"(
[liquid]
name = "water"
temperature = "15 degC"
[[basin]]
name = "sump"
level = "0 m"
[[pump]]
name = "pump"
from = "sump"
to = "a"
curve = [[<<pump curve flow|0 L/s|± 1 L/s>>, <<pump curve head|70 m>>], ["150 L/s", "40 m"]]
head_scatter = <<pump head_scatter|none>>
[[check_valve]]
name = "first"
from = "a"
to = "b"
kv = <<check_valve kv|400 m3/h>>
[[check_valve]]
name = "second"
from = "b"
to = "c"
cv = <<check_valve cv|400 gpm>>
[[check_valve]]
name = "third"
from = "c"
to = "d"
k = <<check_valve k|3>>
bore = <<check_valve bore|200 mm>>
[[pipe]]
name = "main"
from = "d"
to = "e"
length = "400 m"
bore = "300 mm"
friction_factor = 0.02
[[valve]]
name = "end valve"
from = "e"
to = "air"
flow = <<valve flow|60 L/s>>
[friction]
scatter = "none"
[band]
draws = 16
answers = [{ flow = "main" }, { head = "d" }]
)"},
  };
}

}  // namespace headband::test
