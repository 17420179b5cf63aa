from __future__ import annotations

from example_plan import example_plan

from crossplan.bench.safety import REMINDERS, reminders_for


def test_every_reminder_has_a_source() -> None:
    assert all(r.source and r.text.endswith(".") for r in REMINDERS)
    assert len({r.topic for r in REMINDERS}) == len(REMINDERS)


def test_reminders_follow_what_the_plan_speaks_of() -> None:
    def topics(texts: list[str]) -> set[str]:
        return {r.topic for r in REMINDERS if r.text in texts}

    plan = example_plan()
    assert {"bright light", "retinal", "local rules", "allergy"} <= topics(reminders_for(plan))
    assert "drugs in food" not in topics(reminders_for(plan))
    plain = plan.model_copy(update={"targets": [], "tasks": []})
    assert topics(reminders_for(plain)) == {r.topic for r in REMINDERS if not r.called_by}
    called = plan.tasks[0].model_copy(update={"note": "called and filed, handled lightly"})
    assert "bright light" not in topics(reminders_for(plain.model_copy(update={"tasks": [called]})))
