"""Faults of the pain block that a schema cannot see: scores off their scale, unreadable doses and rates."""

from __future__ import annotations

from collections.abc import Iterator
from itertools import pairwise

from handoff.plugin import (
    Case,
    FormulaInputError,
    List,
    Map,
    Node,
    Problem,
    Text,
    number,
    number_text,
    unit_of,
    words,
)

from . import formula
from .given import moment_of
from .infusions import RATE, happenings, line_name
from .scores import Scale, item_points, scale_of

Path = tuple[str | int, ...]
BLOCK: Path = ("pain",)
PLAIN_SCORES = ("itch", "anxiety")
BARE_PAIN, BARE_LEVEL = "{scale: numeric, score: 6, during: rest}", "{scale: poss, score: 2}"


def check(case: Case) -> tuple[Problem, ...]:
    """Return the faults of scores, doses, infusions and pump readings, in the order of the file."""
    found = [*_observations(case), *_goal(case), *_doses(case), *_infusions(case), *_pumps(case)]
    return tuple(sorted(found, key=lambda problem: (problem.node.line, problem.node.column)))


def _living(node: Node | None, path: Path) -> Iterator[tuple[Map, Path]]:
    """The entries at ``node``, one or a list, with their paths; what was struck out is left aside."""
    if isinstance(node, Map) and "struck" not in node:
        yield node, path
    elif isinstance(node, List):
        for index, entry in enumerate(node):
            yield from _living(entry, (*path, index))


def _observations(case: Case) -> Iterator[Problem]:
    days = case.state.root.get("observations")
    if not isinstance(days, Map):
        return
    for day, times in days.items():
        if not isinstance(times, Map):
            continue
        for time, written in times.items():
            for row, path in _living(written, ("observations", str(day), str(time))):
                yield from _bare(row.get("pain"), (*path, "pain"), ("asleep", "not assessed"), BARE_PAIN)
                yield from _bare(row.get("sedation"), (*path, "sedation"), ("not assessed",), BARE_LEVEL)
                for entry, place in _living(row.get("pain"), (*path, "pain")):
                    yield from _score(case, entry, place)
                for name in PLAIN_SCORES:
                    for entry, place in _living(row.get(name), (*path, name)):
                        yield from _plain_score(case, entry, place)
                for entry, place in _living(row.get("sedation"), (*path, "sedation")):
                    yield from _sedation(case, entry, place)


def _bare(node: Node | None, path: Path, allowed: tuple[str, ...], example: str) -> Iterator[Problem]:
    """A score without its scale has no meaning: 5 of 8 and 5 of 10 differ."""
    if isinstance(node, Text) and node not in allowed:
        yield Problem(node, path, f"'{node}' has no scale", f"write {example}, or: {' or '.join(allowed)}")


def _goal(case: Case) -> Iterator[Problem]:
    block = case.block
    for entry, path in _living(block.get("goal") if isinstance(block, Map) else None, (*BLOCK, "goal")):
        yield from _score(case, entry, path)


def _score(case: Case, entry: Map, path: Path) -> Iterator[Problem]:
    scale = scale_of(case, entry.get("scale"))
    if scale is None:
        return
    if entry.get("score") is None and entry.get("parts") is None:
        yield Problem(entry, path, "the pain score has no score", f"add score: {scale.range_text()}")
    yield from _score_text(scale, entry.get("score"), (*path, "score"))
    yield from _parts(scale, entry, (*path, "parts"))


def _plain_score(case: Case, entry: Map, path: Path) -> Iterator[Problem]:
    scale = scale_of(case, entry.get("scale")) or Scale("0 to 10", "scale", highest=10, listed=False)
    yield from _score_text(scale, entry.get("score"), (*path, "score"))


def _score_text(scale: Scale, node: Node | None, path: Path) -> Iterator[Problem]:
    if node is None:
        return
    written, points = words(node), number(node)
    allowed = f"write {scale.range_text()}, or name the scale that was used"
    if scale.words:
        if written not in scale.words:
            yield Problem(node, path, f"'{written}' is not a word of the {scale.called}", allowed)
    elif points is None:
        yield Problem(node, path, f"'{written}' is not a score of the {scale.called}", allowed)
    elif not scale.lowest <= points <= scale.highest:
        yield Problem(node, path, f"{written} is outside the {scale.called} ({scale.range_text()})", allowed)
    elif (points - scale.lowest) % scale.step:
        step = number_text(scale.step)
        yield Problem(
            node, path, f"{written} is not a score of the {scale.called}", f"it goes in steps of {step}"
        )


def _parts(scale: Scale, entry: Map, path: Path) -> Iterator[Problem]:
    node = entry.get("parts")
    if node is None:
        return
    if not scale.parts:
        yield Problem(node, path, f"the {scale.called} has no items to add", "write its score alone")
        return
    try:
        total = formula.scale_total(item_points(entry), scale.parts, scale.part_lowest, scale.part_highest)
    except FormulaInputError:
        low, high = number_text(scale.part_lowest), number_text(scale.part_highest)
        cure = f"write {scale.parts} whole numbers from {low} to {high}"
        yield Problem(node, path, f"these are not the items of the {scale.called}", cure)
        return
    score = number(entry.get("score"))
    if score is not None and score != total:
        said = number_text(total)
        yield Problem(
            node, path, f"the items add to {said}, the score is {words(entry.get('score'))}", "check both"
        )


def _sedation(case: Case, entry: Map, path: Path) -> Iterator[Problem]:
    node, name = entry.get("score"), entry.get("scale")
    if isinstance(name, Map):
        scale = scale_of(case, name)
        if scale is not None:
            yield from _score_text(scale, node, (*path, "score"))
        return
    if node is None or f"sedation.{words(name)}" not in case.parameters:
        return
    table = case.parameters.table(f"sedation.{words(name)}")
    levels = table.get("levels")
    if levels is None:
        scale = Scale(words(name), str(table["called"]), float(table["lowest"]), float(table["highest"]))
        yield from _score_text(scale, node, (*path, "score"))
    elif words(node) not in levels:
        yield Problem(
            node,
            (*path, "score"),
            f"'{words(node)}' is not a level of {table['called']}",
            f"write one of {', '.join(levels)}",
        )


def _doses(case: Case) -> Iterator[Problem]:
    block = case.block
    for entry, path in _living(block.get("doses") if isinstance(block, Map) else None, (*BLOCK, "doses")):
        at = entry.get("at")
        moment = moment_of(case, at) if isinstance(at, Map) else None
        if at is not None and moment is not None and moment[0] > moment[1]:
            yield Problem(
                at, (*path, "at"), "earliest lies after latest", "write the earlier time as earliest"
            )
        has_contents = entry.get("contains") is not None
        if has_contents and (entry.get("drug") is not None or entry.get("dose") is not None):
            yield Problem(
                entry,
                path,
                "a dose has both contains and drug or dose",
                "keep contains for a combination product",
            )
        for name in () if has_contents else ("drug", "dose"):
            if entry.get(name) is None:
                yield Problem(
                    entry, path, f"the dose has no {name}", f"add {name}:, or: not known for the dose"
                )


def _infusions(case: Case) -> Iterator[Problem]:
    block = case.block
    lines: dict[str, list[Map]] = {}
    paths: dict[int, Path] = {}
    written = block.get("infusions") if isinstance(block, Map) else None
    for entry, path in _living(written, (*BLOCK, "infusions")):
        lines.setdefault(line_name(case, entry), []).append(entry)
        paths[id(entry)] = path
        yield from _infusion(entry, path)
    for name, entries_of_line in lines.items():
        yield from _line(case, name, entries_of_line, paths)


def _infusion(entry: Map, path: Path) -> Iterator[Problem]:
    if not any(entry.get(name) is not None for name in ("from", "running", "stopped", "rate")):
        yield Problem(entry, path, "the infusion has no time", "add from:, running: or stopped: with a time")
    if entry.get("rate") is not None and entry.get("from") is None:
        yield Problem(
            entry, path, "the rate has no start", "add from: with the time at which this rate began"
        )
    if entry.get("from") is not None and entry.get("rate") is None:
        yield Problem(entry, path, "the infusion has no rate", "add rate: with its unit")
    if entry.get("line") is None and entry.get("drug") is None:
        yield Problem(entry, path, "the infusion has neither line nor drug", "add line: or drug:")


def _line(case: Case, name: str, written: list[Map], paths: dict[int, Path]) -> Iterator[Problem]:
    events = happenings(case, written)
    starts = [(moment, entry) for moment, order, entry in events if order == RATE]
    first = starts[0] if starts else None
    rate_alone = any(entry.get("rate") is not None and entry.get("from") is None for entry in written)
    if not rate_alone and (first is None or first[1].get("drug") is None):
        entry = first[1] if first else written[0]
        what = "has no drug" if first else "has no start"
        cure = "add drug:" if first else "add an entry with drug:, from: and rate:"
        yield Problem(entry, paths[id(entry)], f"the infusion on line {name} {what}", cure)
    for earlier, later in pairwise(starts):
        if earlier[0] == later[0]:
            yield Problem(
                later[1],
                paths[id(later[1])],
                f"line {name} has two rates from the same minute",
                "give each infusion its own line:, or strike out the one that is wrong",
            )
    for entry in written:
        start, stop = case.when(entry.get("from")), case.when(entry.get("stopped"))
        if start is not None and stop is not None and stop < start:
            yield Problem(
                entry, (*paths[id(entry)], "stopped"), "it stopped before it began", "check both times"
            )


def _pumps(case: Case) -> Iterator[Problem]:
    block = case.block
    written = block.get("patient_controlled") if isinstance(block, Map) else None
    for entry, path in _living(written, (*BLOCK, "patient_controlled")):
        counted = []
        for reading, place in _living(entry.get("delivered"), (*path, "delivered")):
            start, end = case.when(reading.get("from")), case.when(reading.get("to"))
            if start is None or end is None:
                continue
            if end <= start:
                yield Problem(reading, place, "the reading ends before it begins", "check from: and to:")
                continue
            if unit_of(reading.get("total")) == "mL" and entry.get("concentration") is None:
                yield Problem(
                    reading, place, "a volume without a concentration", "add concentration: to the pump"
                )
            counted.append((start, end, reading, place))
        counted.sort(key=lambda one: (one[0], one[1]))
        for before, after in pairwise(counted):
            if after[0] < before[1]:
                yield Problem(
                    after[2],
                    after[3],
                    "this reading begins before the one before ends",
                    "write each from the last",
                )
