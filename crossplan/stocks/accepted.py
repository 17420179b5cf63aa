"""Findings that somebody has looked at and accepted, with the reason: a small TOML file beside the stock list.

    [[accept]]
    code = "single-copy"
    stock = "PT051"
    reason = "the stock centre has it"
    row = "5c0e0f6f1d3a"

`row` is a fingerprint of the cells on which such a finding rests (for a single copy, the number of copies; for a genotype,
the genotype), of every stock concerned. It is written by crossplan. When one of those cells changes the finding is open
again, and the entry is reported as stale. A new date of transfer does not reopen a question about a genotype.
"""

from __future__ import annotations

import hashlib
import tomllib
from collections.abc import Iterable, Mapping, Sequence
from dataclasses import dataclass, replace
from pathlib import Path

from crossplan.errors import InputError, Problem, Severity
from crossplan.stocks.audit_codes import cells_of
from crossplan.stocks.finding import Finding
from crossplan.stocks.shelf import Shelf

#: digits of the fingerprint: enough that two states of a row never share one
DIGITS = 12
_NEEDED = ("code", "stock", "reason", "row")


@dataclass(frozen=True, slots=True)
class Accepted:
    """One accepted finding."""

    code: str
    stock: str
    reason: str
    row: str


def fingerprint(finding: Finding, shelf: Shelf) -> str:
    """Return a short digest of the cells on which the finding rests, of all stocks that it concerns."""
    parts = [finding.code]
    for name in finding.stocks or (finding.stock,):
        stock = shelf.by_name(name)
        parts += [name, *(str(getattr(stock, cell)) for cell in cells_of(finding.code) if stock is not None)]
    return hashlib.sha256("\x1f".join(parts).encode()).hexdigest()[:DIGITS]


def read_accepted(path: Path) -> tuple[Accepted, ...]:
    """Return the accepted findings of a file; none when there is no file yet.

    Raises:
        InputError: the file is no TOML, or an entry lacks something.
    """
    if not path.exists():
        return ()
    try:
        data = tomllib.loads(path.read_text(encoding="utf-8-sig"))
    except (OSError, UnicodeDecodeError, tomllib.TOMLDecodeError) as error:
        raise InputError(f"cannot read {path}: {error}", "it is a TOML file with [[accept]] tables") from error
    entries = data.get("accept", [])
    strange = sorted(set(data) - {"accept"})
    if strange or not isinstance(entries, list):
        raise InputError(f"{path}: '{strange[0] if strange else 'accept'}' is not known", "write [[accept]] tables")
    return tuple(_entry(path, number, entry) for number, entry in enumerate(entries, start=1))


def _entry(path: Path, number: int, entry: Mapping[str, object]) -> Accepted:
    missing = [k for k in _NEEDED if not isinstance(entry.get(k), str) or not entry[k]]
    if missing:
        raise InputError(
            f"{path}: the {number}. [[accept]] has no {missing[0]}",
            "each needs code, stock, reason and row; `crossplan accept` writes them",
        )
    return Accepted(*(str(entry[k]) for k in _NEEDED))


def mark_accepted(
    findings: Sequence[Finding], accepted: Iterable[Accepted], shelf: Shelf, path: str = ""
) -> tuple[tuple[Finding, ...], tuple[Problem, ...]]:
    """Return the findings with the reasons of those that are accepted, and a note for each entry that fits none.

    Args:
        findings: of the audit.
        accepted: what `read_accepted` read.
        shelf: the stock list that was audited.
        path: the file of accepted findings, for the notes.
    """
    entries = {(a.code, a.stock, a.row): a for a in accepted}
    used = set()
    marked = []
    for finding in findings:
        key = (finding.code, finding.stock, fingerprint(finding, shelf))
        entry = entries.get(key)
        if entry is not None:
            used.add(key)
        marked.append(finding if entry is None else replace(finding, accepted=entry.reason))
    stale = tuple(
        Problem("stale-acceptance", Severity.NOTE, f"'{a.code}' of {a.stock} was accepted, and is gone or has changed",
                "take the entry out, or accept the finding anew", path)
        for key, a in entries.items()
        if key not in used
    )  # fmt: skip
    return tuple(marked), stale


def accept(
    accepted: Iterable[Accepted], findings: Iterable[Finding], shelf: Shelf, code: str, stock: str, reason: str
) -> tuple[Accepted, ...]:
    """Return the accepted findings with one more; an older entry for the same code and stock is replaced.

    Raises:
        InputError: the audit has no such finding, or no reason is given.
    """
    if not reason.strip():
        raise InputError("an accepted finding needs a reason", 'write it in words: --because "the centre has it"')
    there = [f for f in findings if f.code == code and f.stock == stock]
    if not there:
        near = sorted({f.code for f in findings if f.stock == stock})
        raise InputError(
            f"the audit finds no '{code}' for {stock}",
            f"for {stock} it finds {', '.join(near)}" if near else "name code and stock as the audit prints them",
        )
    kept = [a for a in accepted if (a.code, a.stock) != (code, stock)]
    new = [Accepted(code, stock, reason.strip(), fingerprint(f, shelf)) for f in there]
    return (*kept, *dict.fromkeys(new))


def accepted_toml(accepted: Iterable[Accepted]) -> str:
    """Return the file of accepted findings as text, in order of stock and code."""
    ordered = sorted(accepted, key=lambda a: (a.stock, a.code, a.row))
    tables = [
        "\n".join(("[[accept]]", *(f"{k} = {_quoted(getattr(a, k))}" for k in _NEEDED))) + "\n" for a in ordered
    ]  # fmt: skip
    return "# findings of the audit that were looked at and accepted; each holds until its row changes\n\n" + "\n".join(
        tables
    )


def _quoted(text: str) -> str:
    escaped = text.replace("\\", "\\\\").replace('"', '\\"')
    return '"' + "".join(c if c.isprintable() else f"\\u{ord(c):04x}" for c in escaped) + '"'
