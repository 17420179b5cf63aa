"""Lines of the trade of which it is known where they sit."""

from __future__ import annotations

import pytest

from crossplan.genetics.catalogue import Catalogue, default_catalogue
from crossplan.genetics.catalogue_map import arm_of_band
from crossplan.genetics.chromosome import CHROMOSOME_OF_ARM


@pytest.fixture(scope="module")
def catalogue() -> Catalogue:
    return default_catalogue()


@pytest.mark.parametrize(
    ("written", "chromosome"),
    [
        ("OK107", "4"),
        ("ey-GAL4[OK107]", "4"),
        ("C155", "X"),
        ("elav[C155]-GAL4", "X"),
        ("MS1096-GAL4", "X"),
        ("OK371-Gal4", "2"),
        ("24B-GAL4", "3"),
        ("dpp.blk1-GAL4", "3"),
        ("UAS-mCD8::GFP.L@LL5", "2"),
        ("UAS-mCD8-GFP.LL6", "3"),
        ("hsFLP122", "X"),
        ("hs-FLP 122", "X"),
    ],
)
def test_lines_of_the_trade(catalogue: Catalogue, written: str, chromosome: str) -> None:
    found = catalogue.known_element(written)
    assert found is not None
    assert found.chromosome == chromosome
    assert found.origin


@pytest.mark.parametrize(
    ("written", "chromosome"),
    [("tubP-GAL80[ts]@2", "3"), ("tub-GAL80ts 20", "2"), ("UAS-Dcr-2.D@10", "3"), ("ey-FLP.N@2", "X")],
)
def test_numbers_that_are_not_the_chromosome(catalogue: Catalogue, written: str, chromosome: str) -> None:
    found = catalogue.known_element(written)
    assert found is not None
    assert found.chromosome == chromosome


@pytest.mark.parametrize("written", ["elav-GAL4", "tub-GAL80ts", "kx-GAL4", "GAL4", "", "+", "w[1118]", "Sb[1]"])
def test_what_has_no_known_place(catalogue: Catalogue, written: str) -> None:
    """A name that several lines share says nothing of the chromosome."""
    assert catalogue.known_element(written) is None


def test_bands_and_classes_fit(catalogue: Catalogue) -> None:
    for element in catalogue.known_elements():
        if element.band:
            assert CHROMOSOME_OF_ARM[arm_of_band(element.band)] == element.chromosome, element.name
            assert element.map_cM is not None
        component = catalogue.component(element.name)
        if component is not None:
            assert component.cls == element.cls, element.name


def test_a_gene_that_was_hit_lies_where_the_line_lies(catalogue: Catalogue) -> None:
    checked = 0
    for element in catalogue.known_elements():
        for name in element.synonyms:
            gene, bracket, _ = name.partition("[")
            locus = catalogue.locus(gene) if bracket and name.endswith("]") and "-" not in gene else None
            if locus is not None:
                assert locus.chromosome == element.chromosome, name
                checked += 1
    assert checked >= 6
