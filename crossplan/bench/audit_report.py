"""The audit of a stock list to read and to pass on: one HTML file with a filter, and CSV tables.

The look is that of the report of a plan; all text is escaped, and nothing is loaded from anywhere.
"""

from __future__ import annotations

import csv
import io
from collections.abc import Iterable, Sequence
from html import escape
from importlib.resources import files

from crossplan.errors import Severity
from crossplan.schemes.gap_report import GapReport, with_search
from crossplan.stocks.checklist import Check, check_words
from crossplan.stocks.difference import Change
from crossplan.stocks.finding import Finding

HEADINGS = {Severity.ERROR: "Errors", Severity.WARNING: "Warnings", Severity.NOTE: "Notes"}

_PAGE = """<!DOCTYPE html>
<html lang="en">
<head>
<meta charset="utf-8">
<meta name="viewport" content="width=device-width, initial-scale=1">
<meta http-equiv="Content-Security-Policy" content="default-src 'none'; style-src 'unsafe-inline'; \
script-src 'unsafe-inline'">
<title>{title}</title>
<style>
{style}</style>
</head>
<body>
<a class="skip" href="#{first}">Skip to the findings</a>
<header>
<h1>{title}</h1>
<p>{under}</p>
<nav aria-label="Sections">{links}</nav>
<p class="filter" hidden><label for="filter">Show only what has these words</label>
<input id="filter" type="search" autocomplete="off"> <output id="found" for="filter" role="status"></output></p>
</header>
<main>
{body}
</main>
<script>
{script}</script>
</body>
</html>
"""


def audit_html(path: str, stocks: int, day: str, findings: Sequence[Finding], gaps: GapReport | None = None) -> str:
    """Return the audit as one self-contained HTML document.

    Args:
        path: the stock list.
        stocks: how many rows it has.
        day: the day as of which it was judged.
        findings: what was found; those that are accepted stand in a section of their own.
        gaps: what is lacking for a screen, if one was given.
    """
    open_ones = [f for f in findings if not f.accepted]
    sections = [
        (str(severity), HEADINGS[severity], "".join(_finding(f) for f in open_ones if f.severity is severity))
        for severity in HEADINGS
    ]
    sections.append(("accepted", "Accepted", "".join(_finding(f) for f in findings if f.accepted)))
    if gaps is not None:
        sections += gap_sections(gaps)
    counts = ", ".join(
        f"{n} {word.lower()}"
        for severity, word in HEADINGS.items()
        if (n := sum(f.severity is severity for f in open_ones))
    )
    return page(f"Audit of {path}", f"{stocks} stocks, as of {day}: {counts or 'nothing found'}", sections)


def page(title: str, under: str, sections: Iterable[tuple[str, str, str]]) -> str:
    """Return a page of (id, title, HTML) sections; empty ones are left out."""
    shown = [s for s in sections if s[2]]
    links = "".join(f'<a href="#{key}">{escape(words)}</a>' for key, words, _ in shown)
    body = "".join(
        f'<section id="{key}" aria-labelledby="{key}-h"><h2 id="{key}-h">{escape(words)}</h2>{html}</section>'
        for key, words, html in shown
    )
    return _PAGE.format(
        title=escape(title), under=escape(under), links=links, body=body, first=shown[0][0] if shown else "top",
        style=_part("report.css"), script=_part("report.js"),
    )  # fmt: skip


def _part(name: str) -> str:
    return (files("crossplan.bench") / name).read_text(encoding="utf-8")


def _finding(finding: Finding) -> str:
    facts = [
        ("why it matters", finding.why),
        ("what to do", finding.suggestion),
        ("stocks", ", ".join(finding.stocks) if len(finding.stocks) > 1 else ""),
        ("accepted because", finding.accepted),
    ]
    where = f"row {finding.row}, {finding.stock}" if finding.row else finding.stock
    return _article(where, finding.code, finding.message, facts)


def _article(heading: str, mark: str, message: str, facts: Iterable[tuple[str, str]]) -> str:
    told = "".join(f"<div><dt>{escape(w)}</dt><dd>{escape(v)}</dd></div>" for w, v in facts if v)
    return (
        f'<article class="item"><h3>{escape(heading)} <span class="mark">{escape(mark)}</span></h3>'
        f"<p>{escape(message)}</p>{f'<dl>{told}</dl>' if told else ''}</article>"
    )


def gap_sections(report: GapReport) -> list[tuple[str, str, str]]:
    """Return what a shelf lacks for a screen, as sections of a page."""
    targets = "".join(_target(report, i) for i in range(len(report.gaps.targets)))
    least = _bullets(" + ".join(answer) for answer in report.least.answers)
    if report.least.more:
        least += "<p>There are further answers of this size.</p>"
    steps = _table(
        ("stocks", "targets unlocked", "which"),
        [(str(n), str(met), ", ".join(which)) for n, met, which in report.least.steps],
    )
    obtain = _table(
        ("what", "unlocks by itself", "needed by"),
        [(u.what, str(u.alone), ", ".join(u.needed_by)) for u in report.unlocks],
    )
    bases = _table(
        ("a stock of both", "may shorten", "shorter when tried"),
        [(" and ".join(b.base.components), ", ".join(b.base.shortens), ", ".join(b.shorter)) for b in report.bases],
    )
    hangs = _table(
        ("stock", "copies", "alone carries", "targets"),
        [
            (h.stock, str(report.copies.get(h.stock) or "?"), ", ".join(h.carries), ", ".join(h.targets))
            for h in report.gaps.hangs_by
        ],
    )  # fmt: skip
    helpers = _table(("helper stock", "such as", "for"), [(h.what, h.example, h.why) for h in report.helpers])
    return [
        ("targets", f"Targets of {report.name}", targets),
        ("least", "Least sets of stocks to obtain", least),
        ("most", "Most targets for so many stocks", steps),
        ("obtain", "What each unlocks", obtain),
        ("bases", "Base stocks that would shorten targets", bases),
        ("hangs", "Targets that hang by one stock", hangs),
        ("helpers", "Helper stocks that are lacking", helpers),
    ]


def _target(report: GapReport, number: int) -> str:
    gap = report.gaps.targets[number]
    made = report.made.get(gap.target)
    whole = with_search(gap, made)
    if made is not None and made.generations is not None:
        generations = f"{made.generations}, {'proved minimal' if made.proved_minimal else 'not proved minimal'}"
    else:
        generations = f"at least {gap.at_least}" if gap.at_least and whole.status == "parts there" else ""
    needs = "; ".join(" or ".join(sorted(clause)) for clause in gap.needs)
    facts = [("generations", generations), ("to obtain", needs), ("cautions", "; ".join(gap.cautions))]
    return _article(gap.target, whole.status, whole.reason or ", ".join(gap.components), facts)


def _bullets(texts: Iterable[str]) -> str:
    items = "".join(f'<li class="item">{escape(text)}</li>' for text in texts)
    return f"<ul>{items}</ul>" if items else ""


def _table(headings: Sequence[str], rows: Sequence[Sequence[str]]) -> str:
    if not rows:
        return ""
    head = "".join(f'<th scope="col">{escape(h)}</th>' for h in headings)
    body = "".join(f'<tr class="item">{"".join(f"<td>{escape(c)}</td>" for c in row)}</tr>' for row in rows)
    return f"<table><thead><tr>{head}</tr></thead><tbody>{body}</tbody></table>"


# -- CSV -------------------------------------------------------------------------------------------------------------


def findings_csv(findings: Iterable[Finding]) -> str:
    """Return the findings as a CSV table, one a row."""
    return csv_text(
        ("severity", "code", "row", "stock", "message", "why", "suggestion", "stocks", "accepted"),
        (
            (str(f.severity), f.code, str(f.row), f.stock, f.message, f.why, f.suggestion, " ".join(f.stocks), f.accepted)
            for f in findings
        ),
    )  # fmt: skip


def changes_csv(changes: Iterable[Change]) -> str:
    """Return the differences of two stock lists as a CSV table."""
    return csv_text(
        ("kind", "stock", "chromosome", "before", "after", "message"),
        ((c.kind, c.stock, c.chromosome, c.before, c.after, c.message) for c in changes),
    )


def checks_csv(checks: Iterable[Check]) -> str:
    """Return the yearly check list as a CSV table, with columns to fill in."""
    rows = (
        (
            c.stock.tray, c.stock.vial, c.stock.name, c.stock.reading.canonical, check_words(c.must_show),
            ", ".join(c.may_show), "; ".join(c.tests), "", "", "",
        )
        for c in checks
    )  # fmt: skip
    return csv_text(
        ("tray", "vial", "stock", "genotype", "all flies show", "some flies show", "test", "seen", "by", "date"), rows
    )


def gaps_csv(report: GapReport) -> str:
    """Return the targets of a screen as a CSV table: status, generations, what to obtain."""
    rows = []
    for gap in report.gaps.targets:
        made = report.made.get(gap.target)
        whole = with_search(gap, made)
        generations = made.generations if made else gap.at_least if gap.status == "in stock" else None
        rows.append((
            gap.target, whole.status, "" if generations is None else str(generations),
            "" if gap.at_least is None else str(gap.at_least),
            "; ".join(" or ".join(sorted(c)) for c in gap.needs), whole.reason, "; ".join(gap.cautions),
        ))  # fmt: skip
    return csv_text(("target", "status", "generations", "at least", "to obtain", "reason", "cautions"), rows)


def csv_text(headings: Sequence[str], rows: Iterable[Sequence[str]]) -> str:
    """Return a CSV table; a cell that a spreadsheet would take for a formula is led by an apostrophe."""
    out = io.StringIO()
    writer = csv.writer(out, lineterminator="\n")
    writer.writerow(headings)
    writer.writerows([_cell(c) for c in row] for row in rows)
    return out.getvalue()


def _cell(text: str) -> str:
    # a lone + is a wild-type chromosome, and harmless
    return f"'{text}" if text[:1] in ("=", "@", "\t", "\r") or (text[:1] in "+-" and text[1:2].isalnum()) else text
