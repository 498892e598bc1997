"""The list's own masses: used where nothing could be computed, compared with ours on the row's total elsewhere. Rank 4.

Apart means over 2 %, over 0.5 kg and over half a unit of the last digit stated, all on the row's total. A finding then
names both figures and the likely cause (`causes`). Where the cause is another quantity in the column (a total typed as
each, lb for kg) the corrected figure agrees and changes nothing: a slip never multiplies a mass. Else the larger sets heavy.
"""

from __future__ import annotations

import re
from dataclasses import dataclass
from decimal import Decimal
from typing import TYPE_CHECKING, Any

from takeoff.findings import Finding
from takeoff.lists.columns import unit_of_column
from takeoff.provenance import Source
from takeoff.quantities import EVERYDAY, measure_readings, number_readings, tidy, unit_of
from takeoff.weighing.basis import Basis
from takeoff.weighing.causes import cause_of
from takeoff.weighing.work import Work

if TYPE_CHECKING:
    import numpy as np

    from takeoff.lists.tables import Table
    from takeoff.weighing.work import Flags, Floats

#: a stated figure -> how one piece's mass follows; in the order they are tried
RULES = {
    "unit_mass": "stated mass each", "mass_per_length": "stated kg/m × length", "mass_per_area": "stated kg/m² × area",
    "total_mass": "stated total mass / quantity", "mass": "stated mass",
}
#: a stated figure -> the members' column with what was typed, in kg, kg/m or kg/m²
COLUMNS = {
    "unit_mass": "stated_each_kg", "mass_per_length": "stated_kg_per_m", "mass_per_area": "stated_kg_per_m2",
    "total_mass": "stated_total_kg", "mass": "stated_mass_kg",
}
HEADINGS = {
    "unit_mass": "unit mass column", "mass_per_length": "mass per length column", "mass_per_area": "mass per area column",
    "total_mass": "total mass column", "mass": "mass column",
}
#: stated and computed differ when all of these are passed, on the row's total
DIFFERS_SHARE, DIFFERS_KG = 0.02, 0.5
#: a stated and a computed mass this close settle what a column of masses means
_AGREES_SHARE = 0.05
#: two stated figures closer than this say the same thing
_SAME_SHARE = 0.005
#: a column of numbers has so many decimals where all but this share of them, of so many at least, have
_NEARLY_ALL, _ENOUGH = 0.2, 5
_NUMBER = re.compile(r"\d[\d.,' ]*")


@dataclass(slots=True)
class Claims:
    """What the rows state for one piece, in kg (NaN where nothing): by field, and the first of them with its field."""

    by_field: dict[str, Floats]
    each_kg: Floats
    field: np.ndarray[Any, Any]
    #: what was typed (kg each, kg/m, kg/m² or kg in all), and kg a piece for one unit of it
    typed: dict[str, Floats]
    per_unit: dict[str, Floats]


def claims_of(work: Work) -> Claims:
    """The mass of one piece as stated: each, else by length, else by area, else a share of the row's total.

    An area is the row's own (m², each), else length × width.
    """
    import numpy as np

    frame, sizes = work.frame, work.sizes
    area = frame["stated_area_m2"].to_numpy(dtype=float)
    area = np.where(np.isnan(area), sizes["length"] * sizes["width"] * 1e-6, area)
    per_unit = {
        "unit_mass": np.ones(work.count), "mass_per_length": sizes["length"] / 1000.0, "mass_per_area": area,
        "total_mass": 1.0 / work.quantity,
    }
    each = np.full(work.count, np.nan)
    field = np.full(work.count, None, dtype=object)
    found: dict[str, Floats] = {}
    as_typed: dict[str, Floats] = {}
    for name, column in COLUMNS.items():
        if name == "mass":  # the others are known by now
            per_unit[name] = _share_of_mass(work, each)
        if column not in frame:
            continue
        typed = frame[column].to_numpy(dtype=float)
        if np.isnan(typed).all():
            continue
        values = typed * per_unit[name]
        values = np.where((values > 0) & np.isfinite(values), values, np.nan)
        found[name], as_typed[name] = values, typed
        take = np.isnan(each) & ~np.isnan(values)
        each[take] = values[take]
        field[take] = name
    work.claimed_kg = each
    return Claims(found, each, field, as_typed, per_unit)


def _share_of_mass(work: Work, otherwise: Floats) -> Floats:
    """What part of a figure under a heading that says neither each nor total is one piece's: 1, or 1 / quantity.

    Each list's column is settled by its own rows of several pieces whose mass we computed or that state it in another column
    (kg each, kg/m): by which of the two more of them agree with; else by its sum, where that is the sum of the one and not
    of the other. Where none settles it the figure is taken as of one piece, the heavier reading.
    """
    import numpy as np

    share = np.ones(work.count)
    if "stated_mass_kg" not in work.frame or not work.members.log.tables:
        return share
    typed = work.frame["stated_mass_kg"].to_numpy(dtype=float)
    if np.isnan(typed).all():
        return share
    tables = np.asarray(work.members.log.table_of, dtype=np.int64)
    ours = np.where(work.nominal > 0, work.nominal, otherwise)
    several = (work.quantity > 1) & (typed > 0) & (ours > 0)
    with np.errstate(invalid="ignore"):
        as_each = several & (np.abs(typed - ours) <= _AGREES_SHARE * ours)
        as_total = several & (np.abs(typed / work.quantity - ours) <= _AGREES_SHARE * ours)
    for table in np.unique(tables).tolist():
        here = tables == table
        total, each = int(as_total[here].sum()), int(as_each[here].sum())
        unsettled = not total and not each
        if total > each or (unsettled and _sums_to_its_total(work.members.log.tables[table], typed[here], work.quantity[here])):
            share[here] = 1.0 / work.quantity[here]
        elif not each:
            work.mass_open |= here & (work.quantity > 1) & ~np.isnan(typed)
    return share


def _sums_to_its_total(table: Table, typed: Floats, quantity: Floats) -> bool:
    """Whether a row of sums below a list states the sum of its masses, and not that of each mass times its quantity."""
    import numpy as np

    if np.isnan(typed).any() or np.isnan(quantity).any():
        return False
    once, times = float(typed.sum()), float((typed * quantity).sum())
    column = table.columns["mass"]
    stated = [r.value for row in table.total_rows if row > table.member_rows[-1]
              for r in number_readings(str(table.cell(row, "mass") or ""))]
    unit = EVERYDAY[column.heading.unit][1] if column.heading is not None and column.heading.unit else 1.0
    near = [value * unit for value in stated if abs(value * unit - once) <= _SAME_SHARE * once]
    return bool(near) and abs(times - once) > _AGREES_SHARE * once


def use(work: Work, claims: Claims) -> None:
    """Take the list's own mass where nothing could be computed."""
    import numpy as np

    taken = np.isnan(work.nominal) & ~np.isnan(claims.each_kg)
    work.stated_used = taken
    if not taken.any():
        return
    minus, plus = work.job.masses.stated_minus_percent, work.job.masses.stated_plus_percent
    each = claims.each_kg[taken]
    work.light[taken], work.nominal[taken], work.heavy[taken] = each * (1 - minus / 100), each, each * (1 + plus / 100)
    for field, rule in RULES.items():
        rows = np.flatnonzero(taken & (claims.field == field))
        if not len(rows):
            continue
        basis = Basis(
            rule, Source("the member list's own statement", HEADINGS[field], "read"),
            f"stated mass: -{minus:g} % / +{plus:g} % (planning figures)",
            Source("planning figures for masses only stated", "", "common practice"), stated=True,
        )
        work.basis_of[rows] = work.basis_id(basis)
        work.say(Finding("note", "stated-mass", "the mass is the list's own statement"), rows, field)
        if field == "mass":
            unsettled = rows[work.mass_open[rows]]
            work.light[unsettled] /= work.quantity[unsettled]
            work.assumed_rows.update(unsettled.tolist())
            message = "the heading does not say whether the mass is of one piece or of all: taken as of one, light as of all"
            right = "a heading such as Unit mass (kg) or Total mass (kg)"
            work.say(Finding("assumed", "mass-each-assumed", message, right=right), unsettled, field)
        assumed = [i for i in rows.tolist() if field in work.members.assumed.get(i, ())]
        work.say(Finding("assumed", "mass-unit-assumed", "a mass without a unit is used"), assumed, field)


def compare(work: Work, claims: Claims) -> None:
    """Compare every stated figure with ours, name the likely cause, and let the larger set heavy unless it is a slip."""
    import numpy as np

    each = work.each("nominal")
    told: dict[int, float] = {}
    for field, theirs in claims.by_field.items():
        apart = differs(work.nominal, theirs, work.quantity) & differs(each, theirs, work.quantity)
        for i in np.flatnonzero(apart).tolist():
            gap = min(abs(theirs[i] - work.nominal[i]), abs(theirs[i] - each[i])) * work.quantity[i]
            if gap <= _half_unit(work, i, field, float(claims.typed[field][i])) * claims.per_unit[field][i] * work.quantity[i] * (1 + 1e-9):
                continue
            if i in told and abs(told[i] - theirs[i]) <= _SAME_SHARE * theirs[i]:
                continue
            told[i] = float(theirs[i])
            _tell(work, i, field, float(theirs[i]))


def differs(ours_kg: Floats, stated_kg: Floats, quantity: Floats) -> Flags:
    """Rows whose stated mass each is apart from ours: over 2 % and over 0.5 kg on the row's total."""
    import numpy as np

    with np.errstate(invalid="ignore"):
        gap = np.abs(stated_kg - ours_kg)
        flags: Flags = (gap > DIFFERS_SHARE * ours_kg * (1 + 1e-9)) & (gap * quantity > DIFFERS_KG * (1 + 1e-9))
    return flags


def _tell(work: Work, i: int, field: str, given_kg: float) -> None:
    ours_kg = float(work.nominal[i])
    quantity = float(work.quantity[i])
    cause = cause_of(work, i, field, given_kg)
    counted, word = (quantity, "in all") if field == "total_mass" else (1.0, "each")
    given, mine = f"{given_kg * counted:.6g} kg {word}", f"{ours_kg * counted:.6g} kg {word}"
    if cause is None:
        ending = "the larger sets the heavy mass"
    elif cause.slip:
        ending = f"likely {cause.text}; so corrected the two agree, and the slip changes no mass"
    else:
        ending = f"likely {cause.text}; the larger sets the heavy mass"
    message = f"the list states {given}, ours is {mine}: {ending}"
    work.say(Finding("note", "stated-mass-differs", message, read=given, right=mine), [i], field)
    if cause is None or not cause.slip:
        work.heavy[i] = max(work.heavy[i], given_kg)


def _half_unit(work: Work, i: int, field: str, typed: float) -> float:
    """Half a unit of the last digit that the row's cell states; it and `typed` in the field's inside unit (kg, kg/m, kg/m²)."""
    table = work.table_of(i)
    column = table.columns.get(field) if table is not None else None
    if table is None or column is None:
        return 0.0
    cell = table.cell(work.members.log.row_of[i], field)
    factor = EVERYDAY[unit_of_column(table, field, work.job)[0]][1]
    if isinstance(cell, (int, float)) and not isinstance(cell, bool):
        places = max(_decimals(cell), _usual_decimals(work, table, field))
    elif isinstance(cell, str):
        named = next((m.unit for m in measure_readings(cell) if m.unit), None)
        factor = EVERYDAY[unit_of(named) or named][1] if named else factor
        places = _places(cell, typed / factor)
    else:
        return 0.0
    return float(0.5 * 10.0**-places * factor)


def _decimals(value: float) -> int:
    """Decimal places of a workbook's number as it would be typed."""
    exponent = Decimal(repr(float(value))).normalize().as_tuple().exponent
    return max(0, -exponent) if isinstance(exponent, int) else 0


def _usual_decimals(work: Work, table: Table, field: str) -> int:
    """Decimal places that nearly all numbers of a column have: a workbook keeps 25.0 as 25, and so loses one zero in ten."""
    key = (id(table), field)
    if key not in work.usual_decimals:
        cells = [table.cell(row, field) for row in table.member_rows]
        found = sorted(_decimals(c) for c in cells if isinstance(c, (int, float)) and not isinstance(c, bool))
        work.usual_decimals[key] = found[int(_NEARLY_ALL * len(found))] if len(found) >= _ENOUGH else 0
    return work.usual_decimals[key]


def _places(text: str, taken: float) -> int:
    """Decimal places of the number in a text, as it was taken (``3.354`` may be thousands)."""
    found = _NUMBER.search(tidy(text))
    if found is None:
        return 0
    number = found.group(0).strip(" .,'")
    for reading in number_readings(number):
        if abs(reading.value - taken) > 1e-6 * abs(taken):
            continue
        sign = {"point": ".", "comma": ","}.get(reading.sign or "")
        _, _, part = number.rpartition(sign) if sign and sign in number else ("", "", "")
        return len(part) if part.isdigit() else 0
    return 0

