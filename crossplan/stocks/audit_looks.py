"""Rules about what is seen on the flies of a stock: signs that tell nothing, notes that the genotype contradicts."""

from __future__ import annotations

import re
from collections.abc import Iterator

from crossplan.errors import Severity
from crossplan.genetics.appearance import WHITE_EYES, Means, Observer
from crossplan.genetics.chromosome import PAIRS
from crossplan.genetics.fly import Fly
from crossplan.genetics.survival import lethal_groups
from crossplan.stocks.checklist import viable_homozygotes
from crossplan.stocks.finding import Finding, View, found_among, found_in, listed, number_of, opposites
from crossplan.stocks.shelf import Stock

#: a remark with one of these is a question, a plan or about something else, and contradicts nothing
_UNSURE = re.compile(
    r"(?i)\?|\b(?:if|when|maybe|perhaps|should|could|may|might|check|not sure|mostly|some|few|from|lost|over|crossed)\b"
)
_REMARK = re.compile(r"[.,;:()]")
#: a remark that states that flies with two copies do not live
_NO_HOMOZYGOTES = re.compile(
    r"(?i)\bhomozyg\w*[\s-]*(?:is |are )?lethal\b|\blethal (?:when |if )?homozyg\w*|\bno homozyg\w*|\bhomozyg\w* (?:never|do(?:es)? not|don't) (?:live|seen|eclose|emerge)"
)


def check_sign_twice(view: View) -> Iterator[Finding]:
    """One dominant sign from two chromosomes, or from both homologues of one: it does not tell which is there."""
    for stock, fly in view.flies:
        bearers: dict[str, dict[str, str]] = {}
        for name, (one, other) in zip(PAIRS, fly.pairs, strict=True):
            if one == other:
                continue
            for homologue in (one, other):
                for element in homologue.elements:
                    for sign in element.traits.dominant:
                        bearers.setdefault(sign, {}).setdefault(f"{name}:{homologue.symbols}", element.symbol)
        for sign, by_place in bearers.items():
            if len(by_place) > 1:
                yield found_in(
                    stock, "sign-twice", Severity.NOTE,
                    f"{sign} comes from {listed(by_place.values())}: seeing it does not tell which of them a fly has",
                    "use another sign of one of them, or another balancer, in schemes with this stock",
                )  # fmt: skip


def check_unmarked_balancer(view: View) -> Iterator[Finding]:
    """A balancer that shows nothing on adults: flies with it cannot be picked."""
    observer = Observer(view.catalogue, Means())
    unmarked: dict[str, list[Stock]] = {}
    for stock, _, _, one, other in view.facing:
        balancer = other.balancer
        if balancer is None or one.balancer is not None:
            continue
        signs = {s for e in other.elements for s in e.traits.dominant}
        if not any((known := view.catalogue.signs.get(s)) is None or observer.means.uses(known) for s in signs):
            unmarked.setdefault(balancer.symbol, []).append(stock)
    for symbol, stocks in sorted(unmarked.items()):
        yield found_among(
            stocks, "unmarked-balancer", Severity.WARNING,
            f"{symbol} as written shows nothing on adult flies: {listed(s.name for s in stocks)}",
            "write the markers that it carries; if there are none, sort larvae or pupae, or change the balancer",
        )  # fmt: skip


def check_cold_sign(view: View) -> Iterator[Finding]:
    """Stocks kept in the cold whose floating balancer is told only by a sign that fails in the cold, said once."""
    cold: list[Stock] = []
    for stock, fly in view.flies:
        if stock.temperature_C is not None and _only_cold_signs(fly, stock.temperature_C, view):
            cold.append(stock)
    if cold:
        yield found_among(
            cold, "cold-sign", Severity.NOTE,
            f"{number_of(len(cold), 'stock is', 'stocks are')} kept in the cold with a balancer that can drift out and whose"
            f" sign is unsure there: {listed(s.name for s in cold)}",
            "rear the flies that you select from at 25 C",
        )  # fmt: skip


def _only_cold_signs(fly: Fly, temperature_C: float, view: View) -> bool:
    for _, one, other in opposites(fly):
        if other.balancer is None or one.balancer is not None or lethal_groups(one) or not one.elements:
            continue
        signs = [view.catalogue.signs.get(s) for e in other.elements for s in e.traits.dominant]
        adult = [s for s in signs if s is not None and s.stage == "adult" and s.ease != "hard"]
        unsure = [s for s in adult if s.unreliable_below_C is not None and temperature_C < s.unreliable_below_C]
        if adult and len(unsure) == len(adult):
            return True
    return False


# -- what the notes say -----------------------------------------------------------------------------------------------


def check_notes_against_looks(view: View) -> Iterator[Finding]:
    """A remark about the looks of the flies that the genotype contradicts."""
    patterns = _sign_patterns(view)
    for stock in view.usable:
        if not stock.notes or (stock.reading.female is None and stock.reading.male is None):
            continue
        said = [found for remark in _REMARK.split(stock.notes) if (found := _statement(remark, patterns)) is not None]
        if not said:
            continue
        seen, always = _looks(stock, view)
        for words, sign, present in said:
            if sign not in seen if present else sign in always:
                yield found_in(
                    stock, "looks-contradict", Severity.WARNING,
                    f"the notes say '{words}', but flies of this genotype"
                    f" {'do not show it' if present else 'show ' + sign}",
                    "look at the flies: the vial, the note or the genotype is wrong",
                )  # fmt: skip


Statement = tuple[re.Pattern[str], str, bool]


def _statement(remark: str, patterns: list[Statement]) -> tuple[str, str, bool] | None:
    """Return what a remark states about a sign: its words, the sign, and whether it is said to be there."""
    for pattern, sign, present in patterns:
        match = pattern.search(remark)
        if match:
            return None if _UNSURE.search(remark) else (match[0].strip(), sign, present)
    return None


def _sign_patterns(view: View) -> list[Statement]:
    """Return for each easy adult sign how a remark says that it is there, or that it is not."""
    patterns = []
    for sign in view.catalogue.signs.values():
        if sign.stage != "adult" or sign.ease == "hard":
            continue
        for words, present in ((sign.name, True), (sign.opposite, False)):
            look, _, part = words.partition(" ")
            stem = part.rstrip("s")
            if not part or " " in part:
                continue
            patterns.append((re.compile(rf"(?i)^\s*(?:all )?{look}[\s-]{stem}(?:s|ed)?\b"), sign.name, present))
    for words in ("red eyes", "orange eyes", "red-eyed", "orange-eyed"):
        patterns.append((re.compile(rf"(?i)^\s*(?:all )?{words.replace('-', '[ -]')}\b"), WHITE_EYES, False))
    return patterns


def _looks(stock: Stock, view: View) -> tuple[frozenset[str], frozenset[str]]:
    """Return the signs that some living flies of the stock can show, and those that all of them show."""
    kinds: list[frozenset[str]] = []
    for fly in (stock.reading.female, stock.reading.male):
        if fly is None:
            continue
        for kind in (fly, *viable_homozygotes(fly)):
            kinds.append(view.observer.signs(kind))
    return frozenset().union(*kinds), frozenset.intersection(*kinds)


def check_notes_say_lethal(view: View) -> Iterator[Finding]:
    """A remark that homozygotes die, of a stock whose genotype carries no lethal: schemes would count on homozygotes."""
    for stock, fly in view.flies:
        match = _NO_HOMOZYGOTES.search(stock.notes)
        if not match or "?" in stock.notes:
            continue
        carriers = [c for _, c, o in opposites(fly) if o.balancer is not None and c.balancer is None and c.elements]
        if any(lethal_groups(c) for c in carriers):
            continue
        if carriers or any(a == b and a.elements and a.balancer is None for a, b in fly.pairs[1:3]):
            yield found_in(
                stock, "lethal-not-written", Severity.WARNING,
                f"the notes say '{match[0]}', and the genotype has no lethal: schemes will count on homozygous flies",
                "write the lethal on that homologue, such as l(2)NAME[1], or homozygote = \"lethal\" in the lab's catalogue",
            )  # fmt: skip
