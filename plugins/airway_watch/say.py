"""Items of this plugin in the few shapes that it uses."""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from datetime import datetime

from handoff.plugin import Case, Flag, Item, Part, Source, System, Value, Working, joined, number_text

NOT_RECORDED = "not recorded"
PLACES = 1


def fact(
    key: str,
    label: str,
    shown: str,
    *,
    value: Value = None,
    unit: str = "",
    as_of: datetime | None = None,
    flag: Flag = Flag.NONE,
    system: System = System.AIRWAY,
    working: Working | None = None,
    sources: Iterable[Source] = (),
    cautions: Sequence[str] = (),
    rank: int | None = None,
    detail: bool = False,
    line: int = 0,
) -> Item:
    """Return an item of the assessment; one without a source only repeats what was charted."""
    cited = tuple(dict.fromkeys(sources))
    return Item(
        key=f"airway_watch.{key}",
        label=label,
        part=Part.ASSESSMENT,
        system=system,
        value=value,
        unit=unit,
        shown=shown,
        as_of=as_of,
        flag=flag,
        working=working,
        sources=cited,
        cautions=tuple(cautions),
        repeats=not cited,
        rank=rank,
        detail=detail,
        line=line,
    )


def gap(
    key: str,
    label: str,
    missing: str = "",
    *,
    unit: str = "",
    system: System = System.AIRWAY,
    rank: int | None = None,
    cautions: Sequence[str] = (),
    sources: Iterable[Source] = (),
) -> Item:
    """Return an item whose value is missing; ``missing`` says what was needed for it."""
    shown = f"not computed: {missing}" if missing else NOT_RECORDED
    return fact(
        key,
        label,
        shown,
        unit=unit,
        flag=Flag.NOT_RECORDED,
        system=system,
        rank=rank,
        cautions=cautions,
        sources=sources,
    )


def not_asked(key: str, label: str, unit: str) -> Item:
    """Return an item of breathing that must be there, where nothing recorded asks for it: not a gap."""
    shown = "not worked out: nothing recorded asks for it"
    return fact(key, label, shown, unit=unit, system=System.BREATHING, detail=True)


def pct(value: float) -> str:
    """Return a percentage as printed: ``18 %``, ``0.9 %``."""
    return f"{number_text(value, PLACES)} %"


def at(case: Case, moment: datetime) -> str:
    """Return a moment near now: ``14:15``, or with its date on another day."""
    return case.clock.time(moment, case.now)


def person(by: str) -> str:
    """Return `` by EM`` where a name was written."""
    return f" by {by}" if by else ""


def ago(case: Case, earlier: datetime) -> float:
    """Return the hours from ``earlier`` to now."""
    return case.hours_between(earlier, case.now)


def and_list(parts: Iterable[str]) -> str:
    """Return ``a, b and c``."""
    return joined(tuple(parts))
