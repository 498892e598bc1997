"""Which direction's elongation a size of a piece takes: length along the grain, width and thickness across it. Rank 2.

Along the grain wood moves little, across it ten times as much. A board's width is taken as tangential and its thickness or
height as radial, so that a volume takes each direction once; a composite's thickness is through its plies.
"""

from __future__ import annotations

from typing import TYPE_CHECKING, Literal

if TYPE_CHECKING:
    from takeoff.materials.expansion import Elongation

Size = Literal["length", "width", "thickness", "height", "diameter"]

_ACROSS = {
    "width": ("tangential", "across"), "thickness": ("radial", "across", "through"), "height": ("radial", "across", "through"),
}


def stretch(grown: Elongation, size: str) -> float | None:
    """Size at the temperature of `grown` over the same size at 20 °C; None where the elongation is not known."""
    if grown.value is None:
        return None
    ways = grown.by_direction
    if size == "diameter" and "radial" in ways and "tangential" in ways:
        return 1.0 + (ways["radial"] + ways["tangential"]) / 2
    for way in _ACROSS.get(size, ("across",) if size == "diameter" else ()):
        if way in ways:
            return 1.0 + ways[way]
    return 1.0 + grown.value
