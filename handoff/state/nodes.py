"""The state file as plain data that knows where it was written.

A text, a list and a mapping of the file are a ``str``, a ``tuple`` and a ``dict``
with a line and a column, so that JSON Schema can check them as they are and every
figure can name the line it came from.
"""

from __future__ import annotations

from collections.abc import Iterable, Iterator
from typing import NoReturn, TypeAlias


class Text(str):
    """One value or key as it was typed; the schema decides what it means."""

    __slots__ = ("column", "end", "line", "plain", "start")
    line: int
    column: int
    start: int
    end: int
    plain: bool

    @classmethod
    def at(
        cls, value: str, line: int = 0, column: int = 0, start: int = 0, end: int = 0, plain: bool = True
    ) -> Text:
        """Return ``value`` with its place: line and column from 1, offsets in characters from 0."""
        text = cls(value)
        text.line, text.column, text.start, text.end, text.plain = line, column, start, end, plain
        return text

    def __reduce__(self) -> tuple[object, ...]:
        return Text.at, (str(self), self.line, self.column, self.start, self.end, self.plain)


class List(tuple["Node", ...]):
    """A list of the file, in its written order."""

    line: int
    column: int
    start: int
    end: int
    flow: bool

    @classmethod
    def at(
        cls,
        values: Iterable[Node],
        line: int = 0,
        column: int = 0,
        start: int = 0,
        end: int = 0,
        flow: bool = False,
    ) -> List:
        """Return a list of ``values`` with its place."""
        made = cls(values)
        made.line, made.column, made.start, made.end, made.flow = line, column, start, end, flow
        return made

    def __reduce__(self) -> tuple[object, ...]:
        return List.at, (tuple(self), self.line, self.column, self.start, self.end, self.flow)


class Map(dict[str, "Node"]):
    """A mapping of the file; its keys are :class:`Text` and know their own place. Read only."""

    __slots__ = ("column", "end", "flow", "line", "start")
    line: int
    column: int
    start: int
    end: int
    flow: bool

    @classmethod
    def at(
        cls,
        pairs: Iterable[tuple[Text, Node]] = (),
        line: int = 0,
        column: int = 0,
        start: int = 0,
        end: int = 0,
        flow: bool = False,
    ) -> Map:
        """Return a mapping of ``pairs`` with its place."""
        made = cls(pairs)
        made.line, made.column, made.start, made.end, made.flow = line, column, start, end, flow
        return made

    def __reduce__(self) -> tuple[object, ...]:
        return Map.at, (tuple(self.items()), self.line, self.column, self.start, self.end, self.flow)

    def key(self, name: str) -> Text:
        """Return the key ``name`` as it stands in the file, with its place."""
        for written in self:
            if written == name and isinstance(written, Text):
                return written
        return Text.at(name, self.line, self.column, self.start, self.start)

    def _read_only(self, *_: object, **__: object) -> NoReturn:
        raise TypeError("the patient state is read only")

    __setitem__ = __delitem__ = update = setdefault = pop = popitem = clear = _read_only
    __ior__ = _read_only


Node: TypeAlias = Text | List | Map


def line_of(node: Node | None) -> int:
    """Return the line of the file that holds ``node``, counted from 1; 0 when there is none."""
    return getattr(node, "line", 0)


def plain(node: Node) -> object:
    """Return ``node`` as ordinary ``dict``, ``list`` and ``str``, without places."""
    if isinstance(node, Map):
        return {str(key): plain(value) for key, value in node.items()}
    if isinstance(node, List):
        return [plain(value) for value in node]
    return str(node)


def walk(node: Node, path: tuple[str | int, ...] = ()) -> Iterator[tuple[tuple[str | int, ...], Node]]:
    """Yield every node below and including ``node`` with its path, parents first."""
    yield path, node
    if isinstance(node, Map):
        for key, value in node.items():
            yield from walk(value, (*path, str(key)))
    elif isinstance(node, List):
        for index, value in enumerate(node):
            yield from walk(value, (*path, index))


def path_text(path: Iterable[str | int]) -> str:
    """Return a path as a nurse would say it: ``area[2].burns[1].depth``, entries counted from 1."""
    said = ""
    for step in path:
        if isinstance(step, int):
            said += f"[{step + 1}]"
        else:
            said += f".{step}" if said else step
    return said
