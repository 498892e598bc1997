"""Published curves of thermal elongation, as printed: coefficients and table points stand in `curves.csv` and
`curve_points.csv`, and one small evaluator here serves them all. Rank 2.

A publication gives one of three quantities: the elongation itself, a mean coefficient from its reference temperature, or
an instantaneous coefficient, which is integrated. Each keeps its own scale (K, °C or °F), reference and range.
"""

from __future__ import annotations

import math
from bisect import bisect_right
from dataclasses import dataclass
from functools import cache
from typing import Literal, cast, get_args

from takeoff.datafiles import data_folder, read_table
from takeoff.errors import DataError
from takeoff.materials.table import source_titles
from takeoff.provenance import Source

Quantity = Literal["elongation", "mean", "instantaneous", "table"]

#: Publications whose reference is 20 °C, or 293 K, which they write for it: their figures are taken from 20 °C as printed.
_NOMINAL_20 = {("C", 20.0), ("K", 293.0)}
_STEPS_PER_KELVIN = 2


@dataclass(frozen=True, slots=True)
class Segment:
    """One stretch of a curve, in the publication's own temperature unit."""

    low: float
    high: float
    form: str
    coefficients: tuple[float, ...]

    def value(self, t: float) -> float:
        """The polynomial at `t`, or ten to the power of the polynomial in log10 of `t`."""
        x = math.log10(t) if self.form == "log10 polynomial" else t
        result = 0.0
        for coefficient in reversed(self.coefficients):
            result = result * x + coefficient
        return 10.0**result if self.form == "log10 polynomial" else result


@dataclass(frozen=True, slots=True)
class Curve:
    """A published curve. `points` holds (temperature, mean coefficient from the reference) for a printed table."""

    name: str
    title: str
    source: Source
    quantity: Quantity
    scale: float
    unit: str
    reference: float
    segments: tuple[Segment, ...]
    note: str
    points: tuple[tuple[float, float], ...] = ()

    @property
    def from_C(self) -> float:
        return celsius(self.segments[0].low, self.unit)

    @property
    def to_C(self) -> float:
        return celsius(self.segments[-1].high, self.unit)

    def published(self, temperature_C: float) -> float:
        """The quantity the publication prints, in plain units: ΔL/L from its reference, or a coefficient per its degree.

        Raises ValueError outside the published range.
        """
        t = self._inside(temperature_C)
        if self.quantity == "table":
            return self._from_points(t)
        return self.scale * self._segment(t).value(t)

    def from_reference(self, temperature_C: float) -> float:
        """ΔL/L from the publication's reference temperature, integrated or multiplied out where it prints a coefficient."""
        t = self._inside(temperature_C)
        if self.quantity == "elongation":
            # A fit that is not zero at its own reference is taken as printed, unless it says otherwise.
            zero = self._segment(self.reference).value(self.reference) if self.reference == 21.0 else 0.0
            return self.scale * (self._segment(t).value(t) - zero)
        if self.quantity == "mean":
            return self.scale * self._segment(t).value(t) * (t - self.reference)
        if self.quantity == "instantaneous":
            return self.scale * self._integral(t)
        return self._from_points(t)

    def elongation(self, temperature_C: float) -> float:
        """ΔL/L from 20 °C. A reference other than 20 °C (or 293 K, which is written for it) is taken off."""
        value = self.from_reference(temperature_C)
        if (self.unit, self.reference) in _NOMINAL_20:
            return value
        low, high = self.from_C, self.to_C
        reference_C = celsius(self.reference, self.unit)
        # Where 20 °C lies a little outside the table, the coefficient at its near end carries the last degrees.
        at_20 = self.from_reference(20.0) if low <= 20.0 <= high else self._slope_near_20() * (20.0 - reference_C)
        return (1.0 + value) / (1.0 + at_20) - 1.0

    def without_jumps(self, temperature_C: float) -> float:
        """`elongation` with each later segment shifted to meet the one before it: for use within a law."""
        t = fahrenheit_or_kelvin(temperature_C, self.unit)
        value = self.elongation(temperature_C)
        for number, segment in enumerate(self.segments[1:], 1):
            if t > segment.low:
                value += self._jump(number)
        return value

    # -- inside ----------------------------------------------------------------------------------------------------

    def _inside(self, temperature_C: float) -> float:
        t = fahrenheit_or_kelvin(temperature_C, self.unit)
        low, high = self.segments[0].low, self.segments[-1].high
        slack = 0.01 + 1e-9 * abs(t)
        if not low - slack <= t <= high + slack:
            raise ValueError(f"{self.name} is published from {self.from_C:g} to {self.to_C:g} °C")
        return min(max(t, low), high)

    def _segment(self, t: float) -> Segment:
        for segment in self.segments:
            if t <= segment.high:
                return segment
        return self.segments[-1]

    def _jump(self, number: int) -> float:
        before, after = self.segments[number - 1], self.segments[number]
        return self.scale * (before.value(after.low) - after.value(after.low)) if self.quantity == "elongation" else 0.0

    def _integral(self, t: float) -> float:
        segment = self.segments[0]
        if segment.form == "polynomial":
            return sum(
                c / (n + 1) * (t ** (n + 1) - self.reference ** (n + 1)) for n, c in enumerate(segment.coefficients)
            )
        # Simpson's rule: the function is smooth, half a kelvin a step is far finer than its digits.
        count = max(2, 2 * math.ceil(abs(t - self.reference) * _STEPS_PER_KELVIN / 2))
        step = (t - self.reference) / count
        values = [segment.value(self.reference + i * step) for i in range(count + 1)]
        return step / 3 * (values[0] + values[-1] + 4 * sum(values[1:-1:2]) + 2 * sum(values[2:-1:2]))

    def _from_points(self, t: float) -> float:
        """Linear in the mean coefficient between the printed temperatures, which is how such tables are read."""
        temperatures = [p[0] for p in self.points]
        i = min(max(bisect_right(temperatures, t), 1), len(temperatures) - 1)
        (t0, m0), (t1, m1) = self.points[i - 1], self.points[i]
        return (m0 + (m1 - m0) * (t - t0) / (t1 - t0)) * (t - self.reference)

    def _slope_near_20(self) -> float:
        """The coefficient per K at the end of the published range that is nearest to 20 °C."""
        end = self.from_C if abs(self.from_C - 20) <= abs(self.to_C - 20) else self.to_C
        inward = 1.0 if end == self.from_C else -1.0
        return (self.from_reference(end + inward) - self.from_reference(end)) / inward


def celsius(t: float, unit: str) -> float:
    """A temperature of a publication's unit (C, F or K) in °C."""
    return {"C": t, "F": (t - 32.0) / 1.8, "K": t - 273.15}[unit]


def fahrenheit_or_kelvin(t_C: float, unit: str) -> float:
    """A temperature in °C in a publication's unit (C, F or K)."""
    return {"C": t_C, "F": t_C * 1.8 + 32.0, "K": t_C + 273.15}[unit]


@cache
def curves() -> dict[str, Curve]:
    """Every published curve by name. Raises DataError on a row that cannot be."""
    folder = data_folder()
    points = _points()
    grouped: dict[str, list[tuple[int, dict[str, str]]]] = {}
    for line, row in read_table(folder / "curves.csv"):
        grouped.setdefault(row["curve"], []).append((line, row))
    found: dict[str, Curve] = {}
    for name, rows in grouped.items():
        line, first = rows[0]
        title = source_titles().get(first["source"])
        if title is None:
            raise DataError(f"line {line}: no such source", file=folder / "curves.csv", read=first["source"])
        segments = tuple(
            Segment(
                float(row["from"]), float(row["to"]), row["form"],
                tuple(float(row[f"c{i}"]) for i in range(7) if row[f"c{i}"]),
            )
            for _, row in rows
        )  # fmt: skip
        found[name] = Curve(
            name=name, title=first["title"], source=Source(title, first["clause"], first["evidence"]),
            quantity=_quantity(first["quantity"]), scale=float(first["scale"]), unit=first["unit"],
            reference=float(first["reference"]), segments=segments, note=first["note"],
            points=_best_points(points.get(name, {}), float(first["reference"])),
        )  # fmt: skip
    return found


def _quantity(text: str) -> Quantity:
    for quantity in get_args(Quantity):
        if text == quantity:
            return cast(Quantity, quantity)
    raise DataError("no such quantity", file=data_folder() / "curves.csv", read=text)


def _points() -> dict[str, dict[str, list[tuple[float, float, float]]]]:
    """Printed points: curve -> quantity -> (temperature, value as printed, scale)."""
    found: dict[str, dict[str, list[tuple[float, float, float]]]] = {}
    for _, row in read_table(data_folder() / "curve_points.csv"):
        top, _, bottom = row["scale"].partition("/")
        scale = float(top) / float(bottom or 1)
        point = (float(row["temperature"]), float(row["value"]), scale)
        found.setdefault(row["curve"], {}).setdefault(row["quantity"], []).append(point)
    return found


def _best_points(printed: dict[str, list[tuple[float, float, float]]], reference: float) -> tuple[tuple[float, float], ...]:
    """(temperature, mean coefficient from the reference): as printed, for it has the more digits; from the printed
    expansion where no coefficient is printed, or beyond the range of those."""
    found = {t: value * scale for t, value, scale in printed.get("mean", [])}
    low, high = min(found, default=reference), max(found, default=reference)
    for t, value, scale in printed.get("elongation", []):
        if t != reference and not low <= t <= high:
            found[t] = value * scale / (t - reference)
    return tuple(sorted(found.items()))
