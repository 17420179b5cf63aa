"""General safety reminders that are printed with a plan, each with its source.

They remind, and replace no training: local rules, the safety officer and licensed practice come first. No
figure here is a permission.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import Final

from crossplan.plan.model import Plan


@dataclass(frozen=True, slots=True)
class Reminder:
    """One reminder: topic, text, source, and the words of a plan that call for it (none: always)."""

    topic: str
    text: str
    source: str
    called_by: tuple[str, ...] = ()


REMINDERS: Final[tuple[Reminder, ...]] = (
    Reminder(
        "local rules",
        "Local rules, your safety officer and the licences of your institute come before anything printed here.",
        "common practice, no source",
    ),
    Reminder(
        "carbon dioxide",
        "Carbon dioxide for anaesthesia is heavier than air and collects in low or closed rooms: ventilate, "
        "fix the "
        "cylinder, shut the valve at night; small or cold rooms need an alarm.",
        "common practice; occupational limits are set by your country",
    ),
    Reminder(
        "carbon dioxide and flies",
        "Keep flies under carbon dioxide as briefly as you can, some minutes rather than tens, and let "
        "flies for "
        "behaviour recover before they are tested.",
        "MacMillan et al. 2017, J Insect Physiol 101:97",
    ),
    Reminder(
        "ether",
        "Do not use diethyl ether if you can avoid it: its vapour creeps and ignites, and old bottles hold "
        "explosive "
        "peroxides. A chilled plate needs no gas.",
        "Ratterman 2003, ABLE Proceedings 24 (fire and health hazard, chilled plate); peroxides: common practice",
    ),
    Reminder(
        "allergy",
        "Flies and their dust can make people allergic, more so the more they work with them: close the "
        "morgue, "
        "filter or extract the gas outlet, do not shake old vials in the open, report itching eyes, nose or "
        "chest.",
        "Jones et al. 2017, Occup Environ Med 74:422; the measures are common practice",
    ),
    Reminder(
        "transgenic flies",
        "Transgenic flies stay inside: closed plugs, traps, no live culture in the bin; freeze waste for a "
        "day or "
        "more, or autoclave it. Your biosafety committee decides on the level and on moving flies.",
        "common practice; Arthropod Containment Guidelines v3.2, ACME 2019",
    ),
    Reminder(
        "bright light",
        "LEDs for optogenetics can harm eyes even at a glance, blue and infrared most: shield the rig, do "
        "not look "
        "into it. Lasers of class 3B and 4 need the laser officer, an enclosure and goggles for their "
        "wavelength. Warn "
        "people who are sensitive to flicker.",
        "IEC 62471 and IEC 60825-1 (classes); flicker: common practice, from memory",
        (
            "chrimson",
            "chr2",
            "channelrhodopsin",
            "gtacr",
            "halorhodopsin",
            "light",
            "led",
            "laser",
            "retinal",
        ),
    ),
    Reminder(
        "retinal",
        "All-trans-retinal is a vitamin A aldehyde: gloves, off skin and eyes, not in pregnancy; its stock "
        "in "
        "ethanol burns. Label the food and keep it from the stock shelf.",
        "suppliers' safety sheets, from memory",
        ("retinal",),
    ),
    Reminder(
        "drugs in food",
        "Food with RU486, auxin, antibiotics or other drugs is labelled and kept from the stock shelf; "
        "RU486 is not "
        "handled in pregnancy.",
        "common practice, no source",
        ("ru486", "mifepristone", "auxin", "doxycycline", "quinic", "antibiotic"),
    ),
)


def reminders_for(plan: Plan) -> list[str]:
    """Return the texts of the reminders that hold always and of those that a word of the plan calls for, in
    order.

    The words are looked for in the components and needs of targets and in the notes of tasks.
    """
    texts = [
        *(c for t in plan.targets for c in (*t.components, *t.needs)),
        *(task.note for task in plan.tasks),
    ]
    spoken = " ".join(texts).lower()
    words = set(spoken.replace(",", " ").replace(";", " ").replace(".", " ").split())
    return [
        r.text
        for r in REMINDERS
        if not r.called_by or any(call in words or (len(call) > 5 and call in spoken) for call in r.called_by)
    ]
