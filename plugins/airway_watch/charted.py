"""What was charted, in an order that does not depend on how the file was typed."""

from __future__ import annotations

from datetime import datetime, timedelta

from msgspec import Struct

from handoff.plugin import Case, Map, Node, Row, amount, child, entries, words

SUSPICION_SIGNS = (
    "stridor",
    "hoarse voice",
    "soot in mouth",
    "soot in sputum",
    "singed nasal hair",
    "singed facial hair",
    "red or swollen throat",
    "burn in mouth",
    "burn around mouth",
    "swelling of face or neck",
    "breathlessness",
    "laboured breathing",
    "wheeze",
    "difficulty swallowing",
    "drooling",
    "altered consciousness",
)
"""Signs that are named as not recorded when nobody looked for them."""

FURTHER_SIGNS = (
    "choking",
    "eye or throat irritation",
    "fast breathing",
    "crackles",
    "accessory muscle use",
    "shallow breathing",
    "agitation",
    "tiring",
    "unable to clear secretions",
    "whole face burned",
    "airway trauma",
    "swelling at laryngoscopy",
)
SIGNS = (*SUSPICION_SIGNS, *FURTHER_SIGNS)

PRESENT, ABSENT = "present", "absent"
CO = "carboxyhaemoglobin"


def ordered(case: Case, node: Node | None, key: str = "at") -> tuple[Row, ...]:
    """Return the entries of a list by time; entries of one minute by their content, never by their place."""
    rows = case.state.dated(node, key)
    return tuple(sorted(rows, key=lambda row: (row.at, _content(row.entry))))


def _content(entry: Map) -> str:
    return str(sorted((str(key), str(value)) for key, value in entry.items()))


def block_rows(case: Case, name: str, key: str = "at") -> tuple[Row, ...]:
    """Return the entries of one list of the plugin's block, by time."""
    return ordered(case, child(case.block, name), key)


class Sign(Struct, frozen=True):
    """The latest assessment of one sign; ``since`` is when the present run of "present" began."""

    name: str
    state: str
    at: datetime
    by: str
    since: datetime
    line: int

    @property
    def present(self) -> bool:
        """Whether it was found when last looked for."""
        return self.state == PRESENT


def signs(case: Case) -> tuple[Sign, ...]:
    """Return the latest assessment of each sign that was ever looked for, in the order of ``SIGNS``.

    "Not assessed" leaves the earlier assessment standing. Of two entries in one minute, present wins.
    """
    seen: dict[str, list[tuple[Row, str]]] = {}
    for row in block_rows(case, "signs"):
        for name, node in row.entry.items():
            if node in (PRESENT, ABSENT):
                seen.setdefault(str(name), []).append((row, str(node)))
    for charted in seen.values():
        charted.sort(key=lambda pair: (pair[0].at, pair[1] == PRESENT))
    return tuple(_latest(name, seen[name]) for name in SIGNS if name in seen)


def _latest(name: str, seen: list[tuple[Row, str]]) -> Sign:
    row, state = seen[-1]
    since = row.at
    for earlier, was in reversed(seen):
        if was != state:
            break
        since = earlier.at
    return Sign(name, state, row.at, words(row.entry.get("by")), since, row.line)


def worse_at(case: Case) -> datetime | None:
    """Return when a sign was last charted as worse than before, or None."""
    return max(
        (row.at for row in block_rows(case, "signs") if words(row.entry.get("worse")) == "yes"), default=None
    )


def check_times(case: Case) -> tuple[datetime, ...]:
    """Return when the airway was checked: entries in which at least one sign was looked for."""
    return tuple(
        row.at
        for row in block_rows(case, "signs")
        if any(words(row.entry.get(name)) in (PRESENT, ABSENT) for name in SIGNS)
    )


class Level(Struct, frozen=True):
    """One measured carboxyhaemoglobin in %, when the blood was taken, and the node it was read from."""

    at: datetime
    pct: float
    node: Node


def levels(case: Case) -> tuple[Level, ...]:
    """Return every measured carboxyhaemoglobin, oldest first; of one minute the higher comes last."""
    found = []
    for row in block_rows(case, CO):
        node = row.entry.get("value")
        pct = amount(node, "%")
        if pct is not None and node is not None:
            found.append(Level(row.at, pct, node))
    for reading in case.state.result_series(CO):
        pct = amount(reading.node, "%")
        if pct is not None:
            found.append(Level(reading.at, pct, reading.node))
    return tuple(sorted(found, key=lambda level: (level.at, level.pct)))


class Tube(Struct, frozen=True):
    """The tube in the airway now, or the moment since which there is none."""

    since: datetime | None
    entry: Map | None
    extubated: datetime | None

    @property
    def in_place(self) -> bool:
        """Whether a tube is in place as charted."""
        return self.since is not None


def tube(case: Case) -> Tube:
    """Return whether a tube is in place, from the tubes of the block and the events of the file.

    A tube that is changed within one minute leaves the new one in place.
    """
    rows = block_rows(case, "tube", "placed")
    extubations = [row.at for row in case.state.events("extubation")]
    removals = [at for row in rows if (at := case.when(row.entry.get("removed"))) is not None]
    out = [*extubations, *removals]
    standing = [
        row for row in rows if "removed" not in row.entry and not any(at > row.at for at in extubations)
    ]
    begun = [row.at for row in standing]
    begun += [row.at for row in case.state.events("intubation") if not any(at >= row.at for at in out)]
    entry = standing[-1].entry if standing else None
    return Tube(max(begun, default=None), entry, max(out, default=None))


def gcs_total(row: Row) -> int | None:
    """Return the coma scale total of an observation row; None with a part missing or not testable."""
    parts = [words(child(row.entry, "gcs", part)) for part in ("eye", "verbal", "motor")]
    return sum(int(part) for part in parts) if all(part.isdigit() for part in parts) else None


def causes(case: Case) -> tuple[Map, ...]:
    """Return the charted causes of the injury."""
    return entries(case.state.injury.get("causes"))


def minutes(span: timedelta) -> float:
    """Return a span of time in min."""
    return span / timedelta(minutes=1)
