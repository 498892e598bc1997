"""The list's own masses against ours: what is flagged, why, and what it does to the heavy mass; weighed masses; handling."""

from __future__ import annotations

import random
from typing import Any

import pytest
from weighing_rows import BEAM, PLATE, Rows

from takeoff.findings import Finding
from takeoff.weighing import handling

BEAM_KG = 25.1 * 6


def differing(rows: Rows, row: int = 0) -> Finding | None:
    found = [f for f in rows.findings(row) if f.kind == "stated-mass-differs"]
    assert len(found) <= 1
    return found[0] if found else None


# --- thresholds ------------------------------------------------------------------------------------------------------

@pytest.mark.parametrize(("row", "flagged"), [
    ({"Unit mass (kg)": BEAM_KG}, False), ({"Unit mass (kg)": 153.5}, False), ({"Unit mass (kg)": 154.5}, True),
    ({"Unit mass (kg)": 147}, True), ({"kg/m": 25}, False), ({"kg/m": 25.1}, False), ({"kg/m": 26}, True), ({"Total mass (kg)": 160}, True),
    ({"Total mass (kg)": 150}, False),
])
def test_two_percent_of_the_rows_total(row: dict[str, float], flagged: bool) -> None:
    """Within 2 % nothing is said."""
    assert (differing(Rows([{**BEAM, **row}])) is not None) == flagged


def test_half_a_kilogram_of_the_rows_total() -> None:
    """0.23 against 0.25 kg is nothing on one piece, and something on a hundred."""
    small = {**PLATE, "Length (mm)": 64, "Width (mm)": 50, "Unit mass (kg)": 0.23}
    assert differing(Rows([small])) is None
    assert differing(Rows([{**small, "Quantity": 100}])) is not None


@pytest.mark.parametrize(("typed", "flagged"), [
    ("4", False), ("4.0", True), ("4,0", True), ("4.0 kg", True), ("0.004 t", False), ("8 lb", False),
])
def test_half_a_unit_of_the_last_digit(typed: str, flagged: bool) -> None:
    """3.7 kg written 4 is rounding, written 4.0 it is another mass; on 20 pieces the gap is 6 kg either way."""
    row = {**PLATE, "Quantity": 20, "Length (mm)": 471.3, "Width (mm)": 100, "Unit mass (kg)": typed}
    assert (differing(Rows([row])) is not None) == flagged


def test_a_finding_names_both() -> None:
    """What the list says, what we say, and the cell."""
    finding = differing(Rows([{**BEAM, "Unit mass (kg)": 170}]))
    assert finding is not None
    assert (finding.read, finding.right, finding.cell) == ("170 kg each", "150.6 kg each", "F2")


# --- causes ----------------------------------------------------------------------------------------------------------

TUBE = {"Mark": "T", "Quantity": 1, "Section": "SHS 100x100x5 EN 10219", "Material": "S355", "Length (mm)": 6000}
#: row, stated, the words of the cause, whether it is a slip that changes no mass
CAUSES: list[tuple[dict[str, Any], dict[str, float], str, bool]] = [
    ({**BEAM, "Quantity": 4}, {"Unit mass (kg)": 602.4}, "a total in the column of the mass of one", True),
    ({**BEAM, "Quantity": 4}, {"Total mass (kg)": 150.6}, "the mass of one piece in the column of totals", True),
    (BEAM, {"Unit mass (kg)": 332}, "lb read as kg", True),
    (BEAM, {"Total mass (kg)": 68.3}, "kg read as lb", True),
    (BEAM, {"Unit mass (kg)": 0.1506}, "t for kg", True),
    (BEAM, {"Unit mass (kg)": 25.1}, "kg/m in the column of the mass each", True),
    (BEAM, {"kg/m": 150.6}, "the mass of one piece in the column of kg/m", True),
    (BEAM, {"kg/m": 16.87}, "lb/ft read as kg/m", True),
    (TUBE, {"kg/m": 17.0}, "a wall of 6 mm, one size off", False),
    (TUBE, {"kg/m": 11.73}, "a wall of 4 mm, one size off", False),
    ({**PLATE, "Material": "aluminium 6082"}, {"Unit mass (kg)": 39.25}, "weighed there as carbon steel", False),
    (PLATE, {"Unit mass (kg)": 13.5}, "weighed there as aluminium", False),
    ({**PLATE, "Holes": "2x 300x200"}, {"Unit mass (kg)": 39.25}, "the holes are not deducted there", False),
]  # fmt: skip


@pytest.mark.parametrize(("row", "given", "cause", "slip"), CAUSES)
def test_causes(row: dict[str, Any], given: dict[str, float], cause: str, slip: bool) -> None:
    """The likely cause is named; a slip changes no mass, another opinion sets the heavy mass where it is the larger."""
    plain, rows = Rows([row]), Rows([{**row, **given}])
    finding = differing(rows)
    assert finding is not None
    assert cause in finding.message
    assert ("changes no mass" in finding.message) == slip
    if slip:
        assert rows.mass("bare") == plain.mass("bare")
    else:
        light, nominal, heavy = plain.mass("bare")
        each = next(iter(given.values())) * (6 if "kg/m" in given else 1)
        assert rows.mass("bare") == pytest.approx((light, nominal, max(heavy, each)))


def test_a_difference_without_a_cause_sets_heavy() -> None:
    """The larger of the two."""
    assert Rows([{**BEAM, "Unit mass (kg)": 190}]).mass("bare")[2] == 190
    assert Rows([{**BEAM, "Unit mass (kg)": 120}]).mass("bare")[2] == pytest.approx(BEAM_KG * 1.04)


def test_a_mass_with_its_zinc_is_no_difference() -> None:
    """The list may state the bare piece or the finished one."""
    galvanized = {**BEAM, "Finish": "galvanized"}
    each = Rows([galvanized]).mass("each")[1]
    for stated in (BEAM_KG, each):
        assert differing(Rows([{**galvanized, "Unit mass (kg)": round(stated, 2)}])) is None


def test_one_error_is_told_once() -> None:
    """Unit mass and total that say the same wrong thing are one finding."""
    rows = Rows([{**BEAM, "Quantity": 3, "Unit mass (kg)": 170, "Total mass (kg)": 510}])
    assert differing(rows) is not None


def test_a_total_beside_a_right_unit_mass_is_compared_too() -> None:
    """Each stated figure is."""
    assert differing(Rows([{**BEAM, "Quantity": 3, "Unit mass (kg)": 150.6, "Total mass (kg)": 520}])) is not None


# --- only stated -----------------------------------------------------------------------------------------------------

def test_only_stated() -> None:
    """-5 % and +10 %, basis stated; settable."""
    winch = {"Mark": "W", "Quantity": 2, "Section": "Winch", "Unit mass (kg)": 250}
    rows = Rows([winch])
    assert rows.mass("each") == pytest.approx((237.5, 250, 275))
    assert rows.weighed.bases[0].stated
    settable = Rows([winch], {"masses": {"stated_minus_percent": 0.0, "stated_plus_percent": 20.0}})
    assert settable.mass("each") == pytest.approx((250, 250, 300))


def test_a_mass_column_that_says_neither_each_nor_total() -> None:
    """Settled by the rows we computed; unsettled it is taken as each, light as of all, and assumed."""
    headings = ["Mark", "Quantity", "Section", "Material", "Length (mm)", "Mass (kg)"]
    winch = {"Mark": "W", "Quantity": 2, "Section": "Winch", "Mass (kg)": 250}
    total = Rows([{**BEAM, "Quantity": 4, "Mass (kg)": 602.4}, winch], headings=headings)
    each = Rows([{**BEAM, "Quantity": 4, "Mass (kg)": 150.6}, winch], headings=headings)
    alone = Rows([winch], headings=headings)
    assert total.mass("each", 1)[1] == pytest.approx(125)
    assert each.mass("each", 1)[1] == pytest.approx(250)
    assert alone.mass("each") == pytest.approx((250 * 0.95 / 2, 250, 275))
    assert alone.frame["status"].tolist() == ["assumed"]


# --- the thousand ----------------------------------------------------------------------------------------------------

def _thousand(seed: int, *, wrong: bool) -> tuple[Rows, int]:
    """A list of 1,000 rows whose stated figures are right as typed, or wrong by 3 % or more and past the other thresholds."""
    chance = random.Random(seed)
    kinds: list[dict[str, Any]] = [
        {"Section": "UB 203x133x25", "Material": "S355"}, {"Section": "PFC 200x75x23", "Material": "S275"},
        {"Section": "CHS 114.3x5 EN 10219", "Material": "S355"}, {"Section": "L 70x70x7", "Material": "S275"},
        {"Section": "PL 10", "Material": "S275"}, {"Section": "PL 12", "Material": "1.4301"}, {"Section": "FL 50x10", "Material": "S235"},
        {"Section": "RD 20", "Material": "S355"}, {"Section": "Board 50x150", "Material": "C24"},
    ]
    rows = []
    for number in range(1000):
        row = {"Mark": f"M{number}", "Quantity": chance.randint(1, 20), **chance.choice(kinds), "Length (mm)": chance.randint(200, 12_000)}
        if row["Section"].startswith("PL"):
            row["Width (mm)"] = chance.randint(80, 1500)
        rows.append(row)
    ours = Rows(rows)
    nominal, quantity = ours.frame["bare_nominal_kg"].tolist(), ours.frame["quantity"].tolist()
    for row, kg, count in zip(rows, nominal, quantity, strict=True):
        heading, base, in_row = chance.choice([
            ("Unit mass (kg)", kg, count), ("Total mass (kg)", kg * count, 1.0),
            ("kg/m", kg / row["Length (mm)"] * 1000, count * row["Length (mm)"] / 1000),
        ])  # fmt: skip
        places = chance.randint(0, 3)
        if not wrong:
            row[heading] = f"{base:.{places}f}" if round(base, places) > 0 else f"{base:.4f}"
            continue
        while True:
            share = chance.uniform(0.03, 0.6) * chance.choice([-1, 1])
            stated = round(base * (1 + share), places)
            gap = abs(stated - base)
            if gap >= 0.03 * base and gap * in_row > 0.5 and gap > 0.5 * 10**-places and stated > 0:
                break
            # A row too light for its gap to count is made longer odds: more digits, a larger share.
            places = 3
            if chance.random() < 0.02:
                base, row["Quantity"] = (base * 20, 20 * row["Quantity"]) if heading == "Total mass (kg)" else (base, 20 * row["Quantity"])
                in_row = in_row * 20 if heading != "Total mass (kg)" else in_row
        row[heading] = f"{stated:.{places}f}"
    return Rows(rows), 1000


def test_lost_zeros_of_a_number_column_count_as_stated() -> None:
    """A workbook's 8 in a column of one-decimal figures was 8.0; in a column of mixed ones it is 8."""
    plate = {**PLATE, "Quantity": 20, "Length (mm)": 490.4, "Width (mm)": 200}  # 7.7 kg
    others = [{**PLATE, "Quantity": 20, "Length (mm)": 500 + 13 * i, "Width (mm)": 200} for i in range(12)]
    ours = Rows(others).frame["bare_nominal_kg"].tolist()
    tenths = [{**row, "Unit mass (kg)": round(kg, 1)} for row, kg in zip(others, ours, strict=True)]
    mixed = [{**row, "Unit mass (kg)": round(kg, i % 3)} for i, (row, kg) in enumerate(zip(others, ours, strict=True))]
    assert differing(Rows([*tenths, {**plate, "Unit mass (kg)": 8}], numbers=True), 12) is not None
    assert differing(Rows([*mixed, {**plate, "Unit mass (kg)": 8}], numbers=True), 12) is None


def _flagged(rows: Rows) -> int:
    return sum(any(f.kind == "stated-mass-differs" for f in found) for found in rows.log.by_member().values())


@pytest.mark.parametrize("seed", [1, 2])
def test_a_thousand_planted_errors_are_all_found(seed: int) -> None:
    """3 % or more, over 0.5 kg in the row, over half a unit of the last digit stated: none slips through."""
    rows, count = _thousand(seed, wrong=True)
    assert _flagged(rows) == count


@pytest.mark.parametrize("seed", [3, 4])
def test_none_of_a_thousand_correct_ones_is_flagged(seed: int) -> None:
    """Figures rounded as people round them are not errors."""
    rows, _ = _thousand(seed, wrong=False)
    assert _flagged(rows) == 0


# --- on the scale ----------------------------------------------------------------------------------------------------

def test_a_weighed_mass_takes_the_place_of_ours() -> None:
    """No bounds, no additions beside it; ours stands in its own columns."""
    rows = Rows([{**BEAM, "Quantity": 2, "Finish": "galvanized", "Weighed mass (kg)": 155}])
    assert rows.mass("each") == rows.mass("bare") == (155, 155, 155)
    assert rows.mass("total")[2] == 310
    assert rows.mass("calculated")[1] == pytest.approx(Rows([{**BEAM, "Finish": "galvanized"}]).mass("each")[1])
    assert rows.weighed.bases[int(rows.frame["basis_id"].iat[0])].weighed
    assert "weighed-outside-bounds" not in rows.kinds()


def test_weighing_accuracy_gives_bounds() -> None:
    """As the job file says."""
    rows = Rows([{**BEAM, "Weighed mass (kg)": 155}], {"masses": {"weighing_accuracy_percent": 2.0}})
    assert rows.mass("each") == pytest.approx((151.9, 155, 158.1))


@pytest.mark.parametrize(("kg", "outside"), [(144.6, False), (156.6, False), (143, True), (158, True)])
def test_a_weighing_outside_our_bounds_is_a_finding(kg: float, outside: bool) -> None:
    """150.6 kg ±4 %."""
    assert ("weighed-outside-bounds" in Rows([{**BEAM, "Weighed mass (kg)": kg}]).kinds()) == outside


def test_a_weighed_total_is_shared_out() -> None:
    """Where the heading says total."""
    headings = ["Mark", "Quantity", "Section", "Material", "Length (mm)", "Weighed total (kg)"]
    assert Rows([{**BEAM, "Quantity": 2, "Weighed total (kg)": 305}], headings=headings).mass("each")[1] == 152.5


def test_a_weighing_heals_what_could_not_be_computed() -> None:
    """An unknown section with a weighed mass is weighed; a zero is no weighing."""
    rows = Rows([{"Mark": "X", "Quantity": 1, "Section": "Odd thing", "Weighed mass (kg)": 88}, {**BEAM, "Weighed mass (kg)": 0}])
    assert rows.frame["status"].tolist() == ["weighed", "weighed"]
    assert "weighing-not-used" in rows.kinds(1)
    assert rows.mass("each", 1)[1] == pytest.approx(BEAM_KG)


def test_a_similar_name_no_longer_matters_once_weighed() -> None:
    """Nothing of the mass rests on the assumed material."""
    rows = Rows([{**BEAM, "Material": None, "Weighed mass (kg)": 150}, {**BEAM, "Material": None}])
    assert rows.frame["status"].tolist() == ["weighed", "assumed"]


# --- handling --------------------------------------------------------------------------------------------------------

@pytest.mark.parametrize(("heavy", "mark"), [
    (3, "by hand after assessment"), (25, "by hand after assessment"), (25.01, "two or a lifting aid"), (50, "two or a lifting aid"),
    (50.01, "lifting aid"), (9000, "lifting aid"),
])  # fmt: skip
def test_handling(heavy: float, mark: str) -> None:
    """By the heavy mass; under the reference mass nothing is promised."""
    import numpy as np

    assert handling.marks(np.array([heavy]), 25.0).tolist() == [mark]


def test_handling_is_by_the_heavy_mass_with_additions() -> None:
    """24.9 kg bare of zinc is 25 and more with it."""
    row = {**BEAM, "Length (mm)": 940}
    assert Rows([row]).frame["handling"].tolist() == ["by hand after assessment"]
    assert Rows([{**row, "Finish": "galvanized"}]).frame["handling"].tolist() == ["two or a lifting aid"]
    assert Rows([row], {"masses": {"hand_kg": 15.0}}).frame["handling"].tolist() == ["two or a lifting aid"]


def test_what_is_not_known_has_no_mark() -> None:
    """A row not weighed."""
    assert Rows([{**BEAM, "Section": "UB 1x2x3"}, BEAM]).frame["handling"].isna().tolist() == [True, False]
