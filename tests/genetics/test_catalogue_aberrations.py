"""Pairs of balancers, marked Y chromosomes, compounds and inversions in the catalogue."""

from __future__ import annotations

import pytest

from crossplan.genetics.catalogue import BalancerEntry, Catalogue, default_catalogue, read_tables


@pytest.fixture(scope="module")
def catalogue() -> Catalogue:
    return default_catalogue()


@pytest.mark.parametrize(
    ("one", "other", "fate"),
    [
        ("CyO", "In(2LR)Gla", "viable"),
        ("CyO", "SM6a", "lethal"),
        ("CyO", "CyO-GFP", "lethal"),
        ("TM3", "TM6B", "viable"),
        ("TM3-GFP", "TM6B-GFP", "viable"),
        ("TM3", "MKRS", "lethal"),
        ("TM3", "TM6C", "lethal"),
        ("TM2", "TM3", "weak"),
        ("TM2", "TM6", "lethal"),
        ("MKRS", "TM6B", "viable"),
        ("TM6B", "TM6C", "unknown"),
        ("FM7a", "FM7c", "viable"),
        ("T(2;3)SM6a-TM6B", "CyO", "lethal"),
    ],
)
def test_which_balancers_live_together(catalogue: Catalogue, one: str, other: str, fate: str) -> None:
    for pair in (catalogue.balancer_pair(one, other), catalogue.balancer_pair(other, one)):
        assert pair is not None
        assert pair.fate == fate
        assert pair.reason
        assert pair.origin


def test_balancers_of_different_chromosomes_are_no_pair(catalogue: Catalogue) -> None:
    assert catalogue.balancer_pair("CyO", "TM3") is None
    assert catalogue.balancer_pair("CyO", "TM99") is None


def test_the_table_of_pairs_agrees_with_the_lethals(catalogue: Catalogue) -> None:
    """A pair that is told to live shares no lethal group, so that survival and the table say the same."""
    told = catalogue.balancer_pairs()
    for pair in told:
        one, other = catalogue.balancer(pair.one), catalogue.balancer(pair.other)
        assert one is not None
        assert other is not None
        assert one.chromosome == other.chromosome
        if pair.fate != "lethal":
            assert not one.traits_assumed.lethal & other.traits_assumed.lethal, pair
    assert len(told) >= 15


def test_forms_share_the_lethals_of_their_balancer(catalogue: Catalogue) -> None:
    forms = [b for b in catalogue.balancers() if b.form_of]
    assert len(forms) >= 20
    for form in forms:
        core = catalogue.balancer(form.form_of)
        assert core is not None, form.name
        assert not core.form_of, form.name
        assert form.chromosome == core.chromosome
        assert form.traits.cover == core.traits.cover, form.name
        assert core.traits.lethal <= form.traits.lethal, form.name


def test_glowing_forms_glow_and_bring_pigment(catalogue: Catalogue) -> None:
    for name, sign in (("TM3-ChFP", "red fluorescence"), ("FM7-KrGFP", "green fluorescence")):
        entry = catalogue.balancer(name)
        assert entry is not None
        assert sign in entry.traits.dominant
        assert entry.traits.restores == {"w"}


def test_a_lacZ_form_shows_nothing_more_to_the_eye(catalogue: Catalogue) -> None:
    for core, written in (("CyO", "CyO, wg-lacZ"), ("TM3", "TM3, ftz-lacZ"), ("TM6B", "TM6B, abdA-lacZ")):
        form, plain = catalogue.balancer(written), catalogue.balancer(core)
        assert form is not None
        assert plain is not None
        assert form.traits_assumed.dominant == plain.traits_assumed.dominant


def test_xasta_ties_two_chromosomes(catalogue: Catalogue) -> None:
    second = catalogue.balancer("T(2;3)ap[Xa]")
    assert second is not None
    third = catalogue.linked_part(second)
    assert third is not None
    assert (second.chromosome, third.chromosome) == ("2", "3")
    assert second.traits.lethal
    assert not second.traits.cover
    assert third.traits.dominant == ()


@pytest.mark.parametrize(
    ("written", "restores", "signs"),
    [
        ("B[S]Y", set(), ("bar eyes",)),
        ("Dp(1;Y)B[S]", set(), ("bar eyes",)),
        ("Dp(1;Y)BSYy+", {"y"}, ("bar eyes",)),
        ("B[S]Y y[+]", {"y"}, ("bar eyes",)),
        ("Dp(1;Y)y[+]", {"y"}, ()),
        ("y+Y", {"y"}, ()),
        ("Dp(1;Y)w[+]303", {"w"}, ()),
        ("Dp(1;Y)y[+]mal[+]106", {"y", "mal"}, ()),
        ("Y, P{hs-hid}", set(), ()),
    ],
)
def test_marked_y(catalogue: Catalogue, written: str, restores: set[str], signs: tuple[str, ...]) -> None:
    found = catalogue.y_chromosome(written)
    assert found is not None, written
    assert found.traits.restores == restores
    assert found.traits.dominant == signs


@pytest.mark.parametrize("written", ["Y", "Dp(1;3)y[+]", "Dp(1;Y)", "y", "YY", ""])
def test_what_is_no_marked_y(catalogue: Catalogue, written: str) -> None:
    assert catalogue.y_chromosome(written) is None


@pytest.mark.parametrize(
    ("written", "chromosome", "attached"),
    [
        ("C(1;Y)", "X", "X;Y"),
        ("C(1;Y)3", "X", "X;Y"),
        ("C(2)EN", "2", "2;2"),
        ("C(2L)RM4", "2", "2L;2L"),
        ("C(3R)RM", "3", "3R;3R"),
        ("C(4)RM", "4", "4;4"),
    ],
)
def test_compounds(catalogue: Catalogue, written: str, chromosome: str, attached: str) -> None:
    found = catalogue.compound(written)
    assert found is not None
    assert (found.chromosome, found.attached) == (chromosome, attached)
    assert found.outcome


@pytest.mark.parametrize("written", ["C(1)DX", "C(5)", "CyO", "C", ""])
def test_what_is_no_compound_here(catalogue: Catalogue, written: str) -> None:
    assert catalogue.compound(written) is None


def test_no_compound_is_read_as_a_balancer(catalogue: Catalogue) -> None:
    """A compound autosome taken for a balancer would give wrong progeny in silence."""
    for row in read_tables()["compounds"]:
        assert catalogue.balancer(row["name"]) is None, row["name"]


def test_an_inversion_covers_what_lies_between_its_breakpoints(catalogue: Catalogue) -> None:
    found = catalogue.inversion("In(2L)t")
    assert found is not None
    (cover,) = found.traits.cover
    assert cover.start == catalogue.band_to_cM("2L", "22D3")
    assert cover.end == catalogue.band_to_cM("2L", "34A8")
    assert catalogue.inversion("In(2L)nonesuch") is None


def test_inversions_are_named_by_the_arms_of_their_breakpoints(catalogue: Catalogue) -> None:
    for entry in catalogue.inversions():
        assert entry.name.startswith(("In(1)", "In(2", "In(3")), entry.name
        chromosome = {"1": "X"}.get(entry.name[3], entry.name[3])
        assert entry.chromosome == chromosome


def cover_of(entry: BalancerEntry) -> tuple[float, float]:
    return (entry.traits.cover[0].start, entry.traits.cover[-1].end)


@pytest.mark.parametrize(
    ("name", "inversions"),
    [
        ("CyO", ("In(2L)Cy", "In(2R)Cy", "In(2LR)O")),
        ("SM1", ("In(2LR)SM1",)),
        ("SM6a", ("In(2LR)SM1",)),
        ("TM6B", ("In(3LR)HR33",)),
    ],
)
def test_balancers_cover_from_the_outermost_breakpoint_of_their_inversions(
    catalogue: Catalogue, name: str, inversions: tuple[str, ...]
) -> None:
    """Breakpoints: Miller et al. 2018, G3 8:1161 and Miller et al. 2020, G3 10:4271. Of TM6B the right end is cut off
    at 94A, since exchange was found beyond (Miller et al. 2016, G3 6:1959)."""
    entry = catalogue.balancer(name)
    assert entry is not None
    found = [catalogue.inversion(i) for i in inversions]
    ends = [c for i in found if i is not None for c in i.traits.cover]
    assert len(ends) == len(inversions)
    assert cover_of(entry)[0] == pytest.approx(min(c.start for c in ends), abs=0.3)
    if name != "TM6B":
        assert cover_of(entry)[1] == pytest.approx(max(c.end for c in ends), abs=0.3)


def test_xa_alone_is_the_translocation(catalogue: Catalogue) -> None:
    """The marker is on no other chromosome in use (Lindsley & Zimm 1992, from memory)."""
    found = catalogue.balancer("Xa")
    assert found is not None
    assert found.name == "T(2;3)ap[Xa]"
    assert catalogue.marker("ap", "Xa") is not None
