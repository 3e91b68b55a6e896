# SPDX-License-Identifier: MIT
"""A tank and a level pipe of 1000 m from it, the frame of small cases in Python."""


def level_line(level, bore, *pipe):
    """[[basin]] tank, [[pipe]] main from tank to end; `pipe`: its other lines."""
    more = "".join(line + "\n" for line in pipe)
    return f"""\
[[basin]]
name = "tank"
level = "{level}"
[[pipe]]
name = "main"
from = "tank"
to = "end"
length = "1000 m"
profile = [["0 m", "0 m"], ["1000 m", "0 m"]]
bore = "{bore}"
{more}"""
