"""Which heading is taken for what."""

from __future__ import annotations

import pytest

from crossplan.errors import StockListError
from crossplan.stocks.columns import guess_columns


def test_the_names_that_people_use_are_recognised_in_any_case() -> None:
    found = guess_columns(["Rack", "Pos", "Stock No", "Full Genotype", "Vials", "Temp", "Flipped", "Comments", "mood"])
    assert found == {
        "tray": "Rack", "vial": "Pos", "stock": "Stock No", "genotype": "Full Genotype", "copies": "Vials",
        "temperature": "Temp", "last_transfer": "Flipped", "notes": "Comments",
    }  # fmt: skip


def test_a_given_heading_goes_before_a_guess() -> None:
    headings = ["stock", "genotype", "true geno"]
    assert guess_columns(headings)["genotype"] == "genotype"
    assert guess_columns(headings, {"genotype": "TRUE GENO"})["genotype"] == "true geno"


def test_one_heading_is_not_taken_twice() -> None:
    found = guess_columns(["name", "genotype", "location"], {"tray": "location"})
    assert found["tray"] == "location"
    assert "vial" not in found


def test_chromosome_columns_stand_in_for_the_genotype() -> None:
    assert guess_columns(["stock", "Chr 1", "II", "3", "IV"]) == {
        "stock": "stock", "X": "Chr 1", "2": "II", "3": "3", "4": "IV",
    }  # fmt: skip


def test_chromosome_columns_are_ignored_beside_a_genotype() -> None:
    assert set(guess_columns(["stock", "genotype", "X", "2", "3"])) == {"stock", "genotype"}


def test_one_chromosome_column_alone_is_no_genotype() -> None:
    with pytest.raises(StockListError, match="no column 'genotype'"):
        guess_columns(["stock", "2"])


def test_without_a_genotype_the_message_lists_the_columns_and_the_closest() -> None:
    with pytest.raises(
        StockListError, match="cold.csv has no column 'genotype'; its columns are stock, Gen type"
    ) as caught:
        guess_columns(["stock", "Gen type"], path="cold.csv")
    assert "'Gen type' may be it" in caught.value.hint


def test_without_anything_close_the_hint_says_how_to_name_it() -> None:
    with pytest.raises(StockListError, match="its columns are tray, who") as caught:
        guess_columns(["tray", "who"])
    assert caught.value.hint == "name the column that holds the genotypes 'genotype'"


def test_a_given_heading_that_is_not_there_is_refused() -> None:
    with pytest.raises(StockListError, match="no column 'flies'; its columns are stock, genotype"):
        guess_columns(["stock", "genotype"], {"genotype": "flies"})
