"""Every kind of finding: why it matters, and which cells of the row it rests on.

The source stands with the reason; where there is none it is common practice. `cells` decide how long an accepted finding
stays accepted: until one of them changes (see `accepted`).
"""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass

#: codes of the reader of genotypes share one reason each for what is refused, asked and remarked
NOT_READ = "a row that is not understood is in no plan, and nobody notices when it is lost"
ASKED = "plans rest on the reading that was taken; if it is wrong, so are they"


@dataclass(frozen=True, slots=True)
class Code:
    """One kind of finding: why it matters, and the fields of a stock that it rests on."""

    why: str
    cells: tuple[str, ...] = ("genotype",)


CODES: Mapping[str, Code] = {
    # the list itself
    "which-chromosome": Code("crosses cannot be planned with an element whose chromosome is open"),
    "two-places": Code("a screen that asks for it cannot know which insertion is meant"),
    "unknown-symbol": Code("what it shows, kills or covers is not reckoned with"),
    "assumed-marker": Code("sorting rules will use the marker that was assumed"),
    "unknown-site": Code("its chromosome and place on the map are not known, nor what else sits there"),
    "name-twice": Code("a name on a label must mean one vial", ("name",)),
    "date": Code("whether it is due for new food cannot be said", ("last_transfer",)),
    "not-a-number": Code("whether it hangs by one vial cannot be said", ("copies",)),
    "not-a-temperature": Code("how fast it must be transferred depends on it", ("temperature_C",)),
    "encoding": Code("letters may be wrong in names and genotypes", ("name",)),
    "too-many-cells": Code("cells that slipped put copies, dates and places under the wrong headings",
                           ("genotype", "copies", "last_transfer", "temperature_C", "status", "notes")),
    # whether it keeps itself
    "balancer-twice": Code("balancers die when homozygous, so no such flies exist: the row describes something else"),
    "cannot-live": Code("no such flies exist, so the row describes something else, and schemes with it fail"),
    "sterile": Code("sterile flies leave no progeny: the stock must be something else than what is written"),
    "unbalanced-lethal": Code("selection removes the lethal within a few generations, and no sign tells"),
    "no-balancer": Code("exchange makes wild-type homologues, which take the stock over (common practice)"),
    "not-fixed": Code("drift in a small vial loses one of two viable homologues within months (common practice)"),
    "floating-balancer": Code("a fly with the balancer carries one copy of what stands over it, one without it two"),
    "balancer-takes-over": Code("X balancers replace what they balance in long-kept stocks (Miller et al. 2016, PNAS"
                                " 113:E1352)"),
    "outside-cover": Code("a balancer stops exchange only between its breakpoints (Miller et al. 2018, G3 8:1161; 2020, G3"
                          " 10:4271)"),
    "partial-balancer": Code("outside the stretch that it holds, exchange goes on (common practice)"),
    # insertions
    "same-site": Code("two insertions at one site pair, and can act on each other's genes (Mellert & Truman 2012, Genetics"
                      " 191:1129)"),
    "site-of-half-driver": Code("such an effector can face one half-driver, and takes the place of the other copy (Mellert &"
                                " Truman 2012, Genetics 191:1129)"),
    "site-trouble": Code("the site itself changes the fly when both copies are hit"),
    "insertion-on-balancer": Code("sorting against the balancer throws the insertion away"),
    "not-told-apart": Code("copies of mini-white cannot be counted or told apart by eye colour (Levis et al. 1985, Science"
                           " 229:558)"),
    "eye-colour-masked": Code("picking coloured eyes keeps flies without the insertion: w[a] and red eyes pass for mini-white"
                              " (stock-centre pages on X balancers)"),
    "unseen-marker": Code("a scheme that sorts by its marker would sort blindly"),
    "near-symbol": Code("a name written two ways is two insertions to every plan", ("genotype",)),
    # what transgenes do
    "repressor-of-split": Code("GAL80 binds the activation domain of GAL4, which split drivers with p65 or VP16 do not have"
                               " (Dolan et al. 2017, Genetics 206:775, for the killer zipper instead)"),
    "warmth-twice": Code("GAL80ts needs warmth to let go (McGuire et al. 2004), and TrpA1 opens in the same warmth"),
    "lethal-together": Code("CsChrimson with elav-GAL4 was reported lethal (Aso et al. 2014, eLife 3:e04577)"),
    "jumps": Code("insertions move or are lost while transposase is there (common practice)"),
    "cuts": Code("target sites mutate until they cannot be cut, so the stock drifts (common practice)"),
    "balancer-drives": Code("GFP balancers made with Kr-GAL4 or twi-GAL4 carry a GAL4 and a UAS (from memory)"),
    "green-twice": Code("fluorescence no longer tells the balancer"),
    "too-warm": Code("temperature-sensitive proteins act at rearing temperature (Kitamoto 2001; McGuire et al. 2004)",
                     ("genotype", "temperature_C")),
    "caution": Code("the catalogue warns of it"),
    "half-missing": Code("one half of a split driver does nothing and looks normal (Luan et al. 2006, Neuron 52:425)",
                         ("genotype", "name", "notes")),
    # looks
    "sign-twice": Code("sorting by a sign that two homologues give keeps the wrong flies"),
    "unmarked-balancer": Code("flies with the balancer cannot be told from those without it"),
    "cold-sign": Code("Curly flies reared at 18 C can have straight wings (Lindsley & Zimm 1992, from memory)",
                      ("genotype", "temperature_C")),
    "looks-contradict": Code("either the vial is not what its label says, or the list is wrong", ("genotype", "notes")),
    "lethal-not-written": Code("a lethal hit beside an insertion is not in any catalogue: only the row can tell",
                               ("genotype", "notes")),
    # beside each other
    "duplicate": Code("two names for one stock are kept apart, or one of the two rows is wrong"),
    "look-alike": Code("flies that stray, or vials that are swapped, go unseen", ("genotype", "tray")),
    "near-name": Code("the wrong vial is taken", ("name",)),
    # keeping
    "single-copy": Code("one vial that dries out, moulds or is dropped ends the stock (common practice)", ("copies",)),
    "overdue": Code("old food moulds and dries, and the last flies die in it", ("last_transfer", "temperature_C")),
    "never-dated": Code("nobody sees when it becomes overdue", ("last_transfer",)),
    "no-place": Code("a stock that cannot be found is not transferred", ("tray",)),
    "no-source": Code("it cannot be obtained again, nor its constructs cited", ("source",)),
    "odd-temperature": Code("flies do not breed, or die, outside this range", ("temperature_C",)),
    "place-twice": Code("the label sends people to the wrong vial", ("tray", "vial")),
    "quarantine": Code("mites and moulds come with new stocks (common practice)", ("status",)),
    "quarantine-tray": Code("mites walk from vial to vial (common practice)", ("status", "tray")),
    "unwell": Code("a stock that breeds badly gives few virgins, and soon none", ("status",)),
    "wanted-out-of-use": Code("the targets cannot be made", ("status", "copies")),
}  # fmt: skip


def why_of(code: str) -> str:
    """Return why a kind of finding matters; those of the reader of genotypes share a reason."""
    known = CODES.get(code)
    if known is not None:
        return known.why
    return ASKED if code in _ASKED_CODES else NOT_READ


#: what the reader of genotypes asks or assumes (it refuses under all its other codes)
_ASKED_CODES = frozenset(("assumed-place", "assumed-chromosome", "other-rows", "one-homologue", "fourth", "choice", "linked",
                          "background", "invisible", "remark", "remark-only", "plus-left-out", "two-genes", "wrong-order",
                          "y-or-yellow", "look-alike-letters", "blank-in-name"))  # fmt: skip


def cells_of(code: str) -> tuple[str, ...]:
    """Return the fields of a stock that a kind of finding rests on."""
    known = CODES.get(code)
    return known.cells if known is not None else ("genotype",)
