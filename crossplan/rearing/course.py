"""The temperatures that a culture sees, as pieces of constant temperature.

How a course is written (blanks do not matter; decimals take a point; a `C` after a temperature may stand):

    course      = part {"," part}          the last part has no duration: it holds from then on
    part        = what [":" duration]
    what        = temperature | cycle
    cycle       = duration temperature {"/" duration temperature}
    duration    = number "d" | number "h"

    25                    25 C throughout
    18:5d,25              five days at 18 C, then 25 C
    12h20/12h30           every day 12 hours at 20 C and 12 hours at 30 C
    25:3d,16h25/8h18      three days at 25 C, then nights at 18 C

Which temperatures a fly can live at is for the clock to say (`development`); a course may hold any.
"""

from __future__ import annotations

import math
import re
from collections.abc import Callable, Iterator, Sequence
from dataclasses import dataclass
from itertools import cycle

from crossplan.errors import RearingError

#: the shortest piece that a course may have, in hours; a vial takes about an hour to follow (common practice)
SHORTEST_PIECE_HOURS = 0.1
#: the longest stretch that one part may last, in hours
LONGEST_PIECE_HOURS = 366 * 24.0
HOW_TO_WRITE = (
    "Write a temperature in degrees C (25), a change (18:5d,25 is 5 days at 18 C, then 25 C) or a daily cycle"
    " (12h20/12h30). Decimals take a point."
)

_NUMBER = r"\d+(?:\.\d+)?"
_TEMPERATURE = re.compile(rf"({_NUMBER})\s*(?:°?\s*C)?", re.IGNORECASE)
_DURATION = re.compile(rf"({_NUMBER})\s*([dh])", re.IGNORECASE)
_CYCLE_PIECE = re.compile(rf"({_NUMBER}\s*[dh])\s*(.+)", re.IGNORECASE)


@dataclass(frozen=True, slots=True)
class Piece:
    """A stretch of constant temperature: from `start_hour` to `end_hour` (may be infinite), in degrees C."""

    start_hour: float
    end_hour: float
    temperature: float


@dataclass(frozen=True, slots=True)
class Span:
    """A length of time in hours at a temperature in degrees C."""

    hours: float
    temperature: float

    def __post_init__(self) -> None:
        if not math.isfinite(self.temperature):
            raise RearingError(f"{self.temperature} is not a temperature in degrees C", HOW_TO_WRITE)
        if not SHORTEST_PIECE_HOURS <= self.hours <= LONGEST_PIECE_HOURS:
            raise RearingError(
                f"{self.hours:g} h at {self.temperature:g} C: a piece of a course lasts between"
                f" {SHORTEST_PIECE_HOURS:g} h and {LONGEST_PIECE_HOURS / 24:g} days",
                HOW_TO_WRITE,
            )


@dataclass(frozen=True, slots=True)
class Course:
    """Temperatures from hour 0 on: first every span of `lead`, then those of `repeat` again and again."""

    lead: tuple[Span, ...]
    repeat: tuple[Span, ...]

    def __post_init__(self) -> None:
        if not self.repeat:
            raise RearingError("a course of temperatures must say what holds at its end", HOW_TO_WRITE)

    @classmethod
    def constant(cls, temperature: float) -> Course:
        """Return the course that stays at `temperature` degrees C."""
        return cls((), (Span(24.0, float(temperature)),))

    @classmethod
    def of_starts(cls, starts: Sequence[tuple[float, float]]) -> Course:
        """Return the course given by (start hour, temperature) in rising order; the last temperature holds
        on.

        Raises:
            RearingError: no start, the first is not hour 0, or hours do not rise.
        """
        if not starts or starts[0][0] != 0:
            raise RearingError("a course of temperatures must begin at hour 0", HOW_TO_WRITE)
        following = [hour for hour, _ in starts[1:]]
        lead = tuple(Span(end - start, t) for (start, t), end in zip(starts[:-1], following, strict=True))
        return cls(lead, (Span(24.0, float(starts[-1][1])),))

    @classmethod
    def parse(cls, text: str) -> Course:
        """Return the course that `text` writes in the grammar above.

        Raises:
            RearingError: the text is not a course; says which part is wrong and what was expected.
        """
        parts = [part.strip() for part in text.split(",")]
        lead: list[Span] = []
        for part in parts[:-1]:
            what, colon, duration = part.partition(":")
            if not colon:
                raise RearingError(
                    f"temperature course '{text}': '{part}' does not say how long (expected '{part}:5d' or"
                    f" '{part}:12h'; only the last part has no duration)",
                    HOW_TO_WRITE,
                )
            lead += _filled(_spans(what, text), _hours(duration, text))
        last, colon, _ = parts[-1].partition(":")
        if colon:
            raise RearingError(
                f"temperature course '{text}': the last part '{parts[-1]}' has a duration, but what comes"
                f" after it is not said (expected '{last.strip()}', which holds from then on, or one more"
                " temperature)",
                HOW_TO_WRITE,
            )
        return cls(tuple(lead), tuple(_spans(last, text)))

    @classmethod
    def of(cls, where: Course | float) -> Course:
        """Return `where` itself if it is a course, else the constant course at that temperature in degrees
        C."""
        return where if isinstance(where, Course) else cls.constant(where)

    @property
    def is_constant(self) -> bool:
        """Whether there is only one temperature."""
        return len({span.temperature for span in (*self.lead, *self.repeat)}) == 1

    @property
    def is_cycle(self) -> bool:
        """Whether it ends in a cycle of different temperatures."""
        return len({span.temperature for span in self.repeat}) > 1

    def _stretches(self) -> Iterator[tuple[float, float]]:
        """Yield (hours, temperature) from hour 0 on; the last stretch of a course that settles is
        infinite."""
        for span in self.lead:
            yield span.hours, span.temperature
        if not self.is_cycle:
            yield math.inf, self.repeat[0].temperature
            return
        for span in cycle(self.repeat):
            yield span.hours, span.temperature

    def pieces(self, start: float = 0.0) -> Iterator[Piece]:
        """Yield the pieces from hour `start` on, in order; together they reach to infinity."""
        begins = 0.0
        for hours, temperature in self._stretches():
            ends = begins + hours
            if ends > start:
                yield Piece(max(begins, start), ends, temperature)
            begins = ends

    def temperature_at(self, hour: float) -> float:
        """Return the temperature in degrees C at `hour` (at a change, the new one)."""
        return next(self.pieces(hour)).temperature

    def temperatures(self, start: float, end: float) -> tuple[float, ...]:
        """Return the temperatures in degrees C met between two hours, in order of first meeting."""
        met: dict[float, None] = {}
        for piece in self.pieces(start):
            if piece.start_hour >= end:
                break
            met[piece.temperature] = None
        return tuple(met)

    def hours_until(self, total: float, rate: Callable[[float], float], start: float = 0.0) -> float:
        """Return the hour at which the integral of `rate(temperature)` from hour `start` reaches `total`.

        Exact for each piece, since the rate is constant there; temperatures are never averaged. `rate` is
        per hour, positive, and is asked only for temperatures that are reached.
        """
        done = 0.0
        for piece in self.pieces(start):
            speed = rate(piece.temperature)
            gained = speed * (piece.end_hour - piece.start_hour)
            if done + gained >= total:
                return piece.start_hour + (total - done) / speed
            done += gained
        raise AssertionError("a course has no end")

    def integral(self, rate: Callable[[float], float], start: float, end: float) -> float:
        """Return the integral of `rate(temperature)`, a rate per hour, from hour `start` to hour `end`."""
        gained: list[float] = []
        for piece in self.pieces(start):
            if piece.start_hour >= end:
                break
            gained.append(rate(piece.temperature) * (min(piece.end_hour, end) - piece.start_hour))
        return math.fsum(gained)


def _temperature(text: str, whole: str) -> float:
    found = _TEMPERATURE.fullmatch(text.strip())
    if found is None:
        raise RearingError(
            f"temperature course '{whole}': '{text.strip()}' is not a temperature (expected degrees C, such as 25)",
            HOW_TO_WRITE,
        )
    return float(found[1])


def _hours(text: str, whole: str) -> float:
    found = _DURATION.fullmatch(text.strip())
    if found is None:
        raise RearingError(
            f"temperature course '{whole}': '{text.strip()}' is not a duration (expected days or hours: 5d, 12h)",
            HOW_TO_WRITE,
        )
    return float(found[1]) * (24.0 if found[2].lower() == "d" else 1.0)


def _spans(text: str, whole: str) -> list[Span]:
    """Return one turn of a cycle, or a day at a single temperature."""
    pieces = text.split("/")
    if len(pieces) == 1 and _CYCLE_PIECE.fullmatch(text.strip()) is None:
        return [Span(24.0, _temperature(text, whole))]
    if len(pieces) == 1:
        raise RearingError(
            f"temperature course '{whole}': the cycle '{text.strip()}' has only one temperature"
            " (expected two or more, such as 12h20/12h30)",
            HOW_TO_WRITE,
        )
    spans = []
    for piece in pieces:
        found = _CYCLE_PIECE.fullmatch(piece.strip())
        if found is None:
            raise RearingError(
                f"temperature course '{whole}': '{piece.strip()}' is not a piece of a cycle"
                " (expected hours, then the temperature: 12h20)",
                HOW_TO_WRITE,
            )
        spans.append(Span(_hours(found[1], whole), _temperature(found[2], whole)))
    return spans


def _filled(turn: list[Span], hours: float) -> list[Span]:
    """Return `hours` of the turn, repeated and cut short as needed."""
    if len(turn) == 1:
        return [Span(hours, turn[0].temperature)]
    Span(hours, turn[0].temperature)  # refuses a length that no part may have
    filled: list[Span] = []
    left = hours
    for span in cycle(turn):
        if left < SHORTEST_PIECE_HOURS:
            break
        filled.append(Span(min(span.hours, left), span.temperature))
        left -= span.hours
    return filled
