"""Which changes of a figure are plausible, so that no program can tell them from what was meant."""

from __future__ import annotations

import re
from collections.abc import Mapping
from dataclasses import dataclass
from typing import Any, TypeAlias

from handoff.chart import shape
from handoff.chart.shape import Schema

Path: TypeAlias = tuple[str | int, ...]
Leaves: TypeAlias = dict[Path, str]

_NUMBER = re.compile(r"[+-]?\d+(?:\.\d+)?")
_MOMENT = re.compile(r"[\d:TZ+ -]+")


BOTH_OCCUR = ("lactate", "carboxyhaemoglobin.value", "urine.pad", "voltage", "cooled_for", "given.rate")
"""Figures of which a tenth or the tenfold is found in patients too, so that no limit can tell them apart."""


@dataclass(frozen=True, slots=True)
class Rule:
    """A kind of change, and whether it is plausible: what a nurse may have meant."""

    name: str
    plausible: bool


def rule_of(
    before: Leaves, after: Leaves, old: Mapping[str, Any], new: Mapping[str, Any], schema: Schema
) -> Rule:
    """Return the kind of the change from ``before`` to ``after``, which changed figures ``old`` to ``new``."""
    gone = {path: value for path, value in before.items() if path not in after}
    come = {path: value for path, value in after.items() if path not in before}
    changed = [path for path in before if path in after and before[path] != after[path]]
    if not gone and not come and len(changed) == 1:
        path = changed[0]
        return _value(before[path], after[path], form_at(schema, path), hard(old) == hard(new), path)
    if not changed and gone and (step := _moved(gone, come)):
        return Rule(f"another digit in the {step} of a row", True)
    if not gone and _parted(before, after, changed, come):
        return Rule("a comma that parts a text of a list in brackets", True)
    return Rule(f"shape: {_said(changed, gone, come)}", False)


def _value(was: str, now: str, form: Schema, figures_stand: bool, path: Path) -> Rule:
    name = ".".join(str(step) for step in path if isinstance(step, str))
    if "x-instant" in form or "x-date" in form or (_MOMENT.fullmatch(was) and ":" in was):
        return Rule("another digit in a date or a time", True)
    if form.get("enum"):
        digits = was.isdigit() and now.isdigit()
        return Rule(
            "another digit in a score" if digits else f"another listed word: {name}: {was} > {now}", digits
        )
    if "x-quantity" in form or form.get("type") in ("integer", "number") or _is_number(was, now):
        return _quantity(was, now, name)
    if figures_stand:
        return Rule("a letter in free text", True)
    if name == "injury.other_injuries":
        return Rule("'none found' misspelt: read as an injury, and printed as it stands", True)
    if [one for one in was if not one.isdigit()] == [one for one in now if not one.isdigit()]:
        return Rule("another digit in a value", True)
    return Rule(f"free text that decides a figure: {name}: {was} > {now}", False)


def _is_number(*texts: str) -> bool:
    return all(_NUMBER.fullmatch(text) for text in texts)


def _quantity(was: str, now: str, name: str) -> Rule:
    if "".join(was.split()) == "".join(now.split()):
        return Rule("a space more or less in a value", True)
    first, second = _NUMBER.findall(was), _NUMBER.findall(now)
    if _NUMBER.sub("", was) != _NUMBER.sub("", now):
        return Rule(f"another unit or word: {name}: {was} > {now}", False)
    if [_places(one) for one in first] == [_places(one) for one in second]:
        return Rule("another digit in a value", True)
    if [one.partition(".")[2] for one in first] == [one.partition(".")[2] for one in second]:
        return Rule("a digit more or less in a value", True)
    points = [sum("." in one for one in numbers) for numbers in (first, second)]
    if points[0] == points[1] and "".join(first).replace(".", "") != "".join(second).replace(".", ""):
        return Rule("a digit more or less in a value", True)
    if name.endswith(BOTH_OCCUR):
        return Rule("the decimal point, where patients have both figures", True)
    return Rule(f"the decimal point: {name}: {was} > {now}", False)


def _places(number: str) -> tuple[int, int]:
    whole, _, rest = number.partition(".")
    return len(whole), len(rest)


def _moved(gone: Leaves, come: Leaves) -> str:
    """Return 'date' or 'time' where every value that went came back below another one."""
    for step, named in ((1, "date"), (2, "time")):
        if all(len(path) > step and path[0] == "observations" for path in (*gone, *come)):
            first = {(*path[:step], *path[step + 1 :]): value for path, value in gone.items()}
            second = {(*path[:step], *path[step + 1 :]): value for path, value in come.items()}
            if first == second and len(first) == len(gone):
                return named
    return ""


def _parted(before: Leaves, after: Leaves, changed: list[Path], come: Leaves) -> bool:
    """Whether a text of a list became two entries of it, as a comma in brackets is meant to do."""
    if not come or any(not isinstance(path[-1], int) for path in (*changed, *come)):
        return False
    lists = {path[:-1] for path in (*changed, *come)}
    return len(lists) == 1 and len(come) == 1 and _run(before, *lists) == _run(after, *lists)


def _run(found: Leaves, below: Path) -> str:
    return "".join(value.replace(" ", "") for path, value in found.items() if path[:-1] == below)


def _said(changed: list[Path], gone: Leaves, come: Leaves) -> str:
    def some(paths: Any) -> str:
        names = [".".join(map(str, path)) for path in paths]
        return ", ".join(names[:3]) + (f" and {len(names) - 3} more" if len(names) > 3 else "")

    return f"changed [{some(changed)}] gone [{some(gone)}] new [{some(come)}]"


def hard(figures: Mapping[str, Any]) -> Any:
    """Return what of the figures is not the nurse's own words: numbers, flags, times, and which actions."""
    items = [
        (
            item["key"],
            item["value"] if not isinstance(item["value"], str) else "",
            item["flag"],
            item["as_of"],
        )
        for item in figures["items"]
    ]
    return items, [(one["key"], one.get("first_due"), one.get("every")) for one in figures["actions"]]


def form_at(schema: Schema, path: Path) -> Schema:
    """Return what the schema says of the text at ``path``; nothing where it says nothing."""
    found: Schema | None = schema
    steps = list(path)
    if steps[:1] == ["observations"]:
        found, steps = schema["properties"]["observations"]["x-row"], steps[3:]
        if steps and isinstance(steps[0], int):
            steps = steps[1:]
    for step in steps:
        if found is None:
            return {}
        if isinstance(step, int):
            found = shape.list_form(found)
        else:
            group = shape.group_form(found)
            known = shape.keys_of(found)
            extra = (group or {}).get("additionalProperties")
            found = known.get(step) or (extra if isinstance(extra, dict) else None)
    return (shape.text_form(found) or {}) if found is not None else {}
