"""Rows of the lists become members: one frame with a column for each field, texts kept, numbers in inside units.

The rules that look at a whole row stand here: which quantity counts, what the title or a group gives, what a row's own
words say of it. Reading the cells of a column is `takeoff.lists.columns`.
"""

from __future__ import annotations

import itertools
import math
import re
from dataclasses import dataclass
from typing import TYPE_CHECKING, Any

from takeoff import materials, sections
from takeoff.findings import Level
from takeoff.job import Job
from takeoff.lists import counts, plainpieces, positions, rowwords, temperatures
from takeoff.lists.columns import DASHES, ColumnReader, as_text
from takeoff.lists.log import FindingLog
from takeoff.lists.tables import SheetReading, Table, is_blank
from takeoff.names import normal_name
from takeoff.quantities import EVERYDAY, unit_of

if TYPE_CHECKING:
    import pandas as pd

#: measure fields that become frame columns, with the column's name
NUMBER_COLUMNS = {
    "length": "length_mm", "total_length": "total_length_mm", "width": "width_mm", "thickness": "thickness_mm", "height": "height_mm",
    "diameter": "diameter_mm", "unit_mass": "stated_each_kg", "total_mass": "stated_total_kg", "mass": "stated_mass_kg",
    "mass_per_length": "stated_kg_per_m", "mass_per_area": "stated_kg_per_m2", "volume": "stated_volume_m3",
    "area": "stated_area_m2", "weighed_mass": "weighed_kg",
}
_TEXT_COLUMNS = ("mark", "assembly", "pick", "phase", "run", "bundle", "finish", "contents", "insulation", "holes",
                 "cut_angle_1", "cut_angle_2", "remarks")
#: the fields that may give a quantity, the surest first
_QUANTITIES = ("quantity_total", "quantity", "quantity_per")
#: fields whose blank cell is said where it may be an error
_NOT_TO_BE_BLANK = ("quantity_total", "quantity", "quantity_per", "section", "material", "length")
#: words in a unit column, and what they make of the quantity
_PIECES = frozenset((
    "pcs", "pc", "pce", "pieces", "piece", "ea", "each", "no", "nos", "off", "stk", "stck", "st", "stuck", "pz", "pza", "ud", "uds", "un",
    "szt", "stuks", "stuk", "p", "u", "pieza", "piezas", "unit", "units", "unid",
))
_RUNNING_METRES = frozenset(("lfm", "lfdm", "lm", "mb", "ml", "mtr", "rm"))


#: so many of a column's texts must be materials, and of the column beside it be none
_SURELY = 0.75


@dataclass(slots=True)
class Members:
    """The members of all lists of a run.

    frame : one row a member, in reading order. Texts: file, sheet, mark, assembly, pick, phase, run, bundle,
        section_text, section_heading, material_text, finish, contents, insulation, holes, cut_angle_1, cut_angle_2,
        remarks. Numbers: row, quantity, length_mm, total_length_mm, width_mm, thickness_mm, height_mm, diameter_mm,
        stated_each_kg, stated_total_kg, stated_mass_kg (each or total is not said), stated_kg_per_m, stated_kg_per_m2,
        stated_volume_m3, stated_area_m2, weighed_kg (as typed, see its heading); NaN where blank or unreadable.
    refused : member -> why its row cannot be weighed whatever else it says (the first reason).
    unread : member -> fields whose cell is filled but could not be read -> why.
    assumed : member -> the fields of which something was inferred ("quantity", "length", ...). A mass field counts
        only where the mass is used; weighing says so then.
    """

    frame: pd.DataFrame
    tables: list[Table]
    log: FindingLog
    refused: dict[int, str]
    unread: dict[int, dict[str, str]]
    assumed: dict[int, set[str]]


def build(readings: list[SheetReading], job: Job) -> Members:
    """The members of all tables of all sheets, in reading order."""
    import numpy as np
    import pandas as pd

    tables = [table for reading in readings for table in reading.tables]
    table_of = [number for number, table in enumerate(tables) for _ in table.member_rows]
    row_of = [row for table in tables for row in table.member_rows]
    members = Members(pd.DataFrame(), tables, FindingLog(tables, table_of, row_of), {}, {}, {})
    parts = []
    start = 0
    for table in tables:
        parts.append(_read_table(ColumnReader(table, start, job, members), job))
        start += len(table.member_rows)
    names = [
        "file", "sheet", "row", *_TEXT_COLUMNS, "section_text", "section_heading", "material_text", "quantity", *NUMBER_COLUMNS.values(),
    ]
    data = {name: [value for part in parts for value in part[name]] for name in names}
    numeric = {"quantity", *NUMBER_COLUMNS.values()}
    members.frame = pd.DataFrame({
        name: np.array(values, dtype=float) if name in numeric else pd.Series(values, dtype="int64" if name == "row" else object)
        for name, values in data.items()
    })
    positions.add(members, job)
    temperatures.add(members, job)
    return members


def _read_table(reader: ColumnReader, job: Job) -> dict[str, list[Any]]:
    table, count = reader.table, reader.count
    part: dict[str, list[Any]] = {
        "file": [table.sheet.file] * count, "sheet": [table.sheet.name] * count, "row": list(table.member_rows),
    }
    for name in _TEXT_COLUMNS:
        part[name] = reader.texts(name)
    for name, column in NUMBER_COLUMNS.items():
        part[column] = reader.measures(name)
    _take_inches(reader, part)
    _take_sections(reader, part)
    _take_materials(reader, part)
    plainpieces.settle(reader, part)
    _take_quantities(reader, part)
    _take_assemblies(reader, part, job)
    _take_lengths(reader, part)
    _take_packs(reader, part)
    _refuse_broken_rows(reader)
    _say_row_words(reader)
    reader.say_strokes()
    _say_blanks(reader)
    return part


# --- what a row is called --------------------------------------------------------------------------------------------


def _take_sections(reader: ColumnReader, part: dict[str, list[Any]]) -> None:
    """Section texts: the section column, with the size column behind it; else the size, the name, or the caption."""
    table = reader.table
    if table.rivals.get("material") and not {"section", "size"} & set(table.columns):
        _settle_rival_materials(reader)
    elif table.rivals.get("material"):
        _set_names_apart(reader)
    names, sizes = reader.texts("name"), reader.texts("size")
    heading = next((table.columns[f] for f in ("section", "size", "name") if f in table.columns), None)
    part["section_heading"] = [heading.text if heading else None] * reader.count
    swapped = _sections_under_material(reader)
    if swapped is not None:
        found = swapped
        part["section_heading"] = [table.columns["material"].text] * reader.count
    elif "section" in table.columns:
        found = reader.texts("section")
        blank = [i for i, (section, name) in enumerate(zip(found, names, strict=True)) if not section and name]
        for i in blank:
            found[i] = names[i]
        reader.say("note", "section-from-name", "read from the description, the section cell being blank", blank, "name")
        if "size" in table.columns:
            found = [" ".join(filter(None, pair)) or None for pair in zip(found, sizes, strict=True)]
    elif "size" in table.columns:
        found = [" ".join(filter(None, pair)) or None for pair in zip(names, sizes, strict=True)]
    elif table.caption.section is not None:
        found = [table.caption.section] * reader.count
        message = f"section and material stand in the caption: {table.caption.section}"
        reader.say("note", "material-from-caption", message, range(reader.count), None)
    else:
        found = names
        named = [i for i, text in enumerate(names) if text]
        reader.say("note", "section-from-name", "read from the description, there being no section column", named, "name")
    if "schedule" in table.columns:
        _add_schedules(reader, names, found)
    part["section_text"] = found
    part["mark"] = [mark or (name if "section" in table.columns or "size" in table.columns else None)
                    for mark, name in zip(part["mark"], names, strict=True)]


def _add_schedules(reader: ColumnReader, names: list[str | None], found: list[str | None]) -> None:
    """A pipe's size and its schedule stand in two columns: ``4"`` and ``40`` are one section."""
    where = []
    for i, (name, size, schedule) in enumerate(zip(names, found, reader.texts("schedule"), strict=True)):
        if not size or not schedule or schedule in DASHES:
            continue
        word = schedule if re.match(r"sch|std|xs|xxs|xh", schedule, re.IGNORECASE) else f"Sch {schedule}"
        joined = f"{size} {word}" if name in (None, size) else f"{name} {size} {word}"
        if sections.read(joined).section is not None:
            found[i] = joined
            where.append(i)
    reader.say("note", "section-note", "size and schedule stand in two columns, and were read together", where, "schedule")


def _take_inches(reader: ColumnReader, part: dict[str, list[Any]]) -> None:
    """Inches in a column of their own are added to the feet beside them."""
    if "inches" not in reader.table.columns:
        return
    lengths, unread = part["length_mm"], reader.members.unread
    for i, inches in enumerate(reader.measures("inches")):
        if "inches" in unread.get(reader.start + i, {}):
            lengths[i] = math.nan
        elif inches > 0 and "length" not in unread.get(reader.start + i, {}):
            lengths[i] = inches + (0.0 if math.isnan(lengths[i]) else lengths[i])


def _sections_under_material(reader: ColumnReader) -> list[str | None] | None:
    """The material column's texts, where a list has no section column and these are plainly sections (``koker 60x60x4``)."""
    if {"section", "size"} & set(reader.table.columns) or "material" not in reader.table.columns:
        return None
    texts = reader.texts("material")
    if not _hold_sections(texts):
        return None
    reader.say("note", "heading-misleads", "the material column holds sections, and was read so", range(reader.count), "material")
    return texts


def _settle_rival_materials(reader: ColumnReader) -> None:
    """Of two columns called material, one whose cells are plainly sections is the section column (``Materiaal`` beside ``Kwaliteit``)."""
    table = reader.table
    claims = [table.columns["material"], *table.rivals["material"]]
    holding = [column for column in claims if _hold_sections(reader.texts_at(column.number))]
    if len(holding) != 1:
        return
    left = [column for column in claims if column is not holding[0]]
    table.columns["section"], table.columns["material"], table.rivals["material"] = holding[0], left[0], left[1:]
    message = f"the column {holding[0].text!r} holds sections, and was read so"
    reader.say("note", "heading-misleads", message, range(reader.count), "section")


def _set_names_apart(reader: ColumnReader) -> None:
    """Of two columns called material, one that names no material beside one that does is the name (``Material`` | ``Grade``)."""
    table = reader.table
    claims = [table.columns["material"], *table.rivals["material"]]
    shares = [_share_of_materials(reader.texts_at(column.number)) for column in claims]
    naming = [column for column, share in zip(claims, shares, strict=True) if share >= _SURELY]
    if len(naming) != 1 or any(share > 1 - _SURELY for column, share in zip(claims, shares, strict=True) if column is not naming[0]):
        return
    others = [column for column in claims if column is not naming[0]]
    table.columns["material"] = naming[0]
    del table.rivals["material"]
    if "name" in table.columns or len(others) > 1:
        return
    table.columns["name"] = others[0]
    message = f"the column {others[0].text!r} names no materials, and was read as the names of the pieces"
    reader.say("note", "heading-misleads", message, range(reader.count), "name")


def _share_of_materials(texts: list[str | None]) -> float:
    """What share of a column's distinct texts is the name of a material."""
    distinct = [text for text in dict.fromkeys(texts) if text][:60]
    named = sum(materials.lookup(text).match in ("exact", "alias", "ambiguous") for text in distinct)
    return named / len(distinct) if distinct else 0.0


def _hold_sections(texts: list[str | None]) -> bool:
    """Whether texts are plainly sections, and more of them than are materials."""
    distinct = [text for text in dict.fromkeys(texts) if text][:60]
    plainly = sum(sections.read(text).section is not None and any(ch.isdigit() for ch in text) for text in distinct)
    named = sum(materials.lookup(text).match in ("exact", "alias") for text in distinct)
    return plainly * 2 >= len(distinct) and plainly > named


def _take_materials(reader: ColumnReader, part: dict[str, list[Any]]) -> None:
    """Material texts; a blank takes the caption's, which is the list's own statement."""
    misled = bool(part["section_heading"]) and part["section_heading"][0] == getattr(reader.table.columns.get("material"), "text", "")
    found: list[str | None] = [None] * reader.count if misled else reader.texts("material")
    told = reader.table.caption.material
    if told is not None:
        blank = [i for i, text in enumerate(found) if not text]
        reader.say("note", "material-from-caption", f"the material stands in the title or caption: {told}", blank, "material")
        found = [text or told for text in found]
    part["material_text"] = found


def _take_assemblies(reader: ColumnReader, part: dict[str, list[Any]], job: Job) -> None:
    """Assemblies filled only in the first row of their group are filled down; without a column, group titles give them."""
    table = reader.table
    found: list[str | None] = part["assembly"]
    if "assembly" in table.columns:
        first = next((i for i, text in enumerate(found) if text), None)
        blank = [i for i, text in enumerate(found) if not text and first is not None and i > first]
        # A list that repeats a name row by row names each row's own: its blanks are pieces of no assembly.
        names_each = any(text and text == before for before, text in itertools.pairwise(found))
        if blank and not names_each:
            last = None
            for i, text in enumerate(found):
                # A blank row or a sum between two rows ends a group.
                gap = any(table.member_rows[i - 1] < total < table.member_rows[i] for total in table.total_rows) if i else False
                last = text or (None if gap else last)
                found[i] = last
            message = "the assembly is taken from the first row of its group"
            reader.say("note", "group-title", message, [i for i in blank if found[i]], "assembly")
        return
    if not table.group_of:
        return
    where = [i for i, row in enumerate(table.member_rows) if row in table.group_of]
    if job.reading.group_titles == "ignore":
        reader.say("note", "group-title", "the title above these rows is passed over, as the job file says", where, None)
        return
    for i in where:
        found[i] = table.group_of[table.member_rows[i]]
    reader.say("note", "group-title", "the title above these rows is taken as their assembly", where, None,
               right='[reading] group_titles = "ignore" in the job file, if it is none')


# --- how many, how long ----------------------------------------------------------------------------------------------


def _take_quantities(reader: ColumnReader, part: dict[str, list[Any]]) -> None:
    table = reader.table
    if "quantity_and_length" in table.columns:
        _take_pairs(reader, part)
        return
    field = next((name for name in _QUANTITIES if name in table.columns), None)
    if field == "quantity_per" and "quantity_of" in table.columns:
        _take_products(reader, part)
        return
    if field == "quantity" and "quantity_per" in table.columns:
        _settle_two_counts(reader, part)
        return
    if field is None:
        _one_each(reader, part)
        return
    faults = {i for name in (field, "quantity") for i in reader.faults(name)}
    if field == "quantity_total" and len({"quantity", "quantity_per"} & set(table.columns)):
        message = f"of two quantities the total is used: {table.columns[field].text!r}"
        reader.say("note", "quantity-per-and-total", message, range(reader.count), field)
    elif field == "quantity_per":
        message = "a quantity per something, and no total: taken as the total"
        reader.say("assumed", "quantity-per-and-total", message, range(reader.count), field)
    units = reader.texts("unit")
    values = [math.nan] * reader.count
    refused: dict[str, list[int]] = {}
    said: dict[counts.Count, list[int]] = {}
    for i, cell in enumerate(reader.cells(field)):
        if i in faults:
            reader.bar([i], "quantity", "the quantity cannot be read")
            continue
        if units[i] and _by_unit(reader, part, i, cell, str(units[i]), values):
            continue
        found = counts.read_count(cell)
        if math.isnan(found.pieces):
            refused.setdefault("" if is_blank(cell) else as_text(cell), []).append(i)
            continue
        values[i] = found.pieces
        if found.length_mm is not None:
            if not math.isnan(part["length_mm"][i]):
                refused.setdefault(as_text(cell), []).append(i)
                values[i] = math.nan
                continue
            part["length_mm"][i] = found.length_mm
        if found.level is not None:
            said.setdefault(found, []).append(i)
    for found, where in said.items():
        assert found.level is not None
        reader.say(found.level, found.kind, found.message, where, field)
        if found.level == "assumed":
            for i in where:
                reader.members.assumed.setdefault(reader.start + i, set()).add("quantity")
    for read, where in refused.items():
        message = "the quantity is no whole count of 1 or more" if read else "the quantity is blank"
        reader.say("refused", "missing-quantity", message, where, field, read=read or None, right="a whole number such as 4")
        reader.bar(where, "quantity", message)
    part["quantity"] = values


def _settle_two_counts(reader: ColumnReader, part: dict[str, list[Any]]) -> None:
    """A quantity beside one per something, and no word of a total: where it is no multiple of the other, it counts the somethings."""
    pairs = [(counts.read_count(a).pieces, counts.read_count(b).pieces)
             for a, b in zip(reader.cells("quantity"), reader.cells("quantity_per"), strict=True)]
    if any(whole % per for whole, per in pairs if whole > 0 and per > 0):
        _take_products(reader, part, "quantity", "assumed")
        return
    message = "two quantities, and neither says that it is the total: is it the product of both?"
    unsettled = [i for i, (whole, per) in enumerate(pairs) if not (whole > 0 and per == 1)]
    reader.refuse("quantity-per-and-total", message, unsettled, "quantity", right="the total, under a heading such as Total qty")
    part["quantity"] = [math.nan if i in set(unsettled) else whole for i, (whole, _) in enumerate(pairs)]


def _take_products(reader: ColumnReader, part: dict[str, list[Any]], of_field: str = "quantity_of", level: Level = "note") -> None:
    """A quantity for each of several, how many of them in another column, and no total: the product."""
    faults = reader.faults("quantity_per") | reader.faults(of_field)
    values, missing = [math.nan] * reader.count, []
    for i, (per, of) in enumerate(zip(reader.cells("quantity_per"), reader.cells(of_field), strict=True)):
        product = counts.read_count(per).pieces * counts.read_count(of).pieces
        if i in faults or not 1 <= product <= counts.MOST_PIECES:
            missing.append(i)
        else:
            values[i] = product
    message = f"{_heading_text(reader, 'quantity_per')} × {_heading_text(reader, of_field)} is the quantity"
    reader.say(level, "quantity-per-and-total", message, range(reader.count), "quantity_per")
    if level == "assumed":
        for i in range(reader.count):
            reader.members.assumed.setdefault(reader.start + i, set()).add("quantity")
    message = "one of the two counts is no whole number of 1 or more"
    reader.say("refused", "missing-quantity", message, missing, "quantity_per", right="a whole number in both")
    reader.bar(missing, "quantity", message)
    part["quantity"] = values


def _heading_text(reader: ColumnReader, field: str) -> str:
    """The heading of a field's column, in quotes."""
    return repr(reader.table.columns[field].text)


def _by_unit(reader: ColumnReader, part: dict[str, list[Any]], i: int, cell: Any, unit_text: str, values: list[float]) -> bool:
    """What a unit column makes of a quantity: running metres are a length of bar, sets are no count. True where it decides."""
    folded = normal_name(unit_text).strip(". ")
    if folded in _PIECES:
        return False
    unit = "m" if folded in _RUNNING_METRES else unit_of(unit_text)
    dimension = EVERYDAY[unit][0] if unit else None
    number = reader.read(cell, "length")
    if unit is None or number is None or dimension not in ("length", "mass", "area") or number.value <= 0:
        message = f"{unit_text!r} is no count of pieces"
        reader.say("refused", "unit-column", message, [i], "unit", read=unit_text, right="pieces, or a length such as m")
        reader.bar([i], "quantity", message)
        return True
    amount = number.value * EVERYDAY[unit][1]
    column = {"length": "length_mm", "mass": "stated_each_kg", "area": "stated_area_m2"}[dimension]
    if dimension == "length" and part["stated_each_kg"][i] > 0:
        # What a list states for one of a count of metres is a metre's mass.
        each = part["stated_each_kg"][i] / EVERYDAY[unit][1] * 1000.0
        part["stated_each_kg"][i] = math.nan
        if math.isnan(part["stated_kg_per_m"][i]):
            part["stated_kg_per_m"][i] = each
        message = f"the quantity is in {unit_text}: the mass of one is taken as that of one {unit_text}"
        reader.say("assumed", "unit-column", message, [i], "unit", read=unit_text, right="the mass in kg/m under its own heading")
        reader.members.assumed.setdefault(reader.start + i, set()).add("quantity")
    if not math.isnan(part[column][i]):
        message = f"the quantity is in {unit_text}, and the row has its own {dimension}"
        reader.say("refused", "unit-column", message, [i], "unit", read=unit_text)
        reader.bar([i], "quantity", message)
        return True
    part[column][i] = amount
    values[i] = 1.0
    reader.say("note", "unit-column", f"the quantity is in {unit_text}: taken as one piece of that {dimension}", [i], "unit")
    return True


def _take_pairs(reader: ColumnReader, part: dict[str, list[Any]]) -> None:
    """A column of quantity × length."""
    heading = reader.table.columns["quantity_and_length"].heading
    unit = (heading.unit if heading else None) or reader.table.unit_note or "mm"
    values = [math.nan] * reader.count
    for i, cell in enumerate(reader.cells("quantity_and_length")):
        found = counts.read_count_and_length(cell, EVERYDAY[unit][1])
        if math.isnan(found.pieces):
            read = None if is_blank(cell) else as_text(cell)
            message = "no quantity × length"
            reader.say("refused", "missing-quantity", message, [i], "quantity_and_length", read=read, right="such as 4 x 504")
            reader.bar([i], "quantity", message)
            continue
        values[i], part["length_mm"][i] = found.pieces, found.length_mm
        if found.level is not None:
            reader.say(found.level, found.kind, found.message, [i], "quantity_and_length")
            reader.members.assumed.setdefault(reader.start + i, set()).add("quantity")
    part["quantity"] = values


def _one_each(reader: ColumnReader, part: dict[str, list[Any]]) -> None:
    """No column of quantities: one each, assumed; but a name that holds a count leaves the count open."""
    named = [text or mark or "" for text, mark in zip(part["section_text"], part["mark"], strict=True)]
    names = [" ".join(filter(None, (a, b))) for a, b in zip(named, reader.texts("name"), strict=True)]
    counted = [i for i, text in enumerate(names) if rowwords.COUNT_IN_NAME.search(rowwords.label(text)) or "(x" in text or "x)" in text]
    message = "no quantity column, and the name holds a count: is it in the list once or so many times?"
    reader.say("refused", "missing-quantity", message, counted, None, right="a column of quantities")
    reader.bar(counted, "quantity", message)
    shared = _pieces_by_lengths(reader, part, set(counted))
    others = sorted(set(range(reader.count)) - set(counted) - set(shared))
    reader.say("assumed", "quantity-assumed", "there is no quantity column: one each", others, None, right="a column of quantities")
    barred = set(counted)
    part["quantity"] = [math.nan if i in barred else shared.get(i, 1.0) for i in range(reader.count)]


def _pieces_by_lengths(reader: ColumnReader, part: dict[str, list[Any]], barred: set[int]) -> dict[int, float]:
    """Without a column of quantities, how often the piece's length goes into the row's total length; member -> pieces."""
    found: dict[int, float] = {}
    apart = []
    for i, (length, total) in enumerate(zip(part["length_mm"], part["total_length_mm"], strict=True)):
        if i in barred or not (length > 0 and total > 0):
            continue
        times = total / length
        if round(times) >= 1 and abs(times - round(times)) <= 0.005 * times:
            found[i] = float(round(times))
        else:
            found[i] = math.nan
            apart.append(i)
    counted = [i for i, pieces in found.items() if pieces > 0]
    message = "there is no quantity column: as many pieces as their length goes into the total length"
    reader.say("assumed", "quantity-assumed", message, counted, None, right="a column of quantities")
    message = "there is no quantity column, and the total length is no multiple of the piece's"
    reader.say("refused", "missing-quantity", message, apart, None, right="a column of quantities")
    reader.bar(apart, "quantity", message)
    return found


def _take_lengths(reader: ColumnReader, part: dict[str, list[Any]]) -> None:
    """A total length serves where there is no piece length; a height is the length where a list has no lengths at all."""
    table = reader.table
    if "total_length" in table.columns:
        lengths, totals, quantities = part["length_mm"], part["total_length_mm"], part["quantity"]
        use = [i for i in range(reader.count) if math.isnan(lengths[i]) and totals[i] > 0 and quantities[i] > 0
               and "length" not in reader.members.unread.get(reader.start + i, {})]
        for i in use:
            lengths[i] = totals[i] / quantities[i]
        reader.say("note", "total-length", "the total length is used, shared out over the pieces", use, "total_length")
        apart = [i for i in range(reader.count) if lengths[i] > 0 and totals[i] > 0 and quantities[i] > 0
                 and abs(lengths[i] * quantities[i] - totals[i]) > 0.01 * totals[i]]
        reader.say("note", "total-length", "the total length is not quantity × length; the piece length is used", apart, "total_length")
    given = {"length", "quantity_and_length", "total_length", "size", "unit"}
    if not given & set(table.columns) and {"height", "width"} <= set(table.columns):
        _heights_as_lengths(reader, part)
    if not given & set(table.columns) and "height" in table.columns and "section" in table.columns and "width" not in table.columns:
        where = [i for i in range(reader.count) if part["height_mm"][i] > 0 and math.isnan(part["length_mm"][i])]
        for i in where:
            part["length_mm"][i], part["height_mm"][i] = part["height_mm"][i], math.nan
        reader.say("assumed", "height-as-length", "the list has no lengths: the height is taken as the length", where, "height")
        for i in where:
            reader.members.assumed.setdefault(reader.start + i, set()).add("length")


def _heights_as_lengths(reader: ColumnReader, part: dict[str, list[Any]]) -> None:
    """A bar among panes: in a list of widths and heights, the one size of a section that needs a length is that length."""
    known: dict[str, bool] = {}
    where = []
    for i, text in enumerate(part["section_text"]):
        sized = [name for name in ("width_mm", "height_mm") if part[name][i] > 0]
        if not text or len(sized) != 1 or part["length_mm"][i] > 0 or part["thickness_mm"][i] > 0:
            continue
        if text not in known:
            found = sections.read(text).section
            known[text] = found is not None and tuple(found.needs) == ("length",) and any(ch.isdigit() for ch in text)
        if known[text]:
            part["length_mm"][i], part[sized[0]][i] = part[sized[0]][i], math.nan
            where.append(i)
    reader.say("assumed", "height-as-length", "the row has one size beside its section: taken as the length", where, "height")
    for i in where:
        reader.members.assumed.setdefault(reader.start + i, set()).add("length")


def _take_packs(reader: ColumnReader, part: dict[str, list[Any]]) -> None:
    """A remark of packs (``pack of 25``) counts pieces for hardware with a mass each; anything else is refused."""
    for i, text in enumerate(part["remarks"]):
        found = rowwords.PACK.search(rowwords.label(text)) if text else None
        if not found or math.isnan(part["quantity"][i]):
            continue
        size = int(next(group for group in found.groups() if group))
        if part["stated_each_kg"][i] > 0 and math.isnan(part["length_mm"][i]):
            part["quantity"][i] *= size
            reader.say("assumed", "packs", f"the quantity counts packs of {size}", [i], "quantity", read=text)
        else:
            message = "does the quantity count packs or pieces?"
            reader.say("refused", "packs", message, [i], "quantity", read=text, right="the number of pieces")
            reader.bar([i], "quantity", message)


# --- what else a row says --------------------------------------------------------------------------------------------


def _refuse_broken_rows(reader: ColumnReader) -> None:
    """In a text file, a row with more fields than headings, or an open quote: which field is which is not known."""
    table = reader.table
    if table.sheet.name is not None:
        return
    width = len(table.sheet.rows[table.heading_rows[0] - 1])
    for i, n in enumerate(table.member_rows):
        kind, message = table.sheet.broken.get(n, ("", ""))
        if not kind and any(not is_blank(cell) for cell in table.sheet.rows[n - 1][width:]):
            kind, message = "broken-row", "the row has more fields than there are headings"
        if kind:
            reader.say("refused", kind, message, [i], None, right="quotes around a cell that holds the separator")
            reader.members.refused.setdefault(reader.start + i, message)


def _say_blanks(reader: ColumnReader) -> None:
    """In a file that cannot show its error cells, a blank that a piece may need can be one."""
    sheet = reader.table.sheet
    if not sheet.blind or sheet.name is None:
        return
    for field in _NOT_TO_BE_BLANK:
        blank = [i for i, cell in enumerate(reader.cells(field)) if is_blank(cell)]
        if field in reader.table.columns and blank and len(blank) < reader.count:
            words = field.replace("_", " ")
            message = f"the {words} cell is blank, or holds an error such as #REF!, which an {sheet.blind} file does not show"
            reader.say("note", "blank-or-error", message, blank, field, right="the list saved as .xlsx or .ods")


def _say_row_words(reader: ColumnReader) -> None:
    for i, n in enumerate(reader.table.member_rows):
        for finding in reader.table.row_findings.get(n, ()):
            reader.members.log.add(finding, [reader.start + i])
            if finding.level == "refused":
                reader.members.refused.setdefault(reader.start + i, finding.message)
