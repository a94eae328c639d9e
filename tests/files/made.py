"""The small invented bridge of ``cli.across``, of the Alder valley, its parts said as sections and materials."""

from __future__ import annotations

import re

from cli.across import ACROSS
from cli_run import changed

_TABLES = """\
[materials.iron]
kind = "wrought iron"
built = 1887

[materials.steel]
kind = "steel"
fy = "230 MPa"
fu = "380 MPa"
modulus = 200
density = 7850
source = "two coupons of 1998, invented"

[materials.oak]
kind = "timber"
product = "sawn"
modulus = 9
density = 800
source = "graded by A. Alder, invented"
stresses = { bending = "8.5 MPa", shear = "1.1 MPa", stability = "3.4 GPa" }
factors = { bending = { CM = 0.85, Ct = 1.0, CF = 1.0, Cfu = 1.0, Ci = 1.0, Cr = 1.0 }, shear = { CM = "97 %" } }
durations = ["two months"]
treated = false

[sections."top chord"]
pieces = [
  { shape = "channel", depth = 180, width = 70, web = 8, flange = 11, x = -140, name = "left channel" },
  { shape = "channel", depth = 180, width = 70, web = 8, flange = 11, x = 140, mirror = true },
  { shape = "plate", width = 280, thickness = 8, y = 94, clear = 240 },
]
holes = [
  { diameter = 21, part = "web", number = 2, punched = true, gauge = 60 },
  { diameter = 21, part = "thickness", piece = "plate", thickness = 8 },
]
sharing = 1.15
shear_lag = 0.85
torsion = 2.5e5
warping = "2e10 mm6"
shear_centre = [0, 20]

[sections.rod]
shape = "threaded rod"
diameter = 32
root = 27

[sections.post]
area = 1800
r_x = 40
r_y = 30
r_min = 28
net = 1500
s_x = 40e3
s_y = 30000
z_x = "46 cm3"
z_y = 35000
torsion = "4 cm4"
warping = 1e9
shear_offset = [0, 4]
punched = true
shear_lag = 0.9

[sections.angles]
pieces = [
  { shape = "angle", first_leg = 60, second_leg = 50, thickness = 6, x = 4 },
  { shape = "angle", first_leg = 60, second_leg = 50, thickness = 6, x = -4, mirror = true },
]

[sections.joist]
shape = "I"
depth = 240
width = 110
web = 8
flange = 11

[sections.plank]
shape = "timber"
width = 200
depth = 80

"""

_GROUPS = {
    "top chord": """\
section = "top chord"
material = "steel"
unbraced_x = "joint to joint"
unbraced_y = "4.2 m"
k_x = 1.0
k_y = "90 %"
curves = ["c", "c"]
joined = { axis = "y", spacing = 300, apart = 220, lacing_area = 400, planes = 2 }
bent = [{ axis = "x", moment = 12, eccentricity = 20, bow = 10 }, { axis = "y", bow = 5, evenness = 0.85 }]
losses = [
  { where = "start end", piece = "left channel", part = "web", amount = 3, inside_connection = true },
  { fraction = "10 %", part = "flange" },
]
""",
    "bottom chord": """\
section = "rod"
material = "iron"
losses = [{ where = "middle", fraction = 0.2, truss = "left", bar = "L2-L1" }]
""",
    "end posts": """\
section = "post"
material = "steel"
unbraced_x = "joint to joint"
unbraced_y = "joint to joint"
unbraced_z = 2
k_x = 0.85
k_y = 1
k_z = 1
""",
    "web": """\
section = "angles"
material = "iron"
unbraced_x = 2.2
unbraced_y = 2.2
k_x = 1
k_y = 1
joined = { axis = "y", spacing = 500, apart = 30, radius = 11 }
""",
}

_FLOOR = {
    "stringers": """\
section = "joist"
material = "steel"
unbraced = 1.2
c_b = 1.0
stiffeners = 1200
lever = 120
curves = ["b", "b"]
losses = [{ where = "all along", part = "web", amount = 1 }]
""",
    "floorbeams": 'section = "joist"\nmaterial = "steel"\nunbraced = "held"\n',
    "planks": 'section = "plank"\nmaterial = "oak"\nunbraced = "held"\n',
}


def _made() -> str:
    """Return the text: areas and weights as typed give way to sections and materials."""
    text = re.sub(r"(?m)^(area|modulus|density) = \d+\n(?!across)", "", ACROSS.split("[deck]")[0])
    text += "[deck]" + ACROSS.split("[deck]")[1]
    for title, keys in _GROUPS.items():
        head = f'[members."{title}"]\n' if " " in title else f"[members.{title}]\n"
        text = changed(text, (head, head + keys))
    for part, keys in _FLOOR.items():
        text = changed(text, (f"[floor.{part}]\n", f"[floor.{part}]\n{keys}"))
    text = changed(text, ("weight = 0.5\n", ""), ("timber = true\n", ""))
    return changed(text, ("[supports]", f"{_TABLES}[supports]"), ("Alder weir road", "Alder lock road"))


MADE = _made()
