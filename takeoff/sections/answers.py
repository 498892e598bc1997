"""What the reading of a section text works with: the sizes given, the answer or the refusal on its way out, and how
sizes are taken from the parsed text. Rank 2."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Literal

from takeoff.provenance import Source
from takeoff.sections import catalogue, tokens, tolerances
from takeoff.sections.catalogue import Table
from takeoff.sections.parse import Chain, Parsed
from takeoff.sections.section import Candidate, Form, Match, Section

Hollow = Literal["hot", "cold"]

#: Reasons that a list's other cells may settle: a text that names nothing, and timber whose sizes are too small for mm.
NO_SECTION = "names no section in the tables"
IN_CM = "such sizes are usual in cm"

#: From this length on, and beyond twice the section's largest size, one number more is the piece's length.
LEAST_LENGTH_MM = 500.0


class Refused(Exception):
    """The text is refused: reason, kind of finding, candidates."""

    def __init__(self, reason: str, kind: str = "unknown-section", candidates: tuple[Candidate, ...] = ()) -> None:
        super().__init__(reason)
        self.reason, self.kind, self.candidates = reason, kind, candidates


@dataclass(slots=True)
class Given:
    """Sizes from the list's own columns, mm, and the settings of the reading."""

    thickness: float | None
    width: float | None
    height: float | None
    diameter: float | None
    length: float | None
    hollow: Hollow
    material: str | None
    own: Table | None


@dataclass(slots=True)
class Answer:
    section: Section
    match: Match = "exact"
    length_mm: float | None = None
    notes: tuple[str, ...] = ()


def one_chain(p: Parsed, what: str) -> Chain:
    """The only row of sizes; more than one leaves numbers unexplained."""
    if len(p.chains) > 1:
        spare = ", ".join("x".join(t.raw for t in c.numbers) for c in p.chains[1:])
        raise Refused(f"numbers are left over beside {what}: {spare}")
    return p.chains[0] if p.chains else Chain()


def key_texts(chain: Chain) -> tuple[str, ...]:
    """Numbers as catalogue keys, in mm."""
    return tuple(t.text if t.unit in ("", "mm") else catalogue.canonical(f"{t.mm:.4f}") for t in chain.numbers)


def take_size(p: Parsed, *names: str) -> float | None:
    """A labelled size under any of these names, mm."""
    for name in names:
        if name in p.labels:
            return p.labels.pop(name).mm
    return None


def material_of(p: Parsed, given: Given) -> str | None:
    """The kind of material that decides tolerances: the row's, or the text's own word."""
    if given.material is not None:
        return given.material
    return "glass" if p.glass else "wood" if p.wood else "stone" if p.stone else "metal" if p.metal else None


def no_open(p: Parsed) -> None:
    token = p.open_number
    if token is not None:
        plain = token.raw.replace(",", "").replace(".", "")
        raise Refused(f"{token.raw} may mean {token.text} or {plain}", "ambiguous-section")


def sizes_of(chain: Chain, most: int, what: str) -> list[float]:
    if len(chain.numbers) > most:
        raise Refused(f"too many sizes for a {what}", "impossible-geometry")
    return chain.mm


def length_left(numbers: list[tokens.Token]) -> float | None:
    if not numbers:
        return None
    if len(numbers) > 1 or numbers[0].mm < LEAST_LENGTH_MM:
        raise Refused("numbers are left over: " + ", ".join(t.raw for t in numbers))
    return numbers[0].mm


def stated_mass(p: Parsed, text: str) -> Answer:
    """``Grating 34 kg/m2``, ``cable tray 4.2 kg/m``, ``bolt set 0.42 kg``: the mass itself is the section."""
    form, value = p.mass or ("each", 0.0)
    if value <= 0:
        raise Refused("the stated mass is not above zero", "impossible-geometry")
    factor, tolerance = tolerances.mass_factor("stated")
    forms: dict[str, tuple[Form, tuple[str, ...]]] = {
        "area mass": ("area mass", ("width", "length")),
        "length mass": ("length mass", ("length",)),
        "each": ("each", ()),
    }
    chosen, needs = forms[form]
    section = Section(
        designation=text[:60],
        family="Stated mass",
        shape="stated mass",
        form=chosen,
        source=Source("The list's own statement", "section text", "common practice"),
        dimensions_mm={},
        needs=needs,
        published_kg_per_m=value if form == "length mass" else None,
        kg_per_m2=value if form == "area mass" else None,
        kg_each=value if form == "each" else None,
        factor=factor,
        tolerance=tolerance,
    )
    p.labels.clear()
    return Answer(section, "exact")
