"""Why a target cannot be made, and what would make it possible.

When the search finds nothing, each wish is taken back in turn, and each of a small kit of helper stocks that every lab
can get is put on the shelf in turn; whatever brings a scheme is named. Nothing is guessed: every sentence comes from a
search that was run.
"""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import replace

from crossplan.genetics.catalogue import Catalogue
from crossplan.genetics.chromosome import FEMALE, MALE, Sex
from crossplan.genetics.fly import make_pair
from crossplan.genetics.notation import read_genotype
from crossplan.genetics.survival import exposed_lethals, sex_of
from crossplan.schemes.forms import Source
from crossplan.schemes.search import SearchResult, Status
from crossplan.schemes.target import Refusal
from crossplan.schemes.wish import BALANCERS, MARKERS, Wish

#: helper stocks in common use, tried one at a time; the genotypes are the trade's own
HELPER_KIT: tuple[str, ...] = (
    "w[1118]",
    "w[1118]; Sco/CyO; TM3, Sb[1]/TM6B, Tb[1]",
    "w[1118]; Sco/CyO",
    "w[1118]; +; TM3, Sb[1]/TM6B, Tb[1]",
    "FM7a/w[1118]",
)

Searcher = Callable[[Wish, Sequence[Source]], SearchResult]


def helper_sources(catalogue: Catalogue) -> tuple[Source, ...]:
    """Return the kit as stocks, named by their genotypes."""
    readings = ((text, read_genotype(text, catalogue)) for text in HELPER_KIT)
    return tuple(Source(text, r.female, r.male) for text, r in readings if r.ok)


def explain_failure(
    wish: Wish, sources: Sequence[Source], result: SearchResult, search: Searcher, catalogue: Catalogue
) -> Refusal:
    """Return why the search for `wish` found nothing, with the stocks that would each unlock it.

    Args:
        wish: what was wanted.
        sources: the shelf.
        result: what the search said.
        search: runs a search for another wish or another shelf.
        catalogue: reads the helper kit.
    """
    dead = _always_dead(wish, sources)
    if dead:
        return Refusal(dead)
    how_far = f"no scheme of up to {result.searched_to} generation(s) gives these flies as a class that can be picked"
    if result.status is Status.LIMIT:
        how_far += f"; the search stopped at its limit before generation {result.searched_to + 1}"
    blocking = [words for words, easier in _easier(wish) if _works(search(easier, sources))]
    crowded = _crowded(wish)
    reason = how_far
    if crowded:
        reason += f". {crowded}"
    if blocking:
        reason += ". It would work if " + ", or if ".join(blocking)
    unlock = [s.name for s in _new_helpers(sources, catalogue) if _works(search(wish, (*sources, s)))]
    if unlock:
        reason += ". One of these stocks on the shelf would make it possible: " + "; ".join(unlock)
    return Refusal(reason, tuple(unlock))


def _new_helpers(sources: Sequence[Source], catalogue: Catalogue) -> list[Source]:
    """Return the helpers of the kit that are not on the shelf already."""
    there = {s.female for s in sources}
    return [s for s in helper_sources(catalogue) if s.female not in there]


def _always_dead(wish: Wish, sources: Sequence[Source]) -> str:
    """Return why the wanted pair of some chromosome dies whichever homologues of the shelf make it; else nothing."""
    for chromosome in dict.fromkeys(place for _, place, _ in wish.components):
        shelf = {h for s in sources for fly in (s.female, s.male) if fly is not None for h in fly.pair(chromosome)}
        sex: Sex = MALE if wish.sex == MALE else FEMALE
        wanted = [
            pair
            for one in shelf
            for other in shelf
            if wish.accepts(pair := make_pair(one, other), chromosome) and (chromosome != "X" or sex_of(pair) == sex)
        ]
        if not wanted:
            continue
        deaths = [exposed_lethals(pair, chromosome, sex) for pair in wanted]
        if all(deaths):
            groups = ", ".join(sorted(frozenset().union(*deaths)))
            names = ", ".join(f"{n}x {s}" if n > 1 else s for s, place, n in wish.components if place == chromosome)
            return (
                f"flies with {names} die: every homologue of chromosome {chromosome} on this shelf that could make them"
                f" carries the recessive lethal {groups}; it would have to be recombined away first"
            )
    return ""


def _works(result: SearchResult) -> bool:
    return bool(result.schemes)


def _easier(wish: Wish) -> list[tuple[str, Wish]]:
    """Return wishes with one requirement less, with the words for what was given up."""
    easier = []
    if BALANCERS in wish.forbid or MARKERS in wish.forbid:
        allowed = replace(wish, forbid=wish.forbid - {BALANCERS, MARKERS})
        easier.append(("the flies on the rig may carry balancers or markers", allowed))
    if wish.sex in ("female", "male"):
        other = "male" if wish.sex == "female" else "female"
        easier.append((f"{other}s would do", replace(wish, sex="male" if wish.sex == "female" else "female")))
    if any(copies > 1 for _, _, copies in wish.components):
        single = tuple((symbol, place, 1) for symbol, place, _ in wish.components)
        easier.append(("one copy of each component were enough", replace(wish, components=single)))
    if len(wish.components) > 1:
        for left_out in wish.components:
            fewer = tuple(c for c in wish.components if c != left_out)
            easier.append((f"{left_out[0]} were left out", replace(wish, components=fewer)))
    return easier


def _crowded(wish: Wish) -> str:
    """Return a remark on chromosomes that must hold more components than there are homologues."""
    for chromosome in dict.fromkeys(place for _, place, _ in wish.components):
        here = [symbol for symbol, place, _ in wish.components if place == chromosome]
        if len(here) > 2:
            return (
                f"{', '.join(here)} are {len(here)} components on chromosome {chromosome}, of which a fly has two:"
                " two of them would have to be recombined onto one homologue first"
            )
    return ""
