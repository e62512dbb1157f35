"""Catheter, gastric tube and cannulas: what the named thresholds ask for, and what is recorded."""

from __future__ import annotations

import re
from difflib import SequenceMatcher
from itertools import pairwise

from handoff.plugin import Action, Flag, Item, Map, Part, System, Urgency, entries, number_text, plural, words

from .bands import pick
from .course import Course
from .say import figure, unflagged
from .urine import is_catheter

AREA = "Lines and tubes"


def items(course: Course) -> tuple[Item, ...]:
    """Return what is asked for by area and not recorded, and the large cannulas."""
    if course.comfort or course.person.pct is None:
        return ()
    return (*_threshold(course, "catheter"), *_threshold(course, "gastric_tube"), *_cannulas(course))


def _in_place(course: Course) -> list[Map]:
    return [row for row in entries(course.case.state.root.get("lines")) if "removed" not in row]


def _is_gastric(entry: Map) -> bool:
    said, kind = words(entry.get("what")).lower(), words(entry.get("kind"))
    if kind:
        return kind == "gastric tube"
    return any(
        name in said
        for name in ("gastric", "gastrostomy", "nasogastric", "orogastric", "feeding tube", "jejunal")
    )


def _has(course: Course, what: str) -> bool:
    test = is_catheter if what == "catheter" else _is_gastric
    return any(test(row) for row in _in_place(course))


NAMES = {"catheter": "Urinary catheter", "gastric_tube": "Gastric tube"}


def _threshold(course: Course, what: str) -> tuple[Item, ...]:
    chosen = course.case.chosen(f"{what}_line")
    parameter = course.case.parameters[f"{what}_line.{chosen.name}"]
    picked = pick(parameter.value, course.facts)
    if picked.band is None:
        return ()
    who = f"{chosen.name}: {picked.band['who']}"
    key, label = f"{what}_asked", f"{NAMES[what]}, asked for by area"
    if _has(course, what):
        return (
            unflagged(
                key, label, f"in place ({who})", system=System.LINES, detail=True, sources=(parameter.source,)
            ),
        )
    may_flag = parameter.kind != "from memory" or chosen.by_policy
    return (
        figure(
            key,
            label,
            part=Part.RECOMMENDATION,
            system=System.LINES,
            value="none recorded",
            shown=f"none recorded; {who}",
            flag=Flag.REVIEW if may_flag else Flag.NONE,
            sources=(parameter.source,),
        ),
    )


def large_cannulas(course: Course) -> tuple[int, int]:
    """Return how many large cannulas are in place, and how many of them go through a burn."""
    limit = course.number("cannulas.large_gauge")
    large = [row for row in _in_place(course) if (gauge := gauge_of(row)) and gauge <= limit]
    return len(large), sum(words(row.get("through_burn")) == "yes" for row in large)


def is_cannula(entry: Map) -> bool:
    """Return whether a line of the file is a cannula, by its kind or else by its name."""
    kind = words(entry.get("kind"))
    return kind == "cannula" if kind else "cannula" in words(entry.get("what")).lower()


def gauge_of(entry: Map) -> float | None:
    """Return the gauge written in the name of a cannula (``IV cannula 16 G``), or None."""
    if not is_cannula(entry):
        return None
    what = words(entry.get("what"))
    parts = what.replace("G", " G").split()
    for number, unit in pairwise(parts):
        if unit == "G" and number.isdigit():
            return float(number)
    return None


def wanted_cannulas(course: Course) -> tuple[int, str]:
    """Return how many cannulas the rule asks for, and the parameter that says so."""
    pct = course.person.pct or 0.0
    if course.person.is_child and pct <= course.number("cannulas.child_from"):
        return int(course.number("cannulas.child_below")), "cannulas.child_below"
    return int(course.number("cannulas.wanted")), "cannulas.wanted"


def _cannulas(course: Course) -> tuple[Item, ...]:
    if course.plan is None:
        return ()
    wanted, source = wanted_cannulas(course)
    is_child = bool(course.person.is_child)
    count, burned = large_cannulas(course)
    if is_child:
        count = sum(is_cannula(row) for row in _in_place(course))
    size = "" if is_child else f"large (to {number_text(course.number('cannulas.large_gauge'))} G) "
    through = f", {burned} of them through a burn" if burned else ""
    short = count < wanted
    return (
        figure(
            "cannulas",
            f"{'Cannulas' if is_child else 'Large cannulas'} in place",
            system=System.LINES,
            value=count,
            unit="lines",
            shown=f"{plural(count, f'{size}cannula')} recorded{through}; the rule asks for {wanted}",
            flag=Flag.REVIEW if short or burned else Flag.NONE,
            sources=(course.source(source),),
            detail=not (short or burned),
        ),
    )


def actions(course: Course) -> tuple[Action, ...]:
    """Return what to ask for where a line or tube of the rule is not recorded."""
    found = items(course)
    asked = [item for item in found if item.flag is Flag.REVIEW]
    texts = {
        "fluid.catheter_asked": "Ask for a urinary catheter, or how urine is to be measured",
        "fluid.gastric_tube_asked": "Ask whether a gastric tube is wanted",
        "fluid.cannulas": "Ask for a further cannula, away from the burn where possible",
    }
    return tuple(
        Action(
            key=f"{item.key}_action",
            area=AREA,
            text=texts[item.key],
            why=item.shown,
            system=System.LINES,
            urgency=Urgency.SHIFT,
            sources=item.sources,
        )
        for item in asked
    )


def misspelt(entry: Map) -> str:
    """Return what in the name of a line is nearly a cannula or its gauge, so that it is not counted; or nothing."""
    what = words(entry.get("what"))
    if "kind" in entry or not what:
        return ""
    if is_cannula(entry):
        marked = any(letter.isdigit() for letter in what)
        return what if marked and gauge_of(entry) is None else ""
    letters = "".join(what.lower().split())
    found = SequenceMatcher(None, "cannula", letters, autojunk=False).get_matching_blocks()
    return what if sum(block.size for block in found) >= len("cannula") - 1 and _has_gauge(what) else ""


def _has_gauge(what: str) -> bool:
    return re.search(r"\d *G\b", what) is not None
