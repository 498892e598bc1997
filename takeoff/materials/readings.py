"""The ways a material text can be read: as it stands, then with less and less around it. Rank 2.

Every reading is a name for the tables, with the families that the text's own general words allow.
"""

from __future__ import annotations

import re
from collections.abc import Iterator

from takeoff.materials.words import METALS, PRODUCT_STANDARD, STRENGTH_CLASS, Words, condition, words
from takeoff.names import NormalName


def spellings(name: NormalName) -> list[NormalName]:
    """The name, without commas that part words, and turned about one: `oak, European` is European oak."""
    if "," not in name:
        return [name]
    pieces = [piece.strip() for piece in re.split(r",(?=\s|$)", name) if piece.strip()]
    found = [name, NormalName(" ".join(pieces))]
    if len(pieces) == 2:
        found.append(NormalName(f"{pieces[1]} {pieces[0]}"))
    return list(dict.fromkeys(found))


def readings(name: NormalName) -> Iterator[tuple[NormalName, frozenset[str] | None]]:
    """The name, then with less and less around it; each with the families its own words allow (None: any)."""
    yield name, None
    known = words()
    seen: set[tuple[NormalName, frozenset[str] | None]] = {(name, None)}
    for tokens, allowed in _reduced(condition().sub("", name).split(), known):
        reading = (NormalName(" ".join(tokens)), allowed)
        if tokens and reading not in seen:
            seen.add(reading)
            yield reading


def _reduced(tokens: list[str], known: Words) -> Iterator[tuple[list[str], frozenset[str] | None]]:
    """The tokens with standards' names, shapes and finishes, strength classes and general words set aside, in turn."""
    yield tokens, None
    headless = tokens
    while headless and headless[0] in known.standards:
        headless = headless[1:]
        yield headless, None
    if len(headless) > 1 and re.fullmatch(PRODUCT_STANDARD, headless[0]):
        yield [t for t in headless[1:] if t not in known.standards], METALS
    yield [t for t in tokens if t not in known.set_aside or t == "zinc"], None  # titanium zinc; elsewhere zinc is a finish
    kept = [t for t in tokens if t not in known.set_aside]
    yield kept, None
    yield [t for t in kept if not re.fullmatch(STRENGTH_CLASS, t)], None
    plain = [t for t in kept if t not in known.standards]
    yield plain, None
    groups = [known.groups[t] for t in plain if t in known.groups]
    if groups:
        allowed = frozenset.intersection(*groups)
        if not allowed:
            return  # toughened glass steel: two groups, and no word says which is meant
        yield [t for t in plain if t not in known.groups], allowed
        yield [t for t in kept if t not in known.groups], allowed
