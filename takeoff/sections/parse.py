"""From tokens to the parts of a section text: family and kind words, rows of sizes, labelled sizes, standards, grades. Rank 2.

Nothing is decided here. Every number of the text ends in exactly one part, so that a number nobody asked for is seen.
"""

from __future__ import annotations

from dataclasses import dataclass, field

from takeoff.sections import words
from takeoff.sections.tokens import MM_PER, Token

_STANDARD_BODIES = frozenset(
    ("en", "bs", "din", "iso", "nf", "uni", "nen", "pn", "ss-en", "astm", "csa", "jis", "as", "nzs", "asme", "gb", "is", "api")
)
_STAINLESS = frozenset(("301", "303", "304", "310", "316", "321", "410", "416", "430", "2205", "2507"))
_STEEL_GRADES = frozenset((185, 195, 220, 235, 250, 260, 275, 300, 320, 350, 355, 390, 420, 450, 460, 500, 550, 620, 690, 890, 960))
_OLD_GRADES = frozenset((33, 37, 42, 44, 50, 52, 60, 70))
_WOOD_GRADES = {
    "c": frozenset((14, 16, 18, 20, 22, 24, 27, 30, 35, 40, 45, 50)),
    "d": frozenset((18, 24, 27, 30, 35, 40, 45, 50, 55, 60, 65, 70, 75, 80)),
    "gl": frozenset((20, 22, 24, 26, 28, 30, 32)),
}
#: CSA G40.21 strengths, before their type (350W).
#: Chinese, Australian hollow section and Indian strengths behind their letter (Q355B, C350L0, E250A).
_LETTERED_GRADES = {
    "q": frozenset((195, 215, 235, 275, 345, 355, 390, 420, 460, 500, 550, 620, 690)),
    "c": frozenset((250, 350, 450)),
    "e": frozenset((165, 250, 275, 300, 350, 410, 450, 550, 600, 650)),
}
_CANADIAN = frozenset(("260", "300", "350", "380", "400", "480", "550"))
_ASTM_GRADES = frozenset(
    (36, 53, 106, 242, 283, 312, 325, 490, 500, 501, 514, 516, 529, 572, 588, 606, 618, 653, 709, 786, 847, 913, 992, 1011, 1085)
)
_GRADE_WORDS = frozenset(
    (
        "aisi",
        "sd",
        "sm",
        "sn",
        "ss",
        "inox",
        "grade",
        "gr",
        "type",
        "edelstahl",
        "stainless",
        "class",
        "sae",
        "cl",
        "alu",
        "aluminium",
        "aluminum",
        "al",
        "aw",
    )
)
_GRADE_TAILS = frozenset(
    (
        "e",
        "jr",
        "jo",
        "j",
        "k",
        "k2",
        "j2",
        "h",
        "n",
        "nl",
        "m",
        "ml",
        "l",
        "ln",
        "w",
        "wp",
        "g",
        "q",
        "ql",
        "mc",
        "c",
        "d",
        "u",
        "t",
        "b",
        "ti",
        "a",
        "jrh",
        "jrg",
        "jh",
        "nh",
        "nlh",
        "mh",
        "mlh",
    )
)
_CODE_LETTERS = frozenset(("t", "h", "b", "y", "n", "a", "c", "d", "q", "r", "sl", "rl"))
_FRENCH_BARS = frozenset(("6", "8", "10", "12", "14", "16", "20", "25", "32", "40"))
#: Letters of one or two sections cut or set together, which a figure before the family's word may count.
_PAIRED = frozenset("l c mc upn unp upe pfc ukpfc gbc ipe hea heb hem he ub uc isa ismc".split())
#: Families whose half is a section of its own (``1/2 IPE 300``).
_HALVED = frozenset("ipe ipea ipeo ipn inp he hea heb hem heaa ub uc ukb ukc hl hd".split())
#: Words beside which ``20g`` is a gauge as likely as grams.
_GAUGED = frozenset("sheet sheets plate plates galv galvanised galvanized tube tubing pipe coil decking flashing".split())
_APPROXIMATE = frozenset("~≈≥≤<>±?")
#: Two bare sizes beyond this beside a fraction are hardly inches (600x1200x3/8").
MOST_INCHES = 144.0
#: A bare length below this is in metres or feet.
LEAST_PIECE = 20.0
#: A bare size from here on is in mm, whatever stands behind it in metres.
LEAST_MM = 10.0
#: "(" to ")" only repeats sizes in other units, or is a remark.
_OPENING, _CLOSING = frozenset("([{"), frozenset(")]}")


@dataclass(slots=True)
class Chain:
    """Numbers joined by separators: ``457x191x67``. `joins` holds the sign before each number after the first."""

    numbers: list[Token] = field(default_factory=list)
    joins: list[str] = field(default_factory=list)
    spaced: list[bool] = field(default_factory=list)
    bracketed: bool = False
    after_diameter: bool = False
    kg: bool = False

    def spread_units(self) -> None:
        """A bare number takes the unit of the next number that has one (``2x1x0.120in``); a fraction means inches."""
        unit = "in" if any("/" in t.raw for t in self.numbers) and all(t.unit in ("", "in") for t in self.numbers) else ""
        large = any(t.value >= LEAST_MM for t in self.numbers if not t.unit)
        for index in range(len(self.numbers) - 1, -1, -1):
            token = self.numbers[index]
            if token.unit:
                unit = "" if token.unit == "ft" else token.unit  # 2x4x8ft: only the length is in feet
                if unit == "m" and large:
                    unit = ""  # 10x200x1m: only the length is in metres
            elif unit:
                self.numbers[index] = token._replace(unit=unit)

    @property
    def texts(self) -> tuple[str, ...]:
        return tuple(t.text for t in self.numbers)

    @property
    def mm(self) -> list[float]:
        return [t.mm for t in self.numbers]


@dataclass(slots=True)
class Parsed:
    """The parts of one section text."""

    families: list[tuple[str, str]] = field(default_factory=list)
    kinds: list[str] = field(default_factory=list)
    named: set[str] = field(default_factory=set)
    properties: set[str] = field(default_factory=set)
    letters: list[str] = field(default_factory=list)
    chains: list[Chain] = field(default_factory=list)
    labels: dict[str, Token] = field(default_factory=dict)
    standards: list[str] = field(default_factory=list)
    grades: list[str] = field(default_factory=list)
    mass: tuple[str, float] | None = None
    schedule: str = ""
    series: str = ""
    nominal: tuple[str, Token] | None = None
    double: bool = False
    double_loose: bool = False
    half: bool = False
    codes: list[tuple[str, str, str]] = field(default_factory=list)
    gauge: str = ""
    bent: bool = False
    changed: list[str] = field(default_factory=list)
    bought: list[str] = field(default_factory=list)
    metal: bool = False
    metals: set[str] = field(default_factory=set)
    wood: bool = False
    glass: bool = False
    stone: bool = False
    others: list[str] = field(default_factory=list)
    problem: str = ""
    counted: bool = False

    @property
    def open_number(self) -> Token | None:
        numbers = [t for c in self.chains for t in c.numbers] + list(self.labels.values())
        return next((t for t in numbers if t.open), None)


class Parser:
    """One walk over the tokens, left to right."""

    def __init__(self, tokens: list[Token]) -> None:
        self.tokens = tokens
        self.at = 0
        self.out = Parsed()
        self.depth = 0
        self.diameter = False
        texts = {t.text for t in tokens if t.kind == "word"}
        self.solid = bool({words.KIND_WORDS.get(t) for t in texts} & words.LETTERED)
        self.bent = bool(texts & words.BENT) and not self.solid
        self.barred = bool(texts & {"rebar", "rebars", "sd"})
        self.piped = bool(texts & (words.PIPED | words.NOMINAL_WORDS.keys()))

    def peek(self, ahead: int = 1) -> Token | None:
        index = self.at + ahead
        return self.tokens[index] if 0 <= index < len(self.tokens) else None

    def run(self) -> Parsed:
        while self.at < len(self.tokens) and not self.out.problem:
            token = self.tokens[self.at]
            if token.kind == "num":
                self.number(token)
            elif token.kind == "word":
                self.word(token)
            elif token.kind == "sep":
                self.separator(token)
            else:
                self.mark(token)
            self.at += 1
        for chain in self.out.chains:
            large = sum(t.value > MOST_INCHES and not t.unit for t in chain.numbers)
            if large > 1 and any(t.unit == "in" or "/" in t.raw for t in chain.numbers):
                self.out.problem = "sizes in inches stand beside sizes that are no inches: write each unit"
            chain.spread_units()
        self.drop_repeats()
        return self.out

    # -- numbers ------------------------------------------------------------------------------------------------------
    def number(self, token: Token) -> None:
        joined = (sign := self.peek(1)) is not None and sign.kind == "sep"
        if len(token.raw) == 6 and token.raw.startswith(("1.0", "1.4")) and not joined and not token.unit:
            self.out.grades.append(token.raw)
            return
        follower = self.peek(1)
        if token.text in _STAINLESS and follower is not None and follower.text in ("stainless", "ss", "inox", "edelstahl"):
            self.out.grades.append(token.raw)
            return
        typed = follower is not None and follower.glued and follower.text in ("w", "wt", "a", "at")
        beyond = self.peek(2)
        more = bool(self.out.chains) or (beyond is not None and beyond.kind == "word")
        if typed and follower is not None and token.text in _CANADIAN and more:
            self.out.grades.append(f"{token.raw}{follower.raw}")
            self.at += 1
            return
        if self.stated_mass(token) or self.share(token):
            return
        chain = Chain([token], bracketed=self.depth > 0, after_diameter=self.diameter)
        self.diameter = False
        while True:
            self.skip_kg(chain)
            join, number = self.peek(1), self.peek(2)
            if join is None or number is None or join.kind != "sep":
                break
            if number.kind == "word" and number.text == "ø" and (after := self.peek(3)) is not None and after.kind == "num":
                chain.after_diameter = True
                self.at += 1
                number = after
            if number.kind != "num":
                break
            chain.joins.append(join.text)
            chain.spaced.append(not join.glued)
            chain.numbers.append(number)
            self.at += 2
        join = self.peek(1)
        if join is not None and join.kind == "sep" and join.text in ("x", "*") and self.missing_after():
            self.out.problem = f"a number is missing after {join.raw!r}"
        follower, label = self.peek(1), None
        if follower is not None and len(chain.numbers) > 1 and follower.text in ("ga", "gauge", "gage", "swg"):
            self.out.problem = "a wall or thickness in gauge beside sizes: give it in mm or inches"
            return
        if follower is not None and len(chain.numbers) == 1 and follower.text in ("ga", "gauge", "gage", "swg") and not token.unit:
            self.out.gauge = token.text if follower.text != "swg" else f"{token.text} swg"
            self.at += 1
            return
        if follower is not None and len(chain.numbers) == 1 and follower.raw == "M" and follower.glued:
            beyond = self.peek(2)
            if beyond is None or not beyond.glued or beyond.kind == "mark":
                self.out.codes.append(("M", token.text, ""))
                self.at += 1
                return
        if (
            follower is not None
            and follower.text in words.NOMINAL_WORDS
            and len(chain.numbers) == 1
            and self.out.nominal is None
            and not self.number_after(2)
        ):
            self.out.nominal = (words.NOMINAL_WORDS[follower.text], token)
            self.at += 1
            after, size = self.peek(1), self.peek(2)
            if after is not None and after.kind == "sep" and size is not None and size.kind == "num":
                self.at += 1
            return
        if (
            len(chain.numbers) == 1
            and token.text == "2"
            and not token.unit
            and follower is not None
            and follower.glued
            and follower.text in ("l", "c", "mc", "upn", "upe", "pfc")
        ):
            self.out.double = True
            return
        if follower is not None and follower.kind == "word":
            label = words.LABELS.get(follower.text)
        if (
            len(chain.numbers) == 1
            and label
            and follower is not None
            and (len(follower.text) > 1 or follower.text == "ø")
            and (not self.number_after(2) or self.labels_follow(follower))
            and not ((sign := self.peek(2)) is not None and sign.text in ("=", ":", ".") and self.number_after(3))
        ):
            self.label(label, token)
            if follower.text in words.PROPERTY_WORDS:
                self.out.properties.add(words.PROPERTY_WORDS[follower.text])
            self.at += 1
            return
        self.out.chains.append(chain)

    def share(self, token: Token) -> bool:
        """``1/2 IPE 300``: half a section; ``2 UPN 160``, ``2xL50x50x5``: two of it, or a quantity."""
        if self.at or token.raw not in ("1/2", "2"):
            return False
        ahead = 1
        if token.raw == "2" and (sign := self.peek(1)) is not None and sign.kind == "sep" and sign.text in ("x", "*"):
            ahead = 2
        word, size = self.peek(ahead), self.peek(ahead + 1)
        if word is None or word.kind != "word" or size is None or (size.kind != "num" and word.text != "he"):
            return False
        if token.raw == "1/2":
            self.out.half = word.text in _HALVED
            return self.out.half
        if word.text not in _PAIRED or (ahead == 1 and word.glued):
            return False  # 2L50x50x5 is the pair's own name, read below
        self.out.double = self.out.double_loose = True
        self.at += ahead - 1
        return True

    def labels_follow(self, label: Token) -> bool:
        """``60.3 OD 53.9 ID``: the number after the label has a label of its own."""
        after = self.peek(3)
        return label.text in ("od", "id") and after is not None and after.text in ("od", "id", "wt", "wall")

    def number_after(self, ahead: int) -> bool:
        found = self.peek(ahead)
        return found is not None and found.kind == "num"

    def missing_after(self) -> bool:
        """No number follows the separator: only a word that is itself a label (``x W200``) may."""
        follower = self.peek(2)
        return (
            follower is None
            or follower.kind in ("sep", "mark")
            or (follower.kind == "word" and follower.text not in words.LABELS and follower.text not in words.FAMILY_WORDS)
        )

    def skip_kg(self, chain: Chain) -> None:
        """``254x146x37KG``: the kg of a size row's last number only says what that number is."""
        if len(chain.numbers) < 2:
            return
        unit = self.peek(1)
        if unit is not None and unit.text in ("kg", "kgm"):
            chain.kg = True
            self.at += 1
            after, metre = self.peek(1), self.peek(2)
            if after is not None and metre is not None and after.text == "/" and metre.text == "m":
                self.at += 2

    def stated_mass(self, token: Token) -> bool:
        """``30 kg/m2``, ``4.2 kg/m``, ``0.42 kg``, ``19 lb/ft``: a mass that the text states."""
        unit = self.peek(1)
        if unit is None or unit.kind != "word" or unit.text not in ("kg", "lb", "lbs", "kgs", "g"):
            return False
        if unit.text == "g" and unit.glued and token.value in range(7, 33) and {t.text for t in self.tokens} & _GAUGED:
            self.out.gauge = f"{token.text} g"
            self.at += 1
            return True
        factor = {"kg": 1.0, "kgs": 1.0, "lb": 0.45359237, "lbs": 0.45359237, "g": 0.001}[unit.text]
        over, per = self.peek(2), self.peek(3)
        used, form = 1, "each"
        if over is not None and over.text in ("/", "per") and per is not None:
            power = self.peek(4)
            squared = power is not None and (power.text in ("2", "^") and power.glued)
            if per.text in ("m", "lm", "rm", "mb", "ml"):
                form, used = ("area mass", 4) if squared and per.text == "m" else ("length mass", 3)
                if squared and power is not None and power.text == "^":
                    used = 5
            elif per.text in ("sqm", "qm"):
                form, used = "area mass", 3
            elif per.text == "ft":
                form, used = ("area mass", 4) if squared else ("length mass", 3)
                factor /= 0.3048**2 if squared else 0.3048
            elif per.text in ("pc", "pcs", "each", "piece", "stk", "st"):
                used = 3
            else:
                return False
        if self.out.mass is not None:
            self.out.problem = "two masses are stated"
        self.out.mass = (form, token.value * factor)
        self.at += used
        return True

    # -- words --------------------------------------------------------------------------------------------------------
    def word(self, token: Token) -> None:
        text = token.text
        if text in _STANDARD_BODIES and self.standard(token):
            return
        if self.article(token) or self.numbered_bar(token):
            return
        if self.grade(token) or self.pipe(token) or self.labelled(token) or self.code(token):
            return
        out = self.out
        if text == "mc" and self.lone_letter(token) and (size := self.peek(1)) is not None and size.kind == "num":
            out.families.append(("ISMC", ""))  # MC 100 of IS 808; the US one has a weight behind its depth
            return
        if text in words.FAMILY_WORDS and not self.lone_letter(token):
            family, variant = words.FAMILY_WORDS[text]
            if text in ("hs", "ha"):
                out.grades.append({"hs": "G40", "ha": "A500"}[text])
            if not (len(text) == 1 and out.families):
                if (family, variant) not in out.families:
                    out.families.append((family, variant))
                return
        if text in words.CHANGED:
            out.changed.append(token.raw)
        if text in words.BOUGHT and not (text == "flange" and (wide := self.peek(-1)) is not None and wide.text == "wide"):
            out.bought.append(token.raw)
        if text in words.METAL_WORDS:
            out.metal = True
            out.metals.add(text)
        if text in words.WOOD_WORDS:
            out.wood = True
        if text in words.GLASS_WORDS:
            out.glass = True
        if text in words.STONE_WORDS:
            out.stone = True
        if text in words.BENT:
            out.bent = True
            return
        known = (
            text in words.CHANGED
            or text in words.BOUGHT
            or text in words.METAL_WORDS
            or text in words.WOOD_WORDS
            or text in words.STONE_WORDS
        )
        if text in words.KIND_WORDS:
            out.kinds.append(words.KIND_WORDS[text])
            out.named.add(text)
            known = True
        if text in words.PROPERTY_WORDS:
            out.properties.add(words.PROPERTY_WORDS[text])
            if words.PROPERTY_WORDS[text] == "round":
                self.diameter = True
            known = True
        lettered = len(text) <= 2 and text.upper() in _ALL_VARIANTS and not self.small_word(token)
        if lettered or words.PROPERTY_WORDS.get(text) == "letter":
            out.letters.append(text.upper())
            known = True
        before = self.peek(-1)
        if len(text) == 1 and text in "tbdwhls" and token.glued and before is not None and before.kind == "num" and not out.letters:
            out.letters.append(text.upper())  # [20d, IPE 300t: no size's label, and no variant of the family
        if not known and text not in words.LABELS and text not in ("head", "heads"):
            out.others.append(token.raw)

    def article(self, token: Token) -> bool:
        """The small words of ``fer à T``, ``profilo a U``, ``perfil en L``; a Swedish plåt, which is no French flat."""
        if token.raw.casefold().startswith("plåt"):
            self.out.kinds.append("plate")
            return True
        letter = self.peek(1)
        return token.raw in ("à", "a", "en", "de", "di") and letter is not None and letter.kind == "word" and len(letter.text) == 1

    def small_word(self, token: Token) -> bool:
        """The a of ``dos à dos`` or ``IPE 300 a 45 gradi`` is no variant letter."""
        after = self.peek(1)
        return token.raw in ("à", "á") or (token.raw == "a" and not token.glued and after is not None and after.kind in ("num", "word"))

    def numbered_bar(self, token: Token) -> bool:
        """``No. 4 bar``, ``No 5 rebar``: US reinforcement; ``HA16``: French."""
        if token.text == "ha" and (size := self.peek(1)) is not None and size.kind == "num" and size.text in _FRENCH_BARS:
            after = self.peek(2)
            if after is None or after.kind != "sep":
                self.out.codes.append(("H", size.text, ""))
                self.out.kinds.append("rebar")
                self.at += 1
                return True
        if token.text != "no":
            return False
        ahead = 2 if (dot := self.peek(1)) is not None and dot.text == "." else 1
        number, word = self.peek(ahead), self.peek(ahead + 1)
        if number is None or number.kind != "num" or word is None or word.text not in ("bar", "bars", "rebar", "rebars"):
            return False
        self.out.codes.append(("#", number.text, ""))
        self.out.kinds.append("rebar")
        self.at += ahead + 1
        return True

    def lone_letter(self, token: Token) -> bool:
        """A short US family name that no row of sizes follows is some other word."""
        if words.FAMILY_WORDS[token.text][0] not in words.BEFORE_SIZES:
            return False
        number, join = self.peek(1), self.peek(2)
        if number is not None and number.text == "-":
            number, join = join, self.peek(3)
        return not (number is not None and number.kind == "num" and join is not None and join.kind == "sep")

    def pipe(self, token: Token) -> bool:
        """``SCH 40``, ``SCH40S``, ``STD``, ``DN 100``, ``NPS 4``."""
        number = self.peek(1)
        if number is not None and number.text in (".", "-", "no") and token.text in words.SCHEDULE_WORDS:
            self.at += 1
            number = self.peek(1)
        if token.text in words.SCHEDULE_WORDS and number is not None:
            if number.kind == "num":
                tail = self.peek(2)
                self.out.schedule = number.text
                self.at += 1
                if tail is not None and tail.text == "s" and tail.glued:
                    self.out.schedule += "S"
                    self.at += 1
                return True
            if number.text in words.WEIGHT_WORDS:
                self.out.schedule = words.WEIGHT_WORDS[number.text]
                self.at += 1
                return True
            return False
        if token.text in words.WEIGHT_WORDS and not self.out.schedule:
            self.out.schedule = words.WEIGHT_WORDS[token.text]
            return True
        if token.text in words.SERIES_WORDS and self.piped:
            self.out.series = words.SERIES_WORDS[token.text]
            return True
        if token.text == "pn" and self.piped and number is not None and number.kind == "num":
            self.out.others.append(f"{token.raw}{number.raw}")  # a rated pressure is no wall
            self.at += 1
            return True
        if token.text == "class" and self.piped and not self.out.schedule:
            before = self.peek(-1)
            letter = next((t.text for t in (number, before) if t is not None and t.text in words.SERIES_LETTERS), "")
            if letter:
                self.out.series = words.SERIES_LETTERS[letter]
                self.at += letter == (number.text if number is not None else "")
                return True
        if token.text in words.NOMINAL_WORDS and number is not None and number.kind == "num":
            if self.out.nominal is not None:
                self.out.problem = "two pipes are named"
            self.out.nominal = (words.NOMINAL_WORDS[token.text], number)
            self.at += 1
            after, size = self.peek(1), self.peek(2)
            if after is not None and after.kind == "sep" and size is not None and size.kind == "num":
                self.at += 1  # DN100 x 6.02: the next number is the wall
            return True
        return False

    def standard(self, token: Token) -> bool:
        """``EN 10219-2``, ``BS EN 10210``, ``ASTM A500``, with a part and a year."""
        ahead, parts = 1, [token.text]
        while (found := self.peek(ahead)) is not None and found.kind == "word" and (found.text in _STANDARD_BODIES or len(found.text) == 1):
            parts.append(found.text)
            ahead += 1
        number = self.peek(ahead)
        if (
            number is None
            or number.kind != "num"
            or not (number.value >= 1000 or len(parts) > 1 or token.text in ("din", "iso", "astm", "jis", "api") or number.text == "808")
        ):
            return False
        if "x" in (after.text if (after := self.peek(ahead + 1)) is not None and after.glued else ""):
            return False
        parts.append(number.text)
        self.at += ahead
        while (
            (sign := self.peek(1)) is not None
            and sign.text in ("-", ":")
            and sign.glued
            and (part := self.peek(2)) is not None
            and part.kind == "num"
            and part.glued
        ):
            parts.append(part.text)
            self.at += 2
        tail = self.peek(1)
        if token.text == "api" and tail is not None and tail.kind == "word" and tail.glued:
            parts.append(tail.text)
            self.at += 1
        self.out.standards.append(" ".join(parts))
        return True

    def grade(self, token: Token) -> bool:
        """A material grade inside a section text: read past, and kept for a note."""
        number, after = self.peek(1), self.peek(2)
        if token.text in ("gr", "grade") and self.lettered_grade():
            return True
        if token.text == "aw" and number is not None and number.text == "-":
            self.at += 1  # EN AW-6082
            number, after = self.peek(1), self.peek(2)
        if number is None or number.kind != "num" or number.unit not in ("", "m"):
            return False
        joined = after is not None and after.kind == "sep" and after.text in ("x", "*", "/")
        text, value = token.text, number.value
        fits = number.glued and (
            (text == "s" and value in _STEEL_GRADES)
            or (text == "st" and value in _OLD_GRADES)
            or (text in _LETTERED_GRADES and value in _LETTERED_GRADES[text] and self.strong_tail(text, after))
            or (text == "g" and number.text in ("40.20", "40.2", "40.21"))
            or (text in _WOOD_GRADES and value in _WOOD_GRADES[text] and not self.solid and not self.bent and not self.barred)
            or (text == "a" and value in _ASTM_GRADES and not self.solid and not self.bent)
        )
        named = text in ("grade", "gr", "type", "class", "cl", "aisi") or (text in _GRADE_WORDS and value >= 200)
        if joined or not (fits or named):
            return False
        raw = token.raw + number.raw
        self.at += 1
        while (tail := self.peek(1)) is not None and (
            tail.glued
            and (
                tail.kind == "num"
                or (tail.kind == "word" and tail.text in _GRADE_TAILS)
                or (tail.text in ("+", "-") and self.at + 2 < len(self.tokens))
            )
        ):
            raw += tail.raw
            self.at += 1
        self.out.grades.append(raw)
        if text == "gl":
            self.out.kinds.append("glulam")
        return True

    def strong_tail(self, letter: str, after: Token | None) -> bool:
        """What follows a lettered strength: its quality, or nothing more; C350 alone may be a fabric or a size."""
        quality = after is not None and after.kind == "word" and after.glued
        return quality and after is not None and after.text == "l" if letter == "c" else quality or after is None or not after.glued

    def lettered_grade(self) -> bool:
        """``GR B``, ``GR.50`` behind an ASTM number; a Polish ``gr.10`` is a thickness."""
        ahead = 2 if (dot := self.peek(1)) is not None and dot.text == "." else 1
        value = self.peek(ahead)
        if value is None:
            return False
        american = any(g.lower().startswith("a") for g in self.out.grades) or any("astm" in s for s in self.out.standards)
        after = self.peek(ahead + 1)
        joined = after is not None and after.kind == "sep"
        strength = value.kind == "num" and ahead == 2 and american and not joined
        if strength or (value.kind == "word" and value.text in ("a", "b", "c", "d")):
            self.out.grades.append(f"gr {value.raw}")
            self.at += ahead
            return True
        return False

    def code(self, token: Token) -> bool:
        """A letter and a whole number that name a reinforcing bar or a fabric (``T16``, ``A393``, ``Q257A``), or a grade."""
        number, after = self.peek(1), self.peek(2)
        if (
            token.text not in _CODE_LETTERS
            or number is None
            or number.kind != "num"
            or not number.glued
            or number.unit
            or "." in number.text
        ):
            return False
        if (before := self.peek(-1)) is not None and before.text == "he":
            return False  # HE B200
        used, tail = 1, ""
        if after is not None and after.kind == "sep":
            length = self.peek(3)
            if length is None or length.kind != "num" or length.mm < 500:
                return False
            used = 2  # T16 x 3000: what follows is the length
        elif after is not None and after.glued and after.text == "a":
            used, tail = 2, "A"
        self.out.codes.append((token.text.upper(), number.text, tail))
        self.at += used
        return True

    def labelled(self, token: Token) -> bool:
        """``t=12``, ``ép. 4``, ``wall 5``, ``OD 19``, and in arch stones and wedges ``R3500``."""
        name = words.LABELS.get(token.text)
        if self.solid or self.bent:
            name = words.SOLID_LETTERS.get(token.text, name) if self.solid else words.BENT_LETTERS.get(token.text, name)
            name = "angle" if token.text == "angle" else name
        if name is None and token.text == "l" and (sign := self.peek(1)) is not None and sign.text in ("=", ":"):
            name = "length"
        if name is None:
            return False
        ahead = 1
        sign = self.peek(1)
        signed = sign is not None and sign.text in ("=", ":", ".")
        if signed:
            ahead = 2
        number = self.peek(ahead)
        if number is None or number.kind != "num":
            return False
        after = self.peek(ahead + 1)
        joined = after is not None and after.kind == "sep" and self.number_after(ahead + 2)
        lettered = self.solid or (self.bent and token.text in words.BENT_LETTERS and number.glued and not joined)
        if len(token.text) == 1 and token.text != "ø" and not (sign is not None and sign.text in ("=", ":")) and not lettered:
            return False
        if token.text == "wt" and joined:
            return False  # WT6x25 is a tee
        if (name in ("diameter", "outer diameter") and joined) or (token.text == "ø" and not self.out.chains and not self.solid):
            return False  # Ø48.3x3.2 is a row of sizes; a lone Ø20 too, so that the kind decides
        self.label(name, number)
        if token.text in words.PROPERTY_WORDS and words.PROPERTY_WORDS[token.text] != "letter":
            self.out.properties.add(words.PROPERTY_WORDS[token.text])
        self.at += ahead
        return True

    def label(self, name: str, number: Token) -> None:
        if name == "length" and not number.unit and number.value < LEAST_PIECE and not self.solid:
            self.out.problem = f"a length of {number.raw} mm is implausible: write its unit"
        if name == "diameter" and number.raw and len(self.out.chains) == 1 and len(self.out.chains[0].numbers) == 1:
            self.out.counted = self.out.chains[0].numbers[0].value.is_integer()  # 4 Ø16: a count, or a wall
        if name in self.out.labels and self.out.labels[name].mm != number.mm:
            self.out.problem = f"the {name} is given twice"
        self.out.labels[name] = number

    # -- signs --------------------------------------------------------------------------------------------------------
    def separator(self, token: Token) -> None:
        """A separator that does not stand between two numbers."""
        follower = self.peek(1)
        if token.text in ("x", "*") and follower is not None and follower.kind == "num":
            before = self.peek(-1)
            if before is None or before.kind != "word" or before.text not in words.LABELS:
                self.out.problem = f"a number is missing before {token.raw!r}"

    def mark(self, token: Token) -> None:
        if token.text in "[]" and (beside := self.peek(1)) is not None and beside.text in "[]" and beside.glued:
            self.out.double = True  # ][ and []: two channels, back to back or toe to toe
            self.at += 1
        elif token.text in _OPENING:
            self.depth += 1
        elif token.text in _CLOSING:
            self.depth = max(0, self.depth - 1)
        elif token.text == "#":
            number, join = self.peek(1), self.peek(2)
            if number is not None and number.kind == "num" and number.glued and not (join is not None and join.kind == "sep"):
                self.out.codes.append(("#", number.text, ""))
                self.at += 1
        elif token.text in _APPROXIMATE:
            self.out.problem = f"{token.raw!r} makes the size approximate"
        elif token.text == "-":
            before, number = self.peek(-1), self.peek(1)
            if number is None or number.kind != "num" or not number.glued:
                return
            if self.at == 1 and before is not None and token.glued and self.mark_code(before, number):
                self.out.others.append(f"{before.raw}-{number.raw}")
                self.at += 1
            elif before is not None and before.kind == "num" and token.glued:
                self.out.problem = "a dash between two numbers is a range, or a sign nobody can be sure of"
            elif not token.glued or (before is not None and before.kind == "sep"):
                self.out.problem = f"a size cannot be negative (-{number.raw})"

    def mark_code(self, word: Token, number: Token) -> bool:
        """``SM-05 side panel``: a code in front of words, whose number is no size; none where sizes follow, or nothing."""
        if word.kind != "word" or number.unit or "." in number.text:
            return False
        tables = (words.FAMILY_WORDS, words.KIND_WORDS, words.LABELS, words.PROPERTY_WORDS, words.NOMINAL_WORDS)
        if any(word.text in known for known in tables):
            return False
        after = self.peek(2)
        return after is not None and after.kind == "word" and not after.glued and len(after.text) > 2

    def drop_repeats(self) -> None:
        """A bracketed row of sizes that repeats the one before it in other units says nothing new."""
        chains = self.out.chains
        if (
            len(chains) == 2
            and chains[1].bracketed
            and not chains[0].bracketed
            and len(chains[0].numbers) == len(chains[1].numbers)
            and all(abs(a - b) <= 0.012 * max(a, b) for a, b in zip(chains[0].mm, chains[1].mm, strict=True))
        ):
            del chains[1]


_ALL_VARIANTS = frozenset().union(*words.VARIANTS.values())


def parse(tokens: list[Token]) -> Parsed:
    return Parser(tokens).run()


def words_only(tokens: list[Token]) -> Parsed:
    """The words of a heading or caption, its numbers left out."""
    return Parser([t for t in tokens if t.kind == "word"]).run()


__all__ = ["MM_PER", "Chain", "Parsed", "parse", "words_only"]
