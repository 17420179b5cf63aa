"""Stock lists made from a seed: sound rows as labs write them, and rows with one known fault each."""

from __future__ import annotations

import datetime as dt
import random
from collections.abc import Callable, Iterable
from dataclasses import dataclass, field

from crossplan.errors import Severity

TODAY = dt.date(2026, 12, 1)
HEAD = ("stock", "genotype", "copies", "temp", "last flip", "tray", "vial", "source", "status", "notes")
SITES_2 = ("attP40", "VK00018", "VK00001", "VK00022", "su(Hw)attP5", "attP16")
SITES_3 = ("attP2", "VK00005", "VK00027", "VK00033", "ZH-86Fb")
LETTERS = "abcdefghjkmnpqrstuvwxyz"


@dataclass
class Row:
    """One row of a list."""

    stock: str = ""
    genotype: str = "w[1118]"
    copies: str = "2"
    temp: str = "18"
    flip: str = "2026-11-25"
    tray: str = ""
    vial: str = ""
    source: str = "made here"
    status: str = "ok"
    notes: str = ""

    def cells(self) -> tuple[str, ...]:
        return (self.stock, self.genotype, self.copies, self.temp, self.flip, self.tray, self.vial, self.source,
                self.status, self.notes)  # fmt: skip


@dataclass(frozen=True)
class Fault:
    """A known fault: rows that go into the list together, and the row (by its place among them) that is to be found."""

    code: str
    severity: Severity
    rows: list[Row] = field(compare=False)
    at: int = 0


class Maker:
    """Makes rows from a seed; every construct has a number of its own, so that no two rows are alike by chance."""

    def __init__(self, seed: int) -> None:
        self.random = random.Random(seed)
        self.number = 0

    def new(self) -> int:
        self.number += 1
        return self.number

    def pick(self, *choices: str) -> str:
        return self.random.choice(choices)

    def word(self, letters: int = 3) -> str:
        return "".join(self.random.choice(LETTERS) for _ in range(letters))

    # parts ----------------------------------------------------------------------------------------------------

    def white(self) -> str:
        return self.pick("w[1118]", "w", "y w", "w[*]", "y[1] w[1118]", "w1118")

    def insertion(self, kind: str, site: str) -> str:
        n = self.new()
        name = {"AD": f"AD-K{n}", "DBD": f"DBD-Q{n}", "GAL4": f"{self.word()}{n}-GAL4", "UAS": f"UAS-{self.word()}{n}",
                "op": f"LexAop-{self.word()}{n}"}[kind]  # fmt: skip
        return self.pick(f"{name}@{site}", f"{name}({site})", f"P{{y[+t7.7] w[+mC]={name}}}{site}")

    def on_2(self, kind: str = "") -> str:
        return self.insertion(kind or self.pick("AD", "UAS", "GAL4", "op"), self.random.choice(SITES_2))

    def on_3(self, kind: str = "") -> str:
        return self.insertion(kind or self.pick("DBD", "UAS", "GAL4", "op"), self.random.choice(SITES_3))

    def lethal(self, chromosome: int) -> str:
        return self.pick(
            f"l({chromosome}){self.word()}{self.new()}[1]", f"l({chromosome}){self.new()}{self.word(2)}[{self.new()}]"
        )

    def bal_2(self) -> str:
        return self.pick("CyO", "CyO", "SM6a", "SM5")

    def bal_3(self) -> str:
        return self.pick("TM3, Sb", "TM3, Sb[1]", "TM6B, Tb", "TM6B, Tb[1]", "TM3, Ser", "TM2", "TM6C, Sb")

    # sound rows -----------------------------------------------------------------------------------------------

    def sound_genotype(self) -> str:
        forms: list[Callable[[], str]] = [
            lambda: f"{self.white()}; {self.on_2()}; +",
            lambda: f"{self.white()};; {self.on_3()}",
            lambda: f"{self.white()}; {self.on_2()}; {self.on_3()}",
            lambda: f"{self.white()}; {self.on_2()}/{self.bal_2()}; +",
            lambda: f"{self.white()}; +; {self.on_3()}/{self.bal_3()}",
            lambda: f"{self.white()}; {self.on_2()}/CyO; {self.on_3()}/TM6B, Tb",
            lambda: f"{self.white()}; Sco/CyO; {self.on_3()}/TM6B, Tb",
            lambda: f"{self.white()}; {self.on_2()}/CyO; TM3, Sb/TM6B, Tb",
            lambda: f"{self.white()}; {self.on_2()}; MKRS/TM6B, Tb",
            lambda: f"{self.white()}; {self.lethal(2)}/{self.bal_2()}",
            lambda: f"{self.white()};; {self.lethal(3)}/{self.bal_3()}",
            lambda: f"{self.white()}; cn[1] {self.lethal(2)}/CyO; +",
            lambda: f"l(1){self.word()}{self.new()}[1]/FM7c",
            lambda: f"w[1118] {self.insertion('UAS', 'attP18')}; +; +",
            lambda: f"w[1118] {self.insertion('UAS', 'attP18')}; Sco/CyO; +",
            lambda: f"y[1] v[1]; P{{y[+t7.7] v[+t1.8]=UAS-{self.word()}{self.new()}.IR}}attP40",
            lambda: f"y[1] sc[1] v[1];; P{{y[+t7.7] v[+t1.8]=UAS-{self.word()}{self.new()}.IR}}attP2",
            lambda: f"{self.white()}; {self.on_2('AD')}; {self.on_3('DBD')}",
            lambda: f"{self.white()}; {self.on_2('AD')}/CyO; {self.on_3('DBD')}/TM6B, Tb[1]",
            lambda: f"+; {self.on_2('op')}; +",
            lambda: f"{self.white()}; FRT42D {self.lethal(2)}/CyO",
        ]
        return self.random.choice(forms)()

    def row(self, genotype: str = "", **cells: str) -> Row:
        temperature = self.pick("18", "18", "25", "RT")
        days = self.random.randint(0, {"18": 40, "25": 20, "RT": 30}[temperature])
        made = Row(
            genotype=genotype or self.sound_genotype(), copies=self.pick("2", "2", "3", "4"), temp=temperature,
            flip=(TODAY - dt.timedelta(days=days)).isoformat(),
            source=self.pick("made here", "Heron lab 2019", "injected 2021", "Linnet lab"),
            status=self.pick("ok", "ok", "", "backup"),
            notes=self.pick("", "", "", "healthy", "for the course", "keep in the dark", "white eyes?", "from Maren"),
        )  # fmt: skip
        for name, value in cells.items():
            setattr(made, name, value)
        return made


# -- faults: one function a kind, each with chance in it ---------------------------------------------------------------

E, W, N = Severity.ERROR, Severity.WARNING, Severity.NOTE


def _one(code: str, severity: Severity, genotype: str, m: Maker, **cells: str) -> Fault:
    return Fault(code, severity, [m.row(genotype, **cells)])


def _pair(code: str, severity: Severity, at: int, *rows: Row) -> Fault:
    return Fault(code, severity, list(rows), at)


def _twin_names(m: Maker) -> tuple[str, str]:
    word = "".join(m.random.choice(LETTERS) for _ in range(7))
    k = m.random.randrange(2, 6)
    other = m.random.choice([c for c in LETTERS if c != word[k]])
    return word, m.random.choice([word[:k] + word[k + 1 :], word[:k] + other + word[k + 1 :]])


def _near_symbols(m: Maker) -> Fault:
    one, other = _twin_names(m)
    site = m.random.choice(SITES_2)
    return _pair("near-symbol", W, 2, m.row(f"w; UAS-{one}@{site}"), m.row(f"w; UAS-{one}@{site}/CyO"),
                 m.row(f"w; UAS-{other}@{site}"))  # fmt: skip


def _near_names(m: Maker) -> Fault:
    one, other = _twin_names(m)
    return _pair("near-name", W, 1, m.row(stock=one), m.row(stock=other))


def _duplicate(m: Maker) -> Fault:
    part, site = m.on_2("AD"), ""
    del site
    return _pair("duplicate", W, 1, m.row(f"w[1118]; {part}; +", notes=""), m.row(f"w[1118]; {part}", notes=""))


def _look_alike(m: Maker) -> Fault:
    tray = f"L{m.new()}"
    one, other = m.random.choice([("TM3, Sb", "MKRS"), ("TM3, Sb[1]", "TM6C, Sb")])
    partner = "TM6B, Tb" if other == "MKRS" else "TM2"
    marker = m.pick("Sco", "If", "Sp", "Bl", "Gla")
    return _pair("look-alike", W, 1, m.row(f"w; {marker}/CyO; {one}/{partner}", tray=tray, vial="1"),
                 m.row(f"w; {marker}/CyO; {other}/{partner}", tray=tray, vial="2"))  # fmt: skip


def _two_places(m: Maker) -> Fault:
    name = f"UAS-{m.word()}{m.new()}"
    return _pair("two-places", N, 0, m.row(f"w; {name}/CyO"), m.row(f"w;; {name}/TM3, Sb"))


def _name_twice(m: Maker) -> Fault:
    name = f"{m.word(2)}{m.new()}"
    return _pair("name-twice", W, 1, m.row(stock=name), m.row(stock=name))


def _place_twice(m: Maker) -> Fault:
    tray = f"P{m.new()}"
    return _pair("place-twice", W, 1, m.row(tray=tray, vial="7"), m.row(tray=tray, vial="7"))


def _quarantine_tray(m: Maker) -> Fault:
    tray = f"Q{m.new()}"
    return _pair("quarantine-tray", W, 0, m.row(tray=tray, vial="1", status="quarantine"), m.row(tray=tray, vial="2"))


def _shared_site(m: Maker) -> Fault:
    site = m.random.choice(SITES_2)
    return _pair(
        "site-of-half-driver", N, 1, m.row(f"w; AD-K{m.new()}@{site}"), m.row(f"w; UAS-{m.word()}{m.new()}@{site}")
    )


def _same_site(m: Maker) -> Fault:
    site = m.random.choice(SITES_2)
    return _one("same-site", W, f"w; AD-K{m.new()}@{site}/UAS-{m.word()}{m.new()}@{site}", m)


def _overdue(m: Maker) -> Fault:
    temperature, least = m.random.choice([("18", 43), ("25", 22), ("RT", 33)])
    days = least + m.random.randrange(0, 90)
    return _one("overdue", W, "", m, temp=temperature, flip=(TODAY - dt.timedelta(days=days)).isoformat())


def _sentence(m: Maker, *sentences: str) -> str:
    return m.pick(*sentences)


FAULTS: tuple[Callable[[Maker], Fault], ...] = (
    # what cannot be read, or cannot be
    lambda m: _one("three-homologues", E, f"w; {m.pick('Sco', 'If', 'Sp')}/CyO/{m.on_2()}", m),
    lambda m: _one("bracket", E, f"w[1118; {m.on_2()}/CyO", m),
    lambda m: _one("chromosomes-disagree", E, f"w; {m.on_2()}/{m.pick('TM3, Sb', 'TM6B, Tb', 'MKRS')}; +", m),
    lambda m: _one("balancer-typo", E, f"w; {m.on_2()}/{m.pick('CyOo', 'CYOO', 'SM6aa')}", m),
    lambda m: _one("which-chromosome", E, f"w; UAS-{m.word()}{m.new()}", m),
    lambda m: _one("five-fields", E, f"w; {m.on_2()}; {m.on_3()}; +; +", m),
    lambda m: _one("two-balancers", E, f"w; CyO SM6a/{m.on_2()}", m),
    lambda m: _one("same-site", E, f"w; AD-K{m.new()}@VK00018, UAS-{m.word()}{m.new()}@VK00018; +", m),
    lambda m: _one("assumed-place", W, f"UAS-{m.word()}{m.new()}; Sco/CyO", m),
    lambda m: _one("unknown-symbol", N, f"w; {m.word()}{m.new()}[1]/CyO; +", m),
    lambda m: _one("unknown-site", W, f"w; UAS-{m.word()}{m.new()}@attP{m.pick('41', '99', '22')}; +", m),
    lambda m: _one("assumed-marker", N, f"w;; {m.on_3()}/TM6B", m),
    _two_places,
    _name_twice,
    lambda m: _one("date", W, "", m, flip=f"0{m.pick('3', '4', '5')}/1{m.pick('1', '2', '0')}/26"),
    lambda m: _one("date", W, "", m, flip=(TODAY + dt.timedelta(days=m.random.randint(1, 300))).isoformat()),
    lambda m: _one("not-a-number", W, "", m, copies=m.pick("some", "2-3", "two")),
    lambda m: _one("not-a-temperature", W, "", m, temp=m.pick("warm", "fridge", "hot")),
    # what cannot keep itself
    lambda m: _one("balancer-twice", E, f"w; {(b := m.bal_2())}/{b}; {m.on_3()}", m),
    lambda m: _one("cannot-live", E, f"w; {m.on_2()}; {m.pick('TM3, Sb/MKRS', 'TM6C, Sb/MKRS', 'TM3, Sb/TM6C, Sb')}", m),
    lambda m: _one("cannot-live", E, f"w; {m.lethal(2)}; {m.on_3()}", m),
    lambda m: _one("cannot-live", E, f"l(1){m.word()}{m.new()}[1]; {m.on_2()}; +", m),
    lambda m: _one("sterile", E, f"sn[X2]; {m.on_2()}; +", m),
    lambda m: _one("unbalanced-lethal", E, f"w; {m.lethal(2)}/+; {m.on_3()}", m),
    lambda m: _one("unbalanced-lethal", E, f"w; {m.on_2()}; {m.lethal(3)}/+", m),
    lambda m: _one("no-balancer", W, f"w; {m.lethal(2)}/{m.lethal(2)}; +", m),
    lambda m: _one("not-fixed", W, f"w; {m.on_2()}/+; +", m),
    lambda m: _one("not-fixed", W, f"w; {m.on_2()}; {m.on_3()}/+", m),
    lambda m: _one("floating-balancer", N, f"w; {m.on_2()}/{m.bal_2()}; +", m),
    lambda m: _one("balancer-takes-over", N, f"l(1){m.word()}{m.new()}[1]/{m.pick('FM7a', 'Basc', 'FM7d')}", m),
    lambda m: _one("outside-cover", N, f"w;; {m.insertion('UAS', 'VK00031')}/TM3, Sb", m),
    lambda m: _one("outside-cover", N, f"w; {m.insertion('AD', 'VK00037')}/CyO", m),
    lambda m: _one("partial-balancer", W, f"w;; {m.lethal(3)}/MKRS", m),
    # insertions
    _same_site,
    _shared_site,
    lambda m: _one("site-trouble", N, f"w; {m.insertion('AD', 'attP40')}; +", m),
    lambda m: _one("insertion-on-balancer", N, f"w; {m.pick('Sco', 'If')}/CyO, UAS-{m.word()}{m.new()}; +", m),
    lambda m: _one("not-told-apart", W, f"w; UAS-{m.word()}{m.new()}@VK00018/UAS-{m.word()}{m.new()}@VK00001; +", m),
    lambda m: _one("eye-colour-masked", N, f"w[1118]/{m.pick('FM7a', 'FM7d', 'Basc')}; {m.on_2('UAS')}/CyO; +", m),
    lambda m: _one("unseen-marker", N, f"w; P{{y[+t7.7] v[+t1.8]=UAS-{m.word()}{m.new()}.IR}}attP40/CyO; +", m),
    _near_symbols,
    # what transgenes do
    lambda m: _one("repressor-of-split", W, f"w; {m.on_2('AD')}/CyO; tubP-GAL80ts@{m.pick('attP2', 'VK00005')}/TM6B, Tb", m),
    lambda m: _one("warmth-twice", W, f"w; UAS-dTrpA1@VK00018/CyO; tubP-GAL80ts@{m.pick('attP2', 'VK00005')}/TM6B, Tb", m),
    lambda m: _one("lethal-together", W, f"w; elav-GAL4@{m.pick('VK00018', 'attP16')}; UAS-CsChrimson@VK00005/TM6B, Tb", m),
    lambda m: _one("jumps", W, f"w; {m.on_2('UAS')}/CyO; Delta2-3/TM6B, Tb", m),
    lambda m: _one("cuts", W, f"w; vas-Cas9@VK00018/CyO; U6-{m.word()}{m.new()}-gRNA@attP2/TM6B, Tb", m),
    lambda m: _one("balancer-drives", W, f"w; UAS-{m.word()}{m.new()}@VK00018/{m.pick('CyO, Kr-GFP', 'CyO, twi-GFP')}; +", m),
    lambda m: _one("green-twice", N, f"w; UAS-mCD8-GFP@{m.pick('VK00018', 'VK00022')}/CyO, ActGFP; +", m),
    lambda m: _one("too-warm", W, f"w; {m.on_2('GAL4')}; tubP-GAL80ts@attP2", m, temp="25", flip="2026-11-25"),
    lambda m: _one("caution", N, f"w; {m.on_2()}; {m.pick('MKRS', 'TM2')}/TM6B, Tb", m),
    lambda m: _one("half-missing", W, f"w; {m.on_2('AD')}; +", m,
                   notes=_sentence(m, "split line", "split-GAL4 of the course", "our split driver")),
    # looks
    lambda m: _one("sign-twice", N, f"w; {m.on_2()}/CyTb; TM2/TM6B, Tb", m),
    lambda m: _one("unmarked-balancer", W, f"l(1){m.word()}{m.new()}[1]/Inscy", m),
    lambda m: _one("unmarked-balancer", W, f"w;; {m.lethal(3)}/TM3-GFP", m),
    lambda m: _one("cold-sign", N, f"w; {m.on_2()}/CyO; +", m, temp="18"),
    lambda m: _one("looks-contradict", W, f"w[1118]; Sco/CyO; {m.lethal(3)}/TM3, Sb", m,
                   notes=_sentence(m, "red eyes", "orange eyes", "straight wings", "yellow body")),
    lambda m: _one("looks-contradict", W, f"w[1118]; {m.on_2()}; +", m,
                   notes=_sentence(m, "white eyes", "curly wings", "stubble bristles", "bar eyes")),
    lambda m: _one("lethal-not-written", W, f"w; {m.on_2()}/CyO; +", m,
                   notes=_sentence(m, "homozygous lethal", "no homozygotes", "lethal when homozygous")),
    # beside each other
    _duplicate,
    _look_alike,
    _near_names,
    # keeping
    lambda m: _one("single-copy", W, "", m, copies="1"),
    _overdue,
    lambda m: _one("never-dated", N, "", m, flip=""),
    lambda m: _one("no-place", N, "", m, tray="-"),
    lambda m: _one("no-source", N, "", m, source=""),
    lambda m: _one("odd-temperature", W, "", m, temp=m.pick("4", "8", "37", "81"), flip="2026-11-30"),
    _place_twice,
    lambda m: _one("quarantine", N, "", m, status=m.pick("quarantine", "in quarantine")),
    _quarantine_tray,
    lambda m: _one("unwell", W, "", m, status=m.pick("sick", "weak", "mites!", "mouldy")),
)  # fmt: skip


def sound_list(seed: int, rows: int) -> list[Row]:
    """Return a list without faults."""
    maker = Maker(seed)
    return numbered([maker.row() for _ in range(rows)])


def faulty_list(seed: int, of_each: int, sound: int) -> tuple[list[Row], list[tuple[Fault, str]]]:
    """Return a list with faults among sound rows, and each fault with the name of the stock it is in."""
    maker = Maker(seed)
    faults = [make(maker) for make in FAULTS for _ in range(of_each)]
    blocks: list[list[Row]] = [f.rows for f in faults] + [[maker.row()] for _ in range(sound)]
    maker.random.shuffle(blocks)
    rows = numbered([row for block in blocks for row in block])
    return rows, [(f, f.rows[f.at].stock) for f in faults]


def numbered(rows: list[Row]) -> list[Row]:
    """Give every row that has none a name and a place."""
    for i, row in enumerate(rows):
        row.stock = row.stock or f"S{i:05d}"
        if row.tray == "-":
            row.tray = ""
        elif not row.tray:
            row.tray, row.vial = f"T{i // 100:03d}", str(i % 100 + 1)
    return rows


def as_text(rows: Iterable[Row]) -> str:
    """Return the list as a table, cells divided by a stroke."""
    return "\n".join("|".join(cells) for cells in (HEAD, *(r.cells() for r in rows))) + "\n"
