"""Solids against a general mesh library: volume and centroid within 0.1 % for fine meshes; arcs and hanging cables by their laws."""

from __future__ import annotations

import itertools
import math

import numpy as np
import pytest
import trimesh
from hypothesis import given
from hypothesis import strategies as st

from takeoff.errors import DataError
from takeoff.sections import bodies, columns, read
from takeoff.sections.section import Section

FINE = 240


def _section(text: str) -> Section:
    match = read(text)
    assert match.section is not None, (text, match.reason)
    return match.section


def _turned(profile: list[tuple[float, float]]) -> trimesh.Trimesh:
    """A body of revolution from its profile (radius, height), bottom to top."""
    return trimesh.creation.revolve(np.array(profile), sections=FINE)


def _between(bottom: list[tuple[float, float, float]], top: list[tuple[float, float, float]]) -> trimesh.Trimesh:
    """A body between two convex faces of as many corners each, both counter-clockwise seen from the top."""
    n = len(bottom)
    faces = [(0, k + 1, k) for k in range(1, n - 1)] + [(n, n + k, n + k + 1) for k in range(1, n - 1)]
    for k in range(n):
        after = (k + 1) % n
        faces += [(k, after, n + after), (k, n + after, n + k)]
    return trimesh.Trimesh(vertices=np.array(bottom + top), faces=np.array(faces), process=False)


def _upright(face: list[tuple[float, float]], height: float) -> trimesh.Trimesh:
    return _between([(x, y, 0.0) for x, y in face], [(x, y, height) for x, y in face])


def _arc(radius: float, centre: tuple[float, float], start: float, stop: float, steps: int = 200) -> list[tuple[float, float]]:
    return [(max(centre[0] + radius * math.cos(a), 0.0), centre[1] + radius * math.sin(a)) for a in np.linspace(start, stop, steps)]


def _torispherical(diameter: float, crown: float, knuckle: float) -> list[tuple[float, float]]:
    """Profile of the space a head encloses, from the tangent plane to the apex."""
    centre = diameter / 2 - knuckle
    turn = math.asin(centre / (crown - knuckle))
    drop = math.sqrt((crown - knuckle) ** 2 - centre**2)
    return [(0.0, 0.0), *_arc(knuckle, (centre, 0.0), 0.0, math.pi / 2 - turn), *_arc(crown, (0.0, -drop), math.pi / 2 - turn, math.pi / 2)]


def _ellipse(a: float, b: float) -> list[tuple[float, float]]:
    return [(0.0, 0.0), *((max(a * math.cos(t), 0.0), b * math.sin(t)) for t in np.linspace(0, math.pi / 2, 300))]


def _sector(inner: float, outer: float, angle: float, width: float) -> trimesh.Trimesh:
    """An arch stone as thin wedges side by side."""
    parts = []
    edges = np.linspace(math.pi / 2 - angle / 2, math.pi / 2 + angle / 2, 121)
    for a, b in itertools.pairwise(edges):
        corners = ((inner, a), (outer, a), (outer, b), (inner, b))
        parts.append(_upright([(r * math.cos(t), r * math.sin(t)) for r, t in corners], width))
    return trimesh.util.concatenate(parts)


def _rectangle(a: float, b: float, at: float = 0.0, z: float = 0.0) -> list[tuple[float, float, float]]:
    return [(at, at, z), (at + a, at, z), (at + a, at + b, z), (at, at + b, z)]


MESHES = [
    ("Cylinder Ø300x1200", lambda: _turned([(0, 0), (150, 0), (150, 1200), (0, 1200)]), 150, 150),
    ("Ring Ø600/400x50", lambda: _turned([(200, 0), (300, 0), (300, 50), (200, 50), (200, 0)]), 300, 300),
    ("Cone Ø600x900", lambda: _turned([(0, 0), (300, 0), (0, 900)]), 300, 300),
    ("Cone Ø600/400x900", lambda: _turned([(0, 0), (300, 0), (200, 900), (0, 900)]), 300, 300),
    ("Sphere Ø500", lambda: _turned(_arc(250, (0, 0), -math.pi / 2, math.pi / 2, 400)).apply_translation((0, 0, 250)), 250, 250),
    ("Dome R500 H100", lambda: _turned([(0, 0), *_arc(500, (0, -400), math.asin(0.8), math.pi / 2)]), 300, 300),
    ("Pyramid 600x500/400x300x900", lambda: _between(_rectangle(600, 500), _rectangle(400, 300, 100, 900)), 0, 0),
    ("Pyramid 600x500x900", lambda: _between(_rectangle(600, 500), [(300.0, 250.0, 900.0)] * 4), 0, 0),
    ("Triangle 100x150x10", lambda: _upright([(0, 0), (100, 0), (0, 150)], 10), 0, 0),
    ("Wedge 600x300/240x400", lambda: _upright([(0, 0), (600, 0), (600, 240), (0, 300)], 400), 0, 0),
    (
        "Arch stone R3500 D450 A40 W600",
        lambda: _sector(3500, 3950, math.radians(40), 600),
        3950 * math.sin(math.radians(20)),
        -3500 * math.cos(math.radians(20)),
    ),
]


@pytest.mark.parametrize(("text", "mesh", "x", "y"), MESHES, ids=[m[0] for m in MESHES])
def test_solids_agree_with_a_mesh_library(text, mesh, x, y) -> None:  # type: ignore[no-untyped-def]
    """Volume, surface and centroid of each solid; the mesh's origin lies at (x, y) of the enclosing box's corner."""
    section, body = _section(text), mesh()
    assert section.volume_m3 == pytest.approx(abs(body.volume) * 1e-9, rel=1e-3)
    assert section.centroid_mm is not None
    assert section.centroid_mm == pytest.approx(body.center_mass + np.array([x, y, 0]), abs=1e-3 * max(body.extents))
    if not text.startswith("Arch"):
        assert section.surface_m2 == pytest.approx(body.area * 1e-6, rel=1e-3)


@pytest.mark.parametrize(
    ("kind", "profile", "inner"),
    [
        ("Torispherical", _torispherical(2000, 2000, 200), _torispherical(1980, 1990, 190)),
        ("Korbbogen", _torispherical(2000, 1600, 308), _torispherical(1980, 1590, 298)),
        ("Elliptical", _ellipse(1000, 500), _ellipse(990, 490)),
        ("Hemispherical", _ellipse(1000, 1000), _ellipse(990, 990)),
    ],
)
def test_heads_agree_with_a_mesh_library(kind: str, profile: list[tuple[float, float]], inner: list[tuple[float, float]]) -> None:
    """The metal of a dished head is the outer body less the inner one; its centroid likewise."""
    outside, inside = _turned(profile), _turned(inner)
    metal = abs(outside.volume) - abs(inside.volume)
    section = _section(f"{kind} head D2000 T10")
    assert section.volume_m3 == pytest.approx(metal * 1e-9, rel=1e-3)
    height = (abs(outside.volume) * outside.center_mass[2] - abs(inside.volume) * inside.center_mass[2]) / metal
    assert section.centroid_mm is not None
    assert section.centroid_mm[2] == pytest.approx(height, rel=2e-3)


def test_a_skirt_adds_its_cylinder() -> None:
    """A straight skirt is a piece of tube."""
    plain, skirted = _section("Torispherical head D2000 T10"), _section("Torispherical head D2000 T10 S40")
    assert plain.volume_m3 is not None
    assert skirted.volume_m3 == pytest.approx(plain.volume_m3 + math.pi * 10 * 1990 * 40e-9)


def test_a_gusset_is_half_its_rectangle_and_heavy_covers_the_whole() -> None:
    """A triangle weighs half; since corners are often left on, heavy is the rectangle's."""
    gusset = _section("Gusset 100x100x5")
    assert gusset.volume_m3 == pytest.approx(25_000e-9)
    assert gusset.factor.heavy >= 2


@pytest.mark.parametrize(
    ("text", "sizes"),
    [
        ("Cylinder Ø300x1200", {"diameter_mm": 300.0, "length_mm": 1200.0}),
        ("Sphere Ø500", {"diameter_mm": 500.0}),
        ("Triangle 100x150x10", {"length_mm": 100.0, "width_mm": 150.0, "thickness_mm": 10.0}),
    ],
)
def test_bodies_take_their_sizes_from_columns(text: str, sizes: dict[str, float]) -> None:
    """The word alone and the sizes in columns give what the whole text gives."""
    one = columns(_section(text), 1)
    other = columns(_section(text.split(maxsplit=1)[0]), 1, **{k: np.array([v]) for k, v in sizes.items()})
    for key in ("volume_mm3", "surface_mm2", "light_factor", "heavy_factor"):
        assert one[key] == pytest.approx(other[key]), key


@given(st.floats(500, 50_000), st.floats(0.1, 350))
def test_arcs_by_radius_and_by_chord_agree(radius: float, angle: float) -> None:
    """The chord and rise of an arc give back its length."""
    half = math.radians(angle) / 2
    chord, rise = 2 * radius * math.sin(half), radius * (1 - math.cos(half))
    straight = bodies.arc_length(radius=radius, angle_deg=angle)
    assert bodies.arc_length(chord=chord, rise=rise) == pytest.approx(straight, rel=1e-6)


@given(st.floats(1000, 200_000), st.floats(0.0005, 2.0), st.floats(0.1, 50))
def test_catenary_laws(span: float, share: float, kg_per_m: float) -> None:
    """Of a catenary: (length/2)² = sag² + 2 a sag; the ends pull half the weight up; sag at mid-span is the sag asked for."""
    sag = span * share
    hung = bodies.catenary(span, sag, kg_per_m)
    weight = kg_per_m * 9.80665 / 1e6
    a = hung.lowest_kN / weight
    assert (hung.length_mm / 2) ** 2 == pytest.approx(sag**2 + 2 * a * sag, rel=1e-6)
    assert hung.end_kN**2 == pytest.approx(hung.lowest_kN**2 + (weight * hung.length_mm / 2) ** 2, rel=1e-6)
    assert a * (math.cosh(span / (2 * a)) - 1) == pytest.approx(sag, rel=1e-4)


def test_a_bent_member_keeps_its_section() -> None:
    """A beam bent to a quarter circle: the same kg/m, the arc's length."""
    match = read("UB 203x133x25 bent R5000 A90")
    assert match.section == _section("UB 203x133x25")
    assert match.length_mm == pytest.approx(5000 * math.pi / 2, abs=1e-3)


@pytest.mark.parametrize(
    ("call", "message"),
    [
        (lambda: bodies.ring(400, 600, 50), "inner diameter"),
        (lambda: bodies.pyramid((400, 400), (600, 600), 900), "no larger than its base"),
        (lambda: bodies.cap(500, 1200), "higher than its sphere"),
        (lambda: bodies.head("torispherical", 2000, 600), "does not fit"),
        (lambda: bodies.arc_length(radius=500), "needs its radius"),
        (lambda: bodies.catenary(1000, 6000, 1), "more than five spans"),
        (lambda: bodies.cylinder(-1, 10), "not a size"),
    ],
)
def test_impossible_bodies(call, message: str) -> None:  # type: ignore[no-untyped-def]
    """Sizes that make no body are refused with the reason."""
    with pytest.raises(DataError, match=message):
        call()
