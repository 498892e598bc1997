"""Pipe by nominal size and schedule (ASME B36.10M, B36.19M), and by outside diameter and wall. Rank 2."""

from __future__ import annotations

from dataclasses import replace

from takeoff.sections import catalogue, nearest, tokens, tolerances
from takeoff.sections.answers import Answer, Given, Refused, length_left, one_chain
from takeoff.sections.hollow import read_hollow
from takeoff.sections.parse import Chain, Parsed
from takeoff.sections.rolled import look_up
from takeoff.sections.section import Candidate, Section


def read_pipe(p: Parsed, given: Given) -> Answer:
    """``PIPE DN100 SCH 40``, ``4" SCH 40S``, ``NPS 6 STD``, ``DN 50 x 4``: ASME B36.10M and B36.19M."""
    series = p.series or _lettered_series(p)
    if series and not p.schedule:
        return _threadable(series, p)
    chains = [c for c in p.chains if not c.bracketed]
    remark = [c for c in p.chains if c.bracketed]
    numbers = [t for c in chains for t in c.numbers]
    length = None
    if p.nominal is not None:
        system, size = p.nominal
        names = [f"{system}{nominal_inches(size) if system == 'NPS' else size.text}"]
        if not numbers and not p.schedule and len(remark) == 1:
            numbers, remark = list(remark[0].numbers), []  # DN 65 (76.1x3.6)
        outer = {float(row.cells["h_mm"]) for row in catalogue.find("PIPE", "", (names[0],))}
        if len(numbers) in (2, 3) and not p.schedule and any(abs(numbers[0].mm - d) <= 0.05 * d for d in outer):
            # DN 100 - 114.3x3.6: the size by its name and by its diameter
            p.nominal, p.chains = None, [Chain(numbers, [""] * (len(numbers) - 1))]
            return read_hollow(("CHS",), p, given, listed_only=False)
        wall = numbers.pop(0) if numbers and not p.schedule else None
        if wall is not None and any(len(c.numbers) == 1 for c in remark):
            raise Refused("a number in brackets is left over: a count, perhaps", "ambiguous-section")
    else:
        if not numbers and (label := p.labels.get("diameter")) is not None and label.unit == "in":
            numbers.append(p.labels.pop("diameter"))  # 3"Ø SCH 40
        if not numbers:
            raise Refused("a schedule without a pipe size", "unknown-section")
        size, wall = numbers.pop(0), None
        listed = [row for row in catalogue.find("PIPE", p.schedule, (size.text,)) if row.cells.get("published_lb_per_ft")]
        if listed and "pipe" in p.kinds and size.unit != "mm" and p.schedule in ("STD", "XS", "XXS"):
            return Answer(_pipe_tolerance(listed[0].section, p), "exact", length_left(numbers))
        names = (
            [f"NPS{nominal_inches(size)}"]
            if size.unit == "in"
            else [f"DN{size.text}"]
            if size.unit == "mm"
            else [f"DN{size.text}", f"NPS{nominal_inches(size)}"]
        )
    length = length_left(numbers)
    sizes = [name for name in names if catalogue.find("PIPE", "", (name,))]
    if not sizes:
        raise Refused(
            f"no pipe of nominal size {size.raw}", "unknown-section", _near_pipes(size.value if size.unit != "in" else size.value * 25)
        )
    if wall is not None:
        outside = {row.cells["h_mm"] for row in catalogue.find("PIPE", "", (sizes[0],))}
        rows = [row for d in sorted(outside) for row in catalogue.find("PIPE", "", (catalogue.canonical(d), wall.text))]
        if rows:
            return Answer(_pipe_tolerance(rows[0].section, p), "exact", length)
        p.nominal = None
        p.chains = [Chain([tokens.Token("num", catalogue.canonical(min(outside)), min(outside), float(min(outside))), wall])]
        return read_hollow(("CHS",), p, given, listed_only=False)
    rows = [row for name in sizes for row in catalogue.find("PIPE", p.schedule, (name,))] if p.schedule else []
    if not p.schedule or not rows:
        offered = tuple(Candidate(row.designation, 80.0) for name in sizes for row in catalogue.find("PIPE", "", (name,))[:8])
        raise Refused(
            "the schedule is missing" if not p.schedule else f"no schedule {p.schedule} for that size", "unknown-section", offered
        )
    if len(rows) > 1:
        offered = tuple(Candidate(row.designation, 90.0) for row in rows)
        raise Refused(f"{size.raw} may be a DN in mm or an NPS in inches", "ambiguous-section", offered)
    section = rows[0].section
    for chain in remark:
        wanted = [section.dimensions_mm["h"], section.dimensions_mm["tf"]]
        if len(chain.numbers) != 2 or any(abs(a - b) > 0.012 * b + 0.05 for a, b in zip(chain.mm, wanted, strict=True)):
            raise Refused(
                f"the sizes in brackets are not those of {section.designation}",
                "ambiguous-section",
                (Candidate(section.designation, 80.0),),
            )
    p.labels.pop("wall", None)
    return Answer(_pipe_tolerance(section, p), "exact", length)


def _lettered_series(p: Parsed) -> str:
    """The M or H beside EN 10255 or BS 1387: medium or heavy."""
    if not any("10255" in s or "1387" in s for s in p.standards):
        return ""
    return next((name for letter, name in (("M", "medium"), ("H", "heavy")) if letter in p.letters or letter.lower() in p.others), "")


def _threadable(series: str, p: Parsed) -> Answer:
    """``DN 50 medium``, ``2" heavy pipe``, ``EN 10255 DN50 M``: tube for threading by its nominal size and weight."""
    numbers = [t for c in p.chains for t in c.numbers]
    if p.nominal is not None:
        system, size = p.nominal
        if size.unit == "in":
            system = "NPS"
    elif numbers:
        size = numbers.pop(0)
        system = "NPS" if size.unit == "in" else "DN"
    else:
        raise Refused("a weight of pipe without its nominal size", "unknown-section")
    name = f"{system}{nominal_inches(size) if system == 'NPS' else size.text}"
    rows = catalogue.find("PIPE EN 10255", series, (name,))
    if not rows:
        offered = [row for row in catalogue.rows("PIPE EN 10255") if row.cells["series"] == series]
        wanted = size.value * (25 if system == "NPS" else 1)
        offered.sort(key=lambda row: abs(float(row.cells["dn"]) - wanted))
        near = tuple(Candidate(row.designation, 60.0) for row in offered[:3])
        raise Refused(f"no {series} pipe of nominal size {size.raw}", "unknown-section", near)
    return Answer(rows[0].section, "exact", length_left(numbers))


def nominal_inches(token: tokens.Token) -> str:
    """An NPS as its table writes it: whole inches, or inches and a fraction in sixteenths reduced."""
    from fractions import Fraction

    whole, rest = divmod(Fraction(token.value).limit_denominator(16), 1)
    return f"{whole}" if not rest else f"{whole}-{rest}" if whole else f"{rest}"


def _near_pipes(dn: float) -> tuple[Candidate, ...]:
    rows = [row for row in catalogue.rows("PIPE") if row.cells.get("schedule") == "40" and row.cells.get("dn")]
    rows.sort(key=lambda row: abs(float(row.cells["dn"]) - dn))
    return tuple(Candidate(row.designation, 60.0) for row in rows[: nearest.LIMIT])


def _pipe_tolerance(section: Section, p: Parsed) -> Section:
    """The mass tolerance of the delivery standard that the text names, beside the size standard."""
    said = "".join([*p.standards, *p.grades]).casefold().replace(" ", "")
    for name, rule in (("a106", "a106"), ("api5l", "api5l"), ("a312", "a312"), ("a53", "a53")):
        if name in said:
            factor, tolerance = tolerances.mass_factor(rule, section.dimensions_mm["h"])
            return replace(section, factor=factor, tolerance=tolerance)
    return section


def read_pipe_by_size(p: Parsed, given: Given) -> Answer:
    """``Pipe 219.1x8.18``: a listed pipe, else a circular hollow section, else a tube of any size."""
    chain = one_chain(p, "pipe")
    if len(chain.numbers) in (2, 3):
        rows = look_up(("PIPE",), "", chain.numbers[:2], None)
        if rows:
            return Answer(_pipe_tolerance(rows[0].section, p), "exact", length_left(chain.numbers[2:]))
    return read_hollow(("CHS",), p, given, listed_only=False)
