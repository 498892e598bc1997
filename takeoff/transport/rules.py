"""The planning figures of road transport: legal envelopes, least shares, coefficients, friction; each with its source.

They stand in `materials/transport_rules.csv` and `materials/transport_friction.csv`. Planning defaults, to be confirmed
locally before a move.
"""

from __future__ import annotations

from functools import cache
from typing import NamedTuple

from takeoff.datafiles import data_folder, read_table
from takeoff.errors import DataError, JobError
from takeoff.provenance import Source


class Rule(NamedTuple):
    """A figure and where it comes from; lengths mm, masses kg, shares of 1, coefficients of gravity."""

    value: float
    source: Source


class Friction(NamedTuple):
    """The friction factor of a pair of surfaces."""

    pair: str
    factor: float
    edition: str
    source: Source


@cache
def _rules() -> dict[tuple[str, str, str], Rule]:
    found: dict[tuple[str, str, str], Rule] = {}
    path = data_folder() / "transport_rules.csv"
    for line, row in read_table(path):
        key = (row["item"], row["rule"], row["applies"]) if row["item"] else (row["rule"], "", row["applies"])
        if key in found:
            raise DataError(f"line {line} repeats an earlier rule", file=path, read=str(key))
        found[key] = Rule(float(row["value"]), Source(row["title"], row["clause"], row["evidence"]))
    return found


def rule(item: str, name: str, applies: str) -> Rule:
    """One figure. Raises KeyError where the table has none."""
    return _rules()[(item, name, applies)]


def has_rule(item: str, name: str, applies: str) -> bool:
    return (item, name, applies) in _rules()


@cache
def frictions() -> tuple[Friction, ...]:
    """Every pair of surfaces in the table, in its order."""
    return tuple(
        Friction(row["pair"], float(row["factor"]), row["edition"], Source(row["title"], row["clause"], row["evidence"]))
        for _, row in read_table(data_folder() / "transport_friction.csv")
    )


def friction_of(given: float | str | None) -> Friction:
    """The friction to reckon with: a figure as given, a pair of the table by name, else the fall-back of the table.

    Raises JobError on a pair that is not in the table, with the nearest one.
    """
    if given is None:
        return next(f for f in frictions() if f.pair == "unlisted")
    if isinstance(given, int | float):
        return Friction("as the job file says", float(given), "", Source("the job file", "[transport] friction", "read"))
    from takeoff.names import normal_name, suggest

    wanted = normal_name(given)
    for f in frictions():
        if normal_name(f.pair) == wanted:
            return f
    near = suggest(wanted, [normal_name(f.pair) for f in frictions()], floor=50, limit=1)
    raise JobError("transport.friction: no such pair of surfaces", read=given, right=str(near[0].name) if near else "a factor such as 0.3")
