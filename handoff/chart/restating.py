"""Put a new value where an old one stands: around it where that can be read, else beside the old entry."""

from __future__ import annotations

from collections.abc import Mapping
from typing import Any

from msgspec import Struct

from handoff.chart import shape
from handoff.chart.describing import describe_key, same
from handoff.chart.drafting import Draft, Path
from handoff.chart.entries import ROWS, with_confirmed
from handoff.chart.insertion import Entry, Value
from handoff.chart.layout import CannotInsert
from handoff.chart.shape import Schema
from handoff.chart.standing import Standing
from handoff.state.nodes import List, Map, Node, Text, plain

_NOT_CARRIED = ("struck", "corrects", "confirmed")
_LONGEST = 4000


class SameAlready(ValueError):
    """The new value is the one that stands there."""


class Restating(Struct, frozen=True):
    """The draft, who changes it when and why, and whether an unusual new value was confirmed."""

    draft: Draft
    marks: Mapping[str, str]
    confirm: bool

    def strike(self, one: Standing) -> None:
        """Strike an entry out; it stays readable."""
        self.draft.extend(one.path, {"struck": dict(self.marks)})

    def strike_value(self, one: Standing, key: str, index: int | None, form: Schema) -> None:
        """Strike one value of a row out where it stands, or the row, whose rest is then written anew."""
        node, path = one.entry[key], (*one.path, key)
        if isinstance(node, List):
            form = shape.list_form(form) or shape.NOTHING
            places = [(*path, at) for at in (range(len(node)) if index is None else [index])]
        else:
            places = [path]
        try:
            if "struck" not in shape.keys_of(form):
                raise CannotInsert("a value of this key cannot be struck out by itself")
            for place in places:
                self._strike_at(place, form)
        except CannotInsert:
            self.row(one, key, None, form)

    def _strike_at(self, path: Path, form: Schema) -> None:
        node, marks = self.draft.node(path), {"struck": dict(self.marks)}
        if isinstance(node, Map):
            self.draft.extend(path, marks)
        elif "value" in shape.keys_of(form):
            self.draft.enclose(path, marks)
        else:
            raise CannotInsert(f"line {node.line}: a group of keys is due here")

    def value(self, one: Standing, key: str, new: Value, form: Schema) -> tuple[Any, Any]:
        """Put ``new`` around the value of a row, or strike the row and write it anew beside.

        Where a list of groups stands there, the group nearest to ``new`` is meant, and keeps
        what ``new`` does not say. Returns what stood there and what stands there now.

        Raises:
            SameAlready: ``new`` is what stands there.
        """
        node, path = one.entry[key], (*one.path, key)
        index = _nearest(node, new) if isinstance(node, List) else None
        if index is not None and isinstance(node, List):
            node, path = node[index], (*path, index)
            form = shape.list_form(form) or shape.NOTHING
            new = new[0] if isinstance(new, list) else new
        old = plain(node)
        new = _carried(old, new)
        if same(old, new):
            raise SameAlready(describe_key(key, old))
        if not self._in_place(node, path, new, form):
            whole: Value = new
            if index is not None:
                groups: list[Value] = list(tree_of(one.entry)[key])
                groups[index] = new
                whole = groups
            self.row(one, key, whole, form)
        return old, new

    def row(self, one: Standing, key: str, new: Value | None, form: Schema) -> None:
        """Strike a row out and write its rest anew, with the new value if there is one, and what it corrects."""
        old = tree_of(one.entry)
        rest = {name: value for name, value in old.items() if name not in _NOT_CARRIED and value != ""}
        signed: dict[str, Value] = {name: rest[name] for name in ("at", "by") if name in rest}
        corrects = {"value": describe_key(key, old[key])[:_LONGEST], **self.marks}
        self.strike(one)
        checked = with_confirmed(new, form) if new is not None and self.confirm else new
        if checked is not None:
            self._beside(one, {**rest, key: checked, "corrects": corrects})
            return
        del rest[key]
        if set(rest) - set(signed):
            self._beside(one, {**rest, "corrects": corrects})
        if new is not None:  # a mark that speaks for a whole entry must not speak for the rest of the row
            self._beside(one, {**signed, key: new, "confirmed": "yes", "corrects": corrects})

    def entry(self, one: Standing, new: Entry, was: str) -> dict[str, Any]:
        """Strike an entry of a list out and add one with the values of ``new`` and whatever else it held."""
        old = {
            key: value for key, value in tree_of(one.entry).items() if key not in _NOT_CARRIED and value != ""
        }
        restated = {**old, **new, "corrects": {"value": was[:_LONGEST], **self.marks}}
        if self.confirm:
            restated["confirmed"] = "yes"
        self.strike(one)
        self.draft.append(tuple(one.place.split(".")), restated)
        return {**old, **new}

    def _in_place(self, old: Node, path: Path, new: Value, form: Schema) -> bool:
        keys = shape.keys_of(form)
        group: Entry | None = None
        if isinstance(new, Mapping):
            group = new
        elif isinstance(new, str) and "value" in keys:
            group = {"value": new}
        if group is None or "corrects" not in keys:
            return False
        if self.confirm:
            group = {**group, "confirmed": "yes"}
        try:
            if isinstance(old, Map) and _keeps_its_group(old, group):
                self.draft.correct_inside(path, str(group["value"]), self.marks)
            else:
                self.draft.correct(path, group, self.marks)
        except CannotInsert:
            return False
        return True

    def _beside(self, one: Standing, entry: Entry) -> None:
        if one.place == ROWS:
            self.draft.beside(one.path[:3], entry)
        else:
            self.draft.append(tuple(one.place.split(".")), entry)


def _carried(old: Any, new: Value) -> Value:
    """A group keeps what the new one does not say; what spoke for the old value alone is left out."""
    if not isinstance(old, Mapping) or not isinstance(new, Mapping) or "value" in new:
        return new
    return {**{key: value for key, value in old.items() if key not in _NOT_CARRIED}, **new}


def _nearest(there: List, new: Value) -> int | None:
    """The place of the one group of a list that differs least from ``new``; None where two do, or none."""
    group = new[0] if isinstance(new, list) and len(new) == 1 else new
    if not isinstance(group, Mapping):
        return None
    wrong = [
        sum(not same(tree_of(one).get(key, ""), value) for key, value in group.items())
        if isinstance(one, Map)
        else len(group)
        for one in there
    ]
    return wrong.index(min(wrong)) if wrong and wrong.count(min(wrong)) == 1 else None


def _keeps_its_group(old: Map, new: Entry) -> bool:
    """Whether only the ``value`` of a group changes, and nothing in it speaks for the old value alone."""
    others = {key: value for key, value in new.items() if key != "value"}
    return (
        old.flow
        and isinstance(old.get("value"), Text)
        and "value" in new
        and not any(key in old for key in ("corrects", "confirmed"))
        and all(key in old and same(plain(old[key]), value) for key, value in others.items())
    )


def tree_of(entry: Map) -> dict[str, Any]:
    """Return an entry as plain data."""
    return {str(key): plain(value) for key, value in entry.items()}
