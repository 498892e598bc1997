"""Laws of reading: order, splitting, units, language, column order and kind of file change no total."""

from __future__ import annotations

import csv
import random
import tempfile
from pathlib import Path
from typing import Any

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from takeoff import pipeline

SECTIONS = [
    "UB 203x133x25",
    "SHS 100x100x5",
    "PL 10x200",
    "L 100x100x10",
    "HE 200 A",
    "CHS 48.3x3.2",
    "FL 100x10",
    "RD 20",
    "PFC 200x75x23",
]
MATERIALS = ["S355", "S275JR", "1.4404", "S235"]
#: field -> its heading in some languages
LANGUAGES = {
    "English": {"mark": "Mark", "quantity": "Quantity", "section": "Section", "material": "Material", "length": "Length"},
    "German": {"mark": "Pos.", "quantity": "Stückzahl", "section": "Profil", "material": "Werkstoff", "length": "Länge"},
    "French": {"mark": "Repère", "quantity": "Quantité", "section": "Profil", "material": "Matière", "length": "Longueur"},
    "Spanish": {"mark": "Marca", "quantity": "Cantidad", "section": "Perfil", "material": "Material", "length": "Longitud"},
    "Italian": {"mark": "Marca", "quantity": "Quantità", "section": "Profilo", "material": "Materiale", "length": "Lunghezza"},
    "Dutch": {"mark": "Merk", "quantity": "Aantal", "section": "Profiel", "material": "Materiaal", "length": "Lengte"},
    "Polish": {"mark": "Poz.", "quantity": "Ilość", "section": "Profil", "material": "Materiał", "length": "Długość"},
    "Portuguese": {"mark": "Marca", "quantity": "Quantidade", "section": "Perfil", "material": "Material", "length": "Comprimento"},
    "Swedish": {"mark": "Pos", "quantity": "Antal", "section": "Profil", "material": "Material", "length": "Längd"},
}
FIELDS = ("mark", "quantity", "section", "material", "length")

Row = dict[str, Any]
rows = st.lists(
    st.fixed_dictionaries(
        {
            "mark": st.integers(1, 999).map(lambda n: f"M{n}"),
            "quantity": st.integers(1, 60),
            "section": st.sampled_from(SECTIONS),
            "material": st.sampled_from(MATERIALS),
            "length": st.integers(60, 14_000),
        }
    ),
    min_size=1,
    max_size=12,
)


def weigh(
    listed: list[Row],
    *,
    language: str = "English",
    unit: str = "mm",
    order: tuple[str, ...] = FIELDS,
    separator: str = ",",
    comma: bool = False,
) -> pipeline.Result:
    factor = {"mm": 1.0, "m": 1000.0, "cm": 10.0, "in": 25.4}[unit]
    names = {**LANGUAGES[language], "length": f"{LANGUAGES[language]['length']} ({unit})"}

    def text(field: str, value: Any) -> str:
        if field != "length":
            return str(value)
        typed = f"{value / factor:.6f}" if factor != 1 else str(value)
        return typed.replace(".", ",") if comma else typed

    with tempfile.TemporaryDirectory() as folder:
        path = Path(folder) / "list.csv"
        with path.open("w", encoding="utf-8", newline="") as handle:
            writer = csv.writer(handle, delimiter=separator)
            writer.writerow([names[f] for f in order])
            writer.writerows([text(f, row[f]) for f in order] for row in listed)
        return pipeline.schedule([path])


def same_total(one: pipeline.Result, other: pipeline.Result, rel: float = 1e-9) -> None:
    for word in ("light", "nominal", "heavy"):
        assert getattr(one.totals.mass_kg, word) == pytest.approx(getattr(other.totals.mass_kg, word), rel=rel)
    assert one.totals.quantity == other.totals.quantity


@settings(max_examples=25, deadline=None)
@given(rows, st.randoms(use_true_random=False))
def test_order_changes_nothing(listed: list[Row], chance: random.Random) -> None:
    """Shuffled rows and columns weigh the same."""
    shuffled, order = list(listed), list(FIELDS)
    chance.shuffle(shuffled)
    chance.shuffle(order)
    same_total(weigh(listed), weigh(shuffled, order=tuple(order)))


@settings(max_examples=25, deadline=None)
@given(rows)
def test_splitting_a_quantity_changes_nothing(listed: list[Row]) -> None:
    """A quantity over two rows weighs what it did in one."""
    split = []
    for row in listed:
        half = row["quantity"] // 2
        split += [{**row, "quantity": q} for q in (half, row["quantity"] - half) if q]
    same_total(weigh(listed), weigh(split))


@settings(max_examples=30, deadline=None)
@given(rows, st.sampled_from(["mm", "m", "cm", "in"]), st.sampled_from(sorted(LANGUAGES)), st.booleans())
def test_units_language_and_separators_change_nothing(listed: list[Row], unit: str, language: str, comma: bool) -> None:
    """Another unit, another language, decimal commas behind semicolons: one total."""
    other = weigh(listed, language=language, unit=unit, separator=";" if comma else ",", comma=comma)
    assert other.account.not_weighed == 0
    same_total(weigh(listed), other, rel=1e-6)
