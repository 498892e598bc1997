"""Worked weight examples from outside the project, each with its source; misprints stand there as such."""

from __future__ import annotations

import csv
from pathlib import Path

import pytest
from weighing_rows import Rows

from takeoff.provenance import Source
from takeoff.quantities import EVERYDAY

FILE = Path(__file__).parent / "published" / "weight_examples.csv"
with FILE.open(encoding="utf-8") as _handle:
    EXAMPLES = list(csv.DictReader(_handle))
IN3_PER_M3 = 0.0254**3
KG_PER_LB = EVERYDAY["lb"][1]


def _density(example: dict[str, str]) -> float:
    value = float(example["density"])
    return value * KG_PER_LB / IN3_PER_M3 if example["density_unit"] == "lb/in3" else value * EVERYDAY[example["density_unit"]][1]


def _weigh(example: dict[str, str], tmp_path: Path, finish: str | None = None) -> Rows:
    """The example as a row of a list, in a material of exactly its density from the user's own table."""
    own = tmp_path / "own.csv"
    density = _density(example)
    own.write_text(
        "key,name,family,density_low_kg_m3,density_kg_m3,density_high_kg_m3,density_source,density_evidence\n"
        f"example-stuff,Example stuff,carbon steel,{density!r},{density!r},{density!r},the worked example,read\n", encoding="utf-8",
    )
    row = {"Mark": "E", "Quantity": 1, "Section": example["section"], "Material": "Example stuff", "Finish": finish,
           "Length (mm)": example["length_mm"] or None, "Width (mm)": example["width_mm"] or None}
    return Rows([row], {"own": {"materials": str(own)}}, headings=[k for k, v in row.items() if v is not None])


@pytest.mark.parametrize("example", EXAMPLES, ids=lambda e: e["id"])
def test_worked_examples(example: dict[str, str], tmp_path: Path) -> None:
    """Mass or volume as published, within the rounding it was published with; a misprint is not reproduced, and is shown why."""
    Source(example["title"], example["clause"], example["evidence"])
    published, tolerance, asked = float(example["published"]), float(example["tolerance"]), example["asked"]
    if asked == "stated":
        rows = Rows([{"Mark": "E", "Quantity": 1, "Section": "Bundle", "Unit mass (kg)": example["section"]}])
        assert rows.mass("each")[1] == pytest.approx(published, rel=tolerance)
    elif asked == "volume":
        unit = IN3_PER_M3 if example["unit"] == "in3" else EVERYDAY[example["unit"]][1]
        assert float(_weigh(example, tmp_path).frame["volume_m3"].iat[0]) / unit == pytest.approx(published, rel=tolerance)
    elif asked == "mass":
        ours = _weigh(example, tmp_path).mass("bare")[1] * float(example["times"])
        assert ours / EVERYDAY[example["unit"]][1] == pytest.approx(published, rel=tolerance)
    else:
        rows = _weigh(example, tmp_path, "galvanized")
        percent = 100 * rows.mass("add_finish")[0] / rows.mass("bare")[1]
        assert example["verdict"] == "misprint"
        assert percent != pytest.approx(published, rel=0.2)
        assert percent == pytest.approx(2 * published, rel=tolerance)


def test_every_misprint_says_why() -> None:
    """A published figure that is not reproduced is explained beside it."""
    assert all(e["note"] for e in EXAMPLES if e["verdict"] != "reproduced")
