"""How pain went: the latest score of rest, movement and procedure, the trend, and the goal."""

from __future__ import annotations

from handoff.plugin import Case, Flag, Item, Part, System, child, entries, joined, line_of, words

from .charted import Charted
from .names import unique_keys
from .scores import DURING, Score, points_of, scale_of

SHOWN_BACK = 4
"""How many scores of one series are printed; a matter of layout."""

LABELS = {"rest": "Pain at rest", "movement": "Pain on movement", "procedure": "Pain in a procedure"}


def items(case: Case, charted: Charted) -> tuple[Item, ...]:
    """Return the latest score of each activity, the trend of each series, and whether the goal is met."""
    return (*_activities(case, charted), *_trends(case, charted), _goal(case, charted))


def _activities(case: Case, charted: Charted) -> tuple[Item, ...]:
    found = []
    for during in DURING:
        scores = [score for score in charted.scores if score.during == during]
        if scores:
            last = scores[-1]
            found.append(
                Item(
                    key=f"pain.{during}",
                    label=LABELS[during],
                    part=Part.ASSESSMENT,
                    system=System.PAIN,
                    value=last.value(),
                    unit="score",
                    shown=f"{last.shown()}, {case.clock.time(last.at, case.now)}",
                    as_of=last.at,
                    repeats=True,
                    line=line_of(last.node),
                )
            )
        elif during != "procedure" or child(case.block, "procedures") is not None:
            found.append(
                Item(
                    key=f"pain.{during}",
                    label=LABELS[during],
                    part=Part.ASSESSMENT,
                    system=System.PAIN,
                    unit="score",
                    shown="not recorded",
                    flag=Flag.NOT_RECORDED,
                    repeats=True,
                )
            )
    return tuple(found)


def series(charted: Charted) -> dict[tuple[str, str], list[Score]]:
    """Return the scores by scale and activity: only scores of one scale and one activity make a series."""
    found: dict[tuple[str, str], list[Score]] = {}
    for score in charted.scores:
        name = f"{score.scale.called}, {score.scale.range_text()}"
        found.setdefault((name, score.during), []).append(score)
    return found


def _trends(case: Case, charted: Charted) -> tuple[Item, ...]:
    found = []
    several = {name: scores for name, scores in sorted(series(charted).items()) if len(scores) > 1}
    keys = unique_keys(f"{called} {during or 'not recorded'}" for called, during in several)
    for key, ((called, during), scores) in zip(keys, several.items(), strict=True):
        steps = [
            f"{score.written} at {case.clock.time(score.at, case.now)}" for score in scores[-SHOWN_BACK:]
        ]
        found.append(
            Item(
                key=f"pain.trend.{key}",
                label=f"Trend, {called}, {LABELS.get(during, 'rest or movement not recorded').lower()}",
                part=Part.ASSESSMENT,
                system=System.PAIN,
                value=_direction(scores),
                shown=f"{_direction(scores)}: {', '.join(steps)}",
                as_of=scores[-1].at,
                repeats=True,
                detail=True,
            )
        )
    return tuple(found)


def _direction(scores: list[Score]) -> str:
    before, last = (_position(score) for score in scores[-2:])
    if last == before:
        return "unchanged"
    return "rising" if last > before else "falling"


def _position(score: Score) -> float:
    return float(score.scale.words.index(score.written)) if score.points is None else score.points


def _goal(case: Case, charted: Charted) -> Item:
    node = next(iter(entries(child(case.block, "goal"))), None)
    key, label = "pain.goal", "Pain goal"
    scale = scale_of(case, node.get("scale")) if node is not None else None
    if node is None or scale is None:
        return Item(
            key=key, label=label, part=Part.ASSESSMENT, system=System.PAIN,
            shown="not recorded", flag=Flag.NOT_RECORDED, repeats=True,
        )  # fmt: skip
    points, during = points_of(scale, node), words(node.get("during"))
    wanted = words(node.get("score"))
    agreed = words(node.get("agreed_with"))
    said = f"{wanted} or less ({scale.called}, {scale.range_text()}){f', agreed with {agreed}' if agreed else ''}"
    same = [score for score in charted.scores if score.scale == scale and during in ("", score.during)]
    other = [score.scale.called for score in charted.scores if score.scale != scale]
    value, flag = None, Flag.NONE
    if same:
        latest = [score for score in same if score.at == same[-1].at]
        goal = float(scale.words.index(wanted)) if points is None else points
        worst = max(latest, key=_position)
        met = _position(worst) <= goal
        value = "met" if met else "not met"
        flag = Flag.NONE if met else Flag.REVIEW
        said = f"{value}: {worst.shown()}, {case.clock.time(worst.at, case.now)}; goal {said}"
    elif other:
        said = f"not compared: goal {said}, scores on {joined(list(dict.fromkeys(other)))}"
    else:
        said = f"goal {said}; no score to compare"
    return Item(
        key=key,
        label=label,
        part=Part.ASSESSMENT,
        system=System.PAIN,
        value=value,
        shown=said,
        as_of=same[-1].at if same else None,
        flag=flag,
        repeats=True,
        line=line_of(node),
    )
