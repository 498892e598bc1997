"""Texts made of several names: which of them speak of one material. Rank 2.

A part is what the tables answer to one name of the text: a set of keys. Parts agree where one key is in all of them; a general
word gives way to a grade of its own group; a species of wood beside a strength class is both.
"""

from __future__ import annotations

from takeoff.materials.table import family_of, kind_of

Part = frozenset[str]

#: How the keys of strength classes of timber begin.
_CLASSES = ("timber-", "glulam-")


def agreed(parted: list[list[Part]]) -> Part:
    """Keys that every part names, in one way or another to part the text; else what the specific parts name."""
    common = Part().union(*(Part.intersection(*parts) for parts in parted))
    return common or Part().union(*(_specific(parts) for parts in parted))


def is_general(key: str) -> bool:
    """Whether a row stands for a whole group, until its grade is known."""
    return key.endswith("-generic") or key in ("steel-structural", "aluminium-structural", "softwood", "hardwood")


def _specific(parts: list[Part]) -> Part:
    """The key that all parts but the general ones name, where these are general words of its own group (`Grauguss GG20`)."""
    named = [part for part in parts if not all(is_general(key) for key in part)]
    if not named or len(named) == len(parts):
        return Part()
    common = Part.intersection(*named)
    groups = [{group_of(key) for key in part} for part in parts if part not in named]
    return frozenset(key for key in common if all(group_of(key) in group for group in groups))


def group_of(key: str) -> str:
    """What a general word speaks of: wood as a whole, else the family."""
    return "wood" if kind_of(key) == "wood" else family_of(key)


def species_and_class(parts: list[Part]) -> tuple[str, str] | None:
    """The keys of a species and of a strength class where every part of a text names the one or the other (`Fichte C24`)."""
    woods = [frozenset(key for key in part if kind_of(key) == "wood") for part in parts]
    classes = [part for part in woods if part and all(key.startswith(_CLASSES) for key in part)]
    species = [part for part in woods if part and part not in classes]
    if not classes or not species or len(classes) + len(species) < len(woods):
        return None
    of_class, of_species = Part.intersection(*classes), Part.intersection(*species)
    if len(of_class) != 1 or len(of_species) != 1:
        return None
    return next(iter(of_species)), next(iter(of_class))
