"""A state file on its way to a new text: each step inserts, is read back and is proved.

Proved means: the new text without the insertions is the old text, character for character,
and the new tree is the old tree with the one change that was meant.
"""

from __future__ import annotations

from collections.abc import Callable, Mapping, Sequence
from typing import Any, TypeAlias

from msgspec import Struct

from handoff.chart.insertion import Entry, Insertion, Value, pairs, scalar, woven
from handoff.chart.layout import CannotInsert, Layout
from handoff.state.faults import StateFaults
from handoff.state.nodes import List, Map, Node, Text, plain
from handoff.state.reader import read_nodes

Path: TypeAlias = tuple[str | int, ...]
Tree: TypeAlias = Any


class _Change(Struct, frozen=True):
    """One change: the block it is in, its insertions, how they are found, and what it does to the tree."""

    block: str
    insertions: list[Insertion]
    found: Callable[[Layout], list[Insertion]]
    meant: Callable[[Tree], Any]


class Draft:
    """The text and tree of a file with the changes made so far.

    Changes in different blocks of the file are put in together, so that a long file is read
    back once and not once for each.
    """

    def __init__(self, text: str, file: str) -> None:
        self.file = file
        self._root, faults = read_nodes(text, file)
        if faults:
            raise StateFaults(file, faults)
        self._tree: Tree = plain(self._root)
        self._parts: list[tuple[str, bool]] = [(text, True)]
        self._text = text
        self._waiting: list[_Change] = []

    @property
    def text(self) -> str:
        """The new text so far."""
        self._put_in()
        return self._text

    @property
    def root(self) -> Map:
        """The tree of the new text so far."""
        self._put_in()
        return self._root

    @property
    def kept(self) -> str:
        """The new text without what was inserted; the old text."""
        self._put_in()
        return "".join(part for part, is_old in self._parts if is_old)

    def node(self, path: Path) -> Node:
        """Return what stands at ``path``."""
        node: Any = self.root
        for step in path:
            node = node[step]
        return node  # type: ignore[no-any-return]

    def append(self, path: Sequence[str | int], entry: Entry) -> Path:
        """Add ``entry`` at the end of the list at ``path``, made if missing; return the path of the entry.

        Raises:
            CannotInsert: Something else than a list stands there, as in every change that follows
                where the layout has no safe place.
        """

        def meant(tree: Tree) -> int:
            place = _made(tree, path[:-1])
            place[path[-1]] = [*(place.get(path[-1]) or []), _copy(entry)]
            return len(place[path[-1]]) - 1

        block = "" if any(isinstance(step, int) for step in path) else str(path[0])
        index = self._change(block, lambda layout: layout.into_list(path, entry), meant)
        return (*path, index)

    def put(
        self, path: Sequence[str], key: str, value: Value, is_later: Callable[[str], bool] | None = None
    ) -> Path:
        """Add ``key: value`` to the mapping at ``path``, made if missing; return the path of the value."""

        def meant(tree: Tree) -> None:
            _made(tree, path)[key] = _copy(value)

        self._change(path[0], lambda layout: layout.into_map(path, key, value, is_later), meant)
        return (*path, key)

    def extend(self, path: Path, added: Entry) -> Path:
        """Add the keys of ``added``, none of which it has, to the entry at ``path``; return ``path``."""
        entry = self.node(path)
        if not isinstance(entry, Map) or any(key in entry for key in added):
            raise CannotInsert(f"line {entry.line}: the entry has one of these keys; change it by hand")

        def meant(tree: Tree) -> None:
            _at(tree, path).update(_copy(added))

        self._change("", lambda layout: layout.into_entry(entry, added), meant)
        return path

    def beside(self, path: Path, entry: Entry) -> Path:
        """Add ``entry`` beside the one, or to the list, at ``path``; return the path of the new entry."""
        node = self.node(path)

        def meant(tree: Tree) -> int:
            place = _at(tree, path[:-1])
            there = place[path[-1]]
            place[path[-1]] = [*(there if isinstance(there, list) else [there]), _copy(entry)]
            return len(place[path[-1]]) - 1

        index = self._change("", lambda layout: layout.beside(node, entry), meant)
        return (*path, index)

    def correct(self, path: Path, new: Entry, corrects: Mapping[str, str]) -> Path:
        """Put ``new`` around the value at ``path``, which stays inside as the value corrected; return ``path``.

        Raises:
            CannotInsert: The old value is written in a way that cannot stand inside another.
        """
        node = self.node(path)
        old, quote = _inside(node, self.text)
        before = f"{{{pairs(new)}, corrects: {{value: {quote}"
        after = f"{quote}, {pairs(corrects)}}}}}"

        def meant(tree: Tree) -> None:
            _at(tree, path[:-1])[path[-1]] = {**_copy(new), "corrects": {"value": old, **corrects}}

        self._change("", lambda layout: layout.around(node, before, after), meant)
        return path

    def enclose(self, path: Path, added: Entry) -> Path:
        """Make a group with ``added`` of the text at ``path``, which becomes its ``value``; return ``path``.

        Raises:
            CannotInsert: The text is written in a way that cannot stand inside a group.
        """
        node = self.node(path)
        old, quote = _inside(node, self.text)

        def meant(tree: Tree) -> None:
            _at(tree, path[:-1])[path[-1]] = {"value": old, **_copy(added)}

        after = f"{quote}, {pairs(added)}}}"
        self._change("", lambda layout: layout.around(node, f"{{value: {quote}", after), meant)
        return path

    def correct_inside(self, path: Path, value: str, corrects: Mapping[str, str]) -> Path:
        """Put ``value`` before the ``value:`` of the group at ``path``, whose other keys stay; return ``path``."""
        inner = self.node((*path, "value"))
        old, quote = _inside(inner, self.text)
        before = f"{scalar(value)}, corrects: {{value: {quote}"

        def meant(tree: Tree) -> None:
            _at(tree, path).update({"value": value, "corrects": {"value": old, **corrects}})

        after = f"{quote}, {pairs(corrects)}}}"
        self._change("", lambda layout: layout.around(inner, before, after), meant)
        return path

    def _change(
        self, block: str, found: Callable[[Layout], list[Insertion]], meant: Callable[[Tree], Any]
    ) -> Any:
        """Take up a change; one whose place depends on an earlier one (no block named) is put in alone."""
        if not block or any(one.block in ("", block) for one in self._waiting):
            self._put_in()
        insertions = found(self._layout)
        self._waiting.append(_Change(block, insertions, found, meant))
        result = meant(self._tree)
        if not block:
            self._put_in()
        return result

    @property
    def _layout(self) -> Layout:
        return Layout(self._text, self._root)

    def _put_in(self) -> None:
        changes, self._waiting = self._waiting, []
        if not changes:
            return
        together = [insertion for change in changes for insertion in change.insertions]
        if self._step(together, self._tree):
            return
        tree = plain(self._root)
        for change in changes:  # two of them meant the same place: one after the other then
            change.meant(tree)
            if not self._step(change.found(self._layout), tree):
                line = self._text.count("\n", 0, min(one.place for one in change.insertions)) + 1
                self._tree = plain(self._root)
                ended = self._text.endswith(("\n", "\r"))
                first = "" if ended else "put a line break at the end of the file and try again, or "
                raise CannotInsert(
                    f"line {line}: its layout has no safe place for the entry; {first}write it by hand"
                )
        self._tree = tree

    def _step(self, insertions: list[Insertion], expected: Tree) -> bool:
        """Put insertions in if the result reads as ``expected``; return whether they were."""
        parts = woven(self._text, insertions)
        text = "".join(part for part, _ in parts)
        try:
            root, faults = read_nodes(text, self.file)
        except StateFaults:
            return False
        if faults or plain(root) != expected or "".join(part for part, old in parts if old) != self._text:
            return False
        self._parts = _rewoven(self._parts, insertions)
        self._text, self._root = text, root
        return True


def _rewoven(parts: list[tuple[str, bool]], insertions: list[Insertion]) -> list[tuple[str, bool]]:
    """Put insertions into a text that is made of old and new parts, and keep which part is which."""
    made: list[tuple[str, bool]] = []
    begin = 0
    waiting = sorted(insertions, key=lambda one: one.place)
    for part, is_old in parts:
        end = begin + len(part)
        here = [one for one in waiting if one.place < end]
        waiting = waiting[len(here) :]
        moved = [Insertion(one.place - begin, one.text) for one in here]
        made += [(text, is_old and stood) for text, stood in woven(part, moved)]
        begin = end
    return [*made, *((one.text, False) for one in waiting)]


def _inside(node: Node, text: str) -> tuple[str, str]:
    """Return what ``corrects: {value:}`` will say of the old value, and the quotes it needs around it."""
    raw = text[node.start : node.end]
    quote = next((mark for mark in ('"', "'") if mark not in raw and not (mark == '"' and "\\" in raw)), None)
    if "\n" in raw or "\r" in raw or raw[:1] in "|>" or (isinstance(node, Map | List) and not node.flow):
        raise CannotInsert(f"line {node.line}: the old value runs over several lines")
    if isinstance(node, Text) and (not node.plain or scalar(raw) == raw):
        return str(node), ""
    if quote is None:
        raise CannotInsert(f"line {node.line}: the old value holds both kinds of quotes")
    return raw, quote


def _copy(value: Value) -> Any:
    if isinstance(value, str):
        return str(value)
    if isinstance(value, Mapping):
        return {key: _copy(part) for key, part in value.items()}
    return [_copy(part) for part in value]


def _made(tree: Tree, path: Sequence[str | int]) -> Any:
    for name in path:
        if isinstance(name, str) and not tree.get(name):
            tree[name] = {}
        tree = tree[name]
    return tree


def _at(tree: Tree, path: Path) -> Any:
    for step in path:
        tree = tree[step]
    return tree
