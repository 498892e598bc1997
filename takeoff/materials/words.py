"""The words that stand around a material's name in lists: which may be set aside, and which families they name. Rank 2.

They are read from `words.csv`, in the form `normal_name` gives: lower case, no accents. Its roles:
`set aside` a shape, finish or condition that leaves the material what it is; `standard` the name of a standard or the like
in front of a designation; `group` a word that narrows the families a designation beside it may belong to; `negation` a
word that turns a name into its opposite; `more` one that tells of something in, on or round the material; `surface` one that
makes a finish of the name before it (`chrome plated`), but not of a name of its own `families` (`aluminium anodised`).
"""

from __future__ import annotations

import re
from dataclasses import dataclass
from functools import cache

from takeoff.datafiles import data_folder, read_table
from takeoff.errors import DataError
from takeoff.materials.material import split_names

#: A concrete's strength class beside its name.
STRENGTH_CLASS = r"[rl]?c\d{1,3}/\d{1,3}"

#: A product standard in front of a grade: A240 304L.
PRODUCT_STANDARD = r"s?[ab]\d{2,3}m?(?:/s?[ab]\d{2,3}m?)?"
METALS = frozenset(
    {"carbon steel", "stainless", "cast iron", "aluminium", "copper alloy", "nickel alloy", "titanium", "magnesium", "zinc"}
)


@cache
def condition() -> re.Pattern[str]:
    """Delivery conditions and tempers behind a designation, standards' numbers, and sizes: they change no density."""
    return re.compile(
        r"\s*\+\s*[a-z]{1,3}\d{0,3}(?:\s*\+\s*[a-z]{1,3}\d{0,3})*\b"  # +N, +AR, +QT, +Z275
        r"|\s+(?:t\d{1,4}|h\d{2,3}|t\d{1,2}x\d{1,3}|[fw]\d{2})$"  # aluminium tempers at the end, new and old
        r"|(?<=\d{4})(?:\s?(?:t\d{1,4}|h\d{2,3})|\s[of])$|^(?:aa|aw)\s?(?=\d{4})"  # 6082T6, 5083-O, AA6061, AW5083
        r"|\blc\s?\d{1,2}/\d{2}\b"  # the strength class of a lightweight concrete
        r"|\s(?:x[cdsf][1-4]|xa[1-3]|x0)\b"  # exposure classes of concrete
        r"|\s(?:#\s?[1-3]|no\.?\s?[1-3])(?!\S)"  # grades of American timber
        r"|\s(?:sdr|pn)\s?\d{1,2}(?:[.,]\d)?\b|\s(?:k\s?(?:80|120|180|220|240|320|400)|r\d{3}|z\d{2,3})$"  # pipes, polish, tempers
        r"|\bh[1-6]\s(?=treated)|\bf(?:5|7|8|11|14|17|22|27|34)\s(?=(?:hardwood|softwood|timber|pine)\b)"  # Australian grades
        r"|\bcode\s?[3-8]\b|\s\d{1,3}\s?°\s?c$"  # lead sheet; a temperature
        r"|(?<=\d)/s?a\d{2,4}m\b|^s?a\s?(?:182|213|240|249|269|276|312|403|479|554)\s+(?=\S)"  # ASTM A36/A36M, SA-240
        r"|(?:(?<=vsg)|(?<=esg)|(?<=tvg)|(?<=glass)|(?<=glas)|(?<=verre)|(?<=vetro)|(?<=vidrio)|(?<=vidro)|(?<=feuillete)|(?<=stratificato))"
        r"\s\d{1,3}(?:[.,/x]\d{1,2})+$"  # panes: VSG 66.2
        r"|\s+(?:to\s+|acc\.?\s+(?:to\s+)?|nach\s+|selon\s+)?(?:bs\s+)?(?:en|din|iso|astm|nf|uni|jis)(?:\s+(?:en|iso))?\s+"
        r"(?:[ab]\s?)?\d{3,5}(?:\s?\d{1,2})?(?::?\s?\d{4})?$"  # EN 10025-2 behind the grade
        r"|^(?:bs\s+|nf\s+|din\s+)?(?:en|din|iso)(?:\s+iso)?\s+\d{4,5}(?:\s\d{1,2})?\s+(?=\S)"  # EN 10025-2 before it
        r"|\b\d+(?:[.,]\d+)?\s?mm\b(?:\s+(?:thick|thk|dick))?"
    )


@dataclass(frozen=True, slots=True)
class Words:
    """The words by role; `groups` maps a word to the families it may speak of, `surfaces` to those it leaves what they are."""

    set_aside: frozenset[str]
    standards: frozenset[str]
    negations: frozenset[str]
    groups: dict[str, frozenset[str]]
    more: frozenset[str]
    surfaces: dict[str, frozenset[str]]


@cache
def words() -> Words:
    """The words of words.csv, read once. Raises DataError on a role that is none."""
    path = data_folder() / "words.csv"
    roles = ("set aside", "standard", "negation", "group", "more", "surface")
    by_role: dict[str, dict[str, frozenset[str]]] = {role: {} for role in roles}
    for line, row in read_table(path):
        if row["role"] not in by_role:
            raise DataError(f"line {line}: no such role", file=path, read=row["role"], right="one of " + ", ".join(by_role))
        by_role[row["role"]][row["word"]] = frozenset(split_names(row["families"]))
    return Words(
        frozenset(by_role["set aside"]), frozenset(by_role["standard"]), frozenset(by_role["negation"]), by_role["group"],
        frozenset(by_role["more"]), by_role["surface"],
    )
