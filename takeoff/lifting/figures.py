"""Figures in the text of a finding, rounded the way that does not comfort: 60.01 is no 60.0. Rank 6."""

from __future__ import annotations

import math

#: what floats leave in the last places is no reason to go up a step
_NOISE = 1e-6


def up_to(value: float, decimals: int) -> str:
    """To so many decimals, upward."""
    step = 10.0**decimals
    return f"{math.ceil(value * step - _NOISE) / step:.{decimals}f}"


def down_to(value: float, decimals: int) -> str:
    """To so many decimals, downward."""
    step = 10.0**decimals
    return f"{math.floor(value * step + _NOISE) / step:.{decimals}f}"
