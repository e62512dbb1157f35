"""Rates, single volumes and urine by weight: far outside what is usual is asked about, most often a slip of ten."""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from datetime import datetime, timedelta

from handoff.plugin import Case, List, Map, Node, Problem, Severity, amount, child, number_text, words

from .portions import rate_of
from .urine import read_urine
from .weights import Used, volume_weight

HOUR = timedelta(hours=1)
PLACES = 2
CURE = "check it; if it is right, add confirmed: yes beside it"
Path = tuple[str | int, ...]


def check_amounts(case: Case) -> Iterator[Problem]:
    """Yield a warning for each unconfirmed amount outside the lines for this weight, and for urine charted twice."""
    yield from _urine_twice(case)
    used = volume_weight(case)
    if used is None:
        return
    yield from _given(case, used)
    yield from _losses(case, used)
    yield from _urine(case, used)


def _lines(case: Case, name: str) -> Mapping[str, float]:
    found = case.parameters.table(f"unusual.{name}")
    return {key: float(value) for key, value in found.items()}


def _listed(case: Case, name: str) -> Iterator[tuple[Map, Path]]:
    node = child(case.block, name)
    for index, entry in enumerate(node) if isinstance(node, List) else ():
        if isinstance(entry, Map) and "struck" not in entry and words(entry.get("confirmed")) != "yes":
            yield entry, ("fluid", name, index)


def _judged(
    node: Node, path: Path, value: float, unit: str, used: Used, lines: Mapping[str, float]
) -> Iterator[Problem]:
    """The warning on an amount above 0 that lies outside its lines; nothing at all is its own statement."""
    by_weight = value / used.kg
    low, high = lines.get("from"), lines.get("to")
    if value <= 0 or not ((high is not None and by_weight > high) or (low is not None and by_weight < low)):
        return
    said = f"{number_text(by_weight, PLACES)} {unit}" if by_weight * 100 >= 1 else f"under 0.01 {unit}"
    usual = [f"{word} {number_text(line, PLACES)}" for word, line in (("from", low), ("to", high)) if line]
    yield Problem(
        node,
        path,
        f"{words(node)} is unusual for {used.name}: {said} (usual {' '.join(usual)} {unit})",
        CURE,
        Severity.UNUSUAL,
    )


def _given(case: Case, used: Used) -> Iterator[Problem]:
    for entry, path in _listed(case, "given"):
        purpose = words(entry.get("purpose")) or _purpose_of_line(case, entry)
        rate, rated = rate_of(entry), "rate" if "rate" in entry else "drops"
        if rate is not None:
            name = "resuscitation_rate" if purpose in ("resuscitation", "colloid") else "other_rate"
            lines = _lines(case, "any_rate" if not purpose else name)
            yield from _judged(entry[rated], (*path, rated), rate, "mL/kg/h", used, lines)
        bolus = words(entry.get("bolus")) == "yes"
        for key, name in (("volume", "bolus" if bolus else "volume"), ("before_arrival", "before_arrival")):
            volume = amount(entry.get(key), "mL")
            if volume is not None:
                lines = _lines(case, name)
                yield from _judged(entry[key], (*path, key), volume, "mL/kg", used, lines)


def _purpose_of_line(case: Case, entry: Map) -> str:
    """What a later rate of a line leaves out, the line said before."""
    name, node = words(entry.get("line")), child(case.block, "given")
    same = [
        words(other.get("purpose"))
        for other in (node if isinstance(node, List) else ())
        if isinstance(other, Map) and name and words(other.get("line")) == name
    ]
    return next((purpose for purpose in same if purpose), "")


def _losses(case: Case, used: Used) -> Iterator[Problem]:
    for entry, path in _listed(case, "losses"):
        volume = amount(entry.get("volume"), "mL")
        if volume is not None:
            lines = _lines(case, "loss")
            yield from _judged(entry["volume"], (*path, "volume"), volume, "mL/kg", used, lines)


def _urine_rows(case: Case) -> Iterator[tuple[datetime, Map, Path]]:
    """Every row that holds urine, with its path."""
    observations = case.state.root.get("observations")
    for day, times in observations.items() if isinstance(observations, Map) else ():
        for time, written in times.items() if isinstance(times, Map) else ():
            several = isinstance(written, List)
            for index, row in enumerate(written if isinstance(written, List) else (written,)):
                if isinstance(row, Map) and "struck" not in row and "urine" in row:
                    place = ("observations", str(day), str(time), *((index,) if several else ()), "urine")
                    yield case.clock.read_time(day, time), row, place


def _urine(case: Case, used: Used) -> Iterator[Problem]:
    hourly = {one.at: one for one in read_urine(case).readings if one.count == 1}
    lines = _lines(case, "urine_rate")
    for at, row, path in _urine_rows(case):
        one, node = hourly.get(at), row["urine"]
        if one is None or one.ml_h is None or _confirmed(row):
            continue
        shown = next((node[key] for key in ("volume", "pad") if isinstance(node, Map) and key in node), node)
        yield from _judged(shown, path, one.ml_h, "mL/kg/h", used, lines)


def _confirmed(row: Map) -> bool:
    return "yes" in (words(row.get("confirmed")), words(child(row.get("urine"), "confirmed")))


def _urine_twice(case: Case) -> Iterator[Problem]:
    """The same volume of urine twice in one minute, in rows that otherwise differ: both would be added."""
    seen: dict[tuple[datetime, float], Map] = {}
    for at, row, path in _urine_rows(case):
        node = row["urine"]
        volume = amount(node.get("volume") if isinstance(node, Map) else node, "mL")
        if volume is None or volume <= 0:
            continue
        before = seen.setdefault((at, volume), row)
        if before is row or _confirmed(row) or _confirmed(before) or _same(row, before):
            continue
        yield Problem(
            node,
            path,
            f"the same urine stands on line {before.line} for this minute; both are added",
            "strike one out, or add confirmed: yes if both were passed",
            Severity.UNUSUAL,
        )


def _same(row: Map, other: Map) -> bool:
    """Whether the whole rows are the same: then the rows themselves are asked about."""
    apart = ("by", "written", "note", "confirmed", "corrects")
    return {key: value for key, value in row.items() if key not in apart} == {
        key: value for key, value in other.items() if key not in apart
    }
