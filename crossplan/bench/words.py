"""Words and phrases that all papers share, so that one thing is called the same everywhere."""

from __future__ import annotations

import datetime as dt
import re
from collections.abc import Iterable

from crossplan.plan.model import FlyRecord, KeepRecord, ParentRecord, StepDates
from crossplan.plan.screen import DAYS

FEMALE_SIGN = "♀"
MALE_SIGN = "♂"
SIGNS = {"female": FEMALE_SIGN, "male": MALE_SIGN, "both": FEMALE_SIGN + MALE_SIGN}
MONTHS = ("Jan", "Feb", "Mar", "Apr", "May", "Jun", "Jul", "Aug", "Sep", "Oct", "Nov", "Dec")

#: The kinds of task in the order in which a round through the fly room does them: what cannot wait comes
#: first (flies that eclosed since clearing are virgins for hours only), what makes dirt comes last. Common
#: practice, no source.
WALKING_ORDER = ("clear", "virgins", "collect", "shift", "food", "expand", "set up", "assay", "discard")

#: A stretch of text and whether it is printed raised (the superscript of an allele).
Run = tuple[str, bool]

Day = str | dt.date


def as_date(day: Day) -> dt.date:
    """Return the date of an ISO day (YYYY-MM-DD); ValueError if it is none."""
    return day if isinstance(day, dt.date) else dt.date.fromisoformat(day)


def long_day(day: Day) -> str:
    """Return the day as `Mon 11 Jan 2027`."""
    date = as_date(day)
    return f"{short_day(date)} {date.year}"


def short_day(day: Day) -> str:
    """Return the day as `Mon 11 Jan`."""
    date = as_date(day)
    return f"{DAYS[date.weekday()]} {bare_day(date)}"


def bare_day(day: Day) -> str:
    """Return the day as `11 Jan`."""
    date = as_date(day)
    return f"{date.day} {MONTHS[date.month - 1]}"


def day_range(first: Day, last: Day, weekdays: bool = False) -> str:
    """Return `21–25 Jan`, `29 Jan–2 Feb` or a single day; with `weekdays`, `Thu 21 Jan – Mon 25 Jan`."""
    start, end = as_date(first), as_date(last)
    if start == end:
        return short_day(start) if weekdays else bare_day(start)
    if weekdays:
        return f"{short_day(start)} – {short_day(end)}"
    if (start.year, start.month) == (end.year, end.month):
        return f"{start.day}–{bare_day(end)}"
    return f"{bare_day(start)}–{bare_day(end)}"


def dates_phrases(dates: StepDates, weekdays: bool = False) -> tuple[str, str]:
    """Return all the days of a culture in two phrases: set up and clear, collect and discard."""
    one = short_day if weekdays else bare_day
    collect = day_range(dates.collect_from, dates.collect_to, weekdays)
    return (
        f"set up {one(dates.set_up)} · clear {one(dates.clear)}",
        f"collect {collect} · discard {one(dates.discard)}",
    )


def count(number: float, one: str, many: str = "") -> str:
    """Return `1 vial`, `3 vials`, `2 flies`; a whole number is written without a point."""
    shown = f"{number:.1f}".rstrip("0").rstrip(".")
    return f"{shown} {one if shown == '1' else many or one + 's'}"


def listed(parts: Iterable[str], joint: str = "and") -> str:
    """Return `a`, `a and b`, `a, b and c`."""
    words = [p for p in parts if p]
    if len(words) < 2:
        return "".join(words)
    return f"{', '.join(words[:-1])} {joint} {words[-1]}"


def warm(temperature_C: float) -> str:
    """Return a temperature in degrees C as `25 °C` or `18.5 °C`."""
    return f"{temperature_C:g} °C"


def percent(share: float) -> str:
    """Return a share as `12.5 %`; three figures are as many as a head-count can show."""
    return f"{100 * share:.3g} %"


# --- genotypes ----------------------------------------------------------------------------------------------


def homologue_text(elements: Iterable[str]) -> str:
    """Return one homologue as it is written: its elements, or `+`."""
    return " ".join(elements) or "+"


def pair_text(pair: list[list[str]]) -> str:
    """Return a pair as `AD/CyO`; as `w[1118]` when both homologues are the same; as `+` when wild type."""
    written = [homologue_text(h) for h in pair]
    return written[0] if len(set(written)) == 1 else "/".join(written)


def pairs_of(fly: FlyRecord) -> tuple[tuple[str, list[list[str]]], ...]:
    """Return the four pairs with the names of their chromosomes."""
    return (("X", fly.x), ("2", fly.second), ("3", fly.third), ("4", fly.fourth))


def is_plain(pair: list[list[str]]) -> bool:
    """Whether a pair is wild type (a male's X and Y, both unmarked, are too)."""
    return all(not homologue or homologue == ["Y"] for homologue in pair)


def chromosome_lines(fly: FlyRecord) -> tuple[str, ...]:
    """Return one line a chromosome, with its name in front: `2: AD-K12@attP40/CyO`; wild-type pairs are
    left out.

    A fly that is wild type throughout gives one line, `+`.
    """
    lines = tuple(f"{name}: {pair_text(pair)}" for name, pair in pairs_of(fly) if not is_plain(pair))
    return lines or ("+",)


def short_genotypes(fly: FlyRecord) -> tuple[str, ...]:
    """Return shorter and shorter forms of a genotype, each chromosome with its name: without a white-eyed
    background; then also without landing sites and without what stands around the name of an insertion."""
    shown = [(name, pair) for name, pair in pairs_of(fly) if not is_plain(pair)]
    no_white = [(n, p) for n, p in shown if n != "X" or not _only_white(p)] or shown
    one = "; ".join(f"{name}: {pair_text(pair)}" for name, pair in no_white)
    inner = re.sub(r"[A-Z]\w*\{[^{}=]*=([^{}]*)\}", r"\1@", one)
    return one, re.sub(r"@[^\s/;,]*(\([^)\s]*\))?[^\s/;,]*", "", inner)


def _only_white(pair: list[list[str]]) -> bool:
    return all(re.fullmatch(r"w(\[[^\]]*\])?|Y", element) for homologue in pair for element in homologue)


def fly_text(fly: FlyRecord) -> str:
    """Return the genotype on one line: as the plan writes it, or put together from the homologues."""
    return fly.genotype or "; ".join(pair_text(pair) for _, pair in pairs_of(fly))


def source_text(parent: ParentRecord) -> str:
    """Return where a parent comes from: the name of the stock, or the step."""
    return parent.step or parent.stock or "?"


def parents_text(mother: ParentRecord, father: ParentRecord) -> str:
    """Return `♀ K12-AD × ♂ S01`."""
    return f"{FEMALE_SIGN} {source_text(mother)} × {MALE_SIGN} {source_text(father)}"


def keep_rule(keep: KeepRecord) -> str:
    """Return what to keep in a few words: the plan's own rule, or sex and signs."""
    return keep.rule or keep_words(keep)


def with_sex_sign(rule: str) -> str:
    """Return a rule with a sign in place of the word: `virgin females: curly wings` is `virgin ♀: curly wings`."""
    short = re.sub(
        r"^((?:all |virgin )*)(?:fe(male)|male)s\b", lambda m: m[1] + (FEMALE_SIGN if m[2] else MALE_SIGN), rule
    )
    return re.sub(r"^both sexes\b", FEMALE_SIGN + MALE_SIGN, short)


def keep_words(keep: KeepRecord) -> str:
    """Return sex and signs of the kept class: `virgin females: straight wings, red eyes`."""
    sex = {"female": "females", "male": "males", "both": "both sexes"}[keep.sex]
    who = f"virgin {sex}" if keep.virgin else sex
    return f"{who}: {', '.join(keep.signs)}" if keep.signs else f"all {who}"


def raised_runs(text: str) -> tuple[Run, ...]:
    """Split a text into plain and raised stretches: `w[1118]` is `w` and a raised `1118`.

    Only square brackets that close, and that follow directly on a letter, a digit or a bracket, are
    superscripts; all others stay as they are. Brackets inside a superscript stay too.
    """
    runs: list[Run] = []
    rest = 0
    for match in re.finditer(r"(?<=[^\s\[(])\[((?:[^\[\]]|\[[^\[\]]*\])+)\]", text):
        runs += [(text[rest : match.start()], False), (match.group(1), True)]
        rest = match.end()
    runs.append((text[rest:], False))
    return tuple(run for run in runs if run[0])
