"""The transfer rota on paper, as a table and as a calendar."""

from __future__ import annotations

import csv
import datetime as dt
import io
import re
from pathlib import Path

from example_plan import virgins_plan
from reading_back import texts

from crossplan.bench.rota_sheet import rota_csv, rota_ics, rota_pdf, stock_tasks
from crossplan.stocks.rota import Transfer, Week, make_rota
from crossplan.stocks.shelf import read_stocks

START = dt.date(2026, 12, 1)


def rota(folder: Path) -> tuple[Transfer, ...]:
    path = folder / "stocks.csv"
    rows = [f"S{i}|w; UAS-kx{i}@VK00018|{1 + i % 3}|18|2026-{9 + i % 3}-10|T{i % 4}|{i}" for i in range(40)]
    path.write_text("\n".join(("stock|genotype|copies|temp|last flip|tray|vial", *rows)) + "\n", encoding="utf-8")
    return make_rota(read_stocks(path), START, 28, Week(people=("Maren", "Tovi")))


def test_every_transfer_is_on_paper_once(tmp_path: Path) -> None:
    transfers = rota(tmp_path)
    text = "\n".join(texts(rota_pdf("transfers", transfers)))
    for transfer in transfers:
        assert f"{transfer.stock.name}:" in text
    lines = len(re.findall(r"S\d+: \d+ vials?", text))
    assert lines == len(transfers)
    assert "OVERDUE" in text
    assert "Tue 1 Dec 2026: Maren" in text


def test_the_table_holds_the_same(tmp_path: Path) -> None:
    transfers = rota(tmp_path)
    rows = list(csv.DictReader(io.StringIO(rota_csv(transfers))))
    assert [(r["date"], r["stock"], r["half"]) for r in rows] == [
        (t.day.isoformat(), t.stock.name, t.half) for t in transfers
    ]


def test_the_calendar_has_an_entry_a_day_and_person(tmp_path: Path) -> None:
    from icalendar import Calendar

    transfers = rota(tmp_path)
    events = Calendar.from_ical(rota_ics("stocks", transfers, START)).walk("VEVENT")
    assert len(events) == len({(t.day, t.person) for t in transfers})
    assert len({str(e["uid"]) for e in events}) == len(events)
    assert sum(t.vials for t in transfers) == sum(int(str(e["summary"]).split("flip ")[1].split()[0]) for e in events)


def test_what_a_plan_asks_of_stocks_is_put_in() -> None:
    plan = virgins_plan()
    days = sorted(t.date for t in plan.tasks if t.kind in ("expand", "virgins"))
    first = dt.date.fromisoformat(days[0])
    tasks = stock_tasks(plan, first, 1)
    assert tasks
    assert {t.date for t in tasks} == {days[0]}
    assert stock_tasks(plan, first + dt.timedelta(days=4000), 7) == ()
    assert tasks[0].note.split()[0] in "\n".join(texts(rota_pdf("transfers", (), tasks)))


def test_an_empty_rota_is_a_page_that_says_so() -> None:
    assert "Nothing to do" in "\n".join(texts(rota_pdf("transfers", ())))


def test_the_same_bytes_every_time(tmp_path: Path) -> None:
    transfers = rota(tmp_path)
    assert rota_pdf("transfers", transfers) == rota_pdf("transfers", transfers)
    assert rota_ics("stocks", transfers, START) == rota_ics("stocks", transfers, START)
