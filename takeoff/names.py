"""Names as people type them, brought to one form; exact, then alias, then suggestion. The only user of rapidfuzz. Rank 1.

Similarity is blind to digits, so a suggestion must carry exactly the same digits as the question, and even then it is
only a suggestion to be confirmed, never a decision taken unseen.
"""

from __future__ import annotations

import re
import unicodedata
from collections.abc import Iterable, Sequence
from dataclasses import dataclass
from typing import NewType

#: Text that went through `normal_name`; only such text reaches a look-up.
NormalName = NewType("NormalName", str)

_SEPARATORS = re.compile(r"[^\w.,/+%#°]+|_+")
_DIGITS = re.compile(r"\d+(?:[.,]\d+)?")
_INVISIBLE = re.compile(r"[\u00ad\u200b-\u200f\u202a-\u202e\u2060-\u2064\u2066-\u2069\ufeff]")


def first_twice(names: Sequence[str | None]) -> int | None:
    """The place of the first name that stands earlier already; None where each stands once."""
    seen: set[str | None] = set()
    for number, name in enumerate(names):
        if name in seen:
            return number
        seen.add(name)
    return None


def plain_text(text: str) -> str:
    """Text without marks that have no look of their own: soft hyphens, zero-width and direction signs; blanks made plain."""
    return " ".join(_INVISIBLE.sub("", unicodedata.normalize("NFKC", text)).split())


def has_hidden_marks(text: str) -> bool:
    """True where the text holds zero-width or direction signs: it may not be what the eye reads."""
    return bool(_INVISIBLE.search(text.replace("\u00ad", "")))


def has_lookalikes(text: str) -> bool:
    """True where letters of another script stand among Latin ones or digits (a Cyrillic В in ``HEВ 200``)."""
    foreign = latin = False
    for char in text:
        if char.isalpha():
            name = unicodedata.name(char, "")
            if name.startswith(("CYRILLIC", "GREEK")) and char not in "ØøΦφΔµμΩ":
                foreign = True
            elif name.startswith("LATIN"):
                latin = True
    return foreign and (latin or any(c.isdigit() for c in text))


def normal_name(text: str) -> NormalName:
    """One form for look-ups: compatibility forms folded, case folded, accents off, separators to single blanks.

    Dots, commas, slashes, plus, percent and hash stay, since ``1.4301``, ``C16/20`` and ``#5`` need them.
    """
    if text.isascii():
        bare = text.lower()
    else:
        folded = unicodedata.normalize("NFKD", plain_text(text).casefold())
        bare = "".join(c for c in folded if not unicodedata.combining(c)).replace("ø", "o").replace("ł", "l")
    return NormalName(" ".join(_SEPARATORS.sub(" ", bare).split()))


def squeezed(name: NormalName) -> NormalName:
    """The name without blanks: ``en gjl 250`` and ``engjl250`` meet here."""
    return NormalName(name.replace(" ", ""))


def digits_of(name: str) -> tuple[str, ...]:
    """The numbers in a name, in order, decimal comma as point: what must match exactly."""
    return tuple(n.replace(",", ".") for n in _DIGITS.findall(name))


@dataclass(frozen=True, slots=True)
class Suggestion:
    name: NormalName
    score: float


def suggest(query: NormalName, choices: Sequence[NormalName] | Iterable[NormalName], *, floor: float, limit: int = 5) -> list[Suggestion]:
    """The nearest of `choices` by normalised edit similarity (0 to 100), best first, only those with the same digits.

    A name that contains the query as a whole word, or the reverse, is no near miss but another thing (``steel`` and
    ``stainless steel``); it is kept as a suggestion, yet below `floor` it is dropped like any other.
    """
    from rapidfuzz import fuzz, process

    digits = digits_of(query)
    same = [c for c in choices if digits_of(c) == digits]
    found = process.extract(query, same, scorer=fuzz.ratio, limit=limit, score_cutoff=floor)
    return [Suggestion(NormalName(name), round(score, 1)) for name, score, _ in found]
