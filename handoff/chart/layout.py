"""Where in a state file something can be added, whatever its layout; nothing that was there changes.

Lists, rows and blocks are found by the positions of the strict reader, in block style and in
braces, and what is missing on the way is made.
"""

from __future__ import annotations

import re
from collections.abc import Callable, Sequence

from handoff.chart.insertion import Entry, Insertion, Value, flow, pairs, scalar
from handoff.state.nodes import List, Map, Node, Text

STEP = "  "
_BREAK = re.compile(r"\r\n|[\r\n\x85\u2028\u2029]")


class CannotInsert(ValueError):
    """The file's layout has no safe place for the entry; says where."""


class Layout:
    """A file's text and nodes, and where in it something can be added."""

    def __init__(self, text: str, root: Map) -> None:
        self.text = text
        self.root = root
        first = _BREAK.search(text)
        self.newline = first.group() if first and first.group() in ("\r\n", "\r") else "\n"

    def into_list(self, path: Sequence[str | int], entry: Value) -> list[Insertion]:
        """Return what adds ``entry`` at the end of the list at ``path``, made if missing.

        Raises:
            CannotInsert: Something else than a list stands there.
        """
        node, rest = self._deepest(path)
        if rest:
            return [self._into_map(node, rest, f"- {flow(entry)}", f"[{flow(entry)}]")]
        if isinstance(node, List):
            return [self._append(node, flow(entry))]
        raise CannotInsert(f"line {node.line}: {'.'.join(map(str, path))} is not a list; change it by hand")

    def into_map(
        self, path: Sequence[str], key: str, value: Value, is_later: Callable[[str], bool] | None = None
    ) -> list[Insertion]:
        """Return what adds ``key: value`` to the mapping at ``path``, made if missing.

        ``is_later`` tells of a key that stands there whether the new one belongs before it; in
        braces, where the order is of no account, it goes to the end.

        Raises:
            CannotInsert: Something else than a mapping stands there.
        """
        node, rest = self._deepest(path)
        written = flow(value)
        if is_later and not rest and isinstance(node, Map) and not node.flow and key not in node:
            keys = [one for one in node if isinstance(one, Text)]
            later = next((index for index, one in enumerate(keys) if is_later(one)), None)
            if later is not None:
                line = f"{' ' * (keys[later].column - 1)}{scalar(key)}: {written}"
                return [self._line_before(keys[:later], node, path, line)]
        return [self._into_map(node, [*rest, key], written, written)]

    def into_entry(self, entry: Map, added: Entry) -> list[Insertion]:
        """Return what adds the keys of ``added`` to an entry that is there."""
        if entry.flow:
            return [self._into_braces(entry, pairs(added))]
        indent = " " * self._indent(entry)
        lines = [f"{self.newline}{indent}{scalar(key)}: {flow(value)}" for key, value in added.items()]
        return [Insertion(self._after(entry), "".join(lines))]

    def beside(self, node: Node, entry: Entry) -> list[Insertion]:
        """Return what makes a list of the entry at ``node`` (or takes its list) and adds ``entry`` to it.

        Raises:
            CannotInsert: Neither an entry nor a list stands there.
        """
        if isinstance(node, List):
            return [self._append(node, flow(entry))]
        if not isinstance(node, Map) or not node:
            raise CannotInsert(f"line {node.line}: an entry in braces is due here")
        if node.flow:
            self._check_braces(node)
            return [Insertion(node.start, "["), Insertion(node.end, f", {flow(entry)}]")]
        return self._beside_block(node, entry)

    def around(self, node: Node, before: str, after: str) -> list[Insertion]:
        """Return what puts ``before`` and ``after`` directly around the value at ``node``."""
        return [Insertion(node.start, before), Insertion(node.end, after)]

    def _beside_block(self, node: Map, entry: Entry) -> list[Insertion]:
        """An entry on lines of its own becomes the first of a list: a dash before it, the rest two deeper."""
        first = next(iter(node))
        begin = first.start if isinstance(first, Text) else node.start
        column = self._indent(node)
        if self.text[begin - column : begin].strip() or not column:
            raise CannotInsert(f"line {node.line}: the entry needs lines of its own")
        end = self._after(node)
        deeper = [
            Insertion(found.end(), STEP)
            for found in _BREAK.finditer(self.text, begin, end)
            if not _BREAK.match(self.text, found.end()) and found.end() < end
        ]
        added = f"{self.newline}{' ' * column}- {flow(entry)}"
        return [Insertion(begin, "- "), *deeper, Insertion(end, added)]

    def _deepest(self, path: Sequence[str | int]) -> tuple[Node, list[str]]:
        node: Node = self.root
        for index, name in enumerate(path):
            if isinstance(name, int) and isinstance(node, List):
                node = node[name]
                continue
            if not isinstance(node, Map) or name not in node or _is_blank(node[str(name)]):
                return node, [str(step) for step in path[index:]]
            node = node[str(name)]
        return node, []

    def _append(self, node: List, item: str) -> Insertion:
        if node.flow:
            return self._into_braces(node, item)
        return Insertion(self._after(node[-1]), f"{self.newline}{' ' * (node.column - 1)}- {item}")

    def _into_braces(self, node: Map | List, added: str) -> Insertion:
        self._check_braces(node)
        comma = ", " if node and not self._ends_in_comma(node) else ""
        return Insertion(node.end - 1, f"{comma}{added}")

    def _check_braces(self, node: Map | List) -> None:
        if self.text[node.start] not in "{[":
            raise CannotInsert(f"line {node.line}: put braces {{ }} around this entry")

    def _ends_in_comma(self, node: Map | List) -> bool:
        last = list(node.values())[-1] if isinstance(node, Map) else node[-1]
        rest = self.text[last.end : node.end - 1]
        return re.match(r"(?:\s|#[^\r\n]*)*,", rest) is not None

    def _into_map(self, node: Node, names: list[str], block: str, braces: str) -> Insertion:
        if not isinstance(node, Map):
            raise CannotInsert(f"line {node.line}: a group of keys is due here")
        if node.flow:
            for name in reversed(names[1:]):
                braces = f"{{{scalar(name)}: {braces}}}"
            return self._into_braces(node, f"{scalar(names[0])}: {braces}")
        if names[0] in node:
            key = node.key(names[0])
            return Insertion(
                self._line_end(key.end), self._nested(names[1:], block, key.column - 1 + len(STEP))
            )
        after = self._after(node) if node else len(self.text.rstrip())
        return Insertion(after, self._nested(names, block, self._indent(node)))

    def _nested(self, names: list[str], block: str, column: int) -> str:
        alone = not names or block.startswith("- ")
        said = ""
        for name in names if alone else names[:-1]:
            said += f"{self.newline}{' ' * column}{scalar(name)}:"
            column += len(STEP)
        line = block if alone else f"{scalar(names[-1])}: {block}"
        return f"{said}{self.newline}{' ' * column}{line}"

    def _line_before(self, earlier: list[Text], node: Map, path: Sequence[str], line: str) -> Insertion:
        """A new line after the entry before it, so that a comment stays above the entry that follows."""
        if earlier:
            last = earlier[-1]
            value = node[last]
            place = self._line_end(last.end) if _is_blank(value) else self._after(value)
        else:
            above, _ = self._deepest(path[:-1])
            if not isinstance(above, Map):
                raise CannotInsert(f"line {node.line}: a group of keys is due here")
            place = self._line_end(above.key(path[-1]).end)
        return Insertion(place, f"{self.newline}{line}")

    def _indent(self, node: Map) -> int:
        first = next(iter(node), None)
        return first.column - 1 if isinstance(first, Text) else 0

    def _after(self, node: Node) -> int:
        """Return the end of the line on which the last character of ``node`` stands."""
        return self._line_end(self._last(node))

    def _last(self, node: Node) -> int:
        if isinstance(node, Text):
            written = self.text[node.start : node.end]
            if re.match(r"[|>]\d?\+", written):  # its blank lines at the end are part of it
                return node.start + len(re.sub(r"(\r\n|[\r\n])\Z", "", written))
            return node.start + len(written.rstrip())
        if node.flow or not node:
            return node.end
        if isinstance(node, List):
            return self._last(node[-1])
        key, value = list(node.items())[-1]
        return key.end if _is_blank(value) and isinstance(key, Text) else self._last(value)

    def _line_end(self, offset: int) -> int:
        match = _BREAK.search(self.text, offset)
        return match.start() if match else len(self.text)


def _is_blank(node: Node) -> bool:
    return isinstance(node, Text) and not node and node.plain
