"""The transfer rota: nobody waits too long, work is spread, copies are staggered."""

from __future__ import annotations

import datetime as dt
from itertools import pairwise
from pathlib import Path

import pytest

from crossplan.stocks.keeping import OVERDUE_FACTOR, flip_interval_days
from crossplan.stocks.rota import Transfer, Week, make_rota
from crossplan.stocks.shelf import Shelf, read_stocks
from tests.stocks.planted import sound_list

START = dt.date(2026, 12, 1)
PEOPLE = ("Maren", "Tovi", "Wanja")


def shelf_of(folder: Path, rows: list[str]) -> Shelf:
    path = folder / "stocks.csv"
    path.write_text(
        "\n".join(("stock|genotype|copies|temp|last flip|tray|vial|status", *rows)) + "\n", encoding="utf-8"
    )
    return read_stocks(path)


@pytest.fixture
def many(tmp_path: Path) -> Shelf:
    rows = [f"{r.stock}|{r.genotype}|{r.copies}|{r.temp}|{r.flip}|{r.tray}|{r.vial}|ok" for r in sound_list(5, 300)]
    return shelf_of(tmp_path, rows)


def by_half(rota: tuple[Transfer, ...]) -> dict[tuple[str, str], list[Transfer]]:
    found: dict[tuple[str, str], list[Transfer]] = {}
    for transfer in rota:
        found.setdefault((transfer.stock.name, transfer.half), []).append(transfer)
    return found


def test_no_half_waits_until_it_is_overdue(many: Shelf) -> None:
    rota = make_rota(many, START, 84)
    for transfers in by_half(rota).values():
        stock = transfers[0].stock
        interval = flip_interval_days(stock.temperature_C or 21.5)
        assert stock.last_transfer is not None
        days = [stock.last_transfer, *(t.day for t in transfers)]
        # the first transfers of a shelf that is behind are done within a working week
        assert all((b - a).days <= OVERDUE_FACTOR * interval for a, b in pairwise(days[1:]))
        assert transfers[0].late or (days[1] - days[0]).days <= OVERDUE_FACTOR * interval + 7
        assert (START + dt.timedelta(days=84) - days[-1]).days <= interval


def test_every_stock_is_in_it(many: Shelf) -> None:
    rota = make_rota(many, START, 84)
    assert {t.stock.name for t in rota} == {s.name for s in many.stocks}


def test_only_working_days(many: Shelf) -> None:
    holiday = dt.date(2026, 12, 3)
    rota = make_rota(many, START, 56, Week(working_days=(0, 1, 3), holidays=frozenset((holiday,))))
    assert {t.day.weekday() for t in rota} == {0, 1, 3}
    assert holiday not in {t.day for t in rota}


def test_work_is_spread_over_people_and_trays_stay_together(many: Shelf) -> None:
    rota = make_rota(many, START, 56, Week(people=PEOPLE))
    hands: dict[tuple[dt.date, str], set[str]] = {}
    total = dict.fromkeys(PEOPLE, 0)
    for transfer in rota:
        hands.setdefault((transfer.day, transfer.stock.tray), set()).add(transfer.person)
        total[transfer.person] += transfer.vials
    assert all(len(people) == 1 for people in hands.values())
    assert max(total.values()) <= 1.5 * min(total.values())


def test_the_copies_are_flipped_half_an_interval_apart(many: Shelf) -> None:
    rota = by_half(make_rota(many, START, 140))
    for (name, half), transfers in rota.items():
        if half != "B":
            continue
        interval = flip_interval_days(transfers[0].stock.temperature_C or 21.5)
        last = transfers[-1].day
        others = [t.day for t in rota[name, "A"]]
        assert min(abs((last - day).days) for day in others) >= interval / 4 - 1


def test_a_day_has_not_all_the_work(many: Shelf) -> None:
    rota = make_rota(many, START, 84)
    days: dict[dt.date, int] = {}
    for transfer in rota:
        days[transfer.day] = days.get(transfer.day, 0) + transfer.vials
    settled = [n for day, n in sorted(days.items()) if (day - START).days >= 7]
    assert max(settled) <= 3 * sum(settled) / len(settled)


def test_an_overdue_stock_comes_first_and_is_said(tmp_path: Path) -> None:
    rota = make_rota(shelf_of(tmp_path, ["A|w|1|18|2026-08-01|T1|1|ok"]), START, 7)
    assert [(t.day, t.late, t.half) for t in rota] == [(dt.date(2026, 12, 1), True, "all")]


def test_stocks_out_of_use_and_an_empty_period(tmp_path: Path) -> None:
    shelf = shelf_of(tmp_path, ["A|w|2|18|2026-11-01|T1|1|dead", "B|y|2|18||T1|2|ok", "C|f|2|18||Q1|1|quarantine"])
    assert {t.stock.name for t in make_rota(shelf, START, 28)} == {"B", "C"}
    assert make_rota(shelf, dt.date(2026, 12, 5), 2) == ()


def test_the_same_rota_every_time(many: Shelf) -> None:
    assert make_rota(many, START, 56, Week(people=PEOPLE)) == make_rota(many, START, 56, Week(people=PEOPLE))
