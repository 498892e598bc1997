"""Every name a material answers to, folded to one form, so that a look-up is one step in a dictionary. Rank 2.

Spellings that mean the same (`Gr.` and `Grade`, `aluminum` and `aluminium`, a decimal comma) meet in the folded form;
digits never do: a hit whose numbers are not those of the question is no hit.
"""

from __future__ import annotations

from collections.abc import Iterator

from takeoff.names import NormalName, digits_of, normal_name, squeezed

_KEEP = set("abcdefghijklmnopqrstuvwxyz0123456789.,/+%#")
_DROP = {code: None for code in range(128) if chr(code) not in _KEEP}
_SAME = (
    (",", "."), ("grade", "gr"), ("gr.", "gr"), ("aluminum", "aluminium"), ("gray", "grey"), ("fiber", "fibre"),
    ("vanized", "vanised"), ("sulphur", "sulfur"),
)  # fmt: skip


def fold(text: str) -> str:
    """The folded form of a name. ASCII takes a short way that gives the same result as `normal_name`."""
    folded: str
    folded = text.lower().translate(_DROP) if text.isascii() else squeezed(normal_name(text))
    for old, new in _SAME:
        if old in folded:
            folded = folded.replace(old, new)
    return folded


class NameIndex:
    """From folded names to the keys that answer to them."""

    __slots__ = ("_entries",)

    def __init__(self) -> None:
        self._entries: dict[str, list[tuple[str, str, bool]]] = {}

    def add(self, text: str, key: str, exact: bool) -> None:
        """Let `key` answer to `text`; `exact` for keys and designations, else it is an alias."""
        folded = fold(text)
        if not folded:
            return
        entries = self._entries.get(folded)
        if entries is None:
            self._entries[folded] = [(key, text, exact)]
        else:
            entries.append((key, text, exact))

    def find(self, name: NormalName) -> dict[str, bool]:
        """Keys that answer to a name, each with whether it is an exact designation."""
        found: dict[str, bool] = {}
        entries = self._entries.get(fold(name))
        if entries:
            digits = digits_of(name)
            for key, text, exact in entries:
                if digits_of(normal_name(text)) == digits:
                    found[key] = found.get(key, False) or exact
        return found

    def folded_names(self) -> list[NormalName]:
        """All folded names, for suggestions."""
        return [NormalName(name) for name in self._entries]

    def entries(self, folded: str) -> list[tuple[str, str, bool]]:
        """Keys, texts and exactness under one folded name."""
        return self._entries.get(folded, [])

    def shared(self) -> Iterator[tuple[str, list[str]]]:
        """Folded names to which several keys answer."""
        for folded, entries in self._entries.items():
            if len(entries) > 1:
                keys = list(dict.fromkeys(key for key, _, _ in entries))
                if len(keys) > 1:
                    yield folded, keys
