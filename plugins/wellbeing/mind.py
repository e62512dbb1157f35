"""Mood, acute confusion, sleep, body image and spiritual needs, as charted."""

from __future__ import annotations

from datetime import timedelta

from handoff.plugin import Action, Case, Flag, Item, System, Urgency, child, fact, gap, line_of, words

from . import patient

PLAIN = (
    ("body_image", "Body image"),
    ("spiritual", "Spiritual needs"),
    ("visitors", "Visitors, school and work"),
)


def items(case: Case) -> tuple[Item, ...]:
    """Return what is charted; mood and sleep are not recorded only from the second day on."""
    return (*_mood(case), *_confusion(case), *_sleep(case), *_plain(case))


def _gap(case: Case, key: str, label: str) -> tuple[Item, ...]:
    if not patient.is_asked(case):
        return ()
    return (gap(f"wellbeing.{key}", label, system=System.PEOPLE),)


def _mood(case: Case) -> tuple[Item, ...]:
    rows = case.state.dated(child(case.block, "mood"))
    if not rows:
        return _gap(case, "mood", "Mood")
    last = rows[-1].entry
    distress, screen = words(last.get("distress")), words(last.get("screen"))
    parts = [
        words(last.get("found")),
        f"distress: {distress}" if distress else "",
        f"screen: {screen}" if screen else "",
    ]
    return (
        fact(
            "wellbeing.mood",
            "Mood",
            "; ".join(part for part in parts if part) or "asked, no finding recorded",
            system=System.PEOPLE,
            as_of=rows[-1].at,
            flag=Flag.REVIEW if distress == "severe" else Flag.NONE,
            line=last.line,
        ),
    )


def _confusion(case: Case) -> tuple[Item, ...]:
    rows = case.state.dated(child(case.block, "confusion_screen"))
    if not rows:
        return ()
    last = rows[-1].entry
    result = words(last.get("result"))
    return (
        fact(
            "wellbeing.confusion",
            "Screen for acute confusion",
            f"{words(last.get('tool')) or 'tool not recorded'}: {result}",
            system=System.DISABILITY,
            value=result,
            as_of=rows[-1].at,
            flag=Flag.ACTION if result == "positive" and not case.comfort else Flag.NONE,
            line=last.line,
        ),
    )


def _sleep(case: Case) -> tuple[Item, ...]:
    rows = case.state.dated(child(case.block, "sleep"))
    if not rows:
        return _gap(case, "sleep", "Sleep")
    last = rows[-1].entry
    slept = words(last.get("slept"))
    parts = [f"slept {slept}" if slept else "", words(last.get("found"))]
    shown = "; ".join(part for part in parts if part) or "charted without a finding"
    return (fact("wellbeing.sleep", "Sleep", shown, system=System.PEOPLE, as_of=rows[-1].at, line=last.line),)


def _plain(case: Case) -> tuple[Item, ...]:
    made = []
    for key, label in PLAIN:
        node = child(case.block, key)
        said = words(node)
        if said:
            made.append(
                fact(f"wellbeing.{key}", label, said, system=System.PEOPLE, value=said, line=line_of(node))
            )
    return tuple(made)


def actions(case: Case) -> tuple[Action, ...]:
    """Return the daily question about mood and sleep, and what severe distress or confusion asks for."""
    made = []
    rows = case.state.dated(child(case.block, "mood"))
    if patient.is_asked(case) or rows:
        every = timedelta(hours=case.parameters.number("mood.every"))
        made.append(
            Action(
                key="wellbeing.ask",
                area="Patient and family",
                text="Ask about fear, sleep, pictures that come back; say what happens next; leave them a choice",
                why="distress after a burn is common and is seldom said unasked",
                system=System.PEOPLE,
                first_due=rows[-1].at + every if rows else case.now,
                every=every,
                urgency=Urgency.SHIFT,
                sources=(case.parameters.source_of("mood.every"),),
            )
        )
    if rows and words(rows[-1].entry.get("distress")) == "severe":
        made.append(
            Action(
                key="wellbeing.distress",
                area="Patient and family",
                text="Tell the doctor and the psychologist today; stay with the patient; ask about safety",
                why=f"severe distress at {case.clock.time(rows[-1].at, case.now)}",
                system=System.PEOPLE,
                urgency=Urgency.NOW,
            )
        )
    screens = case.state.dated(child(case.block, "confusion_screen"))
    if screens and words(screens[-1].entry.get("result")) == "positive" and not case.comfort:
        made.append(
            Action(
                key="wellbeing.confusion_call",
                area="Patient and family",
                text="Tell the doctor; look for pain, low oxygen, low glucose, infection, full bladder, drugs; "
                "light by day, dark by night, glasses and hearing aid, a known face",
                why="screen for acute confusion positive",
                system=System.DISABILITY,
                urgency=Urgency.NOW,
            )
        )
    return tuple(made)
