"""A user's own table of materials: same columns, same checks, and it says when it takes the place of ours."""

from __future__ import annotations

from pathlib import Path

import pytest

from takeoff.errors import DataError, InputError
from takeoff.materials import elongation, load_own, lookup

HEADING = "key,name,family,aliases,density_kg_m3,density_source,density_evidence\n"


def _own(tmp_path: Path, text: str) -> Path:
    path = tmp_path / "own_materials.csv"
    path.write_text(text, encoding="utf-8")
    return path


def test_an_own_row_is_found_first_and_flagged(tmp_path: Path) -> None:
    """A weighed granite overrides ours under its own name; the bounds are filled from the family."""
    own = load_own(_own(tmp_path, HEADING + "granite-site,Granite,stone,our granite,2815,weighed block 17,read\n"))
    found = lookup("granite", own=own)
    assert found.material is not None
    assert (found.match, found.material.key, found.material.density.nominal) == ("exact", "granite-site", 2815)
    assert found.material.own
    assert found.material.overrides
    assert found.material.density_source.title == "weighed block 17"
    assert found.material.density.low < 2815 < found.material.density.high
    ours = lookup("granite")
    assert ours.material is not None
    assert not ours.material.own


def test_an_own_row_of_a_new_name_overrides_nothing(tmp_path: Path) -> None:
    """A material we do not have is simply added."""
    own = load_own(_own(tmp_path, HEADING + "mix-7,Site mix 7,concrete,,2610,mix design 7,read\n"))
    found = lookup("site mix 7", own=own)
    assert found.material is not None
    assert found.material.own
    assert not found.material.overrides
    assert lookup("steel", own=own).match == "alias"


@pytest.mark.parametrize(
    ("text", "says"),
    [
        (HEADING + "a,A,stone,,0,src,read\n", "no material has this density"),
        (HEADING + "a,A,stone,,heavy,src,read\n", "this is no number"),
        (HEADING + "a,A,stone,,2700,,read\n", "without a source does not load"),
        (HEADING + "a,A,stone,,2700,src,\n", "unknown evidence word"),
        (HEADING + "a,A,stone,,2700,src,read\na,B,stone,,2800,src,read\n", "this key is taken"),
        (HEADING + "a,A,stone,,2700,src,read\nb,a,stone,,2800,src,read\n", "this name is taken by line 2"),
        ("key,name,family,density_kg_m3\na,A,stone,2700\n", "a column is missing"),
        (HEADING.strip() + ",colour\na,A,stone,,2700,src,read,red\n", "unknown column"),
        (HEADING, "has no rows"),
        ("", "the table is empty"),
        (HEADING + "a,A,stone,,2700\n", "line 2 has 5 cells"),
        (HEADING + '"a,A,stone,,2700,src,read\n', "is not proper CSV"),
    ],
)
def test_a_faulty_own_table_says_what_is_wrong(tmp_path: Path, text: str, says: str) -> None:
    """Zero or text density, no source, double names, wrong columns: one clear message, naming the file."""
    with pytest.raises(DataError, match=says) as caught:
        load_own(_own(tmp_path, text))
    assert "own_materials.csv" in str(caught.value)
    assert caught.value.status == 2


def test_an_own_row_may_grow_by_a_law_of_ours(tmp_path: Path) -> None:
    """Its own coefficient about room temperature, our curve beyond; an unknown law is refused with the right ones."""
    heading = HEADING.strip() + ",alpha_1e-6_per_K,alpha_source,alpha_evidence,law\n"
    row = "x,Site steel,carbon steel,,7845,certificate 12,read,11.5,certificate 12,read,"
    steel = load_own(_own(tmp_path, heading + row + "structural steel\n")).materials["x"]
    assert elongation(steel, 60).value == pytest.approx(40 * 11.5e-6)
    assert elongation(steel, 500).within_validity
    assert not steel.is_carbon_steel, "its own density decides, not the tables at 7850"
    with pytest.raises(DataError, match="no such law"):
        load_own(_own(tmp_path, heading + row + "wishful\n"))
    with pytest.raises(DataError, match="no such law"):
        load_own(_own(tmp_path, heading + row + "means\n"))


def test_a_missing_own_table_and_a_folder_are_said(tmp_path: Path) -> None:
    """No file, or a folder in its place: an input error."""
    with pytest.raises(InputError, match="there is no such file"):
        load_own(tmp_path / "none.csv")
    with pytest.raises(InputError, match="no ordinary file"):
        load_own(tmp_path)


def test_an_own_table_that_is_not_text_is_refused(tmp_path: Path) -> None:
    """Bytes that are no UTF-8 are said."""
    path = tmp_path / "own.csv"
    path.write_bytes(HEADING.encode() + b"a,\xff\xfe,stone,,2700,src,read\n")
    with pytest.raises(DataError, match="not UTF-8"):
        load_own(path)
