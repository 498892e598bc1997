"""Light / nominal / heavy: the three masses everything carries, and the likely range beside them. Rank 1.

The plain bounds add up linearly and are what lifting and axle checks use. The likely range (coverage factor 2) is for
ordering and freight, never for lifting.
"""

from __future__ import annotations

import math
from collections.abc import Iterable
from dataclasses import dataclass


@dataclass(frozen=True, slots=True)
class Bounds:
    """Light, nominal and heavy of one thing, in one unit (usually kg). Raises ValueError unless light <= nominal <= heavy."""

    light: float
    nominal: float
    heavy: float

    def __post_init__(self) -> None:
        # A hair of tolerance: the three are products of floats that may be equal in exact arithmetic.
        slack = 1e-9 * max(abs(self.light), abs(self.heavy), 1e-300)
        if not (self.light <= self.nominal + slack and self.nominal <= self.heavy + slack):
            raise ValueError(f"bounds out of order: {self.light}, {self.nominal}, {self.heavy}")

    def __add__(self, other: Bounds) -> Bounds:
        return Bounds(self.light + other.light, self.nominal + other.nominal, self.heavy + other.heavy)

    def __mul__(self, factor: float) -> Bounds:
        """Scaled by a factor that is not negative."""
        return Bounds(self.light * factor, self.nominal * factor, self.heavy * factor)

    __rmul__ = __mul__

    def times(self, other: Bounds) -> Bounds:
        """The product bound by bound, for quantities that are never negative (a size and a density, say)."""
        return Bounds(self.light * other.light, self.nominal * other.nominal, self.heavy * other.heavy)

    def as_record(self) -> dict[str, float]:
        return {"light": self.light, "nominal": self.nominal, "heavy": self.heavy}

    @classmethod
    def exact(cls, value: float) -> Bounds:
        return cls(value, value, value)

    @classmethod
    def total(cls, parts: Iterable[Bounds]) -> Bounds:
        parts = list(parts)
        return cls(
            math.fsum(p.light for p in parts), math.fsum(p.nominal for p in parts), math.fsum(p.heavy for p in parts)
        )


@dataclass(frozen=True, slots=True)
class Spread:
    """Low / nominal / high of a table figure, such as a density in kg/m³. Nominal is None where no source gives one."""

    low: float
    nominal: float | None
    high: float

    def as_record(self) -> dict[str, float | None]:
        return {"low": self.low, "nominal": self.nominal, "high": self.high}


def standard_uncertainty(groups: Iterable[Bounds]) -> float:
    """The combined standard uncertainty of a total, in the groups' unit (JCGM 100, uncertainty of measurement).

    Each group (one section in one material) is one rectangular distribution between its summed bounds, since its members
    come from the same rolling or quarry and err together: half width a, standard uncertainty a / √3. Groups are
    independent: the root of the sum of squares.
    """
    return math.sqrt(math.fsum(((g.heavy - g.light) / 2) ** 2 for g in groups) / 3)


def likely_range(groups: Iterable[Bounds], coverage_factor: float = 2.0) -> tuple[float, float]:
    """The range that holds the true total about 95 times in 100, low and high, in the groups' unit.

    The combined standard uncertainty times the coverage factor, about the midpoint of the bounds and cut off at them.
    """
    groups = list(groups)
    light = math.fsum(g.light for g in groups)
    heavy = math.fsum(g.heavy for g in groups)
    reach = coverage_factor * standard_uncertainty(groups)
    middle = (light + heavy) / 2
    return max(light, middle - reach), min(heavy, middle + reach)
