#pragma once
// SPDX-License-Identifier: MIT
//
// Small invented cases that between them hold every key of the reader's table. A key that carries a number stands as
// <<SECTION KEY|VALUE>> or <<SECTION KEY|VALUE|SPREAD>>; without a spread of its own "± 5 %" fits.

#include "tests/support/spread_cases_steady.hpp"

#include <vector>

namespace headband::test {

inline std::vector<SpreadCase> march_spread_cases() {
  return {
      // ------------------------------------------------------------------------------------- march: wave speed,
      // strokes
      {"band --surge", R"(
[liquid]
name = "oil"
density = <<liquid density|850 kg/m3>>
viscosity = "20 cSt"
bulk_modulus = <<liquid bulk_modulus|1.5 GPa>>
[[basin]]
name = "tank"
level = "60 m"
[[pipe]]
name = "main"
from = "tank"
to = "end"
length = <<pipe length|900 m>>
outside = <<pipe outside|508 mm>>
wall = <<pipe wall|8 mm>>
lining = { thickness = <<pipe lining thickness|6 mm>>, modulus = <<pipe lining modulus|25 GPa>> }
modulus = <<pipe modulus|207 GPa>>
poisson = <<pipe poisson|0.3>>
wave_speed_scatter = <<pipe wave_speed_scatter|none>>
roughness = <<pipe roughness|0.5 mm>>
rating = <<pipe rating|8.2 bar g>>
[[valve]]
name = "end valve"
from = "end"
to = "air"
flow = <<valve flow|200 L/s>>
near_seat = <<valve near_seat|none>>
[[event]]
at = <<event at|1 s>>
valve = "end valve"
to = <<event to opening|10 %|± 1 %>>
over = <<event over|3 s>>
[friction]
scatter = <<friction scatter|none>>
[surge]
duration = <<surge duration|2.5 s>>
reaches = 8
cavities = "off"
grid_check = false
[band]
draws = 16
answers = [{ highest_pressure = "end" }]
)"},
      {"band --surge", R"(
[liquid]
name = "water"
temperature = "15 degC"
free_gas = <<liquid free_gas|0.05 %|± 0.02 %>>
[[basin]]
name = "tank"
level = "60 m"
[[pipe]]
name = "main"
from = "tank"
to = "end"
length = "900 m"
bore = "500 mm"
wall = "8 mm"
material = "steel"
restraint_factor = <<pipe restraint_factor|0.95>>
friction_factor = 0.02
[[valve]]
name = "end valve"
from = "end"
to = "air"
kv = <<valve kv|800 m3/h>>
[[event]]
at = "0 s"
valve = "end valve"
travel = [[<<event travel time|0 s|± 0.1 s>>, "100 %"], ["2 s", <<event travel opening|50 %|± 1 %>>], ["3 s", "40 %"]]
[friction]
scatter = "none"
[surge]
duration = "4 s"
reaches = 8
cavities = "off"
grid_check = false
[band]
draws = 16
answers = [{ highest_pressure = "end" }]
)"},
      {"band --surge", R"(
[liquid]
name = "oil"
density = "850 kg/m3"
viscosity = "20 cSt"
vapour_pressure = <<liquid vapour_pressure|0.4 bar abs|± 0.1 bar>>
[site]
atmosphere = <<site atmosphere|101.325 kPa abs>>
gravity = <<site gravity|9.80665 m/s2>>
[[basin]]
name = "tank"
level = <<basin level|20 m|± 0.5 m>>
level_table = [[<<basin level_table time|0 s|± 1 s>>, <<basin level_table level|20 m>>], ["100 s", "15 m"]]
[[pipe]]
name = "main"
from = "tank"
to = "middle"
length = "900 m"
bore = "500 mm"
wave_speed = <<pipe wave_speed|1000 m/s>>
friction_factor = 0.02
[[valve]]
name = "line valve"
from = "middle"
to = "after"
flow = "200 L/s"
[[event]]
at = "0 s"
valve = "line valve"
travel = [[<<event travel share|0 %|± 1 %>>, "100 %"], ["40 %", "30 %"], ["100 %", "0 %"]]
over = <<event over|2 s>>
[[pipe]]
name = "tail"
from = "after"
to = "low tank"
length = "900 m"
bore = "500 mm"
wave_speed = "1000 m/s"
friction_factor = 0.02
[[basin]]
name = "low tank"
level = "5 m"
[friction]
scatter = "none"
[surge]
duration = "4 s"
reaches = 8
grid_check = false
[band]
draws = 16
answers = [{ lowest_pressure = "tail" }, { highest_pressure = "middle" }]
)"},
      {"band --surge", R"(
[liquid]
name = "water"
temperature = "15 degC"
[[basin]]
name = "tank"
level = <<basin level|60 m>>
surface_pressure = <<basin surface_pressure|0.5 bar g>>
[[pipe]]
name = "main"
from = "tank"
to = "end"
length = "900 m"
bore = "500 mm"
profile = [["0 m", "50 m"], ["900 m", <<pipe profile elevation|20 m>>]]
wave_speed = "1000 m/s"
friction_factor = <<pipe friction_factor|0.02>>
[[valve]]
name = "end valve"
from = "end"
to = "air"
kv = "800 m3/h"
opening = <<valve opening|50 %|± 5 %>>
[[event]]
at = <<event at|0.5 s>>
valve = "end valve"
swing = <<event swing|10 %|± 2 %>>
period = <<event period|2 s>>
[[draw_off]]
name = "hydrant"
at = "end"
flow = <<draw_off flow|20 L/s>>
pressure_dependent = true
[[event]]
at = "0 s"
draw_off = "hydrant"
to = <<event to flow|5 L/s>>
over = "1 s"
[[event]]
at = "0 s"
basin = "tank"
to = <<event to level|65 m>>
over = "2 s"
[friction]
scatter = "none"
[surge]
duration = "4.3 s"
reaches = 8
cavities = "off"
grid_check = false
[band]
draws = 16
answers = [{ highest_pressure = "end" }, { lowest_pressure = "end" }]
)"},
      // ---------------------------------------------------------------------------------------- march: pumps that trip
      {"band --surge", R"(
[liquid]
name = "water"
temperature = "15 degC"
[[basin]]
name = "sump"
level = "0 m"
[[pump]]
name = "pump"
from = "sump"
to = "header"
curve = [["0 L/s", "70 m"], ["150 L/s", "60 m"], ["250 L/s", "40 m"]]
head_scatter = <<pump head_scatter|none>>
efficiency = <<pump efficiency|82 %|± 3 %>>
speed = <<pump speed|1480 rpm>>
inertia_mr2 = <<pump inertia_mr2|4.5 kg m2>>
shut_off_torque = <<pump shut_off_torque|45 %|± 5 %>>
rated = { flow = <<pump rated flow|175 L/s>>, head = <<pump rated head|57 m>> }
[[pipe]]
name = "main"
from = "header"
to = "upper"
length = "900 m"
bore = "400 mm"
wave_speed = "1000 m/s"
friction_factor = 0.02
[[basin]]
name = "upper"
level = "45 m"
[[event]]
at = "0 s"
trip = "pump"
[friction]
scatter = "none"
[surge]
duration = "3 s"
reaches = 8
cavities = "off"
grid_check = false
[band]
draws = 16
answers = [{ lowest_pressure = "header" }]
)"},
      {"band --surge", R"(
[liquid]
name = "water"
temperature = "15 degC"
[[basin]]
name = "sump"
level = "0 m"
[[pump]]
name = "pump A"
from = "sump"
to = "header"
curve = [["0 L/s", "70 m"], ["150 L/s", "60 m"], ["250 L/s", "40 m"]]
efficiency = "82 %"
speed = "1480 rpm"
inertia_gd2 = <<pump inertia_gd2|18 kg m2>>
torque = [[<<pump torque flow|0 L/s|± 1 L/s>>, <<pump torque share|45 %|± 1 %>>], ["175 L/s", "100 %"]]
[[pump]]
name = "pump B"
from = "sump"
to = "header"
curve = [["0 L/s", "70 m"], ["150 L/s", "60 m"], ["250 L/s", "40 m"]]
efficiency = "82 %"
speed = "1480 rpm"
inertia_wr2 = <<pump inertia_wr2|107 lb ft2>>
shut_off_torque = "45 %"
[[pipe]]
name = "main"
from = "header"
to = "upper"
length = "900 m"
bore = "400 mm"
wave_speed = "1000 m/s"
friction_factor = 0.02
[[basin]]
name = "upper"
level = "45 m"
[[event]]
at = "0 s"
trip = "pump A"
[[event]]
at = "0 s"
trip = "pump B"
[friction]
scatter = "none"
[surge]
duration = "3 s"
reaches = 8
cavities = "off"
grid_check = false
[band]
draws = 16
answers = [{ lowest_pressure = "header" }]
)"},
      {"band --surge", R"(
[liquid]
name = "water"
temperature = "15 degC"
[[basin]]
name = "sump"
level = "0 m"
[[pump]]
name = "pump"
from = "sump"
to = "header"
curve = [["0 L/s", "70 m"], ["150 L/s", "60 m"], ["250 L/s", "40 m"]]
efficiency = "82 %"
speed = "1480 rpm"
inertia_mr2 = "2 kg m2"
shut_off_torque = "45 %"
check_valve = { reverse_velocity = <<pump check_valve reverse_velocity|0.3 m/s>>, bore = <<pump check_valve bore|300 mm>> }
[[pipe]]
name = "main"
from = "header"
to = "upper"
length = "400 m"
bore = "400 mm"
wave_speed = "1000 m/s"
friction_factor = 0.02
[[basin]]
name = "upper"
level = "45 m"
[[event]]
at = "0 s"
trip = "pump"
[friction]
scatter = "none"
[surge]
duration = "10 s"
reaches = 80
cavities = "off"
grid_check = false
[band]
draws = 16
answers = [{ highest_pressure = "header" }]
)"},
      {"band --surge", R"(
[liquid]
name = "water"
temperature = "15 degC"
[[basin]]
name = "sump"
level = "0 m"
[[pump]]
name = "pump"
from = "sump"
to = "header"
curve = [["0 L/s", "70 m"], ["150 L/s", "60 m"], ["250 L/s", "40 m"]]
efficiency = "82 %"
speed = "1480 rpm"
inertia_mr2 = "2 kg m2"
shut_off_torque = "45 %"
check_valve = { delay = <<pump check_valve delay|0.2 s>> }
[[pipe]]
name = "main"
from = "header"
to = "upper"
length = "400 m"
bore = "400 mm"
wave_speed = "1000 m/s"
friction_factor = 0.02
[[basin]]
name = "upper"
level = "45 m"
[[event]]
at = "0 s"
trip = "pump"
[friction]
scatter = "none"
[surge]
duration = "10 s"
reaches = 80
cavities = "off"
grid_check = false
[band]
draws = 16
answers = [{ highest_pressure = "header" }]
)"},
      {"band --surge", R"(
[liquid]
name = "water"
temperature = "15 degC"
[[basin]]
name = "sump"
level = "50 m"
[[check_valve]]
name = "flap"
from = "sump"
to = "header"
k = 1.2
bore = "400 mm"
reverse_velocity = <<check_valve reverse_velocity|0.3 m/s>>
[[pipe]]
name = "main"
from = "header"
to = "upper"
length = "400 m"
bore = "400 mm"
wave_speed = "1000 m/s"
friction_factor = 0.02
[[basin]]
name = "upper"
level = "45 m"
[[event]]
at = "0 s"
basin = "sump"
to = "30 m"
over = "1 s"
[friction]
scatter = "none"
[surge]
duration = "10 s"
reaches = 80
cavities = "off"
grid_check = false
[band]
draws = 16
answers = [{ highest_pressure = "header" }]
)"},
      {"band --surge", R"(
[liquid]
name = "water"
temperature = "15 degC"
[[basin]]
name = "sump"
level = "50 m"
[[check_valve]]
name = "flap"
from = "sump"
to = "header"
kv = "3000 m3/h"
delay = <<check_valve delay|0.2 s>>
[[pipe]]
name = "main"
from = "header"
to = "upper"
length = "400 m"
bore = "400 mm"
wave_speed = "1000 m/s"
friction_factor = 0.02
[[basin]]
name = "upper"
level = "45 m"
[[event]]
at = "0 s"
basin = "sump"
to = "30 m"
over = "1 s"
[friction]
scatter = "none"
[surge]
duration = "10 s"
reaches = 80
cavities = "off"
grid_check = false
[band]
draws = 16
answers = [{ highest_pressure = "header" }]
)"},
      {"band --surge", R"(
[liquid]
name = "water"
temperature = "15 degC"
[[basin]]
name = "sump"
level = "0 m"
[[pump]]
name = "pump"
from = "sump"
to = "header"
curve = [["0 L/s", "70 m"], ["150 L/s", "60 m"], ["250 L/s", "40 m"]]
[[pump]]
name = "second pump"
from = "sump"
to = "header"
curve = [["0 L/s", "70 m"], ["150 L/s", "60 m"], ["250 L/s", "40 m"]]
[[check_valve]]
name = "slow"
from = "header"
to = "a"
kv = "3000 m3/h"
[[check_valve]]
name = "late"
from = "a"
to = "b"
kv = "3000 m3/h"
[[pipe]]
name = "main"
from = "b"
to = "upper"
length = "900 m"
bore = "400 mm"
wave_speed = "1000 m/s"
friction_factor = 0.02
wave_speed_change = <<pipe wave_speed_change|5 %|± 1 %>>
creep = [{ compliance = <<pipe creep compliance|1.2e-10 1/Pa>>, time = <<pipe creep time|0.05 s>> }]
[[basin]]
name = "upper"
level = "45 m"
[[air_vessel]]
name = "vessel"
at = "b"
gas_volume = <<air_vessel gas_volume|7 m3>>
precharge = <<air_vessel precharge|3 bar g>>
shell_volume = <<air_vessel shell_volume|17 m3>>
area = <<air_vessel area|4 m2>>
exponent = <<air_vessel exponent|1.2>>
water_level = <<air_vessel water_level|1.0 m>>
throttle_in = <<air_vessel throttle_in|2.5>>
throttle_out = <<air_vessel throttle_out|1.0>>
connection_bore = <<air_vessel connection_bore|300 mm>>
[[surge_tank]]
name = "shaft"
at = "b"
area = <<surge_tank area|12 m2>>
throttle = { bore = <<surge_tank throttle bore|400 mm>>, k = <<surge_tank throttle k|1.5>> }
overflow_level = <<surge_tank overflow_level|92 m>>
level = <<surge_tank level|60 m>>
one_way = true
[[relief]]
name = "first relief"
at = "b"
set_pressure = <<relief set_pressure|14 bar g>>
full_open_over = <<relief full_open_over|10 %|± 1 %>>
cv = <<relief cv|2200 gpm>>
reset = <<relief reset|-5 %|± 1 %>>
back_pressure = <<relief back_pressure|0.3 bar g>>
lag = <<relief lag|0.2 s>>
[[relief]]
name = "second relief"
at = "b"
set_pressure = "14 bar g"
kv = <<relief kv|1500 m3/h>>
[[relief]]
name = "third relief"
at = "b"
set_pressure = "14 bar g"
area = <<relief area|0.01 m2>>
discharge_coefficient = <<relief discharge_coefficient|0.6>>
[[air_valve]]
name = "vent"
at = "a"
in_bore = <<air_valve in_bore|80 mm>>
out_bore = <<air_valve out_bore|5 mm>>
discharge_coefficient = <<air_valve discharge_coefficient|0.6>>
[[draw_off]]
name = "hydrant"
at = "b"
flow = "20 L/s"
[[event]]
name = "by pressure"
when = <<event when pressure|pressure at b above 12 bar g>>
trip = "pump"
delay = <<event delay|0.5 s>>
[[event]]
name = "by head"
when = <<event when head|head at b above 70 m>>
trip = "pump"
[[event]]
name = "by level"
when = <<event when level|level of upper above 70 m>>
trip = "pump"
[[event]]
name = "by flow"
when = <<event when flow|flow in main below 10 L/s>>
trip = "pump"
[[event]]
name = "by time"
when = <<event when lasting|flow in main below 10 L/s for 2 s>>
trip = "pump"
[friction]
scatter = "none"
[surge]
duration = "3 s"
time_step = <<surge time_step|0.1 s>>
cavities = "off"
[band]
draws = 16
answers = [{ lowest_pressure = "header" }]
)"},
      // ------------------------------------------------------------------- sections of verbs that are refused as a
      // whole
      {"fastest", R"(
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
bore = "300 mm"
roughness = "0.1 mm"
[[draw_off]]
name = "out"
at = "end"
flow = "80 L/s"
[fastest]
event = "closing"
between = [<<fastest between|10 s>>, "300 s"]
to_within = <<fastest to_within|1 s>>
)"},
      {"age", R"(
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
bore = "300 mm"
roughness = "0.1 mm"
[[draw_off]]
name = "out"
at = "end"
flow = "80 L/s"
[ageing]
growth = <<ageing growth|0.10 mm/year|x/ 3>>
energy = { price = <<ageing energy price|0.14 /kWh>>, hours = <<ageing energy hours|8000 h/year>>, efficiency = <<ageing energy efficiency|74 %|± 1 %>>, discount = <<ageing energy discount|4 %|± 1 %>> }
keep = { flow = <<ageing keep flow|300 L/s>>, head_available = <<ageing keep head_available|36 m>> }
[[ageing.option]]
name = "reline"
year = 2030
cost = <<ageing.option cost|260 /m>>
bore = <<ageing.option bore|280 mm>>
roughness = <<ageing.option roughness|0.1 mm>>
growth = <<ageing.option growth|0.05 mm/year>>
)"},
      {"match", R"(
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
bore = "300 mm"
roughness = "0.1 mm"
[[draw_off]]
name = "out"
at = "end"
flow = "80 L/s"
[[test]]
pipe = "main"
flow = <<test flow|262 L/s>>
head_loss = <<test head_loss|18.9 m>>
[[test]]
pipe = "main"
flow = "35 L/s"
at = "end"
pressure = <<test pressure|6.41 bar g>>
[match]
log = "field.csv"
at = "end"
clock_offset = <<match clock_offset|2 s>>
gauge_lag = <<match gauge_lag|0.15 s>>
gauge_noise = <<match gauge_noise|0.02 bar>>
)"},
  };
}

/// All of them, the steady ones first.
inline const std::vector<SpreadCase>& spread_cases() {
  static const std::vector<SpreadCase> cases = [] {
    std::vector<SpreadCase> all = steady_spread_cases();
    const std::vector<SpreadCase> march = march_spread_cases();
    all.insert(all.end(), march.begin(), march.end());
    return all;
  }();
  return cases;
}

}  // namespace headband::test
