"""The headings table: rows of headings as lists have them in nine languages, each spelling once, nothing taken for what it is not."""

from __future__ import annotations

from collections import Counter
from collections.abc import Iterator
from pathlib import Path

import pytest

from takeoff.datafiles import data_folder, read_table
from takeoff.errors import DataError
from takeoff.job import Job
from takeoff.lists import headings
from takeoff.lists.headings import EITHER, FIELDS, heading_key, read_heading, spellings
from takeoff.lists.sheets import Sheet
from takeoff.lists.tables import read_sheet

LANGUAGES = ("English", "German", "French", "Spanish", "Italian", "Dutch", "Polish", "Portuguese", "Swedish")
#: every field a member list may have in this house
HOUSE = (
    "mark assembly pick bundle phase quantity section material length width thickness height diameter unit_mass mass_per_length "
    "mass_per_area total_mass volume area finish contents holes cut_angle_1 cut_angle_2 measured_at run x1 y1 z1 x2 y2 z2 x y z "
    "axis roll insulation weighed_mass remarks"
).split()

#: a row of headings as a list would have it -> heading=field, with the unit where the heading names one
ROWS = {
    "English": (
        "Piece Mark=mark; Assy=assembly; Description=name; QTY.=quantity; Profile=section; Steel grade=material; "
        "Cut length\n(mm)=length in mm; Width [mm]=width in mm; Thk (mm)=thickness in mm; Finish=finish; "
        "Unit wt (kg)=unit_mass in kg; Total wt. (kg)=total_mass in kg; Remarks=remarks"
    ),
    "English, US": (
        "Item No.=mark; Part Name=name; # Parts Req=quantity; Size=section; Mat'l=material; length_in=length in in; "
        "Wt ea (lb)=unit_mass in lb; lb/ft=mass_per_length in lb/ft; Est. Cost=not_used; Link=not_used"
    ),
    "German": (
        "Pos.=mark; Baugruppe=assembly; Benennung=name; Stk.=quantity; Halbzeug=section; Werkstoff=material; "
        "Länge (mm)=length in mm; Breite [mm]=width in mm; Dicke mm=thickness in mm; Inhalt=contents; Oberfläche=finish; "
        "Einzelgewicht (kg)=unit_mass in kg; Gesamtgewicht (kg)=total_mass in kg; kg/m²=mass_per_area in kg/m2; Bauabschnitt=phase; "
        "Bemerkung=remarks"
    ),
    "German, without umlauts": (
        "menge=quantity; verwendung=name; laenge=length; breite=width; staerke=thickness; guete=material; groesse=section; "
        "gp=not_used"
    ),
    "French": (
        "Repère=mark; Sous-ensemble=assembly; Désignation=name; Qté=quantity; Profilé=section; Nuance=material; "
        "Longueur [m]=length in m; Largeur (mm)=width in mm; Ép. (mm)=thickness in mm; Masse unitaire (kg)=unit_mass in kg; "
        "Masse totale (kg)=total_mass in kg; Finition=finish; Observations=remarks"
    ),
    "Spanish": (
        "Marca=mark; Conjunto=assembly; Denominación=name; Cant.=quantity; Perfil=section; Calidad=material; "
        "Longitud (mm)=length in mm; Ancho (mm)=width in mm; Espesor (mm)=thickness in mm; Peso unitario (kg)=unit_mass in kg; "
        "Peso total (kg)=total_mass in kg; Acabado=finish; Observaciones=remarks"
    ),
    "Italian": (
        "Pos.=mark; Assieme=assembly; Descrizione=name; Q.tà=quantity; Profilo=section; Materiale=material; "
        "Lunghezza (mm)=length in mm; Larghezza (mm)=width in mm; Spessore (mm)=thickness in mm; Peso unitario (kg)=unit_mass in kg; "
        "Peso totale (kg)=total_mass in kg; Finitura=finish; Note=remarks"
    ),
    "Dutch": (
        "Merk=mark; Samenstelling=assembly; Omschrijving=name; Aantal=quantity; Profiel=section; Kwaliteit=material; "
        "Lengte (mm)=length in mm; Breedte (mm)=width in mm; Dikte (mm)=thickness in mm; Gewicht per stuk (kg)=unit_mass in kg; "
        "Totaalgewicht (kg)=total_mass in kg; Afwerking=finish; Opmerking=remarks"
    ),
    "Polish": (
        "Poz.=mark; Zespół=assembly; Nazwa=name; Ilość szt.=quantity; Przekrój=section; Gatunek stali=material; "
        "Długość [mm]=length in mm; Szerokość [mm]=width in mm; Grubość [mm]=thickness in mm; Masa jednostkowa [kg]=unit_mass in kg; "
        "Masa całkowita [kg]=total_mass in kg; Wykończenie=finish; Uwagi=remarks"
    ),
    "Portuguese": (
        "Posição=mark; Conjunto=assembly; Descrição=name; Qtde.=quantity; Perfil=section; Aço=material; "
        "Comprimento (mm)=length in mm; Largura (mm)=width in mm; Espessura (mm)=thickness in mm; "
        "Massa unitária (kg)=unit_mass in kg; Massa total (kg)=total_mass in kg; Acabamento=finish; Observação=remarks"
    ),
    "Swedish": (
        "Littera=mark; Sammanställning=assembly; Benämning=name; Antal (st)=quantity; Dimension=section; Kvalitet=material; "
        "Längd mm=length in mm; Bredd mm=width in mm; Tjocklek mm=thickness in mm; Vikt per st (kg)=unit_mass in kg; "
        "Totalvikt (kg)=total_mass in kg; Ytbehandling=finish; Anmärkning=remarks"
    ),
}

#: headings met in real lists: what each is taken for; the last are left alone on purpose, since they do not say what they are
SEEN = {
    "mark": (
        "# | Item # | ITEM NO. | POS | Mark | Part Ref | cut_id | item_id | PART NUMBER | part_no | Part/Assembly Number | Rep | "
        "Index | ID | Pozycja | Referência da peça/variante | Nr | Vägg-ID | Öppning | Hörn | Placering"
    ),
    "name": (
        "Item | Description | Item Description | part | Part Name | Name | Member | Piece | Component | item/part | Plate | Role | "
        "Verwendung | Désignation | Tubes proposés | Pieza | Nombre de Pieza | Qué es | Componente | Descripción | Oggetto | Deel | "
        "Element | Blat | Descrição | Komponent"
    ),
    "assembly": "Category | subassembly | Subsystem | Part of Assmbly | System | Location | Composant | Groupe | Eje | Distribuição no PDF",
    "quantity": (
        "QTY. | Quantity | amount | numbers  | # Parts Req | Qty Needed | Approximate Qty | Stückzahl | Anzahl | menge | Quantité | "
        "Qté | Cantidad | Cant. | Quantità | szt | Ilość | Peças | Qtd | Quantidade | Antal | Antal (st) | Antal reglar | Antal ca | "
        "Antal st ca"
    ),
    "quantity_per": "Qty per Arm",
    "quantity_and_length": "Aantal × lengte",
    "section": (
        "Specification | Spec | stock | Profile | Size | size/specs | Source Tube | SUPP.DESCRIPTION | Größe | Section / référence | "
        "Section | Tubo | Material / Especificación | Especificación | Perfil no PDF | Dimension"
    ),
    "size": (
        "Dimensions | dimention | blank_size | Blank (mm) | rough_dimensions_in | rough_dimension_in | final_dimensions_in | "
        "finish_dimension | Zuschnitt | Medidas (mm) | Wymiar (mm)"
    ),
    "material": (
        "Material | SUPPLIER/MATERIAL | Material/design type/ comments | Matériau | Materiale | Materiaal | Płyta/kolor | Qualidade"
    ),
    "length": (
        "Length | Length (mm) | Cut Length | length_in | length_mm | Length Needed | Length per unit | Length Range | Cut to | "
        "Länge | laenge | Longueur débit (mm) | Longueur unitaire | Longitud | Longitud aproximada | Corte (cm) | Comprimento (mm) | "
        "Längd mm"
    ),
    "total_length": "Longueur utile | Longueur totale (m) | Total (m) | Totallängd ca (m)",
    "stock_length": "Stock Length",
    "width": "width_mm | Width (X) | breite",
    "thickness": "thickness_mm | Thk (mm) | Wall Thickness | staerke | Tjocklek",
    "height": "Height (Z) | Depth (Y) | Höjd mm",
    "diameter": "Diameter",
    "total_mass": "Masse totale (kg) | Peso total aprox.",
    "mass": "Peso | kg",
    "mass_per_length": "Peso aprox. kg/m",
    "finish": "finish",
    "unit": "Unit | Units | Purchase Units | Usage Units | unit",
    "remarks": (
        "Notes | Note | remarks | Where | Purpose | operation | nesting_notes | Kommentar | Statut | Check | Uwagi | "
        "Comparação com o plano | Especificação | Norma/Ref. | Notering"
    ),
    "not_used": (
        "Hole Dia | Positions / PCD | banding | Price | Unit Cost | Cost | Est. Cost | Total | Line total EUR | Price/Pkg | Link | "
        "URL | Supplier | Vendor | decor | gp | Preis/Stück | Gesamt | Fabrication | Centro a centro (cm) | Obrzeże ABS | OF | "
        "Ca yta m²"
    ),
    "left alone": "Width / Length (X)",
}


def expected(name: str) -> dict[str, tuple[str, str | None]]:
    """Heading -> (field, unit) of one of the rows above."""
    found = {}
    for entry in ROWS[name].split("; "):
        text, _, meaning = entry.partition("=")
        field, _, unit = meaning.partition(" in ")
        found[text] = (field, unit or None)
    return found


SEEN_ONE_BY_ONE = [(text, field) for field, texts in SEEN.items() for text in texts.split(" | ")]


@pytest.fixture
def own_table(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> Iterator[Path]:
    """A headings table of our own making in place of the real one; the real one is back afterwards."""
    monkeypatch.setattr(headings, "data_folder", lambda: tmp_path)
    spellings.cache_clear()
    yield tmp_path / "headings.csv"
    spellings.cache_clear()


def table() -> list[dict[str, str]]:
    return [row for _, row in read_table(data_folder() / "headings.csv")]


@pytest.mark.parametrize("name", ROWS)
def test_a_row_of_headings_as_a_list_has_it(name: str) -> None:
    """Each heading of the row gives its field and its unit."""
    wanted = expected(name)
    for text, (field, unit) in wanted.items():
        found = read_heading(text)
        assert found is not None, text
        assert found.unit == unit, text
        assert field in (found.field, *found.otherwise), text


@pytest.mark.parametrize("name", ROWS)
def test_such_a_row_starts_a_list(name: str) -> None:
    """A sheet that begins with the row of headings is read as one list with those columns."""
    wanted = expected(name)
    texts = list(wanted)
    reading = read_sheet(Sheet("list.csv", None, [list(texts), ["1"] * len(texts)]), Job())
    [found] = reading.tables
    for text, (field, _) in wanted.items():
        column = next(c for c in found.all_columns if c.text == text)
        heading = read_heading(text)
        assert column.heading is not None
        assert heading is not None
        assert column.heading.field == field or heading.otherwise, text


@pytest.mark.parametrize(("text", "field"), SEEN_ONE_BY_ONE)
def test_headings_seen_in_real_lists(text: str, field: str) -> None:
    """Every heading met in a real list is taken for its field, or left alone where it does not say what it is."""
    found = read_heading(text)
    assert field in ((found.field, *found.otherwise) if found else ("left alone",))


def test_each_spelling_stands_once() -> None:
    """No two rows are the same spelling once case, accents, blanks and trailing dots are folded."""
    counts = Counter(heading_key(row["spelling"]) for row in table())
    assert [key for key, count in counts.items() if count > 1 or not key] == []


def test_a_spelling_for_two_fields_fails_at_loading(own_table: Path) -> None:
    """An ambiguous spelling names its line, however its case and accents differ."""
    own_table.write_text(
        "spelling,field,language,evidence\nÉp.,thickness,French,recalled\nQty,quantity,English,read\nEP,not_used,German,read\n",
        encoding="utf-8",
    )
    with pytest.raises(DataError, match="line 4: one heading for two fields"):
        spellings()


def test_a_spelling_for_an_unknown_field_fails_at_loading(own_table: Path) -> None:
    """A field the house does not know names its line."""
    own_table.write_text("spelling,field,language,evidence\nQty,count,English,read\n", encoding="utf-8")
    with pytest.raises(DataError, match="line 2: no such field"):
        spellings()


@pytest.mark.parametrize("language", ["English", "German"])
def test_every_field_has_a_spelling(language: str) -> None:
    """Every field of the house can be named in English and in German."""
    named = {field for row in table() if row["language"] == language for field in row["field"].split(EITHER)}
    assert named >= FIELDS
    assert set(HOUSE) <= FIELDS


@pytest.mark.parametrize("language", LANGUAGES)
def test_every_language_names_what_a_list_needs(language: str) -> None:
    """Mark, quantity, section, material, sizes and masses."""
    named = {row["field"] for row in table() if row["language"] == language}
    needed = {"mark", "name", "assembly", "quantity", "section", "material", "length", "width", "thickness", "height", "diameter",
              "unit_mass", "total_mass", "mass_per_length", "mass_per_area", "total_length", "finish", "contents", "remarks", "not_used"}
    assert needed <= named


def test_rows_say_language_and_evidence() -> None:
    """Both come from closed lists; nothing is called read twice or computed here, and our own words are common practice."""
    rows = table()
    assert {row["language"] for row in rows} == set(LANGUAGES)
    assert {row["evidence"] for row in rows} == {"read", "recalled", "common practice"}
    assert {field for row in rows for field in row["field"].split(EITHER)} == FIELDS


@pytest.mark.parametrize(("text", "field", "unit"), [
    ("kg", "mass", "kg"), ("kg/m", "mass_per_length", "kg/m"), ("kg/Stk", "unit_mass", "kg"), ("kg pro Stück", "unit_mass", "kg"),
    ("kg/pièce", "unit_mass", "kg"), ("kg/ud", "unit_mass", "kg"), ("kg/szt.", "unit_mass", "kg"), ("lb/ea", "unit_mass", "lb"),
    ("kg/mb", "mass_per_length", "kg/m"), ("kg/lfm", "mass_per_length", "kg/m"), ("kg/ml", "mass_per_length", "kg/m"),
    ("Total (kg)", "total_mass", "kg"), ("Total (m)", "total_length", "m"), ("Gesamt kg", "total_mass", "kg"),
    ("Each (lb)", "unit_mass", "lb"),
    ("Masa jednostkowa kg", "unit_mass", "kg"), ("Gewicht (kg/m)", "mass_per_length", "kg/m"), ("Länge in mm", "length", "mm"),
    ("Poids (kg)", "mass", "kg"), ("mass_kg", "mass", "kg"), ("Massa (g)", "mass", "g"),
])
def test_headings_that_hold_their_unit(text: str, field: str, unit: str) -> None:
    """A unit that is part of the known words counts like one in brackets."""
    found = read_heading(text)
    assert found is not None
    assert (found.field, found.unit) == (field, unit)


@pytest.mark.parametrize(("text", "field", "unit"), [
    ("Weight ea. lbs", "unit_mass", "lb"), ("Wt. per pc (kgs)", "unit_mass", "kg"), ("Poids/u", "unit_mass", None),
    ("Peso kg/cad", "unit_mass", "kg"),
    ("Ciężar całk.", "total_mass", None), ("Gew. ges. kg", "total_mass", "kg"), ("Weight kgs", "mass", "kg"), ("Cut len.", "length", None),
    ("Length/pc (m)", "length", "m"), ("Length o/a", "length", None), ("Tot. length m", "total_length", "m"),
    ("Antal st", "quantity", None),
    ("Poids T", "total_mass", None), ("WT (mm)", "thickness", "mm"),
])
def test_headings_made_of_known_words(text: str, field: str, unit: str | None) -> None:
    """A heading that no table has is read word by word, where every word is known."""
    found = read_heading(text)
    assert found is not None
    assert (found.field, found.unit) == (field, unit)


@pytest.mark.parametrize("text", ["Weight length", "Weight (mm)", "Length (kg)", "Total of all", "Wt per m run x", "Each"])
def test_words_that_make_no_heading(text: str) -> None:
    """Words of two fields, or of none, make no heading."""
    assert read_heading(text) is None


@pytest.mark.parametrize("text", (
    "Preis | Prix | Precio | Prezzo | Prijs | Cena | Preço | Pris | GP | Montant | Importe | Drawing No. | Zeichnung | N° plan | Plano | "
    "Disegno | Tekening | Rysunek | Desenho | Ritning | Colour | Farbe | Couleur | Colore | Kleur | Kolor | Cor | Färg | Fläche gesamt | "
    "Surface totale | Hole Dia | Ø trou | Kante | Obrzeże"
).split(" | "))
def test_money_links_holes_and_colours_are_no_sizes(text: str) -> None:
    """Columns that must never reach a mass are known for what they are."""
    found = read_heading(text)
    assert found is not None
    assert found.field == "not_used"
