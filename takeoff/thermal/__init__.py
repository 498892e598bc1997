"""Lengths at named temperatures, movement, gaps, runs of members, the steel tape, fits of pins in bores. Rank 5.

How much a material grows is the material room's; here it becomes millimetres. Plain floats throughout, so that a look-up
loads no array library; only `members` works on columns.
"""

from __future__ import annotations

CAUTIONS = (
    "It is the metal's own temperature that counts, not the air's: sun, welding and cold nights move it well past the air.",
    "Lengths and movements are estimates for a free piece, shown finer than anyone can mark so that they can be checked: confirm on site.",
)

FIT_CAUTION = "Heating can temper or distort a part, cooling can make it brittle: ask what its material stands before it is done."
