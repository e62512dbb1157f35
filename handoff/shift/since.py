"""What changed between two moments of one patient: values with direction, flags, gaps, tasks."""

from __future__ import annotations

import re
from collections import Counter
from collections.abc import Iterable
from datetime import datetime

from handoff.document.changes import Change, ChangedSystem, Changes
from handoff.document.handover import ELSEWHERE
from handoff.document.sections import sentence
from handoff.plugin import Clock, Flag, System, hours_text
from handoff.shift.people import same_patient
from handoff.shift.snapshot import Planned, Seen, Snapshot

NOT_COMPARED = frozenset(("injury.hours_since", *ELSEWHERE))
"""What changes with the clock alone, and what the nurse asks for, which stands in tables of its own."""

LONGEST_TEXT = 110
"""A text is cut at a clause after so many letters; the parts of the document hold it whole."""

_NUMBERED = re.compile(r"(.+)\.\d+")
_LEADING = re.compile(r"([+-]?\d[\d,]*(?:\.\d+)?)(?:/\d+)? ?([A-Za-z%/][^\s;,(]*)?")
_DAY = re.compile(r", day \d+")
_CLAUSE = re.compile(r"(?<=;) |(?<=\w\w\w\.) ")
_WORDS = {Flag.ACTION.value: "ACTION", Flag.REVIEW.value: "REVIEW"}
_MISSING = Flag.NOT_RECORDED.value


class WrongOrder(ValueError):
    """The file given as the earlier one is the later one."""


def changes(earlier: Snapshot, later: Snapshot, clock: Clock) -> Changes:
    """Return what changed from ``earlier`` to ``later``, by system.

    Raises:
        DifferentPatients: The two are not of one patient.
        WrongOrder: ``earlier`` is the later one.
    """
    notes = list(same_patient(earlier.person, later.person))
    since, now = clock.day_and_time(earlier.at), clock.day_and_time(later.at)
    if earlier.at > later.at:
        raise WrongOrder(f"it is of {since}, later than {now}; give the newer file first")
    if earlier.policy != later.policy:
        notes.append(
            f"the policy was {earlier.policy} and is {later.policy}; a figure may differ for that reason"
        )
    systems = _by_system(list(_changed(earlier, later, clock)))
    new = tuple(f"{one.ref} {one.text}".strip() for one in _missing_from(earlier.plan, later.plan))
    ended = tuple(one.text for one in _missing_from(later.plan, earlier.plan))
    if not (systems or new or ended):
        notes.append("no value, flag, gap or task changed; that does not say that nothing happened")
    elif any(row.how.endswith("ended") for system in systems for row in system.rows):
        notes.append("a flag that ended does not say that the patient is well")
    passed = hours_text((later.at - earlier.at).total_seconds() / 3600)
    return Changes(f"What changed since {since} ({passed})", tuple(notes), systems, new, ended)


def _changed(earlier: Snapshot, later: Snapshot, clock: Clock) -> Iterable[tuple[str, Change]]:
    """Yield each change with its system, in the order of the items of the later snapshot."""
    before = {item.key: item for item in earlier.items if not _NUMBERED.fullmatch(item.key)}
    for item in later.items:
        if item.detail or item.key in NOT_COMPARED or _NUMBERED.fullmatch(item.key):
            continue
        change = _change(before.get(item.key), item, clock, later.at)
        if change:
            yield item.system, change
    here = {item.key for item in later.items}
    for item in earlier.items:
        gone = item.key not in here and item.flag != _MISSING and not _NUMBERED.fullmatch(item.key)
        if gone:
            what = _printed(item, clock, later.at)
            yield item.system, Change(sentence(item.label), what, "no longer listed", _ended(item.flag))
    yield from _listed(earlier, later, clock)


def _listed(earlier: Snapshot, later: Snapshot, clock: Clock) -> Iterable[tuple[str, Change]]:
    """Yield what is new or gone among items that are only numbered: lines, events."""
    for mine, others, is_new in ((later, earlier, True), (earlier, later, False)):
        known = Counter(_content(item) for item in others.items)
        for item in mine.items:
            content = _content(item)
            if content is None or item.detail or item.flag == _MISSING:
                continue
            if known[content]:
                known[content] -= 1
                continue
            said = _printed(item, clock, later.at)
            label = sentence(item.label)
            if is_new:
                yield item.system, Change(label, "", said, _new(item.flag))
            else:
                yield item.system, Change(label, said, "no longer listed", "ended")


def _content(item: Seen) -> tuple[str, str, str] | None:
    """Return what a numbered item is known by: not its number, nor the count of its days."""
    numbered = _NUMBERED.fullmatch(item.key)
    return (numbered[1], item.label, _DAY.sub("", item.shown)) if numbered else None


def _change(before: Seen | None, now: Seen, clock: Clock, at: datetime) -> Change | None:
    label = sentence(now.label)
    said = _printed(now, clock, at)
    if before is None:
        return Change(label, "", said, _new(now.flag))
    was = _printed(before, clock, at)
    if _MISSING in (now.flag, before.flag):
        if now.flag == before.flag:
            return None
        how = (
            "not recorded now"
            if now.flag == _MISSING
            else _joined("recorded now", _flag_change("", now.flag))
        )
        return Change(label, was, said, how)
    flag = _flag_change(before.flag, now.flag)
    if not _differs(before, now):
        return Change(label, was, said, flag) if flag else None
    if _headline(before) == _headline(now):
        was, said = _timed(before, before.shown, clock, at), _timed(now, now.shown, clock, at)
    return Change(label, was, said, _joined(_direction(before, now), flag))


def _differs(before: Seen, now: Seen) -> bool:
    if isinstance(now.value, (int, float)) and isinstance(before.value, (int, float)):
        return now.value != before.value and _headline(now) != _headline(before)
    if now.value is not None and before.value is not None and now.unit != "time":
        return now.value != before.value
    return _DAY.sub("", now.shown) != _DAY.sub("", before.shown)


def _direction(before: Seen, now: Seen) -> str:
    one, other = _number(before), _number(now)
    if one is None or other is None or one[1] != other[1] or one[0] == other[0]:
        return "changed"
    return "up" if other[0] > one[0] else "down"


def _number(item: Seen) -> tuple[float, str] | None:
    """Return the number of an item with its unit: its value, or what its text begins with."""
    if isinstance(item.value, (int, float)):
        return float(item.value), item.unit
    found = _LEADING.match(item.value or "")
    return (float(found[1].replace(",", "")), found[2] or "") if found else None


def _flag_change(before: str, now: str) -> str:
    if before == now:
        return ""
    if now in _WORDS:
        return f"{_WORDS[before]} became {_WORDS[now]}" if before in _WORDS else f"new {_WORDS[now]}"
    return _ended(before)


def _ended(flag: str) -> str:
    return f"{_WORDS[flag]} ended" if flag in _WORDS else ""


def _new(flag: str) -> str:
    return "new, not recorded" if flag == _MISSING else _joined("new", _WORDS.get(flag, ""))


def _joined(*parts: str) -> str:
    return ", ".join(part for part in parts if part)


def _printed(item: Seen, clock: Clock, near: datetime) -> str:
    return _timed(item, _headline(item), clock, near)


def _timed(item: Seen, text: str, clock: Clock, near: datetime) -> str:
    if item.as_of is None or item.flag == _MISSING:
        return text
    time = clock.time(item.as_of, near)
    return text if time in text else f"{text} ({time})"


def _headline(item: Seen) -> str:
    """Return the beginning of what is printed: to the first clause after the figure, or after enough letters."""
    clauses = _CLAUSE.split(" ".join(item.shown.split()))
    kept = clauses[0]
    if _number(item) is None:
        for clause in clauses[1:]:
            if len(kept) >= LONGEST_TEXT:
                break
            kept += f" {clause}"
    return kept.rstrip(";")


def _missing_from(these: tuple[Planned, ...], those: tuple[Planned, ...]) -> list[Planned]:
    """Return the tasks of ``those`` that are not among ``these``; numbered ones are known by their text."""
    known = {_task(one) for one in these}
    return [one for one in those if _task(one) not in known]


def _task(one: Planned) -> str:
    numbered = _NUMBERED.fullmatch(one.key)
    return f"{numbered[1]}: {one.text}" if numbered else one.key


def _by_system(found: list[tuple[str, Change]]) -> tuple[ChangedSystem, ...]:
    systems = [*(system.value for system in System), *(system for system, _ in found)]
    made = []
    for system in dict.fromkeys(systems):
        rows = [change for name, change in found if name == system]
        rows.sort(key=lambda change: "new ACTION" not in change.how and "new, ACTION" not in change.how)
        if rows:
            made.append(ChangedSystem(sentence(system), tuple(rows)))
    return tuple(made)
