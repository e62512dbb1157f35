"""Strict YAML: one file becomes plain data with the place of every value, or all its faults.

PyYAML's own loading guesses types and drops what it does not expect. Here only its events
are used: every scalar keeps its source text, and whatever could silently lose or change an
entry is refused by line.
"""

from __future__ import annotations

import re
from dataclasses import dataclass, field
from pathlib import Path

import yaml

from handoff.state.faults import Fault, StateFaults
from handoff.state.nodes import List, Map, Node, Text, path_text

MAX_BYTES = 8_000_000
MAX_DEPTH = 24

_Loader = getattr(yaml, "CSafeLoader", yaml.SafeLoader)


class NotAStateFile(Exception):
    """The path is not a readable text file; says what is wrong and what to do (wrong usage)."""


def read_text(path: Path) -> str:
    """Return the text of a state file, without its byte-order mark.

    Raises:
        NotAStateFile: A directory, a missing or unreadable file, one over the size limit,
            a document given by mistake, or text that is not UTF-8.
    """
    try:
        if path.is_dir():
            raise NotAStateFile(f"{path} is a folder; name the patient's .yaml file in it")
        size = path.stat().st_size
        if size > MAX_BYTES:
            raise NotAStateFile(
                f"{path} is {size // 1_000_000} MB; a patient-state file is at most {MAX_BYTES // 1_000_000} MB"
            )
        data = path.read_bytes()
    except FileNotFoundError:
        raise NotAStateFile(f"{path} is not there; check the name and the folder") from None
    except OSError as error:
        raise NotAStateFile(f"{path} cannot be read ({error.strerror}); close it elsewhere and try again") from None
    if data.startswith((b"PK\x03\x04", b"%PDF", b"\xd0\xcf\x11\xe0")):
        raise NotAStateFile(f"{path} is a document, not a patient-state file; name the .yaml file it was made from")
    try:
        return data.decode("utf-8-sig")
    except UnicodeDecodeError as error:
        line = data.count(b"\n", 0, error.start) + 1
        raise NotAStateFile(f"{path}:{line}: not UTF-8 text; save the file as UTF-8") from None


def read_nodes(text: str, file: str) -> tuple[Map, list[Fault]]:
    """Return the file's root mapping with places, and what in it is not strict YAML.

    Raises:
        StateFaults: The text has no readable root mapping.
    """
    reading = _Reading(text)
    root = reading.root()
    if isinstance(root, Map):
        return root, reading.faults
    raise StateFaults(file, reading.faults or [_not_a_mapping(root)])


def _not_a_mapping(root: Node | None) -> Fault:
    if root is None or (isinstance(root, Text) and not root):
        return Fault(1, 1, "", "the file is empty", "begin with 'handoff: 1' and 'clock: Area/City'")
    return Fault(root.line, root.column, "", "the file is not a list of keys", "begin with 'handoff: 1'")


@dataclass(slots=True)
class _Open:
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


class _Reading:
    def __init__(self, text: str) -> None:
        self.text = text
        self.faults: list[Fault] = []
        self._open: list[_Open] = []
        self._root: Node | None = None

    def root(self) -> Node | None:
        self._refuse_tabs()
        if self.faults:
            return None
        documents = 0
        try:
            for event in yaml.parse(self.text, Loader=_Loader):
                if isinstance(event, yaml.DocumentStartEvent):
                    documents += 1
                    if documents > 1:
                        self._fault(event, "a second document begins here", "keep one patient in one file; delete '---'")
                        break
                    if event.version or event.tags:
                        self._fault(event, "a YAML directive", "delete the line that begins with %")
                else:
                    self._take(event)
                if len(self._open) > MAX_DEPTH:
                    self._fault(event, f"nested more than {MAX_DEPTH} deep", "a patient state needs less; check the brackets")
                    break
        except yaml.YAMLError as error:
            self.faults.append(_parser_fault(error, self.text))
        except RecursionError:
            self.faults.append(Fault(1, 1, "", "nested too deep", "check the brackets"))
        return self._root

    def _refuse_tabs(self) -> None:
        for match in re.finditer(r"\t+", self.text):
            start = match.start()
            begin = self.text.rfind("\n", 0, start) + 1
            if "#" in self.text[begin:start] and re.search(r"(^|\s)#", self.text[begin:start]):
                continue
            line = self.text.count("\n", 0, start) + 1
            self.faults.append(Fault(line, start - begin + 1, "", "a tab", "use spaces"))

    def _path(self) -> str:
        steps: list[str | int] = []
        for level in self._open:
            if level.is_map:
                if level.key is not None:
                    steps.append(str(level.key))
            else:
                steps.append(len(level.values))
        return path_text(steps)

    def _fault(self, event: yaml.Event, what: str, cure: str) -> None:
        mark = event.start_mark
        self.faults.append(Fault(mark.line + 1, mark.column + 1, self._path(), what, cure))

    def _take(self, event: yaml.Event) -> None:
        if isinstance(event, yaml.ScalarEvent):
            self._scalar(event)
        elif isinstance(event, (yaml.MappingStartEvent, yaml.SequenceStartEvent)):
            self._begin(event)
        elif isinstance(event, (yaml.MappingEndEvent, yaml.SequenceEndEvent)):
            self._end(event.end_mark.index)
        elif isinstance(event, yaml.AliasEvent):
            self._fault(event, "'*' begins an alias", "write the value out, or put it in quotes")
            self._put(Text.at("", event.start_mark.line + 1, event.start_mark.column + 1))

    def _begin(self, event: yaml.MappingStartEvent | yaml.SequenceStartEvent) -> None:
        self._refuse_marks(event)
        mark = event.start_mark
        is_map = isinstance(event, yaml.MappingStartEvent)
        if self._expects_key():
            self._fault(event, "a list or mapping stands where a key is due", "begin the line with a key and a colon")
        self._open.append(_Open(is_map, mark.line + 1, mark.column + 1, mark.index, bool(event.flow_style)))

    def _end(self, end: int) -> None:
        done = self._open.pop()
        place = (done.line, done.column, done.start, end, done.flow)
        self._put(Map.at(done.pairs, *place) if done.is_map else List.at(done.values, *place))

    def _refuse_marks(self, event: yaml.NodeEvent) -> None:
        if event.anchor is not None:
            self._fault(event, f"'&{event.anchor}' is an anchor", "put text that begins with & in quotes")
        tag = getattr(event, "tag", None)
        if tag is not None:
            self._fault(event, f"'{tag}' is a tag", "put text that begins with ! in quotes")

    def _expects_key(self) -> bool:
        return bool(self._open) and self._open[-1].is_map and self._open[-1].key is None

    def _scalar(self, event: yaml.ScalarEvent) -> None:
        self._refuse_marks(event)
        start, end = event.start_mark, event.end_mark
        is_plain = event.style is None or event.style == ""
        text = Text.at(event.value, start.line + 1, start.column + 1, start.index, end.index, is_plain)
        if is_plain and event.value:
            self._refuse_plain(event)
        if self._expects_key():
            self._key(event, text)
            return
        inside = self._open[-1] if self._open else None
        if inside is not None and inside.is_map and inside.flow and is_plain and not event.value:
            self._missing_colon(event, inside)
        self._put(text)

    def _refuse_plain(self, event: yaml.ScalarEvent) -> None:
        end = event.end_mark.index
        if event.end_mark.line != event.start_mark.line:
            self._fault(
                event,
                "the text runs on over the next line",
                "check the indentation below it, or put a long text after '|' on lines of its own",
            )
        elif self.text[end : end + 2] == " #":
            self._fault(
                event,
                "one space and '#' after a value: the rest would be lost as a comment",
                "put the whole text in quotes, or put two spaces before a comment",
            )

    def _key(self, event: yaml.ScalarEvent, text: Text) -> None:
        inside = self._open[-1]
        if text == "<<":
            self._fault(event, "'<<' merges another entry", "write the values out")
        known = inside.keys.get(text)
        if known is not None:
            self._fault(
                event,
                f"the key '{text}' stands twice here (also on line {known.line})",
                "keep both values: join them, or put the entries in a list",
            )
        inside.keys[str(text)] = text
        inside.key = text

    def _missing_colon(self, event: yaml.ScalarEvent, inside: _Open) -> None:
        key = inside.key
        if key is None:
            return
        before = inside.pairs[-1] if inside.pairs else None
        if before and re.match(r"\d", key) and isinstance(before[1], Text) and re.fullmatch(r"[+-]?\d+", before[1]):
            number, rest = str(before[1]), str(key)
            cure = f"write a decimal point: {number}.{rest}"
            what = f"a comma in '{number},{rest}' splits the number"
        else:
            what = f"'{key}' has no value: a comma ends an entry inside {{ }}"
            cure = "put text with a comma in quotes, or write 'key: value'"
        self.faults.append(Fault(key.line, key.column, self._path(), what, cure))

    def _put(self, node: Node) -> None:
        if not self._open:
            self._root = node
            return
        inside = self._open[-1]
        if not inside.is_map:
            inside.values.append(node)
        elif inside.key is not None:
            inside.pairs.append((inside.key, node))
            inside.key = None


_PARSER_CURES = (
    ("did not find expected key", "check the indentation, and that the line above is closed"),
    ("could not find expected ':'", "write 'key: value', with a space after the colon"),
    ("mapping values are not allowed", "put text that holds ': ' in quotes, and check the indentation"),
    ("did not find expected ',' or ']'", "close the list with ]; put text with brackets in quotes"),
    ("did not find expected ',' or '}'", "close the entry with }; put text with brackets in quotes"),
    ("found character that cannot start any token", "put the text in quotes (it begins with @, ` or %)"),
    ("found unexpected end of stream", "close the quotes or the bracket"),
    ("control characters are not allowed", "delete the unprintable character"),
    ("block sequence entries are not allowed", "put the list on lines of its own, each beginning with '- '"),
    ("exceeded max", "a patient state needs less nesting; check the brackets"),
)


def _parser_fault(error: yaml.YAMLError, text: str) -> Fault:
    problem = str(getattr(error, "problem", None) or getattr(error, "reason", None) or "not readable as YAML")
    mark = getattr(error, "problem_mark", None)
    if mark is None or "end of stream" in problem:
        mark = getattr(error, "context_mark", None) or mark
    if mark is not None:
        line, column = mark.line + 1, mark.column + 1
    else:
        position = min(getattr(error, "position", 0) or 0, len(text))
        line = text.count("\n", 0, position) + 1
        column = position - text.rfind("\n", 0, position)
    cure = next((cure for known, cure in _PARSER_CURES if known in problem), "check the spelling of this line")
    return Fault(line, column, "", f"the line cannot be read ({problem})", cure)
