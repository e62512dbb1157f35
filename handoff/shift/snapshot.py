"""What was known of one patient at one moment: from an assessment, or from the items.json of a document."""

from __future__ import annotations

import json
from collections.abc import Mapping
from datetime import UTC, datetime
from typing import Any

from msgspec import Struct

from handoff.assess import Assessment
from handoff.document.references import references
from handoff.plugin import Clock, Item
from handoff.shift.people import Person, person_in, person_of


class NotItems(ValueError):
    """A text is not an items.json that can be compared; says what to do."""


class Seen(Struct, frozen=True):
    """One item as it was printed; ``value`` is a number, a text, or None."""

    key: str
    label: str
    system: str
    value: float | str | None
    unit: str
    shown: str
    flag: str
    as_of: datetime | None
    detail: bool = False


class Planned(Struct, frozen=True):
    """One line of the care plan; ``ref`` is empty where it is not known."""

    key: str
    text: str
    ref: str = ""


class Snapshot(Struct, frozen=True):
    """Everything that two moments of one patient are compared by."""

    person: Person
    at: datetime
    policy: str
    digest: str
    items: tuple[Seen, ...]
    plan: tuple[Planned, ...]


def snapshot_of(assessment: Assessment) -> Snapshot:
    """Return what an assessment knows."""
    refs = references(assessment.actions)
    return Snapshot(
        person=person_of(assessment.state),
        at=assessment.now,
        policy=assessment.policy.name,
        digest=assessment.state.digest,
        items=tuple(_seen(item, assessment.state.clock) for item in assessment.items),
        plan=tuple(Planned(one.key, one.text, refs[one.key]) for one in assessment.actions),
    )


def snapshot_in(text: str, file: str) -> Snapshot:
    """Return what the ``items.json`` in ``text`` knows; ``file`` names it in messages.

    Raises:
        NotItems: It is no items.json, or does not say whose it is.
    """
    cure = "give an items.json that handoff draft wrote, or the earlier state file"
    try:
        data = json.loads(text)
        person = person_in(data)
        if person is None:
            raise NotItems(f"{file} does not say whose it is; {cure}")
        return Snapshot(
            person=person,
            at=_moment(data["at"]),
            policy=str(data["policy"]),
            digest=str(data["digest"]),
            items=tuple(_read(item) for item in data["items"]),
            plan=tuple(Planned(str(one["key"]), str(one["text"])) for one in data["actions"]),
        )
    except NotItems:
        raise
    except (ValueError, KeyError, TypeError, AttributeError, RecursionError):
        raise NotItems(f"{file} is not an items.json; {cure}") from None


def _seen(item: Item, clock: Clock) -> Seen:
    value = clock.iso(item.value) if isinstance(item.value, datetime) else item.value
    return Seen(
        key=item.key,
        label=item.label,
        system=item.system.value,
        value=value,
        unit=item.unit,
        shown=item.shown,
        flag=item.flag.value,
        as_of=item.as_of,
        detail=item.detail,
    )


def _read(data: Mapping[str, Any]) -> Seen:
    value = data["value"]
    if isinstance(value, bool) or not isinstance(value, (int, float, str, type(None))):
        raise TypeError("a value is a number, a text or nothing")
    return Seen(
        key=str(data["key"]),
        label=str(data["label"]),
        system=str(data["system"]),
        value=value,
        unit=str(data["unit"]),
        shown=str(data["shown"]),
        flag=str(data["flag"]),
        as_of=_moment(data["as_of"]) if data["as_of"] else None,
    )


def _moment(text: str) -> datetime:
    moment = datetime.fromisoformat(text)
    if moment.tzinfo is None:
        raise ValueError("a moment has its offset")
    return moment.astimezone(UTC)
