"""The catalogue: its tables fit together, and it answers as the readers of genotypes expect."""

from __future__ import annotations

import re

import pytest

from crossplan.genetics.appearance import WHITE_EYES
from crossplan.genetics.catalogue import (
    ALLOWED,
    KEYS,
    BalancerEntry,
    Catalogue,
    arm_of_band,
    default_catalogue,
    read_tables,
    restored_gene,
)
from crossplan.genetics.catalogue_tables import parts
from crossplan.genetics.chromosome import CHROMOSOME_OF_ARM
from crossplan.genetics.element import PLAIN

LONGEST_MAP = 110.0


@pytest.fixture(scope="module")
def catalogue() -> Catalogue:
    return default_catalogue()


def balancer(name: str) -> BalancerEntry:
    found = default_catalogue().balancer(name)
    assert found is not None, name
    return found


# the tables


@pytest.mark.parametrize(
    ("table", "fewest"),
    [
        ("signs", 30),
        ("markers", 90),
        ("balancers", 40),
        ("landing_sites", 35),
        ("components", 25),
        ("map", 700),
        ("balancer_pairs", 15),
        ("y_chromosomes", 6),
        ("compounds", 8),
        ("inversions", 15),
        ("elements", 40),
    ],
)
def test_enough_rows(table: str, fewest: int) -> None:
    assert len(read_tables()[table]) >= fewest


@pytest.mark.parametrize("table", KEYS)
def test_every_row_has_a_source_an_own_name_and_allowed_words(table: str) -> None:
    rows = read_tables()[table]
    names = [tuple(row[column] for column in KEYS[table]) for row in rows]
    assert len(set(names)) == len(names)
    for row in rows:
        assert None not in row, f"a cell too many in {row}"
        assert row["source"].strip(), row
        for column, words in ALLOWED.items():
            assert row.get(column, next(iter(words))) in words, (table, row, column)


@pytest.mark.parametrize("table", KEYS)
def test_no_cell_has_stray_blanks(table: str) -> None:
    cells = [cell for row in read_tables()[table] for cell in row.values()]
    assert [cell for cell in cells if cell != cell.strip()] == []


def test_numbers_are_in_range(catalogue: Catalogue) -> None:
    for marker in catalogue.markers():
        assert marker.map_cM is None or 0 <= marker.map_cM <= LONGEST_MAP, marker
    for site in catalogue.sites():
        assert site.map_cM is None or 0 <= site.map_cM <= LONGEST_MAP, site
    for entry in catalogue.balancers():
        for cover in entry.traits.cover:
            assert 0 <= cover.start < cover.end <= LONGEST_MAP, entry
    for part in catalogue.components():
        limits = [t for t in (part.rear_min_C, part.rear_max_C, part.test_C) if t is not None]
        assert all(15 <= t <= 37 for t in limits), part


def test_markers_and_sites_lie_where_their_bands_lie(catalogue: Catalogue) -> None:
    arms = {"X": ("X",), "2": ("2L", "2R"), "3": ("3L", "3R"), "4": ("4",)}
    checked = 0
    for marker in catalogue.markers():
        if marker.band and marker.map_cM is not None:
            places = [catalogue.band_to_cM(arm, marker.band) for arm in arms[marker.chromosome]]
            near = [abs(p - marker.map_cM) for p in places if p is not None]
            assert min(near) <= 5.0, marker
            checked += 1
    for site in catalogue.sites():
        assert (site.map_cM is None) == (not site.band), site
        if site.band:
            assert site.map_cM == catalogue.band_to_cM(site.arm, site.band), site
            checked += 1
    assert checked > 150


def test_markers_agree_with_the_map(catalogue: Catalogue) -> None:
    compared = 0
    for marker in catalogue.markers():
        locus = catalogue.locus(marker.gene)
        if locus is not None and marker.map_cM is not None:
            assert (locus.chromosome, locus.cM) == (marker.chromosome, marker.map_cM), marker.symbol
            compared += 1
    assert compared > 100


def test_every_lethal_of_a_balancer_is_written_in_its_row(catalogue: Catalogue) -> None:
    rows = {(r["name"], r["chromosome"]): r for r in read_tables()["balancers"]}
    for entry in catalogue.balancers():
        written = rows[entry.name, entry.chromosome]["lethal_groups"]
        assert entry.traits.lethal == set(parts(written)), entry.name


def test_no_sign_hides_itself_in_a_circle(catalogue: Catalogue) -> None:
    for sign in catalogue.signs.values():
        for other in sign.hidden_by:
            assert sign.name not in catalogue.sign(other).hidden_by, (sign.name, other)


def test_opposites_are_never_signs(catalogue: Catalogue) -> None:
    assert not {s.opposite for s in catalogue.signs.values()} & set(catalogue.signs)


def test_the_appearance_rules_know_the_sign_of_white(catalogue: Catalogue) -> None:
    assert WHITE_EYES in catalogue.signs
    colours = [s.name for s in catalogue.signs.values() if WHITE_EYES in s.hidden_by]
    assert {"bright red eyes", "brown or ruby eyes", "orange eyes"} <= set(colours)


# signs


@pytest.mark.parametrize(
    "alike",
    [
        ("Cy", "cu"),
        ("Sb", "Pr", "Ki", "Bl", "Pin"),
        ("sn", "f"),
        ("Sco", "sc", "H"),
        ("Ser", "Bx", "Bd", "Ly"),
        ("If", "S", "Roi", "ru", "ro"),
        ("v", "cn", "st"),
        ("e", "b", "s"),
        ("Gla", "Gl"),
    ],
)
def test_markers_that_look_alike_share_a_sign(catalogue: Catalogue, alike: tuple[str, ...]) -> None:
    signs = set()
    for gene in alike:
        marker = catalogue.marker(gene)
        assert marker is not None, gene
        signs.add(marker.sign)
    assert len(signs) == 1


def test_markers_that_differ_have_their_own_signs(catalogue: Catalogue) -> None:
    genes = ("Cy", "Sb", "Hu", "Sp", "Sco", "If", "Dr", "Gla", "B", "y", "e", "D", "Tb", "vg", "sn", "Ser")
    markers = [catalogue.marker(g) for g in genes]
    assert len({m.sign for m in markers if m}) == len(genes)


def test_a_sign_that_hides(catalogue: Catalogue) -> None:
    stubble, drop = catalogue.marker("Sb"), catalogue.marker("Dr")
    assert stubble is not None
    assert "gnarled bristles" in stubble.traits.masks
    assert drop is not None
    assert WHITE_EYES in drop.traits.masks


def test_curly_fails_in_the_cold(catalogue: Catalogue) -> None:
    limit = catalogue.sign("curly wings").unreliable_below_C
    assert limit is not None
    assert 19 <= limit <= 22


# markers


@pytest.mark.parametrize(
    ("gene", "allele", "symbol"),
    [
        ("Sb", "1", "Sb[1]"),
        ("Sb", "", "Sb"),
        ("If", "", "Kr[If-1]"),
        ("Kr", "If-1", "Kr[If-1]"),
        ("Hu", "", "Antp[Hu]"),
        ("Antp", "Hu", "Antp[Hu]"),
        ("Sp", "1", "wg[Sp-1]"),
        ("Gla", "", "wg[Gla-1]"),
        ("Duox", "Cy", "Cy"),
        ("Bc", "", "PPO1[Bc]"),
        ("kni", "ri-1", "ri"),
        ("D", "3", "D[3]"),
        ("ci", "D", "ci[D]"),
        ("w", "1118", "w[1118]"),
    ],
)
def test_marker_by_name_synonym_or_allele(catalogue: Catalogue, gene: str, allele: str, symbol: str) -> None:
    marker = catalogue.marker(gene, allele)
    assert marker is not None
    assert marker.symbol == symbol


@pytest.mark.parametrize(("gene", "allele"), [("cy", ""), ("wg", "l-8"), ("Kr", ""), ("w", "zz9"), ("nonesuch", "")])
def test_what_is_no_marker(catalogue: Catalogue, gene: str, allele: str) -> None:
    assert catalogue.marker(gene, allele) is None


def test_fate_of_markers(catalogue: Catalogue) -> None:
    stubble = catalogue.marker("Sb", "1")
    assert stubble is not None
    assert stubble.traits.dominant == ("stubble bristles",)
    assert stubble.traits.lethal == {"Sb"}
    vermilion = catalogue.marker("v", "1")
    assert vermilion is not None
    assert vermilion.traits.recessive == (("v", "bright red eyes"),)
    assert not vermilion.traits.dominant
    singed = catalogue.marker("sn", "X2")
    assert singed is not None
    assert singed.traits.female_sterile == {"sn[X2]"}


@pytest.mark.parametrize("allele", ["1118", "1", "67c23", "*", "-", ""])
def test_null_white(catalogue: Catalogue, allele: str) -> None:
    white = catalogue.marker("w", allele)
    assert white is not None
    assert white.traits.null_for == {"w"}
    assert not white.traits.recessive


@pytest.mark.parametrize("allele", ["a", "e", "co"])
def test_coloured_white_alleles_are_no_nulls(catalogue: Catalogue, allele: str) -> None:
    white = catalogue.marker("w", allele)
    assert white is not None
    assert not white.traits.null_for
    assert white.traits.recessive == (("w", "orange eyes"),)


@pytest.mark.parametrize(("gene", "allele"), [("w", "+"), ("Tb", "+"), ("Sb", "+"), ("y", "+t7.7"), ("Antp", "+")])
def test_wild_type_alleles_do_nothing(catalogue: Catalogue, gene: str, allele: str) -> None:
    marker = catalogue.marker(gene, allele)
    assert marker is not None
    assert marker.traits == PLAIN


@pytest.mark.parametrize(("name", "lethal"), [("l(2)c14", True), ("l(3)DTS4", True), ("lt", False), ("l(9)x", False)])
def test_lethal_by_name(catalogue: Catalogue, name: str, lethal: bool) -> None:
    assert catalogue.lethal_by_name(name) is lethal


# balancers


@pytest.mark.parametrize(
    ("written", "name"),
    [
        ("CyO", "CyO"),
        ("Cyo", "CyO"),
        ("CYO", "CyO"),
        ("Tm6b", "TM6B"),
        ("TM6,B", "TM6B"),
        ("TM 3", "TM3"),
        ("FM7", "FM7a"),
        ("fm7C", "FM7c"),
        ("FM7-A", "FM7-A"),
        ("CyO, GFP", "CyO-GFP"),
        ("CyO,ActGFP", "CyO-GFP"),
        ("TM3-GFP", "TM3-GFP"),
        ("SM6", "SM6a"),
        ("T(2;3)SM6a-TM6B", "T(2;3)SM6a-TM6B"),
        ("TSTL", "T(2;3)TSTL"),
    ],
)
def test_balancer_by_any_spelling(written: str, name: str) -> None:
    assert balancer(written).name == name


@pytest.mark.parametrize(
    ("typo", "meant"),
    [("TM6Bb", "TM6B"), ("CYo1", "CyO"), ("Cy0", "CyO"), ("MKSR", "MKRS"), ("FM7cc", "FM7c")],
)
def test_a_typing_error_finds_the_balancer(catalogue: Catalogue, typo: str, meant: str) -> None:
    assert catalogue.balancer(typo) is None
    assert catalogue.is_balancer_like(typo) == meant


@pytest.mark.parametrize("name", ["Sb", "Sco", "If", "Dr", "w", "AD-K12", "Canton-S", "+", "", "yw"])
def test_other_names_are_not_like_balancers(catalogue: Catalogue, name: str) -> None:
    assert catalogue.is_balancer_like(name) is None


def test_what_balancers_do() -> None:
    assert balancer("CyO").traits.dominant == ("curly wings",)
    assert balancer("CyO").traits.lethal == {"CyO", "Cy"}
    assert {gene for gene, _ in balancer("CyO").traits.recessive} == {"dp", "pr", "cn"}
    assert balancer("TM6B").traits.dominant == ("extra humeral bristles",)
    assert ("e", "dark body") in balancer("TM6B").traits.recessive
    assert balancer("FM7c").traits.female_sterile == {"sn[X2]"}
    assert not balancer("FM7a").traits.lethal
    assert balancer("ClB").traits.male_lethal


def test_what_is_assumed_when_no_marker_is_written() -> None:
    plain = balancer("TM3")
    assert plain.assumed == ("Sb[1]",)
    assert plain.assumed_reason
    assert plain.traits.dominant == ()
    assert plain.traits_assumed.dominant == ("stubble bristles",)
    assert plain.traits_assumed.lethal == {"TM3", "Sb"}
    assert balancer("TM6B").traits_assumed.dominant == ("extra humeral bristles", "tubby pupae")


def test_whatever_is_assumed_has_a_reason(catalogue: Catalogue) -> None:
    assert [b.name for b in catalogue.balancers() if bool(b.assumed) != bool(b.assumed_reason)] == []


def test_balancers_that_glow_bring_pigment() -> None:
    glowing = balancer("CyO-GFP").traits
    assert glowing.dominant == ("curly wings", "green fluorescence")
    assert glowing.restores == {"w"}


def test_translocation_balancers_have_two_linked_parts(catalogue: Catalogue) -> None:
    for name in ("T(2;3)SM6a-TM6B", "T(2;3)CyO-TM6B", "T(2;3)TSTL"):
        second = balancer(name)
        third = catalogue.linked_part(second)
        assert third is not None
        assert (second.chromosome, second.traits.linked_to) == ("2", "3")
        assert (third.chromosome, third.traits.linked_to) == ("3", "2")
        assert second.traits.dominant == ("curly wings",)
        assert "extra humeral bristles" in third.traits.dominant
    assert catalogue.linked_part(balancer("CyO")) is None


@pytest.mark.parametrize("name", ["C(1)DX", "C(1)RM", "C(1)M3"])
def test_attached_x(name: str) -> None:
    assert balancer(name).traits.compound
    assert balancer(name).chromosome == "X"


# sites, components, map


@pytest.mark.parametrize(
    ("written", "name"),
    [
        ("VK5", "VK00005"),
        ("vk00005", "VK00005"),
        ("VK-5", "VK00005"),
        ("attp2", "attP2"),
        ("86Fb", "ZH-86Fb"),
        ("ZH86Fb", "ZH-86Fb"),
        ("su(Hw)attP5", "su(Hw)attP5"),
        ("attP5", "attP5"),
    ],
)
def test_site_by_any_spelling(catalogue: Catalogue, written: str, name: str) -> None:
    site = catalogue.site(written)
    assert site is not None
    assert site.name == name


def test_unknown_sites_get_near_names(catalogue: Catalogue) -> None:
    assert catalogue.site("attP04") is None
    assert "attP40" in catalogue.near_sites("attP04")
    assert catalogue.site("86F") is None
    assert catalogue.near_sites("zzz") == ()


@pytest.mark.parametrize(
    ("name", "cls"),
    [
        ("AD-K12", "AD"),
        ("K12-p65.AD", "AD"),
        ("K12.p65ADZp", "AD"),
        ("DBD-Q07", "DBD"),
        ("Q07-ZpGdbd", "DBD"),
        ("GAL4.DBD-K", "DBD"),
        ("GAL4-W21", "GAL4"),
        ("TrpA1-GAL4", "GAL4"),
        ("Act5C-GAL4", "GAL4"),
        ("LexA-H07", "LexA"),
        ("LexA::p65-K", "LexA"),
        ("UAS-CsChrimson", "effector"),
        ("UAS-dTrpA1", "effector"),
        ("20XUAS-IVS-CsChrimson.mVenus", "effector"),
        ("LexAop-CsChrimson", "effector"),
        ("UAS-shi.ts", "effector"),
        ("UAS-Kir2.1", "effector"),
        ("UAS-para.IR-3", "effector"),
        ("UAS-mCD8-GFP", "reporter"),
        ("13XLexAop2-IVS-myr-GFP", "reporter"),
        ("UAS-GCaMP7f", "reporter"),
        ("tubP-GAL80[ts]", "repressor"),
        ("GAL80-W21", "repressor"),
        ("hs-FLP", "helper"),
        ("FRT40A", "helper"),
        ("UAS-Dcr-2", "helper"),
    ],
)
def test_class_of_a_component(catalogue: Catalogue, name: str, cls: str) -> None:
    entry = catalogue.component(name)
    assert entry is not None
    assert entry.cls == cls


@pytest.mark.parametrize("name", ["BAD-1", "Sb", "w+", "CyO", "attP40", "para"])
def test_what_is_no_component(catalogue: Catalogue, name: str) -> None:
    assert catalogue.component(name) is None


def test_what_effectors_need(catalogue: Catalogue) -> None:
    light, heat, cold = (catalogue.component(n) for n in ("UAS-CsChrimson", "UAS-dTrpA1", "tub-GAL80ts"))
    assert light is not None
    assert (light.activation, light.needs_retinal, light.needs_dark) == ("light", True, True)
    assert heat is not None
    assert heat.rear_max_C is not None
    assert heat.test_C is not None
    assert heat.rear_max_C < heat.test_C
    assert cold is not None
    assert cold.rear_max_C == 19


@pytest.mark.parametrize(
    ("marker", "gene"),
    [
        ("w[+mC]", "w"),
        ("w+", "w"),
        ("w+mC", "w"),
        ("y[+t7.7]", "y"),
        ("v[+t1.8]", "v"),
        ("ry[+t7.2]", "ry"),
        ("neoR", ""),
        ("w[1118]", ""),
        ("3xP3-RFP", ""),
    ],
)
def test_gene_that_an_insertion_marker_restores(marker: str, gene: str) -> None:
    assert restored_gene(marker) == gene


def test_insertion_traits(catalogue: Catalogue) -> None:
    driver, hairpin = catalogue.component("AD-K12"), catalogue.component("HMS01234")
    assert catalogue.insertion_traits(["y[+t7.7]", "w[+mC]"], driver).restores == {"w", "y"}
    assert catalogue.insertion_traits([], driver).restores == {"w"}
    assert catalogue.insertion_traits([], hairpin).restores == {"v", "y"}
    assert catalogue.insertion_traits([], None).restores == {"w"}
    assert catalogue.insertion_traits(["3xP3-RFP"], None).dominant == ("red fluorescence",)
    assert catalogue.insertion_traits([], catalogue.component("FRT40A")) == PLAIN


def test_bands_run_along_the_arm(catalogue: Catalogue) -> None:
    for arm, first, last in (("X", 1, 20), ("2L", 21, 40), ("2R", 41, 60), ("3L", 61, 80), ("3R", 81, 100)):
        bands = [f"{n}{letter}" for n in range(first, last + 1) for letter in "ABCDEF"]
        places = [catalogue.band_to_cM(arm, band) for band in bands]
        assert None not in places
        assert places == sorted(p for p in places if p is not None)
    assert catalogue.band_to_cM("1", "6C12") == catalogue.band_to_cM("X", "6C12")


@pytest.mark.parametrize(("arm", "band"), [("2L", "68A4"), ("3L", "201A"), ("5", "1A"), ("2L", "here"), ("2L", "")])
def test_what_is_no_band(catalogue: Catalogue, arm: str, band: str) -> None:
    assert catalogue.band_to_cM(arm, band) is None


@pytest.mark.parametrize("symbol", ["TM3", "Sb[1]", "attP2", "curly wings", "UAS-GtACR1", "If"])
def test_provenance(catalogue: Catalogue, symbol: str) -> None:
    assert catalogue.provenance(symbol)


def test_no_provenance_for_the_unknown(catalogue: Catalogue) -> None:
    assert catalogue.provenance("nonesuch") == ""


def test_every_locus_has_its_band_on_its_chromosome(catalogue: Catalogue) -> None:
    rows = read_tables()["map"]
    placed = 0
    for row in rows:
        locus = catalogue.locus(row["locus"])
        assert locus is not None
        assert locus.chromosome == row["chromosome"]
        if row["band"]:
            assert CHROMOSOME_OF_ARM[arm_of_band(row["band"])] == row["chromosome"], row["locus"]
            assert locus.cM is not None
            placed += 1
        elif not row["cM"]:
            assert locus.cM is None
    assert placed > 500


@pytest.mark.parametrize(
    ("gene", "chromosome", "band"),
    [
        ("Or47b", "2", "47"),
        ("Or2a", "X", "2"),
        ("Gr66a", "3", "66"),
        ("Ir84a", "3", "84"),
        ("Ir25a", "2", "25"),
        ("Obp76a", "3", "76C"),
        ("Or83b", "3", "83A"),
    ],
)
def test_receptors_are_placed_by_the_band_in_their_name(
    catalogue: Catalogue, gene: str, chromosome: str, band: str
) -> None:
    locus = catalogue.locus(gene)
    assert locus is not None
    assert (locus.chromosome, locus.band) == (chromosome, band)


@pytest.mark.parametrize("gene", ["Or", "Or103x", "Or0a", "Orx", "Gr", "zzz", ""])
def test_what_is_no_gene(catalogue: Catalogue, gene: str) -> None:
    assert catalogue.locus(gene) is None


def test_a_gene_by_its_other_names(catalogue: Catalogue) -> None:
    for synonym, symbol in (("Vglut", "VGlut"), ("n-syb", "nSyb"), ("Cha", "ChAT"), ("robo", "robo1")):
        found = catalogue.locus(synonym)
        assert found is not None
        assert found.gene == symbol


def test_a_place_worked_out_from_a_band_says_so(catalogue: Catalogue) -> None:
    locus, unknown = catalogue.locus("para"), catalogue.locus("Lk")
    assert locus is not None
    assert "worked out from the band 14D" in locus.source
    assert locus.cM == catalogue.band_to_cM("X", "14D")
    assert unknown is not None
    assert unknown.cM is None


@pytest.mark.parametrize(
    ("symbol", "told"),
    [
        ("TM3", "Miller et al. 2020"),
        ("attP2", "van der Graaf et al. 2022"),
        ("para", "worked out from the band 14D"),
        ("para[ts1]", "worked out from the band 14D"),
        ("Or47b", "named by their band"),
        ("In(2L)t", "Lemeunier & Aulard 1992"),
        ("B[S]Y", "Lindsley & Zimm 1992"),
        ("C(2)EN", "Lindsley & Zimm 1992"),
        ("OK107", "from memory"),
        ("AD-K12@attP40", "attP40: van der Graaf et al. 2022"),
        ("AD-K12@attP40", "AD-K12: Aso et al. 2014"),
    ],
)
def test_every_sort_of_fact_tells_its_source(catalogue: Catalogue, symbol: str, told: str) -> None:
    assert told in catalogue.provenance(symbol)


def test_source_and_kind_in_words(catalogue: Catalogue) -> None:
    assert catalogue.provenance("Sb[1]").endswith("(published)")
    assert catalogue.provenance("CyO-GFP") == "common practice, no source"
    assert catalogue.provenance("OK107").count("from memory") == 1


def test_genes_named_by_a_band_lie_there(catalogue: Catalogue) -> None:
    """`Act88F`, `Stat92E`: the band stands in the name, apart from the column."""
    checked = 0
    for name in catalogue.genes():
        written = re.search(r"(\d{2,3}[A-F])[a-z]?$", name)
        locus = catalogue.locus(name)
        if written is not None and locus is not None and not name.startswith(("Gr", "Or", "Ir", "Obp")):
            assert CHROMOSOME_OF_ARM[arm_of_band(written[1])] == locus.chromosome, name
            checked += 1
    assert checked >= 20


def test_every_named_lethal_lies_on_the_chromosome_in_its_name(catalogue: Catalogue) -> None:
    for name in catalogue.genes():
        numbered = re.match(r"(?:l|fs|M|su|mal)\(([1-4])\)", name)
        locus = catalogue.locus(name)
        if numbered is not None and locus is not None:
            assert locus.chromosome == {"1": "X"}.get(numbered[1], numbered[1]), name


@pytest.mark.parametrize(
    ("name", "chromosome", "lethal"), [("M(2)53", "2", True), ("M(3)95A", "3", True), ("M(1)15D", "X", True)]
)
def test_minutes_are_known_by_their_name(catalogue: Catalogue, name: str, chromosome: str, lethal: bool) -> None:
    marker = catalogue.marker(name)
    assert marker is not None
    assert marker.chromosome == chromosome
    assert marker.traits.dominant == ("slender bristles",)
    assert (name in marker.traits.lethal) is lethal


def test_temperature_of_single_markers(catalogue: Catalogue) -> None:
    """Bl and Cy fail at opposite ends, though the sign of Bl is that of Sb, which never fails."""
    bristle, curly, stubble = catalogue.marker("Bl"), catalogue.marker("Cy"), catalogue.marker("Sb")
    assert bristle is not None
    assert curly is not None
    assert stubble is not None
    assert bristle.sign == stubble.sign
    assert bristle.unreliable_above_C == 24
    assert curly.unreliable_below_C == 20
    assert stubble.unreliable_above_C is None


def test_what_one_sex_alone_shows_is_hard_to_sort_by(catalogue: Catalogue) -> None:
    limited = [s for s in catalogue.signs.values() if s.sex]
    assert [s.name for s in limited] == ["extra sex combs"]
    assert all(s.ease == "hard" for s in limited)


def test_no_error_rate_that_nobody_counted(catalogue: Catalogue) -> None:
    assert {s.error_rate for s in catalogue.signs.values()} == {None}
