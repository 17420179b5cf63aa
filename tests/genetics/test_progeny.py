"""Crosses as a person would write them down: classes, shares, look-alikes, the dead."""

from __future__ import annotations

from fractions import Fraction

import pytest

from crossplan.genetics.appearance import Means, Observer
from crossplan.genetics.catalogue import default_catalogue
from crossplan.genetics.notation import format_genotype, read_fly
from crossplan.genetics.progeny import Progeny, cross
from crossplan.genetics.survival import cause_of_death, is_fertile, sterile_because


def of(mother: str, father: str, **means: object) -> Progeny:
    observer = Observer(default_catalogue(), Means(**means))  # type: ignore[arg-type]
    return cross(read_fly(mother, "female"), read_fly(father, "male"), observer)


def shares(progeny: Progeny, sex: str = "female") -> dict[tuple[str, ...], object]:
    return {tuple(sorted(c.signs)): c.exact for c in progeny.classes if c.sex == sex}


class TestBalancers:
    def test_two_thirds_of_the_living_are_curly(self) -> None:
        progeny = of("w[1118]; +/CyO", "w[1118]; +/CyO")
        assert shares(progeny) == {("white eyes",): Fraction(1, 6), ("curly wings", "white eyes"): Fraction(1, 3)}
        assert progeny.alive == Fraction(3, 4)

    def test_homozygous_balancers_die_and_are_named(self) -> None:
        progeny = of("+; +/CyO", "+; +/CyO")
        assert {d.cause for d in progeny.dead} == {"lethal without a working copy: Cy, CyO"}

    def test_two_stubble_chromosomes_are_lethal_together(self) -> None:
        progeny = of("+; +; TM3, Sb[1]/+", "+; +; MKRS/+")
        assert not any(
            {"TM3", "MKRS"} <= {e.symbol for e in m.fly.elements()} for c in progeny.classes for m in c.members
        )

    def test_both_balancers_show_their_recessives_when_nothing_covers_them(self) -> None:
        progeny = of("+; +; TM3, Sb[1]/+", "+; +; TM6B/+")
        both = [c for c in progeny.classes if {"stubble bristles", "extra humeral bristles"} <= c.signs]
        assert both
        assert all("dark body" in c.signs for c in both), "TM3 and TM6B both carry ebony"


class TestSex:
    def test_a_father_gives_his_x_to_daughters_only(self) -> None:
        progeny = of("w[1118]", "+")
        assert shares(progeny, "female") == {(): Fraction(1, 2)}
        assert shares(progeny, "male") == {("white eyes",): Fraction(1, 2)}

    def test_an_attached_x_reverses_it(self) -> None:
        progeny = of("C(1)DX, y[1] w[1] f[1]/Y", "+/Y")
        males = [c for c in progeny.classes if c.sex == "male"]
        assert [c.signs for c in males] == [frozenset()]
        females = [m.fly for c in progeny.classes if c.sex == "female" for m in c.members]
        assert all(f.pair("X")[0].is_compound for f in females)
        assert progeny.alive == Fraction(1, 2)


class TestEyes:
    def test_mini_white_gives_pigment_back_and_its_copies_cannot_be_counted(self) -> None:
        progeny = of("w[1118]; AD-K12@attP40/+", "w[1118]; AD-K12@attP40/+")
        coloured = [c for c in progeny.classes if "white eyes" not in c.signs]
        assert all(c.look_alikes for c in coloured)
        assert sum(c.share for c in coloured) == Fraction(3, 4)

    def test_white_hides_other_eye_colours(self) -> None:
        progeny = of("w[1118] v[1]", "w[1118] v[1]")
        assert shares(progeny) == {("white eyes",): Fraction(1, 2)}

    def test_tiny_eyes_are_not_used_to_read_pigment(self) -> None:
        progeny = of("w[1118]; +; Dr[Mio]/+", "w[1118]; AD-K12@attP40/+")
        tiny = [c for c in progeny.classes if "tiny eyes" in c.signs]
        assert tiny
        assert all("white eyes" not in c.signs and c.look_alikes for c in tiny)


class TestMeans:
    def test_curly_is_not_relied_on_in_the_cold(self) -> None:
        cold = of("w[1118]; +/CyO", "w[1118]", rearing_C=18.0)
        assert all("curly wings" not in c.signs for c in cold.classes)
        assert any(c.look_alikes for c in cold.classes)

    def test_tubby_needs_pupae(self) -> None:
        mother, father = "w[1118]; +; +/TM6B, Tb[1]", "w[1118]"
        seen = {s for c in of(mother, father, pupae=True).classes for s in c.signs}
        unseen = {s for c in of(mother, father).classes for s in c.signs}
        assert len(seen) > len(unseen)

    def test_what_the_lab_distrusts_is_not_seen(self) -> None:
        progeny = of("+; +; Sb[1]/+", "+", distrust=frozenset({"Sb"}))
        assert all(not c.signs for c in progeny.classes)


class TestTranslocationBalancer:
    def test_two_and_three_move_together(self) -> None:
        progeny = of("w[1118]; T(2;3)SM6a-TM6B/+", "w[1118]")
        assert progeny.alive == Fraction(1, 2)
        assert {tuple(sorted(c.signs & {"curly wings", "extra humeral bristles"})) for c in progeny.classes} == {
            (),
            ("curly wings", "extra humeral bristles"),
        }


class TestParents:
    def test_a_male_without_y_is_sterile(self) -> None:
        fly = read_fly("+; +; +", "male")
        assert is_fertile(fly)

    def test_female_sterile_balancer(self) -> None:
        sterile = sterile_because(read_fly("FM7c", "female"))
        assert sterile is None or "female sterile" in sterile

    def test_homozygous_balancer_is_dead(self) -> None:
        assert cause_of_death(read_fly("+; CyO/CyO", "female")) is not None


@pytest.mark.parametrize(
    ("mother", "father"),
    [
        ("w[1118]; AD-K12@attP40/CyO; DBD-Q07@attP2/TM6B", "w[1118]; Sco/CyO; TM3, Sb[1]/TM6B"),
        ("FM7a/w[1118]", "y[1] w[1118]"),
        ("w[1118]; AD-K12@attP40/UAS-Z@VK00037", "w[1118]; b[1] pr[1]/Sco"),
    ],
)
def test_shares_sum_to_one(mother: str, father: str) -> None:
    progeny = of(mother, father)
    assert float(sum(c.share for c in progeny.classes)) == pytest.approx(1.0)
    for found in progeny.classes:
        assert float(sum(m.share for m in found.members)) == pytest.approx(float(found.share))
    assert len({format_genotype(m.fly) for c in progeny.classes for m in c.members}) == sum(
        len(c.members) for c in progeny.classes
    )
