"""What a number format makes of a cell: the file holds 2.5, and a person sees ``2.5 m``, ``M007``, a dash or nothing. Rank 3.

A cell whose format prints letters is read as it is shown, but with all the digits that it holds: a format rounds. A cell that
shows another number than it holds (``12.5`` for 12500), or none, is disguised: where it is needed, its row is refused. The
codes are those of ECMA-376 part 1, 18.8.30 and 18.8.31 (recalled): sections for numbers above, below and at zero and for text.
"""

from __future__ import annotations

import math
import re
from collections.abc import Iterator
from dataclasses import dataclass, field
from decimal import ROUND_HALF_UP, Decimal
from functools import lru_cache

from takeoff.quantities import unit_of

#: no more of a code is read: programs allow so many letters
_MOST_CODE = 255
#: nor of a text that is shown for a number, or in place of a text
_MOST_SHOWN = 1_000
#: a code may ask for more decimals than a number has digits
_MOST_DECIMALS = 8
_ELAPSED = re.compile(r"h+|m+|s+", re.IGNORECASE)
_CONDITION = re.compile(r"(<=|>=|<>|<|>|=)\s*(-?\d{1,15}(?:\.\d{1,15})?)")
_FRACTION = re.compile(r"[?#0]+\s*/\s*[?#0-9]+")
_SHOWN_NUMBER = re.compile(r"[-−+]?\d(?:[\d.,' \u00a0\u202f]*\d)?")
_SHOWN_FRACTION = re.compile(r"(?:(\d{1,9})\s+)?(\d{1,6})/(\d{1,6})")
#: what a minus sign and the brackets of negative numbers are written with
_NEGATIVE = str.maketrans("", "", "-−()")
#: a spreadsheet program keeps and shows so many digits
_DIGITS = 15


class Shown(str):
    """The text that a cell shows where it holds a number or a shorter text."""

    __slots__ = ()


@dataclass(frozen=True, slots=True)
class Disguise:
    """A cell that does not show the number it holds. `how` says what its format does: a clause that follows "its number format"."""

    held: str
    shown: str
    how: str


@dataclass(slots=True)
class _Section:
    """One section of a format code. `before`, `after`: the texts around the number; `inside`: the integer part's digits and texts.

    kind : ``number``, ``text`` (it prints the cell's own text), ``words`` (texts alone), ``nothing`` or ``date``.
    """

    kind: str = "nothing"
    before: str = ""
    after: str = ""
    inside: list[str] = field(default_factory=list)
    decimals: int = 0
    whole_only: bool = True
    shows_zero: bool = True
    scale: Decimal = Decimal(1)
    condition: tuple[str, Decimal] | None = None


def is_plain(code: str) -> bool:
    """Whether numbers and texts under this code look like what they are (or are dates, which the reader knows)."""
    if code == "General":
        return True
    sections = _sections(code)
    if sections[0].kind == "date":
        return True
    numbers = sections[:3]
    texts = [s for s in sections if s.kind == "text"] + sections[3:]
    return (
        all(s.kind == "number" and s.scale == 1 and s.shows_zero and not _says(s, negative=n == 1) and s.inside.count("0") < 2
            for n, s in enumerate(numbers) if s.kind != "text")
        and not any((s.before + s.after).strip() or s.kind != "text" for s in texts)
    )


def _says(section: _Section, *, negative: bool) -> bool:
    text = section.before + section.after + "".join(t for t in section.inside if len(t) > 1)
    return bool((text.translate(_NEGATIVE) if negative else text).strip())


def as_shown(cell: float | str, code: str) -> Shown | Disguise | float | str | None:
    """A cell as its format shows it: the cell itself, its text as shown, None for a zero that is not shown, or its disguise."""
    sections = _sections(code)
    if isinstance(cell, str):
        return _text_shown(cell, sections)
    if not math.isfinite(cell):
        return cell
    held = digits_of(cell)
    section = _choose(sections, held)
    if section is None or section.kind in ("date", "text"):
        return cell
    if section.kind == "nothing":
        return None if held == 0 else Disguise(_plainly(held), "", "shows nothing")
    if section.kind == "words" or (held == 0 and not section.shows_zero):
        words = (section.before + section.after).strip()
        if held == 0 and not words:
            return None
        return Shown(words) if held == 0 else Disguise(_plainly(held), words, "shows words in place of the number")
    value = held * section.scale
    around = section.before, section.after
    if section.scale != 1:
        text = _join(around, _rounded(value, section.decimals), value < 0)
        if section.scale < 1 and unit_of(section.after) is not None:
            return Shown(_join(around, written(value), value < 0))
        return Disguise(_plainly(held), text, "shows another number than it holds")
    digits = _padded(value, section.inside) if section.whole_only and value == int(value) else written(value)
    text = _join(around, digits, value < 0)
    return cell if text == f"{held:f}" or text == written(value) else Shown(text)


def _text_shown(cell: str, sections: list[_Section]) -> Shown | Disguise | str:
    if len(sections) > 3 and sections[3].kind in ("nothing", "words"):
        return Disguise(cell, sections[3].before.strip(), "hides the text")
    last = sections[-1]
    if last.kind == "text" and (last.before.strip() or last.after.strip()):
        return Shown(f"{last.before}{cell}{last.after}".strip())
    return cell


def as_text_shows(held: float | str, shown: str) -> Shown | Disguise | float | str | None:
    """A cell beside the text that it shows, where the file keeps both: as `as_shown`."""
    text = " ".join(shown[:_MOST_SHOWN].split())
    if isinstance(held, str):
        return Shown(text) if text else Disguise(held, "", "hides the text")
    if not math.isfinite(held):
        return held
    value = digits_of(held)
    if not text:
        return None if value == 0 else Disguise(_plainly(value), "", "shows nothing")
    found = _SHOWN_FRACTION.search(text)
    if found and int(found.group(3)):
        parts = Decimal(found.group(1) or 0) + Decimal(found.group(2)) / Decimal(found.group(3))
        agree = abs(parts - abs(value)) <= Decimal(1) / Decimal(found.group(3))
    else:
        found = _SHOWN_NUMBER.search(text)
        if found is None:
            return Shown(text) if value == 0 else Disguise(_plainly(value), text, "shows words in place of the number")
        agree = _agrees(abs(value), found.group().lstrip("-−+"))
    before, after = text[:found.start()], text[found.end():]
    if value < 0:
        before, after = before.translate(_NEGATIVE), after.translate(_NEGATIVE)
    if not agree or "%" in after:
        try:
            if Decimal(text).is_finite() and abs(Decimal(text) - value) <= abs(value) / 100:
                return held  # in powers of ten
        except ArithmeticError:
            pass
        if agree or any(ch.isdigit() for ch in before + after):
            return Disguise(_plainly(value), text, "shows another number than it holds")
        shown_unit = unit_of(after)
        for scale in (Decimal(1000), Decimal(1_000_000)) if shown_unit else ():
            if _agrees(abs(value) / scale, found.group().lstrip("-−+")):
                return Shown(_join((before, after), written(value / scale), value < 0))
        return Disguise(_plainly(value), text, "shows another number than it holds")
    padded = found.group() if re.fullmatch(r"0\d+", found.group()) else written(value)
    return held if not (before + after).strip() and padded == written(value) else Shown(_join((before, after), padded, value < 0))


def _agrees(value: Decimal, token: str) -> bool:
    """Whether a shown number is this value, rounded as it may be. Its point or comma may be either sign."""
    digits = re.sub(r"[^\d]", "", token)
    places = {0} | {len(re.sub(r"[^\d]", "", token[at + 1:])) for at, ch in enumerate(token) if ch in ".,"}
    return any(abs(Decimal(digits).scaleb(-n) - value) <= Decimal("0.5000001").scaleb(-n) for n in places)


def digits_of(value: float) -> Decimal:
    """A stored number with the digits that a spreadsheet program keeps of it."""
    return Decimal(f"{value:.{_DIGITS}g}")


def _plainly(value: Decimal) -> str:
    text = f"{value:f}"
    return text if len(text) <= 2 * _DIGITS else f"{value:.6g}"


def written(value: Decimal) -> str:
    """A number with a decimal point that cannot be taken for one of thousands: three decimals get a fourth."""
    text = f"{abs(value):f}"
    whole, _, decimals = text.partition(".")
    decimals = decimals.rstrip("0")
    return f"{whole}.{decimals}{'0' * (len(decimals) == 3)}" if decimals else whole


def _rounded(value: Decimal, decimals: int) -> str:
    return f"{abs(value).quantize(Decimal(1).scaleb(-decimals), ROUND_HALF_UP):f}" if abs(value) < Decimal(10) ** 20 else f"{abs(value):f}"


def _padded(value: Decimal, inside: list[str]) -> str:
    """A whole number put into its places, from the right: 7 in ``000`` is 007, 12345 in ``00-000`` is 12-345."""
    digits, parts = list(f"{abs(int(value))}"), []
    places = sum(len(t) == 1 for t in inside)
    for token in reversed(inside):
        if len(token) > 1:
            if digits or "0" in inside[:inside.index(token)]:
                parts.append(token[1:])
            continue
        places -= 1
        if digits:
            parts.append("".join(digits) if places == 0 else digits[-1])
            digits = [] if places == 0 else digits[:-1]
        elif token == "0":
            parts.append("0")
    return "".join(reversed(parts)) or "0"


def _join(around: tuple[str, str], digits: str, negative: bool) -> str:
    before, after = around
    if negative:
        before, after = before.translate(_NEGATIVE), after.translate(_NEGATIVE)
    return " ".join(f"{'-' if negative else ''}{before}{digits}{after}".split())


# --- format codes ----------------------------------------------------------------------------------------------------


def _choose(sections: list[_Section], value: Decimal) -> _Section | None:
    """The section that a number is shown by; None where none fits (the cell then shows signs that mean nothing)."""
    numbers = [s for s in sections[:3] if s.kind != "text"] or sections[:1]
    if any(s.condition for s in numbers):
        for n, section in enumerate(numbers):
            if section.condition is None:
                if n == 1 and len(numbers) == 3 and value >= 0:
                    continue
                return section
            sign, limit = section.condition
            if {"<": value < limit, ">": value > limit, "=": value == limit, "<=": value <= limit, ">=": value >= limit,
                    "<>": value != limit}[sign]:
                return section
        return None
    if value < 0 and len(numbers) > 1:
        return numbers[1]
    return numbers[2] if value == 0 and len(numbers) > 2 else numbers[0]


@lru_cache(maxsize=1024)
def _sections(code: str) -> list[_Section]:
    sections: list[list[tuple[str, str]]] = [[]]
    for what, text in _tokens(code[:_MOST_CODE]):
        if what == "end":
            sections.append([])
        else:
            sections[-1].append((what, text))
    return [_section(tokens) for tokens in sections[:4]]


def _tokens(code: str) -> Iterator[tuple[str, str]]:
    """The parts of a code: literal texts, digit places, general, text, bracket, date letters, ends of sections."""
    at, end = 0, len(code)
    while at < end:
        ch = code[at]
        if code.startswith('"""', at):
            # An inch mark, as some programs write it.
            yield "literal", '"'
            at += 4 if code.startswith('""""', at) else 3
        elif ch == '"':
            close = code.find('"', at + 1)
            close = end if close < 0 else close
            yield "literal", code[at + 1:close]
            at = close + 1
        elif ch == "\\":
            yield "literal", code[at + 1:at + 2]
            at += 2
        elif ch in "_*":
            yield "literal", " "
            at += 2
        elif ch == "[":
            close = code.find("]", at + 1)
            close = end if close < 0 else close
            yield "bracket", code[at + 1:close]
            at = close + 1
        elif code[at:at + 7].casefold() == "general":
            yield "general", ""
            at += 7
        elif (fraction := _FRACTION.match(code, at)) is not None:
            yield "fraction", fraction.group()
            at = fraction.end()
        elif ch in "Ee" and code[at + 1:at + 2] in ("+", "-"):
            yield "power", ch
            at += 2
        elif ch in "0#?.,":
            yield "place", ch
            at += 1
        elif ch == "@":
            yield "text", ch
            at += 1
        elif ch == ";":
            yield "end", ch
            at += 1
        elif ch in "dDmMyYhHsS" or code[at:at + 2].upper() == "AM":
            yield "date", ch
            at += 1
        else:
            yield "literal", ch
            at += 1


def _section(tokens: list[tuple[str, str]]) -> _Section:
    section = _Section()
    numeric = [n for n, (what, _) in enumerate(tokens) if what in ("place", "general", "fraction", "power")]
    digits = [n for n in numeric if tokens[n][1] not in (".", ",")]
    places = "".join(tokens[n][1] for n in numeric if tokens[n][0] == "place")
    whole, point, decimals = places.partition(".")
    section.whole_only = bool(whole) and not point and all(tokens[n][0] == "place" for n in numeric)
    section.shows_zero = "0" in places or any(tokens[n][0] in ("general", "fraction") for n in numeric)
    section.decimals = min(sum(ch in "0#?" for ch in decimals), _MOST_DECIMALS)
    commas = len(whole) - len(whole.rstrip(",")) + len(decimals) - len(decimals.rstrip(","))
    section.scale = Decimal(1).scaleb(-3 * commas)
    for n, (what, text) in enumerate(tokens):
        if what == "bracket":
            found = _CONDITION.fullmatch(text)
            if found:
                section.condition = found.group(1), Decimal(found.group(2))
            elif text.startswith("$"):
                what, text = "literal", text[1:].rpartition("-")[0] if "-" in text else text[1:]  # noqa: PLW2901 - a currency sign
            elif _ELAPSED.fullmatch(text):
                section.kind = "date"
        if what == "literal":
            if "%" in text and tokens[n] == ("literal", "%"):
                section.scale *= 100
            if not digits or n < digits[0]:
                section.before += text
            elif n > digits[-1]:
                section.after += text
            elif text.strip() and section.whole_only:
                section.inside.append("\0" + text)
        elif what == "place" and text not in ".,":
            section.inside += [text] * section.whole_only
        elif what == "text":
            section.kind = "text"
            if section.after:
                section.before += section.after
                section.after = ""
        elif what == "date" and section.kind != "text":
            section.kind = "date"
    if section.kind == "text":
        at = next(n for n, (what, _) in enumerate(tokens) if what == "text")
        section.before = "".join(text for what, text in tokens[:at] if what == "literal")
        section.after = "".join(text for what, text in tokens[at + 1:] if what == "literal")
    elif section.kind != "date":
        section.kind = "number" if digits else "words" if section.before.strip() else "nothing"
    return section
