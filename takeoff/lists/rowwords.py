"""Words that tell what a row is: sums, money, examples, alternatives, remarks of weight. In nine languages, accents off."""

from __future__ import annotations

import re
from functools import lru_cache

from takeoff.names import normal_name

#: the label of a sum
TOTAL = re.compile(
    r"^(?:grand |sub ?|page |overall |running )?(?:total|sum|subtotal|totals)\b|^(?:zwischen|gesamt|end)?summe\b"
    r"|^gesamt(?:gewicht|masse)?\b"
    r"|^(?:sous )?total\b|^somme\b|^suma\b|^(?:sub)?totale?\b|^totaal\b|^subtotaal\b|^razem\b|^lacznie\b|^summa\b|^delsumma\b|^totalt\b"
    r"|^(?:empty|full|total|overall|gross|net|dry|operating|test|shipping|erection|steel) (?:weight|mass|wt)\b|^(?:weight|mass) total\b"
    r"|^(?:poids|masse) total|^(?:peso|massa) total|^totaal ?gewicht\b|^(?:masa|waga) (?:calkowita|razem)\b|^totalvikt\b|^vikt total"
    r"|^(?:leer|betriebs|netto|brutto)(?:gewicht|masse)\b|^(?:poids|masse) a vide\b|^peso a? ?vuoto\b|^peso en vacio\b|^leeggewicht\b"
    r"|^tomvikt\b"
    r"|^soma\b|^carried forward\b|^brought forward\b|^ubertrag\b|^a reporter\b|^report\b"
)
#: rows of money and work, which weigh nothing
MONEY = re.compile(
    r"^(?:postage|shipping|freight|carriage|delivery|packing|packaging|vat|tax|sales tax|labou?r|installation|handling|discount|surcharge"
    r"|versand|fracht|transport|verpackung|mwst|ust|lohn|arbeit|montage|rabatt|livraison|port|emballage|tva|main d.?oeuvre|remise"
    r"|envio|iva|mano de obra|descuento|spedizione|manodopera|sconto|verzending|btw|arbeid|korting|wysylka|robocizna|vat|rabat"
    r"|frete|mao de obra|desconto|frakt|moms|arbete)\b"
)
EXAMPLE = re.compile(r"^(?:example|sample row|sample|beispiel|exemple|ejemplo|esempio|voorbeeld|przyklad|exemplo|exempel)s?\b")
#: a row that shows how a list is filled in says so in its first text; ours is spelt like this
EXAMPLE_MARK = "EXAMPLE, not counted"
EXAMPLE_ROW = re.compile(r"^example,? not counted\b")
ALTERNATIVE = re.compile(r"^(?:or|oder|alternative(?:ly)?|alternativ|alt\.?|ou bien|o bien|oppure|of anders|albo|eller)[ :]")
ELSEWHERE = re.compile(
    r"\b(?:included|contained|counted) (?:in|with|under) (?:row|item|line|pos|position|no|mark)\b|\benthalten in\b"
    r"|\bin pos\b.{0,40}\benthalten\b"
    r"|\binclus dans\b|\bcompris dans\b|\bincluid[oa] en\b|\bcompreso in\b|\binbegrepen in\b"
    r"|\bzawarte w\b|\bincluid[oa] (?:na|no|em)\b|\bingar i\b"
)
OPTIONAL = re.compile(r"\b(?:optional|option|optionnel|opcional|opzionale|optioneel|opcjonaln\w*|wahlweise|valfri\w*|tillval)\b")
WARNING = re.compile(
    r"\b(?:provisional|preliminary|do not (?:cut|fabricate|use|order)|not for (?:construction|fabrication|production)|superseded|draft"
    r"|vorlaufig|nicht (?:schneiden|fertigen)|entwurf|provisoire|ne pas (?:couper|debiter)|no cortar|provvisori[oa]|non tagliare|voorlopig"
    r"|niet (?:zagen|snijden)|wstepn\w*|nie ciac|provisori[oa]|nao cortar|preliminar\w*|ej for tillverkning)\b"
)
#: a row that stands for several pieces beneath it
ASSEMBLY_ROW = re.compile(
    r"\b(?:module|assembly|assemblies|assy|sub ?assy|sub ?assembly|kit|baugruppe|modul|ensemble|sous ensemble|conjunto|subconjunto"
    r"|assieme|gruppo|samenstelling|zespol|podzespol|sammansattning|enhet)\b|\bassy$"
)
#: things of sheet that are bent or hollow: thickness × width × length would be too light, or far too heavy
NOT_FLAT = re.compile(
    r"trapez|\bwell|corrugat|profil|purlin|pfette|panne\b|omega|sigma|hollow|hohl|creux|hueco|\bcav[oa]\b|folded|\bbent\b|kantteil|gekantet"
    r"|cassette|kassette|\btray\b|\bwanne|gutter|rinne|goulotte|canaleta|\bbox|kasten|cabinet|schrank|\btank|behalter|cuve|drum\b|grecat|greca\b"
    r"|golfplaat|damwand|nervur|falist|plie\b|pliee|plegad|piegat|gezet|giet|dobrad|bockad|grating|gitterrost|caillebotis|mesh|gitter"
)
#: "(5x)" or "5 x " in a part's name, where no column gives quantities
COUNT_IN_NAME = re.compile(r"\(\s*x?\s*\d+\s*x?\s*\)|\bx\s?\d+\b$|^\d+\s?x\s")
PACK = re.compile(
    r"\b(?:packs?|boxe?s?|bags?) of (\d{1,5})\b|\b(\d{1,5}) per (?:pack|box|bag)\b|\bvpe\s?:?\s?(\d{1,5})\b"
    r"|\bpaquets? de (\d{1,5})\b")
#: a mere code (``M12``, ``A1-b``): one word with a digit in it, which none of these patterns can match
_CODE = re.compile(r"[^ (\d]*\d[^ (]*")
RULE = re.compile(r"[-=_*.–—~#:|\s]+")


@lru_cache(maxsize=1 << 14)
def _heard(text: str) -> tuple[str | None, bool]:
    if not text or text.isspace():
        return None, False
    name = label(text)
    return name, any(pattern.search(name) for pattern in (
        TOTAL, MONEY, EXAMPLE, EXAMPLE_ROW, ALTERNATIVE, ELSEWHERE, OPTIONAL, ASSEMBLY_ROW,
    ))


_NOTHING = (None, False)


def heard(text: str) -> tuple[str | None, bool]:
    """A cell's text as a label, None for a blank or a mere code, and whether any pattern of a whole row fits it."""
    return _NOTHING if _CODE.fullmatch(text) else _heard(text)


@lru_cache(maxsize=1 << 16)
def label(text: str) -> str:
    """A cell's text in the form these patterns expect."""
    return normal_name(text)
