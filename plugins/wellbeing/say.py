"""Items of this plugin in the few shapes that it uses."""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from datetime import datetime

from handoff.plugin import Flag, Item, Part, Source, System, Value, Working

NOT_RECORDED = "not recorded"


def fact(
    key: str,
    label: str,
    shown: str,
    *,
    system: System,
    value: Value = None,
    unit: str = "",
    part: Part = Part.ASSESSMENT,
    as_of: datetime | None = None,
    flag: Flag = Flag.NONE,
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
        key=f"wellbeing.{key}",
        label=label,
        part=part,
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
