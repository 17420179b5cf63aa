from __future__ import annotations

import pytest

from crossplan.genetics.appearance import Observer
from crossplan.genetics.catalogue import default_catalogue
from crossplan.genetics.notation import read_fly
from crossplan.genetics.progeny import Progeny, cross
from crossplan.genetics.sorting import easily_mistaken, is_hidden, rule_for, words_of

CATALOGUE = default_catalogue()

CROSSES = [
    ("w; AD-K12@attP40/CyO; DBD-Q01@attP2/TM6B, Tb", "w; Sp/CyO; Dr/TM3, Sb"),
    ("w; Sp/CyO; Dr/TM3, Sb", "w; Sco/SM6a; MKRS/TM6B, Tb"),
    ("w; +; UAS-kx@attP2/TM3, Sb", "w; +; Dr/TM6B, Tb"),
    ("y w f/+; bw/CyO; st/TM6B, Tb", "y w f/Y; bw; st"),
    ("w/FM7a; L[2]/CyO; +", "w; L[2]/CyO; +"),
]


def progeny_of(mother: str, father: str) -> Progeny:
    return cross(read_fly(mother, "female"), read_fly(father, "male"), Observer(CATALOGUE))


@pytest.mark.parametrize(("mother", "father"), CROSSES)
def test_every_rule_keeps_its_class_and_nothing_else(mother: str, father: str) -> None:
    classes = progeny_of(mother, father).classes
    for kept in classes:
        rule = rule_for(kept, classes, CATALOGUE)
        passing = [c for c in classes if c.sex == kept.sex and all(t.passes(c.signs) for t in rule)]
        assert passing == [kept]
        assert not any(is_hidden(t.sign, kept.signs, CATALOGUE) for t in rule)


def test_nobody_is_sent_to_look_at_the_colour_of_a_tiny_eye() -> None:
    classes = progeny_of("w; +; UAS-kx@attP2/TM3, Sb", "w; +; Dr/TM6B, Tb").classes
    tiny = [c for c in classes if "tiny eyes" in c.signs]
    assert tiny
    for kept in tiny:
        assert "coloured eyes" not in words_of(rule_for(kept, classes, CATALOGUE), CATALOGUE)


def test_what_differs_in_one_sign_is_warned_of() -> None:
    classes = progeny_of("w; Sco/+; +", "w; +; +").classes
    scutoid = next(c for c in classes if c.sex == "female" and c.signs - {"white eyes"})
    ((other, test),) = easily_mistaken(scutoid, classes, CATALOGUE)
    assert other.sex == "female"
    assert test.present
    assert {test.sign} == scutoid.signs - other.signs
