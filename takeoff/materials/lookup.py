"""Material text, as people type it, to a material; or to the candidates where the text does not settle it. Rank 2.

In order: a key or designation; an alias; the same after trade words, conditions and standards' names are set aside
(`S355J2+N`, `stainless 316`, `EN AW-6082 T6`); then suggestions. A name that several materials answer to is shown with
its candidates, never decided, unless the caller's hint or the text's own words (`C35 steel`) leave one. A similar name is
only a suggestion: the caller treats it as assumed.
"""

from __future__ import annotations

import re
from collections.abc import Iterator
from dataclasses import dataclass, replace
from typing import TYPE_CHECKING, Literal

from takeoff.materials.material import Material
from takeoff.materials.nameindex import fold
from takeoff.materials.partings import Part, agreed, group_of, is_general, species_and_class
from takeoff.materials.readings import readings, spellings
from takeoff.materials.table import by_key, family_of, kind_of, name_of, table
from takeoff.materials.words import words
from takeoff.names import NormalName, digits_of, has_hidden_marks, has_lookalikes, normal_name, plain_text, suggest

if TYPE_CHECKING:
    from takeoff.materials.own import OwnTable

Match = Literal["exact", "alias", "similar", "ambiguous", "none"]

#: No material has a longer name; a longer text is not searched.
MAX_LENGTH = 120
#: A suggestion at or above this score, in the lead by `LEAD` over the next other material, is taken as similar.
SIMILAR, LEAD, FLOOR = 84.0, 4.0, 60.0
_LONG_CODE = 8
#: In a shorter word one letter makes another thing of it: tile and utile, a wood.
_LONG_WORD = 7
#: A number beside one of these is a size or a count, no grade: 304 mm.
_UNITS = frozenset({"mm", "cm", "m", "kg", "g", "t", "lb", "lbs", "in", "ft", "m2", "m3", "l", "pcs", "stk", "off", "ea"})
#: No more words than this are tried as several names of one material.
_MOST_WORDS = 8
_OR = r"[\s(]+(?:or|and|oder|und|ou|et|o|y|of|en|e)\s+|\s*[/&;|]\s*|\s+\+\s+|,\s+"


@dataclass(frozen=True, slots=True)
class Candidate:
    """A material the text may mean, with its likeness in percent."""

    key: str
    name: str
    score: float


@dataclass(frozen=True, slots=True)
class MaterialMatch:
    """What a text was taken for.

    `material` is None where the match is ambiguous or none; `candidates` then says what it may mean. `reason` says in
    words why a match is less than exact, where words are needed.
    """

    query: str
    match: Match
    score: float
    material: Material | None
    candidates: tuple[Candidate, ...] = ()
    reason: str = ""


def lookup(text: str, *, hint: str | None = None, own: OwnTable | None = None) -> MaterialMatch:
    """Find the material that `text` names.

    `hint` is a kind (`metal`, `wood`, `concrete` ...) or a family that the context asks for: it settles a clash, and
    overrules nothing else. `own` is the user's own table, asked before ours. Never raises on any text.
    """
    name = normal_name(plain_text(text)[: MAX_LENGTH + 1])
    if not name or len(name) > MAX_LENGTH or not any(c.isalnum() for c in name):
        return MaterialMatch(text, "none", 0.0, None, reason="this is no name of a material")
    found = _with_steel(text, hint, own) or _Search(text, hint, own).run(name)
    if found.match in ("exact", "alias") and (has_hidden_marks(text) or has_lookalikes(text)):
        return MaterialMatch(
            text, "similar", found.score, found.material, found.candidates,
            "the text holds hidden marks or letters of another script",
        )  # fmt: skip
    return found


def _with_steel(text: str, hint: str | None, own: OwnTable | None) -> MaterialMatch | None:
    """`reinforced concrete 150 kg/m3`: the row, with that steel content in place of the usual one."""
    if "kg" not in text.casefold():
        return None
    from takeoff.materials.reinforced import CONTENT, STEEL_LIMITS, with_steel

    stated = CONTENT.search(text)
    if not stated:
        return None
    rest = lookup((text[: stated.start()] + text[stated.end() :]).strip(" ,;()"), hint=hint, own=own)
    steel = float(stated.group(1).replace(",", "."))
    if rest.material is None or rest.material.key != "concrete-reinforced" or not steel <= STEEL_LIMITS[1]:
        return None
    return replace(rest, query=text, match="alias", material=with_steel(rest.material, steel))


class _Search:
    """One look-up: the text, the hint, the two tables."""

    def __init__(self, text: str, hint: str | None, own: OwnTable | None) -> None:
        self.text = text
        self.hint = hint.strip().casefold() if hint else None
        self.own = own

    def run(self, name: NormalName) -> MaterialMatch:
        spelled = spellings(name)
        if self._finish_only(name):
            return MaterialMatch(self.text, "none", 0.0, None, reason="the text names a finish, not what is under it")
        for spelling in spelled:
            for reading, allowed in readings(spelling):
                answer = self._named(reading, allowed, plain=reading == name)
                if answer:
                    return answer
        for spelling in spelled:
            answer = self._together(spelling)
            if answer:
                return answer
        return self._parts() or self._suggested(name)

    # -- names that stand in a table -------------------------------------------------------------------------------

    def _named(self, name: NormalName, allowed: frozenset[str] | None, *, plain: bool) -> MaterialMatch | None:
        """The answer where the tables hold this very name; `allowed` families come from the text's own words."""
        if self.own:
            mine = self.own.index.find(name)
            if mine:
                key, exact = next(iter(mine.items()))
                return self._hit(self.own.materials[key], exact and plain)
        keys = self._keys(name)
        if allowed is not None:
            keys = {key: exact for key, exact in keys.items() if family_of(key) in allowed}
        if len(keys) > 1 and self.hint:
            keys = self._fitting(keys) or keys
        if not keys:
            return None
        if len(keys) == 1:
            key, exact = next(iter(keys.items()))
            return self._hit(by_key(key), exact and plain)
        candidates = tuple(Candidate(key, name_of(key), 100.0) for key in keys)
        return MaterialMatch(self.text, "ambiguous", 100.0, None, candidates, "several materials answer to this name")

    def _finish_only(self, name: NormalName) -> bool:
        """Whether the only name is that of a finish: `chrome plated`, `gold anodised`, `oak effect`."""
        tokens = name.replace("-", " ").split()
        surfaces = words().surfaces
        for at, token in enumerate(tokens):
            if at == 0 or token not in surfaces or table().index.find(name):
                continue
            keys = self._keys(NormalName(tokens[at - 1]))
            others = [t for t in tokens[: at - 1] + tokens[at + 1 :] if t not in words().set_aside and t not in surfaces]
            if keys and not others and not any(family_of(key) in surfaces[token] for key in keys):
                return True
        return False

    def _keys(self, name: NormalName) -> dict[str, bool]:
        written, clash = table().clashes.get(fold(name), ("", ()))
        if clash and digits_of(name) == digits_of(normal_name(written)):
            return dict.fromkeys(clash, False)
        return table().index.find(name)

    def _fitting(self, keys: dict[str, bool]) -> dict[str, bool]:
        return {key: exact for key, exact in keys.items() if self.hint in (kind_of(key), family_of(key), key)}

    def _hit(self, found: Material, exact: bool) -> MaterialMatch:
        return MaterialMatch(self.text, "exact" if exact else "alias", 100.0, found)

    # -- a name within a longer text -------------------------------------------------------------------------------

    def _parts(self) -> MaterialMatch | None:
        """Texts that name several materials (`PVC or aluminium tube`), or one among unknown words."""
        pieces = [p for p in re.split(_OR, plain_text(self.text).casefold()) if self._says_something(normal_name(p))]
        if len(pieces) < 2:
            return None
        answers = [self.within(normal_name(piece)) for piece in pieces[:6]]
        keys = list(dict.fromkeys(key for answer in answers for key in answer))
        candidates = tuple(Candidate(key, name_of(key), 100.0) for key in keys)
        if len(keys) > 1:
            return MaterialMatch(self.text, "ambiguous", 100.0, None, candidates, "the text names several materials")
        if keys and all(answers):
            return self._hit(by_key(keys[0]), exact=False)
        if keys:
            return MaterialMatch(self.text, "none", 50.0, None, candidates, "the text also names something unknown")
        return None

    def _together(self, name: NormalName) -> MaterialMatch | None:
        """A text made of several names of one material and nothing else: `1.4301 X5CrNi18-10`, `BSH GL24h`."""
        for reading, allowed in readings(name):
            tokens = reading.split()
            if not 2 <= len(tokens) <= _MOST_WORDS:
                continue
            parted = list(self._partings(tokens, allowed))
            common = agreed(parted)
            if len(common) == 1:
                return self._hit(self._row(next(iter(common))), exact=False)
            for parts in parted:
                both = species_and_class(parts)
                if both:
                    heavier = max(map(self._row, both), key=lambda m: m.density.nominal or m.density.high)
                    return replace(self._hit(heavier, exact=False), reason="a species and a strength class: the heavier of the two")
        return None

    def _partings(self, tokens: list[str], allowed: frozenset[str] | None) -> Iterator[list[Part]]:
        """Each way to part all the words into names that the table holds: the keys of every part."""
        if not tokens:
            yield []
        for end in range(1, len(tokens) + 1):
            keys = self._keys(NormalName(" ".join(tokens[:end])))
            part = Part(key for key in keys if allowed is None or family_of(key) in allowed)
            if part:
                for rest in self._partings(tokens[end:], allowed):
                    yield [part, *rest]

    def _row(self, key: str) -> Material:
        """The row of a key; the user's own where it takes the place of ours."""
        mine = self.own.materials.get(key) if self.own else None
        return mine or by_key(key)

    def _says_something(self, name: NormalName) -> bool:
        """Whether a piece of text holds more than shapes, finishes and numbers; or a number that is a name (`1.4301/304`)."""
        tokens = name.split()
        return any(t not in words().set_aside and any(c.isalpha() for c in t) for t in tokens) or bool(self._keys(name))

    def within(self, name: NormalName) -> tuple[str, ...]:
        """Keys of ours that this text names, as a whole or after words set aside."""
        for reading, allowed in readings(name):
            keys = self._keys(reading)
            if allowed is not None:
                keys = {key: exact for key, exact in keys.items() if family_of(key) in allowed}
            if keys:
                return tuple(keys)
        return ()

    # -- suggestions -----------------------------------------------------------------------------------------------

    def _suggested(self, name: NormalName) -> MaterialMatch:
        """The nearest names, by likeness of the whole and by known names inside the text."""
        tokens = [token.strip(",") for token in name.split()]
        if words().negations.intersection(tokens):
            return MaterialMatch(self.text, "none", 0.0, None, reason="the text says what it is not")
        if words().more.intersection(tokens):
            return MaterialMatch(self.text, "none", 0.0, None, reason="the text tells of something in, on or round the material")
        scores: dict[str, float] = {}
        digits = digits_of(name)
        index = table().index
        folded = NormalName(fold(name))
        for suggestion in suggest(folded, index.with_digits(digits_of(folded)), floor=FLOOR, limit=12):
            if _is_part_of(folded, suggestion.name):
                continue
            for key in index.keys(suggestion.name):
                better = suggestion.score > scores.get(key, 0.0)
                if better and index.same_digits(suggestion.name, key, digits):
                    scores[key] = suggestion.score
        inside, sure = self._inside(tokens)
        ranked = sorted(scores.items(), key=lambda item: -item[1])
        # One letter more or less in a short designation is another designation: E24 and EN24.
        too_short = len(fold(name)) < (_LONG_CODE if digits else _LONG_WORD)
        # Names of another group among the words: the likeness of the whole says nothing (`stainless oak`).
        strangers = bool(ranked) and (
            any(group_of(k) != group_of(ranked[0][0]) and self._counts(k, ranked[0][0]) for k in inside)
            or any(self._heavier(token, ranked[0][0]) for token in tokens)
        )
        if ranked and ranked[0][1] >= SIMILAR and not too_short and not strangers:
            fitting = [(k, s) for k, s in ranked if self.hint in (kind_of(k), family_of(k))] if self.hint else []
            lead = (fitting or ranked) if fitting and fitting[0][1] >= SIMILAR else ranked
            candidates = tuple(Candidate(k, name_of(k), s) for k, s in ranked[:5])
            if len(lead) == 1 or lead[0][1] - lead[1][1] >= LEAD:
                return MaterialMatch(
                    self.text, "similar", lead[0][1], by_key(lead[0][0]), candidates, "a similar name, to be confirmed"
                )
            close = tuple(c for c in candidates if c.score >= SIMILAR)
            return MaterialMatch(self.text, "ambiguous", close[0].score, None, close, "several names are similar")
        if inside:
            candidates = tuple(Candidate(k, name_of(k), s) for k, s in inside.items())
            score = max(inside.values())
            if sure and len(inside) == 1:
                found = by_key(next(iter(inside)))
                return MaterialMatch(self.text, "similar", score, found, candidates, "a known name among unknown words")
            return MaterialMatch(self.text, "none", score, None, candidates[:5], "a general name among unknown words")
        candidates = tuple(Candidate(k, name_of(k), s) for k, s in ranked[:5])
        return MaterialMatch(
            self.text, "none", candidates[0].score if candidates else 0.0, None, candidates,
            "no material of the table has such a name",
        )  # fmt: skip

    def _heavier(self, token: str, likely: str) -> bool:
        """Whether one word is the name of something heavier, of another group (`toughened glass steel`)."""
        keys = self._keys(NormalName(token)) if len(token) > 2 and token not in words().set_aside else {}
        return bool(keys) and all(group_of(k) != group_of(likely) and _heavy(k) > _heavy(likely) for k in keys)

    def _counts(self, named: str, likely: str) -> bool:
        """Whether a name among the words speaks against the likeness of the whole: one of a kind, or a general one that is heavier."""
        return not is_general(named) or _heavy(named) > _heavy(likely)

    def _inside(self, tokens: list[str]) -> tuple[dict[str, float], bool]:
        """The longest known names among the words, and whether one may be taken: a single one, no number left over, no
        mere general word such as steel or glass, which an unknown word beside it may turn into something else, and no
        general word beside it that speaks of another group (silicon steel is no silicon)."""
        whole = len("".join(tokens))
        groups = words().groups
        for size in range(len(tokens) - 1, 0, -1):
            found: dict[str, float] = {}
            sure = True
            for start in range(len(tokens) - size + 1):
                window = tokens[start : start + size]
                phrase = NormalName(" ".join(window))
                keys = self._keys(phrase) if len(phrase) > 2 else {}
                number = not any(c.isalpha() for c in phrase)
                if not keys or phrase == "per" or (number and _UNITS.intersection(tokens)):
                    continue
                rest = tokens[:start] + tokens[start + size :]
                unread = any(c.isdigit() for token in rest for c in token)
                other = any(family_of(key) not in groups[t] for t in rest if t in groups for key in keys)
                other = other or self._others_named(rest, keys)
                sure = sure and not unread and not other and not (size == 1 and window[0] in groups)
                found.update(dict.fromkeys(keys, round(100.0 * len("".join(window)) / whole, 1)))
            if found:
                return found, sure
        return {}, False

    def _others_named(self, rest: list[str], keys: dict[str, bool]) -> bool:
        """Whether a word beside a known name is itself the name of something of another group (`lead` beside `rubber sheet`)."""
        groups = {group_of(key) for key in keys}
        named = [self._keys(NormalName(token)) for token in rest if len(token) > 2 and token not in words().set_aside]
        return any(found and groups.isdisjoint(group_of(key) for key in found) for found in named)


def _heavy(key: str) -> float:
    return by_key(key).density.high


def _is_part_of(asked: str, known: str) -> bool:
    """Whether a single word is another with letters before it: nichrome is no chrome, ferrosilicon no silicon."""
    longer, shorter = (asked, known) if len(asked) > len(known) else (known, asked)
    return len(longer) - len(shorter) > 1 and longer.isalpha() and longer.endswith(shorter)
