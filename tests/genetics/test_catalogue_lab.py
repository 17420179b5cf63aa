"""A laboratory's own entries: what they add and correct, and what a fault in them says."""

from __future__ import annotations

import tomllib
from pathlib import Path

import pytest

from crossplan.errors import InputError
from crossplan.genetics.catalogue import BalancerEntry, Catalogue, KnownElement, default_catalogue
from crossplan.genetics.catalogue_lab import REQUIRED, TABLES, blank_element, load_catalogue


def balancer(name: str) -> BalancerEntry:
    found = default_catalogue().balancer(name)
    assert found is not None, name
    return found


def lab(folder: Path, text: str) -> Catalogue:
    path = folder / "lab.toml"
    path.write_text(text, encoding="utf-8")
    return load_catalogue(path)


def test_without_a_file_it_is_the_programs_own() -> None:
    assert load_catalogue(None) is default_catalogue()


def test_the_lab_corrects_one_cell(tmp_path: Path) -> None:
    own = lab(tmp_path, '[[balancer]]\nname = "TM3"\nassumed = ["Ser[1]"]\nassumed_reason = "ours are Ser"\n')
    entry = own.balancer("TM3")
    assert entry is not None
    assert entry.traits_assumed.dominant == ("notched wings",)
    assert entry.traits == balancer("TM3").traits
    assert entry.kind == "lab"
    assert balancer("TM3").assumed == ("Sb[1]",)


def test_the_lab_adds_entries(tmp_path: Path) -> None:
    own = lab(
        tmp_path,
        '[[site]]\nname = "attP-east"\narm = "2R"\nband = "57F"\n'
        '[[sign]]\nsign = "blue eyes"\nopposite = "brick red eyes"\npart = "eye"\nstage = "adult"\n'
        'ease = "easy"\n'
        '[[marker]]\ngene = "Blu"\nchromosome = "2"\ndominance = "dominant"\nsign = "blue eyes"\n'
        'homozygote = "lethal"\n'
        '[[component]]\nname = "ours"\nclass = "effector"\npattern = "^UAS-CsChrimson$"\ncarries = ["v+"]\n',
    )
    site, marker, part = own.site("attPeast"), own.marker("Blu", "7"), own.component("UAS-CsChrimson")
    assert site is not None
    assert site.map_cM == own.band_to_cM("2R", "57F")
    assert marker is not None
    assert marker.traits.dominant == ("blue eyes",)
    assert marker.traits.lethal == {"Blu"}
    assert part is not None
    assert part.carries == ("v+",)


def test_a_new_band_moves_a_known_site(tmp_path: Path) -> None:
    own = lab(tmp_path, '[[site]]\nname = "attP2"\nband = "70A"\n')
    site = own.site("attP2")
    assert site is not None
    assert site.map_cM == own.band_to_cM("3L", "70A")


@pytest.mark.parametrize(
    ("text", "message", "hint"),
    [
        ("[[balancer]\n", "not TOML", "quotes"),
        ("[[fly]]\nname = 1\n", "[[fly]]", "[[sign]]"),
        ('[sign]\nsign = "curly wings"\n', "[[sign]]", "brackets"),
        ('[[balancer]]\nname = "TM3"\nasumed = "Sb"\n', "asumed", "assumed"),
        ('[[balancer]]\nname = "TM3"\nassumed = "Sbb[1]"\n', "Sbb[1]", "Sb"),
        ('[[balancer]]\nname = "TM3"\ncover = "all"\n', "all", "5.1-98.9"),
        ('[[balancer]]\nname = "Own3"\nchromosome = "3"\n', "lethal_groups", '""'),
        ('[[sign]]\nsign = "curly wings"\nease = "eazy"\n', "eazy", "easy"),
        ('[[sign]]\nsign = "curly wings"\nhidden_by = ["stub wing"]\n', "stub wing", "stub wings"),
        ('[[sign]]\nsign = "curly wings"\nunreliable_below_C = "cold"\n', "cold", "12.5"),
        ('[[site]]\nname = "s"\narm = "5L"\n', "5L", "2L"),
        ('[[site]]\nname = "s"\narm = "2L"\nband = "68A"\n', "68A", "68A4 on 3L"),
        ('[[site]]\nname = "s"\narm = "2L"\nsynonyms = ["VK5"]\n', "VK00005", "another synonym"),
        ('[[component]]\nname = "c"\nclass = "AD"\npattern = "(("\ncarries = ""\n', "((", "UAS"),
        ('[[marker]]\ngene = "Sb"\nsign = { a = 1 }\n', "sign", "list"),
        ('[[element]]\nname = "kx-GAL4"\n', "'kx-GAL4' has none", "X, Y, 2, 3 or 4"),
        ('[[element]]\nname = "kx-GAL4"\nchromosome = "II"\n', "chromosome: 'II'", "2, 3, 4"),
        ('[[element]]\nname = "kx-GAL4"\nchromosome = "2"\nband = "68A"\n', "element kx-GAL4, band: 68A", "68A4 on 3"),
        ('[[element]]\nname = "kx-GAL4"\nsite = "attP04"\n', "element kx-GAL4, site", "attP40"),
        ('[[element]]\nname = "kx-GAL4"\nsite = "attP40"\nchromosome = 3\n', "attP40 is on 2", "correct the site"),
        ('[[element]]\nname = "kx-GAL4"\nchromosome = 2\nmap_cM = "far"\n', "map_cM: 'far'", "12.5"),
        ('[[element]]\nname = "kx-GAL4"\nchromosome = 2\nsign = "curly wing"\n', "sign: there is no", "curly wings"),
        ('[[element]]\nname = "kx-GAL4"\nchromosome = 2\nhomozygote = "dead"\n', "homozygote: 'dead'", "lethal"),
        ('[[element]]\nname = "kx-GAL4"\nclass = "Gal4"\nchromosome = 2\n', "class: 'Gal4'", "GAL4"),
        ('[[element]]\nname = "k"\npattern = "(("\nchromosome = 2\n', "element k, pattern", "the name itself"),
        ('[[element]]\nsymbol = "kx-GAL4"\nchromosome = 2\n', "'symbol'", "name"),
        ('[[element]]\nname = "--"\nchromosome = 2\n', "needs a letter", "as the genotype does"),
        ("[[element]]\nchromosome = 2\n", "lacks name", "which entry"),
        (
            '[[element]]\nname = "k"\nchromosome = 2\n[[element]]\nname = "k"\nchromosome = 3\n',
            "'k' is written in number 1",
            "one entry",
        ),
        (
            '[[element]]\nname = "kx 1"\nchromosome = 2\n[[element]]\nname = "KX-1"\nchromosome = 3\n',
            "is a name of both",
            "another synonym",
        ),
        ('[[gene]]\nlocus = "qx"\nchromosome = "2"\nband = "87C"\n', "locus qx: 87C", "68A4 on 3"),
        ('[[balancer_pair]]\none = "TM3"\nother = "TM99"\nfate = "weak"\nreason = "x"\n', "TM99", "tm9"),
        ('[[balancer_pair]]\none = "TM3"\nother = "TM6B"\nfate = "fine"\n', "fate: 'fine'", "viable"),
        ('[[inversion]]\nname = "In(2L)own"\nchromosome = "2"\nbreakpoints = "22A"\n', "two breakpoints", "22D3;34A8"),
        ('[[sign]]\nsign = "curly wings"\nerror_rate = 2\n', "error_rate: 2", "0 to 1"),
        ('[[sign]]\nsign = "curly wings"\nunreliable_below_C = nan\n', "nan", "12.5"),
    ],
)
def test_faults_in_the_labs_file_say_what_and_where(tmp_path: Path, text: str, message: str, hint: str) -> None:
    with pytest.raises(InputError) as caught:
        lab(tmp_path, text)
    assert "lab.toml" in caught.value.message
    assert message in caught.value.message
    assert hint in caught.value.hint


def test_a_file_that_is_not_there(tmp_path: Path) -> None:
    with pytest.raises(InputError, match=r"none\.toml"):
        load_catalogue(tmp_path / "none.toml")


# elements of the laboratory


def element(catalogue: Catalogue, name: str) -> KnownElement:
    found = catalogue.known_element(name)
    assert found is not None, name
    return found


def test_an_element_is_settled_once_for_all_spellings(tmp_path: Path) -> None:
    own = lab(tmp_path, '[[element]]\nname = "kx-GAL4"\nchromosome = 2\nband = "49D"\nclass = "GAL4"\n')
    for spelt in ("kx-GAL4", "KX-Gal4", "kx GAL4", "kx[GAL4]", "kxGAL4"):
        found = element(own, spelt)
        assert (found.name, found.chromosome, found.cls, found.site) == ("kx-GAL4", "2", "GAL4", "")
        assert found.map_cM == own.band_to_cM("2R", "49D")
        assert found.kind == "lab"
    assert own.known_element("kx-GAL80") is None
    assert own.provenance("kx-GAL4") == "the lab's own catalogue file (the lab's own entry)"


def test_a_site_tells_the_chromosome_and_the_place(tmp_path: Path) -> None:
    own = lab(
        tmp_path,
        '[[site]]\nname = "attP-east"\narm = "2R"\nband = "57F"\n'
        '[[element]]\nname = "UAS-mine"\nsynonyms = ["mine(2)"]\nsite = "attP-east"\ncarries = ["v+"]\n',
    )
    found = element(own, "mine (2)")
    assert (found.chromosome, found.site, found.map_cM) == ("2", "attP-east", own.band_to_cM("2R", "57F"))
    assert found.carries == ("v+",)


def test_what_an_element_does_when_homozygous(tmp_path: Path) -> None:
    text = '[[element]]\nname = "qx-1"\nchromosome = 3\nhomozygote = "lethal"\nsign = "green fluorescence"\n'
    found = element(lab(tmp_path, text), "qx-1")
    assert found.traits.lethal == {"qx-1"}
    assert found.traits.dominant == ("green fluorescence",)
    assert found.map_cM is None


def test_a_pattern_settles_many(tmp_path: Path) -> None:
    text = '[[element]]\nname = "traps"\npattern = \'tz\\d+-GAL4\'\nchromosome = "3"\n'
    own = lab(tmp_path, text)
    assert element(own, "tz17-GAL4").chromosome == "3"
    assert own.known_element("atz17-GAL4") is None
    assert own.known_element("traps") is None


def test_a_name_stands_before_a_pattern(tmp_path: Path) -> None:
    text = (
        '[[element]]\nname = "traps"\npattern = \'tz\\d+-GAL4\'\nchromosome = "3"\n'
        '[[element]]\nname = "tz9-GAL4"\nchromosome = "2"\n'
    )
    own = lab(tmp_path, text)
    assert element(own, "tz9-GAL4").chromosome == "2"
    assert element(own, "tz8-GAL4").chromosome == "3"


def test_the_laboratory_stands_before_the_trade(tmp_path: Path) -> None:
    assert element(default_catalogue(), "OK107").chromosome == "4"
    by_synonym = lab(tmp_path, '[[element]]\nname = "OK107"\nchromosome = "2"\n')
    assert element(by_synonym, "OK107").chromosome == "2"
    by_name = lab(tmp_path, '[[element]]\nname = "OK107-GAL4"\nchromosome = "2"\n')
    assert element(by_name, "OK107").chromosome == "2"
    assert element(by_name, "OK107").map_cM is None


def test_a_new_chromosome_forgets_the_old_place(tmp_path: Path) -> None:
    own = lab(tmp_path, '[[gene]]\nlocus = "para"\nchromosome = "3"\n')
    locus = own.locus("para")
    assert locus is not None
    assert (locus.chromosome, locus.cM, locus.band) == ("3", None, "")


def test_genes_and_pairs_of_the_laboratory(tmp_path: Path) -> None:
    own = lab(
        tmp_path,
        '[[gene]]\nlocus = "qx"\nsynonyms = ["quix"]\nchromosome = "3"\nband = "87C"\n'
        '[[balancer_pair]]\none = "TM6B"\nother = "TM3"\nfate = "weak"\nreason = "ours do poorly"\n'
        '[[y_chromosome]]\nname = "y[+]Y-own"\nrestores = ["y", "v"]\n',
    )
    locus, pair, y = own.locus("quix"), own.balancer_pair("TM3", "TM6B"), own.y_chromosome("y[+]Y-own")
    assert locus is not None
    assert locus.cM == own.band_to_cM("3R", "87C")
    assert pair is not None
    assert (pair.fate, pair.reason, pair.kind) == ("weak", "ours do poorly", "lab")
    assert y is not None
    assert y.traits.restores == {"y", "v"}


@pytest.mark.parametrize("symbol", ["kx-GAL4", 'od"d', "back\\slash", "P{w[+mC]=kx}", "\u0394k\t1"])
def test_the_question_that_settles_an_element_is_toml(symbol: str) -> None:
    asked = tomllib.loads(blank_element(symbol))
    assert asked == {"element": [{"name": symbol, "chromosome": ""}]}


def test_the_answered_question_can_be_used(tmp_path: Path) -> None:
    text = blank_element("kx-GAL4").replace('chromosome = ""', 'chromosome = "3"')
    assert element(lab(tmp_path, text), "kx-GAL4").chromosome == "3"


def test_the_unanswered_question_is_a_fault(tmp_path: Path) -> None:
    with pytest.raises(InputError, match="'kx-GAL4' has none"):
        lab(tmp_path, blank_element("kx-GAL4"))


def test_every_table_says_what_it_needs() -> None:
    assert set(TABLES.values()) == set(REQUIRED)
