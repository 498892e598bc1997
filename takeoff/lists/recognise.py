"""Each distinct combination of section text and material text is recognised once, and serves every row that holds it.

The order: the section's own readings first; the material with the hint the section gives; then a section still open is
settled by the material. What stays open is refused with the readings offered.
"""

from __future__ import annotations

import itertools
import re
from collections.abc import Sequence
from dataclasses import dataclass, field, replace
from typing import TYPE_CHECKING

from takeoff import materials, sections
from takeoff.findings import Finding
from takeoff.names import normal_name

if TYPE_CHECKING:
    from takeoff.job import Job
    from takeoff.materials import Material, MaterialMatch, OwnTable
    from takeoff.sections import Section, SectionMatch, Table

_LENGTH_BEHIND = re.compile(
    r"(.{2,60}?)\s*(?:[x×*,;-]|\bl\s*=|\blength\b|\blg\b)?\s*(\d{1,6}(?:[.,]\d{1,3})?)\s*(mm|cm|m)(?:\s+long)?", re.IGNORECASE
)
#: a length in feet behind a section (``2 x 2 x 1/8 angle x 20'``)
_FEET_BEHIND = re.compile(r"(.{2,60}?)\s*[x×]\s*(\d{1,3}(?:\.\d{1,3})?)\s?'(?:[- ]?(\d{1,2}(?:\.\d{1,3})?)\")?")
_MM = {"mm": 1.0, "cm": 10.0, "m": 1000.0}
#: how the sections answer a word that is a family of theirs
_FAMILY = "names a family, not a size"
_SIZES_ONLY = re.compile(r"[\d.,x×*/'\"½¼¾⅛⅜⅝⅞Øø∅+~-]+(?:mm|cm|m|in|ft)?", re.IGNORECASE)

_WORD = re.compile(r"[^\W_][^\s,;()\[\]]*[^\W_]")
#: Kinds of material that sections are made of.
_SECTIONED = frozenset(("metal", "plastic", "composite", "elastomer", "other"))
#: Families of bars that are metal where nothing says another thing: C45 is also a class of timber.
_OF_METAL = frozenset(("HEX", "RD", "SQ"))
_REBAR_GRADE = re.compile(r"40|60|75|80|100|280|300|420|520|550")
#: Ordinary hull steels, and shapes that are steel beside one.
_HULL_GRADES = frozenset("ABDE")
_STEEL_SHAPES = frozenset(("PL", "FL", "RD", "SQ", "L", "T"))
_STIFFNESS = re.compile(r"\d\.\d\s?E", re.IGNORECASE)
_ENGINEERED = re.compile(r"\b(?:LVL|PSL|LSL|glulam)\b", re.IGNORECASE)
#: A metal of the section text is another than the column's where it is heavier by so much.
_HEAVIER = 1.05


@dataclass(slots=True)
class Recognition:
    """One distinct (section text, material text): what it is, or why it is not known.

    text_length_mm : a piece length carried by the section text.
    section_refusal, material_refusal : why a mass cannot be computed, where it cannot; a stated mass may still serve.
    notes : findings of every row with these texts, with the field they are about.
    assumed : something here was inferred.
    """

    section: Section | None = None
    material: Material | None = None
    section_match: str | None = None
    material_match: str | None = None
    text_length_mm: float | None = None
    section_refusal: Finding | None = None
    material_refusal: Finding | None = None
    notes: list[tuple[Finding, str]] = field(default_factory=list)
    assumed: bool = False


class Recogniser:
    """Recognises texts under a job's settings. `strict` refuses similar names instead of assuming them."""

    def __init__(self, job: Job, own: OwnTable | None = None, own_sections: Table | None = None, strict: bool = False) -> None:
        self.job, self.own, self.own_sections, self.strict = job, own, own_sections, strict
        self._materials = {normal_name(k): v for k, v in job.names.materials.items()}
        self._sections = {normal_name(k): v for k, v in job.names.sections.items()}
        self._metals: dict[str, tuple[str, float, str]] = {}

    def all(
        self, section_texts: Sequence[str | None], material_texts: Sequence[str | None], headings: Sequence[str | None]
    ) -> tuple[list[Recognition], list[int]]:
        """The distinct recognitions, and for each row which one is its own. `headings`: of each row's section column."""
        order: dict[tuple[str | None, str | None, str | None], int] = {}
        codes = [order.setdefault(key, len(order)) for key in zip(section_texts, material_texts, headings, strict=True)]
        return [self.one(*key) for key in order], codes

    def one(self, section_text: str | None, material_text: str | None, heading: str | None = None) -> Recognition:
        """What one pair of texts stands for, under a heading of the section column."""
        found = Recognition()
        wanted_section = (self._sections.get(normal_name(section_text)) if section_text else None) or section_text
        wanted_material = self._material_text(material_text, found)
        section = self._read_section(wanted_section, heading, None)
        if wanted_material is None:
            wanted_material = self._named_in(wanted_section, section, found)
        material = self._look_up(wanted_material, section)
        if material is not None and material.material is not None:
            # The kind settles an open reading, and which thickness and size tolerances apply.
            section = self._read_section(wanted_section, heading, material.material.kind)
        self._take_section(section, section_text, found)
        self._take_material(material, wanted_material, found)
        self._compare(wanted_section, section, wanted_material, found)
        return found

    def _compare(self, text: str | None, section: SectionMatch | None, material_text: str | None, found: Recognition) -> None:
        """Refuse a row whose section text names a heavier metal than its material column (``PL 10 S355``, aluminium), or whose
        rolled steel section is told in a material that is not rolled, drawn or moulded (``HEA 200``, oak)."""
        material = found.material
        if material is None or found.section is None or not text or not material_text or found.section.form == "each":
            return
        rolled = found.section.is_steel_standard and found.section.family not in ("L", "T")
        if rolled and material.kind not in _SECTIONED:
            message = f"{found.section.designation} is a steel section, and the material is {material.name}"
        else:
            metals = [self._metal(w) for w in _WORD.findall(text[:80]) if not _SIZES_ONLY.fullmatch(w)]
            heaviest = max(metals, default=("", 0.0, ""), key=_by_density)
            if heaviest[1] <= material.density.high * _HEAVIER or _is_of_section(heaviest[2], section):
                return
            message = f"the section text names {heaviest[0]}, and the material is {material.name}"
        found.material = None
        right = "one material for the row"
        found.material_refusal = Finding("refused", "ambiguous-material", message, read=material_text, right=right)

    def _metal(self, word: str) -> tuple[str, float, str]:
        """The metal that one word of a section text names, with its density (kg/m³) and the word; none is no metal."""
        known = self._metals.get(word)
        if known is None:
            known = ("", 0.0, word)
            if len(word) > 2:  # shorter words are letters of sections
                match = materials.lookup(word, own=self.own)
                exact = match.material is not None and match.match in ("exact", "alias") and match.material.kind == "metal"
                if exact and match.material is not None and match.material.density.nominal is not None:
                    known = (match.material.name, match.material.density.nominal, word)
            self._metals[word] = known
        return known

    def _read_section(self, text: str | None, heading: str | None, kind: str | None) -> SectionMatch | None:
        if text is None:
            return None
        found = sections.read(text, hollow=self.job.names.hollow, material_kind=kind, heading=heading, own=self.own_sections)
        behind = _LENGTH_BEHIND.fullmatch(text) if found.section is None and len(text) <= 80 else None
        feet = _FEET_BEHIND.fullmatch(text) if found.section is None and len(text) <= 80 else None
        if feet is not None:
            front = sections.read(feet.group(1), hollow=self.job.names.hollow, material_kind=kind, heading=heading, own=self.own_sections)
            if front.section is not None and front.length_mm is None and "length" in front.section.needs:
                return replace(front, query=text, length_mm=float(feet.group(2)) * 304.8 + float(feet.group(3) or 0.0) * 25.4)
        if behind is None:
            return found
        # A section with the piece's length behind it (``SHS 40x40x3 x 1200mm``), only where that length has its unit.
        front = sections.read(behind.group(1), hollow=self.job.names.hollow, material_kind=kind, heading=heading, own=self.own_sections)
        if front.section is None or front.length_mm is not None or "length" not in front.section.needs:
            return found
        length = float(behind.group(2).replace(",", ".")) * _MM[behind.group(3).lower()]
        # A size smaller than one in front of it is rather a thickness (``Form panel 150x50 spruce 22 mm``).
        if length < max((float(n.replace(",", ".")) for n in re.findall(r"\d{1,6}(?:[.,]\d{1,3})?", behind.group(1))), default=0.0):
            return found
        return replace(front, query=text, length_mm=length)

    def _named_in(self, text: str | None, section: SectionMatch | None, found: Recognition) -> str | None:
        """A material named in the section text (``3/4" plywood``, ``30x30x2 S235 square tube``), where just one is."""
        if not text or len(text) > 80:
            return None
        hint = section.section.material_hint if section and section.section else None
        named: dict[str, str] = {}
        words = [w for w in re.split(r"[\s,;()]+", text) if len(w) > 1 and not _SIZES_ONLY.fullmatch(w)]
        parts = [part for word in words if "-" in word for part in word.split("-") if len(part) > 2 and part.isalpha()]
        for word in (" ".join(words), *(" ".join(pair) for pair in itertools.pairwise(words)), *words, *parts):
            match = materials.lookup(word, hint=hint, own=self.own)
            if match.material is not None and _is_of_section(word, section):
                continue
            if match.material is not None and match.match in ("exact", "alias") and any(ch.isalpha() for ch in word):
                named.setdefault(match.material.key, word)
                if " " in word:
                    break
        if len(named) != 1:
            return None
        word = next(iter(named.values()))
        found.notes.append(
            (Finding("note", "material-from-section", f"the material stands in the section text: {word}", read=text), "section")
        )
        return word

    def _material_text(self, text: str | None, found: Recognition) -> str | None:
        if text:
            return self._materials.get(normal_name(text), text)
        if self.job.reading.material:
            found.notes.append(
                (
                    Finding(
                        "note", "material-from-caption", f"no material in the row: {self.job.reading.material!r}, as the job file says"
                    ),
                    "material",
                )
            )
            return self.job.reading.material
        return None

    def _look_up(self, text: str | None, section: SectionMatch | None) -> MaterialMatch | None:
        if text is None:
            return None
        known = section.section if section else None
        hint = known.material_hint if known else None
        if known is not None and hint is None and known.family in _OF_METAL:
            hint = "metal"
        found = materials.lookup(text, hint=hint, own=self.own)
        if found.match == "none" and section is not None:
            spelled = _grade_beside(text, known, section.query)
            again = materials.lookup(spelled, hint=hint, own=self.own) if spelled is not None else found
            if again.material is not None:
                return replace(again, query=text, match="similar")  # assumed, and said
        return found

    def _take_section(self, match: SectionMatch | None, text: str | None, found: Recognition) -> None:
        if match is None:
            found.section_refusal = Finding(
                "refused",
                "missing-size",
                "the row names no section or shape",
                right="a section such as UB 203x133x25, PL 10 or Block 600x300x200",
            )
            return
        found.section_match = match.match
        offered = ", ".join(c.designation for c in match.candidates[:4]) or None
        if match.section is None:
            found.section_refusal = Finding(
                "refused",
                match.kind or "unknown-section",
                match.reason or "the section is not known",
                read=text,
                right=f"one of {offered}" if offered else "a designation in the tables, the sizes in figures, or a unit mass",
            )
            return
        if match.match in ("similar", "ambiguous"):
            if self.strict and match.match == "similar":
                found.section_refusal = Finding(
                    "refused",
                    "similar-section",
                    "only similar to a known section, and --strict was asked",
                    read=text,
                    right=f"one of {offered}" if offered else None,
                )
                return
            found.assumed = True
            kind = "similar-section" if match.match == "similar" else "ambiguous-section"
            found.notes.append(
                (
                    Finding(
                        "assumed",
                        kind,
                        f"taken as {match.section.designation}" + (f": {match.reason}" if match.reason else ""),
                        read=text,
                        right=f"one of {offered}" if offered else None,
                    ),
                    "section",
                )
            )
        found.section = match.section
        found.text_length_mm = match.length_mm
        for note in match.notes:
            found.notes.append((Finding("note", "section-note", note, read=text), "section"))
        if match.section.hollow_standard_assumed:
            found.notes.append(
                (
                    Finding(
                        "note",
                        "hollow-standard-assumed",
                        "a hollow section without a standard: hot finished (EN 10210-2) is nominal, light reaches down to cold formed",
                        right='EN 10219 in the text, or [names] hollow = "cold" in the job file',
                    ),
                    "section",
                )
            )

    def _take_material(self, match: MaterialMatch | None, text: str | None, found: Recognition) -> None:
        if match is None:
            if found.section is not None and found.section.is_steel_standard:
                found.material = materials.by_key(materials.DEFAULT_STEEL)
                found.material_match = "none"
                found.assumed = True
                found.notes.append(
                    (
                        Finding(
                            "assumed",
                            "material-absent",
                            "no material is named: taken as carbon steel, since the section's standard is a steel standard",
                            right="a material in the row",
                        ),
                        "material",
                    )
                )
            else:
                found.material_refusal = Finding(
                    "refused",
                    "material-absent",
                    "no material is named",
                    right="a material in the row, or [reading] material in the job file",
                )
            return
        found.material_match = match.match
        offered = ", ".join(c.name for c in match.candidates[:4]) or None
        if match.match == "ambiguous" or match.material is None:
            kind = "ambiguous-material" if match.match == "ambiguous" else "unknown-material"
            message = "the text names several materials" if match.match == "ambiguous" else "the material is not known"
            right = f"one of {offered}" if offered else "a material of the table"
            found.material_refusal = Finding("refused", kind, message, read=text, right=right)
            return
        if match.match == "similar":
            if self.strict:
                found.material_refusal = Finding(
                    "refused",
                    "similar-material",
                    "only similar to a known material, and --strict was asked",
                    read=text,
                    right=f"one of {offered}" if offered else None,
                )
                return
            found.assumed = True
            found.notes.append(
                (
                    Finding(
                        "assumed",
                        "similar-material",
                        f"taken as {match.material.name}",
                        read=text,
                        right=f"one of {offered}" if offered else None,
                    ),
                    "material",
                )
            )
        if match.material.density.nominal is None:
            found.material_refusal = Finding(
                "refused",
                "no-density",
                "no source gives this material one density",
                read=text,
                right="a density, in a row of your own table ([own] materials)",
            )
            return
        if match.material.own:
            found.notes.append((Finding("note", "own-material", "the density is from your own table", read=text), "material"))
        found.material = match.material


def _grade_beside(text: str, section: Section | None, section_text: str) -> str | None:
    """A material that only its section makes plain: 60 beside a reinforcing bar, 2.0E beside LVL, hull steel A beside steel."""
    plain = text.strip()
    if section is not None and section.family == "REBAR" and _REBAR_GRADE.fullmatch(plain):
        return f"Grade {plain}"
    if section is not None and plain in _HULL_GRADES and (section.material_hint == "metal" or section.family in _STEEL_SHAPES):
        return "S235"
    engineered = _ENGINEERED.search(section_text)
    if engineered and _STIFFNESS.fullmatch(plain):
        return engineered.group(0)
    return None


def _by_density(metal: tuple[str, float, str]) -> float:
    return metal[1]


def _is_of_section(word: str, section: SectionMatch | None) -> bool:
    """Whether a word is the section's own name: IPE is also a wood, and H20 also an aluminium."""
    if section is None or section.section is None:
        return False
    alone = sections.read(word)
    return alone.section == section.section or alone.reason.endswith(_FAMILY)
