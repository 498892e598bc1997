"""Cuts a section text into numbers, words and signs; knows decimal commas, fractions and units, nothing of sections. Rank 2.

One pass by one pattern whose branches cannot overlap, so the time grows with the length only. Texts beyond
`LONGEST` characters are no section names and are not cut at all.
"""

from __future__ import annotations

import re
import unicodedata
from typing import NamedTuple

from takeoff.names import plain_text

#: Longer texts are refused unread: no designation needs more.
LONGEST = 240

MM_PER = {"mm": 1.0, "cm": 10.0, "m": 1000.0, "in": 25.4, "ft": 304.8}

_UNIT_WORDS = {
    "mm": "mm",
    "millimetre": "mm",
    "millimeter": "mm",
    "millimetres": "mm",
    "millimeters": "mm",
    "cm": "cm",
    "m": "m",
    "metre": "m",
    "meter": "m",
    "in": "in",
    "inch": "in",
    "inches": "in",
    "zoll": "in",
    "pouce": "in",
    "pouces": "in",
    "pulgada": "in",
    "pulgadas": "in",
    "tum": "in",
    '"': "in",
    "ft": "ft",
    "feet": "ft",
    "foot": "ft",
    "'": "ft",
}
#: Cyrillic and Greek capitals and small letters that look like Latin ones.
_LOOKALIKES = str.maketrans("АВЕКМНОРСТХУавекмнорстхуΑΒΕΗΙΚΜΝΟΡΤΧΥΖ", "ABEKMHOPCTXYabekmhopctxyABEHIKMNOPTXYZ")
_SIGNS = str.maketrans(
    {
        "×": "x",
        "✕": "x",
        "✖": "x",
        "⨯": "x",
        "∗": "*",
        "·": "*",
        "⋅": "*",
        "–": "-",
        "—": "-",
        "−": "-",
        "‐": "-",
        "‑": "-",
        "‒": "-",
        "”": '"',
        "“": '"',
        "″": '"',
        "„": '"',
        "’": "'",
        "‘": "'",
        "′": "'",
        "⁄": "/",
        "∕": "/",
        "∅": "Ø",
        "⌀": "Ø",
        "Φ": "Ø",
        "φ": "Ø",
        "\\": " ",
        "∟": " L",
        "∠": " L",
        "□": " box",
        "▢": " box",
        "◻": " box",
    }
)
#: Ways of writing that one look at the whole text must settle, behind what gives them away: words with a figure or a
#: stroke in them, and the open bracket that stands for a channel in Asian lists (``[100x50x5x7.5``, ``[20a``).
_SPELT = (
    (re.compile(r"\b(?:vkt|4-?kt|vierkant|quadrat)\.?[\s-]{1,3}rohr|\bvkt\.?rohr", re.IGNORECASE), "vierkantrohr"),
    (re.compile(r"\b(?:rechteck|re)\.?[\s-]{1,3}rohr", re.IGNORECASE), "rechteckrohr"),
    (re.compile(r"\b(?:rund|rd)\.?[\s-]{1,3}rohr|\brd\.?rohr", re.IGNORECASE), "rundrohr"),
    (re.compile(r"\b4-?kt\b", re.IGNORECASE), "vkt"),
    (re.compile(r"\b6-?kt\b", re.IGNORECASE), "skt"),
    (re.compile(r"\ball[ -]thread", re.IGNORECASE), "allthread"),
    (re.compile(r"\b([oi])/d\b", re.IGNORECASE), r"\1d"),
    (re.compile(r"(?:\bdouble extra[ -](?:strong|heavy)\b|xx-?\s?(?:strong|heavy)\b)", re.IGNORECASE), " xxs"),
    (re.compile(r"(?:\bextra[ -](?:strong|heavy)\b|x-?\s?(?:strong|heavy)\b)", re.IGNORECASE), " xs"),
    (re.compile(r"\bt&g\b", re.IGNORECASE), "tg"),
    (re.compile(r"\bosb\s?/?\s?[0-4](?=\s+(?!mm|cm|in\b)[^x*\s\"]|$)", re.IGNORECASE), "osb"),
    (re.compile(r"(?<![\d.])(\d{2,3})\.(\d{2,3})\.(\d{1,2})(?![\d.])"), r"\1x\2x\3"),
    (re.compile(r"^\[\s?-?\s?(?=\d[^\]]*$)"), "gbc "),
)
_VULGAR = {
    "½": "1/2",
    "¼": "1/4",
    "¾": "3/4",
    "⅛": "1/8",
    "⅜": "3/8",
    "⅝": "5/8",
    "⅞": "7/8",
    "⅓": "1/3",
    "⅔": "2/3",
}
_SPELT_SIGNS = ("kt", "rohr", "/d", "strong", "heavy", "thread", "osb", "t&g")
_SCAN = re.compile(r"\d+(?:[.,]\d+)*|[^\W\d_]+|\S")
_DENOMINATORS = frozenset((2, 4, 8, 16, 32, 64))
_SEPARATORS = frozenset(("x", "*", "/", "|", "by"))


class Token(NamedTuple):
    """kind: ``num``, ``word``, ``sep`` (between sizes) or ``mark``.

    text : canonical number, folded word, or sign. `value` and `unit` ("" if bare) belong to a number; `open` marks a
    number whose comma or point may part decimals or thousands; `glued` that nothing stood between it and the last one.
    """

    kind: str
    text: str
    raw: str
    value: float = 0.0
    unit: str = ""
    open: bool = False
    glued: bool = False

    @property
    def mm(self) -> float:
        """In mm, a bare number taken as mm."""
        return round(self.value * MM_PER[self.unit or "mm"], 6)


def fold(word: str) -> str:
    """A word in small letters without accents."""
    if word.isascii():
        return word.lower()
    bare = "".join(c for c in unicodedata.normalize("NFKD", word.casefold()) if not unicodedata.combining(c))
    return bare.replace("ø", "o").replace("ł", "l").replace("ß", "ss").replace("đ", "d")


def clean(text: str) -> str:
    """The text with typographic signs made plain; look-alike letters made Latin."""
    for sign, plain in _VULGAR.items():
        if sign in text:
            text = text.replace(sign, "-" + plain if sign in text[1:] and text[text.index(sign) - 1].isdigit() else " " + plain)
    text = plain_text(text.translate(_SIGNS)).translate(_SIGNS).translate(_LOOKALIKES).replace("''", '"')
    small = text[:LONGEST].lower()
    if text[:1] == "[" or small.count(".") > 1 or any(sign in small for sign in _SPELT_SIGNS):
        text = text[: LONGEST + 1]
        for pattern, plain in _SPELT:
            text = pattern.sub(plain, text)
    return text.strip()


def canonical(text: str) -> str:
    """A plain decimal number's one form; nothing is rounded."""
    text = text.lstrip("0") or "0"
    if "." in text:
        text = text.rstrip("0").rstrip(".")
        if text.startswith("."):
            text = "0" + text
    return text or "0"


def _number(raw: str) -> tuple[str, bool] | None:
    """Canonical text and whether it is open; None where the groups make no number."""
    groups = re.split(r"[.,]", raw)
    signs = [c for c in raw if c in ".,"]
    if len(raw) > 12:
        return None
    if not signs:
        return canonical(raw), False
    if len(signs) == 1:
        is_open = len(groups[1]) == 3 and 1 <= len(groups[0]) <= 3 and groups[0] != "0"
        if is_open and signs[0] == ".":
            # 9.525 and 28.575 are fractions of an inch in mm, and no thousands.
            parts = float(f"{groups[0]}.{groups[1]}") / 25.4 * 64
            is_open = abs(parts - round(parts)) > 0.002
        return canonical(f"{groups[0]}.{groups[1]}"), is_open
    # 1,200.5 or 1.200,5: the last, different sign parts the decimals; 1.200.000 is all thousands.
    thousands = groups[1:-1] if signs[-1] != signs[0] else groups[1:]
    if any(len(g) != 3 for g in thousands) or len(set(signs[:-1])) != 1:
        return None
    whole = "".join(groups[:-1]) if signs[-1] != signs[0] else "".join(groups)
    return canonical(f"{whole}.{groups[-1]}" if signs[-1] != signs[0] else whole), False


def cut(text: str) -> list[Token] | None:
    """The tokens of a cleaned text; None where a number makes no sense (two decimal signs, twelve digits or more)."""
    rough: list[Token] = []
    end = -1
    for found in _SCAN.finditer(text):
        raw = found.group()
        glued = found.start() == end
        end = found.end()
        first = raw[0]
        if first.isdecimal():
            number = _number(raw)
            if number is None:
                return None
            rough.append(Token("num", number[0], raw, float(number[0]), "", number[1], glued))
        elif first.isalpha():
            for piece in _split_word(raw, bool(rough) and rough[-1].kind == "num" and glued):
                word = "ø" if piece in ("Ø", "ø") else fold(piece)
                rough.append(Token("sep" if word in ("x", "by") else "word", word, piece, glued=glued))
                glued = True
        else:
            rough.append(Token("sep" if raw in _SEPARATORS else "mark", raw, raw, glued=glued))
        if glued and len(rough) > 1 and raw.isdecimal() and rough[-2].raw == "." and (
            not rough[-2].glued or (len(rough) > 2 and rough[-3].kind == "sep")
        ):
            # x.25 and PL .375 leave out the nought
            text = canonical(f"0.{rough[-1].raw}")
            rough[-2:] = [Token("num", text, f".{rough[-1].raw}", float(text), "", False, rough[-2].glued)]
    return _units(_fractions(rough))


def _split_word(raw: str, after_number: bool) -> list[str]:
    """``mmx`` after a number is a unit and a separator, ``xL`` a separator and a word, ``mmØ`` a unit and a sign."""
    small = raw.lower()
    if small in ("nbx", "dnx"):
        return [raw[:-1], raw[-1]]
    if not after_number or len(raw) == 1:
        return [raw]
    for tail in ("x", "ø"):
        if small.endswith(tail) and small[:-1] in _UNIT_WORDS:
            return [raw[:-1], raw[-1]]
    if small.startswith("x") and small not in ("xs", "xxs", "xstrong"):
        return [raw[0], raw[1:]]
    return [raw]


def _fractions(tokens: list[Token]) -> list[Token]:
    """``3/8``, ``1-1/2``, ``1 1/2`` become one number; ``100/100/10`` stays a row of sizes."""
    out: list[Token] = []
    index = 0
    while index < len(tokens):
        token = tokens[index]
        if (
            token.kind == "num"
            and index + 2 < len(tokens)
            and tokens[index + 1].text == "/"
            and tokens[index + 1].glued
            and tokens[index + 2].kind == "num"
            and tokens[index + 2].glued
            and tokens[index + 2].value in _DENOMINATORS
            and "." not in tokens[index + 2].text
            and "." not in token.text
            and token.value < tokens[index + 2].value
            and token.value % 2 == 1  # 2/4" is two of 4", and no half
            and not (index + 3 < len(tokens) and tokens[index + 3].text == "/" and tokens[index + 3].glued)
            and not (out and out[-1].text == "/" and token.glued)
        ):
            value, raw = token.value / tokens[index + 2].value, f"{token.raw}/{tokens[index + 2].raw}"
            glued = token.glued
            whole = None
            if len(out) >= 2 and out[-1].text == "-" and out[-1].glued and token.glued and out[-2].kind == "num":
                whole = out[-2]
                del out[-2:]
            elif out and out[-1].kind == "num" and not token.glued and "." not in out[-1].text:
                whole = out.pop()
            if whole is not None:
                value, raw, glued = whole.value + value, f"{whole.raw}-{raw}", whole.glued
            out.append(Token("num", canonical(f"{value:.6f}"), raw, value, "", False, glued))
            index += 3
            continue
        out.append(token)
        index += 1
    return out


def _units(tokens: list[Token]) -> list[Token]:
    """A unit goes to the number before it. A lone capital M is no unit (``HE 200 M``, ``10M``)."""
    out: list[Token] = []
    for index, token in enumerate(tokens):
        unit = _UNIT_WORDS.get(token.text) if token.kind in ("word", "mark") else None
        before = out[-1] if out else None
        if unit and before is not None and before.kind == "num" and not before.unit and token.raw != "M":
            after = tokens[index + 1] if index + 1 < len(tokens) else None
            if unit == "m" and any(t.text in ("he", "hl", "hem") for t in tokens[:index]):
                out.append(token)  # he200m in small letters is the heavy series, not metres
                continue
            if token.text == "in" and token.raw != "in" and not (after is None or after.kind in ("sep", "mark")):
                out.append(token)
                continue
            out[-1] = before._replace(unit=unit)
            continue
        if token.text == "." and before is not None and before.kind == "num" and before.unit:
            continue  # the full stop of "in."
        out.append(token)
    # A fraction without a unit is inches: nobody writes 3/8 of a millimetre.
    return [t._replace(unit="in") if t.kind == "num" and "/" in t.raw and not t.unit else t for t in out]
