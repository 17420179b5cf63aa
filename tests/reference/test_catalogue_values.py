"""Values of the catalogue against the literature; the citation stands beside each."""

from __future__ import annotations

import pytest

from crossplan.genetics.catalogue import BalancerEntry, Catalogue, default_catalogue


@pytest.fixture(scope="module")
def catalogue() -> Catalogue:
    return default_catalogue()


def covers(entry: BalancerEntry | None, place: float | None) -> bool:
    assert entry is not None
    assert place is not None
    return any(c.start <= place <= c.end for c in entry.traits.cover)


def place_of(catalogue: Catalogue, site: str) -> float:
    found = catalogue.site(site)
    assert found is not None
    assert found.map_cM is not None
    return found.map_cM


@pytest.mark.parametrize(
    ("balancer", "arm", "first", "last"),
    [
        # Miller et al. 2018, G3 8:1161, Table 2: outermost breakpoints
        ("CyO", ("2L", "2R"), "22D1", "58A4"),
        ("SM6a", ("2L", "2R"), "22A3", "60B11"),
        ("SM1", ("2L", "2R"), "22A3", "60B11"),
        ("SM5", ("2L", "2R"), "21E2", "60B11"),
    ],
)
def test_cover_runs_between_the_outermost_breakpoints(
    catalogue: Catalogue, balancer: str, arm: tuple[str, str], first: str, last: str
) -> None:
    entry = catalogue.balancer(balancer)
    assert entry is not None
    (cover,) = entry.traits.cover
    assert cover.start == catalogue.band_to_cM(arm[0], first)
    assert cover.end == catalogue.band_to_cM(arm[1], last)


@pytest.mark.parametrize(
    ("balancer", "arm", "band", "held"),
    [
        # Miller et al. 2018, G3 8:1161, Table 2: CyO from 22D1 to 58A4, SM6a from 22A3 to 60B11
        ("CyO", "2L", "22A3", False),
        ("CyO", "2L", "25C6", True),
        ("CyO", "2R", "60C5", False),
        ("SM6a", "2L", "22D1", True),
        ("SM6a", "2R", "59D3", True),
        ("SM6a", "2R", "60E", False),
        # Miller et al. 2020, G3 10:4271, Table 1: TM3 starts at 65D3
        ("TM3", "3L", "62E1", False),
        ("TM3", "3L", "64A", False),
        ("TM3", "3L", "68A4", True),
        ("TM3", "3R", "89E11", True),
        # same table: In(3LR)HR33 61B2;87B3; distal 3R not held, Miller et al. 2016, G3 6:1959
        ("TM6B", "3L", "62E1", True),
        ("TM6B", "3R", "99F8", False),
    ],
)
def test_what_a_balancer_holds(catalogue: Catalogue, balancer: str, arm: str, band: str, held: bool) -> None:
    assert covers(catalogue.balancer(balancer), catalogue.band_to_cM(arm, band)) is held


@pytest.mark.parametrize(
    ("gene", "chromosome", "cM", "tolerance"),
    [
        ("y", "X", 0.0, 0.0),  # Morgan & Bridges 1916, Carnegie Publ. 237: zero of the X map
        ("w", "X", 1.1, 0.5),  # same, y-w
        ("v", "X", 33.0, 0.0),  # same
        ("m", "X", 36.1, 0.0),  # Lindsley & Grell 1968, p. 150
        ("s", "X", 43.0, 0.0),  # Morgan & Bridges 1916, p. 44
        ("f", "X", 56.5, 0.5),  # same
        ("B", "X", 57.0, 0.0),  # same, p. 78
        ("bw", "2", 104.5, 0.0),  # Lindsley & Grell 1968, p. 37
        ("vg", "2", 67.0, 0.0),  # Rusev et al., Drosophila Information Service 85
        ("Sb", "3", 58.2, 0.0),  # Lindsley & Grell 1968, pp. 216-217
        ("Ubx", "3", 58.8, 0.0),  # same, pp. 45-46
        ("Dl", "3", 66.2, 0.0),  # same, pp. 69-70
        ("R", "3", 1.4, 0.0),  # Lindsley & Zimm 1992, 62B8-12
        ("ci", "4", 0.0, 0.0),  # no exchange on chromosome 4: Comeron et al. 2012, PLoS Genet. 8:e1002905
        ("ey", "4", 0.0, 0.0),  # same
    ],
)
def test_map(catalogue: Catalogue, gene: str, chromosome: str, cM: float, tolerance: float) -> None:
    locus = catalogue.locus(gene)
    assert locus is not None
    assert locus.chromosome == chromosome
    assert locus.cM == pytest.approx(cM, abs=tolerance)


def test_bar_to_fused(catalogue: Catalogue) -> None:
    """Morgan & Bridges 1916, Table 36: 190 exchanges of 7567 between B and fu, 2.51 %."""
    bar, fused = catalogue.locus("B"), catalogue.locus("fu")
    assert bar is not None
    assert fused is not None
    assert fused.cM - bar.cM == pytest.approx(100 * (175 + 15) / 7567, abs=0.05)


@pytest.mark.parametrize(
    ("arm", "band", "cM"),
    [
        # Rusev et al., Drosophila Information Service 85: 49E-53F is 2-67.0 to 2-77.3
        ("2R", "49E", 67.0),
        ("2R", "53F", 77.3),
        # lethals in polytene bands, PubMed Central PMC2535680, Table 3
        ("3L", "66C", 25.0),
        ("3L", "67F", 34.0),
        ("3R", "91F", 66.0),
    ],
)
def test_bands(catalogue: Catalogue, arm: str, band: str, cM: float) -> None:
    found = catalogue.band_to_cM(arm, band)
    assert found is not None
    assert found == pytest.approx(cM, abs=1.0)


@pytest.mark.parametrize(
    ("site", "arm", "band"),
    [
        ("attP2", "3L", "68A4"),  # van der Graaf et al. 2022, PLoS One 17:e0278598
        ("attP40", "2L", "25C6"),  # same (25C)
        ("VIE-260B", "2L", "30B3"),  # page of the RNAi library on 40D (30B)
        ("40D", "2L", "40D3"),  # same
    ],
)
def test_sites(catalogue: Catalogue, site: str, arm: str, band: str) -> None:
    found = catalogue.site(site)
    assert found is not None
    assert (found.arm, found.band) == (arm, band)


def test_distances_between_common_sites(catalogue: Catalogue) -> None:
    """Linear between the genes beside each site, done apart from this code; good to about 3 cM.

    The bands of all but attP2 and attP40 are from memory (Venken et al. 2006; Bischof et al. 2007).
    """
    assert place_of(catalogue, "attP2") == pytest.approx(35.0, abs=3.0)
    assert place_of(catalogue, "VK00005") - place_of(catalogue, "attP2") == pytest.approx(10.7, abs=3.0)
    assert place_of(catalogue, "VK00027") - place_of(catalogue, "attP2") == pytest.approx(24.6, abs=3.0)
    assert place_of(catalogue, "ZH-86Fb") - place_of(catalogue, "attP2") == pytest.approx(16.2, abs=3.0)
    assert place_of(catalogue, "attP40") - place_of(catalogue, "VK00037") == pytest.approx(12.0, abs=3.0)


def test_attp40_is_in_msp300(catalogue: Catalogue) -> None:
    """Van der Graaf et al. 2022, PLoS One 17:e0278598; Duan et al. 2023, G3."""
    site, other = catalogue.site("attP40"), catalogue.site("attP2")
    assert site is not None
    assert "Msp300" in site.trouble
    assert other is not None
    assert other.trouble == ""


@pytest.mark.parametrize("name", ["TM3", "MKRS", "TM6C", "TM8", "TM9"])
def test_chromosomes_with_stubble_are_lethal_over_each_other(catalogue: Catalogue, name: str) -> None:
    """Sb[1]/Sb[1] dies: Lindsley & Grell 1968, p. 216."""
    entry = catalogue.balancer(name)
    assert entry is not None
    assert "Sb" in entry.traits_assumed.lethal


@pytest.mark.parametrize(("one", "other"), [("TM3", "TM6B"), ("TM2", "TM6B"), ("MKRS", "TM6B"), ("CyO", "In(2LR)Gla")])
def test_usual_double_balancers_live(catalogue: Catalogue, one: str, other: str) -> None:
    """Stocks of these pairs are kept everywhere (common practice, no source)."""
    first, second = catalogue.balancer(one), catalogue.balancer(other)
    assert first is not None
    assert second is not None
    assert not first.traits_assumed.lethal & second.traits_assumed.lethal


def test_second_balancers_with_curly_die_over_each_other(catalogue: Catalogue) -> None:
    """Cy[1] homozygotes die (Lindsley & Zimm 1992, from memory)."""
    groups = [b.traits.lethal for b in map(catalogue.balancer, ("CyO", "SM1", "SM5", "SM6a", "CyO-GFP")) if b]
    assert len(groups) == 5
    assert all("Cy" in g for g in groups)


def test_fm7a_is_fertile_and_fm7c_is_not(catalogue: Catalogue) -> None:
    """FM7a keeps sn[+], FM7c has the female-sterile sn[X2]: Miller et al. 2016, PNAS 113:E1352."""
    a, c = catalogue.balancer("FM7a"), catalogue.balancer("FM7c")
    assert a is not None
    assert c is not None
    assert not a.traits.female_sterile
    assert c.traits.female_sterile
    assert not a.traits.lethal | c.traits.lethal


def test_tubby_is_for_pupae(catalogue: Catalogue) -> None:
    """Tb is scored in third-instar larvae and pupae: Pina & Pignoni 2012, genesis 50:119."""
    assert catalogue.sign("tubby pupae").stage == "pupa"


def test_shibire_acts_at_30_degrees(catalogue: Catalogue) -> None:
    """Kitamoto 2001, J. Neurobiol. 47:81: flies stop moving within 2 min at 30 degrees C."""
    entry = catalogue.component("UAS-shi[ts1]")
    assert entry is not None
    assert entry.test_C == 30


@pytest.mark.parametrize(
    ("gene", "chromosome", "arm_and_band"),
    [
        # citations from memory; each paper places the gene
        ("per", "X", "3B"),  # Konopka & Benzer 1971, PNAS 68:2112: three alleles on the X
        ("Sh", "X", "16F"),  # Papazian et al. 1987, Science 237:749
        ("eag", "X", "13A"),  # Warmke et al. 1991, Science 252:1560
        ("para", "X", "14D"),  # Loughney et al. 1989, Cell 58:1143
        ("shi", "X", "14A"),  # van der Bliek & Meyerowitz 1991, Nature 351:411
        ("norpA", "X", "4B"),  # Bloomquist et al. 1988, Cell 54:723
        ("dnc", "X", "3D"),  # Byers et al. 1981, Nature 289:79
        ("rut", "X", "12F"),  # Livingstone et al. 1984, Cell 37:205
        ("N", "X", "3C7"),  # Artavanis-Tsakonas et al. 1983, PNAS 80:1977
        ("Sxl", "X", "6F"),  # Bell et al. 1988, Cell 55:1037
        ("elav", "X", "1B"),  # Robinow & White 1988, Dev. Biol. 126:294
        ("cac", "X", "10F"),  # Smith et al. 1996, J. Neurosci. 16:7868
        ("acj6", "X", "13C"),  # Clyne et al. 1999, Neuron 22:339
        ("tim", "2", "23F"),  # Sehgal et al. 1994, Science 263:1603
        ("dpp", "2", "22F"),  # St Johnston et al. 1990, Genes Dev. 4:1114
        ("eya", "2", "26E"),  # Bonini et al. 1993, Cell 72:379
        ("dac", "2", "36A"),  # Mardon et al. 1994, Development 120:3473
        ("eve", "2", "46C"),  # Macdonald et al. 1986, Cell 47:721
        ("Egfr", "2", "57F"),  # Livneh et al. 1985, Cell 40:599
        ("Dll", "2", "60E"),  # Cohen et al. 1989, Nature 338:432
        ("trp", "3", "99C"),  # Montell & Rubin 1989, Neuron 2:1313
        ("ninaE", "3", "92B"),  # O'Tousa et al. 1985, Cell 40:839
        ("Rdl", "3", "66F"),  # ffrench-Constant et al. 1991, PNAS 88:7209
        ("Clk", "3", "66A"),  # Allada et al. 1998, Cell 93:791
        ("cyc", "3", "76D"),  # Rutila et al. 1998, Cell 93:805
        ("cry", "3", "91F"),  # Emery et al. 1998, Cell 95:669
        ("Pdf", "3", "97B"),  # Park & Hall 1998, J. Biol. Rhythms 13:219
        ("fru", "3", "91B"),  # Ryner et al. 1996, Cell 87:1079
        ("dsx", "3", "84E"),  # Burtis & Baker 1989, Cell 56:997
        ("Gad1", "3", "64A"),  # Jackson et al. 1990, J. Neurochem. 54:1068
        ("ChAT", "3", "91C"),  # Greenspan 1980, J. Comp. Physiol. 137:83
        ("repo", "3", "90F"),  # Xiong et al. 1994, Genes Dev. 8:981
        ("hh", "3", "94E"),  # Mohler 1988, Genetics 120:1061
        ("dally", "3", "66E"),  # Nakato et al. 1995, Development 121:3687
        ("Orco", "3", "83A"),  # Larsson et al. 2004, Neuron 43:703 (Or83b)
        ("toy", "4", ""),  # Czerny et al. 1999, Mol. Cell 3:297
    ],
)
def test_places_of_genes_met_in_genotypes(catalogue: Catalogue, gene: str, chromosome: str, arm_and_band: str) -> None:
    locus = catalogue.locus(gene)
    assert locus is not None
    assert (locus.chromosome, locus.band) == (chromosome, arm_and_band)


@pytest.mark.parametrize(
    ("site", "chromosome"),
    [
        # counted in the chromosome columns of one laboratory's stock list: 3 in 476 of 476 rows, 2 in 213 of 213, and so on
        ("attP2", "3"), ("attP40", "2"), ("VK5", "3"), ("su(Hw)attP5", "2"), ("su(Hw)attP1", "3"),
        ("su(Hw)attP8", "X"), ("attP18", "X"), ("attP3", "X"), ("attP16", "2"), ("VK00018", "2"), ("VK00022", "2"),
        ("VK00020", "3"), ("VK00033", "3"), ("VK00040", "3"), ("VIE-260B", "2"),
    ],
)  # fmt: skip
def test_chromosomes_of_sites_as_a_laboratory_keeps_them(catalogue: Catalogue, site: str, chromosome: str) -> None:
    found = catalogue.site(site)
    assert found is not None
    assert found.chromosome == chromosome


@pytest.mark.parametrize(
    ("name", "chromosome"),
    [
        # Connolly et al. 1996, Science 274:2104 (OK107 is on the fourth), from memory
        ("OK107", "4"),
        # Lin & Goodman 1994, Neuron 13:507 (C155 is in elav), from memory
        ("C155", "X"),
        # Mahr & Aberle 2006, Gene Expr. Patterns 6:299 (OK371 is in VGlut), from memory
        ("OK371", "2"),
    ],
)
def test_lines_of_known_place(catalogue: Catalogue, name: str, chromosome: str) -> None:
    found = catalogue.known_element(name)
    assert found is not None
    assert found.chromosome == chromosome
