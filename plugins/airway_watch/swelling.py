"""Where the patient is in the usual course of swelling, by hours since the burn; and bronchoscopy as recorded."""

from __future__ import annotations

from handoff.plugin import Case, Item, Working, hours_text, number_text

from . import charted, formula, say
from .exposure import Exposure

SAID = {
    "building": "swelling still building",
    "peak": "in the usual peak of swelling",
    "may rise": "after the usual peak, swelling may still rise",
    "later": "past the hours in which swelling usually rises",
}


def items(case: Case, seen: Exposure) -> tuple[Item, ...]:
    """Return the phase of swelling and the last bronchoscopy."""
    return (*_phase(case, seen), *_bronchoscopy(case))


def _phase(case: Case, seen: Exposure) -> tuple[Item, ...]:
    if not seen.watched:
        return ()
    key, label = "airway_watch.swelling_phase", "Airway swelling, usual course"
    burn = case.state.burn_time
    if burn is None:
        return (say.gap(key, label, "time of the burn"),)
    peak, rising = case.parameters.table("swelling.peak"), case.parameters.number("swelling.rising_until")
    edges = (float(peak["from"]), float(peak["to"]), rising)
    hours = [max(say.ago(case, moment), 0.0) for moment in (burn.latest, burn.earliest)]
    phases = tuple(dict.fromkeys(formula.swelling_phase(value, *edges) for value in hours))
    since = " to ".join(dict.fromkeys(hours_text(value) for value in hours))
    early = case.parameters.number("swelling.most_by")
    low, high, last = (number_text(edge) for edge in edges)
    return (
        say.fact(
            key,
            label,
            f"{' or '.join(SAID[phase] for phase in phases)} ({since} since the burn)",
            value=" or ".join(phases),
            as_of=case.now,
            working=Working(
                formula="hours since the burn against the usual peak and the end of the rise",
                sum=f"{since}; peak {low} to {high} h, rise until {last} h",
                inputs=(case.input("Burn", burn.node),),
            ),
            sources=[
                case.parameters.source_of(name)
                for name in ("swelling.peak", "swelling.rising_until", "swelling.most_by")
            ],
            cautions=(
                f"Sources differ; most soft-tissue swelling has formed by {number_text(early)} h.",
                "The airway of this patient may close earlier or later than usual.",
            ),
        ),
    )


def _bronchoscopy(case: Case) -> tuple[Item, ...]:
    key, label = "airway_watch.bronchoscopy", "Bronchoscopy"
    rows = charted.block_rows(case, "bronchoscopy")
    done = [row.at for row in case.state.events("bronchoscopy")]
    if not rows:
        if not done:
            return ()
        return (say.fact(key, label, f"done {say.at(case, done[-1])}; grade not recorded", as_of=done[-1]),)
    last = rows[-1]
    grade, found = str(last.entry.get("grade") or ""), str(last.entry.get("found") or "")
    said = f"grade {grade} as recorded" if grade else "grade not recorded"
    shown = f"{said}{say.person(str(last.entry.get('by') or ''))} at {say.at(case, last.at)}"
    return (
        say.fact(
            key,
            label,
            f"{shown}: {found}" if found else shown,
            value=int(grade) if grade else None,
            unit="grade",
            as_of=last.at,
            sources=(case.parameters.source_of("bronchoscopy.grade"),),
            cautions=("The grade is the endoscopist's; nothing is worked out from it.",),
            line=last.line,
        ),
    )
