"""Find unsafe and vague wording in free text; each finding with its place, the safe form and the reason."""

from __future__ import annotations

from collections.abc import Iterable, Iterator, Mapping, Sequence
from typing import Any

from msgspec import Struct

from handoff.plugin import Map, Node, Text, child
from handoff.shift.wording.places import FreeText, free_texts, place_of
from handoff.shift.wording.table import Rule, Rules
from handoff.state.nodes import path_text

LONGEST_QUOTE = 60
"""Letters that are quoted of a finding."""

LONGEST_PIECE = 4000
"""Letters that are searched at once; a text of a state file is no longer."""


class Finding(Struct, frozen=True, order=True):
    """One stretch of text to be written otherwise: where it stands, what it is, and its rule."""

    line: int
    column: int
    where: str
    quoted: str
    rule: str
    safe: str
    why: str
    source: str

    def said(self, file: str) -> str:
        """Return the finding as one line; ``file`` names the file or the document."""
        place = f"{file}:{self.line}:{self.column}" if self.line else file
        where = f"{self.where}: " if self.where else ""
        quoted = f'"{self.quoted}": ' if self.quoted else ""
        return f"{place}: {where}{quoted}{self.safe}; {self.why}"


def check_state(root: Map, schema: Mapping[str, Any], raw: str, rules: Rules) -> list[Finding]:
    """Return what is to be written otherwise in the free text of a state file, in the order of the file.

    Args:
        root: The state as nodes.
        schema: The merged schema, which tells free text from quantities and words of a list.
        raw: The text of the file, for the places; without it they are those of the entry.
        rules: The table of rules.
    """
    found = [_missing_key(rule, root) for rule in rules.rules if rule.key and _lacks(root, rule.key)]
    for free in free_texts(root, schema):
        for start, end, rule in hits(str(free.text), rules.rules, free.path):
            line, column = place_of(free.text, start, str(free.text)[start:end], raw)
            found.append(_finding(line, column, path_text(free.steps), str(free.text)[start:end], rule))
    return sorted(found)


def count_in_state(root: Map, schema: Mapping[str, Any], rules: Rules) -> int:
    """Return how many findings the free text of a state file holds."""
    return len(check_state(root, schema, "", rules))


def check_lines(lines: Sequence[tuple[str, str]], rules: Rules) -> list[Finding]:
    """Return what is to be written otherwise in a document.

    Args:
        lines: Each line or paragraph with what names its place (empty: its number in the text).
        rules: The table of rules.
    """
    whole = "\n".join(text for _, text in lines)
    found = []
    for rule in rules.rules:
        if rule.missing is not None and whole.strip() and not rule.missing.search(whole):
            found.append(_finding(0, 0, "the whole text", "", rule))
    for number, (where, text) in enumerate(lines, start=1):
        for begin, piece in _pieces(text):
            for start, end, rule in hits(piece, rules.rules):
                place = (0, 0) if where else (number, begin + start + 1)
                found.append(_finding(*place, where, piece[start:end], rule))
    return found


def _pieces(text: str) -> Iterator[tuple[int, str]]:
    """Yield a line in pieces of bounded length, each with its offset, broken between words where it can be."""
    begin = 0
    while len(text) - begin > LONGEST_PIECE:
        end = text.rfind(" ", begin + 1, begin + LONGEST_PIECE)
        end = end if end > 0 else begin + LONGEST_PIECE
        yield begin, text[begin:end]
        begin = end
    yield begin, text[begin:]


def hits(text: str, rules: Iterable[Rule], path: str | None = None) -> list[tuple[int, int, Rule]]:
    """Return where rules speak up in ``text``, in its order; each stretch belongs to the first rule.

    Args:
        text: Free text.
        rules: In the order in which they claim a stretch.
        path: Where in a state file the text stands; None for a document.
    """
    found: list[tuple[int, int, Rule]] = []
    taken = bytearray(len(text))
    for rule in rules:
        if path is not None and not rule.speaks_of(path):
            continue
        for begin, end in _stretches(text, rule):
            if not any(taken[begin:end]):
                taken[begin:end] = b"\x01" * (end - begin)
                found.append((begin, end, rule))
    return sorted(found, key=lambda hit: hit[:2])


def _stretches(text: str, rule: Rule) -> Iterator[tuple[int, int]]:
    """Yield where the pattern of one rule stands, without the lines that make an exception."""
    if rule.pattern is None:
        return
    done: set[int] = set()
    for match in rule.pattern.finditer(text):
        begin = text.rfind("\n", 0, match.start()) + 1
        end = text.find("\n", match.start())
        if rule.unless is not None and rule.unless.search(text, begin, len(text) if end < 0 else end):
            continue
        if rule.once and begin in done:
            continue
        done.add(begin)
        yield match.start(), match.end()


def _finding(line: int, column: int, where: str, quoted: str, rule: Rule) -> Finding:
    said = " ".join(quoted.split())[:LONGEST_QUOTE]
    return Finding(line, column, where, said, rule.id, rule.safe, rule.why, rule.source.shown())


def _lacks(root: Map, key: str) -> bool:
    node: Node | None = child(root, *key.split("."))
    return node is None or not node


def _missing_key(rule: Rule, root: Map) -> Finding:
    parent = root.get(rule.key.partition(".")[0])
    line, column = (parent.line, parent.column) if isinstance(parent, (Map, Text)) else (1, 1)
    return _finding(line, column, rule.key, "", rule)


__all__ = ["Finding", "FreeText", "check_lines", "check_state", "count_in_state", "hits"]
