"""Every name a material answers to, folded to one form, so that a look-up is one step in a dictionary. Rank 2.

Spellings that mean the same (`Gr.` and `Grade`, `aluminum` and `aluminium`, a decimal comma) meet in the folded form;
digits never do: a hit whose numbers are not those of the question is no hit.
"""

from __future__ import annotations

import re
from collections.abc import Callable, Iterable, Iterator

from takeoff.names import NormalName, digits_of, normal_name, squeezed

_KEEP = set("abcdefghijklmnopqrstuvwxyz0123456789.,/+%#;")
_DROP = {code: None for code in range(128) if chr(code) not in _KEEP}
_SAME = (
    (",", "."), ("grade", "gr"), ("gr.", "gr"), ("aluminum", "aluminium"), ("gray", "grey"), ("fiber", "fibre"),
    ("vanized", "vanised"), ("sulphur", "sulfur"),
)  # fmt: skip


#: ASCII and the Latin letters of our nine languages, none of which means anything else beside its neighbours
_LATIN = re.compile(r"[\x00-\x7f\u00c0-\u00d6\u00d8-\u00f6\u00f8-\u017f]*")


class _Letters(dict[int, str | None]):
    """What each letter folds to, worked out by `normal_name` when it is first met."""

    def __missing__(self, code: int) -> str:
        self[code] = folded = squeezed(normal_name(chr(code)))
        return folded


_FOLDED = _Letters(_DROP | {ord(char): char for char in _KEEP})


def fold(text: str) -> str:
    """The folded form of a name; a semicolon stays, it parts names."""
    folded: str
    # Latin text takes a short way that gives the same result as `normal_name`: the table holds ten thousand names.
    folded = text.lower().translate(_FOLDED) if _LATIN.fullmatch(text) else squeezed(normal_name(text))
    for old, new in _SAME:
        if old in folded:
            folded = folded.replace(old, new)
    return folded


class NameIndex:
    """From folded names to the keys that answer to them.

    `texts` gives all names of a key as they were written: a hit is confirmed against them, number by number.
    """

    __slots__ = ("_by_digits", "_entries", "_texts")

    def __init__(self, texts: Callable[[str], Iterable[str]]) -> None:
        self._entries: dict[str, list[tuple[str, bool]]] = {}
        self._texts = texts
        self._by_digits: dict[tuple[str, ...], list[NormalName]] | None = None

    def add(self, cell: str, key: str, exact: bool) -> None:
        """Let `key` answer to each name of a cell; `exact` for keys and designations, else they are aliases."""
        entries = self._entries
        folded = fold(cell).split(";") if _LATIN.fullmatch(cell) else map(fold, cell.split(";"))
        for name in folded:
            if name:
                known = entries.get(name)
                if known is None:
                    entries[name] = [(key, exact)]
                else:
                    known.append((key, exact))

    def find(self, name: NormalName) -> dict[str, bool]:
        """Keys that answer to a name, each with whether it is an exact designation."""
        folded = fold(name)
        found: dict[str, bool] = {}
        # glin A is no glina: a lone letter belongs to the word before it only where the table writes it so.
        apart = len(name) > 1 and name[-2] == " " and name[-1].isalpha() and folded.isalpha()
        for key, exact in self._entries.get(folded, ()):
            if apart and not any(normal_name(t).replace("-", " ") == name for t in self._texts(key)):
                continue
            if not found.get(key, False) and self.same_digits(folded, key, digits_of(name)):
                found[key] = exact
        return found

    def same_digits(self, folded: str, key: str, digits: tuple[str, ...]) -> bool:
        """Whether the material has a name of this folded form with just these numbers."""
        return any(fold(t) == folded and digits_of(normal_name(t)) == digits for t in self._texts(key))

    def with_digits(self, digits: tuple[str, ...]) -> list[NormalName]:
        """All folded names with just these numbers, for suggestions; sorted out once, a list may hold many odd texts."""
        if self._by_digits is None:
            self._by_digits = {}
            for name in self._entries:
                self._by_digits.setdefault(digits_of(name), []).append(NormalName(name))
        return self._by_digits.get(digits, [])

    def keys(self, folded: str) -> list[str]:
        """Keys under one folded name."""
        return list(dict.fromkeys(key for key, _ in self._entries.get(folded, ())))

    def shared(self) -> Iterator[tuple[str, list[str]]]:
        """Folded names to which several keys answer."""
        for folded, entries in self._entries.items():
            if len(entries) > 1 and len(keys := list(dict.fromkeys(key for key, _ in entries))) > 1:
                yield folded, keys
