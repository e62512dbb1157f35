"""Phrases gathered into the entries that will be written, and put in their place."""

from __future__ import annotations

from collections.abc import Collection, Iterator, Mapping, Sequence
from datetime import datetime
from typing import Any

from msgspec import Struct, field
from msgspec.structs import replace

from handoff.chart import shape
from handoff.chart.asking import Refused
from handoff.chart.drafting import Draft, Path
from handoff.chart.insertion import Entry, Value
from handoff.chart.meanings import GROUP, LIST, OBSERVATION, Meaning, filled
from handoff.chart.phrases import Said
from handoff.chart.shape import Schema
from handoff.chart.times import spelled
from handoff.state.clock import Clock
from handoff.state.nodes import List, Map, Node, Text, path_text

ROWS = "observations"
CLOSED = ("struck", "confirmed", "written", "corrects")
"""Keys that speak for a whole entry: nothing is added to an entry that has one."""


class Moment(Struct, frozen=True):
    """When something was so, who charts it, and the late mark (empty where it is not late)."""

    at: datetime
    by: str
    written: str
    clock: Clock

    @property
    def spelled(self) -> str:
        """The moment as the file writes it."""
        return spelled(self.at, self.clock)

    @property
    def day_and_time(self) -> tuple[str, str]:
        """The date key and the time key of a row."""
        return self.spelled[:10], self.spelled[11:]


class Write(Struct, frozen=True):
    """One entry to be written: its keys in order, and the phrase and meaning that each came from."""

    kind: str
    path: tuple[str, ...]
    keys: Mapping[str, Value]
    said: Mapping[str, Said]
    confirmed: bool = False
    which: Mapping[str, Value] = field(default_factory=dict)

    @property
    def first(self) -> Meaning:
        """The meaning of its first phrase."""
        return next(iter(self.said.values())).meaning


class Placed(Struct):
    """An entry in its place."""

    write: Write
    path: Path
    joined: bool = False

    def said_at(self, fault_path: str) -> Said | None:
        """Return the phrase that a fault at that path is about, or None where it is about something else."""
        own = path_text(self.path)
        rest = fault_path.removeprefix(own)
        if not fault_path.startswith(own) or (rest and rest[0] not in ".["):
            return None
        key = rest.lstrip(".").partition(".")[0].partition("[")[0]
        said = self.write.said.get(key)
        if said is None and self.joined:
            return None
        return said or next(iter(self.write.said.values()))


class _Row(Struct):
    keys: dict[str, Value] = field(default_factory=dict)
    said: dict[str, Said] = field(default_factory=dict)


def gathered(
    phrases: Sequence[Said], moment: Moment, schema: Schema, confirmed: Collection[str]
) -> list[Write]:
    """Return the entries that ``phrases`` make; a phrase in ``confirmed`` is marked as checked.

    Raises:
        Refused: Two phrases chart the same thing.
    """
    rows: dict[tuple[str, str], _Row] = {}
    writes: list[Write] = []
    for said in phrases:
        meaning, value = said.meaning, said.value(moment.spelled, moment.by)
        is_checked = said.text in confirmed
        if not meaning.is_row:
            _into_list(writes, said, value, is_checked)
            continue
        form = _form(schema, meaning)
        alone = ""
        if is_checked:
            checked = with_confirmed(value, form)
            alone = said.text if checked is None else ""
            value = value if checked is None else checked
        row = rows.setdefault((meaning.kind, alone), _Row())
        _into_row(row, said, value, form)
    for (kind, alone), row in rows.items():
        path = (ROWS,) if kind == OBSERVATION else ("results",)
        writes.append(Write(kind, path, row.keys, row.said, bool(alone)))
    return writes


def _form(schema: Schema, meaning: Meaning) -> Schema:
    look = shape.observation if meaning.kind == OBSERVATION else shape.result
    return look(schema, meaning.place) or shape.NOTHING


def _into_row(row: _Row, said: Said, value: Value, form: Schema) -> None:
    key = said.meaning.place
    if key in row.keys:
        before = row.keys[key]
        if shape.list_form(form) is None or isinstance(value, str) or isinstance(before, str):
            raise Refused(f"'{row.said[key].text}' and '{said.text}' chart the same; keep one of them")
        value = [*_listed(before), *_listed(value)]
    row.keys[key] = value
    row.said.setdefault(key, said)


def _listed(value: Value) -> list[Any]:
    return [value] if isinstance(value, Mapping) else list(value)


def _into_list(writes: list[Write], said: Said, value: Value, is_checked: bool) -> None:
    if not isinstance(value, Mapping):
        raise Refused(f"'{said.text}' makes no entry")
    about = dict.fromkeys(value, said)
    path = said.meaning.path(said.values)
    for index, other in enumerate(writes):
        if said.meaning.together and other.first.together and other.path == path:
            clash = [key for key in value if key in other.keys and value[key] != other.keys[key]]
            if clash:
                raise Refused(f"'{other.said[clash[0]].text}' and '{said.text}' contradict each other")
            writes[index] = replace(
                other,
                keys={**other.keys, **value},
                said={**about, **other.said},
                confirmed=other.confirmed or is_checked,
            )
            return
    which = filled(said.meaning.which or {}, said.values, "", "")
    about_it = which if isinstance(which, Mapping) else {}
    writes.append(Write(said.meaning.kind, path, value, about, is_checked, about_it))


def with_confirmed(value: Value, form: Schema) -> Value | None:
    """Return ``value`` with ``confirmed: yes`` beside it, or None where the schema has no place for it."""
    group = shape.keys_of(form)
    if "confirmed" not in group:
        return None
    if isinstance(value, Mapping):
        return {**value, "confirmed": "yes"}
    return {"value": value, "confirmed": "yes"} if isinstance(value, str) and "value" in group else None


def placed(draft: Draft, write: Write, moment: Moment) -> Placed:
    """Put ``write`` into ``draft``: into a row of its minute and author, beside it, or as a new entry."""
    marks = {"written": moment.written} if moment.written else {}
    marks |= {"confirmed": "yes"} if write.confirmed else {}
    if write.kind == LIST:
        return Placed(write, draft.append(write.path, {**write.keys, **marks}))
    if write.kind == GROUP:
        return Placed(write, _put_group(draft, write.path, {**write.keys, **marks}, moment))
    if write.kind != OBSERVATION:
        return Placed(
            write, draft.append(write.path, {"at": moment.spelled, "by": moment.by, **write.keys, **marks})
        )
    entry = {"by": moment.by, **write.keys, **marks}
    there = list(rows_at(draft.root, moment.at, moment.clock))
    if not marks:
        for path, row in there:
            if _can_join(row, write.keys, moment.by):
                return Placed(write, draft.extend(path, write.keys), joined=True)
    day, time = moment.day_and_time
    if there:
        return Placed(write, draft.beside(there[0][0][:3], entry))
    days = draft.root.get(ROWS)
    if isinstance(days, Map) and day not in days and any(other > day for other in days):
        return Placed(write, (*draft.put((ROWS,), day, {time: entry}, lambda other: other > day), time))
    is_later = _later_than(moment, day)
    return Placed(write, draft.put((ROWS, day), time, entry, is_later))


def _put_group(draft: Draft, path: tuple[str, ...], entry: Entry, moment: Moment) -> Path:
    """Put in an entry that stands once; an earlier one stays readable inside it."""
    node: Node | None = draft.root
    for name in path:
        node = node.get(name) if isinstance(node, Map) else None
    if node is None or node == "":
        return draft.put(path[:-1], path[-1], entry)
    standing = node.get("at") if isinstance(node, Map) else None
    if not isinstance(standing, Text) or moment.clock.read(str(standing)) > moment.at:
        raise Refused(f"line {node.line}: a later '{path[-1]}' stands there; change it by hand")
    corrects = {"by": moment.by, "at": moment.spelled, "why": "a later entry took its place"}
    return draft.correct(path, entry, corrects)


def _later_than(moment: Moment, day: str) -> Any:
    return lambda time: moment.clock.read_time(day, time) > moment.at


def _can_join(row: Map, keys: Mapping[str, Value], by: str) -> bool:
    return row.get("by") == by and not any(key in row for key in (*CLOSED, *keys))


def rows_at(root: Map, at: datetime, clock: Clock) -> Iterator[tuple[Path, Map]]:
    """Yield every entry of the observations of that moment with its path, struck-out ones too."""
    days = root.get(ROWS)
    if not isinstance(days, Map):
        return
    for day, times in days.items():
        if not isinstance(times, Map):
            continue
        for time, written in times.items():
            if clock.read_time(day, time) == at:
                yield from _each((ROWS, str(day), str(time)), written)


def _each(path: Path, written: Node) -> Iterator[tuple[Path, Map]]:
    if isinstance(written, Map):
        yield path, written
    elif isinstance(written, List):
        for index, entry in enumerate(written):
            if isinstance(entry, Map):
                yield (*path, index), entry
