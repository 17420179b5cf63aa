"""The transfer rota: which stock goes on new food on which day, in whose hands.

Every stock is due an interval after its last transfer, by its temperature (`keeping`). A stock with several copies is
flipped in two halves, half an interval apart, so that one bad batch of food does not meet both (Ashburner & Roote,
Maintenance of a Drosophila laboratory, from memory). A transfer may be brought forward by a quarter of its interval, and
is put off only where no working day is left before it is due, by at most a working week; the day with the least work is taken, and the work of
a day is shared out tray by tray, so that a tray stays in one pair of hands.
"""

from __future__ import annotations

import datetime as dt
from collections.abc import Iterable, Mapping, Sequence
from dataclasses import dataclass, field
from math import ceil

from crossplan.stocks.keeping import OVERDUE_FACTOR, USUAL_TEMPERATURE, flip_interval_days, is_kept
from crossplan.stocks.shelf import Shelf, Stock

#: how far a transfer may be brought forward, as a share of its interval (our choice)
EARLIEST = 0.25
#: over how many working days a backlog of due stocks is spread (our choice)
MOST_DAYS_PUT_OFF = 5
#: the two halves of the copies are kept at least so far apart, as a share of the interval (our choice)
APART = 0.25
WORKING_DAYS = (0, 1, 2, 3, 4)


@dataclass(frozen=True)
class Week:
    """Which days are worked, and by whom. `working_days` counts Monday as 0."""

    working_days: tuple[int, ...] = WORKING_DAYS
    holidays: frozenset[dt.date] = field(default_factory=frozenset)
    people: tuple[str, ...] = ()

    def works(self, day: dt.date) -> bool:
        """Return whether anybody works on that day."""
        return day.weekday() in self.working_days and day not in self.holidays


@dataclass(frozen=True, slots=True)
class Transfer:
    """One transfer: the stock, the day, by whom, which half of the copies, and how many vials.

    `due` is the day on which the interval ends; `late` says that the stock is overdue by the day of its transfer.
    """

    day: dt.date
    stock: Stock
    half: str
    vials: int
    due: dt.date
    person: str = ""
    late: bool = False


def make_rota(shelf: Shelf, start: dt.date, days: int, week: Week | None = None) -> tuple[Transfer, ...]:
    """Return all transfers of the period, in order of day, person and place.

    Args:
        shelf: the stocks; those that are gone are left out, those in quarantine are fed.
        start: first day of the period.
        days: its length.
        week: working days and people; Monday to Friday and nobody by name by default.
    """
    calendar = week or Week()
    open_days = [d for i in range(days) if calendar.works(d := start + dt.timedelta(days=i))]
    last = start + dt.timedelta(days=days - 1)
    load: dict[dt.date, int] = dict.fromkeys(open_days, 0)
    wanted = [w for stock in shelf.stocks if is_kept(stock) for w in _halves(stock, start)]
    planned: list[Transfer] = []
    # those with the least room first; a stock that is flipped twice in the period comes back with its next due day
    queue = sorted(wanted, key=lambda w: (w.latest, w.stock.row, w.half))
    flipped: dict[tuple[str, str], list[dt.date]] = {}
    while queue:
        batch, queue = queue, []
        for want in batch:
            others = flipped.get((want.stock.name, want.other_half), ())
            transfer = _place(want, open_days, last, load, others)
            if transfer is None:
                continue
            planned.append(transfer)
            load[transfer.day] += transfer.vials
            flipped.setdefault((want.stock.name, want.half), []).append(transfer.day)
            queue.append(want.again(transfer.day, others))
        queue.sort(key=lambda w: (w.latest, w.stock.row, w.half))
    return _shared_out(planned, calendar.people)


@dataclass(frozen=True, slots=True)
class _Wanted:
    stock: Stock
    half: str
    vials: int
    due: dt.date
    interval: float

    @property
    def earliest(self) -> dt.date:
        return self.due - dt.timedelta(days=int(EARLIEST * self.interval))

    @property
    def latest(self) -> dt.date:
        return self.due + dt.timedelta(days=int((OVERDUE_FACTOR - 1) * self.interval))

    @property
    def other_half(self) -> str:
        return {"A": "B", "B": "A"}.get(self.half, "")

    def is_apart(self, day: dt.date, others: Sequence[dt.date]) -> bool:
        """Return whether a day is far enough from the transfers of the other half."""
        return all(abs((other - day).days) >= APART * self.interval for other in others)

    def again(self, day: dt.date, others: Sequence[dt.date]) -> _Wanted:
        """Return the next transfer; of two halves that met on one food the second comes back after half an interval."""
        days = int(self.interval) if self.is_apart(day, others) else int(self.interval / 2)
        return _Wanted(self.stock, self.half, self.vials, day + dt.timedelta(days=days), self.interval)


def _halves(stock: Stock, start: dt.date) -> Iterable[_Wanted]:
    """Return the due days of the two halves of the copies, half an interval apart; of a single vial, one.

    The list dates a stock, not its halves: both are taken to be of that date, and the second is brought forward to stand
    half an interval before the first. A stock without a date is taken to be half an interval old.
    """
    interval = flip_interval_days(USUAL_TEMPERATURE if stock.temperature_C is None else stock.temperature_C)
    half = dt.timedelta(days=int(interval / 2))
    copies = stock.copies or 1
    due = start + half if stock.last_transfer is None else stock.last_transfer + dt.timedelta(days=int(interval))
    if copies < 2:
        return (_Wanted(stock, "all", copies, due, interval),)
    return (
        _Wanted(stock, "A", ceil(copies / 2), due, interval),
        _Wanted(stock, "B", copies // 2, max(min(start, due), due - half), interval),
    )


def _place(
    want: _Wanted, open_days: Sequence[dt.date], last: dt.date, load: Mapping[dt.date, int], others: Sequence[dt.date]
) -> Transfer | None:
    """Return the transfer on the open day before it is due that has the least work and is apart from the other half.

    Failing that it is on one of the next open days.
    """
    if want.due > last or not open_days:
        return None
    on_time = [d for d in open_days if want.earliest <= d <= want.due]
    if on_time:
        day = min(on_time, key=lambda d: (not want.is_apart(d, others), load[d], d))
        return Transfer(day, want.stock, want.half, want.vials, want.due)
    after = [d for d in open_days if d > want.due]
    if not after:
        return None
    # due already: within a few days, so that a backlog is not one day's work; at once where it is overdue
    soon = [d for d in after[:MOST_DAYS_PUT_OFF] if d <= want.latest] or after[:1]
    day = min(soon, key=lambda d: (load[d], d))
    return Transfer(day, want.stock, want.half, want.vials, want.due, late=day > want.latest)


def _shared_out(transfers: Iterable[Transfer], people: Sequence[str]) -> tuple[Transfer, ...]:
    """Give each tray of a day to the person with the fewest vials that day, and of equals so far; heavy trays first."""
    by_day: dict[dt.date, dict[str, list[Transfer]]] = {}
    for transfer in transfers:
        by_day.setdefault(transfer.day, {}).setdefault(transfer.stock.tray, []).append(transfer)
    shared: list[Transfer] = []
    so_far = dict.fromkeys(people, 0)
    for _, trays in sorted(by_day.items()):
        hands = dict.fromkeys(people, 0)
        for tray in sorted(trays, key=lambda t: (-sum(x.vials for x in trays[t]), t)):
            person = min(hands, key=lambda p: (hands[p], so_far[p], people.index(p))) if hands else ""
            if hands:
                hands[person] += (vials := sum(x.vials for x in trays[tray]))
                so_far[person] += vials
            shared += [_handed(x, person) for x in trays[tray]]
    return tuple(
        sorted(shared, key=lambda t: (t.day, t.person, t.stock.tray, _place_in_tray(t.stock), t.stock.row, t.half))
    )


def _handed(transfer: Transfer, person: str) -> Transfer:
    return Transfer(transfer.day, transfer.stock, transfer.half, transfer.vials, transfer.due, person, transfer.late)


def _place_in_tray(stock: Stock) -> tuple[int, str]:
    return (int(stock.vial) if stock.vial.isdecimal() else 0, stock.vial)
