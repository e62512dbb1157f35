"""Add a key to an entry that stands: a line comes out, a procedure is done, a request is answered, a pump is read."""

from __future__ import annotations

from collections.abc import Mapping, Sequence

from handoff.chart.asking import Refused
from handoff.chart.describing import describe_entry, described, same
from handoff.chart.drafting import Draft, Path
from handoff.chart.entries import Moment, Placed, Write
from handoff.chart.insertion import Entry, Value
from handoff.chart.standing import listed_entries, stands
from handoff.state.nodes import List, Map, plain

SINCE = "@since"
"""In an entry added to a list inside: the end of the last one, or the beginning of the whole."""


def added_to(draft: Draft, write: Write, moment: Moment) -> Placed:
    """Add the keys of ``write`` to the one entry of its list that agrees with what it says of it.

    A list among them is added to the list that stands in the entry. Who added it, and when, is
    kept as a note where the entry has none.

    Raises:
        Refused: No such entry stands open, or several do.
    """
    text = next(iter(write.said.values())).text
    added = {**write.keys, **({"confirmed": "yes"} if write.confirmed else {})}
    place, entry = _the_one(draft, write.path, write.which, write.keys, text)
    inside = {key: value for key, value in added.items() if not isinstance(value, str | Mapping)}
    alone = {key: value for key, value in added.items() if key not in inside}
    where: Path = place
    for key, items in inside.items():
        for item in items:
            if isinstance(item, Mapping):
                where = draft.append((*place, key), _since(item, entry, key))
    if alone:
        if "note" not in entry and "note" not in alone:
            late = f", written {moment.written}" if moment.written else ""
            alone["note"] = f"{', '.join(map(str, alone))}: charted by {moment.by} for {moment.spelled}{late}"
        draft.extend(place, alone)
    return Placed(write, where, joined=True)


def _the_one(
    draft: Draft, path: Sequence[str], which: Mapping[str, Value], added: Entry, text: str
) -> tuple[Path, Map]:
    agreeing = [
        (place, entry)
        for place, entry in listed_entries(draft.root, path)
        if all(key in entry and same(value, plain(entry[key])) for key, value in which.items())
    ]
    single = [key for key, value in added.items() if isinstance(value, str)]
    still_open = [
        (place, entry)
        for place, entry in agreeing
        if not any(stands(entry, key) for key in (*single, "stopped", "removed"))
    ]
    if len(still_open) == 1:
        return still_open[0]
    called = ", ".join(described(value) for value in which.values())
    if len(still_open) > 1:
        lines = "; ".join(f"line {entry.line}: {_told(entry)}" for _, entry in still_open)
        raise Refused(
            f"'{text}' could mean {len(still_open)} entries ({lines}); say more of it, or write it by hand"
        )
    if agreeing:
        lines = ", ".join(f"line {entry.line}" for _, entry in agreeing)
        raise Refused(f"'{text}': {called} has that already ({lines}); to change it, write it by hand")
    raise Refused(f"'{text}': no {called} stands in {'.'.join(path)}")


def _told(entry: Map) -> str:
    tree = plain(entry)
    return describe_entry(tree) if isinstance(tree, dict) else ""


def _since(item: Mapping[str, Value], entry: Map, key: str) -> Entry:
    before = entry.get(key)
    last = before[-1] if isinstance(before, List) and before else None
    begin = str(last["to"]) if isinstance(last, Map) and "to" in last else str(entry.get("from", ""))
    return {name: begin if value == SINCE else value for name, value in item.items()}
