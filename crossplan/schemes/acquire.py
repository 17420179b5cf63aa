"""The least set of stocks to obtain: an exact set cover, with the answers that are equally small.

A target needs a list of things, each of them in one of several ways ("AD-K21", or one of three insertions at another
site). A candidate stock brings one or more such things. The fewest candidates that give every target all it needs are
found by integer programming, which proves that no smaller set does; further answers of that size are found by forbidding
those that are known. With fewer stocks than that, the most targets are unlocked.
"""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from typing import TYPE_CHECKING, Any

if TYPE_CHECKING:
    from ortools.sat.python.cp_model import CpModel, IntVar

#: what a target needs: all of these, each by any one of its things
Needs = tuple[frozenset[str], ...]
#: effort after which a proof is given up, in the solver's deterministic seconds
MOST_EFFORT = 20.0


@dataclass(frozen=True)
class LeastSets:
    """The answer.

    Attributes:
        answers: sets of candidates of the least size, each sorted, in order; empty when nothing can be unlocked.
        more: whether there are further answers of that size.
        proved: whether it is proved that no smaller set does.
        unlocked: targets that an answer unlocks.
        out_of_reach: targets that no candidates unlock.
        steps: (number of stocks, most targets that so many unlock, stocks that do), growing by one stock.
    """

    answers: tuple[tuple[str, ...], ...]
    more: bool
    proved: bool
    unlocked: tuple[str, ...]
    out_of_reach: tuple[str, ...]
    steps: tuple[tuple[int, int, tuple[str, ...]], ...]


def least_sets(
    needs: Mapping[str, Needs],
    candidates: Mapping[str, frozenset[str]],
    most_answers: int = 5,
    most_steps: int = 12,
) -> LeastSets:
    """Return the least sets of candidates that give every target all it needs.

    Args:
        needs: what each target lacks.
        candidates: what each stock that can be had brings.
        most_answers: how many equal answers are looked for.
        most_steps: up to how many stocks the most targets are worked out.
    """
    useful = {
        name: brings
        for name, brings in sorted(candidates.items())
        if any(brings & c for n in needs.values() for c in n)
    }
    brought = frozenset().union(*useful.values()) if useful else frozenset()
    reachable = {t: n for t, n in needs.items() if all(clause & brought for clause in n)}
    out_of_reach = tuple(t for t in needs if t not in reachable)
    if not reachable:
        return LeastSets((), False, True, (), out_of_reach, ())
    first, proved = _smallest(reachable, useful)
    answers, more = _equal_answers(reachable, useful, first, most_answers) if proved else ((first,), False)
    steps = _steps(reachable, useful, len(first), most_steps)
    return LeastSets(answers, more, proved, tuple(reachable), out_of_reach, steps)


class _Cover:
    """The model: one switch for each candidate, one for each target."""

    def __init__(self, needs: Mapping[str, Needs], candidates: Mapping[str, frozenset[str]]) -> None:
        from ortools.sat.python import cp_model

        self.model: CpModel = cp_model.CpModel()
        self.taken: dict[str, IntVar] = {name: self.model.new_bool_var(name) for name in candidates}
        self.met: dict[str, IntVar] = {}
        for target, clauses in needs.items():
            met = self.met[target] = self.model.new_bool_var(f"target {target}")
            for clause in sorted(clauses, key=sorted):
                bringers = [self.taken[name] for name, brings in candidates.items() if brings & clause]
                self.model.add_bool_or([*bringers, met.negated()])

    def require_all(self) -> None:
        for met in self.met.values():
            self.model.add(met == 1)

    def solve(self) -> tuple[str, tuple[str, ...], int]:
        """Return `optimal`, `feasible` or `none`, the candidates taken, and the targets met."""
        from ortools.sat.python import cp_model

        solver = cp_model.CpSolver()
        solver.parameters.num_workers = 1
        solver.parameters.random_seed = 1
        solver.parameters.max_deterministic_time = MOST_EFFORT
        status: Any = solver.solve(self.model)
        if status not in (cp_model.OPTIMAL, cp_model.FEASIBLE):
            return "none", (), 0
        taken = tuple(sorted(name for name, v in self.taken.items() if solver.boolean_value(v)))
        met = sum(solver.boolean_value(v) for v in self.met.values())
        return ("optimal" if status == cp_model.OPTIMAL else "feasible"), taken, met


def _smallest(needs: Mapping[str, Needs], candidates: Mapping[str, frozenset[str]]) -> tuple[tuple[str, ...], bool]:
    cover = _Cover(needs, candidates)
    cover.require_all()
    cover.model.minimize(sum(cover.taken.values()))
    status, taken, _ = cover.solve()
    return (taken, True) if status == "optimal" else (taken or tuple(candidates), False)


def _equal_answers(
    needs: Mapping[str, Needs], candidates: Mapping[str, frozenset[str]], first: tuple[str, ...], most: int
) -> tuple[tuple[tuple[str, ...], ...], bool]:
    cover = _Cover(needs, candidates)
    cover.require_all()
    cover.model.add(sum(cover.taken.values()) == len(first))
    answers = [first]
    while True:
        cover.model.add(sum(cover.taken[name] for name in answers[-1]) <= len(first) - 1)
        status, taken, _ = cover.solve()
        if status == "none":
            return tuple(sorted(answers)), False
        if len(answers) == most:
            return tuple(sorted(answers)), True
        answers.append(taken)


def _steps(
    needs: Mapping[str, Needs], candidates: Mapping[str, frozenset[str]], size: int, most: int
) -> tuple[tuple[int, int, tuple[str, ...]], ...]:
    """Return for 1, 2, ... stocks the most targets that so many unlock."""
    steps = []
    for number in range(1, min(size, most) + 1):
        cover = _Cover(needs, candidates)
        cover.model.add(sum(cover.taken.values()) <= number)
        cover.model.maximize(sum(cover.met.values()))
        status, taken, met = cover.solve()
        if status == "none":
            break
        steps.append((number, met, _only_needed(needs, candidates, taken, met)))
    return tuple(steps)


def _only_needed(
    needs: Mapping[str, Needs], candidates: Mapping[str, frozenset[str]], taken: Sequence[str], met: int
) -> tuple[str, ...]:
    """Leave out stocks that unlock nothing more: with a number that cannot all be used the solver may take any."""
    kept = list(taken)
    for name in taken:
        rest = [n for n in kept if n != name]
        if unlocked_by(rest, needs, candidates) == met:
            kept = rest
    return tuple(kept)


def unlocked_by(stocks: Sequence[str], needs: Mapping[str, Needs], candidates: Mapping[str, frozenset[str]]) -> int:
    """Return how many targets these stocks together unlock."""
    brought = frozenset().union(*(candidates[s] for s in stocks)) if stocks else frozenset()
    return sum(all(clause & brought for clause in clauses) for clauses in needs.values())
