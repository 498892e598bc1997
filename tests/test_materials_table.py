"""The table of materials: complete, in order, sourced, and clear about whose name is whose."""

from __future__ import annotations

import csv
import shutil
from pathlib import Path

import pytest

from takeoff.datafiles import data_folder, read_table
from takeoff.errors import DataError
from takeoff.materials import all_materials, by_key, families
from takeoff.materials.curves import curves
from takeoff.materials.directions import directional_coefficients
from takeoff.materials.laws import laws
from takeoff.materials.material import COLUMNS, material_from_row
from takeoff.materials.means import means
from takeoff.materials.nameindex import fold
from takeoff.materials.table import Table, source_titles, table
from takeoff.names import normal_name, squeezed
from takeoff.provenance import EVIDENCE

MATERIALS = all_materials()
HEADING = ",".join(COLUMNS)


def _row(**changes: str) -> dict[str, str]:
    """A row that loads, with changes."""
    row = dict.fromkeys(COLUMNS, "")
    row.update(
        key="testium", name="Testium", family="carbon steel", density_low_kg_m3="7800", density_kg_m3="7850",
        density_high_kg_m3="7900", density_source="own", density_evidence="read",
    )
    return {**row, **changes}


def _load(row: dict[str, str]) -> object:
    return material_from_row(row, file=Path("t.csv"), line=2, titles={"own": "A text"}, families=families())


def test_there_are_at_least_620_materials() -> None:
    """The table is complete enough to be the first place to look."""
    assert len(MATERIALS) >= 620


@pytest.mark.parametrize("material", MATERIALS, ids=lambda m: m.key)
def test_every_row_is_in_order_and_sourced(material) -> None:
    """Low <= nominal <= high, a source with evidence for every figure, a family, plausible figures."""
    density = material.density
    assert density.low <= (density.high if density.nominal is None else density.nominal) <= density.high
    assert material.density_source.title
    assert material.density_source.evidence in EVIDENCE
    assert material.family in families()
    assert (material.alpha_per_K is None) == (material.alpha_source is None) == (material.law == "")
    if material.alpha_per_K is not None:
        assert material.law in laws()
        assert -5e-6 < material.alpha_per_K < 250e-6
    assert density.high <= 4 * density.low or material.kind in ("insulation", "concrete", "bulk", "ice"), "a spread this wide says nothing"


def test_nominal_is_absent_only_where_no_more_than_a_limit_is_published() -> None:
    """Heavyweight concrete has a lower limit alone: give a density."""
    assert [m.key for m in MATERIALS if m.density.nominal is None] == ["concrete-heavyweight"]


def test_every_material_file_holds_its_own_families_in_one_place() -> None:
    """A family stands in one file, so that there is one place to add a row."""
    places: dict[str, set[str]] = {}
    for file, _, row in table().rows.values():
        places.setdefault(row["family"], set()).add(file.name)
    assert {family: files for family, files in places.items() if len(files) > 1} == {}
    assert set(families()) == set(places)


def test_clashes_are_declared_once_and_are_clashes() -> None:
    """Each declared clash has several owners, and no row claims its name as an alias beside it."""
    for name, (_, keys) in table().clashes.items():
        assert len(keys) == len(set(keys)) >= 2, name
        owners = table().index.keys(name)
        assert set(owners) <= set(keys), name


def test_the_short_way_to_fold_gives_what_normal_name_gives() -> None:
    """Folding Latin letters by table and folding by `normal_name` agree on every name of the table, and on every letter."""
    for code in range(0x20, 0x180):
        if chr(code) not in ";":
            assert fold(f"a{chr(code)}1") == fold(squeezed(normal_name(f"a{chr(code)}1"))), hex(code)
    for key in table().rows:
        for name in table().names_of(key):
            assert fold(name) == fold(squeezed(normal_name(name))), name


def test_sources_and_side_tables_point_at_rows_that_exist() -> None:
    """No key in the side tables is an orphan, every source id used has a title, and every title is used."""
    used = set()
    for _, _, row in table().rows.values():
        used |= {row["density_source"], row["alpha_source"]}
    for name in ("curves", "means", "directions", "green", "liquid_densities"):
        for _, row in read_table(data_folder() / f"{name}.csv"):
            used.add(row["source"])
            if name != "curves":
                assert row["key"] in table().rows, (name, row["key"])
    assert used - {""} <= set(source_titles())
    for name, stretches in laws().items():
        for _, _, curve in stretches:
            assert curve in ("row", "means") or curve in curves(), (name, curve)
    assert set(means()) | set(directional_coefficients()) <= set(table().rows)


def test_words_of_wood_know_their_other_directions() -> None:
    """A wood that grows along the grain also says how it grows across it."""
    for material in MATERIALS:
        if material.alpha_direction == "along grain" and material.is_wood:
            assert set(directional_coefficients()[material.key]) in ({"across"}, {"radial", "tangential"}), material.key


def test_blank_bounds_are_filled_and_say_so() -> None:
    """A characteristic value mirrors at the mean; other blank bounds take the family's spread."""
    c24 = by_key("timber-c24")
    assert (c24.density.low, c24.density.nominal, c24.density.high) == (350, 420, 490)
    assert c24.density_bounds_filled
    assert "characteristic" in c24.filled[0]
    cullet = by_key("glass-broken")
    assert cullet.density.low < cullet.density.nominal < cullet.density.high
    assert len(cullet.filled) == 2
    assert not by_key("gold").density_bounds_filled


@pytest.mark.parametrize(
    ("changes", "says"),
    [
        ({"density_source": ""}, "without a source does not load"),
        ({"density_source": "nowhere"}, "no such source"),
        ({"density_evidence": "hearsay"}, "unknown evidence word"),
        ({"density_kg_m3": "0"}, "no material has this density"),
        ({"density_kg_m3": "-7850"}, "no material has this density"),
        ({"density_kg_m3": "heavy"}, "this is no number"),
        ({"density_kg_m3": "nan"}, "no finite number"),
        ({"density_kg_m3": "8000"}, "out of order"),
        ({"density_kg_m3": "", "density_low_kg_m3": ""}, "neither a density nor both its bounds"),
        ({"family": "cheese"}, "no such family"),
        ({"key": ""}, "this is blank"),
        ({"alpha_1e-6_per_K": "12"}, "without a source does not load"),
        ({"alpha_1e-6_per_K": "0.9e3", "alpha_source": "own", "alpha_evidence": "read"}, "no solid grows like that"),
        ({"alpha_low_C": "20"}, "half an interval"),
    ],
)  # fmt: skip
def test_a_row_that_may_not_load_says_why(changes: dict[str, str], says: str) -> None:
    """Each fault of a row is one message with file, line and column."""
    with pytest.raises(DataError, match=says) as caught:
        _load(_row(**changes))
    assert str(caught.value).startswith("t.csv: line 2, column ")


def test_a_plain_row_loads() -> None:
    """The row that the faults above are made from is itself sound."""
    assert _load(_row()) is not None


def _tiny(tmp_path: Path, *rows: dict[str, str], clashes: str = "") -> Path:
    with (tmp_path / "metals.csv").open("w", newline="", encoding="utf-8") as handle:
        writer = csv.DictWriter(handle, COLUMNS, lineterminator="\n")
        writer.writeheader()
        writer.writerows(rows)
    (tmp_path / "clashes.csv").write_text(f"name,keys,note\n{clashes}", encoding="utf-8")
    return tmp_path


def test_two_rows_with_one_name_must_be_declared(tmp_path: Path) -> None:
    """A name with two owners stops the index, unless it is a declared clash."""
    rows = [_row(key="a", name="A", aliases="shared name"), _row(key="b", name="B", aliases="Shared-Name")]
    with pytest.raises(DataError, match="several materials answer to one name"):
        Table(_tiny(tmp_path, *rows)).index  # noqa: B018  (made when it is first asked for)
    loaded = Table(_tiny(tmp_path, *rows, clashes="shared name,a; b,declared\n"))
    assert loaded.clashes == {"sharedname": ("shared name", ("a", "b"))}
    assert loaded.index.keys("sharedname") == ["a", "b"]


def test_a_key_stands_once_and_a_density_needs_its_source(tmp_path: Path) -> None:
    """Double keys and unsourced rows stop the table from loading; so does a clash of unknown rows."""
    with pytest.raises(DataError, match="this key is taken"):
        Table(_tiny(tmp_path, _row(), _row()))
    with pytest.raises(DataError, match="without a source does not load"):
        Table(_tiny(tmp_path, _row(density_source="")))
    with pytest.raises(DataError, match="no such material"):
        Table(_tiny(tmp_path, _row(), clashes="x,testium; nobody,wrong\n")).clashes  # noqa: B018


def test_the_files_are_plain_and_reviewable(tmp_path: Path) -> None:
    """UTF-8, line feeds, the common heading, and no figure with an exponent or a comma."""
    for file in {file for file, _, _ in table().rows.values()}:
        raw = file.read_bytes()
        assert b"\r" not in raw
        assert raw.decode("utf-8").startswith(HEADING + "\n")
        shutil.copy(file, tmp_path)
    assert len(list(tmp_path.iterdir())) >= 20
