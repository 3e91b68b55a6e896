# SPDX-License-Identifier: MIT
"""Random pipelines as case files, for checks that need many of them. Invented numbers; a seed gives one case for ever."""
import math
import random


def pipe(name, start, end, length, bore, wave_speed, roughness, heights, extra=""):
    return f'''[[pipe]]
name = "{name}"
from = "{start}"
to = "{end}"
length = "{length!r} m"
profile = [["0 m", "{heights[0]!r} m"], ["{length!r} m", "{heights[1]!r} m"]]
bore = "{bore!r} m"
wave_speed = "{wave_speed!r} m/s"
roughness = "{roughness!r} mm"
{extra}'''


class Network:
    """A main from a basin through one to three pipes to an end valve, with a branch, a ring or a second basin at times."""

    def __init__(self, seed, cavities, step=None):
        self.chance = random.Random(seed)
        self.step = step  # with a step every pipe's time is a whole multiple of ten of it: the grid changes no wave speed
        self.cavities = cavities
        self.text = ""
        self.build()

    def time_of_pipe(self):
        c = self.chance
        return self.step * 10 * c.randint(2, 8) if self.step else c.uniform(0.2, 3.0)

    def add_pipe(self, name, start, end, heights, bore):
        c = self.chance
        wave_speed = round(c.uniform(300, 1300), 1)
        length = self.time_of_pipe() * wave_speed
        self.text += pipe(name, start, end, length, bore, wave_speed, round(c.uniform(0.01, 1.0), 3), heights)
        return 2 * length / wave_speed

    def build(self):
        c = self.chance
        level = round(c.uniform(25, 60) if self.cavities else c.uniform(110, 180), 1)
        velocity = c.uniform(0.8, 2.0) if self.cavities else c.uniform(0.2, 0.7)
        bore = round(c.uniform(0.15, 0.9), 3)
        flow = velocity * math.pi * bore**2 / 4
        self.text += f'''[about]
title = "generated network, invented numbers"
[liquid]
name = "water"
temperature = "{c.randint(4, 30)} degC"
[[basin]]
name = "tank"
level = "{level} m"
'''
        heights = [0.0]
        places = ["tank"]
        travel = 0.0
        count = c.randint(1, 3)
        for i in range(count):
            places.append("end" if i == count - 1 else f"joint {i}")
            heights.append(round(c.uniform(-3, 5), 2))
            travel += self.add_pipe(f"main {i}", places[i], places[i + 1], (heights[i], heights[i + 1]), bore)
        kind = c.choice(["plain", "dead end", "ring", "draw-off"])
        if kind == "dead end":
            self.add_pipe("dead leg", places[-2] if count > 1 else "end", "cap", (heights[-2] if count > 1 else heights[-1], 0.0), round(0.6 * bore, 3))
        elif kind == "ring" and count > 1:
            self.add_pipe("twin", places[1], places[-1] if count > 2 else "tank", (heights[1], heights[-1] if count > 2 else heights[0]),
                          round(0.8 * bore, 3))
        elif kind == "draw-off" and count > 1:
            self.text += f'[[draw_off]]\nname = "off-take"\nat = "{places[1]}"\nflow = "{0.2 * flow!r} m3/s"\npressure_dependent = true\n'
        over = round(c.uniform(0.1, 0.5) * travel if self.cavities else c.uniform(0.5, 3.0) * travel, 3)
        self.text += f'''[[valve]]
name = "end valve"
from = "end"
to = "air"
flow = "{flow!r} m3/s"
law = {c.choice(['"linear"', '"power 1.5"', '"equal percentage 30"', '"quick opening"'])}
[[event]]
at = "{2 * (self.step or 0.25)!r} s"
valve = "end valve"
to = "{c.choice([0, 0, 0, 20])} %"
over = "{over} s"
[friction]
law = "{c.choice(['colebrook-white', 'haaland', 'churchill'])}"
scatter = "none"
'''
        self.duration = round(over + 3 * travel, 3)

    def case(self, reaches=None, time_step=None, grid_check=True, duration=None):
        grid = f'time_step = "{time_step!r} s"' if time_step else f"reaches = {reaches}"
        return self.text + f'''[surge]
duration = "{duration or self.duration} s"
{grid}
cavities = "{'vapour' if self.cavities else 'off'}"
grid_check = {'true' if grid_check else 'false'}
'''
