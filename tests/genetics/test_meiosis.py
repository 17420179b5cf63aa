"""Gametes: no exchange in males, none on 4, none under a balancer; by map distance otherwise."""

from __future__ import annotations

from fractions import Fraction

import pytest

from crossplan.genetics.element import Cover, Element, Kind, Traits
from crossplan.genetics.fly import WILD_TYPE, Homologue, Y, make_pair
from crossplan.genetics.meiosis import gametes, haldane, kosambi, leaks, recombines, unplaced

AD = Element("AD@attP40", Kind.INSERTION, "2", site="attP40", position_cM=15.0)
UAS = Element("UAS@VK00037", Kind.INSERTION, "2", site="VK00037", position_cM=3.0)
OTHER = Element("UAS@attP40", Kind.INSERTION, "2", site="attP40", position_cM=15.0)
LOST = Element("UAS-lost", Kind.INSERTION, "2")
CYO = Element("CyO", Kind.BALANCER, "2", traits=Traits(cover=(Cover(8.0, 100.0),)))


def shares(
    pair: tuple[Homologue, Homologue], sex: str = "female", chromosome: str = "2"
) -> dict[tuple[str, ...], float]:
    return {g.homologue.symbols: float(g.share) for g in gametes(pair, chromosome, sex)}


class TestGametes:
    def test_a_homozygous_pair_gives_one_gamete(self) -> None:
        pair = (Homologue.of(AD), Homologue.of(AD))
        assert [(g.homologue, g.share) for g in gametes(pair, "2", "female")] == [(Homologue.of(AD), Fraction(1))]

    def test_males_do_not_recombine(self) -> None:
        pair = make_pair(Homologue.of(AD), Homologue.of(UAS))
        assert shares(pair, "male") == {("AD@attP40",): 0.5, ("UAS@VK00037",): 0.5}

    def test_females_recombine_by_map_distance(self) -> None:
        pair = make_pair(Homologue.of(AD), Homologue.of(UAS))
        r = haldane(12.0)
        assert shares(pair) == pytest.approx(
            {
                ("AD@attP40",): (1 - r) / 2, ("UAS@VK00037",): (1 - r) / 2,
                ("UAS@VK00037", "AD@attP40"): r / 2, (): r / 2,
            }
        )  # fmt: skip

    def test_chromosome_4_does_not_recombine(self) -> None:
        one = Element("ci", Kind.ALLELE, "4", gene="ci", position_cM=0.0)
        two = Element("ey", Kind.ALLELE, "4", gene="ey", position_cM=2.0)
        pair = make_pair(Homologue.of(one), Homologue.of(two))
        assert not recombines(pair, "4", "female")

    def test_nothing_recombines_with_a_balancer(self) -> None:
        pair = make_pair(Homologue.of(AD, UAS), Homologue.of(CYO))
        assert shares(pair) == {("UAS@VK00037", "AD@attP40"): 0.5, ("CyO",): 0.5}

    def test_two_insertions_at_one_site_never_meet_on_one_homologue(self) -> None:
        pair = make_pair(Homologue.of(AD), Homologue.of(OTHER))
        assert set(shares(pair)) == {("AD@attP40",), ("UAS@attP40",)}

    def test_an_element_of_unknown_place_stays_where_it_is_written_and_is_named(self) -> None:
        pair = make_pair(Homologue.of(AD), Homologue.of(LOST))
        assert [g.share for g in gametes(pair, "2", "female")] == [Fraction(1, 2)] * 2
        assert unplaced(pair, "2", "female") == ("UAS-lost",)
        assert unplaced(pair, "2", "male") == ()

    def test_shared_elements_stay(self) -> None:
        pair = make_pair(Homologue.of(UAS, AD), Homologue.of(UAS))
        assert shares(pair) == {("UAS@VK00037", "AD@attP40"): 0.5, ("UAS@VK00037",): 0.5}

    def test_x_and_y_part_evenly(self) -> None:
        pair = make_pair(WILD_TYPE, Y)
        assert shares(pair, "male", "X") == {(): 0.5, ("Y",): 0.5}

    def test_three_loci_follow_the_map(self) -> None:
        loci = [Element(n, Kind.ALLELE, "X", gene=n, position_cM=p) for n, p in (("sc", 0.0), ("v", 33.0), ("s", 43.0))]
        pair = make_pair(Homologue.of(*loci), WILD_TYPE)
        double = haldane(33.0) * haldane(10.0) / 2
        assert shares(pair, chromosome="X")[("v",)] == pytest.approx(double)
        assert sum(shares(pair, chromosome="X").values()) == pytest.approx(1.0)


class TestLeaks:
    def test_an_element_outside_the_cover_may_leave(self) -> None:
        (leak,) = leaks(make_pair(Homologue.of(UAS, AD), Homologue.of(CYO)), "2", "female")
        assert (leak.element, leak.balancer) == ("UAS@VK00037", "CyO")
        assert leak.rate == pytest.approx(haldane(5.0))

    def test_males_hold_everything(self) -> None:
        assert leaks(make_pair(Homologue.of(UAS), Homologue.of(CYO)), "2", "male") == ()


class TestMapFunctions:
    @pytest.mark.parametrize("function", [haldane, kosambi])
    def test_nothing_at_no_distance_and_half_far_away(self, function: object) -> None:
        assert function(0.0) == 0.0  # type: ignore[operator]
        assert function(10_000.0) == pytest.approx(0.5)  # type: ignore[operator]
