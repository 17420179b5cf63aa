"""Strings per second of the notation reader, beside general parsing libraries on the same grammar, in one run.

The grammar is the skeleton of a genotype: fields by semicolon, homologues by slash, symbols by blank or comma, and
brackets nested in symbols. The whole reading, which also says what every symbol is and on which chromosome, is measured by
itself. Run with `pytest tests/benchmarks --benchmark-enable`.
"""

from __future__ import annotations

from collections.abc import Callable
from random import Random
from time import perf_counter
from typing import Any, get_args

import lark
import pyparsing as pp

from crossplan.genetics.notation import read_genotype
from crossplan.genetics.notation_clean import clean
from crossplan.genetics.notation_split import split_genotype
from tests.reference.random_genotypes import Style, random_genotype

#: our skeleton against the same one in pyparsing
LEAST_RATIO = 10.0
GRAMMAR = r"""
start: (symbol? delimiter)* symbol?
delimiter: SEMICOLON | SLASH | GAP
symbol: (CHARACTERS | bracket)+
bracket: "[" inner* "]" | "{" inner* "}" | "(" inner* ")"
inner: INNER | nested
nested: "[" inner* "]" | "{" inner* "}" | "(" inner* ")"
SEMICOLON: ";"
SLASH: "/"
GAP: /[, ]+/
CHARACTERS: /[^\[\]{}();\/, ]+/
INNER: /[^\[\]{}()]+/
"""


def genotypes(of_each: int = 300) -> list[str]:
    random = Random("speed")
    texts = [random_genotype(random, style)[0] for style in get_args(Style) for _ in range(of_each)]
    return [clean(t).text for t in texts]


def pyparsing_grammar() -> pp.ParserElement:
    inner = pp.Forward()
    bracket = pp.MatchFirst([a + pp.ZeroOrMore(inner) + b for a, b in ("[]", "{}", "()")])
    inner <<= pp.Regex(r"[^\[\]{}()]+") | bracket
    symbol = pp.Combine(pp.OneOrMore(pp.Regex(r"[^\[\]{}();/, ]+") | bracket), adjacent=True)
    half = pp.Optional(pp.DelimitedList(symbol, pp.Regex("[, ]+") | pp.Empty()))
    field = half + pp.ZeroOrMore("/" + half)
    return field + pp.ZeroOrMore(";" + field)


def per_second(parse: Callable[[str], object], texts: list[str]) -> float:
    start = perf_counter()
    for text in texts:
        parse(text)
    return len(texts) / (perf_counter() - start)


def test_skeleton_against_parsing_libraries(benchmark: Any) -> None:
    texts = genotypes(20 if benchmark.disabled else 300)
    lalr = lark.Lark(GRAMMAR, parser="lalr", lexer="contextual")
    grammar = pyparsing_grammar()
    assert all(split_genotype(t)[1] is None for t in texts)

    def all_three() -> dict[str, float]:
        return {
            "ours": per_second(split_genotype, texts),
            "lark, LALR": per_second(lalr.parse, texts),
            "pyparsing": per_second(grammar.parse_string, texts),
        }

    found = benchmark.pedantic(all_three, rounds=1)
    benchmark.extra_info.update({f"{name}, strings per second": round(n) for name, n in found.items()})
    if not benchmark.disabled:
        assert found["ours"] >= LEAST_RATIO * found["pyparsing"], found


def test_whole_reading(benchmark: Any) -> None:
    """Strings per second with the meaning of every symbol."""
    texts = genotypes(20 if benchmark.disabled else 300)
    speed = benchmark.pedantic(lambda: per_second(read_genotype, texts), rounds=1)
    benchmark.extra_info["strings per second"] = round(speed)
