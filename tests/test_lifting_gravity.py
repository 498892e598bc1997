"""Centre of gravity, its box and the size of a pick, against a mesh library and against hand figures."""

from __future__ import annotations

import itertools
import math
import random
from typing import Any

import numpy as np
import pytest
import shapely
import trimesh
from conftest import WriteList

from takeoff import pipeline
from takeoff.bounds import Bounds
from takeoff.job import job_from
from takeoff.lifting import gravity
from takeoff.sections import outline, shapes

HEADINGS = [
    "Mark",
    "Assembly",
    "Quantity",
    "Section",
    "Material",
    "Length (mm)",
    "Width (mm)",
    "X1 (mm)",
    "Y1 (mm)",
    "Z1 (mm)",
    "X2 (mm)",
    "Y2 (mm)",
    "Z2 (mm)",
    "Axis",
    "Roll",
]
# mark, section, material, None, width, start, end, axis, roll. In materials whose mass is area × density, so that a mesh of
# the section weighs the same.
ASSEMBLIES: dict[str, list[tuple[Any, ...]]] = {
    "straight": [
        ("B1", "UPN 200", "Aluminium 6082", None, None, (0, 0, 0), (3000, 0, 0), "heel", 0),
        ("B2", "UPN 200", "Aluminium 6082", None, None, (3000, 1500, 0), (0, 1500, 0), "heel", 0),
        ("L1", "L 100x65x8", "1.4401", None, None, (700, 0, 120), (700, 1500, 120), "heel", 90),
        ("P1", "PL 12x800", "1.4401", None, 800, (900, 750, 206), (2100, 750, 206), "bottom", 0),
        ("K1", "Board 50x200", "European oak", None, None, (2600, 0, 131), (2600, 1500, 131), None, 90),
    ],
    "leaning": [
        ("C1", "L 90x90x9", "1.4301", None, None, (0, 0, 0), (900, 400, 2299.2), "heel", 30),
        ("C2", "HEA 160", "Aluminium 6082", None, None, (1000, 1000, 0), (1000, 1000, 2000), "top", 0),
        ("T1", "WT8X25", "1.4301", None, None, (1000, 1000, 2000), (2300, -200, 2350), "bottom", -25),
        ("R1", "RHS 120x60x5", "1.4401", None, None, (200, 1500, 500), (1500, 1800, 940), "top", 115),
        ("D1", "CHS 114.3x5", "1.4401", None, None, (0, 2000, 0), (0, 2600, 800), None, 0),
    ],
    "mixed": [
        ("G1", "IPE 300", "Aluminium 6082", None, None, (-2000, 0, 0), (2000, 0, 0), "top", 0),
        ("U1", "UPN 120", "1.4301", None, None, (500, -1100, -60), (500, 1100, -60), "heel", 180),
        ("F1", "FL 150x15", "1.4401", None, None, (-900, -450, 7.5), (-900, 450, 7.5), None, 0),
        ("A1", "L 150x100x12", "1.4301", None, None, (1800, 0, 0), (1800, 0, 1300), "heel", 45),
        ("S1", "SHS 100x100x6", "Aluminium 6082", None, None, (-1500, 300, 0), (-600, 900, 1175.8), "bottom", 10),
    ],
}


def prism(section: Any, row: tuple[Any, ...]) -> trimesh.Trimesh:
    """The piece as a closed mesh, put in place by turns about the axes: another way than the program's own."""
    d = dict(section.dimensions_mm)
    if section.shape == "plate":
        rings = [[(0, 0), (row[4], 0), (row[4], d["thickness"]), (0, d["thickness"])]]
    elif section.shape in ("flat", "board"):
        rings = [[(0, 0), (d["width"], 0), (d["width"], d["thickness"]), (0, d["thickness"])]]
    elif section.shape == "round hollow":
        rings = [outline.circle(size, (d["h"] / 2, d["h"] / 2), 720) for size in (d["h"], d["h"] - 2 * d["tf"])]
    else:
        if "flange_slope_percent" in d:
            d["slope"] = d.pop("flange_slope_percent") / 100
            d["from_toe"] = shapes.from_toe("b/2" if d["h"] <= 300 else "(b-tw)/2", d["b"], d["tw"])
        corners = shapes.corners(section.shape, d)
        assert corners is not None
        rings = [outline.points(corners, 200)]
        if section.shape == "box hollow":
            wall = d["tf"]
            bore = outline.points(outline.box(d["h"] - 2 * wall, d["b"] - 2 * wall, d["r2"]), 200)
            rings.append([(x + wall, y + wall) for x, y in bore])
    box = (max(x for x, _ in rings[0]), max(y for _, y in rings[0]))
    start, end, axis, roll = (np.array(v) if isinstance(v, tuple) else v for v in row[5:9])
    if axis is None:
        origin = shapely.Polygon(rings[0], rings[1:]).centroid.coords[0]
    elif axis == "heel":
        origin = (0, 0) if section.shape == "angle" else (0, box[1] / 2)
    else:
        origin = (box[0] / 2, box[1] if axis == "top" else 0)
    shape = shapely.Polygon(rings[0], rings[1:])
    along = end - start
    length = float(np.linalg.norm(along))
    mesh = _extruded(shape, length)
    mesh.apply_translation((-origin[0], -origin[1], 0))
    # Across to the right of a member that runs along x, up to z.
    mesh.apply_transform(np.array([[0, 0, 1, 0], [-1, 0, 0, 0], [0, 1, 0, 0], [0, 0, 0, 1]], dtype=float))
    turn = trimesh.transformations.rotation_matrix
    upright = math.hypot(along[0], along[1]) < 1e-9
    yaw, pitch = (0.0, -math.pi / 2) if upright else (math.atan2(along[1], along[0]), -math.asin(along[2] / length))
    mesh.apply_transform(turn(math.radians(roll) + (math.pi if upright else 0.0), (1, 0, 0)))
    mesh.apply_transform(turn(pitch, (0, 1, 0)))
    mesh.apply_transform(turn(yaw, (0, 0, 1)))
    mesh.apply_translation(start)
    return mesh


def _extruded(shape: shapely.Polygon, length: float) -> trimesh.Trimesh:
    """A closed mesh of a plane shape with holes, carried along z."""
    triangles = shapely.constrained_delaunay_triangles(shape).geoms
    vertices: dict[tuple[float, float, float], int] = {}
    faces: list[tuple[int, int, int]] = []

    def at(p: tuple[float, ...], z: float) -> int:
        return vertices.setdefault((p[0], p[1], z), len(vertices))

    for t in triangles:
        a, b, c = shapely.geometry.polygon.orient(t).exterior.coords[:3]
        faces += [(at(a, length), at(b, length), at(c, length)), (at(c, 0.0), at(b, 0.0), at(a, 0.0))]
    shape = shapely.geometry.polygon.orient(shape)
    for ring in (shape.exterior, *shape.interiors):
        for a, b in itertools.pairwise(ring.coords):
            faces += [(at(a, 0.0), at(b, 0.0), at(b, length)), (at(a, 0.0), at(b, length), at(a, length))]
    mesh = trimesh.Trimesh(vertices=list(vertices), faces=faces, process=False)
    assert mesh.is_watertight
    assert mesh.volume > 0
    return mesh


@pytest.mark.parametrize("name", ASSEMBLIES)
def test_the_centre_is_the_mesh_librarys(name: str, write_list: WriteList) -> None:
    """Centre of gravity within 0.1 mm, each piece and the whole; the size holds every vertex."""
    rows = ASSEMBLIES[name]
    path = write_list(
        [[r[0], "A", 1, r[1], r[2], math.dist(r[5], r[6]), r[4], *r[5], *r[6], r[7], r[8]] for r in rows],
        headings=HEADINGS,
    )
    result = pipeline.schedule([path])
    assert set(result.members["status"]) <= {"weighed", "assumed"}, result.members[["mark", "status", "reason"]]
    [pick] = result.picks
    assert pick.centre is not None, pick.centre_unknown
    total, moment, corners = 0.0, np.zeros(3), []
    for i, row in enumerate(rows):
        mesh = prism(result.sections[result.members["section_id"][i]], row)
        place = result.places[i]
        assert isinstance(place, gravity.Place)
        assert place.centre == pytest.approx(mesh.center_mass, abs=0.1), row
        density = result.materials[result.members["material_id"][i]].density.nominal
        assert density is not None
        mass = mesh.volume * density * 1e-9
        assert mass == pytest.approx(result.members["each_nominal_kg"][i], rel=1e-4), row
        total += mass
        moment += mass * mesh.center_mass
        corners.append(mesh.bounds)
    assert pick.centre.centre == pytest.approx(moment / total, abs=0.1)
    low, high = np.min([c[0] for c in corners], axis=0), np.max([c[1] for c in corners], axis=0)
    assert (np.array(pick.centre.low) <= low + 1e-6).all()
    assert (np.array(pick.centre.high) >= high - 1e-6).all()
    assert not pick.centre.at_least


def test_the_box_holds_every_mix_of_masses_and_is_reached() -> None:
    """Exact extremes: no mix of light and heavy masses gets outside them, and one of all of them gets there."""
    rng = random.Random(1)
    for _ in range(60):
        n = rng.randint(1, 7)
        x = [rng.uniform(-5e3, 5e3) for _ in range(n)]
        masses = [Bounds(m * rng.uniform(0.7, 1), m, m * rng.uniform(1, 1.4)) for m in (rng.uniform(1, 1000) for _ in range(n))]
        low, high = gravity.extreme_centres(x, masses)
        mixes = []
        for ends in itertools.product(("light", "heavy"), repeat=n):
            each = [getattr(m, e) for m, e in zip(masses, ends, strict=True)]
            mixes.append(sum(m * p for m, p in zip(each, x, strict=True)) / sum(each))
        assert (low, high) == pytest.approx((min(mixes), max(mixes)), rel=1e-9, abs=1e-6)


@pytest.mark.parametrize(
    ("change", "why"),
    [
        ({5: None}, "in part"),
        ({2: 2}, "2 pieces have one position"),
        ({7: None, 8: None, 9: None, 10: None, 11: None, 12: None}, "no position"),
        ({13: "somewhere"}, "axis or roll"),
        ({14: "steep"}, "axis or roll"),
        ({7: 0, 8: 0, 9: 0, 10: 0, 11: 0, 12: 0}, "one point"),
        ({13: "heel"}, "no heel"),
    ],
)
def test_a_piece_without_a_usable_position_makes_the_centre_unknown(change: dict[int, Any], why: str, write_list: WriteList) -> None:
    """Unknown and said so, never zero and never the centre of the rest."""
    good: list[Any] = ["B1", "A", 1, "IPE 300", "S275", 4000, None, 0, 0, 0, 4000, 0, 0, None, None]
    bad = list(good)
    bad[0] = "B2"
    if 5 in change:
        change = {7: None}
    for column, value in change.items():
        bad[column] = value
    [pick] = pipeline.schedule([write_list([good, bad], headings=HEADINGS)]).picks
    assert pick.centre is None
    assert why in pick.centre_unknown
    record = pick.as_record()
    assert record["centre_of_gravity_mm"] is None
    assert record["size_mm"] is None
    assert [f.kind for f in pick.findings] == ["centre-unknown"]


def test_a_group_has_one_position_where_its_heading_says_so(write_list: WriteList) -> None:
    """Twelve bolts sets with the position of the group count; with the position of one they do not."""
    for heading, known in (("Group X (mm)", True), ("X (mm)", False)):
        headings = ["Mark", "Assembly", "Quantity", "Description", "Unit mass (kg)", heading, "Y (mm)", "Z (mm)"]
        result = pipeline.schedule([write_list([["K1", "A", 12, "Bolt set", 0.5, 100, 200, 300]], headings=headings)])
        [pick] = result.picks
        assert (pick.centre is not None) is known, heading
        if known:
            assert pick.centre is not None
            assert pick.centre.centre == (100.0, 200.0, 300.0)
            assert pick.centre.at_least


def test_a_list_without_positions_is_told_nothing_of_them(write_list: WriteList) -> None:
    """A bare list answers weight and hook load without a word on what it never gave."""
    [pick] = pipeline.schedule([write_list([["B1", "A", 1, "IPE 300", "S275", 4000]])]).picks
    assert pick.centre is None
    assert not pick.findings


def test_only_a_centre_adds_its_least_size(write_list: WriteList) -> None:
    """A piece known by its centre reaches half its least size, and the pick is at least so large."""
    headings = ["Mark", "Assembly", "Quantity", "Section", "Material", "Length (mm)", "X (mm)", "Y (mm)", "Z (mm)"]
    [pick] = pipeline.schedule([write_list([["B1", "A", 1, "IPE 300", "S275", 4000, 0, 0, 0]], headings=headings)]).picks
    assert pick.centre is not None
    assert pick.centre.size == (150.0, 150.0, 150.0)
    assert pick.as_record()["size_at_least"] is True


def test_positions_stand_in_the_record_and_units_of_their_headings_count(write_list: WriteList) -> None:
    """Positions in metres; the member's own centre in the JSON, null where there is none."""
    import json

    from takeoff.reports import records

    headings = [
        "Mark",
        "Assembly",
        "Quantity",
        "Section",
        "Material",
        "Length (mm)",
        "X1 (m)",
        "Y1 (m)",
        "Z1 (m)",
        "X2 (m)",
        "Y2 (m)",
        "Z2 (m)",
    ]
    rows = [["B1", "A", 1, "IPE 300", "S275", 4000, 0, 0, 1, 4, 0, "1,000 mm"], ["B2", "A", 1, "IPE 300", "S275", 4000, *[None] * 6]]
    result = pipeline.schedule([write_list(rows, headings=headings)], job_from({"reading": {"decimal": "point"}}))
    members = json.loads(records.to_json(result))["members"]
    assert [m["position_mm"] for m in members] == [[2000.0, 0.0, 1000.0], None]
