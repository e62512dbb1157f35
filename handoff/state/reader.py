"""Strict YAML: one file becomes plain data with the place of every value, or all its faults.

PyYAML's own loading guesses types and drops what it does not expect. Here only its events
are used: every scalar keeps its source text, and whatever could silently lose or change an
entry is refused by line.
"""

from __future__ import annotations

import re
from typing import Any

import yaml
from msgspec import Struct, field

from handoff.state.characters import refused_characters
from handoff.state.faults import Fault, StateFaults
from handoff.state.nodes import List, Map, Node, Text, path_text
from handoff.state.parser_words import parser_fault
from handoff.state.scalars import (
    Refusal,
    lost_comment,
    plain_refused,
    quoted_refused,
    split_number,
    without_colon,
)

MAX_DEPTH = 24

MANY = 80
"""Characters before a key among which a sign that belongs to it is sought."""

MOST_FAULTS = 1000
"""So many faults are named in one run; a file with more has lost its shape."""

AFTER_LETTERS = 300_000
LETTERS_A_TEXT = 4
"""So many letters into a file its texts are longer than this on average, commas and blanks counted in."""

_Loader = getattr(yaml, "CSafeLoader", yaml.SafeLoader)


BEGIN = "handoff: 1"
"""How a state file begins."""


def read_nodes(text: str, file: str, begin: str = BEGIN) -> tuple[Map, list[Fault]]:
    """Return the file's root mapping with places, and what in it is not strict YAML.

    ``begin`` is the first line of a file of its kind, for the cure of an empty one.

    Raises:
        StateFaults: The text has no readable root mapping.
    """
    reading = _Reading(text)
    root = reading.root()
    if isinstance(root, Map):
        return root, reading.faults
    raise StateFaults(file, reading.faults or [_not_a_mapping(root, begin)])


def _not_a_mapping(root: Node | None, begin: str) -> Fault:
    if root is None or (isinstance(root, Text) and not root):
        also = " and 'clock: Area/City'" if begin == BEGIN else ""
        return Fault(1, 1, "", "the file is empty", f"begin with '{begin}'{also}")
    return Fault(root.line, root.column, "", "the file is not a list of keys", f"begin with '{begin}'")


class _Open(Struct):
    """A list or mapping that is still being read."""

    is_map: bool
    line: int
    column: int
    start: int
    flow: bool
    pairs: list[tuple[Text, Node]] = field(default_factory=list)
    values: list[Node] = field(default_factory=list)
    keys: dict[str, Text] = field(default_factory=dict)
    key: Text | None = None
    number_ends: int = -1
    drop: bool = False


class _Stop(Exception):
    """What follows cannot be read in any sensible way; the fault is noted."""


_EXPLICIT_KEY = re.compile(r"(?:[{\[,] *\? *|- *\? +|[\r\n] *(?:- +)*\?[ \r\n]+)$")


class _Reading:
    def __init__(self, text: str) -> None:
        self.text = text
        self.faults: list[Fault] = []
        self._open: list[_Open] = []
        self._root: Node | None = None
        self._upset_to = -1
        self._texts = 0
        self._has_explicit_keys = "?" in text

    def root(self) -> Node | None:
        self.faults += refused_characters(self.text)
        if self.faults:
            return None
        documents = 0
        try:
            for event in yaml.parse(self.text, Loader=_Loader):
                if type(event) is yaml.ScalarEvent:
                    self._scalar(event)
                elif isinstance(event, yaml.DocumentStartEvent):
                    documents += 1
                    if documents > 1:
                        self._stop(
                            event,
                            "a second document begins here",
                            "keep one patient in one file; delete '---'",
                        )
                    if event.version or event.tags:
                        self._fault(event, "a YAML directive", "delete the line that begins with %")
                else:
                    self._take(event)
        except yaml.YAMLError as error:
            self._parser_stopped(error)
        except _Stop:
            pass
        return self._root

    def _parser_stopped(self, error: yaml.YAMLError) -> None:
        # A text that was cut short by what is already refused is the usual reason why the parser stops.
        mark = getattr(error, "problem_mark", None)
        if mark is None or not self._upset_to <= mark.line + 1 <= self._upset_to + 1:
            self.faults.append(parser_fault(error, self.text))

    def _path(self) -> str:
        steps: list[str | int] = []
        for level in self._open:
            if not level.is_map:
                steps.append(len(level.values))
            elif level.key is not None:
                steps.append(str(level.key))
        return path_text(steps)

    def _fault(self, event: yaml.Event, what: str, cure: str) -> None:
        mark: Any = event.start_mark
        self.faults.append(Fault(mark.line + 1, mark.column + 1, self._path(), what, cure))
        if len(self.faults) == MOST_FAULTS:
            raise _Stop

    def _stop(self, event: yaml.Event, what: str, cure: str) -> None:
        self._fault(event, what, cure)
        raise _Stop

    def _take(self, event: yaml.Event) -> None:
        if isinstance(event, (yaml.MappingStartEvent, yaml.SequenceStartEvent)):
            self._begin(event)
        elif isinstance(event, (yaml.MappingEndEvent, yaml.SequenceEndEvent)):
            end: Any = event.end_mark
            self._end(end.index)
            if self._open and self._open[-1].flow:
                self._refuse_comment(event, end.index)
        elif isinstance(event, yaml.AliasEvent):
            self._stop(event, "'*' begins an alias", "write the value out, or put it in quotes")

    def _begin(self, event: yaml.MappingStartEvent | yaml.SequenceStartEvent) -> None:
        if event.anchor is not None or event.tag is not None:
            self._refuse_marks(event)
        mark: Any = event.start_mark
        is_map = isinstance(event, yaml.MappingStartEvent)
        if self._open and self._open[-1].is_map and self._open[-1].key is None:
            self._stop(
                event, "a list or mapping stands where a key is due", "begin the line with a key and a colon"
            )
        if len(self._open) == MAX_DEPTH:
            self._stop(
                event, f"nested more than {MAX_DEPTH} deep", "a patient state needs less; check the brackets"
            )
        if event.flow_style:
            self._refuse_comment(event, mark.index + 1)
        self._open.append(_Open(is_map, mark.line + 1, mark.column + 1, mark.index, bool(event.flow_style)))

    def _refuse_comment(self, event: yaml.Event, place: int) -> None:
        lost = lost_comment(self.text, place) if "#" in self.text[place : place + 4] else None
        if lost is not None:
            self._fault(event, lost.what, lost.cure)

    def _end(self, end: int) -> None:
        done = self._open.pop()
        place = (done.line, done.column, done.start, end, done.flow)
        self._put(Map.at(done.pairs, *place) if done.is_map else List.at(done.values, *place))

    def _refuse_marks(self, event: yaml.NodeEvent) -> None:
        if event.anchor is not None:
            self._fault(event, f"'&{event.anchor}' is an anchor", "put text that begins with & in quotes")
        else:
            self._fault(
                event, f"'{getattr(event, 'tag', '')}' is a tag", "put text that begins with ! in quotes"
            )

    def _scalar(self, event: yaml.ScalarEvent) -> None:
        if event.anchor is not None or event.tag is not None:
            self._refuse_marks(event)
        start: Any = event.start_mark
        end: Any = event.end_mark
        self._texts += 1
        if start.index > AFTER_LETTERS and start.index < self._texts * LETTERS_A_TEXT:
            self._stop(
                event, "the file is almost nothing but commas or colons", "delete what is not an entry"
            )
        is_plain = not event.style
        text = Text.at(event.value, start.line + 1, start.column + 1, start.index, end.index, is_plain)
        if not is_plain:
            refusal = quoted_refused(self.text, event, self._indent())
        elif start.line == end.line and "#" not in self.text[end.index : end.index + 4] and text.isascii():
            refusal = None
        else:
            refusal = plain_refused(self.text, event, bool(self._open) and self._open[-1].flow)
        if refusal is not None:
            self._refuse(event, refusal, end.line)
        if not self._open:
            self._root = text
            return
        inside = self._open[-1]
        if inside.flow:
            self._in_braces(event, inside, text)
        if inside.is_map and inside.key is None:
            self._key(event, text, inside)
        else:
            self._put(text)

    def _indent(self) -> int:
        return next((level.column for level in reversed(self._open) if not level.flow), 0)

    def _refuse(self, event: yaml.ScalarEvent, refusal: Refusal, last_line: int) -> None:
        self._fault(event, refusal.what, refusal.cure)
        if refusal.upsets:
            self._upset_to = last_line + 1

    def _in_braces(self, event: yaml.ScalarEvent, inside: _Open, text: Text) -> None:
        if text.start < inside.number_ends:
            inside.drop = True
            return
        is_key = inside.is_map and inside.key is None
        if not text.plain or is_key:
            return
        split = split_number(self.text, event) if self.text[text.end : text.end + 1] == "," else None
        if split is not None:
            refusal, inside.number_ends = split
            self._fault(event, refusal.what, refusal.cure)
        elif inside.key is not None and not event.value and not inside.drop:
            what, cure, _ = without_colon(inside.key)
            self.faults.append(Fault(inside.key.line, inside.key.column, self._path(), what, cure))

    def _key(self, event: yaml.ScalarEvent, text: Text, inside: _Open) -> None:
        if text == "<<":
            self._fault(event, "'<<' merges another entry", "write the values out")
        elif not text:
            self._fault(event, "a key is missing", "write it before the colon, or delete the '?' or ':'")
        elif self._has_explicit_keys and _EXPLICIT_KEY.search(self._just_before(text)):
            self._fault(event, "'?' begins a key", "put text that begins with ? in quotes")
            inside.drop = True
        known = inside.keys.get(text)
        if known is not None and not inside.drop:
            self._fault(
                event,
                f"the key '{text}' stands twice here (also on line {known.line})",
                "keep both values: join them, or put the entries in a list",
            )
        inside.keys[str(text)] = text
        inside.key = text

    def _just_before(self, text: Text) -> str:
        return "\n" * (text.start < MANY) + self.text[max(text.start - MANY, 0) : text.start]

    def _put(self, node: Node) -> None:
        if not self._open:
            self._root = node
            return
        inside = self._open[-1]
        if inside.drop:
            inside.drop, inside.key = False, None
        elif not inside.is_map:
            inside.values.append(node)
        elif inside.key is not None:
            inside.pairs.append((inside.key, node))
            inside.key = None
