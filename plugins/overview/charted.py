"""Items that only repeat what was charted, or say that it was not."""

from __future__ import annotations

from datetime import datetime

from handoff.plugin import Flag, Item, Node, Part, System, line_of, words


def charted(
    key: str,
    label: str,
    shown: str,
    part: Part,
    system: System = System.GENERAL,
    *,
    node: Node | None = None,
    as_of: datetime | None = None,
    flag: Flag = Flag.NONE,
    rank: int | None = None,
    lethal_rank: int | None = None,
) -> Item:
    """Return an item that repeats ``shown``; empty text becomes "not recorded", never silence.

    ``rank`` puts what is there on page one, ``lethal_rank`` what is missing.
    """
    if not shown:
        return Item(
            key=key,
            label=label,
            part=part,
            system=system,
            shown="not recorded",
            flag=Flag.NOT_RECORDED,
            repeats=True,
            rank=lethal_rank,
        )
    return Item(
        key=key,
        label=label,
        part=part,
        system=system,
        value=shown,
        shown=shown,
        as_of=as_of,
        flag=flag,
        repeats=True,
        rank=rank,
        line=line_of(node),
    )


def with_detail(node: Node | None, *names: str) -> str:
    """Return the texts at ``names`` of an entry, joined by commas, leaving out what is missing."""
    parts = [words(node.get(name)) for name in names] if isinstance(node, dict) else []
    return ", ".join(part for part in parts if part)
