"""The screen file and its pairs: what is read, what is a problem, what is refused."""

from __future__ import annotations

import datetime as dt
from pathlib import Path

import pytest

from crossplan.errors import ScreenError, Severity
from crossplan.plan.screen_file import FOUNDERS, ScreenRequest, read_screen

GOOD = '[[target]]\ntarget = "good"\ncomponents = ["X"]\n'
WITH_PAIRS = '[screen]\npairs = "pairs.csv"\n'


def asked(folder: Path, toml: str | bytes, pairs: str | None = None) -> ScreenRequest:
    path = folder / "screen.toml"
    path.write_bytes(toml.encode("utf-8") if isinstance(toml, str) else toml)
    if pairs is not None:
        (folder / "pairs.csv").write_text(pairs, encoding="utf-8")
    return read_screen(path)


def refused(folder: Path, toml: str | bytes, words: str, pairs: str | None = None) -> ScreenError:
    """Read a screen file that must be refused with these words, and return the error."""
    with pytest.raises(ScreenError, match=words) as caught:
        asked(folder, toml, pairs)
    assert caught.value.hint
    return caught.value


# -- what is read ------------------------------------------------------------------------------------------------


def test_a_target_gets_the_defaults(tmp_path: Path) -> None:
    (target,) = asked(tmp_path, GOOD).targets
    assert (target.name, target.components) == ("good", (("X", 1),))
    assert (target.sex, target.flies, target.age_days, target.due) == ("female", 20, (3, 7), None)
    assert (target.forbid, target.stock, target.effector) == (("balancers", "markers"), False, "")


def test_a_target_goes_before_the_defaults(tmp_path: Path) -> None:
    toml = (
        '[defaults]\nsex = "male"\nflies = 7\nage_days = [1, 2]\ndue = 2026-12-24\nforbid = ["balancers"]\n' + GOOD
        + '[[target]]\ntarget = "own"\ncomponents = ["Y"]\nsex = "female"\nflies = 8\nage_days = [4, 5]\n'
        "due = 2026-12-30\nforbid = []\n"
    )  # fmt: skip
    usual, own = asked(tmp_path, toml).targets
    assert (usual.sex, usual.flies, usual.age_days, usual.due) == ("male", 7, (1, 2), dt.date(2026, 12, 24))
    assert usual.forbid == ("balancers",)
    assert (own.sex, own.flies, own.age_days, own.due) == ("female", 8, (4, 5), dt.date(2026, 12, 30))
    assert own.forbid == ()


def test_a_wanted_stock_needs_founders_and_may_keep_balancers(tmp_path: Path) -> None:
    (target,) = asked(tmp_path, GOOD + "stock = true\n").targets
    assert (target.stock, target.flies, target.forbid) == (True, FOUNDERS, ())


def test_two_copies_are_asked_for_with_a_number(tmp_path: Path) -> None:
    toml = '[[target]]\ntarget = "A"\ncomponents = ["2x AD-K1@attP40", "2 × Y", "1x Z", "20XUAS-GFP", "3xP3-RFP"]\n'
    (target,) = asked(tmp_path, toml).targets
    assert target.components == (("AD-K1@attP40", 2), ("Y", 2), ("Z", 1), ("20XUAS-GFP", 1), ("3xP3-RFP", 1))


def test_one_effector_joins_every_target_and_several_multiply_them(tmp_path: Path) -> None:
    (one,) = asked(tmp_path, '[screen]\neffectors = ["U"]\n' + GOOD).targets
    assert (one.name, one.components, one.effector) == ("good", (("X", 1), ("U", 1)), "U")
    both = asked(tmp_path, '[screen]\neffectors = ["U", "V"]\n' + GOOD).targets
    assert [t.name for t in both] == ["good x U", "good x V"]
    assert [t.components[-1] for t in both] == [("U", 1), ("V", 1)]


def test_the_pairs_are_read_beside_the_targets(tmp_path: Path) -> None:
    pairs = 'Target,Components,sex,flies,age_days,due,forbid\nB,"X, 2x Y",male,30,4-7,2026-12-24,"markers, balancers"\nC,Z,,,5,,\n'
    request = asked(tmp_path, WITH_PAIRS + GOOD, pairs)
    assert request.problems == ()
    good, b, c = request.targets
    assert good.name == "good"
    assert b.components == (("X", 1), ("Y", 2))
    assert (b.sex, b.flies, b.age_days, b.due) == ("male", 30, (4, 7), dt.date(2026, 12, 24))
    assert b.forbid == ("markers", "balancers")
    assert (c.sex, c.flies, c.age_days, c.forbid) == ("female", 20, (5, 5), ("balancers", "markers"))


def test_a_file_with_a_byte_order_mark_is_read(tmp_path: Path) -> None:
    assert [t.name for t in asked(tmp_path, "\ufeff" + GOOD).targets] == ["good"]


# -- the file is refused -----------------------------------------------------------------------------------------


@pytest.mark.parametrize(
    ("toml", "words", "hint"),
    [
        ('[screen]\nefectors = ["U"]\n' + GOOD, r"\[screen\] efectors is not known", "perhaps 'effectors'"),
        ("[serch]\nmax_generations = 2\n" + GOOD, r"\[serch\] is not known", "perhaps 'search'"),
        (GOOD + "flyes = 3\n", r"\[target\] 0 flyes is not known", "perhaps 'flies'"),
        ("[search]\nzzqq = 2\n" + GOOD, r"\[search\] zzqq is not known", "known here: max_generations"),
    ],
    ids=["key", "section", "key of a target", "nothing close"],
)
def test_an_unknown_key_is_refused_with_the_closest(toml: str, words: str, hint: str, tmp_path: Path) -> None:
    assert refused(tmp_path, toml, words).hint == hint


def test_bad_toml_is_refused_with_its_line(tmp_path: Path) -> None:
    refused(tmp_path, '[screen]\nname = "x"\nlab = "unclosed\n', r"screen\.toml: .*line 3")


def test_a_missing_screen_file_is_refused(tmp_path: Path) -> None:
    with pytest.raises(ScreenError, match="there is no file .*none.toml"):
        read_screen(tmp_path / "none.toml")


def test_a_folder_is_refused(tmp_path: Path) -> None:
    with pytest.raises(ScreenError, match="is a folder, not a screen file"):
        read_screen(tmp_path)


def test_a_file_that_is_not_unicode_is_refused(tmp_path: Path) -> None:
    refused(tmp_path, '[screen]\nname = "Jörg"\n'.encode("cp1252"), "is not UTF-8 text")


@pytest.mark.parametrize(
    ("toml", "words"),
    [
        ("[defaults]\nage_days = [7, 3]\n", r"\[defaults\] age_days = \[7, 3\] is no span of days"),
        ("[defaults]\nage_days = [0, 61]\n", r"age_days = \[0, 61\] is no span"),
        ("[defaults]\nflies = 0\n", r"\[defaults\] flies: must be greater than or equal to 1, not 0"),
        ("[calendar]\nworking_days = []\n", "working_days is empty: nobody ever works"),
        ('[calendar]\nworking_days = ["Monday"]\n', "working_days 0: must be 'Mon', .*, not 'Monday'"),
        ('[calendar]\nmorning = "9 am"\n', r"\[calendar\] morning = '9 am' is no time of day"),
        ('[calendar]\nafternoon = "24:00"\n', r"\[calendar\] afternoon = '24:00' is no time of day"),
        ('[calendar]\nmorning = "09:60"\n', "morning = '09:60' is no time of day"),
        ('[calendar]\npeople = ["Ana", "Ana"]\n', "names somebody twice"),
        ("[rearing]\ntemperature = 35\n", "temperature = 35 is outside 12 to 30 C"),
        ("[rearing]\ntemperature = nan\n", "temperature = nan is outside"),
        ("[numbers]\nprobability = 1.0\n", r"\[numbers\] probability: must be less than 1, not 1.0"),
        ("[search]\nmax_generations = 0\n", r"\[search\] max_generations: must be greater than or equal to 1"),
    ],
)
def test_absurd_settings_are_refused(toml: str, words: str, tmp_path: Path) -> None:
    refused(tmp_path, toml + GOOD, words)


@pytest.mark.parametrize(
    "toml",
    ["[defaults]\nage_days = [3, 3]\n", '[calendar]\nmorning = "9:00"\nafternoon = "23:59"\n',
     '[calendar]\nworking_days = ["Sun"]\n', '[calendar]\npeople = ["Ana", "Ben"]\n', "[rearing]\ntemperature = 18\n"],
)  # fmt: skip
def test_settings_at_the_edge_are_taken(toml: str, tmp_path: Path) -> None:
    assert [t.name for t in asked(tmp_path, toml + GOOD).targets] == ["good"]


# -- the table of pairs ------------------------------------------------------------------------------------------


def test_missing_pairs_are_refused_with_the_near_name(tmp_path: Path) -> None:
    error = refused(
        tmp_path,
        '[screen]\npairs = "pairz.csv"\n' + GOOD,
        r"\[screen\] pairs: there is no file .*pairz\.csv",
        "target,components\nA,X\n",
    )
    assert "pairs.csv" in error.hint


def test_pairs_that_name_the_screen_file_are_refused(tmp_path: Path) -> None:
    refused(tmp_path, '[screen]\npairs = "screen.toml"\n', "pairs names the screen file itself")


@pytest.mark.parametrize(("header", "missing"), [("target,parts", "components"), ("pair,components", "target")])
def test_pairs_without_a_needed_column_are_refused_with_their_columns(
    header: str, missing: str, tmp_path: Path
) -> None:
    columns = header.replace(",", ", ")
    refused(tmp_path, WITH_PAIRS, f"no column '{missing}'; its columns are {columns}", f"{header}\nA,X\n")


@pytest.mark.parametrize(
    ("cells", "column", "words"),
    [
        ("X,ten,,,", "flies", "not 'ten'"),
        ("X,0,,,", "flies", "greater than or equal to 1, not '0'"),
        ("X,,neither,,", "sex", "must be 'female' or 'male', not 'neither'"),
        ("X,,,old,", "age_days", "not 'old'"),
        ("X,,,,soon", "due", "not 'soon'"),
    ],
)
def test_a_bad_row_is_a_problem_and_the_good_rows_go_on(cells: str, column: str, words: str, tmp_path: Path) -> None:
    pairs = f"target,components,flies,sex,age_days,due\nfirst,X,,,,\nbad,{cells}\nlast,Z,5,,,\n"
    request = asked(tmp_path, WITH_PAIRS, pairs)
    assert [(t.name, t.flies) for t in request.targets] == [("first", 20), ("last", 5)]
    (problem,) = request.problems
    assert (problem.code, problem.severity) == ("pair-row", Severity.ERROR)
    assert problem.place() == f"{tmp_path / 'pairs.csv'}, row 3, column {column}"
    assert "target 'bad'" in problem.message
    assert words in problem.message


# -- contradictions ----------------------------------------------------------------------------------------------


@pytest.mark.parametrize(
    ("entries", "words"),
    [
        ('target = "A"\ncomponents = ["X", "Y"]\nforbid = ["Y"]', "Y must be carried and must not be carried"),
        ('target = "A"\ncomponents = ["X", "X"]', "X is listed twice"),
        ('target = "A"\ncomponents = ["2x X", "X"]', "X is listed twice"),
        ('target = "A"\ncomponents = ["3x X"]', "two homologues"),
        ('target = "A"\ncomponents = ["0x X"]', "two homologues"),
        ('target = "A"\ncomponents = []', "it has no components"),
        ('target = ""\ncomponents = ["X"]', "it has no name"),
        ('target = "good"\ncomponents = ["Y"]', "the name stands twice"),
        ('target = "A"\ncomponents = ["X"]\nage_days = [9, 4]', "an age of 9 to 4 days is no span"),
    ],
)
def test_a_target_that_contradicts_itself_is_a_problem_and_the_others_go_on(
    entries: str, words: str, tmp_path: Path
) -> None:
    request = asked(tmp_path, GOOD + f"[[target]]\n{entries}\n")
    assert [t.name for t in request.targets] == ["good"]
    (problem,) = request.problems
    assert (problem.code, problem.severity) == ("target", Severity.ERROR)
    assert words in problem.message
    assert problem.hint


def test_an_effector_that_is_a_component_already_is_a_contradiction(tmp_path: Path) -> None:
    request = asked(tmp_path, '[screen]\neffectors = ["X", "U"]\n' + GOOD)
    assert [t.name for t in request.targets] == ["good x U"]
    assert [p.message for p in request.problems] == ["target 'good x X': X is listed twice"]


def test_a_file_that_asks_for_nothing_is_refused(tmp_path: Path) -> None:
    error = refused(tmp_path, '[screen]\nname = "x"\n', "asks for no target that can be used$")
    assert "[[target]]" in error.hint


def test_a_file_whose_every_target_is_bad_is_refused_with_the_first_fault(tmp_path: Path) -> None:
    error = refused(
        tmp_path,
        WITH_PAIRS,
        "no target that can be used: target 'A': .*not 'ten'",
        "target,components,flies\nA,X,ten\n",
    )
    assert error.hint == "correct the cell; the other rows are planned"
