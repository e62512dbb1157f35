"""Faults of the fluid block that a schema cannot see: what does not say when, how much or on which line."""

from __future__ import annotations

from collections.abc import Iterator
from datetime import datetime

from handoff.plugin import Case, List, Map, Problem, amount, child, words

from .amount_check import check_amounts
from .orders import ended_by, only_ends
from .portions import Stop, rate_of, stops_of
from .tube_check import check_tubes
from .weight_check import check_weights

Path = tuple[str | int, ...]
SAYS_SOMETHING = ("rate", "drops", "volume", "ice", "before_arrival", "running", "stopped")
SETS = ("formula", "coefficient", "rate", "urine_target", "urine_target_per_kg", "ended")


def check(case: Case) -> tuple[Problem, ...]:
    """Return the faults of the fluid block and of the weight, in the order of the file."""
    return (
        *check_weights(case),
        *_orders(case),
        *_given(case),
        *_lines(case),
        *check_amounts(case),
        *check_tubes(case),
    )


def _rows(case: Case, name: str) -> Iterator[tuple[Map, Path]]:
    node = child(case.block, name)
    if isinstance(node, List):
        for index, entry in enumerate(node):
            if isinstance(entry, Map) and "struck" not in entry:
                yield entry, ("fluid", name, index)


def _orders(case: Case) -> Iterator[Problem]:
    seen: dict[tuple[datetime, str], Path] = {}
    for entry, path in _rows(case, "orders"):
        if not any(key in entry for key in SETS):
            yield Problem(
                entry, path, "the order orders nothing", "add formula:, coefficient:, rate: or urine_target:"
            )
        if words(entry.get("formula")) == "local" and not {"coefficient", "rate"} & set(entry):
            yield Problem(
                entry["formula"],
                (*path, "formula"),
                "a local formula has no figure",
                "add coefficient: or rate:",
            )
        if "urine_target" in entry and "urine_target_per_kg" in entry:
            yield Problem(
                entry["urine_target"],
                (*path, "urine_target"),
                "two urine targets stand in one order",
                "keep urine_target: or urine_target_per_kg:",
            )
        yield from _targets(entry, path)
        yield from _ending(case, entry, path)
        at = case.when(entry.get("at"))
        for kind in ("fluid", "urine"):
            names = SETS[:3] if kind == "fluid" else SETS[3:5]
            if at is None or not any(name in entry for name in names):
                continue
            if (at, kind) in seen:
                yield Problem(
                    entry["at"],
                    (*path, "at"),
                    f"two orders of {kind} stand at the same minute",
                    "strike one out, or write the minute at which the later one came",
                )
            seen[at, kind] = path


def _targets(entry: Map, path: Path) -> Iterator[Problem]:
    """A urine target whose lowest lies above its highest."""
    for name, unit in (("urine_target", "mL/h"), ("urine_target_per_kg", "mL/kg/h")):
        low, high = (amount(child(entry, name, end), unit) for end in ("from", "to"))
        node = child(entry, name, "to")
        if low is not None and high is not None and node is not None and low > high:
            yield Problem(
                node,
                (*path, name, "to"),
                f"the highest ({words(node)}) lies below the lowest ({words(child(entry, name, 'from'))})",
                "write the lower figure as from: and the higher as to:",
            )


def _ending(case: Case, entry: Map, path: Path) -> Iterator[Problem]:
    """An entry that only ends an order must leave no doubt which."""
    if not only_ends(entry) or case.when(entry.get("at")) is None or case.when(entry["ended"]) is None:
        return
    meant = ended_by(case, entry)
    if len(meant) == 1:
        return
    yield Problem(
        entry["ended"],
        (*path, "ended"),
        "two orders were in force at that time" if meant else "no order was in force at that time",
        "write ended: in the order that it ends",
    )


def _given(case: Case) -> Iterator[Problem]:
    for entry, path in _rows(case, "given"):
        if not any(key in entry for key in SAYS_SOMETHING):
            yield Problem(
                entry, path, "it does not say how much went in", "add volume: with at:, or rate: with from:"
            )
        if ("rate" in entry or "drops" in entry) and "from" not in entry:
            key = "rate" if "rate" in entry else "drops"
            yield Problem(entry[key], (*path, key), "the rate has no start", "add from: with date and time")
        if "rate" in entry and "drops" in entry:
            yield Problem(
                entry["drops"], (*path, "drops"), "rate and drops stand together", "keep one of them"
            )
        if "drops" in entry and "drop_factor" not in entry:
            yield Problem(
                entry["drops"],
                (*path, "drops"),
                "drops without the drop factor are no volume",
                "add drop_factor: as printed on the giving set, for example 20 drops/mL",
            )
        yield from _single(case, entry, path)
        if "line" not in entry and "from" not in entry:
            for key in ("running", "stopped"):
                if key in entry:
                    yield Problem(
                        entry[key],
                        (*path, key),
                        "it does not say which line",
                        "add line: as in the entry that began it",
                    )


def _single(case: Case, entry: Map, path: Path) -> Iterator[Problem]:
    for key in ("volume", "ice"):
        timed = "at" in entry or (key == "volume" and "from" in entry and "to" in entry)
        if key in entry and not timed:
            yield Problem(
                entry[key], (*path, key), "it does not say when it was given", "add at:, or from: and to:"
            )
    singles = [key for key in ("volume", "ice", "before_arrival") if key in entry]
    if singles and "purpose" not in entry:
        yield Problem(
            entry[singles[0]],
            (*path, singles[0]),
            "it does not say what it was for",
            "add purpose: resuscitation, colloid, maintenance, drug carrier, flush, feed, oral, blood product or other",
        )
    if "volume" in entry and ("rate" in entry or "drops" in entry):
        yield Problem(
            entry["volume"],
            (*path, "volume"),
            "a volume and a rate stand in one entry",
            "keep one, or make two entries",
        )
    start, end = case.when(entry.get("from")), case.when(entry.get("to"))
    if start and end and end <= start:
        yield Problem(entry["to"], (*path, "to"), "it ends before it began", "check both times")


def _lines(case: Case) -> Iterator[Problem]:
    """Entries of one line that contradict each other."""
    lines: dict[str, list[tuple[Map, Path]]] = {}
    for entry, path in _rows(case, "given"):
        name = words(entry.get("line"))
        if any(key in entry for key in ("rate", "drops", "running", "stopped")):
            lines.setdefault(name or f"\0{path}", []).append((entry, path))
    for rows in lines.values():
        yield from _line(case, rows)
    yield from _unnamed(case, [rows[0] for name, rows in lines.items() if name.startswith("\0")])


def _unnamed(case: Case, rows: list[tuple[Map, Path]]) -> Iterator[Problem]:
    """Rates without a line that run at one time: whether one replaces the other cannot be told."""
    spans: list[tuple[datetime, datetime]] = []
    for entry, path in rows:
        start = case.when(entry.get("from"))
        if start is None or rate_of(entry) is None:
            continue
        end = case.when(entry.get("stopped")) or max(start, case.now)
        if any(start == other or (start < until and other < end) for other, until in spans):
            yield Problem(
                entry,
                path,
                "two rates run at the same time and no line is named",
                "name the line: the same name replaces the rate, another name runs beside it",
            )
        spans.append((start, end))


def _line(case: Case, rows: list[tuple[Map, Path]]) -> Iterator[Problem]:
    starts: list[tuple[datetime, Map, Path]] = []
    for entry, path in rows:
        at = case.when(entry.get("from"))
        if at is None or rate_of(entry) is None:
            continue
        if any(at == other for other, _, _ in starts):
            yield Problem(
                entry["from"],
                (*path, "from"),
                "two rates begin at the same minute on one line",
                "strike one out; another line beside it needs a name of its own",
            )
        starts.append((at, entry, path))
    starts.sort(key=lambda found: found[0])
    if starts and "purpose" not in starts[0][1]:
        _, entry, path = starts[0]
        yield Problem(
            entry,
            path,
            "the first entry of a line does not say what it is for",
            "add purpose: resuscitation, colloid, maintenance, drug carrier, feed or other",
        )
    stops = stops_of(case, [entry for entry, _ in rows])
    rates = {at: rate_of(entry) or 0.0 for at, entry, _ in starts}
    for entry, path in rows:
        yield from _marks(case, entry, path, rates, stops)


def _marks(
    case: Case, entry: Map, path: Path, rates: dict[datetime, float], stops: list[Stop]
) -> Iterator[Problem]:
    own = case.when(entry.get("from"))
    for key in ("running", "stopped"):
        at = case.when(entry.get(key))
        if at is None:
            continue
        began = [start for start in rates if start <= at]
        if not began or (own is not None and at <= own and key == "stopped"):
            yield Problem(
                entry[key],
                (*path, key),
                "it comes before the line began",
                "check the time, or add the entry that began it",
            )
        elif key == "stopped" and at in rates and _begins_it(at, rate_of(entry) is None, rates, stops):
            yield Problem(
                entry[key],
                (*path, key),
                "the line was begun in the same minute",
                "write the minute at which it was stopped, or strike out the entry that is wrong",
            )
        elif key == "running" and any(
            began[-1] < stop.at < at or (stop.at < at and stop.ends_all(began[-1], rates, stops))
            for stop in stops
        ):
            yield Problem(
                entry[key],
                (*path, key),
                "the line was stopped before and not begun again",
                "add the entry that began it again: from: and rate:",
            )


def _begins_it(at: datetime, apart: bool, rates: dict[datetime, float], stops: list[Stop]) -> bool:
    """Whether a stop in an entry of its own stands in the minute of a rate with nothing running before."""
    return apart and not Stop(at, apart).ends_all(at, rates, stops)
