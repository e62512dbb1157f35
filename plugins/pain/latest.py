"""The latest pain score, always with the name and the range of its scale, its time and what went on."""

from __future__ import annotations

from handoff.plugin import Case, Flag, Item, Part, System, line_of

from .charted import Charted
from .scores import Score

KEY = "pain.latest"
LABEL = "Latest pain score"


def item(case: Case, charted: Charted) -> Item:
    """Return the latest score, in points of its own scale; scores of one minute stand side by side, never merged."""
    latest = latest_scores(charted)
    if not latest:
        return Item(
            key=KEY, label=LABEL, part=Part.ASSESSMENT, system=System.PAIN, unit="score",
            shown="not recorded", flag=Flag.NOT_RECORDED, repeats=True,
        )  # fmt: skip
    worst = worst_of_first_scale(latest)
    asleep = [
        reading.at
        for reading in case.state.series("pain")
        if reading.node == "asleep" and reading.at > worst.at
    ]
    at = case.clock.time(worst.at, case.now)
    return Item(
        key=KEY,
        label=LABEL,
        part=Part.ASSESSMENT,
        system=System.PAIN,
        value=worst.value(),
        unit="score",
        shown=f"{'; '.join(score.shown() for score in latest)}, {at}"
        + (f"; asleep {case.clock.time(asleep[-1], case.now)}" if asleep else ""),
        as_of=worst.at,
        repeats=True,
        line=line_of(worst.node),
    )


def latest_scores(charted: Charted) -> tuple[Score, ...]:
    """Return the scores of the last minute in which any was charted."""
    if not charted.scores:
        return ()
    last = charted.scores[-1].at
    return tuple(score for score in charted.scores if score.at == last)


def worst_of_first_scale(scores: tuple[Score, ...]) -> Score:
    """Return the highest of the scores on the first scale; scores of different scales are not compared."""
    first = next((score.scale for score in scores if score.scale.self_report), scores[0].scale)
    same = [score for score in scores if score.scale == first]
    return max(same, key=_rank)


def _rank(score: Score) -> float:
    return float(score.scale.words.index(score.written)) if score.points is None else score.points
