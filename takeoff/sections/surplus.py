"""Words beside a section which say that the piece is more than that section: several of it, filled, or with parts fixed on. Rank 2.

Most words beside a designation are remarks (`column HEA 200, primed`) and are passed over. These are not: passed over, the
row would be weighed too light without a word. The text is refused instead, and whoever wrote it gives the parts their rows.
"""

from __future__ import annotations

from takeoff.sections.tokens import Token
from takeoff.sections.words import BOUGHT, FAMILY_WORDS, KIND_WORDS

#: Several pieces in one, in nine languages.
SEVERAL: frozenset[str] = frozenset(
    (
        "weldment doubled twin twins pair layers lagen couches capas strati duo "
        "pairs boxed triple triples tripled quadruple quad bundle bundles bundled pack packs "
        "packet stack cluster multipack compound plated gekoppelt verdoppelt zusammengesetzt doppel doppelt doppelte doppelter "
        "zwilling zwillings dreifach vierfach paar paarweise bund paket jumele jumeles jumelee jumelees doublee doublees paire "
        "paires fagot paquet doble dobles pareja paquete doppio doppia doppi doppie coppia coppie fascio pacco dubbel dubbele "
        "dubbelt dubbla duplo dupla duplos podwojny podwojna podwojne podwojnie potrojny wiazka paczka dgu igu isolierglas "
        "doppelverglasung"
    ).split()
)
#: A count, where it is the first word.
COUNTS: frozenset[str] = frozenset(
    (
        "two three four five six eight ten zwei drei vier funf sechs deux trois quatre cinq dos tres cuatro cinco due tre quattro "
        "twee drie vijf dwa dwie trzy cztery duas dois tva fyra fem both couple"
    ).split()
)
#: A count wherever it stands.
COUNTED: frozenset[str] = frozenset("two three four zwei drei deux trois twee drie dwa trzy duas tva".split())
#: Filled, lined, encased: what is in or round it weighs as well.
FILLED: frozenset[str] = frozenset(
    (
        "filled infilled grouted encased concreted lined clad cladded jacketed finned traced gefullt gefuellt ausgegossen "
        "ausbetoniert einbetoniert betongefullt betonfullung ummantelt ausgekleidet gummiert rippenrohr rempli remplis remplie "
        "enrobe enrobee chemise ailettes relleno rellena rellenos embebido riempito riempita gevuld gevulde omhuld wypelniony "
        "wypelniona preenchido preenchida enchido fylld fyllda betongfylld ingjuten infodrad prefilled waterfilled"
    ).split()
)
#: The same, beside a tube only: elsewhere they name boards and panels.
IN_TUBES: frozenset[str] = frozenset(
    "lining infill fill filling jacket fins insulated insulation lagged lagging traced "
    "concrete beton betong hormigon calcestruzzo betao grout mortar".split()
)
#: Fittings told by the size of their pipe, which weigh more than its length.
FITTINGS: frozenset[str] = frozenset(
    "tee tees coupling couplings union socket sockets manifold elbow elbows reducer reducers flange flanges valve valves weldolet olet "
    "bogen rohrbogen flansch muffe reduzierung coude bride manchon codo brida gomito raccordo flangia kolano kolnierz trojnik".split()
)
#: The same, beside a designation of the tables only: `reinforced concrete 300x300` and a shim set have rows of their own.
WITH_DESIGNATION: frozenset[str] = frozenset(
    "set sets kit kits stiffened reinforced strengthened ausgesteift verstarkt renforce renforcee reforzado rinforzato "
    "versterkt verstevigd wzmocniony reforcado forstarkt".split()
)
#: Before `plated`, these tell a finish.
_PLATING: frozenset[str] = frozenset("zinc nickel chrome chromium brass gold silver copper tin cadmium electro bronze".split())
#: With something; and what may follow it and weigh nothing.
WITH: frozenset[str] = frozenset(
    "with w c mit inkl inklusive samt avec compris con incluso compreso met inclusief com med incl including plus".split()
)
AND: frozenset[str] = frozenset("and und och".split())
WEIGHTLESS: frozenset[str] = frozenset(
    (
        "hole holes drilled drilling drillings slot slots slotted notch notches notched cope copes coped mitre miter mitred "
        "mitered cut cuts camber cambered chamfer chamfered bevel bevelled radius rounded corner corners edge edges thread "
        "threads tapped paint painted primer primed galvanising galvanised galvanizing galvanized coating coated coat finish seam "
        "weld tolerance certificate cert test bohrung bohrungen loch locher schlitz ausklinkung gehrung grundierung verzinkung "
        "zeugnis trous trou percage percages peinture certificat agujero agujeros taladros pintura foro fori verniciatura gat "
        "gaten otwor otworami otwory furo furos hal malning rebate groove grooves tongue square round ends end straight"
    ).split()
)
_PARTS: frozenset[str] = frozenset(
    "stiffener stiffeners cleat cleats lug lugs endplate endplates baseplate baseplates capping stub stubs rail rails corbel "
    "corbels doubler doublers ribs rib studs water sand concrete beton mortar".split()
)
_BACKS: frozenset[str] = frozenset("back backs dos rucken ruecken rug ryggen rygg espalda espaldas schiena".split())


def why_more(tokens: list[Token], *, tube: bool, designated: bool, coded: bool = False) -> str:
    """Why the text tells of more than its section; empty where it does not. `tube`: the section is hollow; `designated`: it
    is named by a family of the tables; `coded`: it is a bar or a fastener, whose nuts and washers its own reader knows."""
    said = [(i, t) for i, t in enumerate(tokens) if t.kind == "word"]
    for position, (index, token) in enumerate(said):
        text = token.text
        after = [t for _, t in said[position + 1 :]]
        lettered = bool(after) and after[0].text in ("t", "te") and text not in ("boxed", "plated")
        if text == "plated" and position and said[position - 1][1].text in _PLATING:
            continue
        if not coded and text == "assembly":
            return f"{token.raw!r} tells of more than the section: give each part its row, or a unit mass"
        if designated and not coded and text in WITH_DESIGNATION:
            return f"{token.raw!r} tells of more than the section: give each part its row, or a unit mass"
        counted = text in COUNTED or (text in COUNTS and index == 0 and len(said) > 1)
        if (text in SEVERAL or counted) and not lettered:
            return f"{token.raw!r} tells of several pieces, or of more than the section: give each its row, or a unit mass"
        if tube and text in FITTINGS:
            return f"{token.raw!r} is a fitting, heavier than its pipe is long: give a unit mass"
        if text in FILLED or (tube and text in IN_TUBES) or (text == "full" and after and after[0].text == "of"):
            return f"{token.raw!r} says that more is in or round it than the section: give each its row, or a unit mass"
        if coded:
            continue
        if text in WITH and _stands_alone(tokens, index, text) and (_is_part(after) or not {t.text for t in after[:3]} & WEIGHTLESS):
            return f"{token.raw!r} says that something comes with the section: give it its own row, or a unit mass"
        if text in AND and _is_part(after):
            return f"{token.raw!r} says that something comes with the section: give it its own row, or a unit mass"
    for index, token in enumerate([] if coded else tokens):
        beside = tokens[index - 1 : index] + tokens[index + 1 : index + 2]
        if token.text == "+" and len(beside) == 2 and all(t.kind == "num" for t in beside):
            return "a sum of sizes tells of several pieces: give each its row, or a unit mass"
        if token.text in ("+", "&") and index and _is_part([t for t in tokens[index + 1 : index + 3] if t.kind == "word"]):
            return f"{token.raw!r} says that something comes with the section: give it its own row, or a unit mass"
    return ""


def _stands_alone(tokens: list[Token], index: int, text: str) -> bool:
    """A lone w or c is `with` only in `w/ plate` and `c/w plate`; `w/o` is without."""
    if index == 0 or index + 1 == len(tokens):
        return False
    if len(text) > 1:
        return True
    behind = "".join(t.text for t in tokens[index + 1 : index + 3])
    return behind.startswith("/") and (behind == "/w" if text == "c" else not behind.startswith("/o"))


def _is_part(words: list[Token]) -> bool:
    """Whether the words begin with the name of a part."""
    return any(
        t.text in _PARTS or t.text in BOUGHT or t.text in KIND_WORDS or (len(t.text) > 1 and t.text in FAMILY_WORDS) for t in words[:2]
    )


def back_to_back(tokens: list[Token]) -> bool:
    """Whether the text says that two of it stand back to back."""
    return sum(t.kind == "word" and t.text in _BACKS for t in tokens) >= 2
