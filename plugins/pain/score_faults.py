"""Faults of scores: off their scale, without a scale, or with items that do not add up."""

from __future__ import annotations

from collections.abc import Iterator

from handoff.plugin import Case, FormulaInputError, Map, Node, Problem, Text, number, number_text, words

from . import formula
from .living import Path, living
from .scores import Scale, item_points, scale_of

PLAIN_SCORES = ("itch", "anxiety")
BARE_PAIN, BARE_LEVEL = "{scale: numeric, score: 6, during: rest}", "{scale: poss, score: 2}"


def faults(case: Case) -> Iterator[Problem]:
    """Yield the faults of every pain, itch, anxiety and sedation score and of the goal."""
    yield from _observations(case)
    yield from _goal(case)


def _observations(case: Case) -> Iterator[Problem]:
    days = case.state.root.get("observations")
    if not isinstance(days, Map):
        return
    for day, times in days.items():
        if not isinstance(times, Map):
            continue
        for time, written in times.items():
            for row, path in living(written, ("observations", str(day), str(time))):
                yield from _bare(row.get("pain"), (*path, "pain"), ("asleep", "not assessed"), BARE_PAIN)
                yield from _bare(row.get("sedation"), (*path, "sedation"), ("not assessed",), BARE_LEVEL)
                for entry, place in living(row.get("pain"), (*path, "pain")):
                    yield from _score(case, entry, place)
                for name in PLAIN_SCORES:
                    for entry, place in living(row.get(name), (*path, name)):
                        yield from _plain_score(case, entry, place)
                for entry, place in living(row.get("sedation"), (*path, "sedation")):
                    yield from _sedation(case, entry, place)


def _bare(node: Node | None, path: Path, allowed: tuple[str, ...], example: str) -> Iterator[Problem]:
    """A score without its scale has no meaning: 5 of 8 and 5 of 10 differ."""
    if isinstance(node, Text) and node not in allowed:
        yield Problem(node, path, f"'{node}' has no scale", f"write {example}, or: {' or '.join(allowed)}")


def _goal(case: Case) -> Iterator[Problem]:
    block = case.block
    for entry, path in living(block.get("goal") if isinstance(block, Map) else None, ("pain", "goal")):
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
