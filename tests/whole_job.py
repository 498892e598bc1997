"""A small invented job with everything in it: positions, points, a crane, runs at temperatures, vehicles, a refused row."""

from __future__ import annotations

from pathlib import Path

LIST = """\
Mark,Assembly,Quantity,Section,Material,Length (mm),Width (mm),Thickness (mm),X1 (mm),Y1 (mm),Z1 (mm),X2 (mm),Y2 (mm),Z2 (mm),Run
R1,,4,SHS 100x5,S355,6000,,,,,,,,,LINE
R2,,2,SHS 100x5,1.4404,6000,,,,,,,,,LINE
P1,,3,PL,S355,2000,1000,10,,,,,,,
Q1,,2,SHS 100x7.7,S355,6000,,,,,,,,,
D1,,6,RD 20,S355,900,,,,,,,,,
D2,,6,RD 24,S355,900,,,,,,,,,
B1,F1,1,UB 457x191x67,S355,8000,,,0,0,0,8000,0,0,
B2,F1,1,UB 457x191x67,S355,8000,,,0,2000,0,8000,2000,0,
C1,F1,1,UC 152x152x30,S355,2000,,,0,0,0,0,2000,0,
C2,F1,1,UC 152x152x30,S355,2000,,,8000,0,0,8000,2000,0,
C3,F1,1,UC 203x203x46,S355,2000,,,3000,0,0,3000,2000,0,
"""
CHART = "radius,20,30\n5,30000,25000\n10,12000,11000\n15,6500,6300\n20,3000,3500\n"
JOB = """\
[job]
title = "Pump frame"
reference = "PF-1"
revision = "C"
[temperatures]
cut = 18
erect = 8
coldest = -20
warmest = 45
[[runs]]
name = "LINE"
fixed = "start"
joint_min_mm = 5
[lift]
rigging_kg = 120
hook_block_kg = 200
[[lift.picks]]
name = "F1"
radius_m = 12
boom_m = 20
hook_height_mm = 5000
points = [
  {name = "A", position = [1000, 0, 200]}, {name = "B", position = [7000, 0, 200]},
  {name = "C", position = [7000, 2000, 200]}, {name = "D", position = [1000, 2000, 200]},
]
[crane]
name = "Crane 1"
chart = "chart.csv"
rating_unit = "kg"
configuration = "full counterweight, 20 m boom"
[[vehicles]]
name = "Lorry"
kind = "rigid"
deck_length_mm = 9000
deck_width_mm = 2480
load_height_mm = 2400
deck_height_mm = 1100
wheelbase_mm = 5600
deck_front_mm = 1000
front_empty_kg = 5200
rear_empty_kg = 3800
front_limit_kg = 7500
rear_limit_kg = 11500
payload_kg = 9000
gross_limit_kg = 18000
"""


def write(folder: Path) -> Path:
    """The job's files in `folder`; gives the list."""
    (folder / "job.toml").write_text(JOB, encoding="utf-8")
    (folder / "chart.csv").write_text(CHART, encoding="utf-8")
    path = folder / "list.csv"
    path.write_text(LIST, encoding="utf-8")
    return path
