"""What went in beside the resuscitation fluid, each purpose apart: colloid, blood, maintenance, drugs, feed."""

from __future__ import annotations

from handoff.plugin import Item, Working, child, entries, words

from .course import Course
from .given_items import input_of, sum_of
from .say import figure, ml

OTHERS = ("colloid", "blood product", "maintenance", "drug carrier", "flush", "feed", "oral", "other")


def items(course: Course) -> tuple[Item, ...]:
    """Return everything else that went in, each purpose apart."""
    found = []
    for purpose in OTHERS:
        if purpose in course.counted:
            continue
        portions = [p for p in course.given.portions if p.purpose == purpose]
        if not portions:
            continue
        total = course.given.total_ml((purpose,))
        open_ml, unseen = course.unconfirmed_ml((purpose,)), course.long_unconfirmed((purpose,))
        fluids = ", ".join(dict.fromkeys(p.fluid for p in portions if p.fluid))
        shown = ml(total) + (f" ({fluids})" if fluids else "")
        if open_ml:
            shown += f"; {ml(open_ml)} more not confirmed"
        if unseen:
            shown += f"; {unseen}"
        shown += _reactions(course, purpose)
        found.append(
            figure(
                f"given_{purpose.replace(' ', '_')}",
                f"{purpose.capitalize()} given since the burn, not set against the plan",
                value=total,
                unit="mL",
                shown=shown,
                as_of=course.given.seen((purpose,)),
                working=Working(
                    formula="rate x hours confirmed; single volumes",
                    sum=sum_of(tuple(p for p in portions if p.confirmed and p.ml), total),
                    inputs=tuple(input_of(course, p) for p in portions if p.confirmed and p.ml),
                ),
                sources=(course.source("line.seen_running"),),
                detail=purpose in ("flush", "other"),
            )
        )
    return tuple(found)


def _reactions(course: Course, purpose: str) -> str:
    if purpose != "blood product":
        return ""

    rows = [row for row in entries(child(course.case.block, "given")) if words(row.get("purpose")) == purpose]
    said = [words(row.get("reaction")) or "reaction not recorded" for row in rows]
    return f"; reaction: {', '.join(dict.fromkeys(said))}" if said else ""
