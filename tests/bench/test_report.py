from __future__ import annotations

import re
from html.parser import HTMLParser

from example_plan import example_plan, long_plan

from crossplan.bench.report import report_html

#: fields that hold dates, hours or one of a few words
DAYS = {"date", "start", "set_up", "clear", "collect_from", "collect_to", "discard", "due"}
FIXED = DAYS | {"assay_date", "assay_from", "assay_to", "time", "timezone", "sex", "status", "kind"}
VOID = {"meta", "input", "br", "link", "img"}


class Reader(HTMLParser):
    """Reads tags, attributes and text, and checks that tags are closed in order."""

    def __init__(self, html: str) -> None:
        super().__init__()
        self.open: list[str] = []
        self.tags: list[tuple[str, dict[str, str | None]]] = []
        self.words: list[str] = []
        self.feed(html)
        self.close()
        assert self.open == []

    def handle_starttag(self, tag: str, attrs: list[tuple[str, str | None]]) -> None:
        self.tags.append((tag, dict(attrs)))
        if tag not in VOID:
            self.open.append(tag)

    def handle_endtag(self, tag: str) -> None:
        assert self.open.pop() == tag

    def handle_data(self, data: str) -> None:
        if not {"style", "script"} & set(self.open):
            self.words.append(data)

    @property
    def text(self) -> str:
        return " ".join("".join(self.words).split())


def test_it_is_well_formed_and_whole() -> None:
    text = Reader(report_html(example_plan())).text
    for part in (
        "K12 x Q07 > CsChrimson",
        "no living stock carries DBD-M31@attP2",
        "a stock with DBD-M31@attP2",
        "keep virgin females: curly wings, extra humeral bristles",
        "Mon 22 Mar 2027",
        "K12-AD stands in one vial only",
        "w1118",
    ):
        assert part in text


def test_nothing_is_fetched_from_anywhere() -> None:
    html = report_html(long_plan())
    for tag, attributes in Reader(html).tags:
        assert tag not in {"link", "img", "iframe", "object", "embed", "base", "form"}
        for name in ("src", "srcset", "action", "data", "poster"):
            assert name not in attributes
        if "href" in attributes:
            assert (attributes["href"] or "").startswith("#")
    assert not re.search(r"https?:|//|@import|url\(", re.sub(r"<!--.*?-->", "", html).replace("default-src", ""))
    assert "default-src 'none'" in html


def test_every_link_leads_somewhere() -> None:
    tags = Reader(report_html(example_plan())).tags
    names = {attributes["id"] for _, attributes in tags if "id" in attributes}
    links = {(attributes["href"] or "")[1:] for _, attributes in tags if "href" in attributes}
    assert links
    assert links <= names


def test_text_of_the_plan_is_escaped_everywhere() -> None:
    bad = "<img src=x onerror=alert(1)>\"'&</script>"
    plan = example_plan()
    dump = plan.model_dump(by_alias=True)

    def spoil(value: object, key: str = "") -> object:
        if isinstance(value, dict):
            return {k: spoil(v, k) for k, v in value.items()}
        if isinstance(value, list):
            return [spoil(v, key) for v in value]
        return bad + value if isinstance(value, str) and key not in FIXED else value

    dump["totals"], totals = {}, dump["totals"]
    spoiled = spoil(dump)
    assert isinstance(spoiled, dict)
    reader = Reader(report_html(type(plan).model_validate({**spoiled, "totals": totals})))
    assert not [tag for tag, _ in reader.tags if tag == "img"]
    assert len([tag for tag, _ in reader.tags if tag == "script"]) == 1
    assert not [a for _, attributes in reader.tags for a in attributes if a.startswith("on")]
    assert reader.text.count("<img src=x onerror=alert(1)>") > 50


def test_it_can_be_used_without_eyes_or_mouse() -> None:
    tags = Reader(report_html(example_plan())).tags
    assert ("html", {"lang": "en"}) in tags
    labels = {a.get("for") for tag, a in tags if tag == "label"}
    assert all(a.get("id") in labels for tag, a in tags if tag == "input")
    levels = [int(tag[1]) for tag, _ in tags if re.fullmatch(r"h[1-6]", tag)]
    assert levels[0] == 1
    assert all(after - before <= 1 for before, after in zip(levels, levels[1:], strict=False))


def test_same_plan_same_text() -> None:
    assert report_html(example_plan()) == report_html(example_plan())
