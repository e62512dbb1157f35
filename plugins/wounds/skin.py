"""Pressure areas: what was found, what is due, and where this patient cannot lie."""

from __future__ import annotations

from datetime import timedelta

from handoff.plugin import Action, Case, Flag, Item, System, Urgency, child, fact, joined, words

from .burned import Burned, counted_pct, is_child

BAD = ("red, does not blanch", "blister", "broken")
BACK = ("trunk", "upper back", "lower back", "left buttock", "right buttock")


def items(case: Case) -> tuple[Item, ...]:
    """Return each finding that is not mended, or the last look; nothing where none is charted."""
    rows = case.state.dated(child(case.block, "pressure_areas"))
    if not rows:
        return ()
    latest = {words(row.entry.get("where")).lower(): row for row in rows if words(row.entry.get("found"))}
    bad = [row for row in latest.values() if words(row.entry.get("found")) in BAD]
    said = [
        f"{words(row.entry.get('where')) or 'place not recorded'}: {words(row.entry.get('found'))} "
        f"at {case.clock.time(row.at, case.now)}"
        for row in latest.values()
    ]
    last = rows[-1]
    turned, risk = words(last.entry.get("turned_to")), words(last.entry.get("risk"))
    said += [f"turned to {turned} at {case.clock.time(last.at, case.now)}"] if turned else []
    said += [f"risk score {risk}"] if risk else []
    return (
        fact(
            "wounds.pressure_areas",
            "Pressure areas",
            "; ".join(said) or "looked at, no finding recorded",
            system=System.SKIN,
            as_of=last.at,
            flag=Flag.ACTION if bad and not case.comfort else Flag.NONE,
            line=last.entry.line,
        ),
    )


def actions(case: Case, skin: Burned) -> tuple[Action, ...]:
    """Return the turning of a patient with a large burn or a charted pressure area, with what is burned behind."""
    rows = case.state.dated(child(case.block, "pressure_areas"))
    pct = counted_pct(case)
    lies = pct is not None and pct >= case.parameters.number("turning.area")
    if case.comfort or not (lies or rows):
        return ()
    name = f"turning.{case.chosen('turning').name}"
    every = timedelta(hours=float(case.parameters.table(name)["child" if is_child(case) else "adult"]))
    places = (
        "heels, back of the head, skin under masks, ties and cuffs"
        if is_child(case)
        else ("heels, hips, back of the head, skin under masks, ties and cuffs")
    )
    text = f"Turn; look at {places}"
    back = _back(skin)
    if back:
        text += f"; {back} burned: off it as far as breathing allows"
    return (
        Action(
            key="wounds.turn",
            area="Position and movement",
            text=text,
            why="swollen skin over bone breaks down within hours",
            system=System.SKIN,
            every=every,
            first_due=rows[-1].at + every if rows else case.now,
            urgency=Urgency.TIMED,
            sources=(case.parameters.source_of(name),),
        ),
    )


def _back(skin: Burned) -> str:
    names = [burn.region for burn in skin.burns if burn.region in BACK and burn.face != "front"]
    said = ["back of the trunk" if name == "trunk" else name for name in dict.fromkeys(names)]
    return joined(said)
