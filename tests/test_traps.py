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
    Trap(97, "purchased parts with sizes", H + "A;1;DIN 912 M16 x 40;;\n", [N]),
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
