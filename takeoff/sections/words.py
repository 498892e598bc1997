"""The words people use for sections, in nine languages, each brought to a family, a kind or a property. Rank 2.

This is the one place to touch for another spelling. Words are folded: small letters, no accents.
"""

from __future__ import annotations


def _by_word(groups: dict[str, str]) -> dict[str, str]:
    """From meaning -> words to word -> meaning."""
    return {word: meaning for meaning, words in groups.items() for word in words.split()}


#: A family's own names; a second word is the variant letters the name carries.
_FAMILIES: dict[str, str] = _by_word(
    {
        "UB": "ub ukb",
        "UC": "uc ukc",
        "UBP": "ubp ukbp",
        "PFC": "pfc ukpfc",
        "IPE": "ipe",
        "IPE A": "ipea",
        "IPE AA": "ipeaa",
        "IPE O": "ipeo",
        "IPE V": "ipev",
        "IPN": "ipn inp",
        "RSJ": "rsj",
        "UAP": "uap",
        "CH": "gbc 槽钢",
        "HE": "he",
        "HE A": "hea ipbl",
        "HE AA": "heaa ipbll",
        "HE B": "heb ipb",
        "HE M": "hem ipbv",
        "HE C": "hec",
        "HL": "hl",
        "HL A": "hla",
        "HL B": "hlb",
        "HL M": "hlm",
        "HL R": "hlr",
        "HL AA": "hlaa",
        "HD": "hd",
        "HP": "hp",
        "UPN": "upn unp",
        "UPE": "upe",
        "L": "l rsa ea ua uka isa lpn ld",
        "T": "t te ukt",
        "SHS": "shs qro qr",
        "RHS": "rhs rro rr",
        "CHS": "chs",
        "FL": "fl fb fla flt fms plst bfl isf",
        "PL": "pl plt bl",
        "Z": "z",
        "BH": "bh",
        "RD": "rd rb isro",
        "SQ": "sq sb vkt",
        "HEX": "hex skt",
        "H": "h h型钢",
        "I": "工字钢 工",
        "HW": "hw",
        "HM": "hm",
        "HN": "hn",
        "HT": "ht",
        "NPB": "npb",
        "WPB": "wpb",
        "ISMB": "ismb mb",
        "ISLB": "islb",
        "ISJB": "isjb",
        "ISWB": "iswb wb",
        "ISHB": "ishb hb",
        "ISSC": "issc",
        "ISMC": "ismc",
        "ISMPC": "ismpc",
        "ISLC": "islc",
        "ISLC P": "islcp",
        "ISJC": "isjc",
        "W": "w wf",
        "M": "m",
        "S": "s",
        "C": "c",
        "MC": "mc",
        "WT": "wt",
        "MT": "mt",
        "ST": "st",
        "HSS": "hss hs ha ts",
        "WWF": "wwf",
        "WWT": "wwt",
        "WRF": "wrf",
    }
)
#: word -> (family, variant)
FAMILY_WORDS: dict[str, tuple[str, str]] = {word: (meaning.split(" ")[0], meaning.partition(" ")[2]) for word, meaning in _FAMILIES.items()}

#: Families whose short name means them only before a row of sizes (``W12x50``, but not ``S235`` or a lone ``C``).
BEFORE_SIZES: frozenset[str] = frozenset(("W", "M", "S", "C", "MC", "MT", "ST", "WT", "H", "Z", "BH"))

#: Words of a pipe's nominal size and schedule.
SCHEDULE_WORDS: frozenset[str] = frozenset(("sch", "sched", "schedule", "sh"))
#: Words of a pipe beside which a weight (light, medium, heavy) is told.
PIPED: frozenset[str] = frozenset("pipe pipes tube tubes rohr rohre buis buizen tubo tubos rura rury ror".split())
#: Weights of threadable tube, where a pipe or a nominal size is named.
SERIES_WORDS: dict[str, str] = _by_word({"light": "light", "medium": "medium mittel", "heavy": "heavy schwer"})
#: IS 1239 calls them by a class.
SERIES_LETTERS: dict[str, str] = {"a": "light", "b": "medium", "c": "heavy"}
WEIGHT_WORDS: dict[str, str] = {"std": "STD", "xs": "XS", "xh": "XS", "xxs": "XXS", "xxh": "XXS", "xstrong": "XS"}
NOMINAL_WORDS: dict[str, str] = {"dn": "DN", "nb": "DN", "nps": "NPS"}

#: Variant letters that may stand apart from the family's word, by family.
VARIANTS: dict[str, frozenset[str]] = {
    "IPE": frozenset(("A", "AA", "O", "V", "R")),
    "HE": frozenset(("A", "AA", "B", "M", "C")),
    "HL": frozenset(("A", "AA", "B", "M", "R")),
    "ISLC": frozenset(("P",)),
    "CH": frozenset(("A", "B", "C")),
    "I": frozenset(("A", "B", "C")),
}

#: word -> kind: a group of families or a made shape.
KIND_WORDS: dict[str, str] = _by_word(
    {
        "angle": (
            "angle angles angleiron corniere cornieres winkel winkelstahl winkelprofil angular angulo angolare hoekstaal hoekprofiel "
            "hoeklijn katownik cantoneira vinkel vinkelstang vinkeljarn hoek 角钢"
        ),
        "channel": "channel channels ceownik ceowniki",
        "beam": "beam beams joist poutrelle trager viga balk trave travi ligger dwuteownik dwuteowniki",
        "column": "column columns stanchion stutze pilar poteau kolom",
        "tee": "tee tees teownik teowniki",
        "tube": (
            "tube tubes tubing hollow tubo tubos hueco hueca hohlprofil profilrohr tubolare tubulaire tubular profil buisprofiel"
        ),
        "box": (
            "box koker kokers kokerprofiel kokerbuis scatolato scatolati scatolare scatolari formrohr vierkantprofil "
            "vhp rk rp frq frr vkr kkr rrk rrw "
            "zamkniety zamkniete zamknietych"
        ),
        "round tube": "rohr rohre rundrohr stahlrohr buis buizen rura rury ror ro cano rondbuis vckr kckr rundror 圆管 无缝钢管",
        "pipe": "pipe pipes piping",
        "square tube": "quadratrohr vierkantrohr vierkantbuis fyrkantsror 方管",
        "rectangular tube": "rechteckrohr 矩形管",
        "flat": (
            "flat flats flatbar flach flachstahl flacheisen flachstab plat plats strip pletina llanta piatto plattstang platstaal "
            "strippen plaskownik chata chato plattjarn piattina breitflach breitflachstahl flachprofil bandstahl solera 扁钢"
        ),
        "plate": (
            "plate plates blech bleche grobblech tole toles chapa chapas placa lamiera lamiere plaat platen plaatstaal blacha platta "
            "platte stahlblech 钢板 kopfplatte fussplatte stirnplatte ankerplatte knotenblech stegblech futterblech lasche laschen steife "
            "steifen rippe rippen platine platines raidisseur raidisseurs eclisse eclisses piastra piastre voetplaat kopplaat knoopplaat "
            "schetsplaat schotje schotjes fotplat topplat andplat knutplat "
            "livplat stiffener stiffeners rigidizador rigidizadores enrijecedor enrijecedores "
            "irrigidimento irrigidimenti zebro"
        ),
        "sheet": "sheet sheets feinblech blachy",
        "pane": "pane panes glass glas glazing scheibe verre vitre vidrio vetro szklo vidro",
        "panel": (
            "panel panels plywood ply osb mdf chipboard plasterboard "
            "hardboard multiplex sperrholz melamine hdf fibreboard fiberboard particleboard spanplatte"
        ),
        "bar": "bar bars stab barre barra barras staaf pret stang billet fer",
        "rod": "rod rods rundstahl rundeisen rundstab rondstaal rundstang rundjarn shaft welle eixo varilla varao 圆钢",
        "hexagon": (
            "hexagon hexagonal hexagone sechskant hexagono esagono zeskant sexkant sexkantstang sechskantstahl szesciokatny sextavado"
        ),
        "square bar": "vierkantstahl quadratstahl vierkantstab vierkantstaal fyrkantstang cuadradillo 方钢",
        "block": (
            "block blocks coping copings kerb kerbs curb curbs slab slabs lintel lintels sill sills step steps stone stones padstone "
            "plinth paver pavers flagstone capstone cap pad brick ashlar stein bloc bloque blocco blok quader cuboid footing dalle losa "
            "sleeper sleepers ballast counterweight"
        ),
        "board": (
            "board boards plank planks decking batten battens slat slats laths listello listelli liston listones rastrel rastreles tasseau "
            "tasseaux lata laty listwa listwy sarrafo sarrafos ripa ripas lakt lat panlat tengel "
            "brett bretter bohle planche tabla tavola deska deski bradda reglar regel "
            "rafter rafters purlin purlins stud studs scantling kantholz timber lumber sawn leiste leisten holzleiste holzleisten kvh cls "
            "sparren balken kantholzer solive solives chevron chevrons lambourde lambourdes bastaing bastaings madrier madriers liteau "
            "liteaux krokiew krokwie latte latten"
        ),
        "cylinder": "cylinder cylinders zylinder cylindre cilindro cilinder",
        "disc": "disc discs disk disks disque disco schijf",
        "ring": "ring rings annulus anneau anillo anello",
        "cone": "cone cones frustum kegel kegelstumpf cono stozek",
        "pyramid": "pyramid pyramide piramide",
        "sphere": "sphere spheres ball balls kugel esfera sfera bol kula",
        "cap": "dome calotte kugelkappe",
        "triangle": "gusset gussets cartela cartelas triangle triangles dreieck gousset cartabon fazzoletto",
        "prism": "prism prisma prisme",
        "volume": "volume volumen",
        "head": "torispherical elliptical ellipsoidal hemispherical dished klopper klopperboden korbbogen korbbogenboden",
        "cable": "catenary",
        "rebar": (
            "rebar rebars reinforcement betonstahl bewehrung armature armatures armatura ferralla corrugado vergalhao wapening "
            "armering armierung corrugada zebrowany zebrowane zebrowanych"
        ),
        "glulam": "gl glulam bsh brettschichtholz lamellenholz limtrae limtra lamelle bilama",
        "tread": (
            "chequer chq chqd chkd checker checkered chequered "
            "riffelblech tranenblech tranenplaat traanplaat warzenblech durbar larmee larmees "
            "lagrimada lagrimadas striata striate bugnata mandorlata xadrez ryflowana ryflowane durkplat 花纹钢板"
        ),
        "fastener": "bolt bolts screw screws schraube schrauben vis tornillo vite bout boulon boulons perno nut nuts mutter washer washers",
        "threaded": (
            "studding allthread gewindestange gewindestangen gewindestab filetee filetees roscada roscado filettata draadstang draadeind "
            "draadeinden gwintowany gwintowana gangstang"
        ),
        "wedge": "wedge keil",
        "arch": "voussoir voussoirs arch arched archstone",
    }
)

#: word -> property that picks among the shapes of a kind.
PROPERTY_WORDS: dict[str, str] = _by_word(
    {
        "square": (
            "square quadratisch carre carree cuadrado cuadrada quadrato quadrado quadrada quadro kwadratowy kwadratowa kvadratisk "
            "vierkant vierkante kwadrat"
        ),
        "rectangular": (
            "rectangular rect rectangulaire rettangolare rechthoekig rechthoekige rechteckig retangular prostokatny prostokatna rektangular"
        ),
        "round": (
            "round circular rund rond ronde rondo redondo redonda tondo tonda rotondo okragly okragla runt cylindrical dia diameter diam "
            "ø fi od durchmesser diametre diametro"
        ),
        "legs": "equal unequal equale egales inegales",
        "hot": "hot hf warmgewalzt warmgefertigt warm vkr vckr rrw",
        "cold": "cold cf kaltgefertigt kaltgewalzt kalt kkr kckr rrk",
        "seamless": "seamless nahtlos smls naadloos",
        "letter": "h i u c",
    }
)

#: Words beside a size: which size it is.
LABELS: dict[str, str] = _by_word(
    {
        "thickness": ("t thk thick thickness ep epaisseur dicke dick starke gr grubosc espesor dikte spessore espessura tjocklek"),
        "wall": "wall wd wt",
        "width": "w width wide b breite largeur ancho largura breedte",
        "height": "h height high depth deep",
        "length": "lg long length len lange longueur largo lengte",
        "outer diameter": "od ad",
        "inner diameter": "id",
        "diameter": "ø fi dia diam diameter durchmesser",
        "radius": "r radius rayon",
        "depth": "d",
        "rise": "rise",
        "sag": "sag",
        "span": "span",
        "chord": "chord",
        "skirt": "skirt",
        "angle": "a deg",
    }
)

#: Single letters beside a size, where a solid or a bent member is told (``R3500``).
SOLID_LETTERS: dict[str, str] = {
    "r": "radius",
    "d": "depth",
    "a": "angle",
    "c": "chord",
    "w": "width",
    "h": "height",
    "t": "thickness",
    "l": "length",
    "s": "skirt",
    "f": "rise",
}
BENT_LETTERS: dict[str, str] = {"r": "radius", "a": "angle", "c": "chord", "f": "rise"}

#: Words that a member is bent to an arc.
BENT: frozenset[str] = frozenset("bent curved arc arcs gebogen cintre cintree curvado curvato gebogener gewalzt gekromd giety bojd".split())

#: Kinds whose sizes may carry a letter of their own (``R3500``, ``D300 H1200``).
LETTERED: frozenset[str] = frozenset(
    ("arch", "wedge", "cylinder", "disc", "ring", "cone", "pyramid", "sphere", "cap", "triangle", "head", "cable")
)

#: Words that change what the piece is, so that the section's own mass would be wrong.
CHANGED: frozenset[str] = frozenset(
    (
        "sigma sigmaprofil sigmaprofile sigmaprofiel omega omegaprofil omegaprofiel hutprofil tophat "
        "oval ovale ovalrohr ovaal triangular built bulb bulbe bulbflat wulstflach wulstflachstahl hollandprofil "
        "caillebotis castellated cellular composite corrugated double expanded fabricated "
        "gitterrost grating half halved haunch haunched hollowcore honeycomb insulated laced laminated lip lipped lochblech louvre mesh "
        "pair perforated slot profiled sandwich slotted split t-slot tapered threaded trapezoidal tread twin wellblech"
    ).split()
)

#: Structural timber that German lists size in centimetres (``KVH 6/24``): none is so thin in millimetres.
TIMBER_IN_CM: frozenset[str] = frozenset("sparren balken kantholz kantholzer kvh bsh brettschichtholz gl glulam krokiew krokwie".split())

#: Words beside a bare lumber size that leave it one.
LUMBER_WORDS: frozenset[str] = frozenset("pt rough sawn s4s s2s lvl treated pressure kd spf df hf syp select structural no psl".split())

#: Words that make a diameter the inner one.
INNER_WORDS: frozenset[str] = frozenset(
    (
        "binnen inner inside innen innendurchmesser interieur interieure interior int bore bored interno interna inwendig wewnetrzna "
        "invandig"
    ).split()
)

#: Bought-out things that are told by their own mass, not by sizes.
BOUGHT: frozenset[str] = frozenset(
    (
        "anchor anchors assembly bearing bearings bolt bolts boulon boulons bout bracket cable chain clamp clip eyebolt fabric film "
        "fixing fixings gitterrost grating grout hinge kit lamp lock luminaire membrane mesh motor mutter nail nails nipple nut nuts "
        "grigliato grigliati rejilla tramex rooster roosters krata kraty gitterdurk "
        "paint perno rivet rivets roost rope schraube schrauben screw screws sealant set sets shackle sign studbolt tornillo tray unit "
        "valve valves vis vite washer washers flange flanges flansch flansche bride brides brida bridas flangia flens kolnierz flans "
        "elbow elbows coude codo ellbogen reducer reduzierung absperrklappe ventil kugelhahn pump pumps pumpe pompe bomba pompa "
        "schraubensatz schraubensatze garnitur"
    ).split()
)

#: Words that say the piece is of metal.
METAL_WORDS: frozenset[str] = frozenset(
    (
        "acciaio acero acier aco alu aluminium aluminum brass bronze copper edelstahl galv galvanised galvanized inox mild ms staal stahl "
        "stainless stal stal. steel structural verzinkt"
    ).split()
)
#: Words that say the piece is of wood.
WOOD_WORDS: frozenset[str] = frozenset(
    (
        "holz holzleiste holzleisten ash azobe beech cedar chene chipboard douglas eiche "
        "ekki elm fichte fir glulam greenheart hardwood iroko kiefer larch larche mdf "
        "multiplex oak osb pine pino ply plywood redwood roble sapele sapin softwood sperrholz spruce teak timber whitewood wood"
    ).split()
)
#: Words that say the piece is of stone or concrete.
STONE_WORDS: frozenset[str] = frozenset(
    (
        "granite sandstone limestone marble slate basalt gneiss travertine "
        "portland yorkstone concrete precast granit sandstein kalkstein marmor "
        "beton betong granito marmo calcaire gres hormigon piedra pierre pietra"
    ).split()
)
#: Words that say the piece is of glass.
GLASS_WORDS: frozenset[str] = frozenset(("glas glass glazing szklo verre vetro vidrio vidro").split())
#: Sheet of metal for these is profiled, which takes more sheet than the width it covers.
PROFILED: frozenset[str] = frozenset(
    "roof roofing cladding decking deck dach dachblech fassade bardage toiture bac cubierta fachada copertura dak gevel cobertura".split()
)
