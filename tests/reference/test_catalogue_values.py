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
