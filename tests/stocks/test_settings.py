from __future__ import annotations

from pathlib import Path

import pytest
from hypothesis import given
from hypothesis import strategies as st

from crossplan.errors import InputError
from crossplan.stocks.dates import ORDERS
from crossplan.stocks.settings import KINDS_OF_COLUMN, ListSettings, column_of, read_settings, settings_text
from crossplan.stocks.shelf import read_stocks

HEADINGS = st.text(min_size=1, max_size=12).filter(lambda t: t.strip() and t.isprintable())


def written(tmp_path: Path, text: str) -> Path:
    path = tmp_path / "how.toml"
    path.write_text(text, encoding="utf-8")
    return path


@given(
    st.one_of(st.none(), HEADINGS), st.one_of(st.none(), st.sampled_from(ORDERS)),
    st.dictionaries(st.sampled_from(KINDS_OF_COLUMN), HEADINGS, max_size=5),
)  # fmt: skip
def test_what_is_remembered_is_read_back(
    tmp_path_factory: pytest.TempPathFactory, sheet: str | None, order: object, columns: dict[str, str]
) -> None:
    settings = ListSettings(sheet, sheet is None, order, columns)  # type: ignore[arg-type]
    path = written(tmp_path_factory.mktemp("how"), settings_text(settings))
    assert read_settings(path) == settings


@pytest.mark.parametrize(
    ("text", "words"),
    [
        ("[list]\nshet = 'a'", "'shet' is not known"),
        ("[colums]\nstock = 'a'", "'colums' is not known"),
        ("[columns]\ngenotipe = 'a'", "'genotipe' is not known"),
        ("[columns]\ngenotype = 3", "genotype: 3 is not text"),
        ("[list]\ndates = 'year first'", "'year first' is not known"),
        ("[list]\nsheet = 'a'\nall_sheets = true", "all sheets are asked for too"),
        ("[list", "is not TOML"),
        ("list = 3", "list is no table"),
    ],
)
def test_what_cannot_be_used_is_named(tmp_path: Path, text: str, words: str) -> None:
    with pytest.raises(InputError, match=words):
        read_settings(written(tmp_path, text))


def test_a_file_that_is_not_there(tmp_path: Path) -> None:
    with pytest.raises(InputError, match="there is no file"):
        read_settings(tmp_path / "none.toml")


def test_the_command_line_goes_before_the_file() -> None:
    settings = ListSettings("living", columns={"stock": "Line", "genotype": "G"})
    changed = settings.changed("dead", False, {"genotype": "Geno"})
    assert changed == ListSettings("dead", columns={"stock": "Line", "genotype": "Geno"})
    assert settings.changed(None, True, {}) == ListSettings(None, True, columns=settings.columns)
    with pytest.raises(InputError, match="all sheets"):
        settings.changed("dead", True, {})


def test_a_column_by_its_heading() -> None:
    assert column_of("genotype = Flies inside") == ("genotype", "Flies inside")
    with pytest.raises(InputError, match="which column"):
        column_of("genotype")
    with pytest.raises(InputError, match="no kind of column") as caught:
        column_of("genotipe=G")
    assert caught.value.hint == "did you mean genotype?"


def test_the_order_of_dates_settles_what_the_column_does_not(tmp_path: Path) -> None:
    path = tmp_path / "stocks.csv"
    path.write_text("stock,genotype,last flip\nA,w,03/04/2026\n")
    assert read_stocks(path).stocks[0].last_transfer is None
    found = [
        read_stocks(path, settings=ListSettings(date_order=order)).stocks[0].last_transfer.isoformat()  # type: ignore[union-attr]
        for order in ORDERS
    ]
    assert found == ["2026-04-03", "2026-03-04"]
