"""The reading traps of real lists, each with what a careful person would take: take, warn or refuse.

*Take* is weighed; *warn* is weighed with a note where nothing was inferred, else assumed; *refuse* is not weighed (a row) or not
read (a table; an error where no list is left). The example rows are invented. Numbers are those of our list of traps.
"""

from __future__ import annotations

import datetime
import re
from dataclasses import dataclass, field
from pathlib import Path

import openpyxl
import pytest

from takeoff import pipeline
from takeoff.errors import InputError

W, A, N = "weighed", "assumed", "not weighed"
BEAM = "UB 203x133x25;S355"
KG = 25.1


@dataclass(frozen=True)
class Trap:
    """One trap: the list's text, and what must come of it."""

    number: int
    what: str
    text: str
    status: list[str] = field(default_factory=list)
    length: list[float] | None = None
    quantity: list[float] | None = None
    kg: float | None = None
    kinds: tuple[str, ...] = ()
    parts: dict[str, int] = field(default_factory=dict)
    error: str | None = None
    material: str | None = None
    assembly: list[str | None] | None = None
    encoding: str = "utf-8"
    name: str = "list.csv"


H = "Mark;Qty;Section;Material;Length (mm)\n"
ROW = f"A1;2;{BEAM};6000\n"

TRAPS = [
    Trap(1, "title rows before the headings", "Gantry frame, rev B\n\nMark;Section;Material;Length (mm);Qty\nA1;" + BEAM + ";6000;2\n", [W], kg=2 * 6 * KG),
    Trap(2, "headings not in the first column", ";;Pos;Qty;Section;Material;Length (mm)\n;;A1;2;" + BEAM + ";6000\n", [W], kg=2 * 6 * KG),
    Trap(3, "no headings at all", "2040 front;2;650mm\n2040 rear;2;650mm\n", error="no member list"),
    Trap(4, "headings repeated", H + ROW + H + ROW, [W, W], parts={"heading": 2}),
    Trap(5, "several tables with different headings", H + ROW + "\nPart;Qty;Section;Material;Length (m)\nB;1;" + BEAM + ";3\n", [W, W],
         length=[6000, 3000]),
    Trap(6, "lists side by side", "Qty;Section;Material;Length (mm);;Qty;Section;Material;Length (mm)\n1;" + BEAM + ";6000;;1;" + BEAM + ";5000\n",
         error="side by side"),
    Trap(8, "a first sheet of contents only", "This document was exported for the shop\n\n" + H + ROW, [W], parts={"other": 1}),
    Trap(9, "an extent far larger than the data", H + ROW + ";;;;\n" * 400, [W], parts={"blank": 0}),
    Trap(10, "a blank row inside the list", H + ROW + "\n" + ROW, [W, W], parts={"blank": 1}),
    Trap(11, "a comment line first", "# licence: none\n" + H + ROW, [W]),
    Trap(12, "an example block below the list", H + ROW + "\nEXAMPLE\n" + H + ROW, [W], kinds=("example-block",)),
    Trap(13, "a vertical table", "Length;>=1200 mm\nQuantity;2\n", error="no member list"),
    Trap(14, "bullets instead of a table", "* 2 x Flat 50x5 (length=300)\n* 1 x Flat 50x5 (length=200)\n", error="no member list"),
    Trap(15, "a heading with a trailing blank", "Mark ;Qty ;Section ;Material ;Length  (mm) \nA1;2;" + BEAM + ";6000\n", [W]),
    Trap(16, "two headings with one word, filled differently",
         "Mark;Qty;Section;Material;Grade;Length (mm)\nA1;1;UB 203x133x25;S355;1.4404;6000\nA2;1;UB 203x133x25;S355;;6000\n", [N, W],
         kinds=("heading-twice",)),
    Trap(17, "a total row with a label", "Mark;Qty;Section;Material;Length (mm);Total mass (kg)\nA1;2;" + BEAM + ";6000;301.2\nTOTAL;;;;;301.2\n", [W],
         parts={"total": 1}),
    Trap(18, "a total row without a label", "Mark;Qty;Section;Material;Length (mm);Total mass (kg)\nA1;2;" + BEAM + ";6000;301.2\n;;;;;1123.89\n", [W],
         parts={"total": 1}, kinds=("total-differs",)),
    Trap(19, "a total above the headings", "Grand total;1,709.51\n" + H + ROW, [W]),
    Trap(20, "summary rows inside the table", H + ROW + ";-;2x1 tube;S235;9520 = 31.2 ft\n", [W], parts={"total": 1}),
    Trap(21, "section title rows", H + "Table frame (to be welded)\n" + ROW + "Stand\n" + ROW, [W, W], parts={"other": 2},
         assembly=["Table frame (to be welded)", "Stand"], kinds=("group-title",)),
    Trap(22, "an assembly row with a multiplier", H + "Wheel module;8;;;\n" + ROW, [N, N], kinds=("multiplier-above",)),
    Trap(23, "a sub-assembly beside its own parts",
         "Mark;Qty;Section;Material;Length (mm);Unit mass (kg)\nFRAME-ASSY;1;;;;301.2\nA1;2;" + BEAM + ";6000;150.6\n", [W, W], kinds=("may-count-twice",)),
    Trap(24, "a row contained in another", "Mark;Qty;Section;Material;Length (mm);Remarks\nA1;1;" + BEAM + ";6000;\nA2;1;" + BEAM + ";6000;included in row 2\n",
         [W, N], kinds=("row-elsewhere",)),
    Trap(25, "an alternative row", H + ROW + "OR A2;1;UB 254x146x31;S355;6000\n", [W, N], kinds=("alternative-row",)),
    Trap(26, "an optional row", "Mark;Qty;Section;Material;Length (mm);Remarks\nBrace;2;" + BEAM + ";6000;(optional)\n", [W], kinds=("optional-row",)),
    Trap(27, "a row pointing to another list", H + ROW + "Centre arms (x2);2;see other list;;\n", [W, N]),
    Trap(28, "postage, tax and labour rows", H + ROW + "Postage;1;;;\nVAT 20 %;1;;;\nLabour;3;;;\n", [W], parts={"other": 3}),
    Trap(29, "separator rows", H + ROW + "---------;1;;;\n" + ROW, [W, W], parts={"other": 1}),
    Trap(30, "numbered empty rows", H + ROW + "22;;;;\n23;;;;\n", [W], parts={"other": 2}),
    Trap(33, "bulk materials without a size", H + ROW + "Gravel;2;bag;;\nPaint;20;;;\n", [W, N, N]),
    Trap(34, "a length in the quantity", "Mark;Qty;Section;Material\nA1;2.1 m;UB 203x133x25;S355\n", [A], quantity=[1], length=[2100]),
    Trap(35, "a unit column decides", "Section;Material;Unit;Qty\nUB 203x133x25;S355;m;10\n", [W], quantity=[1], length=[10_000], kinds=("unit-column",)),
    Trap(35, "pieces in the unit column", "Section;Material;Unit;Qty;Length (m)\nUB 203x133x25;S355;pcs;10;2\n", [W], quantity=[10], length=[2000]),
    Trap(35, "lots and sets in the unit column", "Section;Material;Unit;Qty;Length (m)\nUB 203x133x25;S355;lot;1;2\n", [N]),
    Trap(36, "counted words in the quantity", H + "".join(f"A;{q};{BEAM};1000\n" for q in ("2 off", "2 no.", "2x", "2 pcs", "2 szt", "2 pezzi")), [W] * 6,
         quantity=[2] * 6),
    Trap(36, "words that hide the count", H + "".join(f"A;{q};{BEAM};1000\n" for q in ("1 set", "1 box", "lote", "1 kpl")), [N] * 4),
    Trap(37, "about so many", H + f"A;~12;{BEAM};1000\nA;ca 13;{BEAM};1000\nA;2-3;{BEAM};1000\nA;2 or 3;{BEAM};1000\n", [A, A, N, N]),
    Trap(38, "a sum as text", H + f"A;1 + 1;{BEAM};1000\nA;32 + 16 szt;{BEAM};1000\n", [N, N]),
    Trap(39, "quantity and length in one cell, as the heading says", "Mark;Qty x length (mm);Section;Material\nA;4 x 504;" + BEAM + "\n", [W], quantity=[4],
         length=[504]),
    Trap(39, "quantity and length in one cell, unannounced", "Mark;Qty;Section;Material\nA;4 x 504;" + BEAM + "\n", [N]),
    Trap(40, "two pairs in one cell", "Mark;Qty x length (mm);Section;Material\nA;5 x 100 + 10 x 115;" + BEAM + "\n", [A], kg=1.65 * KG),
    Trap(41, "the quantity in the name", "Name;Section;Material;Length (mm)\nBlade (5x);Flat 50x5;S235;5 x 390\n", [N]),
    Trap(42, "no quantity column", "Mark;Section;Material;Length (mm)\nA1;" + BEAM + ";6000\n", [A], kinds=("quantity-assumed",)),
    Trap(43, "blank, dash and zero", H + f"A;;{BEAM};1000\nB;-;{BEAM};1000\nC;0;{BEAM};1000\n", [N, N, N]),
    Trap(44, "per and total side by side", "Mark;Qty per arm;Total;Section;Material;Length (mm)\nA1;2;4;" + BEAM + ";6000\nA2;1;2;" + BEAM + ";6000\n", [W, W],
         quantity=[4, 2], kinds=("quantity-per-and-total",)),
    Trap(45, "a decimal quantity", H + f"A;34,04;{BEAM};1000\nB;28.0;{BEAM};1000\n", [N, W]),
    Trap(46, "packs, with hardware", "Mark;Qty;Section;Unit mass (kg);Remarks\nB1;5;Bolt M12x40;0.06;pack of 25\n", [A], quantity=[125]),
    Trap(46, "packs, of anything else", "Mark;Qty;Section;Material;Length (mm);Remarks\nB1;5;" + BEAM + ";6000;pack of 25\n", [N]),
    Trap(47, "left and right hand", H + f"A;4 (2 L + 2 R);{BEAM};1000\nB;4 (2 per side);{BEAM};1000\n", [W, W], quantity=[4, 4], kinds=("quantity-remark",)),
    Trap(48, "no unit anywhere (the rule for bare numbers goes before: mm assumed)", "Mark;Qty;Section;Material;Length\nA;1;" + BEAM + ";2040\n", [A]),
    Trap(48, "no unit anywhere, and only metres are plausible", "Mark;Qty;Section;Material;Length\nA;1;" + BEAM + ";6.05\nB;2;" + BEAM + ";3.2\n", [N, N]),
    Trap(49, "the unit in the heading only", "Mark;Qty;Section;Material;length_in\nA;1;" + BEAM + ";100\n", [W], length=[2540]),
    Trap(50, "a cell's unit goes before the heading's", H + f"A;1;{BEAM};2.4 m\nB;1;{BEAM};2400\n", [W, W], length=[2400, 2400], kinds=("unit-in-cell",)),
    Trap(51, "mixed units in one column", "Mark;Qty;Section;Material;Length\nA;1;" + BEAM + ";650mm\nB;1;" + BEAM + ";5m\nC;1;" + BEAM + ";700\n", [W, W, N]),
    Trap(52, "section in inches, length in mm", H + "A;1;HSS4X4X1/4;A500;300\n", [W], length=[300]),
    Trap(53, "feet implied by a price heading", "Mark;Qty;Section;Material;Price per foot;Length\nA;1;" + BEAM + ";3;14\n", [N]),
    Trap(54, "feet and inches", H.replace(" (mm)", "") + f"A;1;{BEAM};5'-8 1/2\"\nB;1;{BEAM};7'-3/4\"\nC;1;{BEAM};5-8\n", [W, W, N],
         length=[68.5 * 25.4, 84.75 * 25.4]),
    Trap(55, "fraction characters", H.replace(" (mm)", "") + f"A;1;{BEAM};1 ½\"\nB;1;{BEAM};22-7/8\"\n", [W, W], length=[38.1, 22.875 * 25.4]),
    Trap(56, "two length columns, one of them the cut",
         "Mark;Qty;Section;Material;Length (mm);Cut length (mm)\nA;1;" + BEAM + ";6000;5950\n", [W], length=[5950]),
    Trap(57, "two units in one cell that agree", H.replace(" (mm)", "") + f"A;1;{BEAM};1067.6 mm (42.03\")\n", [W], length=[1067.6]),
    Trap(57, "two units in one cell that do not", H.replace(" (mm)", "") + f"A;1;{BEAM};6' (243.84cm)\n", [N]),
    Trap(58, "a total length beside the piece length", "Mark;Qty;Section;Material;Length (m);Total length (m)\nA;4;" + BEAM + ";2.40;9.60\n", [W], kg=9.6 * KG),
    Trap(59, "a stock length is no piece length", "Mark;Qty;Section;Material;Length (mm);Stock length (mm)\nA;1;" + BEAM + ";2000;6000\n", [W], length=[2000]),
    Trap(60, "ordered per six metres", "Mark;Qty;Section;Material;Length (m);Remarks\nA;1;" + BEAM + ";0.75;bars of 6 m\n", [W], length=[750]),
    Trap(61, "by six metres, by note only", "Mark;Qty;Section;Material;Length (m);Remarks\nA;2;" + BEAM + ";;(By 6 meters)\n", [N]),
    Trap(62, "a length range", H + f"A;1;{BEAM};500-600\nB;1;{BEAM};1601mm - 1700mm\n", [N, N]),
    Trap(63, "a reference instead of a number", H + "".join(f"A;1;{BEAM};{t}\n" for t in ("same as wall", "as needed", "TBD", "from DXF")), [N] * 4),
    Trap(64, "an impossible thickness", "Mark;Qty;Section;Material\nA;1;Sheet 150mm x 3000mm x 1.5m;S235\n", [N]),
    Trap(68, "angles and radii are no sizes", "Mark;Qty;Section;Material;Length (mm);Remarks\nA;1;" + BEAM + ";1000;45 deg both ends, R30\n", [W], length=[1000]),
    Trap(69, "kerf and waste", "Mark;Qty;Section;Material;Length (m);Remarks\nA;1;" + BEAM + ";2.23;buy 3 m, +10 % waste\n", [W], length=[2230]),
    Trap(70, "a decimal comma settled by the file", "Mark;Qty;Section;Material;Length (m)\nA;1;" + BEAM + ";2,40\nB;1;" + BEAM + ";1,500\n", [W, W],
         length=[2400, 1500]),
    Trap(70, "a comma that nothing settles", "Mark;Qty;Section;Material;Length (mm)\nA;1;" + BEAM + ";1,500\n", [A], length=[1500]),
    Trap(70, "a comma that nothing settles, both readings plausible", "Mark;Qty;Section;Material;Length (m)\nA;1;" + BEAM + ";1,500\n", [A], length=[1500]),
    Trap(71, "blank or apostrophe for thousands", H + f"A;1;{BEAM};10 500\nB;1;{BEAM};10\u00a0500\nC;1;{BEAM};12'450\n", [W, W, W],
         length=[10_500, 10_500, 12_450]),
    Trap(71, "an apostrophe beside inches", H.replace(" (mm)", "") + f"A;1;{BEAM};12'450\nB;1;{BEAM};12'-6\"\n", [N, W]),
    Trap(72, "a point for thousands beside decimal commas", H + f"A;1;{BEAM};1.000\nB;1;{BEAM};812,5\n", [W, W], length=[1000, 812.5]),
    Trap(73, "comma and point both decimal", "Mark;Qty;Section;Material;Length (m)\nA;1;" + BEAM + ";2,45\nB;1;" + BEAM + ";0.75\n", [W, W],
         length=[2450, 750], kinds=("mixed-decimal-signs",)),
    Trap(74, "numbers as text", H + f"545636.0;28;{BEAM};1000\n", [W], quantity=[28]),
    Trap(75, "leading zeros", H + f"001;1;{BEAM};1000\n", [W]),
    Trap(76, "a backtick before a number", H + f"A;`9;{BEAM};1000\n", [W], quantity=[9], kinds=("stray-signs",)),
    Trap(77, "stars and bold in cells", H + f"A;1;{BEAM};**2 621** ★\n", [W], length=[2621], kinds=("stray-signs",)),
    Trap(78, "the name holds the section", "Name;Qty;Material;Length (mm)\nSide bar RHS 80x40x3;2;S235;1000\n", [W], kinds=("section-from-name",)),
    Trap(79, "no type word", "Qty;Section;Length (mm)\n1;50x50x2;1000\n", [N]),
    Trap(80, "the wall is missing", H + "A;1;40 x 80 box section;S235;1000\nB;1;Ø27 tube;S235;1000\n", [N, N]),
    Trap(82, "the length inside the designation", "Mark;Qty;Section;Material\nA;1;38.10*1.60*3250mm;S235\n", [N]),
    Trap(83, "a plate with its length in the name", H + "A;1;PL4x60x120;S235;120\n", [W], kg=0.004 * 0.06 * 0.12 * 7850),
    Trap(84, "separators", H + "A;1;RHS120×60×4;S235;1000\nB;1;RHS 120/60/4;S235;1000\nC;1;RHS 120*60*4;S235;1000\n", [W, W, W]),
    Trap(85, "diameter characters", H + "A;1;Ø20;S235;1000\nB;1;∅20;S235;1000\nC;1;dia 20;S235;1000\n", [W, W, W]),
    Trap(86, "Ø used for a hexagon", H + "A;1;Hexagon stock Ø41;S235;1000\n", [W]),
    Trap(87, "outside and inside diameter", H + "A;1;OD19 x ID16;S235;1000\nB;1;25x21;S235;1000\n", [W, N]),
    # Only one table has this size with this kg/m, so nothing is inferred that could be otherwise.
    Trap(88, "a beam by size and kg", H + "A;1;254x146x37KG;S275;1000\n", [W], kg=37.0),
    Trap(89, "nominal timber", H + "A;1;2x4;SPF;2000\n", [W]),
    Trap(90, "plies", H + "A;2;2x45x170;C24;2000\n", [N]),
    Trap(91, "thickness and material in the caption", "Cut list: carcass (18 mm birch plywood)\nMark;Qty;Length (mm);Width (mm)\nA;2;600;300\n", [W],
         kinds=("material-from-caption",)),
    Trap(92, "the material in the caption", "Saw list steel (S355)\nMark;Qty;Section;Length (mm)\nA;1;UB 203x133x25;1000\nB;1;RD 20;1000\n", [W, W],
         kinds=("material-from-caption",)),
    Trap(93, "two materials in one cell", H + "A;1;CHS 48.3x3.2;PVC or aluminum tube;1000\nB;1;45x90;spruce/cedar/ply;1000\n", [N, N]),
    Trap(94, "a colour that looks like a material", "Mark;Qty;Section;decor;Length (mm)\nA;1;Block 600x300x18;Steel;\n", [N]),
    Trap(95, "edge banding is no board", "Mark;Qty;Section;Material;Length (mm);Width (mm);Banding\nA;1;18 mm;MDF;600;300;ABS 1,0 mm\n", [W],
         kg=0.018 * 0.6 * 0.3 * 780),
    Trap(96, "catalogue profiles", H + "A;1;T-slot 2040;aluminium;1000\n", [N]),
    Trap(97, "purchased parts with sizes", H + "A;1;DIN 7991 M16 x 40;;\n", [N]),
    Trap(98, "a stated kg/m that disagrees", "Mark;Qty;Section;Material;Length (m);kg/m\nA;10;L 50x50x5;S235;6;5.0\n", [W], kinds=("stated-mass-differs",)),
    Trap(99, "a mass, and no size", "Mark;Qty;Section;Material;Unit mass (kg)\nA;1;Sheet 2 mm;S235;25.85\n", [W], kg=25.85, kinds=("stated-mass",)),
    Trap(100, "a mass per row, not each", "Mark;Qty;Section;Material;Length (mm);Total mass (kg)\nA;3;L 50x50x5;S235;1000;11.3\n", [W]),
    Trap(101, "a load limit is no mass", "Mark;Qty;Section;Material;Length (mm);Remarks\nA;1;" + BEAM + ";1000;LOAD LIMIT ~15kg\n", [W], kg=KG),
    Trap(102, "a gusset may be a triangle", H + "A;1;Gusset 100x100x5;S235;\n", [W]),
    Trap(103, "a heavy row is real", H + "A;26;HE 320 B;S355;12450\n", [W]),
    Trap(104, "an unquoted comma", "Mark,Qty,Section,Material,Length (mm)\nA,1,UB 203x133x25, painted,S355,6000\nB,1,UB 203x133x25,S355,6000\n", [N, W],
         kinds=("broken-row",)),
    Trap(105, "an inch mark as a quote", "Mark,Qty,Section,Unit mass (kg)\nA,40,Nylon ties 4\",0.002\nB,1,\"6\"\"\" bracket,0.5\nC,1,Winch,2\n", [W, W, W]),
    Trap(105, "a quote that is never closed", "Mark,Qty,Section,Unit mass (kg)\nA,40,\"Nylon ties 4,0.002\nB,1,Winch,2\nC,1,Winch,2\n", [N, W, W],
         kinds=("unclosed-quote",)),
    Trap(106, "semicolons with decimal points", "Mark;Qty;Section;Material;Length (m)\nA;1;" + BEAM + ";2.45\n", [W], length=[2450]),
    Trap(108, "groups filled only in their first row", "Assembly;Mark;Qty;Section;Material;Length (mm)\nFrame;A;1;" + BEAM + ";1000\n;B;1;" + BEAM + ";1000\n"
         "Roof;C;1;" + BEAM + ";1000\n", [W, W, W], assembly=["Frame", "Frame", "Roof"]),
    Trap(108, "a blank assembly among rows that name their own", "Assembly;Mark;Qty;Section;Material;Length (mm)\nFrame;A;1;" + BEAM + ";1000\n"
         "Frame;B;1;" + BEAM + ";1000\n;C;1;" + BEAM + ";1000\n", [W, W, W], assembly=["Frame", "Frame", None]),
    Trap(108, "a material is never filled down", H + "A;1;CHS 48.3x3.2;1.4404;1000\nB;1;CHS 48.3x3.2;;1000\n", [W, A]),
    Trap(111, "soft hyphens and no-break blanks", H + "A\u00ad1;1;UB\u00a0203x133x25;S355;1\u202f000\n", [W], length=[1000]),
    Trap(112, "umlauts read in the wrong encoding", "Mark;Qty;Profil;Werkstoff;LÃ¤nge (mm)\nA;1;HEA 200;S235;1000\n", [W], length=[1000],
         kinds=("text-repaired",)),
    Trap(112, "Windows-1252", "Pos;Stück;Profil;Werkstoff;Länge (mm)\nA;1;HEA 200;S235;1000\n", [W], encoding="cp1252", kinds=("text-repaired",)),
    Trap(114, "a file called a cut list", "Subject;Sender;Folder\ninvoice;office;Inbox\n", error="no member list"),
    Trap(115, "a warning inside the document", "Do not cut, dimensions provisional\n" + H + ROW, [W], kinds=("list-warning",)),
    Trap(116, "escapes of the source format", H + "A;1;SHS 100\\*100\\*5;S355;1000\nB;1;SHS 100x100x5<br>;S355;1000\n", [W, W]),
    Trap(117, "the unit once above the table", "Units: mm\n" + H.replace(" (mm)", "") + ROW, [W]),
    Trap(118, "line ends CR CR LF", (H + ROW + ROW).replace("\n", "\r\r\n"), [W, W], parts={"blank": 0}),
    Trap(119, "a second small table of sums", H + ROW + "\nMaterial;Parts;Area\nS355;2;1.2\nTotal;2;1.2\n", [W], parts={"total": 2}),
]


@pytest.mark.parametrize("trap", TRAPS, ids=lambda t: f"{t.number:03d} {t.what}")
def test_trap(trap: Trap, tmp_path: Path) -> None:
    """The list is read as a careful person would read it."""
    path = tmp_path / trap.name
    path.write_bytes(trap.text.encode(trap.encoding))
    if trap.error:
        with pytest.raises(InputError, match=re.escape(trap.error)):
            pipeline.schedule([path])
        return
    result = pipeline.schedule([path])
    said = {f.kind for f in result.all_findings()}
    detail = (result.members[["row", "section_text", "length_mm", "quantity", "status", "reason"]].to_string(), said)
    assert result.members["status"].tolist() == trap.status, detail
    for kind in trap.kinds:
        assert kind in said, detail
    if trap.length is not None:
        assert result.members["length_mm"].dropna().tolist() == pytest.approx(trap.length), detail
    if trap.quantity is not None:
        assert result.members["quantity"].tolist() == trap.quantity, detail
    if trap.kg is not None:
        assert result.totals.mass_kg.nominal == pytest.approx(trap.kg, rel=1e-6), detail
    if trap.assembly is not None:
        assert result.members["assembly"].tolist() == trap.assembly, detail
    account = result.account.as_record()
    for part, count in trap.parts.items():
        assert account[part] == count, (account, detail)
    if A in trap.status:
        assert any(f.level == "assumed" for f in result.all_findings())


def _book(path: Path, rows: list[list[object]]) -> openpyxl.Workbook:
    book = openpyxl.Workbook()
    sheet = book.active
    assert sheet is not None
    sheet.append(["Mark", "Qty", "Section", "Material", "Length (mm)"])
    for row in rows:
        sheet.append(row)
    book.save(path)
    return book


@pytest.fixture
def book(tmp_path: Path) -> Path:
    _book(tmp_path / "list.xlsx", [["A", 1, "UB 203x133x25", "S355", 6000], ["B", 2, "UB 203x133x25", "S355", 3000]])
    return tmp_path / "list.xlsx"


def test_trap_031_rows_hidden_by_a_filter(book: Path) -> None:
    """Hidden rows are read like the others, and their number is said."""
    opened = openpyxl.load_workbook(book)
    opened.worksheets[0].row_dimensions[3].hidden = True
    opened.save(book)
    result = pipeline.schedule([book])
    assert result.members["status"].tolist() == [W, W]
    assert [f.count for f in result.findings if f.kind == "hidden-rows"] == [1]


def test_trap_066_a_time_in_a_length_cell(book: Path) -> None:
    """A time or a date is no length: the row is refused."""
    opened = openpyxl.load_workbook(book)
    opened.worksheets[0]["E2"] = datetime.time(5, 0)
    opened.worksheets[0]["E3"] = datetime.date(2026, 5, 1)
    opened.save(book)
    assert pipeline.schedule([book]).members["status"].tolist() == [N, N]


def test_trap_107_a_number_merged_over_rows(book: Path) -> None:
    """One quantity over two rows belongs to neither alone: both are refused."""
    opened = openpyxl.load_workbook(book)
    opened.worksheets[0].merge_cells("B2:B3")
    opened.save(book)
    result = pipeline.schedule([book])
    assert result.members["status"].tolist() == [N, N]
    assert "merged-number" in {f.kind for f in result.all_findings()}


MORE = [
    Trap(32, "bought parts repeated in a second table", H + ROW + "\nName;Qty;Section;Material;Length (mm)\nA1;2;" + BEAM + ";6000\n", [W, W]),
    Trap(65, "a size that may be meant in cm is taken as typed", H + "A;1;Board 80x60;C24;2000\n", [W], kg=0.08 * 0.06 * 2 * 420),
    Trap(67, "a stud's height is its length", "Mark;Qty;Section;Material;Height (mm)\nA;4;45x95;C24;2400\n", [A], length=[2400], kinds=("height-as-length",)),
    Trap(113, "text from right to left is kept as it stands", H + "\u05e6\u05d9\u05e8 1;1;" + BEAM + ";1000\n", [W], kg=KG),
]


@pytest.mark.parametrize("trap", MORE, ids=lambda t: f"{t.number:03d} {t.what}")
def test_further_trap(trap: Trap, tmp_path: Path) -> None:
    """As above."""
    test_trap(trap, tmp_path)


#: met in invented lists of many trades, typed before they were read here; numbered on from the traps above
TRADES = [
    Trap(121, "a row of units, each of them also a heading", "Mark;Section;Material;Qty;Length;Weight each;Total wt\n;;;;mm;kg;kg\n"
         "A;" + BEAM + ";2;6000;;\n", [W], kg=12 * KG, parts={"heading": 2}),
    Trap(121, "a row of units with dashes and words for pieces", "Pos;Stk;Section;Material;Length;Weight each\n-;Stk.;-;-;[m];[kg]\n"
         "A;2;" + BEAM + ";6;\n", [W], kg=12 * KG, parts={"heading": 2}),
    Trap(121, "a row of units in feet and inches", "Mark;Qty;Section;Material;Length;Wt\n;;;;FT-IN;LB\nA;1;" + BEAM + ";10'-0\"\n", [W],
         length=[3048], parts={"heading": 2}),
    Trap(122, "numbered items beside descriptions", "Item;Qty;Description;Material;Length (mm)\n1;1;" + BEAM + ";1000\n2;1;" + BEAM + ";1000\n", [W, W],
         kg=2 * KG),
    Trap(122, "coded items beside descriptions", "Spool No.;Item;Qty;Description;Material;Length (mm)\nS1;1;1;" + BEAM + ";1000\nS1;2;1;" + BEAM + ";1000\n",
         [W, W], kg=2 * KG),
    Trap(122, "items numbered again for each mark", "Spool No.;Item;Qty;Description;Material;Length (mm)\nS1;1;1;" + BEAM + ";1000\nS1;2;1;" + BEAM + ";1000\n"
         "S2;1;1;" + BEAM + ";1000\n", [W] * 3, kg=3 * KG),
    Trap(123, "a column Nr that counts, beside marks", "Ref;Section;Material;Length (m);Nr\nA;" + BEAM + ";1;12\nB;" + BEAM + ";1;2\nC;" + BEAM + ";1;6\n",
         [W, W, W], kg=20 * KG),
    Trap(123, "a column Nr that numbers", "Nr;Qty;Section;Material;Length (m)\n1;4;" + BEAM + ";1\n2;4;" + BEAM + ";1\n", [W, W], kg=8 * KG),
    Trap(124, "ditto marks for section and material", H + ROW + "".join(
        f"A;1;{mark};{mark};1000\n" for mark in (
            '""""', '"-""-"', "do.", "- do -", "ditto", "dito", "dto.", "idem", "〃", "''", "„", "-,,-", "as above", "wie vor", "w.o.", "j.w.")), [W] * 17,
         kg=28 * KG, kinds=("ditto",)),
    Trap(124, "a ditto mark with nothing above it", H + 'A;1;"""";S355;1000\n' + ROW + "B;1;" + BEAM.replace("S355", "") + ";1000\nC;1;do;do;1000\n", [N, W, A, N]),
    Trap(124, "a ditto mark is no quantity", H + ROW + 'A;"""";' + BEAM + ";1000\n", [W, N]),
    Trap(125, "sections under material, beside a grade", "Pos;Qty;Name;Materiaal;Kwaliteit;Lengte (mm)\n1;1;Post;Koker 100x100x5;1.4301;1000\n"
         "2;1;Beam;HEA160;S355;1000\n", [W, W], kinds=("heading-misleads",)),
    Trap(126, "a piece by name and three sizes", "Name;Qty;Material;Length (mm);Width (mm);Thickness (mm)\nCover;2;S235;900;400;2\nBusbar;1;copper;1500;80;10\n",
         [A, A], kg=2 * 0.9 * 0.4 * 0.002 * 7850 + 1.5 * 0.08 * 0.01 * 8930, kinds=("plain-piece",)),
    Trap(126, "three sizes and nothing else", "Pos;Pcs;t (mm);b (mm);l (mm);Mat\nP1;6;10;120;340;S355\n", [A], kg=6 * 0.01 * 0.12 * 0.34 * 7850),
    Trap(126, "an angle by three sizes is no flat piece", "Name;Qty;Material;Length (mm);Width (mm);Thickness (mm)\nAngle;2;S235;900;50;5\nZ 200;2;S235;900;200;2\n",
         [N, N]),
    Trap(126, "metal by outside sizes may be hollow", "Name;Qty;Material;Length (mm);Width (mm);Height (mm)\nCabinet;1;S235;900;400;800\n", [N]),
    Trap(127, "timber by width, height and length", "Pos;Bauteil;Anz;B;H;L;Material\n;;;[cm];[cm];[m];\n1;Aussteifung;22;8;20;5,85;C24\n", [A],
         kg=22 * 0.08 * 0.2 * 5.85 * 420),
    Trap(127, "stone by width, height and length", "Name;Qty;L (mm);B (mm);H (mm);Material\nCorbel;2;1000;300;150;granite\n", [A],
         kg=2 * 1.0 * 0.3 * 0.15 * 2700),
    Trap(127, "a bar by its diameter", "Pos;Qty;Ø (mm);Length (m);Material\n1;10;12;3.45;B500B\n", [A], kg=10 * 3.45 * 0.012**2 * 0.7853981633974483 * 7850),
    Trap(128, "sizes in the order that their heading names", "Plate No.;Pcs;Grade;t x b x L (mm)\n101;2;S355;12 x 2500 x 9000\n", [A],
         kg=2 * 0.012 * 2.5 * 9 * 7850),
    Trap(129, "masses in pounds beside lengths in feet", "Mark;Qty;Section;Grade;Length;Weight\nA;1;W12X26;A992;10'-0\";260\nB;1;Winch;;;100\n", [W, A],
         kg=(26 * 10 + 100) * 0.45359237 + 0.0),
    Trap(130, "a bar schedule with many columns that are not ours",
         "Member;Bar mark;Type & size;No. of mbrs;No. in each;Total no.;Length of each bar mm;Shape code;A;B;C;Rev\n"
         "PC4;01;H20;2;12;24;2850;21;300;2300;;\n", [A], quantity=[24], length=[2850]),
    Trap(130, "members and bars in each, without a total", "Bar mark;Type & size;No. of mbrs;No. in each;Length of each bar mm;Material\n01;H20;2;12;2850;B500B\n",
         [W], quantity=[24], kinds=("quantity-per-and-total",)),
    Trap(131, "a size column that holds lengths", "Part;Material;Size;Qty\nRail;Pine PAR 20x69;1200;4\nStile;Pine PAR 20x69;2440;2\n", [A, A], length=[1200, 2440]),
    Trap(132, "an assembly's own row among its parts", "Item;Parent;Description;Qty;Section;Length (mm);Material\nF1;;Main frame;1;;;\nF2;F1;Rail;2;UB 203x133x25;1000;S355\n",
         [W], kg=2 * KG, parts={"other": 1}, kinds=("assembly-row",)),
    Trap(133, "feet and inches in two columns", "Mark;Qty;Section;Material;Ft;In\nA;1;" + BEAM + ";12;6\nB;1;" + BEAM + ";3;4 1/2\nC;1;" + BEAM + ";2;\n", [W, W, W],
         length=[3810, 1028.7, 609.6]),
    Trap(134, "the kind in one column, the sizes in another", "Name;Qty;Section;Material;Length (mm)\nRohr;1;168,3 x 4,5;P235GH;1000\nFlat bar;1;100x10;S235;1000\n",
         [W, W], kinds=("section-from-name",)),
    Trap(135, "size and schedule in two columns", "Mark;Qty;Size (NPS);Sch;Description;Material;Length (mm)\n1;1;\"4\"\"\";40;Pipe;A106;1000\n", [W], kg=16.08),
    Trap(137, "a row whose words are also headings", "Name;Qty;Material;Remarks\nFrame;2;Steel;Note\n", [N]),
    Trap(137, "a statement in the title whose words are also headings", "Material;Concrete\nMark;Qty;Section;Length (mm)\nA;1;Block 600x300x200;\n", [W],
         kg=0.6 * 0.3 * 0.2 * 2400),
    Trap(137, "a title inside the list whose words are also headings", H + ROW + "Material;Steel;;;\n" + ROW, [W, N, W]),
    Trap(126, "sheet that is bent is no flat piece", "Name;Qty;Material;Length (mm);Width (mm);Thickness (mm)\nTrapezblech;2;S235;6000;1000;1\n", [N]),
    Trap(138, "a section's own word is no material", "Mark;Qty;Section;Material;Length (mm)\nA;1;IPE 160;;1000\nB;1;H20;;1000\n", [A, A], kg=15.8 + 2.466),
    Trap(139, "sums of masses by their label", H.replace("\n", ";Total mass (kg)\n") + "A1;2;" + BEAM + ";6000;301.2\n;;;;Peso totale;301.2\nEmpty weight;;;;;301.2\n", [W],
         parts={"total": 2}),
    Trap(140, "a column No of counted words", "Ref;No;Section;Material;Length (mm)\nA;2x;" + BEAM + ";1000\nB;2no;" + BEAM + ";1000\nC;1 off;" + BEAM + ";1000\n", [W] * 3,
         quantity=[2, 2, 1]),
    Trap(141, "masses in ton, and marks that are also bars", "Element;Aantal;Lengte [mm];Gewicht [ton]\nK1;1;3600;1,44\nB2;1;3600;1,44\nT4;1;4000;5,1\n", [W] * 3,
         kg=2 * 1440 + 5100),
    Trap(142, "a unit column called like a quantity", "Partida;Ud;Descripción;Cantidad;Largo (m);Material\n1;ud;UB 203x133x25;4;2,1;S275\n2;ml;UB 203x133x25;24;;S275\n",
         [W, W], kg=(8.4 + 24) * KG),
    Trap(143, "groups beside descriptions", "Part;What;Qty;Material;Length (mm)\nStage A;UB 203x133x25;1;S355;1000\nStage A;SHS 60x60x4;1;S355;500\n"
         "Stage B;UB 203x133x25;1;S355;1000\n", [W] * 3, assembly=["Stage A", "Stage A", "Stage B"]),
    Trap(144, "words of the section beside its sizes", "Mark;Qty;Section;Size;Grade;Length (mm)\nA;1;Flat;65x10;S275;1000\nB;1;Angle;50x50x5;S275;1000\n", [W, W]),
    Trap(145, "the section in the material cell", "Part;Qty;Material;Length (cm)\nLeg;24;Rohr 48,3x3,2 Stahl;80\nPost;1;S355;80\nDeck;1;C24;80\n", [W, N, N], kg=24 * 0.8 * 3.56),
    Trap(145, "timber and its sizes in the material cell", "Part;Qty;Material;Length (cm)\nLatte;16;Fichte 24x48;250\n", [W]),
    Trap(146, "a board's thickness in the material cell", "Ref;Qty;Material;Dimensions\nA;1;Granite 30mm;2400 x 620\n", [A], kg=2.4 * 0.62 * 0.03 * 2700),
    Trap(147, "a sheet by its area", "Name;Qty;Material;Thickness (mm);Area (m2)\nFloor plate;2;S275;6;1.5\nCover;2;S275;6;1.5\n", [W, A], kg=4 * 1.5 * 6 * 7.85),
    Trap(148, "a length that says so", H + "A;1;" + BEAM + ";L=1200\n", [W], length=[1200]),
    Trap(149, "a count in brackets or behind its sign", H + "A;(2);" + BEAM + ";1000\nB;x 3;" + BEAM + ";1000\n", [W, W], quantity=[2, 3]),
    Trap(150, "WT beside a diameter is the wall", "Name;Qty;OD (mm);WT;Thk (mm);Length (mm);Material\nPipe;1;114.3;5;;1000;S235\n", [A], kg=13.5),
    Trap(150, "a kind with its sizes in columns", "Section;Qty;Height (mm);Width (mm);Thickness (mm);Length (mm);Material\nRHS;1;120;60;5;1000;S235\n", [W]),
    Trap(150, "D beside length and breadth", "Name;Qty;Material;L (mm);B (mm);D (mm)\nDeckel;1;S235;1000;500;10\n", [A], kg=39.25),
    Trap(151, "headings in three lines", "Item;Description;;Quantity;Dimensions;;;Weight\n;;Material;;Length;Width;Thickness;kg\n;;;;mm;mm;mm;\n"
         "1;Plate;S355;4;1200;600;20;452\n", [W], kg=4 * 1.2 * 0.6 * 20 * 7.85, parts={"heading": 3}),
    Trap(152, "assemblies and pieces in each", "Assembly;Qty;Section;Material;Length (mm);Qty per assy\nFrame;3;" + BEAM + ";1000;2\nFrame;3;" + BEAM + ";500;4\n",
         [A, A], quantity=[6, 12], kinds=("quantity-per-and-total",)),
    Trap(152, "two quantities, neither of them the total", "Mark;Qty;Section;Material;Length (mm);Qty per assy\nA;4;" + BEAM + ";1000;2\nB;3;" + BEAM + ";500;1\n",
         [N, W], kinds=("quantity-per-and-total",)),
    Trap(153, "bare inches of a section in a list in feet", "Qty;Section;Grade;Length\n8;ROUND BAR 1 dia;A36;1'-0\"\n1;PL 10 x 200;A36;1'-0\"\n", [A, W],
         kg=8 * 304.8 * 25.4**2 * 0.7853981633974483 * 7.85e-6 + 304.8 * 2000 * 7.85e-6),
    Trap(154, "timber by name and size", "Artikel;Dim;Längd;Antal;Material\nStolpe;95x95;2,4 m;6;Furu\n", [W]),
    Trap(155, "a column of standards is no section", "Pos;Qty;Description;Spec;Length (mm);Material\n1;1;HEA 200;EN 10365;1000;S235\n", [W], kg=42.3),
    Trap(136, "gross and net", "Drum;Gross (kg);Net (kg);Tare (kg)\nD1;2310;1980;330\n", [A], kg=2310, kinds=("heading-twice",)),
    Trap(136, "dry and operating", "Tag;Equipment;Qty;Dry weight (kg);Operating weight (kg)\nT1;Tank;1;900;5900\n", [N], kinds=("heading-twice",)),
]


@pytest.mark.parametrize("trap", TRADES, ids=lambda t: f"{t.number:03d} {t.what}")
def test_trap_of_the_trades(trap: Trap, tmp_path: Path) -> None:
    """As above."""
    test_trap(trap, tmp_path)


DISC = 0.7853981633974483
#: What lists of the shops met at their first reading; each mass is worked out in its row.
SHOPS = [
    Trap(160, "kg/m in the row of units below Unit Mass", "Mark;Qty;Section;Material;Length;Unit Mass;Total Mass\n;;;;(mm);(kg/m);(kg)\nB1;4;" + BEAM + ";6000;25.1;602\n"
         "G1;12;C20019;G450;5900;5.74;406\n", [W, W], kg=24 * KG + 12 * 5.9 * 5.74),
    Trap(160, "kg/m below a bare Weight, kg below the other", "Mark;Qty;Section;Material;Length;Weight;Weight\n;;;;mm;kg/m;kg\nB1;4;" + BEAM + ";6000;25.1;602.4\nM;3;Winch;;;;90\n",
         [W, W], kg=24 * KG + 90),
    Trap(161, "masses of all pieces, told by the rows with kg/m", "Pos;Qty;Ø (mm);Length (m);Material;kg/m;Weight (kg)\n1;24;12;4.85;X;0.888;103.4\n2;36;10;2.15;X;0.617;47.8\n3;5;;;;;283\n",
         [W, W, W], kg=24 * 4.85 * 0.888 + 36 * 2.15 * 0.617 + 283),
    Trap(161, "masses of all pieces, told by their sum", "Name;Qty;Weight (kg)\nWinch;3;90\nHoist;2;50\n;;140\n", [W, W], kg=140, parts={"total": 1}),
    Trap(161, "masses that nothing settles are of one piece", "Name;Qty;Weight (kg)\nWinch;3;90\nHoist;2;50\n", [A, A], kg=370),
    Trap(161, "a bare grade beside a reinforcing bar", "Mark;Qty;Size;Length;Grade;Weight\nA1;36;#5;12'-6;60;469\nB1;110;#4;5'-8;60;416\n", [A, A],
         kg=(36 * 3.81 * 1.552 + 110 * 1.7272 * 0.994)),
    Trap(162, "names under Material beside a grade", "Item;Qty;Material;Size;Length (mm);Grade\n1;2;Plate stringer;250 x 12;4120;S275\n2;4;Handrail;CHS 48.3x3.2;1000;S275\n3;1;Post;CHS 48.3x3.2;1000;S275\n",
         [W, W, W], kg=2 * 0.25 * 12 * 4.12 * 7.85 + 5 * 3.56, kinds=("heading-misleads",)),
    Trap(163, "C45 is steel beside a bar", "Pos;Qty;Section;Material;Length (mm)\n1;6;HEX 24;C45;90\n2;1;RD 30;C45;1000\n3;1;45x95;C24;1000\n", [W, W, W]),
    Trap(164, "a stiffness beside laminated veneer lumber", "Tag;Qty;Section;Grade;Length (ft)\nB-1;3;LVL 1-3/4 x 11-7/8;2.0E;20\n", [A]),
    Trap(164, "hull steel", "Item;Qty;Profile;Grade;Length (mm)\n1;3;FB 100x10;A;1000\n2;1;FB 100x10;AH36;1000\n3;1;45x95;A;1000\n", [A, W, N]),
    Trap(165, "a thickness that says so", "Teil;Anzahl;Blechdicke;Länge (mm);Breite (mm);Werkstoff\nA;4;t=3;1500;640;DC01\nB;2;t=2,5;980;410;DC01\nC;1;s=5/7;980;410;DC01\n",
         [A, A, N], kg=4 * 1.5 * 0.64 * 3 * 7.85 + 2 * 0.98 * 0.41 * 2.5 * 7.85),
    Trap(166, "a gauge in a column of its own", "Part;Qty;Gauge;Width (in);Length (in);Material\nDoor;2;16 ga;18;60;CRS\nCover;4;.125;12;12;5052\nShelf;1;16;10;10;304\nLeg;2;14 ga;;20;CRS\n",
         [A, A, A, N], kg=2 * 1.5189 * 0.4572 * 1.524 * 7.85 + 4 * 3.175 * 0.3048**2 * 2.68 + 1.5875 * 0.254**2 * 7.9),
    Trap(167, "two sides in the cell of the length", "Name;Qty;Section;Length;Material\nPanel;10;OSB 3 18 mm;2500 x 1250;OSB\nBeam;1;UB 203x133x25;2500 x 1250;S355\n", [W, N]),
    Trap(168, "a disc by its diameter in the width", "Part;Qty;Thk (mm);Width (mm);Length (mm);Material\nLid;1;5;Ø1200;;S235\nLid;1;5;Ø1200;600;S235\n", [A, N],
         kg=DISC * 1.2**2 * 5 * 7.85),
    Trap(169, "timber in cm, by its heading", "Element;Przekrój [cm];Długość [m];Ilość;Klasa\nKrokiew;8x18;5,60;22;C24\n", [W], kg=22 * 0.08 * 0.18 * 5.6 * 420),
    Trap(169, "timber in cm, by its sizes", "Bauteil;Stk;Querschnitt b/h;Länge;Holzart\nSparren;18;8/20;5,40 m;KVH C24\nStütze;4;14/14;2,60 m;KVH C24\n", [A, A],
         kg=(18 * 0.08 * 0.2 * 5.4 + 4 * 0.14 * 0.14 * 2.6) * 420),
    Trap(170, "a bar among panes", "Pos;Qty;Section;Breite mm;Höhe mm;Material\n1;10;L 40x40x4;;2600;S235\n2;1;L 40x40x4;600;2600;S235\n", [A, N], kg=10 * 2.6 * 2.42),
    Trap(171, "pieces by their total length", "Pos;Section;Material;Length (m);Total length (m)\n1;" + BEAM + ";2;24\n2;" + BEAM + ";2;25\n", [A, N], kg=24 * KG),
    Trap(171, "a number of bars", "Pos;Ø (mm);N° ferri;Lunghezza (cm);Acciaio\n7;16;24;580;B450C\n8;16;60;580;B450C\n", [A, A], quantity=[24, 60]),
    Trap(172, "the mass of one metre of a count of metres", "Pos;Qty;Unit;Name;Mass each (kg);Total mass (kg)\n1;12;m;Cable chain;4.2;50.4\n", [A], kg=50.4),
    Trap(173, "cut lengths under a word of sizes", "N°;Nb;Désignation;Débit (mm);Matière\n1;4;Tube carré 40x40x3;1850;S235\n2;4;Plat 30x6;900;S235\n3;1;Tôle 2 mm 1850x920;;S235\n4;2;Plat 30x6;450;S235\n",
         [W, W, A, W]),
    Trap(175, "a shape of thin sheet is no tube, whatever the heading says", "Pos;Anz;Profil;Länge (mm);Werkstoff\n1;30;Sigma 200x1,6;2500;S350GD\n2;1;HEA 160;4000;S235\n"
         "3;1;Omega 200x1,6;2500;S350GD\n", [N, W, N]),
    Trap(176, "a thickness behind two sides is no length", "Nr;Artikel;Stück;Gewicht je Stück (kg)\n1;Schaltafel 150x50 Fichte 22 mm;40;8,1\n2;SHS 40x40x3 S235 x 1200mm;1;4\n",
         [W, A], kg=40 * 8.1 + 1.2 * 3.3),
    Trap(177, "letters of sizes in the heading of sections", "Pos;Stk;Querschnitt b/h;Länge (mm);Holzart\n1;1;80/200 mm;1000;C24\n2;1;12 mm;1000;C24\n", [W, N]),
    Trap(178, "names with a hyphen that hold the material", "Pos;Qty;Section;Length (mm)\n1;1;Alu-Winkel 40x40x4;1000\n", [W], kg=307.8628 * 2.7e-3),
    Trap(178, "short words for tubes", "Pos;Stk;Profil;Länge (mm);Werkstoff\n1;1;Vkt-Rohr 60x60x4;1000;S235\n2;1;RR 60x40x3;1000;S235\n3;1;Rd.-Rohr 48,3x3,2;1000;S235\n4;1;Vkt 20;1000;S235\n",
         [W, W, W, W]),
    Trap(179, "bare inches glued to their letters, in a list with feet and inches apart", "MK;SHAPE;QTY;FT;IN;GRADE\nA;PL1X14;4;1;2;A36\nB;W12X19;1;10;0;A992\n", [A, W],
         kg=4 * 25.4 * 355.6 * 355.6 * 7.85e-6 + 190 * 0.45359237),
    Trap(180, "sheet in inches, by its gauge or its thousandths", "Item;Qty;Description;Material\n1;4;16GA x 48 x 96 sheet;CRS\n2;3;.125 x 48 x 120 sheet;5052\n", [A, A],
         kg=4 * 1.5189 * 1.2192 * 2.4384 * 7.85 + 3 * 3.175 * 1.2192 * 3.048 * 2.68),
    Trap(181, "a length in feet behind the section", "Item;Qty;Description;Material\n1;6;2 x 2 x 1/8 angle x 20';A36\n2;10;1 x 1/4 flat bar x 12'-6\";A36\n", [A, A], length=[6096, 3810]),
    Trap(182, "what a hoist lifts is not what it weighs", "Item;Description;Qty;Unit mass (kg)\n1;Chain hoist 500 kg;6;28\n2;Counterweight 250 kg;1;\n", [W, W], kg=6 * 28 + 250),
    Trap(183, "two sizes of a cross-section as a heading", "pos;st;hout;dxb;l\n;;;mm;m\n1;8;vuren C24;45x145;4,50\n", [W], length=[4500]),
    Trap(184, "levels: an assembly above its parts, and one with a mass", "Level;Part Number;Description;Qty;Length (mm);Material;Mass (kg)\n1;F;Main frame;1;;;\n"
         "2;F1;SHS 40x40x3;2;1000;S235;3.3\n1;G;Other frame;1;;;8\n2;G1;SHS 40x40x3;2;1000;S235;3.3\n", [W, W, W], kg=4 * 3.3 + 8,
         parts={"other": 1}, kinds=("assembly-row", "may-count-twice")),
    Trap(184, "levels: an assembly that is built three times", "Level;Part Number;Description;Qty;Length (mm);Material\n1;F;Main frame;3;;\n"
         "2;F1;SHS 40x40x3;2;1000;S235\n3;F2;SHS 40x40x3;1;500;S235\n1;G;SHS 40x40x3;1;1000;S235\n", [N, N, W], kinds=("multiplier-above",)),
    Trap(185, "N° over counts", "Elemento;Sezione;N°;Lungh. mm;kg/m;kg tot;Mat.\nColonna;HEA 260;6;5800;68.2;2373;S275\nTrave;IPE 330;4;9000;49.1;1768;S275\n"
         "Tubo;IPE 330;4;1000;49.1;196;S275\n", [W, W, W], quantity=[6, 4, 4]),
    Trap(185, "N° over numbers of the rows", "N°;Quantità;Sezione;Lungh. mm;Mat.\n1;6;HEA 260;5800;S275\n2;4;IPE 330;9000;S275\n3;4;IPE 330;1000;S275\n", [W, W, W],
         quantity=[6, 4, 4]),
    Trap(185, "numbers that start again with each group are no counts", "N°;Sezione;Lungh. mm;Mat.\n1;HEA 260;5800;S275\n2;IPE 330;9000;S275\n1;IPE 330;1000;S275\n"
         "2;IPE 330;1000;S275\n", [A] * 4, quantity=[1, 1, 1, 1]),
    Trap(194, "thicknesses under a word of sections", "Pos.,Cant.,Chapa (mm),Ancho (mm),Largo (mm),Calidad,Peso\n1,4,12,350,900,S275JR,118.7\n2,8,20,200,200,S275JR,50.2\n",
         [A, A], kg=(4 * 12 * 0.35 * 0.9 + 8 * 20 * 0.2 * 0.2) * 7.85),
    Trap(194, "timber by base and height in cm", "Pos;Base (cm);Altezza (cm);Lungh. (m);N. pezzi;Classe\n1;16;32;6,20;4;GL24h\n", [A], kg=4 * 0.16 * 0.32 * 6.2 * 420),
    Trap(194, "a tube's diameter and its wall in two columns", "Pos;Aant;Buis;Wanddikte (mm);Lengte (mm);Materiaal\n1;3;Ø114,3;3,6;1000;P235GH\n", [W], kg=3 * 9.83),
    Trap(186, "a gusset by sizes in a column", "Elemento;Perfil;Cantidad;Acero\nCartela;150x150x10;32;S275\n", [A], kg=32 * 0.15 * 0.15 * 10 * 7.85),
    Trap(187, "the wall in a column of its own", "Part;Section;Wall (mm);Len (mm);Off;Material;Kg\nRail;RHS 150x100;6;1000;2;S355;43.4\nFrame;Angle 50x50;5;1000;4;S355;15.1\n"
         "Flat;Flat 40x5;;1000;4;S355;6.3\n", [W, W, W], kg=2 * 21.7 + 4 * 3.77 + 4 * 1.57),
    Trap(188, "a large and a small L", "Pièce;Essence;L (mm);l (mm);ép (mm);Nb\nMontant;C24;2450;145;45;32\n", [A], kg=32 * 2.45 * 0.145 * 0.045 * 420),
    Trap(189, "codes under a word for pieces, beside the quantity", "PZA.;CANT.;PERFIL;LONG. M;ACERO\nA1;4;UB 203x133x25;1;A36\nA2;3;UB 203x133x25;1;A36\n", [W, W], kg=7 * KG),
    Trap(190, "masses in ton for each", "Littera;Typ;Antal;Vikt ton/st\nV1;Vägg;12;5,8\n", [W], kg=12 * 5800),
    Trap(191, "a row of units with a word for the total", "Pos;Anz;Profil;Länge;Werkstoff;kg\n;;;mm;;ges.\n1;2;UB 203x133x25;1000;S355;50,2\n", [W], parts={"heading": 2}, kg=2 * KG),
    Trap(192, "the mass of 1 m under a heading with kg", "Nazwa;Profil;Dł. [m];Szt;Masa 1 m [kg];Masa [kg]\nSłupek;XY 7;2,2;12;2,93;77,4\nRama;XY 8;1,5;24;1,97;70,9\n",
         [W, W], kg=12 * 2.2 * 2.93 + 24 * 1.5 * 1.97),
    Trap(193, "outside diameter and wall as a heading", "Nr;Stück;Benennung;da x s;Werkstoff;Länge mm\n1;1;Rohr;168,3 x 4,5;S235;1000\n", [W], kg=18.2),
    Trap(186, "a gusset by sizes in a column of sizes", "Rep;Nbre;Désignation;Matière;Dimensions (mm)\n3;4;Gousset;S235;200x200x8\n", [A], kg=4 * 0.2 * 0.2 * 8 * 7.85),
    Trap(174, "a timber column of materials", "Ref;No;Section (mm);Length;Timber\nJ1;14;47 x 220;4.2m;C24\nP;2;100 x 75;3.6m;C16\n", [W, W]),
]


@pytest.mark.parametrize("trap", SHOPS, ids=lambda t: f"{t.number:03d} {t.what}")
def test_trap_of_the_shops(trap: Trap, tmp_path: Path) -> None:
    """As above."""
    test_trap(trap, tmp_path)
