"""The report in a real browser, where one is installed: it opens without errors, filters, and fits a telephone."""

from __future__ import annotations

import html
import json
import re
import shutil
import subprocess
from pathlib import Path
from typing import Any

import pytest
from example_plan import virgins_plan

from crossplan.bench.report import report_html

BROWSER = shutil.which("chromium") or shutil.which("chromium-browser") or shutil.which("google-chrome")
pytestmark = pytest.mark.skipif(BROWSER is None, reason="no browser on this machine")

DRIVER = """<script>
const errors = []; addEventListener("error", (e) => errors.push(e.message));
addEventListener("load", () => {
  const out = {errors: errors, shown: {}}; const box = document.getElementById("filter");
  const send = (what) => what.dispatchEvent(new Event("input", {bubbles: true}));
  const count = (kind) => document.querySelectorAll(kind + " .item:not([hidden])").length;
  const all = () => ["#targets", "#impossible", "#crosses", "#days"].map(count);
  out.shown.all = all();
  box.value = "empty CsChrimson"; send(box); out.shown.words = all();
  out.found = document.getElementById("found").textContent;
  out.days = document.querySelectorAll(".day:not([hidden])").length;
  document.getElementById("all").click(); out.shown.again = all();
  for (const [name, value] of [["status", "impossible"], ["generation", "2"], ["control", "yes"], ["person", "Ida"]]) {
    const choice = document.getElementById("by-" + name); choice.value = value; send(choice);
    out.shown[name] = all(); choice.value = ""; send(choice);
  }
  const scheme = document.querySelector("details.scheme"); scheme.open = true;
  scheme.dispatchEvent(new Event("toggle"));
  out.drawn = scheme.querySelectorAll(".cross").length;
  document.title = "OUT" + JSON.stringify(out);
});</script>"""


def driven(tmp_path: Path, page: str) -> Any:
    """Return what the driver found on the page."""
    place = tmp_path / "driven.html"
    place.write_text(page, encoding="utf-8")
    options = ["--headless", "--no-sandbox", "--disable-gpu", f"--user-data-dir={tmp_path / 'profile'}", "--dump-dom"]
    done = subprocess.run([str(BROWSER), *options, place.as_uri()], capture_output=True, text=True, timeout=120)
    found = re.search("<title>OUT(.*?)</title>", done.stdout)
    assert found, done.stderr[-500:]
    return json.loads(html.unescape(found.group(1)))


def test_search_and_filters(tmp_path: Path) -> None:
    page = report_html(virgins_plan())
    out = driven(tmp_path, page.replace("</body>", DRIVER + "</body>"))
    assert out["errors"] == []
    everything = out["shown"]["all"]
    assert out["shown"]["again"] == everything
    assert everything[:3] == [2, 1, 6]
    assert out["shown"]["words"][:3] == [1, 0, 2]
    assert 0 < out["days"] < len({t.date for t in virgins_plan().tasks})
    assert out["found"].endswith(f" of {int(out['found'].split()[2])} entries shown")
    assert out["shown"]["status"][:2] == [0, 1]
    assert out["shown"]["generation"][:3] == [0, 1, 1]
    assert out["shown"]["control"][:3] == [1, 0, 2]
    assert 0 < out["shown"]["person"][3] < everything[3]
    assert out["drawn"] == 4


def test_nothing_is_wider_than_a_telephone(tmp_path: Path) -> None:
    """The page is laid out in a frame of 360 pixels, as browsers do not open narrower windows than about 500."""
    inner = report_html(virgins_plan())
    frame = f'<body style="margin:0"><iframe id="f" width="360" height="800" style="border:0" srcdoc="{html.escape(inner)}">'
    script = (
        '</iframe><script>addEventListener("load", () => { const d = document.getElementById("f").contentDocument;'
        'document.title = "OUT" + JSON.stringify([d.documentElement.scrollWidth, d.documentElement.clientWidth]); });</script>'
    )
    wide, room = driven(tmp_path, f"<!DOCTYPE html><title></title>{frame}{script}")
    assert 300 < room <= 360
    assert wide <= room
